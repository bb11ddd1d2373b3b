/* Records: any cutting, in place, nothing written outside, refusals that change nothing, overflow,
   irregular times. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { N = 500, GUARD = 8 };
static const double guard_value = 1234.5;

/* Outputs with guard cells before and after. */
typedef struct outputs {
    double cell[4][N + 2 * GUARD];
    rampwise_history history;
} outputs;

static void outputs_make(outputs *o)
{
    for (int i = 0; i < 4; ++i)
        for (int j = 0; j < N + 2 * GUARD; ++j)
            o->cell[i][j] = guard_value;
    o->history =
        (rampwise_history){o->cell[0] + GUARD, o->cell[1] + GUARD, o->cell[2] + GUARD, o->cell[3] + GUARD};
}

/* Cells from `first` to `end` may be written, all others are as they were. */
static void check_guards(const outputs *o, int first, int end)
{
    for (int i = 0; i < 4; ++i)
        for (int j = 0; j < N + 2 * GUARD; ++j)
            if (j < GUARD + first || j >= GUARD + end)
                ck_assert(o->cell[i][j] == guard_value);
}

static rampwise_history shifted(const rampwise_history *h, int by)
{
    return (rampwise_history){h->u + by, h->v + by, h->a + by, h->total + by};
}

/* Every kind and regime: inline steps and motion.h = one call = calls of any size, 0 and 1 included
   = rampwise_solve. */
