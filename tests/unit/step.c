/* One step: starts, silence, the state inside, and that two parts make one whole. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

START_TEST(start_at_once)
{
    rampwise_state s;
    rampwise_start(&s, 1, 2, 3);
    ck_assert(s.u == 1 && s.v == 2 && s.p == 3 && s.p_before == 3);
}
END_TEST

/* Equilibrium: a step under the same load changes nothing but by rounding, of u and of the load's
   part in the step. */
START_TEST(start_settled)
{
    for (int kind = 0; kind < KINDS; ++kind)
        for (int regime = 0; regime < 5; ++regime) {
            const rampwise_system sys = regime_system(regime, 0.3, 0.01);
            if (!kind_allowed(&sys, kind))
                continue;
            const rampwise_coeffs c = made(sys, 0.01, kind);
            rampwise_state s;
            ck_assert_int_eq(rampwise_start_settled(&c, &s, 1.7), RAMPWISE_OK);
            const double u = s.u, expected[] = {1.7 / sys.stiffness, -1.7 * sys.mass / sys.stiffness, 0, 1.7};
            ck_assert_double_le(fabs(u - expected[c.input - RAMPWISE_FORCE]), 2 * DBL_EPSILON * fabs(u));
            ck_assert(s.v == 0 && s.p == 1.7 && s.p_before == 1.7);
            rampwise_step(&c, &s, 1.7);
            ck_assert_double_le(fabs(s.u - u), 2 * DBL_EPSILON * (fabs(u) + fabs(c.C * 1.7)));
            ck_assert_double_le(fabs(s.v), 2 * DBL_EPSILON * (fabs(c.Ap * u) + fabs(c.Cp * 1.7)));
        }
}
END_TEST

START_TEST(start_settled_refusals)
{
    const rampwise_coeffs never_made = {0};
    const rampwise_state before = {1, 2, 3, 4};
    rampwise_state s = before;
    rampwise_coeffs c = made((rampwise_system){1, 1, 0}, 0.1, 0);
    ck_assert_int_eq(rampwise_start_settled(NULL, &s, 0), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_start_settled(&c, NULL, 0), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_start_settled(&never_made, &s, 0), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_start_settled(&c, &s, NAN), RAMPWISE_ERROR_SAMPLE);
    ck_assert_int_eq(rampwise_start_settled(&c, &s, 1), RAMPWISE_ERROR_NO_REST);
    c = made((rampwise_system){1, 1, 1e-30}, 0.1, 0);
    ck_assert_int_eq(rampwise_start_settled(&c, &s, DBL_MAX), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_mem_eq(&s, &before, sizeof s);
    c = made((rampwise_system){1, 1, 0}, 0.1, 0);
    ck_assert_int_eq(rampwise_start_settled(&c, &s, 0), RAMPWISE_OK);
    ck_assert(s.u == 0 && s.v == 0 && s.p == 0);
    c = made((rampwise_system){1, 1, 0}, 0.1, 5);
    ck_assert_int_eq(rampwise_start_settled(&c, &s, 2), RAMPWISE_OK);
    ck_assert(s.u == 2);
}
END_TEST

/* The decimal literals of the header are the powers of two they stand for: the rule changes exactly
   there. A step of a free mass without a load, u1 = u0, shows both limits. */
START_TEST(silence_limits)
{
    const rampwise_coeffs c = made((rampwise_system){1, 0, 0}, 1, 0);
    const double spent = 0x1p-960, silent = 0x1p-900;
    for (int sign = -1; sign <= 1; sign += 2) {
        rampwise_state s = {sign * spent, 0, 0, 0};
        rampwise_step(&c, &s, 0);
        ck_assert(s.u == sign * spent);
        s = (rampwise_state){sign * nextafter(spent, 0), -0.0, 0, 0};
        rampwise_step(&c, &s, -0.0);
        ck_assert(s.u == 0 && !signbit(s.u) && s.v == 0 && !signbit(s.v));
        s = (rampwise_state){0, 0, sign * silent, 0};
        rampwise_step(&c, &s, 0);
        ck_assert(s.u == sign * c.C * silent);
        s = (rampwise_state){0, sign * 0x1p-1000, 0, 0};
        rampwise_step(&c, &s, sign * silent);
        ck_assert(s.v == sign * c.Dp * silent);
    }
    rampwise_state s = {nextafter(spent, 0), 0, 0, 0};
    rampwise_step(&c, &s, silent);
    ck_assert(s.u > 0);
}
END_TEST

/* A damped oscillator left alone comes to exact rest and stays: never a subnormal number on the
 * way. */
START_TEST(comes_to_rest)
{
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_hertz(&sys, 10, 0.05), RAMPWISE_OK);
    const rampwise_coeffs c = made(sys, 1e-3, 0);
    rampwise_state s;
    long steps = 0;
    rampwise_start(&s, 1, 0, 0);
    for (; (s.u != 0 || s.v != 0) && steps < 1000000; ++steps) {
        rampwise_step(&c, &s, 0);
        ck_assert(s.u == 0 || isnormal(s.u));
        ck_assert(s.v == 0 || isnormal(s.v));
    }
    /* exp(-zeta omega t) = 2^-960 after 212 s */
    ck_assert_int_gt(steps, 205000);
    ck_assert_int_lt(steps, 225000);
    rampwise_step(&c, &s, 0);
    ck_assert(s.u == 0 && s.v == 0 && !signbit(s.u) && !signbit(s.v));
}
END_TEST

