/* Published values, and identities with what others have derived. How each value is known is said
   beside it: "seen" in the source that is named; "from memory" of that source; "recomputed" from
   the equations with 30 digits and more. A value is kept as the digits that are listed, and may be
   off by half a unit of the last of them. */
#include <float.h>
#include <gsl/gsl_math.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/random.h"
#include "../support/suite.h"
#include "rampwise.h"

#define ROUNDING (0.5 * DBL_EPSILON) /* largest relative error of one rounding */
#define COUNT(array) (sizeof(array) / sizeof *(array))

/* `slack`: what our own rounding may add. */
static void check_listed(const char *what, double ours, const char *listed, double slack)
{
    const size_t decimals = strlen(strchr(listed, '.') + 1);
    const double value = strtod(listed, NULL), half_unit = 0.5 * pow(10, -(double)decimals);
    ck_assert_msg(fabs(ours - value) <= half_unit + slack, "%s: %.17g, listed %s", what, ours, listed);
}

/* The oscillator of stiffness k, natural circular frequency omega and damping ratio zeta. */
static rampwise_system oscillator(double k, double omega, double zeta)
{
    const double m = k / (omega * omega);
    return (rampwise_system){m, 2 * zeta * omega * m, k};
}

static rampwise_coeffs made(rampwise_system sys, double dt, int input, int between)
{
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, between), RAMPWISE_OK);
    return c;
}

/* A, B, C, D, A', B', C', D' of listed digits. m, c and omega come with a few roundings each, on
   which no coefficient depends more than in proportion: 16 roundings of a number up to the largest
   is slack enough, and far below the listed digits. */
static void check_coefficients(const rampwise_coeffs *c, const char *const listed[8])
{
    static const char *const names[8] = {"A", "B", "C", "D", "A'", "B'", "C'", "D'"};
    for (int i = 0; i < 8; ++i)
        check_listed(names[i], (&c->A)[i], listed[i], 16 * ROUNDING * fabs((&c->A)[i]));
}

/* A. K. Chopra, Dynamics of Structures, Examples 5.1 and 5.2: half a cycle of a sine as force on an
   oscillator of T = 1 s, 5 % damping and k = 10, in steps of 0.1 s. The statement and the
   theoretical column (the load not interpolated) are seen. The book's coefficients and histories
   have four digits and are from memory; the digits here are recomputed and agree with them. With
   the mass printed as 0.2533 the last digits move: omega is 2 pi. */
enum { HALF_SINE_STEPS = 11 };

static double half_sine(double t)
{
    return t < 0.6 ? 10 * sin(M_PI * t / 0.6) : 0;
}

START_TEST(half_sine_coefficients)
{
    static const char *const listed[8] = {"0.812928604568",   "0.0906710078681", "0.0123554811407",
                                          "0.00635165840251", "-3.57954791322",  "0.755958330125",
                                          "0.170883395890",   "0.187071395432"};
    const rampwise_coeffs c = made(oscillator(10, 2 * M_PI, 0.05), 0.1, RAMPWISE_FORCE, RAMPWISE_RAMP);
    check_coefficients(&c, listed);
}
END_TEST

/* Eleven steps with numbers below 10, some ten roundings in each: 1e-13. */
START_TEST(half_sine_history)
{
    static const char *const listed_u[HALF_SINE_STEPS] = {
        "0.0317582920", "0.2274113649", "0.6335581892",  "1.1338789483",  "1.4895636434", "1.4480035788",
        "0.9036723460", "0.0579375961", "-0.7577423984", "-1.2432214244", "-1.2388769272"};
    static const char *const listed_v[HALF_SINE_STEPS] = {
        "0.9353569772",  "3.0679133577",  "4.8557923559",  "4.7318445534",  "1.9335538803", "-3.0158612892",
        "-7.4630636529", "-8.8765035972", "-6.9176572377", "-2.5170853929", "2.5473589849"};
    const rampwise_coeffs c = made(oscillator(10, 2 * M_PI, 0.05), 0.1, RAMPWISE_FORCE, RAMPWISE_RAMP);
    rampwise_state s;
    rampwise_start(&s, 0, 0, 0);
    for (int i = 0; i < HALF_SINE_STEPS; ++i) {
        rampwise_step(&c, &s, half_sine(0.1 * (i + 1)));
        check_listed("u", s.u, listed_u[i], 1e-13);
        check_listed("v", s.v, listed_v[i], 1e-13);
    }
}
END_TEST

