/* The shared vectors, which every binding reads too: all bits as MPFR has them (tests/vectors/make_vectors.c). */
#include <string.h>
#include "rampwise.h"
#include "../support/suite.h"
#include "../support/vectors.h"

enum { MOST = 64 };

static int constant(const vectors *v, const char *key)
{
    char name[32];
    int value = 0;
    ck_assert_int_eq(rampwise_constant(vectors_text(v, key, name), &value), RAMPWISE_OK);
    return value;
}

static rampwise_coeffs coeffs_of(const vectors *v)
{
    const rampwise_system sys = {vectors_number(v, "mass"), vectors_number(v, "damper"),
                                 vectors_number(v, "stiffness")};
    rampwise_coeffs c;
    ck_assert_int_eq(
        rampwise_coeffs_make(&c, &sys, vectors_number(v, "dt"), constant(v, "input"), constant(v, "between")),
        RAMPWISE_OK);
    return c;
}

static void same(const vectors *v, const char *key, size_t n, const double *x)
{
    double expected[MOST];
    ck_assert_uint_eq(vectors_numbers(v, key, MOST, expected), n);
    ck_assert_msg(memcmp(x, expected, n * sizeof *x) == 0, "%s differs in %.300s", key, v->line);
}

static void same_histories(const vectors *v, size_t n, double h[4][MOST])
{
    static const char *const names[] = {"u", "v", "a", "total"};
    for (int i = 0; i < 4; ++i)
        same(v, names[i], n, h[i]);
}

START_TEST(systems)
{
    vectors v;
    int count = 0;
    char way[32];
    for (vectors_open(&v, "systems"); vectors_next(&v); ++count) {
        rampwise_system sys;
        const double given = vectors_number(&v, "given"), damping = vectors_number(&v, "damping");
        vectors_text(&v, "way", way);
        const int status = strcmp(way, "omega") == 0       ? rampwise_system_natural(&sys, given, damping)
                           : strcmp(way, "frequency") == 0 ? rampwise_system_hertz(&sys, given, damping)
                                                           : rampwise_system_period(&sys, given, damping);
        ck_assert_int_eq(status, RAMPWISE_OK);
        same(&v, "system", 3, (double[]){sys.mass, sys.damper, sys.stiffness});
    }
    ck_assert_int_ge(count, 50);
}
END_TEST

START_TEST(coefficients)
{
    vectors v;
    int count = 0;
    for (vectors_open(&v, "coefficients"); vectors_next(&v); ++count) {
        const rampwise_coeffs c = coeffs_of(&v);
        same(&v, "coefficients", 10,
             (double[]){c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp, c.A_minus_1, c.Bp_minus_1});
        same(&v, "acceleration", 4, c.acceleration);
        same(&v, "total", 4, c.total);
    }
    ck_assert_int_ge(count, 150);
}
END_TEST

START_TEST(steps)
{
    vectors v;
    int count = 0;
    for (vectors_open(&v, "steps"); vectors_next(&v); ++count) {
        const rampwise_coeffs c = coeffs_of(&v);
        double p[MOST], h[4][MOST];
        const size_t n = vectors_numbers(&v, "p", MOST, p);
        const rampwise_history out = {h[0], h[1], h[2], h[3]};
        ck_assert_int_eq(
            rampwise_solve(&c, vectors_number(&v, "u0"), vectors_number(&v, "v0"), n, p, &out, NULL),
            RAMPWISE_OK);
        same_histories(&v, n, h);
        rampwise_state s;
        rampwise_start(&s, vectors_number(&v, "u0"), vectors_number(&v, "v0"), p[0]);
        for (size_t i = 1; i < n; ++i) {
            rampwise_step(&c, &s, p[i]);
            ck_assert(memcmp(&s.u, &h[0][i], sizeof s.u) == 0 && memcmp(&s.v, &h[1][i], sizeof s.v) == 0);
        }
    }
    ck_assert_int_ge(count, 15);
}
END_TEST

START_TEST(irregular_times)
{
    vectors v;
    int count = 0;
    for (vectors_open(&v, "times"); vectors_next(&v); ++count) {
        const rampwise_coeffs c = coeffs_of(&v);
        double t[MOST], p[MOST], h[4][MOST];
        const size_t n = vectors_numbers(&v, "p", MOST, p);
        ck_assert_uint_eq(vectors_numbers(&v, "t", MOST, t), n);
        rampwise_state s;
        rampwise_start(&s, vectors_number(&v, "u0"), vectors_number(&v, "v0"), p[0]);
        h[0][0] = s.u;
        h[1][0] = s.v;
        h[2][0] = rampwise_acceleration(&c, &s);
        h[3][0] = rampwise_total_acceleration(&c, &s);
        const rampwise_history out = {h[0] + 1, h[1] + 1, h[2] + 1, h[3] + 1};
        ck_assert_int_eq(rampwise_run_at(&c, &s, &(double){t[0]}, n - 1, t + 1, p + 1, &out, NULL),
                         RAMPWISE_OK);
        same_histories(&v, n, h);
    }
    ck_assert_int_ge(count, 5);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, systems);
    tcase_add_test(tests, coefficients);
    tcase_add_test(tests, steps);
    tcase_add_test(tests, irregular_times);
}

int main(void)
{
    return suite_run("vectors", add_tests);
}