START_TEST(nan_goes_through)
{
    const rampwise_coeffs c = made(regime_system(1, 0.3, 0.01), 0.01, 0);
    rampwise_state s = {0, 0, 0, 0};
    rampwise_step(&c, &s, NAN);
    ck_assert(isnan(s.u) && isnan(s.v) && isnan(s.p));
}
END_TEST

/* The size of the motion within a step, as displacement: initial values, and twice the static or
   free response to the larger load. A velocity counts with the time it can act. */
static double size_of_motion(const rampwise_coeffs *c, const rampwise_state *s, double p_next, double *rate)
{
    const double load = fmax(fabs(s->p), fabs(p_next));
    const rampwise_system *const sys = &c->system;
    *rate = fmax(1 / c->dt, sqrt(fabs(sys->stiffness) / sys->mass));
    const double per_load[] = {1 / sys->mass / (*rate * *rate), 1 / (*rate * *rate), 1 / *rate, 1};
    return fabs(s->u) + fabs(s->v) / *rate + 2 * load * per_load[c->input - RAMPWISE_FORCE];
}

/* One step is two of any two parts. Rounding of the parts' lengths moves the phase by theta eps,
   the coefficients and the load inside by eps each: 1e-14 of the motion is twenty times their sum
   for theta up to 2, and the unstable systems here grow less than threefold. */
