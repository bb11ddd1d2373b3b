/* Energies: each of the four against its definition in quad precision, and the balance of all four, which no
   one of them is made from. */
#include <float.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include "../support/oscillators.h"
#include "../support/quad_response.h"
#include "../support/suite.h"

enum { MANY = 40, MOST = 2000, LONG = 1000000 };

static const int frames[2] = {RAMPWISE_RELATIVE, RAMPWISE_ABSOLUTE};

/* RAMPWISE_POINTS=x asks for x/2000 of the usual number of cases, from 2000 up. */
static int cases(int usual)
{
    const char *const given = getenv("RAMPWISE_POINTS");
    const double times = given != NULL ? fmax(1, strtod(given, NULL) / 2000) : 1;
    return (int)(usual * times);
}

static int frame_allowed(int frame, int kind)
{
    return frame == RAMPWISE_ABSOLUTE || kinds[kind][0] != RAMPWISE_BASE_DISPLACEMENT;
}

/* theta from 1e-6 to most_theta, zeta from 0 to 5 */
static rampwise_coeffs random_oscillator(gsl_rng *r, int kind, double most_theta)
{
    const double dt = random_log(r, 1e-3, 1e3), mass = random_log(r, 1e-3, 1e3);
    const double omega = random_log(r, 1e-6, most_theta) / dt;
    const double zeta = gsl_rng_uniform_int(r, 4) == 0 ? 0 : random_log(r, 1e-6, 5);
    rampwise_system sys = {mass, 2 * zeta * omega * mass, omega * omega * mass};
    if (!kind_allowed(&sys, kind))
        sys.damper = 0;
    return made(sys, dt, kind);
}

/* A displacement and a velocity beside which an input near 1 counts, somewhere. */
static void random_start(gsl_rng *r, const rampwise_coeffs *c, double *u0, double *v0)
{
    const double omega = sqrt(c->system.stiffness / c->system.mass);
    double unit = 1;
    if (c->input == RAMPWISE_FORCE)
        unit = 1 / c->system.stiffness;
    else if (c->input == RAMPWISE_BASE_ACCELERATION)
        unit = 1 / omega / omega;
    else if (c->input == RAMPWISE_BASE_VELOCITY)
        unit = 1 / omega;
    const int rest = gsl_rng_uniform_int(r, 3) == 0;
    *u0 = rest ? 0 : unit * random_log(r, 1e-6, 10) * random_sign(r);
    *v0 = rest ? 0 : omega * unit * random_log(r, 1e-6, 10) * random_sign(r);
}

/* What the state cannot hold. It is relative, so that v = y' + v_g is known to the last place of v_g, and its step
   takes the difference of two samples of base velocity with the last place of these: m v^2/2 is known to m |v v_g|
   times that, for the largest sizes of both in the record. */
static double kinetic_grain(const rampwise_coeffs *c, int frame, int n, const double *p,
                            const rampwise_energy *e)
{
    double velocity = 0, base = 0, largest_base = 0;
    for (int i = 0; i < n; ++i) {
        velocity = fmax(velocity, sqrt(2 * e[i].kinetic / c->system.mass));
        if (c->input == RAMPWISE_BASE_VELOCITY)
            base = p[i];
        else if (c->input == RAMPWISE_BASE_ACCELERATION && i > 0)
            base += c->dt * (c->between == RAMPWISE_HOLD ? p[i - 1] : (p[i - 1] + p[i]) / 2);
        largest_base = fmax(largest_base, fabs(base));
    }
    const int counts = frame == RAMPWISE_ABSOLUTE || c->input == RAMPWISE_BASE_VELOCITY;
    return counts ? c->system.mass * velocity * largest_base : 0;
}

/* A random oscillator in a random frame over a random record, ours and the reference's; 0 where the kind has no such
   frame. */
static int random_case(gsl_rng *r, int kind, int steps, double most_theta, rampwise_energy *e, quad_energy *q,
                       double *grain)
{
    double p[MANY + 1], u0, v0;
    const int frame = frames[gsl_rng_uniform_int(r, 2)];
    if (!frame_allowed(frame, kind))
        return 0;
    const rampwise_coeffs c = random_oscillator(r, kind, most_theta);
    random_start(r, &c, &u0, &v0);
    random_fill(r, p, (size_t)steps + 1);
    ck_assert_int_eq(rampwise_energy_solve(&c, frame, u0, v0, (size_t)steps + 1, p, e, NULL), RAMPWISE_OK);
    quad_energies(&c, frame, u0, v0, (size_t)steps + 1, p, q);
    *grain = kinetic_grain(&c, frame, steps + 1, p, e);
    return 1;
}

static double error_of(double value, quad want)
{
    return fabs((double)(value - want)) / DBL_EPSILON;
}

