/* Frames of channels and many records: each with the bits of rampwise_run alone, for every number of lanes
   and samples left over, in place too; overflow in one leaves the others alone; refusals change nothing. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MOST = 70, N = 77 };

typedef struct channel_test {
    rampwise_coeffs c[MOST];
    rampwise_state s[MOST];
    double p[MOST * N], out[4][MOST * N], alone[4][MOST][N];
    size_t reached[MOST];
    rampwise_state end[MOST];
} channel_test;

static channel_test t;

static size_t place(int frames, int channels, int n, int j, int i)
{
    return (size_t)(frames ? i * channels + j : j * n + i);
}

/* Channels of all kinds and regimes (frames), or one oscillator (records); some of them run away. */
static void prepare(gsl_rng *r, int frames, int channels, int n, int runaways)
{
    random_fill(r, t.p, (size_t)(channels * n));
    for (int j = 0; j < channels; ++j) {
        const int kind = frames ? j % (KINDS - 1) : 2;
        t.c[j] = made(regime_system(frames ? j % 7 : 1, 0.3, 0.01), 0.01, kind);
        if (runaways && frames && j % 9 == 4)
            t.c[j] = made((rampwise_system){1, 0, -9e7}, 0.01, 0);
        rampwise_start(&t.s[j], 0.01 * j, -0.1, 0.5);
        if (runaways && frames && j % 9 == 7) /* u'' overflows again and again, u never */
            t.c[j] = made((rampwise_system){1e-10, 0, 1e10}, 0.01, 0);
        if (runaways && !frames && j % 9 == 4)
            t.s[j].u = 1e305 * (j + 1);
        for (int i = 0; i < n; ++i) {
            if (runaways && frames && j % 9 == 7)
                t.p[place(frames, channels, n, j, i)] = i % 11 == 10 ? 1e300 : 0;
            if (j % 3 == 0 && i > n / 4 && i < n / 2)
                t.p[place(frames, channels, n, j, i)] = 0;
            if (runaways && !frames && j % 9 == 4)
                t.p[place(frames, channels, n, j, i)] = i == n / 2 ? -DBL_MAX : i == n / 2 + 1 ? DBL_MAX : 0;
        }
    }
    memset(t.out, 0, sizeof t.out);
    memset(t.alone, 0, sizeof t.alone);
}

static size_t by_themselves(int frames, int channels, int n)
{
    size_t smallest = SIZE_MAX;
    for (int j = 0; j < channels; ++j) {
        double column[N];
        const rampwise_history out = {t.alone[0][j], t.alone[1][j], t.alone[2][j], t.alone[3][j]};
        t.reached[j] = (size_t)n;
        t.end[j] = t.s[j];
        for (int i = 0; i < n; ++i)
            column[i] = t.p[place(frames, channels, n, j, i)];
        rampwise_run(&t.c[j], &t.end[j], (size_t)n, column, &out, &t.reached[j]);
        if (t.reached[j] < (size_t)n) {
            const size_t index = place(frames, channels, n, j, (int)t.reached[j]);
            smallest = index < smallest ? index : smallest;
        }
    }
    return smallest;
}

static int run(int frames, int channels, int n, const rampwise_history *out, size_t *bad)
{
    if (frames)
        return rampwise_run_frames((size_t)channels, t.c, t.s, (size_t)n, t.p, out, bad);
    return rampwise_run_records(t.c, (size_t)channels, t.s, (size_t)n, t.p, out, bad);
}

static void check(int frames, int channels, int n, int only)
{
    for (int j = 0; j < channels; ++j) {
        ck_assert_mem_eq(&t.s[j], &t.end[j], sizeof t.s[j]);
        for (int i = 0; i < n; ++i)
            for (int k = 0; k < 4; ++k)
                if (only < 0 || only == k)
                    ck_assert((only < 0 ? t.out[k] : t.p)[place(frames, channels, n, j, i)] ==
                              t.alone[k][j][i]);
    }
}