START_TEST(same_bits_however_cut)
{
    gsl_rng *const r = random_make("same_bits_however_cut");
    for (int i = 0; i < KINDS * REGIMES; ++i) {
        const rampwise_system sys = regime_system(i % REGIMES, 0.2, 0.01);
        if (!kind_allowed(&sys, i / REGIMES))
            continue;
        const rampwise_coeffs c = made(sys, 0.01, i / REGIMES);
        double p[N];
        outputs whole, cut, solved;
        outputs_make(&whole);
        outputs_make(&cut);
        outputs_make(&solved);
        random_record(r, p, N);
        rampwise_state a, b, s;
        rampwise_start(&a, 0.1, -0.2, p[0]);
        b = s = a;
        ck_assert_int_eq(rampwise_run(&c, &a, N - 1, p + 1, &whole.history, NULL), RAMPWISE_OK);
        for (int done = 0; done < N - 1;) {
            int n = (int)gsl_rng_uniform_int(r, 40) - 10;
            n = n < 0 ? 0 : n > N - 1 - done ? N - 1 - done : n;
            const rampwise_history out = shifted(&cut.history, done);
            ck_assert_int_eq(rampwise_run(&c, &b, (size_t)n, p + 1 + done, &out, NULL), RAMPWISE_OK);
            done += n;
        }
        ck_assert_mem_eq(&a, &b, sizeof a);
        ck_assert_mem_eq(whole.cell, cut.cell, sizeof whole.cell);
        check_guards(&whole, 0, N - 1);
        ck_assert_int_eq(rampwise_solve(&c, 0.1, -0.2, N, p, &solved.history, NULL), RAMPWISE_OK);
        check_guards(&solved, 0, N);
        for (int j = 0; j < 4; ++j)
            ck_assert_mem_eq(solved.cell[j] + GUARD + 1, whole.cell[j] + GUARD, (N - 1) * sizeof(double));
        for (int j = 0; j < N; ++j) {
            if (j > 0)
                rampwise_step(&c, &s, p[j]);
            ck_assert(solved.history.u[j] == s.u && solved.history.v[j] == s.v);
            ck_assert(solved.history.a[j] == rampwise_acceleration(&c, &s));
            ck_assert(solved.history.total[j] == rampwise_total_acceleration(&c, &s));
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* Around the limit of silence, with coefficients so small that responses stay around theirs: the branch of
   records against the selection of inline steps. */
START_TEST(same_silence)
{
    gsl_rng *const r = random_make("same_silence");
    for (int i = 0; i < 200; ++i) {
        const double dt = random_log(r, 1e-12, 1e-5);
        const rampwise_coeffs c = made(regime_system(i % 5, 0.1, dt), dt, i % 4);
        double p[N], u[N], v[N];
        const rampwise_history out = {u, v, NULL, NULL};
        rampwise_state s = {0, 0, 0, 0}, run = s;
        random_whisper(r, p, N);
        ck_assert_int_eq(rampwise_run(&c, &run, N, p, &out, NULL), RAMPWISE_OK);
        for (int j = 0; j < N; ++j) {
            rampwise_step(&c, &s, p[j]);
            ck_assert_mem_eq(&u[j], &s.u, sizeof(double));
            ck_assert_mem_eq(&v[j], &s.v, sizeof(double));
        }
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(each_output_in_place)
{
    gsl_rng *const r = random_make("each_output_in_place");
    const rampwise_coeffs c = made(regime_system(1, 0.2, 0.01), 0.01, 2);
    double p[N];
    outputs apart;
    outputs_make(&apart);
    random_record(r, p, N);
    ck_assert_int_eq(rampwise_solve(&c, 0, 0, N, p, &apart.history, NULL), RAMPWISE_OK);
    for (int i = 0; i < 4; ++i) {
        double in_place[N], t[N], t_last = -1;
        rampwise_history out = {NULL, NULL, NULL, NULL};
        *(i == 0 ? &out.u : i == 1 ? &out.v : i == 2 ? &out.a : &out.total) = in_place;
        memcpy(in_place, p, sizeof p);
        ck_assert_int_eq(rampwise_solve(&c, 0, 0, N, in_place, &out, NULL), RAMPWISE_OK);
        ck_assert_mem_eq(in_place, apart.cell[i] + GUARD, sizeof p);
        memcpy(in_place, p, sizeof p);
        rampwise_state s = {0, 0, 0, 0}, once = s;
        ck_assert_int_eq(rampwise_run(&c, &once, N, p, NULL, NULL), RAMPWISE_OK);
        for (int j = 0; j < N; ++j)
            t[j] = j;
        const rampwise_coeffs wide = made(c.system, 1, 2);
        double expected[N];
        rampwise_history there = {NULL, NULL, NULL, NULL};
        *(i == 0 ? &there.u : i == 1 ? &there.v : i == 2 ? &there.a : &there.total) = expected;
        rampwise_state again = s;
        ck_assert_int_eq(rampwise_run(&wide, &again, N, p, &there, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, N, t, in_place, &out, NULL), RAMPWISE_OK);
        ck_assert_mem_eq(in_place, expected, sizeof p);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(nothing_to_do)
{
    const rampwise_coeffs c = made(regime_system(1, 0.2, 0.01), 0.01, 0);
    const double p = 2;
    double t_last = 5, u = guard_value;
    const rampwise_history out = {&u, NULL, NULL, NULL};
    rampwise_state s = {1, 2, 3, 4};
    const rampwise_state before = s;
    size_t bad = 77;
    ck_assert_int_eq(rampwise_run(&c, &s, 0, NULL, &out, &bad), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 0, NULL, NULL, &out, &bad), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_solve(&c, 1, 2, 0, NULL, &out, &bad), RAMPWISE_OK);
    ck_assert_mem_eq(&s, &before, sizeof s);
    ck_assert(u == guard_value && t_last == 5 && bad == 77);
    ck_assert_int_eq(rampwise_solve(&c, 1, 2, 1, &p, &out, &bad), RAMPWISE_OK);
    ck_assert(u == 1 && bad == 77);
}
END_TEST

/* All three record calls with one thing wrong: the status, the index, and nothing changed. */
static void refused(const rampwise_coeffs *c, rampwise_state s, const double *t, const double *p, int n,
                    int status, size_t index)
{
    outputs o;
    const rampwise_state before = s;
    double t_last = -1;
    size_t bad = 77;
    outputs_make(&o);
    ck_assert_int_eq(rampwise_run(c, &s, (size_t)n, p, &o.history, &bad), status);
    ck_assert_uint_eq(bad, index);
    bad = 77;
    ck_assert_int_eq(rampwise_run_at(c, &s, &t_last, (size_t)n, t, p, &o.history, &bad), status);
    ck_assert_uint_eq(bad, index);
    bad = 77;
    if (isfinite(s.p)) { /* which rampwise_solve does not take from the caller */
        ck_assert_int_eq(rampwise_solve(c, s.u, s.v, (size_t)n, p, &o.history, &bad), status);
        ck_assert_uint_eq(bad, index);
    }
    ck_assert_int_lt(rampwise_run(c, &s, (size_t)n, p, NULL, NULL), 0);
    ck_assert_mem_eq(&s, &before, sizeof s);
    ck_assert(t_last == -1);
    check_guards(&o, 0, 0);
}

START_TEST(not_finite_anywhere)
{
    static const double wrong[] = {NAN, INFINITY, -INFINITY};
    const rampwise_coeffs c = made(regime_system(1, 0.2, 0.01), 0.01, 0);
    const rampwise_state rest = {0, 0, 0, 0};
    double p[N] = {0}, t[N];
    for (int i = 0; i < N; ++i)
        t[i] = i;
    for (int i = 0; i < N; ++i) {
        p[i] = wrong[i % 3];
        refused(&c, rest, t, p, N, RAMPWISE_ERROR_SAMPLE, (size_t)i);
        p[i] = 0;
    }
    for (int i = 0; i < 3; ++i) {
        refused(&c, (rampwise_state){wrong[i], 0, 0, 0}, t, p, N, RAMPWISE_ERROR_STATE, 77);
        refused(&c, (rampwise_state){0, wrong[i], 0, 0}, t, p, N, RAMPWISE_ERROR_STATE, 77);
        refused(&c, (rampwise_state){0, 0, wrong[i], 0}, t, p, N, RAMPWISE_ERROR_STATE, 77);
    }
}
END_TEST

START_TEST(wrong_calls)
{
    const rampwise_coeffs never_made = {0};
    const rampwise_coeffs c = made(regime_system(1, 0.2, 0.01), 0.01, 0);
    const rampwise_state rest = {0, 0, 0, 0};
    rampwise_state s = rest;
    const double p[3] = {1, 2, 3}, t[3] = {1, 2, 3};
    double t_last = 0, never = NAN;
    refused(&never_made, rest, t, p, 3, RAMPWISE_ERROR_NOT_MADE, 77);
    ck_assert_int_eq(rampwise_run(NULL, &s, 3, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run(&c, NULL, 3, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run(&c, &s, 3, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_solve(NULL, 0, 0, 3, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_solve(&c, 0, 0, 3, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_at(&c, &s, NULL, 3, t, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 3, NULL, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 3, t, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &never, 3, t, p, NULL, NULL), RAMPWISE_ERROR_TIME);
    ck_assert_mem_eq(&s, &rest, sizeof s);
}
END_TEST

/* A motion that grows: everything before the sample at fault as if the record ended there. */
START_TEST(overflow)
{
    const rampwise_coeffs c = made((rampwise_system){1, 0, -100}, 1, 0);
    double p[N], t[N], t_last = 0;
    outputs o, shorter;
    size_t bad = 0;
    for (int i = 0; i < N; ++i) {
        p[i] = 1;
        t[i] = i + 1;
    }
    outputs_make(&o);
    rampwise_state s = {0, 0, 0, 0};
    ck_assert_int_eq(rampwise_run(&c, &s, N, p, &o.history, &bad), RAMPWISE_ERROR_OVERFLOW);
    const size_t first = bad;
    /* cosh(10 n) passes 2^1024 at n = 71; a = 100 u a little before */
    ck_assert_uint_ge(first, 69);
    ck_assert_uint_le(first, 71);
    check_guards(&o, 0, (int)first);
    outputs_make(&shorter);
    rampwise_state before = {0, 0, 0, 0};
    ck_assert_int_eq(rampwise_run(&c, &before, bad, p, &shorter.history, NULL), RAMPWISE_OK);
    ck_assert_mem_eq(&s, &before, sizeof s);
    ck_assert_mem_eq(o.cell, shorter.cell, sizeof o.cell);
    s = (rampwise_state){0, 0, 0, 0};
    outputs_make(&o);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, N, t, p, &o.history, &bad), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, first);
    ck_assert(t_last == (double)first);
    ck_assert_mem_eq(&s, &before, sizeof s);
    ck_assert_mem_eq(o.cell, shorter.cell, sizeof o.cell);
    /* An acceleration that overflows counts only where it is wanted. */
    const rampwise_history only_u = {o.history.u, NULL, NULL, NULL};
    s = (rampwise_state){0, 0, 0, 0};
    ck_assert_int_eq(rampwise_run(&c, &s, N, p, &only_u, &bad), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_ge(bad, first);
    ck_assert(isfinite(s.u) && isfinite(s.v));
}
END_TEST

START_TEST(overflow_at_entry_zero)
{
    const rampwise_coeffs c = made((rampwise_system){0x1p-200, 0, 1}, 0x1p-90, 0);
    const double p[2] = {0x1p1000, 0};
    double u[2] = {7, 7}, a[2] = {7, 7};
    const rampwise_history out = {u, NULL, a, NULL};
    size_t bad = 77;
    ck_assert_int_eq(rampwise_solve(&c, 0, 0, 2, p, &out, &bad), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, 0);
    ck_assert(u[0] == 7 && a[0] == 7 && u[1] == 7 && a[1] == 7);
}
END_TEST

/* Intervals of exactly dt: the bits of rampwise_run, times and cutting included. */
START_TEST(regular_times)
{
    gsl_rng *const r = random_make("regular_times");
    const double dt = 0x1p-10;
    for (int i = 0; i < KINDS * REGIMES; ++i) {
        const rampwise_system sys = regime_system(i % REGIMES, 0.2, dt);
        if (!kind_allowed(&sys, i / REGIMES))
            continue;
        const rampwise_coeffs c = made(sys, dt, i / REGIMES);
        double p[N], t[N], t_last = 100 - dt;
        outputs run, at;
        outputs_make(&run);
        outputs_make(&at);
        random_record(r, p, N);
        for (int j = 0; j < N; ++j)
            t[j] = 100 + j * dt;
        rampwise_state a = {0, 0, 0, 0}, b = a;
        ck_assert_int_eq(rampwise_run(&c, &a, N, p, &run.history, NULL), RAMPWISE_OK);
        for (int done = 0; done < N;) {
            const int n = (int)gsl_rng_uniform_int(r, 60);
            const int take = n > N - done ? N - done : n;
            const rampwise_history out = shifted(&at.history, done);
            ck_assert_int_eq(rampwise_run_at(&c, &b, &t_last, (size_t)take, t + done, p + done, &out, NULL),
                             RAMPWISE_OK);
            done += take;
        }
        ck_assert(t_last == t[N - 1]);
        ck_assert_mem_eq(&a, &b, sizeof a);
        ck_assert_mem_eq(run.cell, at.cell, sizeof run.cell);
    }
    gsl_rng_free(r);
}
END_TEST

/* Any intervals, more lengths than are remembered: each step has the bits of a step of its length,
   and the state reads its accelerations with the caller's coefficients. */
START_TEST(irregular_times)
{
    gsl_rng *const r = random_make("irregular_times");
    for (int i = 0; i < KINDS * REGIMES; ++i) {
        const rampwise_system sys = regime_system(i % REGIMES, 0.2, 0.01);
        if (!kind_allowed(&sys, i / REGIMES))
            continue;
        const rampwise_coeffs c = made(sys, 0.01, i / REGIMES);
        double p[N], t[N], t_last = 0;
        outputs o;
        outputs_make(&o);
        random_record(r, p, N);
        for (int j = 0; j < N; ++j)
            t[j] = (j > 0 ? t[j - 1] : 0) + 0x1p-10 * (double)(1 + gsl_rng_uniform_int(r, 13));
        rampwise_state s = {0, 0, 0, 0}, all = s;
        ck_assert_int_eq(rampwise_run_at(&c, &all, &t_last, N, t, p, &o.history, NULL), RAMPWISE_OK);
        for (int j = 0; j < N; ++j) {
            const rampwise_coeffs part = made(sys, t[j] - (j > 0 ? t[j - 1] : 0), i / REGIMES);
            rampwise_step(&part, &s, p[j]);
            ck_assert(o.history.u[j] == s.u && o.history.v[j] == s.v);
            ck_assert(o.history.a[j] == rampwise_acceleration(&part, &s));
            ck_assert(o.history.total[j] == rampwise_total_acceleration(&part, &s));
        }
        ck_assert(all.u == s.u && all.v == s.v && all.p == s.p);
        /* The slope through p_before rounds with p and with the quotient of the intervals. */
        const double slope_error = 8 * DBL_EPSILON * (fabs(all.p) + fabs(all.p_before)) / c.dt;
        ck_assert_double_le(fabs(rampwise_acceleration(&c, &all) - o.history.a[N - 1]),
                            slope_error * (1 + sys.damper / sys.mass) +
                                8 * DBL_EPSILON *
                                    (fabs(o.history.a[N - 1]) + fabs(sys.stiffness / sys.mass * all.u)));
    }
    gsl_rng_free(r);
}
END_TEST

static void refused_times(const rampwise_coeffs *c, const double *t, int n, int status, size_t index)
{
    static const double p[N];
    const rampwise_state before = {1, 2, 0, 0};
    rampwise_state s = before;
    double t_last = 0;
    size_t bad = 77;
    outputs o;
    outputs_make(&o);
    ck_assert_int_eq(rampwise_run_at(c, &s, &t_last, (size_t)n, t, p, &o.history, &bad), status);
    ck_assert_uint_eq(bad, index);
    ck_assert_mem_eq(&s, &before, sizeof s);
    ck_assert(t_last == 0);
    check_guards(&o, 0, 0);
}

START_TEST(wrong_times)
{
    const rampwise_coeffs c = made(regime_system(1, 0.2, 0.01), 0.01, 0);
    refused_times(&c, (const double[]){1, 2, 2, 3}, 4, RAMPWISE_ERROR_TIME, 2);
    refused_times(&c, (const double[]){0, 2, 3, 4}, 4, RAMPWISE_ERROR_TIME, 0);
    refused_times(&c, (const double[]){1, 2, 3, 2.5}, 4, RAMPWISE_ERROR_TIME, 3);
    refused_times(&c, (const double[]){1, NAN, 3, 4}, 4, RAMPWISE_ERROR_TIME, 1);
    refused_times(&c, (const double[]){1, 2, 3, INFINITY}, 4, RAMPWISE_ERROR_TIME, 3);
    const rampwise_coeffs falling = made((rampwise_system){1, 0, -100}, 0.01, 0);
    refused_times(&falling, (const double[]){1, 2, 102, 103}, 4, RAMPWISE_ERROR_COEFFICIENT, 2);
    const rampwise_coeffs stiff = made((rampwise_system){1, 0, 1e20}, 1e-11, 0);
    refused_times(&stiff, (const double[]){1, 2, 1e9, 2e9}, 4, RAMPWISE_ERROR_STEP_LENGTH, 3);
    const rampwise_coeffs moved = made((rampwise_system){1, 0, 1}, 0.01, 4);
    refused_times(&moved, (const double[]){DBL_TRUE_MIN, 1, 2}, 3, RAMPWISE_ERROR_COEFFICIENT, 0);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, same_bits_however_cut);
    tcase_add_test(tests, same_silence);
    tcase_add_test(tests, each_output_in_place);
    tcase_add_test(tests, nothing_to_do);
    tcase_add_test(tests, not_finite_anywhere);
    tcase_add_test(tests, wrong_calls);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, overflow_at_entry_zero);
    tcase_add_test(tests, regular_times);
    tcase_add_test(tests, irregular_times);
    tcase_add_test(tests, wrong_times);
}

int main(void)
{
    return suite_run("records", add_tests);
}
