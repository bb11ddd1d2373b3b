/* Making systems: ranges and refusals. The values are checked in property/coefficients_exact.c. */
#include <float.h>
#include <math.h>
#include "../support/suite.h"
#include "rampwise.h"

typedef int (*maker)(rampwise_system *, double, double);
static const maker makers[] = {rampwise_system_natural, rampwise_system_hertz, rampwise_system_period};
static const rampwise_system untouched = {7, 8, 9};

static void refuses(maker make, double frequency, double zeta, int status)
{
    rampwise_system sys = untouched;
    ck_assert_int_eq(make(&sys, frequency, zeta), status);
    ck_assert_mem_eq(&sys, &untouched, sizeof sys);
}

START_TEST(refusals)
{
    for (int i = 0; i < 3; ++i) {
        ck_assert_int_eq(makers[i](NULL, 1, 0), RAMPWISE_ERROR_MISSING);
        refuses(makers[i], -1, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], NAN, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], INFINITY, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], 1e-200, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], 1e200, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], DBL_TRUE_MIN, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], DBL_MAX, 0.05, RAMPWISE_ERROR_FREQUENCY);
        refuses(makers[i], 1, NAN, RAMPWISE_ERROR_DAMPER);
        refuses(makers[i], 1, -INFINITY, RAMPWISE_ERROR_DAMPER);
        refuses(makers[i], i == 2 ? 1e-100 : 1e100, 1e300, RAMPWISE_ERROR_DAMPER);
    }
    refuses(rampwise_system_period, 0, 0.05, RAMPWISE_ERROR_FREQUENCY);
}
END_TEST

START_TEST(free_mass)
{
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_natural(&sys, 0, 0.5), RAMPWISE_OK);
    ck_assert(sys.mass == 1 && sys.damper == 0 && sys.stiffness == 0);
    ck_assert_int_eq(rampwise_system_hertz(&sys, 0, 0.5), RAMPWISE_OK);
    ck_assert(sys.mass == 1 && sys.damper == 0 && sys.stiffness == 0);
}
END_TEST

START_TEST(negative_damping)
{
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_natural(&sys, 3, -0.5), RAMPWISE_OK);
    ck_assert(sys.mass == 1 && sys.damper == -3 && sys.stiffness == 9);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, free_mass);
    tcase_add_test(tests, negative_damping);
}

int main(void)
{
    return suite_run("systems", add_tests);
}
