/* What follows from a state: the equation of motion and the meaning of each input, term by term. */
#include <float.h>
#include <math.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

/* One state under one kind of input, with everything the physics says of it in long double. */
typedef struct expectation {
    long double relative_u, relative_v, acceleration, total, size;
} expectation;

static expectation expect(const rampwise_coeffs *c, const rampwise_state *s)
{
    const long double m = c->system.mass, damper = c->system.damper, k = c->system.stiffness;
    const long double slope = c->between == RAMPWISE_RAMP ? ((long double)s->p - s->p_before) / c->dt : 0;
    expectation e = {s->u, s->v, 0, 0, 0};
    if (c->input == RAMPWISE_BASE_DISPLACEMENT) {
        e.relative_u -= s->p;
        e.relative_v -= slope;
    }
    const long double force = -k * e.relative_u - damper * e.relative_v;
    e.total = force / m + (c->input == RAMPWISE_FORCE ? s->p / m : 0);
    e.acceleration = e.total;
    if (c->input == RAMPWISE_BASE_ACCELERATION)
        e.acceleration -= s->p;
    if (c->input == RAMPWISE_BASE_VELOCITY)
        e.acceleration -= slope;
    e.size = fabsl(k / m * s->u) + fabsl(damper / m * s->v) + fabsl(s->p) * (k / m + 1 / m + 1) +
             (damper / m + 1) * (fabs(s->p) + fabs(s->p_before)) / c->dt;
    return e;
}

/* Rows of four terms, each rounded twice: 8 eps of the sum of their sizes. */
START_TEST(against_the_equation)
{
    gsl_rng *const r = random_make("against_the_equation");
    for (int i = 0; i < 20000; ++i) {
        const rampwise_system sys = regime_system(i % 7, random_log(r, 1e-3, 3), 0.01);
        const int kind = i / 7 % KINDS;
        if (!kind_allowed(&sys, kind))
            continue;
        const rampwise_coeffs c = made(sys, 0.01, kind);
        const rampwise_state s = {random_between(r, -1, 1), random_between(r, -9, 9),
                                  random_between(r, -5, 5), random_between(r, -5, 5)};
        const expectation e = expect(&c, &s);
        const double tolerance = (double)e.size * 8 * DBL_EPSILON;
        const double du = rampwise_relative_displacement(&c, &s);
        const double dv = rampwise_relative_velocity(&c, &s);
        ck_assert_double_le(fabs(rampwise_acceleration(&c, &s) - (double)e.acceleration), tolerance);
        ck_assert_double_le(fabs(rampwise_total_acceleration(&c, &s) - (double)e.total), tolerance);
        ck_assert_double_le(fabs(du - (double)e.relative_u), DBL_EPSILON * fabs(du));
        ck_assert_double_le(fabs(dv - (double)e.relative_v), 4 * DBL_EPSILON * (fabs(dv) + fabs(s.v)));
        ck_assert(rampwise_spring_force(&c, &s) == sys.stiffness * du);
        ck_assert(rampwise_damper_force(&c, &s) == sys.damper * dv);
    }
    gsl_rng_free(r);
}
END_TEST

/* A force of any size is no overflow where its change plays no part. */
START_TEST(change_that_does_not_count)
{
    const rampwise_coeffs c = made((rampwise_system){1, 0, 1}, 1, 0);
    const rampwise_state s = {0, 0, DBL_MAX, -DBL_MAX};
    ck_assert(rampwise_acceleration(&c, &s) == DBL_MAX);
}
END_TEST

/* Held base displacement: the base stands still between its jumps. */
START_TEST(held_base_stands_still)
{
    const rampwise_coeffs c = made((rampwise_system){1, 0, 4}, 0.1, KINDS - 1);
    const rampwise_state s = {0.5, 2, 3, 1};
    ck_assert(rampwise_relative_velocity(&c, &s) == 2);
    ck_assert(rampwise_relative_displacement(&c, &s) == -2.5);
    ck_assert(rampwise_acceleration(&c, &s) == 10);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, against_the_equation);
    tcase_add_test(tests, change_that_does_not_count);
    tcase_add_test(tests, held_base_stands_still);
}

int main(void)
{
    return suite_run("motion", add_tests);
}
