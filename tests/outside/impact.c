/* Measured impact data at irregular times: tests/data/motor.csv (its source is written there)
   against GSL's differential equation driver, and the same data before its repeated times were
   dropped, `mcycle` of the R package MASS, which must be refused. mcycle is not ours to hand on, so
   R is asked for it while the test runs; without R or that package the test fails. */
#define _POSIX_C_SOURCE 200809L /* popen */
#include <stdio.h>
#include <string.h>
#include "../support/suite.h"
#include "integrated.h"

static const char motor_file[] = TEST_DATA "/motor.csv";
static const char mcycle_command[] =
    "Rscript -e 'write.table(MASS::mcycle, sep = \",\", row.names = FALSE, col.names = FALSE)'";

enum { ROWS = 200, MOTOR_ROWS = 94, MCYCLE_ROWS = 133 };

/* Times in ms, accelerations in g: displacements come out in g ms^2, velocities in g ms. */
typedef struct impact {
    size_t n;
    double t[ROWS], p[ROWS];
} impact;

/* Lines of two numbers; lines that begin with # are comments. */
static void read_rows(FILE *from, impact *data)
{
    char line[256];
    data->n = 0;
    while (fgets(line, sizeof line, from) != NULL) {
        if (line[0] == '#')
            continue;
        ck_assert_uint_lt(data->n, ROWS);
        ck_assert_int_eq(sscanf(line, "%lf,%lf", &data->t[data->n], &data->p[data->n]), 2);
        ++data->n;
    }
}

static void read_motor(impact *data)
{
    FILE *const file = fopen(motor_file, "r");
    ck_assert_msg(file != NULL, "%s is missing", motor_file);
    read_rows(file, data);
    ck_assert_int_eq(fclose(file), 0);
    ck_assert_uint_eq(data->n, MOTOR_ROWS);
}

static void read_mcycle(impact *data)
{
    FILE *const pipe = popen(mcycle_command, "r");
    ck_assert_msg(pipe != NULL, "cannot start Rscript");
    read_rows(pipe, data);
    ck_assert_msg(pclose(pipe) == 0, "R with the package MASS is needed");
    ck_assert_uint_eq(data->n, MCYCLE_ROWS);
}

/* What the table is known to hold: range, and steps from 0.2 to 2.2 ms given to one decimal. */
START_TEST(motor_is_whole)
{
    impact data;
    double low = 0, high = 0, shortest = INFINITY, longest = 0;
    read_motor(&data);
    for (size_t i = 0; i < data.n; ++i) {
        low = fmin(low, data.p[i]);
        high = fmax(high, data.p[i]);
        if (i > 0) {
            shortest = fmin(shortest, data.t[i] - data.t[i - 1]);
            longest = fmax(longest, data.t[i] - data.t[i - 1]);
        }
    }
    ck_assert(data.t[0] == 2.4 && data.t[data.n - 1] == 57.6);
    ck_assert(low == -134 && high == 75);
    ck_assert_double_eq(round(10 * shortest), 2);
    ck_assert_double_eq(round(10 * longest), 22);
}
END_TEST

/* mcycle with the first reading of each time. */
START_TEST(motor_is_mcycle_without_repeats)
{
    impact motor, mcycle;
    size_t kept = 0;
    read_motor(&motor);
    read_mcycle(&mcycle);
    for (size_t i = 0; i < mcycle.n; ++i) {
        if (i > 0 && mcycle.t[i] == mcycle.t[i - 1])
            continue;
        ck_assert_uint_lt(kept, motor.n);
        ck_assert(motor.t[kept] == mcycle.t[i] && motor.p[kept] == mcycle.p[i]);
        ++kept;
    }
    ck_assert_uint_eq(kept, motor.n);
}
END_TEST

/* The library's history at the times of the data. c->dt is one that occurs among the intervals. */
static void respond(const rampwise_system *sys, const impact *data, double out[4][ROWS])
{
    rampwise_coeffs c;
    rampwise_state s;
    size_t bad = 0;
    double t_last = data->t[0];
    const rampwise_history history = {out[0] + 1, out[1] + 1, out[2] + 1, out[3] + 1};
    ck_assert_int_eq(
        rampwise_coeffs_make(&c, sys, data->t[1] - data->t[0], RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
        RAMPWISE_OK);
    rampwise_start(&s, 0, 0, data->p[0]);
    ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, data->n - 1, data->t + 1, data->p + 1, &history, &bad),
                     RAMPWISE_OK);
    ck_assert_double_eq(t_last, data->t[data->n - 1]);
    ck_assert_double_eq(s.u, out[0][data->n - 1]);
}

/* How the comparison went, for each output: the largest tolerance, size, error in tolerances. */
typedef struct tally {
    double widest[4], size[4], worst[4];
} tally;

