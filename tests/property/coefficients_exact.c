/* Every coefficient against MPFR: tests/support/exact.c computes the closed forms of the system as
   it is stored, with 400 bits and more. The promise of coefficients.h is checked as it stands: 0.6
   ulp of the largest |F(tau)|, 0 < tau <= h, and 0.6 ulp of the value itself for force and base
   acceleration at theta < 1. Single precision: the float nearest to the exact value, but where a free motion has
   decayed so far that twofold arithmetic does not see it.

   RAMPWISE_POINTS in the environment sets the number of random points (the default is 20,000 over
   all four tests). */
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "../support/exact.h"
#include "../support/random.h"
#include "../support/suite.h"

enum { COMBINATIONS = 7 };
static const int combinations[COMBINATIONS][2] = {{RAMPWISE_FORCE, RAMPWISE_RAMP},
                                                  {RAMPWISE_FORCE, RAMPWISE_HOLD},
                                                  {RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP},
                                                  {RAMPWISE_BASE_ACCELERATION, RAMPWISE_HOLD},
                                                  {RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP},
                                                  {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP},
                                                  {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD}};

typedef struct tally {
    unsigned long values, not_nearest;
    unsigned long singles_not_nearest, singles_beyond;
    double worst; /* ulp of the scale that was needed */
} tally;

/* |computed - exact| in ulp of `scale`, which is of the exact value's own kind. */
static double error_in_ulp(double computed, const mpfr_t exact, const mpfr_t scale)
{
    mpfr_t error;
    if (mpfr_zero_p(scale))
        return computed == 0 ? 0 : INFINITY;
    mpfr_init2(error, mpfr_get_prec(exact));
    mpfr_sub_d(error, exact, computed, MPFR_RNDN);
    mpfr_mul_2si(error, error, 53 - mpfr_get_exp(scale), MPFR_RNDN);
    const double result = fabs(mpfr_get_d(error, MPFR_RNDU));
    mpfr_clear(error);
    return result;
}

/* The error in ulp of a lower bound of the largest |F(tau)| of coefficient i, which makes the check
   stricter: samples of tau at equal ratios, at equal distances, and around the first swings, until
   one is large enough for `wanted`. */
static double error_in_largest(const rampwise_system *sys, double dt, const int kinds[2], int i,
                               double computed, const mpfr_t exact, double wanted)
{
    exact_step inside;
    const double theta = sqrt(fabs(sys->stiffness) / sys->mass) * dt;
    const double S = fabs(sys->damper) / sys->mass * dt;
    double least = INFINITY;
    exact_init(&inside, sys, dt);
    for (int j = 0; j < 60 && !(least <= wanted); ++j) {
        double fraction = j < 30 ? pow(0.5, j + 1) : (j - 29) / 16.0;
        if (j >= 45)
            fraction = (j - 44) / 3.0 / (j % 2 == 0 ? fmax(theta, 1e-9) : fmax(S, 1e-9));
        if (fraction > 1)
            continue;
        exact_free_motion(&inside, dt, fraction);
        exact_input(&inside, kinds[0], kinds[1]);
        least = fmin(least, error_in_ulp(computed, exact, inside.value[i]));
    }
    exact_clear(&inside);
    return least;
}

static int is_load_term(int i)
{
    return i == 2 || i == 3 || i == 6 || i == 7;
}

static void check_value(const rampwise_coeffs *c, const exact_step *e, int i, tally *t)
{
    const int kinds[2] = {c->input, c->between};
    const double computed = (&c->A)[i];
    const double theta = sqrt(fabs(c->system.stiffness) / c->system.mass) * c->dt;
    const int itself = theta < 1 && (c->input == RAMPWISE_FORCE || c->input == RAMPWISE_BASE_ACCELERATION);
    double error = error_in_ulp(computed, e->value[i], e->value[i]);
    if (error > 0.6 && !itself)
        error = error_in_largest(&c->system, c->dt, kinds, i, computed, e->value[i], 0.6);
    ++t->values;
    t->not_nearest += computed != mpfr_get_d(e->value[i], MPFR_RNDN);
    t->worst = fmax(t->worst, error);
    if (!(error <= 0.6))
        ck_abort_msg("%s, input %d, between %d, m %a c %a k %a dt %a (theta %g): %a, %g ulp", exact_names[i],
                     c->input, c->between, c->system.mass, c->system.damper, c->system.stiffness, c->dt,
                     theta, computed, error);
}