/* The sine sampled 1000 times finer. A straight line misses it by 10 (pi/0.6)^2 h^2/8 = 3.5e-7 at
   most, and a force that acts for 1.1 s moves this oscillator by no more than 1.1 omega/k of its
   size: 2.4e-7, far below the printed digits. The 11,000 steps round by 1e-12 in all. */
START_TEST(half_sine_not_interpolated)
{
    static const char *const listed[HALF_SINE_STEPS] = {"0.0328",  "0.2332",  "0.6487", "1.1605",
                                                        "1.5241",  "1.4814",  "0.9245", "0.0593",
                                                        "-0.7751", "-1.2718", "-1.2674"};
    const rampwise_coeffs c = made(oscillator(10, 2 * M_PI, 0.05), 1e-4, RAMPWISE_FORCE, RAMPWISE_RAMP);
    rampwise_state s;
    rampwise_start(&s, 0, 0, 0);
    for (int i = 1; i <= 1000 * HALF_SINE_STEPS; ++i) {
        rampwise_step(&c, &s, half_sine(1e-4 * i));
        if (i % 1000 == 0)
            check_listed("u", s.u, listed[i / 1000 - 1], 2.5e-7);
    }
}
END_TEST

/* J. L. Humar, Dynamics of Structures, Example 8.11, a tower: omega = 2 pi, 10 %
   damping, k = 100, steps of 0.1 s. A, B, C, D are seen, the rest is recomputed. */
START_TEST(tower_coefficients)
{
    static const char *const listed[8] = {"0.8167199931",    "0.08791132357", "0.001207330808",
                                          "0.0006254692615", "-3.470599944",  "0.7062473657",
                                          "0.01637799875",   "0.01832800069"};
    const rampwise_coeffs c = made(oscillator(100, 2 * M_PI, 0.1), 0.1, RAMPWISE_FORCE, RAMPWISE_RAMP);
    check_coefficients(&c, listed);
}
END_TEST

/* The ramp-invariant digital filter from base acceleration to absolute acceleration (D. O.
   Smallwood, Shock and Vibration Bulletin 51, 1981, from memory; ISO 18431-4:2007 adopts it in
   spirit, its tables were not seen):

       y[n] = b0 x[n] + b1 x[n-1] + b2 x[n-2] - a1 y[n-1] - a2 y[n-2].

   Ours: with the state q = (u, v), M = [[A, B], [A', B']], L0 = (C, C'), L1 = (D, D') and the row
   r = -(k/m, c/m) of the total acceleration, q[n] = M q[n-1] + L0 x[n-1] + L1 x[n] and y = r q. The
   transfer function r (z I - M)^-1 (L0 + L1 z) has the denominator z^2 - (A + B') z + (A B' - A' B)
   and, as adj(z I - M) = z I + N with N = [[-B', B], [A', -A]], the numerator
   r L1 z^2 + (r L0 + r N L1) z + r N L0. */
typedef struct filter {
    double b0, b1, b2, a1, a2;
} filter;

static filter smallwood(double theta, double zeta)
{
    const double E = exp(-zeta * theta), K = theta * sqrt(1 - zeta * zeta);
    const double average = E * sin(K) / K;
    return (filter){1 - average, 2 * (average - E * cos(K)), E * E - average, -2 * E * cos(K), E * E};
}