static void compare(const integrated *e, double ours[4][ROWS], size_t i, tally *t)
{
    integrated_value exact[MOTIONS];
    integrated_motion(e, exact);
    for (int j = 0; j < 4; ++j) {
        const double error = fabs(ours[j][i] - exact[j].value);
        ck_assert_msg(error <= exact[j].tolerance, "output %d, sample %zu: %.17g, GSL %.17g", j, i,
                      ours[j][i], exact[j].value);
        t->widest[j] = fmax(t->widest[j], exact[j].tolerance);
        t->size[j] = fmax(t->size[j], exact[j].size);
        t->worst[j] = fmax(t->worst[j], error / exact[j].tolerance);
    }
}

/* Each tolerance must stay small beside what it belongs to: the driver takes 25 steps of its own
   between two times at most, 2300 in all, and allows 1.1e-12 of the size in each; twice that, 5e-9
   in all, where an error of v leads to one of u. */
static void compare_motor(const rampwise_system *sys, const impact *data)
{
    double ours[4][ROWS];
    tally t = {0};
    integrated e;
    respond(sys, data, ours);
    integrated_init(&e, sys, RAMPWISE_BASE_ACCELERATION, 134, 0.6, 55.2);
    integrated_start(&e, 0, 0, data->p[0]);
    for (size_t i = 1; i < data->n; ++i) {
        const double h = data->t[i] - data->t[i - 1];
        integrated_ramp(&e, data->p[i - 1], data->p[i], h);
        integrated_to(&e, h);
        compare(&e, ours, i, &t);
    }
    printf("%lu steps of GSL's; largest tolerance in the size, error in tolerances:", e.steps);
    for (int j = 0; j < 4; ++j) {
        ck_assert_double_le(t.widest[j], 5e-9 * t.size[j]);
        printf(" %.1e, %.3f;", t.widest[j] / t.size[j], t.worst[j]);
    }
    printf("\n");
    integrated_clear(&e);
}

/* From 5 Hz, which hardly moves within the record, to 1 kHz, which follows it. */
START_TEST(motor_against_gsl)
{
    static const double hertz[] = {5, 10, 20, 50, 100, 250, 1000}, zeta[] = {0, 0.05, 0.3, 1, 2};
    impact data;
    read_motor(&data);
    for (size_t i = 0; i < sizeof hertz / sizeof *hertz; ++i)
        for (size_t j = 0; j < sizeof zeta / sizeof *zeta; ++j) {
            rampwise_system sys;
            ck_assert_int_eq(rampwise_system_hertz(&sys, hertz[i] / 1000, zeta[j]), RAMPWISE_OK);
            printf("%g Hz, zeta %g: ", hertz[i], zeta[j]);
            compare_motor(&sys, &data);
        }
}
END_TEST

static size_t first_repeat(const impact *data)
{
    size_t i = 1;
    while (i < data->n && data->t[i] > data->t[i - 1])
        ++i;
    return i;
}

/* A state, its time and outputs, to be found again as they were. */
typedef struct run {
    rampwise_state s;
    double t_last, out[4][ROWS];
} run;

static run fresh_run(void)
{
    run r;
    memset(&r, 0, sizeof r);
    rampwise_start(&r.s, 3, -2, 1);
    for (int j = 0; j < 4; ++j)
        for (int i = 0; i < ROWS; ++i)
            r.out[j][i] = 1000 * j + i;
    return r;
}

START_TEST(repeated_times_are_refused)
{
    impact data;
    rampwise_system sys;
    rampwise_coeffs c;
    size_t bad = ROWS;
    run r = fresh_run();
    const run before = r;
    const rampwise_history history = {r.out[0], r.out[1], r.out[2], r.out[3]};
    read_mcycle(&data);
    const size_t repeat = first_repeat(&data);
    ck_assert_uint_lt(repeat, data.n);
    ck_assert_int_eq(rampwise_system_hertz(&sys, 0.02, 0.05), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, 0.2, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_run_at(&c, &r.s, &r.t_last, data.n, data.t, data.p, &history, &bad),
                     RAMPWISE_ERROR_TIME);
    ck_assert_uint_eq(bad, repeat);
    ck_assert_mem_eq(&r, &before, sizeof r);
    ck_assert_int_eq(rampwise_run_at(&c, &r.s, &r.t_last, repeat, data.t, data.p, &history, &bad),
                     RAMPWISE_OK);
    ck_assert_double_eq(r.t_last, data.t[repeat - 1]);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, motor_is_whole);
    tcase_add_test(tests, motor_is_mcycle_without_repeats);
    tcase_add_test(tests, motor_against_gsl);
    tcase_add_test(tests, repeated_times_are_refused);
}

int main(void)
{
    return suite_run("impact data at irregular times", add_tests);
}