static float nearest_float(const mpfr_t exact)
{
    return mpfr_get_flt(exact, MPFR_RNDN) + 0.0f;
}

/* Twofold arithmetic leaves 2^-100 of the largest value, 2^-47 of a double's ulp of it. */
static void check_single(const rampwise_coeffs_f32 *single, const rampwise_coeffs *c, const exact_step *e,
                         int i, tally *t)
{
    const float computed = (&single->A)[i], nearest = nearest_float(e->value[i]);
    const int kinds[2] = {c->input, c->between};
    if (memcmp(&computed, &nearest, sizeof computed) == 0)
        return;
    ++t->singles_not_nearest;
    const double error = error_in_largest(&c->system, c->dt, kinds, i, computed, e->value[i], 0x1p-47);
    if (!(error <= 0x1p-47))
        ck_abort_msg("%s in single precision, input %d, between %d, m %a c %a k %a dt %a: %a, not %a",
                     exact_names[i], c->input, c->between, c->system.mass, c->system.damper,
                     c->system.stiffness, c->dt, (double)computed, (double)nearest);
}

/* Whether a member of c is larger than any float, for each that single precision has. */
static int beyond_float(const rampwise_coeffs *c)
{
    const double others[] = {c->system.mass, c->system.damper, c->system.stiffness, 1 / c->dt};
    int beyond = 0;
    for (int i = 0; i < 18; ++i)
        beyond |= isinf((float)(&c->A)[i]);
    for (int i = 0; i < 4; ++i)
        beyond |= isinf((float)others[i]);
    return beyond;
}

/* The six that describe free motion with the first combination, and the same bits in all others. */
static void check_point(const rampwise_system *sys, double dt, tally *t)
{
    exact_step e;
    rampwise_coeffs first = {0};
    exact_init(&e, sys, dt);
    exact_free_motion(&e, dt, 1);
    for (int j = 0; j < COMBINATIONS; ++j) {
        const int input = combinations[j][0], between = combinations[j][1];
        rampwise_coeffs c;
        if (input == RAMPWISE_BASE_DISPLACEMENT && between == RAMPWISE_HOLD && sys->damper != 0)
            continue;
        ck_assert_int_eq(rampwise_coeffs_make(&c, sys, dt, input, between), RAMPWISE_OK);
        exact_input(&e, input, between);
        rampwise_coeffs_f32 single;
        const int made_single = rampwise_coeffs_make_f32(&single, sys, dt, input, between) == RAMPWISE_OK;
        ck_assert_int_eq(made_single, !beyond_float(&c));
        t->singles_beyond += !made_single;
        if (j == 0)
            first = c;
        for (int i = 0; i < EXACT_COUNT; ++i)
            if (j == 0 || is_load_term(i)) {
                check_value(&c, &e, i, t);
                if (made_single)
                    check_single(&single, &c, &e, i, t);
            } else
                ck_assert((&c.A)[i] == (&first.A)[i]);
    }
    exact_clear(&e);
    mpfr_free_cache();
}

static void report(const char *test, const tally *t)
{
    printf(
        "%s: %lu values, %lu not the nearest double, worst error %.6f ulp of its scale; %lu not the nearest "
        "float, %lu sets beyond single precision\n",
        test, t->values, t->not_nearest, t->worst, t->singles_not_nearest, t->singles_beyond);
}

/* The system of one theta and zeta at an arbitrary mass and unit of time. */
static double scaled_system(rampwise_system *sys, double theta, double zeta, double mass, double dt)
{
    const double omega = theta / dt;
    *sys = (rampwise_system){mass, 2 * zeta * omega * mass, omega * omega * mass};
    return dt;
}