/* What one step adds to input and dissipated energy, from a given state. Each is a form of ten terms or fewer with
   eight roundings of 2^-53 or fewer: 4 eps of the sum of the sizes of the terms, for which four times what comes and
   goes inside the step is allowed. */
START_TEST(one_step)
{
    gsl_rng *const r = random_make("one_step");
    double worst[2] = {0, 0}, grain;
    rampwise_energy e[2];
    quad_energy q[2];
    for (int i = 0; i < cases(420); ++i) {
        if (!random_case(r, i % KINDS, 1, 50, e, q, &grain))
            continue;
        worst[0] = fmax(worst[0], error_of(e[1].input, q[1].input) / (double)q[1].moved_inside);
        worst[1] = fmax(worst[1], error_of(e[1].dissipated, q[1].dissipated) / (double)q[1].moved_inside);
        ck_assert_double_le(fmax(worst[0], worst[1]), 16);
    }
    printf("one_step: worst input %.2f, dissipated %.2f eps\n", worst[0], worst[1]);
    gsl_rng_free(r);
}
END_TEST

/* All four after many steps: within the bound of the balance, 4 eps a step. */
START_TEST(many_steps)
{
    gsl_rng *const r = random_make("many_steps");
    double worst[4] = {0, 0, 0, 0}, grain;
    rampwise_energy e[MANY + 1];
    quad_energy q[MANY + 1];
    for (int i = 0; i < cases(42); ++i) {
        if (!random_case(r, i % KINDS, MANY, 5, e, q, &grain))
            continue;
        const double moved = MANY * (double)q[MANY].moved;
        worst[0] = fmax(worst[0], error_of(e[MANY].input, q[MANY].input) / moved);
        worst[1] = fmax(worst[1], error_of(e[MANY].kinetic, q[MANY].kinetic) / (moved + MANY * grain));
        worst[2] = fmax(worst[2], error_of(e[MANY].strain, q[MANY].strain) / moved);
        worst[3] = fmax(worst[3], error_of(e[MANY].dissipated, q[MANY].dissipated) / moved);
        ck_assert_double_le(fmax(fmax(worst[0], worst[1]), fmax(worst[2], worst[3])), 4);
    }
    printf("many_steps: worst input %.2f, kinetic %.2f, strain %.2f, dissipated %.2f of the 4 allowed\n",
           worst[0], worst[1], worst[2], worst[3]);
    gsl_rng_free(r);
}
END_TEST

/* From rest by a ramp from nothing nothing cancels: input and dissipated energy to their own last digits, however
   short the step. Roundings: the coefficient, the two factors, two or three products and sums, each 2^-53. */
START_TEST(own_digits)
{
    gsl_rng *const r = random_make("own_digits");
    double worst[2] = {0, 0};
    for (int i = 0; i < cases(400); ++i) {
        const double theta = random_log(r, 1e-9, 1), zeta = random_log(r, 1e-6, 5);
        const rampwise_system sys = {1, 2 * zeta * theta, theta * theta};
        const rampwise_coeffs c = made(sys, 1, 0);
        const double p[2] = {0, random_between(r, -1, 1)};
        rampwise_energy e[2];
        quad_energy q[2];
        ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 0, 2, p, e, NULL), RAMPWISE_OK);
        quad_energies(&c, RAMPWISE_RELATIVE, 0, 0, 2, p, q);
        worst[0] = fmax(worst[0], fabs((double)(e[1].input / q[1].input - 1)));
        worst[1] = fmax(worst[1], fabs((double)(e[1].dissipated / q[1].dissipated - 1)));
        ck_assert_double_le(fmax(worst[0], worst[1]), 5 * DBL_EPSILON);
    }
    printf("own_digits: worst input %.2f, dissipated %.2f eps\n", worst[0] / DBL_EPSILON,
           worst[1] / DBL_EPSILON);
    gsl_rng_free(r);
}
END_TEST

/* The residue of the balance at the last sample, in eps a step of the largest of the running sums. */
static double residue(const rampwise_energy *e, int n, double grain)
{
    double moved[4] = {0, e[0].kinetic, fabs(e[0].strain), 0};
    for (int i = 1; i < n; ++i) {
        moved[0] += fabs(e[i].input - e[i - 1].input);
        moved[1] += fabs(e[i].kinetic - e[i - 1].kinetic);
        moved[2] += fabs(e[i].strain - e[i - 1].strain);
        moved[3] += fabs(e[i].dissipated - e[i - 1].dissipated);
    }
    const rampwise_energy *const last = &e[n - 1];
    const double largest = fmax(fmax(moved[0], moved[1]), fmax(moved[2], moved[3])) + grain;
    const double left =
        last->input - last->dissipated - (last->kinetic - e[0].kinetic) - (last->strain - e[0].strain);
    return largest > 0 ? fabs(left) / (DBL_EPSILON * (n - 1) * largest) : 0;
}