START_TEST(as_alone)
{
    gsl_rng *const r = random_make("as_alone");
    const rampwise_history out = {t.out[0], t.out[1], t.out[2], t.out[3]};
    for (int i = 0; i < 400; ++i) {
        const int frames = i % 2, channels = 1 + (int)gsl_rng_uniform_int(r, MOST);
        const int n = (int)gsl_rng_uniform_int(r, N + 1);
        prepare(r, frames, channels, n, 0);
        ck_assert_uint_eq(by_themselves(frames, channels, n), SIZE_MAX);
        ck_assert_int_eq(run(frames, channels, n, &out, NULL), RAMPWISE_OK);
        check(frames, channels, n, -1);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(same_silence)
{
    gsl_rng *const r = random_make("same_silence");
    const rampwise_history out = {t.out[0], t.out[1], t.out[2], t.out[3]};
    for (int i = 0; i < 100; ++i) {
        const int frames = i % 2, channels = 1 + (int)gsl_rng_uniform_int(r, MOST);
        const double dt = random_log(r, 1e-12, 1e-5);
        prepare(r, frames, channels, N, 0);
        random_whisper(r, t.p, (size_t)(channels * N));
        for (int j = 0; j < channels; ++j) {
            t.c[j] = made(regime_system(frames ? j % 5 : 1, 0.1, dt), dt, i % 4);
            t.s[j] = (rampwise_state){0, 0, 0, 0};
        }
        by_themselves(frames, channels, N);
        ck_assert_int_eq(run(frames, channels, N, &out, NULL), RAMPWISE_OK);
        check(frames, channels, N, -1);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(in_place)
{
    gsl_rng *const r = random_make("in_place");
    for (int i = 0; i < 80; ++i) {
        const int frames = i % 2, channels = 1 + (int)gsl_rng_uniform_int(r, MOST), only = i / 2 % 4;
        rampwise_history out = {NULL, NULL, NULL, NULL};
        *(only == 0 ? &out.u : only == 1 ? &out.v : only == 2 ? &out.a : &out.total) = t.p;
        prepare(r, frames, channels, N, 0);
        by_themselves(frames, channels, N);
        ck_assert_int_eq(run(frames, channels, N, &out, NULL), RAMPWISE_OK);
        check(frames, channels, N, only);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(overflow)
{
    gsl_rng *const r = random_make("overflow");
    const rampwise_history out = {t.out[0], t.out[1], t.out[2], t.out[3]};
    for (int i = 0; i < 40; ++i) {
        const int frames = i % 2, channels = 5 + (int)gsl_rng_uniform_int(r, MOST - 4);
        size_t bad = 0;
        prepare(r, frames, channels, N, 1);
        const size_t smallest = by_themselves(frames, channels, N);
        ck_assert_uint_ne(smallest, SIZE_MAX);
        ck_assert_int_eq(run(frames, channels, N, &out, &bad), RAMPWISE_ERROR_OVERFLOW);
        ck_assert_uint_eq(bad, smallest);
        check(frames, channels, N, -1);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(refusals)
{
    gsl_rng *const r = random_make("refusals");
    const rampwise_history out = {t.out[0], t.out[1], t.out[2], t.out[3]};
    rampwise_state before[MOST];
    size_t bad = 77;
    for (int frames = 0; frames < 2; ++frames) {
        prepare(r, frames, 40, 30, 0);
        memcpy(before, t.s, sizeof before);
        for (size_t i = 0; i < 1200; i += 7) {
            const double good = t.p[i];
            t.p[i] = i % 2 ? NAN : INFINITY;
            ck_assert_int_eq(run(frames, 40, 30, &out, &bad), RAMPWISE_ERROR_SAMPLE);
            ck_assert_uint_eq(bad, i);
            t.p[i] = good;
        }
        t.s[17].v = NAN;
        ck_assert_int_eq(run(frames, 40, 30, &out, NULL), RAMPWISE_ERROR_STATE);
        t.s[17] = before[17];
        ck_assert_mem_eq(t.s, before, sizeof before);
        for (int k = 0; k < 4; ++k)
            for (int i = 0; i < 1200; ++i)
                ck_assert(t.out[k][i] == 0);
    }
    t.c[2].dt = 0.02;
    ck_assert_int_eq(run(1, 40, 30, &out, NULL), RAMPWISE_ERROR_DIFFERENT);
    memset(&t.c[0], 0, sizeof t.c[0]);
    ck_assert_int_eq(run(1, 40, 30, &out, NULL), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(run(0, 40, 30, &out, NULL), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_run_frames(1, NULL, t.s, 3, t.p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_frames(1, t.c, NULL, 3, t.p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_frames(1, t.c, t.s, 3, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_records(NULL, 1, t.s, 3, t.p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_records(t.c, 1, NULL, 3, t.p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_records(t.c, 1, t.s, 3, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_frames(0, NULL, NULL, 9, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_run_records(t.c + 1, 0, NULL, 9, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_mem_eq(t.s, before, sizeof before);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, as_alone);
    tcase_add_test(tests, same_silence);
    tcase_add_test(tests, in_place);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, refusals);
}

int main(void)
{
    return suite_run("channels", add_tests);
}