static long points(int share)
{
    const char *const given = getenv("RAMPWISE_POINTS");
    return (given != NULL ? atol(given) : 20000) * share / 10;
}

START_TEST(grid)
{
    static const double zetas[] = {0,     1e-15,    1e-6,      0.005,     0.05, 0.3,       0.7,
                                   0.95,  1 - 1e-3, 1 - 1e-12, 1 - 1e-15, 1,    1 + 1e-15, 1 + 1e-12,
                                   1.001, 1.2,      3,         20,        100};
    tally t = {0};
    for (int i = -36; i <= 24; ++i)
        for (size_t j = 0; j < sizeof zetas / sizeof *zetas; ++j) {
            rampwise_system sys;
            check_point(&sys, scaled_system(&sys, pow(10, i / 4.0), zetas[j], 1, 1), &t);
        }
    report("grid", &t);
}
END_TEST

START_TEST(random_stable)
{
    gsl_rng *const r = random_make("random_stable");
    tally t = {0};
    for (long i = 0; i < points(6); ++i) {
        rampwise_system sys;
        double zeta = random_log(r, 1e-4, 100);
        if (i % 8 == 0)
            zeta = 1 + random_sign(r) * random_log(r, 1e-16, 1e-2);
        if (i % 50 == 0)
            zeta = 0;
        const double dt = scaled_system(&sys, random_log(r, 1e-9, 1e6), zeta, random_log(r, 1e-12, 1e12),
                                        random_log(r, 1e-6, 1e6));
        check_point(&sys, dt, &t);
    }
    report("random_stable", &t);
    gsl_rng_free(r);
}
END_TEST

START_TEST(random_short)
{
    gsl_rng *const r = random_make("random_short");
    tally t = {0};
    for (long i = 0; i < points(2); ++i) {
        rampwise_system sys;
        const double dt = scaled_system(&sys, random_log(r, 1e-9, 1), random_log(r, 1e-3, 100),
                                        random_log(r, 1e-3, 1e3), random_log(r, 1e-4, 1));
        check_point(&sys, dt, &t);
    }
    report("random_short", &t);
    gsl_rng_free(r);
}
END_TEST

START_TEST(random_unstable)
{
    gsl_rng *const r = random_make("random_unstable");
    tally t = {0};
    for (long i = 0; i < points(2); ++i) {
        rampwise_system sys;
        const double mass = random_log(r, 1e-6, 1e6), dt = random_log(r, 1e-3, 1e3);
        double K = random_log(r, 1e-9, 50) * random_sign(r);
        double S = random_log(r, 1e-9, 50) * random_sign(r);
        if (K > 0 && S > 0)
            *(i % 2 == 0 ? &K : &S) *= -1;
        if (i % 10 == 0)
            *(i % 20 == 0 ? &K : &S) = 0;
        sys = (rampwise_system){mass, S * mass / dt, K * mass / dt / dt};
        check_point(&sys, dt, &t);
    }
    report("random_unstable", &t);
    gsl_rng_free(r);
}
END_TEST

/* The rows of accelerations, and cases where rounding to double first would give another float: a random
   midpoint of two floats times the mass, k = c = dt, so that k/m and c/m round to the midpoint as doubles. */