static filter of_coefficients(const rampwise_coeffs *c)
{
    const double *const r = c->total;
    const double N0[2] = {-c->Bp * c->C + c->B * c->Cp, c->Ap * c->C - c->A * c->Cp};
    const double N1[2] = {-c->Bp * c->D + c->B * c->Dp, c->Ap * c->D - c->A * c->Dp};
    return (filter){r[0] * c->D + r[1] * c->Dp, r[0] * c->C + r[1] * c->Cp + r[0] * N1[0] + r[1] * N1[1],
                    r[0] * N0[0] + r[1] * N0[1], -(c->A + c->Bp), c->A * c->Bp - c->Ap * c->B};
}

/* The same with every term in its size: what the roundings of the sums above are measured in. */
static filter sizes_of_terms(const rampwise_coeffs *c)
{
    rampwise_coeffs size = *c;
    double *const value = &size.A;
    for (int i = 0; i < 8; ++i)
        value[i] = fabs(value[i]);
    const double r[2] = {fabs(c->total[0]), fabs(c->total[1])};
    const double N0[2] = {size.Bp * size.C + size.B * size.Cp, size.Ap * size.C + size.A * size.Cp};
    const double N1[2] = {size.Bp * size.D + size.B * size.Dp, size.Ap * size.D + size.A * size.Dp};
    return (filter){r[0] * size.D + r[1] * size.Dp,
                    r[0] * size.C + r[1] * size.Cp + r[0] * N1[0] + r[1] * N1[1], r[0] * N0[0] + r[1] * N0[1],
                    size.A + size.Bp, size.A * size.Bp + size.Ap * size.B};
}

/* A term of ours has at most three factors of two roundings each (0.6 ulp is 1.2 of them) and goes
   through five operations: 11 roundings of its size. smallwood() has numbers up to 2 + theta, with
   two roundings in E, three in K (that is where theta comes in) and one in each operation: 12
   roundings of 2 + theta. Returns the largest error in tolerances. */
static double compare_filters(const rampwise_coeffs *c, double theta, double zeta)
{
    const filter theirs = smallwood(theta, zeta), ours = of_coefficients(c);
    const filter size = sizes_of_terms(c);
    double worst = 0;
    for (int i = 0; i < 5; ++i) {
        const double error = fabs((&ours.b0)[i] - (&theirs.b0)[i]);
        const double tolerance = ROUNDING * (11 * (&size.b0)[i] + 12 * (2 + theta));
        ck_assert_msg(error <= tolerance, "filter coefficient %d at theta %a, zeta %a: error %g", i, theta,
                      zeta, error);
        worst = fmax(worst, error / tolerance);
    }
    return worst;
}