static void smooth(double *p, int n)
{
    for (int i = n - 1; i > 0; --i)
        p[i] = 0.5 * p[i] + 0.5 * p[i - 1];
}

/* Random and whispering records, tiny and huge, of 50 to 2000 samples. */
START_TEST(balance)
{
    static double p[MOST];
    static rampwise_energy e[MOST];
    gsl_rng *const r = random_make("balance");
    double worst[2] = {0, 0}, without_grain = 0;
    for (int i = 0; i < cases(2100); ++i) {
        const int kind = i % KINDS, f = (int)gsl_rng_uniform_int(r, 2);
        const int n = 50 + (int)gsl_rng_uniform_int(r, gsl_rng_uniform_int(r, 8) == 0 ? MOST - 50 : 200);
        const double amplitude = random_log(r, 1e-100, 1e100);
        if (!frame_allowed(frames[f], kind))
            continue;
        const rampwise_coeffs c = random_oscillator(r, kind, 50);
        double u0, v0;
        random_start(r, &c, &u0, &v0);
        random_record(r, p, n);
        for (int times = (int)gsl_rng_uniform_int(r, 6); times > 0; --times)
            smooth(p, n);
        for (int j = 0; j < n; ++j)
            p[j] *= amplitude;
        ck_assert_int_eq(
            rampwise_energy_solve(&c, frames[f], u0 * amplitude, v0 * amplitude, (size_t)n, p, e, NULL),
            RAMPWISE_OK);
        const double left = residue(e, n, kinetic_grain(&c, frames[f], n, p, e));
        worst[f] = fmax(worst[f], left);
        without_grain = fmax(without_grain, residue(e, n, 0));
        ck_assert_msg(left <= 4, "kind %d, frame %d, n %d, theta %a, damper %a: %g", kind, frames[f], n,
                      sqrt(c.system.stiffness / c.system.mass) * c.dt, c.system.damper, left);
    }
    printf("balance: worst relative %.2f, absolute %.2f (%.2f by sums alone) of the 4 allowed\n", worst[0],
           worst[1], without_grain);
    gsl_rng_free(r);
}
END_TEST

/* Free masses, systems that grow, and those that fall away, too. */
START_TEST(balance_of_every_regime)
{
    static double p[MOST];
    static rampwise_energy e[MOST];
    gsl_rng *const r = random_make("balance_of_every_regime");
    double worst = 0;
    for (int i = 0; i < cases(9 * KINDS * 4); ++i) {
        const int kind = i / 9 % KINDS, f = i / 9 / KINDS % 2, n = 200;
        rampwise_system sys = regime_system(i % 9, random_log(r, 1e-4, 0.5), 0.01);
        if (!kind_allowed(&sys, kind))
            sys.damper = 0;
        if (!frame_allowed(frames[f], kind))
            continue;
        const rampwise_coeffs c = made(sys, 0.01, kind);
        random_record(r, p, n);
        ck_assert_int_eq(rampwise_energy_solve(&c, frames[f], 0, 0, (size_t)n, p, e, NULL), RAMPWISE_OK);
        worst = fmax(worst, residue(e, n, kinetic_grain(&c, frames[f], n, p, e)));
        ck_assert_double_le(worst, 4);
    }
    printf("balance_of_every_regime: worst %.2f of the 4 allowed\n", worst);
    gsl_rng_free(r);
}
END_TEST

START_TEST(balance_of_a_million_steps)
{
    gsl_rng *const r = random_make("balance_of_a_million_steps");
    double *const p = malloc(LONG * sizeof *p);
    rampwise_energy *const e = malloc(LONG * sizeof *e);
    random_record(r, p, LONG);
    for (int f = 0; f < 2; ++f) {
        const rampwise_coeffs c = random_oscillator(r, 2, 1);
        ck_assert_int_eq(rampwise_energy_solve(&c, frames[f], 0, 0, LONG, p, e, NULL), RAMPWISE_OK);
        const double left = residue(e, LONG, kinetic_grain(&c, frames[f], LONG, p, e));
        printf("balance_of_a_million_steps: %.2g of the 4 allowed\n", left);
        ck_assert_double_le(left, 4);
    }
    free(p);
    free(e);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, one_step);
    tcase_add_test(tests, many_steps);
    tcase_add_test(tests, own_digits);
    tcase_add_test(tests, balance);
    tcase_add_test(tests, balance_of_every_regime);
    tcase_add_test(tests, balance_of_a_million_steps);
}

int main(void)
{
    return suite_run("energies in quad precision", add_tests);
}