START_TEST(single_rounded_once)
{
    gsl_rng *const r = random_make("single_rounded_once");
    unsigned long twice = 0;
    mpfr_t x;
    mpfr_init2(x, 400);
    for (int i = 0; i < 20000; ++i) {
        const float low = (float)random_log(r, 1e-3, 1e3);
        const double middle = (low + (double)nextafterf(low, INFINITY)) / 2, mass = random_between(r, 1, 2);
        const double value = middle * mass;
        const rampwise_system sys = {mass, i % 2 == 0 ? value : 0, value};
        rampwise_coeffs_f32 c;
        ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &sys, 1e-3, RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP),
                         RAMPWISE_OK);
        mpfr_set_d(x, value, MPFR_RNDN);
        mpfr_div_d(x, x, mass, MPFR_RNDN);
        ck_assert(c.acceleration[2] == nearest_float(x) && c.total[2] == nearest_float(x));
        ck_assert(c.acceleration[0] == -nearest_float(x) && c.total[0] == -nearest_float(x));
        ck_assert(c.total[1] == (i % 2 == 0 ? -nearest_float(x) : 0));
        twice += (float)(value / mass) != nearest_float(x);
        mpfr_div_d(x, x, 1e-3, MPFR_RNDN);
        ck_assert(c.total[3] == (i % 2 == 0 ? nearest_float(x) : 0));
        const rampwise_system loose = {mass, 0, 0}; /* C' = D' = dt/(2 m) */
        ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &loose, value, RAMPWISE_FORCE, RAMPWISE_RAMP),
                         RAMPWISE_OK);
        mpfr_set_d(x, value, MPFR_RNDN);
        mpfr_div_d(x, x, mass, MPFR_RNDN);
        mpfr_div_ui(x, x, 2, MPFR_RNDN);
        ck_assert(c.Cp == nearest_float(x) && c.Dp == nearest_float(x));
        twice += (float)(value / mass / 2) != nearest_float(x);
        mpfr_set_ui(x, 1, MPFR_RNDN);
        mpfr_div_d(x, x, mass, MPFR_RNDN);
        ck_assert(c.acceleration[2] == nearest_float(x));
        mpfr_set_ui(x, 1, MPFR_RNDN);
        mpfr_div_d(x, x, value, MPFR_RNDN);
        ck_assert(c.rate == nearest_float(x));
    }
    printf("single_rounded_once: %lu values that rounding to double first would miss\n", twice);
    ck_assert_uint_gt(twice, 1000);
    mpfr_clear(x);
    gsl_rng_free(r);
}
END_TEST

/* omega^2 and 2 zeta omega from frequency and period: correctly rounded, so against MPFR's. */
START_TEST(natural_systems)
{
    gsl_rng *const r = random_make("natural_systems");
    mpfr_t omega, x;
    mpfr_inits2(400, omega, x, (mpfr_ptr)0);
    for (int i = 0; i < 3000; ++i) {
        rampwise_system sys;
        const double given = random_log(r, 1e-150, 1e150), zeta = random_between(r, -1, 3);
        mpfr_const_pi(omega, MPFR_RNDN);
        mpfr_mul_ui(omega, omega, 2, MPFR_RNDN);
        if (i % 3 == 0) {
            mpfr_set_d(omega, given, MPFR_RNDN);
            ck_assert_int_eq(rampwise_system_natural(&sys, given, zeta), RAMPWISE_OK);
        } else if (i % 3 == 1) {
            mpfr_mul_d(omega, omega, given, MPFR_RNDN);
            ck_assert_int_eq(rampwise_system_hertz(&sys, given, zeta), RAMPWISE_OK);
        } else {
            mpfr_div_d(omega, omega, given, MPFR_RNDN);
            ck_assert_int_eq(rampwise_system_period(&sys, given, zeta), RAMPWISE_OK);
        }
        mpfr_sqr(x, omega, MPFR_RNDN);
        ck_assert(sys.mass == 1 && sys.stiffness == mpfr_get_d(x, MPFR_RNDN));
        mpfr_mul_d(x, omega, 2 * zeta, MPFR_RNDN);
        ck_assert(sys.damper == mpfr_get_d(x, MPFR_RNDN));
    }
    mpfr_clears(omega, x, (mpfr_ptr)0);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, grid);
    tcase_add_test(tests, random_stable);
    tcase_add_test(tests, random_short);
    tcase_add_test(tests, random_unstable);
    tcase_add_test(tests, single_rounded_once);
    tcase_add_test(tests, natural_systems);
}

int main(void)
{
    return suite_run("coefficients against MPFR", add_tests);
}