/* Listed at 100 Hz, 5 %, 1000 samples a second: the form from memory, the digits recomputed. */
START_TEST(ramp_invariant_filter)
{
    static const char *const listed[5] = {"0.0932899213191928", "0.244533222668497", "0.0323912887434855",
                                          "-1.56888693469312", "0.939101367424293"};
    gsl_rng *const random = random_make("ramp_invariant_filter");
    const double theta = 0.2 * M_PI, zeta = 0.05;
    double worst = 0;
    const rampwise_coeffs c = made(oscillator(1, theta, zeta), 1, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    const filter ours = of_coefficients(&c), size = sizes_of_terms(&c);
    for (int i = 0; i < 5; ++i)
        check_listed("filter", (&ours.b0)[i], listed[i], 11 * ROUNDING * (&size.b0)[i]);
    worst = compare_filters(&c, theta, zeta);
    for (int i = 0; i < 20000; ++i) {
        const double h = random_log(random, 1e-3, 1e3), at = random_log(random, 0.02, 6);
        const double ratio = random_between(random, 0, 0.99);
        const rampwise_coeffs any = made(oscillator(random_log(random, 1e-3, 1e3), at / h, ratio), h,
                                         RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
        worst = fmax(worst, compare_filters(&any, at, ratio));
    }
    printf("ramp_invariant_filter: largest error %.3f of its tolerance\n", worst);
    gsl_rng_free(random);
}
END_TEST

enum { FILTER_SAMPLES = 5000 };

static void run_filter(const filter *f, const double *x, double *y)
{
    double x1 = 0, x2 = 0, y1 = 0, y2 = 0;
    for (int i = 0; i < FILTER_SAMPLES; ++i) {
        y[i] = f->b0 * x[i] + f->b1 * x1 + f->b2 * x2 - f->a1 * y1 - f->a2 * y2;
        x2 = x1;
        x1 = x[i];
        y2 = y1;
        y1 = y[i];
    }
}

static double largest(const double *x, size_t n)
{
    double size = 0;
    for (size_t i = 0; i < n; ++i)
        size = fmax(size, fabs(x[i]));
    return size;
}

/* The filter before its first sample is an input that was zero, so ours starts by a ramp from
   nothing. With |x| <= X and |y| <= Y: a step of the filter errs by 12 (2 + theta) roundings in
   each coefficient, times 3 X + 2 Y, and by 5 in the sum, whose terms come to X + 3 Y at most; ours
   by 10 in terms that come to 4 Y and X. An error in y or q lasts as the free decay does, E^j/sin K
   at most, in sum 1/((1 - E) sin K) = 55 times. */
START_TEST(ramp_invariant_filter_history)
{
    static double x[FILTER_SAMPLES], theirs[FILTER_SAMPLES], ours[FILTER_SAMPLES];
    const double theta = 0.2 * M_PI, zeta = 0.05;
    const double E = exp(-zeta * theta), K = theta * sqrt(1 - zeta * zeta);
    const filter f = smallwood(theta, zeta);
    const rampwise_history out = {NULL, NULL, NULL, ours};
    rampwise_system sys;
    rampwise_state s;
    gsl_rng *const random = random_make("ramp_invariant_filter_history");
    random_fill(random, x, FILTER_SAMPLES);
    ck_assert_int_eq(rampwise_system_hertz(&sys, 100, zeta), RAMPWISE_OK);
    const rampwise_coeffs c = made(sys, 1e-3, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    rampwise_start(&s, 0, 0, 0);
    ck_assert_int_eq(rampwise_run(&c, &s, FILTER_SAMPLES, x, &out, NULL), RAMPWISE_OK);
    run_filter(&f, x, theirs);
    const double X = largest(x, FILTER_SAMPLES), Y = largest(theirs, FILTER_SAMPLES);
    const double a_step = 12 * (2 + theta) * (3 * X + 2 * Y) + 5 * (X + 3 * Y) + 10 * (X + 4 * Y);
    const double tolerance = ROUNDING * a_step / ((1 - E) * sin(K));
    for (int i = 0; i < FILTER_SAMPLES; ++i)
        theirs[i] -= ours[i];
    const double error = largest(theirs, FILTER_SAMPLES);
    printf("ramp_invariant_filter_history: largest %g, error %g, tolerance %g\n", Y, error, tolerance);
    ck_assert_double_le(error, tolerance);
    gsl_rng_free(random);
}
END_TEST

/* Free vibration of a shaft (W. T. Thomson, 1965, seen; digits recomputed): m = 0.5, k = 200, from
   u = 0 with the velocity omega = 20, after 0.1 s: in one step, and in a hundred. */
static double shaft(double zeta, int steps)
{
    const rampwise_coeffs c =
        made((rampwise_system){0.5, 20 * zeta, 200}, 0.1 / steps, RAMPWISE_FORCE, RAMPWISE_RAMP);
    rampwise_state s;
    rampwise_start(&s, 0, 20, 0);
    for (int i = 0; i < steps; ++i)
        rampwise_step(&c, &s, 0);
    return s.u;
}

/* Undamped it is sin 2: 0.1 is rounded (2 cos 2 = 0.8 of that), B and B v are. A hundred steps
   round u and v (as a displacement, v/20) by about 4 in each. */
START_TEST(shaft_in_free_vibration)
{
    check_listed("undamped", shaft(0, 1), "0.909297", ROUNDING);
    check_listed("70 %", shaft(0.7, 1), "0.3418043", ROUNDING);
    check_listed("undamped", shaft(0, 100), "0.909297", 400 * ROUNDING);
    check_listed("70 %", shaft(0.7, 100), "0.3418043", 400 * ROUNDING);
    ck_assert_double_eq_tol(shaft(0, 1), sin(2), 4 * ROUNDING);
    ck_assert_double_eq_tol(shaft(0, 100), sin(2), 400 * ROUNDING);
}
END_TEST

/* x'' + b x' + k x = 0, x(0) = 1, x'(0) = 0: moderate, light and very strong damping, which closed
   forms with a branch for each lose (recomputed). In one step x = 1 + (A - 1), two roundings below
   1. In 1000, each rounds x once and adds terms below 0.001 x, at most 2 roundings together, and dt
   is rounded: 2001. */
START_TEST(three_dampings)
{
    static const struct {
        double k, b, t;
        const char *listed;
    } cases[] = {{1, 3, 1, "0.786645599303368"},
                 {0.025, 1, 10, "0.794614238230765"},
                 {1, 1e9, 1e9, "0.367879441171442"}};
    for (size_t i = 0; i < COUNT(cases); ++i)
        for (int steps = 1; steps <= 1000; steps *= 1000) {
            const rampwise_coeffs c = made((rampwise_system){1, cases[i].b, cases[i].k}, cases[i].t / steps,
                                           RAMPWISE_FORCE, RAMPWISE_RAMP);
            rampwise_state s;
            rampwise_start(&s, 1, 0, 0);
            for (int j = 0; j < steps; ++j)
                rampwise_step(&c, &s, 0);
            check_listed("x", s.u, cases[i].listed, ROUNDING * (steps == 1 ? 2 : 2001));
        }
}
END_TEST

/* Short steps, m = 1: C -> h^2/3, D -> h^2/6, C', D' -> h/2. With K = k h^2 and S = c h the
   response to a unit ramp is the series with the coefficients d[3] = 1, d[4] = -S, d[5] = S^2 - K,
   d[n] = -S d[n-1] - K d[n-2] over n!, so D = h^2 (1/6 - S/24 + (S^2 - K)/120 ...) and likewise the
   others. If |S| <= q and |K| <= q^2 then |d[6]| <= 3 q^3, and with the tail, for q <= 0.1, what
   is left out is below q^3/200 in D, q^3/30 in C and D', q^3/6 in C'. */
static void check_short_step(double S, double K, double q, double h)
{
    const rampwise_coeffs c = made((rampwise_system){1, S / h, K / h / h}, h, RAMPWISE_FORCE, RAMPWISE_RAMP);
    const double second = S * S - K, rest = q * q * q, rounding = 8 * ROUNDING;
    ck_assert_double_eq_tol(c.C / h / h, 1.0 / 3 - S / 8 + second / 30, rest / 30 + rounding);
    ck_assert_double_eq_tol(c.D / h / h, 1.0 / 6 - S / 24 + second / 120, rest / 200 + rounding);
    ck_assert_double_eq_tol(c.Cp / h, 0.5 - S / 3 + second / 8, rest / 6 + rounding);
    ck_assert_double_eq_tol(c.Dp / h, 0.5 - S / 6 + second / 24, rest / 30 + rounding);
}

START_TEST(short_steps)
{
    for (double q = 0.1; q > 1e-10; q /= 10) {
        check_short_step(0, q * q, q, 0.37);
        check_short_step(q, 0, q, 12);
        check_short_step(q, q * q, q, 1e-3);
        check_short_step(-q, q * q, q, 1);
        check_short_step(q, -q * q, q, 700);
    }
}
END_TEST

/* Without spring and damper the limits hold for every step. Where h^2 is exact, h^2/3 and h^2/6 lie
   a third of an ulp from the nearest double and two thirds from the next, so a promise of 0.6 ulp
   leaves one; h/2, h and h^2/2 are doubles themselves. */
START_TEST(free_mass_coefficients)
{
    static const double lengths[] = {1, 0.5, 3, 0.75, 5.0 / 1024, 1000, 0x1p-30, 12345678};
    for (size_t i = 0; i < COUNT(lengths); ++i) {
        const double h = lengths[i];
        const rampwise_system free_mass = {1, 0, 0};
        const rampwise_coeffs ramp = made(free_mass, h, RAMPWISE_FORCE, RAMPWISE_RAMP);
        const rampwise_coeffs hold = made(free_mass, h, RAMPWISE_FORCE, RAMPWISE_HOLD);
        ck_assert(ramp.C == h * h / 3 && ramp.D == h * h / 6);
        ck_assert(ramp.Cp == h / 2 && ramp.Dp == h / 2);
        ck_assert(hold.C == h * h / 2 && hold.D == 0 && hold.Cp == h && hold.Dp == 0);
        ck_assert(ramp.A == 1 && ramp.A_minus_1 == 0 && ramp.B == h);
        ck_assert(ramp.Ap == 0 && ramp.Bp == 1 && ramp.Bp_minus_1 == 0);
    }
}
END_TEST

/* A mass on a damper alone is a first-order lag in its velocity, m v' + c v = p. With S = c h/m and
   E = 1 - exp(-S), under a ramp of force from p0 to p1:

       v1 = v0 (1 - E) + (p0/c) E + ((p1 - p0)/c)(1 - E/S).

   With V = |v0| + |p0/c| + |p1 - p0|/c the closed form has 7 roundings of V at most (E has two, the
   last bracket three more of numbers below 1, quotients and sums the others); ours has 9 (0.6 ulp
   in each coefficient, one rounding an operation, of numbers up to V). */
static double lag(double v0, double p0, double p1, double S, double c)
{
    const double E = -expm1(-S);
    return v0 * (1 - E) + p0 / c * E + (p1 - p0) / c * (1 - E / S);
}

START_TEST(mass_on_a_damper)
{
    gsl_rng *const random = random_make("mass_on_a_damper");
    double worst = 0;
    for (int i = 0; i < 50000; ++i) {
        const double S = random_log(random, 1e-3, 60), h = random_log(random, 1e-3, 1e3);
        const double m = random_log(random, 1e-3, 1e3), c = S * m / h;
        const double v0 = random_between(random, -1, 1), p0 = c * random_between(random, -1, 1);
        const double p1 = c * random_between(random, -1, 1);
        const double V = fabs(v0) + fabs(p0 / c) + fabs((p1 - p0) / c);
        const rampwise_coeffs made_of = made((rampwise_system){m, c, 0}, h, RAMPWISE_FORCE, RAMPWISE_RAMP);
        rampwise_state s;
        rampwise_start(&s, random_between(random, -1, 1), v0, p0);
        rampwise_step(&made_of, &s, p1);
        const double error = fabs(s.v - lag(v0, p0, p1, c * h / m, c));
        ck_assert_double_le(error, 16 * ROUNDING * V);
        worst = fmax(worst, error / (ROUNDING * V));
    }
    printf("mass_on_a_damper: largest error %.2f roundings, tolerance 16\n", worst);
    gsl_rng_free(random);
}
END_TEST

/* A steady ramp from rest: v = (r/c)(t - (m/c)(1 - exp(-c t/m))). Errors fade by 1 - E a step. */
START_TEST(mass_on_a_damper_under_a_ramp)
{
    const double m = 3, damper = 2, h = 0.25, rate = 7, S = damper * h / m;
    const rampwise_coeffs c = made((rampwise_system){m, damper, 0}, h, RAMPWISE_FORCE, RAMPWISE_RAMP);
    rampwise_state s;
    double tolerance = 0;
    rampwise_start(&s, 0, 0, 0);
    for (int i = 1; i <= 400; ++i) {
        const double t = i * h, v = rate / damper * (t + m / damper * expm1(-damper * t / m));
        rampwise_step(&c, &s, rate * t);
        tolerance = tolerance * exp(-S) + 16 * ROUNDING * (rate / damper) * t;
        ck_assert_double_eq_tol(s.v, v, tolerance);
    }
}
END_TEST

/* T -> 0: the mass moves with its base. A change D of the input's slope leaves the transient
   -D exp(-zeta w t) sin(wd t)/wd in the total acceleration and nothing else, wd = w sqrt(1 -
   zeta^2) (the transfer function less 1 is -s^2/(s^2 + 2 zeta w s + w^2), and D s^-2 goes in). Here
   h = 1; the transients of all changes so far are the imaginary part of a sum that turns by wd and
   shrinks by exp(-zeta w) a step. x[-1] is the zero from which the first ramp rises. */
enum { BASE_SAMPLES = 1000 };

typedef struct stiff_base {
    double theta, zeta, wd;
    double x[BASE_SAMPLES], total[BASE_SAMPLES], transient[BASE_SAMPLES];
} stiff_base;

static void sum_transients(stiff_base *b)
{
    const double E = exp(-b->zeta * b->theta), turn_re = E * cos(b->wd), turn_im = E * sin(b->wd);
    double re = b->x[0], im = 0, slope = b->x[0];
    for (int i = 0; i < BASE_SAMPLES; ++i) {
        const double turned = re * turn_re - im * turn_im;
        im = re * turn_im + im * turn_re;
        re = turned;
        b->transient[i] = -im / b->wd;
        if (i + 1 < BASE_SAMPLES) {
            re += b->x[i + 1] - b->x[i] - slope;
            slope = b->x[i + 1] - b->x[i];
        }
    }
}

static void respond_to_base(stiff_base *b)
{
    const rampwise_history out = {NULL, NULL, NULL, b->total};
    const rampwise_coeffs c =
        made(oscillator(1, b->theta, b->zeta), 1, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    rampwise_state s;
    rampwise_start(&s, 0, 0, 0);
    ck_assert_int_eq(rampwise_run(&c, &s, BASE_SAMPLES, b->x, &out, NULL), RAMPWISE_OK);
}

/* A slope changes by 4 at most, so a transient is below (4/wd) E^j after j steps: all together
   4/wd times the smaller of n and E/(1 - E), which falls with T. Rounding: k u/m, c v/m and every
   term of theirs is below 4 times the input, with 8 roundings each; wd and E carry 4 roundings of
   theta, and the sum turns with 4 more a step, so a transient is off by 4 (theta + 1) j of its own,
   together 4/wd times the smaller of n^2/2 and E/(1 - E)^2. */
static void check_stiff(stiff_base *b)
{
    const double n = BASE_SAMPLES, away = b->zeta * b->theta;
    const double once = 4 / b->wd * fmin(n, 1 / expm1(away));
    const double turned = 4 / b->wd * fmin(0.5 * n * n, -1 / (expm1(away) * expm1(-away)));
    const double exact = ROUNDING * (32 + 4 * (b->theta + 1) * turned);
    double error = 0, distance = 0;
    respond_to_base(b);
    sum_transients(b);
    for (int i = 0; i < BASE_SAMPLES; ++i) {
        distance = fmax(distance, fabs(b->total[i] - b->x[i]));
        error = fmax(error, fabs(b->total[i] - b->x[i] - b->transient[i]));
    }
    printf("theta %g, zeta %g: off its base by %.1e (bound %.1e), error %.1e, tolerance %.1e\n", b->theta,
           b->zeta, distance, once, error, exact);
    ck_assert_double_le(error, exact);
    ck_assert_double_le(distance, once + exact);
}

START_TEST(stiff_follows_its_base)
{
    static const double zetas[] = {0, 0.005, 0.05, 0.3, 0.7};
    static stiff_base b;
    gsl_rng *const random = random_make("stiff_follows_its_base");
    random_fill(random, b.x, BASE_SAMPLES);
    for (b.theta = 1; b.theta < 2e6; b.theta *= 10)
        for (size_t i = 0; i < COUNT(zetas); ++i) {
            b.zeta = zetas[i];
            b.wd = b.theta * sqrt(1 - b.zeta * b.zeta);
            check_stiff(&b);
        }
    gsl_rng_free(random);
}
END_TEST

/* A free mass stays where it is, so its displacement against the base is minus the base's. Of a
   piecewise linear acceleration in whole numbers, with V[n+1] = V[n] + a[n] + a[n+1] and
   X[n+1] = X[n] + 3 V[n] + 2 a[n] + a[n+1], the base's velocity is V h/2 and its displacement
   X h^2/6. With h a power of two every v is exact; a step rounds u once, its change by B v and the
   load once each, and the load's two terms by two in coefficient and product. */
START_TEST(free_mass_on_moving_base)
{
    enum { SAMPLES = 20000 };
    const double h = 0x1p-7;
    const rampwise_coeffs c = made((rampwise_system){17, 0, 0}, h, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    gsl_rng *const random = random_make("free_mass_on_moving_base");
    int64_t V = 0, X = 0, a = (int64_t)gsl_rng_uniform_int(random, 2001) - 1000;
    double tolerance = 0, worst = 0;
    rampwise_state s;
    rampwise_start(&s, 0, 0, (double)a);
    for (int i = 1; i < SAMPLES; ++i) {
        const int64_t next = (int64_t)gsl_rng_uniform_int(random, 2001) - 1000;
        const double load = fabs(c.C * (double)a) + fabs(c.D * (double)next);
        const double moved = fabs(h * s.v) + load;
        rampwise_step(&c, &s, (double)next);
        X += 3 * V + 2 * a + next;
        V += a + next;
        a = next;
        tolerance += ROUNDING * (fabs(s.u) + moved + 3 * load);
        ck_assert_double_eq(s.v, -(double)V * h / 2);
        const double error = fabs(s.u + (double)X * h * h / 6);
        ck_assert_double_le(error, tolerance);
        worst = fmax(worst, error / tolerance);
    }
    printf("free_mass_on_moving_base: displacement %g, largest error %.3f of its tolerance\n", s.u, worst);
    gsl_rng_free(random);
}
END_TEST

/* The same for a piecewise linear base velocity in whole numbers from zero: twice the displacement
   over h is a whole number, and nothing is rounded at all. */
START_TEST(free_mass_on_base_of_known_velocity)
{
    const double h = 0x1p-7;
    const rampwise_coeffs c = made((rampwise_system){17, 0, 0}, h, RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP);
    gsl_rng *const random = random_make("free_mass_on_base_of_known_velocity");
    int64_t X = 0, v = 0;
    rampwise_state s;
    rampwise_start(&s, 0, 0, 0);
    for (int i = 1; i < 20000; ++i) {
        const int64_t next = (int64_t)gsl_rng_uniform_int(random, 2001) - 1000;
        rampwise_step(&c, &s, (double)next);
        X += v + next;
        v = next;
        ck_assert_double_eq(s.v, -(double)v);
        ck_assert_double_eq(s.u, -(double)X * h / 2);
    }
    gsl_rng_free(random);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, half_sine_coefficients);
    tcase_add_test(tests, half_sine_history);
    tcase_add_test(tests, half_sine_not_interpolated);
    tcase_add_test(tests, tower_coefficients);
    tcase_add_test(tests, ramp_invariant_filter);
    tcase_add_test(tests, ramp_invariant_filter_history);
    tcase_add_test(tests, shaft_in_free_vibration);
    tcase_add_test(tests, three_dampings);
    tcase_add_test(tests, short_steps);
    tcase_add_test(tests, free_mass_coefficients);
    tcase_add_test(tests, mass_on_a_damper);
    tcase_add_test(tests, mass_on_a_damper_under_a_ramp);
    tcase_add_test(tests, stiff_follows_its_base);
    tcase_add_test(tests, free_mass_on_moving_base);
    tcase_add_test(tests, free_mass_on_base_of_known_velocity);
}

int main(void)
{
    return suite_run("published values", add_tests);
}
