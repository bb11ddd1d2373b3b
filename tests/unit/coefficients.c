/* Making coefficients: refusals, extremes, what they carry, and that no unit of time is special. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

static int make(double m, double c, double k, double dt, int input, int between)
{
    const rampwise_system sys = {m, c, k};
    rampwise_coeffs made, before;
    memset(&before, 0x5a, sizeof before);
    made = before;
    const int status = rampwise_coeffs_make(&made, &sys, dt, input, between);
    if (status != RAMPWISE_OK)
        ck_assert_mem_eq(&made, &before, sizeof made);
    return status;
}

static int make_force(double m, double c, double k, double dt)
{
    return make(m, c, k, dt, RAMPWISE_FORCE, RAMPWISE_RAMP);
}

START_TEST(refusals)
{
    static const double not_finite[] = {NAN, INFINITY, -INFINITY};
    const rampwise_system sys = {1, 0, 1};
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_coeffs_make(NULL, &sys, 1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_coeffs_make(&c, NULL, 1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_MISSING);
    for (int i = 0; i < 3; ++i) {
        ck_assert_int_eq(make_force(not_finite[i], 0, 1, 1), RAMPWISE_ERROR_MASS);
        ck_assert_int_eq(make_force(1, not_finite[i], 1, 1), RAMPWISE_ERROR_DAMPER);
        ck_assert_int_eq(make_force(1, 0, not_finite[i], 1), RAMPWISE_ERROR_STIFFNESS);
        ck_assert_int_eq(make_force(1, 0, 1, not_finite[i]), RAMPWISE_ERROR_INTERVAL);
    }
    ck_assert_int_eq(make_force(0, 0, 1, 1), RAMPWISE_ERROR_MASS);
    ck_assert_int_eq(make_force(-1, 0, 1, 1), RAMPWISE_ERROR_MASS);
    ck_assert_int_eq(make_force(1, 0, 1, 0), RAMPWISE_ERROR_INTERVAL);
    ck_assert_int_eq(make_force(1, 0, 1, -0.1), RAMPWISE_ERROR_INTERVAL);
}
END_TEST

START_TEST(swapped_and_unknown_kinds)
{
    ck_assert_int_eq(make(1, 0, 1, 1, RAMPWISE_RAMP, RAMPWISE_FORCE), RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(make(1, 0, 1, 1, RAMPWISE_FORCE, RAMPWISE_BASE_ACCELERATION), RAMPWISE_ERROR_BETWEEN);
    for (int i = -5; i < 60; ++i) {
        const int is_input = i >= RAMPWISE_FORCE && i <= RAMPWISE_BASE_DISPLACEMENT;
        const int is_between = i == RAMPWISE_RAMP || i == RAMPWISE_HOLD;
        ck_assert_int_eq(make(1, 0, 1, 1, i, RAMPWISE_RAMP), is_input ? RAMPWISE_OK : RAMPWISE_ERROR_INPUT);
        ck_assert_int_eq(make(1, 0, 1, 1, RAMPWISE_FORCE, i),
                         is_between ? RAMPWISE_OK : RAMPWISE_ERROR_BETWEEN);
    }
}
END_TEST

START_TEST(impulses)
{
    ck_assert_int_eq(make(1, 0.1, 1, 1, RAMPWISE_BASE_VELOCITY, RAMPWISE_HOLD), RAMPWISE_ERROR_IMPULSES);
    ck_assert_int_eq(make(1, 0, 1, 1, RAMPWISE_BASE_VELOCITY, RAMPWISE_HOLD), RAMPWISE_ERROR_IMPULSES);
    ck_assert_int_eq(make(1, 0.1, 1, 1, RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD), RAMPWISE_ERROR_IMPULSES);
    ck_assert_int_eq(make(1, 0, 1, 1, RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD), RAMPWISE_OK);
}
END_TEST

START_TEST(step_length)
{
    ck_assert_int_eq(make_force(1, 0, 0x1.fp95, 1), RAMPWISE_OK);
    ck_assert_int_eq(make_force(1, 0, 0x1p96, 1), RAMPWISE_ERROR_STEP_LENGTH);
    ck_assert_int_eq(make_force(1, 0x1.fp95, 1, 1), RAMPWISE_OK);
    ck_assert_int_eq(make_force(1, 0x1p96, 1, 1), RAMPWISE_ERROR_STEP_LENGTH);
    ck_assert_int_eq(make_force(DBL_TRUE_MIN, 0, DBL_MAX, DBL_MAX), RAMPWISE_ERROR_STEP_LENGTH);
}
END_TEST

/* exp(sqrt(-K)) = 2^900 at sqrt(-K) = 623.8: growth up to there is answered, beyond it is not. */
START_TEST(growth)
{
    ck_assert_int_eq(make_force(1, 0, -600.0 * 600, 1), RAMPWISE_OK);
    ck_assert_int_eq(make_force(1, 0, -640.0 * 640, 1), RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(make_force(1, 0, -1e20, 1), RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(make_force(1, -600, 0, 1), RAMPWISE_OK);
    ck_assert_int_eq(make_force(1, -640, 0, 1), RAMPWISE_ERROR_COEFFICIENT);
}
END_TEST

/* A free mass has h^2/3m, h^2/6m, h/2m twice: at the ends of the range of doubles too. */
START_TEST(huge_and_tiny)
{
    const rampwise_coeffs small = made((rampwise_system){1, 0, 0}, 0x1p-500, 0);
    ck_assert(small.D == 0x1p-1000 / 6 && small.C == 0x1p-1000 / 3 && small.Dp == 0x1p-501);
    const rampwise_coeffs large = made((rampwise_system){1, 0, 0}, 0x1p500, 0);
    ck_assert(large.D == 0x1p1000 / 6 && large.C == 0x1p1000 / 3 && large.Dp == 0x1p499);
    ck_assert_int_eq(make_force(1, 0, 0, 0x1p520), RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(make_force(1, 0, 0, DBL_MAX), RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(make_force(DBL_TRUE_MIN, 0, 0, 1), RAMPWISE_ERROR_COEFFICIENT);
    const rampwise_coeffs heavy = made((rampwise_system){DBL_MAX, 0, DBL_MAX}, 1, 0);
    const rampwise_coeffs plain = made((rampwise_system){1, 0, 1}, 1, 0);
    ck_assert(heavy.A == plain.A && heavy.Ap == plain.Ap && heavy.Bp_minus_1 == plain.Bp_minus_1);
    const rampwise_coeffs slow = made((rampwise_system){1, 0, 1e-300}, 1, 0);
    ck_assert(slow.A_minus_1 == -1e-300 / 2 && slow.Ap == -1e-300 && slow.A == 1);
}
END_TEST

START_TEST(carried)
{
    for (int regime = 0; regime < REGIMES; ++regime)
        for (int kind = 0; kind < KINDS; ++kind) {
            const rampwise_system sys = regime_system(regime, 0.3, 0.01);
            if (!kind_allowed(&sys, kind))
                continue;
            const rampwise_coeffs c = made(sys, 0.01, kind);
            static const double zero[sizeof c.reserve / sizeof *c.reserve];
            ck_assert_mem_eq(&c.system, &sys, sizeof sys);
            ck_assert(c.dt == 0.01);
            ck_assert_int_eq(c.input, kinds[kind][0]);
            ck_assert_int_eq(c.between, kinds[kind][1]);
            ck_assert_mem_eq(c.reserve, zero, sizeof zero);
        }
}
END_TEST

/* A system inside the struct that is being made. */
START_TEST(system_in_place)
{
    const rampwise_system sys = regime_system(1, 0.3, 0.01);
    const rampwise_coeffs c = made(sys, 0.01, 0);
    rampwise_coeffs in_place = c;
    ck_assert_int_eq(rampwise_coeffs_make(&in_place, &in_place.system, 0.01, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_OK);
    ck_assert_mem_eq(&in_place, &c, sizeof c);
}
END_TEST

/* In a unit of time 2^n times shorter every number is the same but for its unit: exactly, since
   powers of two round nothing. */
START_TEST(unit_of_time_power_of_two)
{
    for (int regime = 0; regime < REGIMES; ++regime)
        for (int n = -60; n <= 60; n += 7) {
            const rampwise_system sys = regime_system(regime, 0.37, 0.01);
            const rampwise_system scaled = {sys.mass, ldexp(sys.damper, -n), ldexp(sys.stiffness, -2 * n)};
            const rampwise_coeffs a = made(sys, 0.01, 0), b = made(scaled, ldexp(0.01, n), 0);
            ck_assert(b.A == a.A && b.Bp == a.Bp && b.A_minus_1 == a.A_minus_1 &&
                      b.Bp_minus_1 == a.Bp_minus_1);
            ck_assert(b.B == ldexp(a.B, n) && b.Ap == ldexp(a.Ap, -n));
            ck_assert(b.C == ldexp(a.C, 2 * n) && b.D == ldexp(a.D, 2 * n));
            ck_assert(b.Cp == ldexp(a.Cp, n) && b.Dp == ldexp(a.Dp, n));
        }
}
END_TEST

/* In ms instead of s, the stored c, k and dt round anew: each moves theta by at most 2 eps, and a
   coefficient at theta <= 1 by no more than a few of that; 16 eps of its value leaves room for both
   roundings of the results. */
START_TEST(unit_of_time_thousand)
{
    gsl_rng *const r = random_make("unit_of_time_thousand");
    for (int i = 0; i < 2000; ++i) {
        const int regime = i % REGIMES;
        const double dt = random_log(r, 1e-4, 1);
        const rampwise_system sys = regime_system(regime, random_log(r, 1e-9, 0.5), dt);
        const rampwise_system scaled = {sys.mass, sys.damper / 1e3, sys.stiffness / 1e6};
        const rampwise_coeffs a = made(sys, dt, 0), b = made(scaled, dt * 1e3, 0);
        const double tolerance = 16 * DBL_EPSILON;
        ck_assert_double_le(fabs(b.C / a.C / 1e6 - 1), tolerance);
        ck_assert_double_le(fabs(b.D / a.D / 1e6 - 1), tolerance);
        ck_assert_double_le(fabs(b.Cp / a.Cp / 1e3 - 1), tolerance);
        ck_assert_double_le(fabs(b.Dp / a.Dp / 1e3 - 1), tolerance);
        ck_assert_double_le(fabs(b.B / a.B / 1e3 - 1), tolerance);
        ck_assert_double_le(fabs(b.Ap - a.Ap / 1e3), tolerance * fabs(b.Ap));
        ck_assert_double_le(fabs(b.A_minus_1 - a.A_minus_1), tolerance * fabs(a.A_minus_1));
        /* -(S g + K G1), which may cancel where the damper is negative */
        const double S = fabs(sys.damper) * dt / sys.mass, K = fabs(sys.stiffness) * dt * dt / sys.mass;
        ck_assert_double_le(fabs(b.Bp_minus_1 - a.Bp_minus_1), tolerance * (S + K));
    }
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, swapped_and_unknown_kinds);
    tcase_add_test(tests, impulses);
    tcase_add_test(tests, step_length);
    tcase_add_test(tests, growth);
    tcase_add_test(tests, huge_and_tiny);
    tcase_add_test(tests, carried);
    tcase_add_test(tests, system_in_place);
    tcase_add_test(tests, unit_of_time_power_of_two);
    tcase_add_test(tests, unit_of_time_thousand);
}

int main(void)
{
    return suite_run("coefficients", add_tests);
}