START_TEST(two_parts_make_one)
{
    gsl_rng *const r = random_make("two_parts_make_one");
    for (int i = 0; i < 100000; ++i) {
        const double dt = random_log(r, 1e-3, 1e3), theta = random_log(r, 1e-6, 2);
        const rampwise_system sys = regime_system(i % REGIMES, theta, dt);
        const int kind = (int)gsl_rng_uniform_int(r, KINDS);
        const double fraction = random_between(r, 0.01, 0.99);
        if (!kind_allowed(&sys, kind))
            continue;
        const rampwise_coeffs c = made(sys, dt, kind), rest = made(sys, dt * (1 - fraction), kind);
        const double omega = theta / dt;
        rampwise_state s, at;
        rampwise_start(&s, random_between(r, -1, 1), omega * random_between(r, -1, 1),
                       random_between(r, -1, 1));
        const double p_next = random_between(r, -1, 1);
        double rate;
        const double size = size_of_motion(&c, &s, p_next, &rate);
        ck_assert_int_eq(rampwise_inside(&c, &s, p_next, fraction, &at), RAMPWISE_OK);
        rampwise_step(&rest, &at, p_next);
        rampwise_step(&c, &s, p_next);
        ck_assert_double_le(fabs(s.u - at.u), 1e-14 * size);
        ck_assert_double_le(fabs(s.v - at.v), 1e-14 * size * rate);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(inside_at_the_ends)
{
    for (int kind = 0; kind < KINDS - 1; ++kind) {
        const rampwise_coeffs c = made(regime_system(2, 0.3, 0.01), 0.01, kind);
        const rampwise_state s = {0.1, -2, 3, 1};
        rampwise_state at, stepped = s;
        rampwise_step(&c, &stepped, 5);
        ck_assert_int_eq(rampwise_inside(&c, &s, 5, 1, &at), RAMPWISE_OK);
        ck_assert_mem_eq(&at, &stepped, sizeof at);
        ck_assert_int_eq(rampwise_inside(&c, &s, 5, 0, &at), RAMPWISE_OK);
        ck_assert(at.u == s.u && at.v == s.v && at.p == s.p);
        ck_assert(at.p_before == 1);
        at = s;
        ck_assert_int_eq(rampwise_inside(&c, &at, 5, 0.25, &at), RAMPWISE_OK);
        if (c.between == RAMPWISE_RAMP)
            ck_assert(at.p == 3.5 && at.p_before == 1.5);
        else
            ck_assert(at.p == 3 && at.p_before == 1);
        /* A step of nothing is a step of 1e-300: continuous down to the shortest. */
        ck_assert_int_eq(rampwise_inside(&c, &s, 5, 1e-300, &at), RAMPWISE_OK);
        ck_assert(at.u == s.u && at.v == s.v && at.p == s.p);
    }
}
END_TEST

START_TEST(inside_refusals)
{
    const rampwise_coeffs never_made = {0};
    const rampwise_coeffs c = made(regime_system(1, 0.3, 0.01), 0.01, 0);
    const rampwise_state s = {0, 0, 0, 0}, wrong = {0, NAN, 0, 0};
    const rampwise_state before = {1, 2, 3, 4};
    rampwise_state at = before;
    ck_assert_int_eq(rampwise_inside(NULL, &s, 0, 0.5, &at), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_inside(&c, NULL, 0, 0.5, &at), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_inside(&c, &s, 0, 0.5, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_inside(&never_made, &s, 0, 0.5, &at), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_inside(&c, &s, 0, -1e-9, &at), RAMPWISE_ERROR_FRACTION);
    ck_assert_int_eq(rampwise_inside(&c, &s, 0, 1 + DBL_EPSILON, &at), RAMPWISE_ERROR_FRACTION);
    ck_assert_int_eq(rampwise_inside(&c, &s, 0, NAN, &at), RAMPWISE_ERROR_FRACTION);
    ck_assert_int_eq(rampwise_inside(&c, &wrong, 0, 0.5, &at), RAMPWISE_ERROR_STATE);
    ck_assert_int_eq(rampwise_inside(&c, &s, INFINITY, 0.5, &at), RAMPWISE_ERROR_SAMPLE);
    const rampwise_state large = {0, DBL_MAX, -DBL_MAX, 0};
    ck_assert_int_eq(rampwise_inside(&c, &large, DBL_MAX, 0.5, &at), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_mem_eq(&at, &before, sizeof at);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, start_at_once);
    tcase_add_test(tests, start_settled);
    tcase_add_test(tests, start_settled_refusals);
    tcase_add_test(tests, silence_limits);
    tcase_add_test(tests, comes_to_rest);
    tcase_add_test(tests, nan_goes_through);
    tcase_add_test(tests, two_parts_make_one);
    tcase_add_test(tests, inside_at_the_ends);
    tcase_add_test(tests, inside_refusals);
}

int main(void)
{
    return suite_run("steps", add_tests);
}
