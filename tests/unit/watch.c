/* Watches: tables of levels, hysteresis and latch; queues, windows, resets, saving, refusals. What lies
   between samples is checked against quad precision in tests/property/watch_exact.c. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { N = 300, EVENTS = 64 };

static rampwise_coeffs coeffs_of(int kind, double theta)
{
    return made(regime_system(kind == KINDS - 1 ? 0 : 1, theta, 0.01), 0.01, kind);
}

static rampwise_watch_options options_of(int quantity)
{
    rampwise_watch_options o;
    rampwise_watch_options_init(&o);
    o.output.quantity = quantity;
    return o;
}

/* The load itself is watched: a line from sample to sample, so every instant is known by hand. */
typedef struct bench {
    rampwise_coeffs c;
    rampwise_stream stream;
    rampwise_watch watch;
    rampwise_event event[EVENTS];
} bench;

static void bench_make(bench *b, rampwise_level level)
{
    rampwise_stream_options o;
    rampwise_watch_options w = options_of(RAMPWISE_LOAD);
    rampwise_stream_options_init(&o);
    b->c = coeffs_of(0, 0.1);
    w.level[0] = level;
    w.level_count = 1;
    w.number = 9;
    w.events = b->event;
    w.event_capacity = EVENTS;
    ck_assert_int_eq(rampwise_stream_init(&b->stream, &b->c, &o), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_init(&b->watch, &b->c, &w), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_attach(&b->stream, &b->watch), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_attach(&b->stream, &b->watch), RAMPWISE_OK); /* is attached already */
}

static void put(bench *b, double p)
{
    ck_assert_int_eq(rampwise_stream_put(&b->stream, 1, &p, NULL, NULL, NULL), RAMPWISE_OK);
}

static rampwise_level_report report_of(const bench *b)
{
    rampwise_level_report report;
    ck_assert_int_eq(rampwise_watch_level(&b->watch, 0, &report), RAMPWISE_OK);
    return report;
}

/* A row: the next sample, and how the level stands then; where an event is told, its instant and direction. */
typedef struct row {
    double p;
    int beyond;
    uint64_t passed, cycles;
    int direction; /* 0: no event */
    uint64_t sample;
    double fraction, value;
} row;

static void check_rows(rampwise_level level, double sign, const row *rows, size_t count)
{
    bench b;
    bench_make(&b, level);
    for (size_t i = 0; i < count; ++i) {
        const row *const want = &rows[i];
        rampwise_event event[2];
        put(&b, sign * want->p);
        const rampwise_level_report report = report_of(&b);
        ck_assert_msg(report.beyond == want->beyond && report.passed == want->passed &&
                          report.cycles == want->cycles,
                      "row %zu: %d %d %d", i, report.beyond, (int)report.passed, (int)report.cycles);
        ck_assert_int_eq(report.tripped, level.latch ? report.passed > 0 : report.beyond);
        const size_t told = rampwise_watch_events(&b.watch, 2, event);
        ck_assert_uint_eq(told, want->direction != 0);
        if (told == 0)
            continue;
        ck_assert_int_eq(event[0].kind, RAMPWISE_EVENT_LEVEL);
        ck_assert_int_eq(event[0].level, 0);
        ck_assert_int_eq(event[0].output, 9);
        ck_assert_int_eq(event[0].direction, sign > 0 ? want->direction : -want->direction);
        ck_assert_uint_eq(event[0].sample, want->sample);
        ck_assert(fabs(event[0].fraction - want->fraction) <= 4 * DBL_EPSILON);
        ck_assert(event[0].value == sign * want->value);
    }
}

static void check_both_ways(double value, double hysteresis, int latch, const row *rows, size_t count)
{
    check_rows((rampwise_level){value, hysteresis, 1, latch}, 1, rows, count);
    check_rows((rampwise_level){-value, hysteresis, -1, latch}, -1, rows, count);
}

#define ROWS(rows) (rows), sizeof(rows) / sizeof *(rows)

START_TEST(without_hysteresis)
{
    static const row rows[] = {
        {0, 0, 0, 0, 0, 0, 0, 0},    {2, 1, 1, 0, 1, 0, 0.5, 1},   {3, 1, 1, 0, 0, 0, 0, 0},
        {1, 1, 1, 0, 0, 0, 0, 0},                               /* equal counts as beyond */
        {1, 1, 1, 0, 0, 0, 0, 0},    {0, 0, 1, 1, -1, 4, 0, 1}, /* leaves at once */
        {0.5, 0, 1, 1, 0, 0, 0, 0},  {1, 1, 2, 1, 1, 7, 0, 1},  /* touches */
        {0.5, 0, 2, 2, -1, 7, 0, 1}, {1.5, 1, 3, 2, 1, 8, 0.5, 1}, {-2.5, 0, 3, 3, -1, 9, 0.125, 1},
    };
    check_both_ways(1, 0, 0, ROWS(rows));
    check_both_ways(1, 0, 1, ROWS(rows));
}
END_TEST

START_TEST(with_hysteresis)
{
    static const row rows[] = {
        {2, 1, 1, 0, 1, 0, 0, 2},   /* begins beyond: passed at its first sample */
        {0.5, 1, 1, 0, 0, 0, 0, 0}, /* within the hysteresis, its edge too */
        {2, 1, 1, 0, 0, 0, 0, 0},           {0, 0, 1, 1, -1, 2, 0.75, 0.5}, {0.75, 0, 1, 1, 0, 0, 0, 0},
        {0.25, 0, 1, 1, 0, 0, 0, 0},        {1.25, 1, 2, 1, 1, 5, 0.75, 1}, {0.75, 1, 2, 1, 0, 0, 0, 0},
        {-0.25, 0, 2, 2, -1, 7, 0.25, 0.5},
    };
    check_both_ways(1, 0.5, 0, ROWS(rows));
    check_both_ways(1, 0.5, 1, ROWS(rows));
}
END_TEST

/* States of the latch: released while beyond it holds; released after the return it lets go. */
START_TEST(latch)
{
    static const struct {
        double p;
        int release, beyond, tripped;
    } rows[] = {{0, 0, 0, 0}, {0, 1, 0, 0}, {2, 0, 1, 1}, {2, 1, 1, 1}, {0, 0, 0, 1}, {0, 1, 0, 0},
                {2, 0, 1, 1}, {0, 0, 0, 1}, {2, 0, 1, 1}, {0, 1, 0, 0}, {0, 0, 0, 0}};
    bench b;
    bench_make(&b, (rampwise_level){1, 0, 1, 1});
    for (size_t i = 0; i < sizeof rows / sizeof *rows; ++i) {
        put(&b, rows[i].p);
        if (rows[i].release)
            ck_assert_int_eq(rampwise_watch_release(&b.watch, 0), RAMPWISE_OK);
        ck_assert_int_eq(report_of(&b).beyond, rows[i].beyond);
        ck_assert_int_eq(report_of(&b).tripped, rows[i].tripped);
    }
    ck_assert_int_eq(rampwise_watch_release(&b.watch, 1), RAMPWISE_ERROR_COUNT);
}
END_TEST

/* The oldest events stay, later ones are lost and counted; flags of the step are in the event. */
START_TEST(queue)
{
    bench b;
    uint64_t lost, resets;
    rampwise_event event[EVENTS + 2];
    bench_make(&b, (rampwise_level){0.5, 0, 1, 0});
    for (int i = 0; i < EVENTS + 10; ++i)
        put(&b, i % 2);
    ck_assert_int_eq(rampwise_watch_counts(&b.watch, &lost, &resets), RAMPWISE_OK);
    ck_assert_uint_eq(lost, 9);
    ck_assert_uint_eq(resets, 0);
    ck_assert_uint_eq(rampwise_watch_events(&b.watch, 5, event), 5);
    ck_assert_uint_eq(event[4].sample, 4);
    const double bridged[2] = {NAN, 0};
    ck_assert_int_eq(rampwise_stream_put(&b.stream, 2, bridged, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_uint_eq(rampwise_watch_events(&b.watch, EVENTS + 2, event), EVENTS - 5 + 1);
    ck_assert_uint_eq(event[0].sample, 5);
    /* A line over two steps, from 1 to 0: half the way is a whole sample. */
    const rampwise_event *const last = &event[EVENTS - 5];
    ck_assert_uint_eq(last->sample, EVENTS + 10);
    ck_assert(last->fraction == 0 && last->flags == RAMPWISE_BRIDGED && last->direction == -1);
    ck_assert_uint_eq(rampwise_watch_events(&b.watch, 1, event), 0);
}
END_TEST

/* A free unit mass, v0 = 0.16, under p = -1 + 2 t over one step of 1: u = 0.16 t - t^2/2 + t^3/3 rises until 0.2, falls until
   0.8, and rises, with the slope up at both ends. Powers of ten in binary: 8 ulp of the largest term, 0.5. */
START_TEST(two_extremes_in_a_step)
{
    const double tolerance = 8 * DBL_EPSILON / 2;
    const rampwise_coeffs c = made((rampwise_system){1, 0, 0}, 1, 0);
    rampwise_watch watch;
    rampwise_watch_options o = options_of(RAMPWISE_DISPLACEMENT);
    rampwise_event event[4], got[4];
    rampwise_state s = {0, 0.16, -1, -1}, before = s;
    rampwise_peak peak;
    o.level[0] = (rampwise_level){-0.02, 0, -1, 0};
    o.level_count = 1;
    o.events = event;
    o.event_capacity = 4;
    ck_assert_int_eq(rampwise_watch_init(&watch, &c, &o), RAMPWISE_OK);
    rampwise_step(&c, &s, 1);
    rampwise_watch_step(&watch, &c, &before, &s, 7, 1, 0);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_OK);
    ck_assert(fabs(peak.high.value - 0.044 / 3) <= tolerance &&
              fabs(peak.low.value + 0.064 / 3) <= tolerance);
    ck_assert(peak.high.sample == 7 && peak.low.sample == 7);
    ck_assert(fabs(peak.high.fraction - 0.2) <= 1e-14 && fabs(peak.low.fraction - 0.8) <= 1e-14);
    ck_assert_uint_eq(rampwise_watch_events(&watch, 4, got), 2);
    for (int i = 0; i < 2; ++i) {
        const double t = got[i].fraction, u = t * (0.16 + t * (-0.5 + t / 3));
        ck_assert(got[i].sample == 7 && got[i].direction == (i == 0 ? -1 : 1) && (t < 0.8) == (i == 0));
        ck_assert(fabs(u + 0.02) <= tolerance);
    }
}
END_TEST

/* The window against a search through the last steps: the load is greatest and least at samples. */
START_TEST(window)
{
    gsl_rng *const r = random_make("window");
    static const size_t lengths[] = {1, 2, 3, 7, 64, 200};
    for (int i = 0; i < 6; ++i) {
        rampwise_watched place[400];
        double p[N];
        const size_t steps = lengths[i];
        const rampwise_coeffs c = coeffs_of(0, 0.1);
        rampwise_watch watch;
        rampwise_watch_options o = options_of(RAMPWISE_LOAD);
        rampwise_state s;
        rampwise_peak peak;
        o.window = place;
        o.window_steps = steps;
        ck_assert_int_eq(rampwise_watch_init(&watch, &c, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_IN_WINDOW, &peak), RAMPWISE_ERROR_COUNT);
        for (size_t k = 0; k < N; ++k)
            p[k] = floor(random_between(r, -8, 8)); /* many equal ones */
        rampwise_start(&s, 0, 0, p[0]);
        for (size_t k = 1; k < N; ++k) {
            const rampwise_state before = s;
            rampwise_step(&c, &s, p[k]);
            rampwise_watch_step(&watch, &c, &before, &s, k - 1, 1, 0);
            ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_IN_WINDOW, &peak), RAMPWISE_OK);
            size_t high = k > steps ? k - steps : 0, low = high;
            for (size_t j = high; j <= k; ++j) {
                high = p[j] > p[high] ? j : high;
                low = p[j] < p[low] ? j : low;
            }
            ck_assert(peak.high.value == p[high] && peak.low.value == p[low]);
            ck_assert_uint_eq(peak.high.sample, high);
            ck_assert_uint_eq(peak.low.sample, low);
            ck_assert(peak.high.fraction == 0 && peak.low.fraction == 0);
        }
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(resets)
{
    bench b;
    rampwise_peak peak;
    bench_make(&b, (rampwise_level){100, 0, 1, 0});
    ck_assert_int_eq(rampwise_watch_peak(&b.watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_ERROR_COUNT);
    for (int i = 0; i < 6; ++i)
        put(&b, (i - 2) * (i - 2));
    ck_assert_int_eq(rampwise_watch_reset(&b.watch), RAMPWISE_OK);
    put(&b, 8);
    ck_assert_int_eq(rampwise_watch_peak(&b.watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value == 9 && peak.high.sample == 5 && peak.low.value == 0 && peak.low.sample == 2);
    ck_assert_int_eq(rampwise_watch_peak(&b.watch, RAMPWISE_SINCE_RESET, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value == 9 && peak.high.sample == 5 && peak.low.value == 8 && peak.low.sample == 6);
    ck_assert_int_eq(rampwise_watch_peak(&b.watch, RAMPWISE_IN_WINDOW, &peak), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_watch_peak(&b.watch, 0, &peak), RAMPWISE_ERROR_QUANTITY);
}
END_TEST

/* With w dt = 10 a step has 16 pieces, a bridge over 6 samples 128: it is passed over, counted and told, the
   spans begin anew, and the level sees its end. A bridge over 3 has 64. */
START_TEST(too_long_a_bridge)
{
    rampwise_stream_options o;
    rampwise_watch_options w = options_of(RAMPWISE_LOAD);
    rampwise_watched place[20];
    rampwise_event event[4];
    const rampwise_coeffs c = coeffs_of(0, 10);
    rampwise_stream stream;
    rampwise_watch watch;
    rampwise_peak peak;
    uint64_t passed_over;
    rampwise_stream_options_init(&o);
    w.window = place;
    w.window_steps = 10;
    w.level[0] = (rampwise_level){5, 0, 1, 0};
    w.level_count = 1;
    w.events = event;
    w.event_capacity = 4;
    ck_assert_int_eq(rampwise_stream_init(&stream, &c, &o), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_init(&watch, &c, &w), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_attach(&stream, &watch), RAMPWISE_OK);
    const double p[] = {3, 4, NAN, NAN, NAN, 1, NAN, NAN, NAN, NAN, NAN, NAN, 6};
    ck_assert_int_eq(rampwise_stream_put(&stream, 6, p, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_counts(&watch, NULL, &passed_over), RAMPWISE_OK);
    ck_assert_uint_eq(passed_over, 0);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_IN_WINDOW, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value == 4 && peak.low.value == 1 && peak.low.sample == 5);
    ck_assert_int_eq(rampwise_stream_put(&stream, 7, p + 6, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_counts(&watch, NULL, &passed_over), RAMPWISE_OK);
    ck_assert_uint_eq(passed_over, 1);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_IN_WINDOW, &peak), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_SINCE_RESET, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value == 6 && peak.low.value == 6);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value == 6 && peak.low.value == 1);
    rampwise_event got[4];
    ck_assert_uint_eq(rampwise_watch_events(&watch, 4, got), 2);
    ck_assert_int_eq(got[0].kind, RAMPWISE_EVENT_RESET);
    ck_assert_int_eq(got[1].kind, RAMPWISE_EVENT_LEVEL);
    ck_assert(got[1].sample == 12 && got[1].fraction == 0 && got[1].value == 6);
}
END_TEST

/* Values at samples are the stream's own, bit for bit: a level that equals one is reached there. */
START_TEST(levels_that_equal_the_signal)
{
    gsl_rng *const r = random_make("levels_that_equal_the_signal");
    for (int i = 0; i < 60; ++i) {
        const int kind = i % KINDS, quantity = RAMPWISE_DISPLACEMENT + i / KINDS % 4;
        const rampwise_coeffs c = coeffs_of(kind, random_log(r, 0.01, 3));
        double p[N], out[N];
        rampwise_stream_options o;
        rampwise_stream_options_init(&o);
        o.output[0].quantity = quantity;
        rampwise_stream stream, again;
        ck_assert_int_eq(rampwise_stream_init(&stream, &c, &o), RAMPWISE_OK);
        again = stream;
        random_fill(r, p, N);
        ck_assert_int_eq(rampwise_stream_put(&stream, N, p, out, NULL, NULL), RAMPWISE_OK);
        int top = 0;
        for (int k = 0; k < N; ++k)
            top = out[k] > out[top] ? k : top;
        rampwise_watch watch;
        rampwise_watch_options w = options_of(quantity);
        w.level[0] = (rampwise_level){out[top], 0, 1, 0};
        w.level[1] = (rampwise_level){nextafter(out[top], INFINITY), 0, 1, 0};
        w.level_count = 2;
        ck_assert_int_eq(rampwise_watch_init(&watch, &c, &w), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_attach(&again, &watch), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_put(&again, N, p, NULL, NULL, NULL), RAMPWISE_OK);
        rampwise_level_report report[2];
        rampwise_peak peak;
        for (size_t k = 0; k < 2; ++k)
            ck_assert_int_eq(rampwise_watch_level(&watch, k, &report[k]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_OK);
        ck_assert(report[0].passed >= 1 && report[1].passed <= report[0].passed);
        ck_assert(peak.high.value >= out[top]);
        ck_assert((peak.high.value > out[top]) == (report[1].passed > 0));
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(saved_and_resumed)
{
    gsl_rng *const r = random_make("saved_and_resumed");
    rampwise_watched place[2][30];
    rampwise_event event[2][8];
    static unsigned char bytes[2][8192];
    for (int i = 0; i < KINDS; ++i) {
        const rampwise_coeffs c = coeffs_of(i, i % 2 == 0 ? 0.3 : 5);
        rampwise_watch watch[2];
        rampwise_state s = {0, 0, 0, 0};
        for (int k = 0; k < 2; ++k) {
            rampwise_watch_options o = options_of(k == 0 ? RAMPWISE_TOTAL_ACCELERATION : RAMPWISE_LOAD);
            o.level[0] = (rampwise_level){1, 0.5, 1, 1};
            o.level[1] = (rampwise_level){-1, 0.5, -1, 0};
            o.level_count = k == 0 ? 2 : 0;
            o.window = place[k];
            o.window_steps = 15;
            o.events = event[k];
            o.event_capacity = 8;
            ck_assert_int_eq(rampwise_watch_init(&watch[k], &c, &o), RAMPWISE_OK);
        }
        const size_t size = rampwise_watch_saved_size(&watch[0]);
        ck_assert(size <= sizeof bytes[0] && size == rampwise_watch_saved_size(&watch[1]));
        for (uint64_t k = 0; k < N; ++k) {
            const rampwise_state before = s;
            rampwise_step(&c, &s, random_between(r, -4, 4));
            if (k % 7 == 0) {
                ck_assert_int_eq(rampwise_watch_save(&watch[0], bytes[0], size), RAMPWISE_OK);
                ck_assert_int_eq(rampwise_watch_resume(&watch[1], bytes[0], size), RAMPWISE_OK);
            }
            if (k % 50 == 9)
                for (int j = 0; j < 2; ++j) {
                    rampwise_event got[3];
                    (void)rampwise_watch_events(&watch[j], 3, got);
                }
            for (int j = 0; j < 2; ++j)
                rampwise_watch_step(&watch[j], &c, &before, &s, k, 1, 0);
            for (int j = 0; j < 2; ++j)
                ck_assert_int_eq(rampwise_watch_save(&watch[j], bytes[j], size), RAMPWISE_OK);
            ck_assert_mem_eq(bytes[0], bytes[1], size);
        }
        rampwise_level_report report;
        ck_assert_int_eq(rampwise_watch_level(&watch[1], 0, &report), RAMPWISE_OK);
        ck_assert_uint_gt(report.passed, 0);
        /* Damaged, another kind, and other capacities. */
        for (size_t k = 0; k < size; k += 13) {
            bytes[0][k] ^= 4;
            ck_assert_int_eq(rampwise_watch_resume(&watch[1], bytes[0], size), RAMPWISE_ERROR_DAMAGED);
            bytes[0][k] ^= 4;
        }
        rampwise_watch_options o = options_of(RAMPWISE_LOAD);
        rampwise_watch none;
        ck_assert_int_eq(rampwise_watch_init(&none, &c, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_watch_resume(&none, bytes[0], size), RAMPWISE_ERROR_DIFFERENT);
        rampwise_stream stream;
        rampwise_stream_options so;
        rampwise_stream_options_init(&so);
        ck_assert_int_eq(rampwise_stream_init(&stream, &c, &so), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_resume(&stream, bytes[0], size), RAMPWISE_ERROR_KIND);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(retuning)
{
    const rampwise_coeffs a = coeffs_of(2, 0.3), b = coeffs_of(2, 0.6);
    rampwise_stream stream;
    rampwise_stream_options o;
    rampwise_watch watch;
    rampwise_watch_options w = options_of(RAMPWISE_SPRING_FORCE);
    rampwise_peak peak;
    double out[3];
    const double p[3] = {1, 2, 3};
    rampwise_stream_options_init(&o);
    o.output[0].quantity = RAMPWISE_SPRING_FORCE;
    ck_assert_int_eq(rampwise_stream_init(&stream, &a, &o), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_init(&watch, &a, &w), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_attach(&stream, &watch), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_put(&stream, 3, p, out, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_retune(&stream, &b, NULL, 0), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_peak(&watch, RAMPWISE_SINCE_START, &peak), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_read(&stream, out, NULL), RAMPWISE_OK);
    ck_assert(out[0] < 0 && peak.low.value == out[0] && peak.low.sample == 2);
    const rampwise_coeffs stiff = coeffs_of(2, 1000);
    ck_assert_int_eq(rampwise_stream_retune(&stream, &stiff, NULL, 0), RAMPWISE_ERROR_STEP_LENGTH);
    ck_assert_int_eq(rampwise_stream_read(&stream, out + 1, NULL), RAMPWISE_OK);
    ck_assert(out[1] == out[0]);
}
END_TEST

START_TEST(refused_options)
{
    const rampwise_coeffs c = coeffs_of(0, 0.1), fast = coeffs_of(0, 65), other = coeffs_of(1, 0.1);
    rampwise_coeffs none;
    rampwise_watch watch;
    rampwise_watch_options o = options_of(RAMPWISE_DISPLACEMENT);
    memset(&none, 0, sizeof none);
    memset(&watch, 0x5a, sizeof watch);
    const rampwise_watch before = watch;
    ck_assert_int_eq(rampwise_watch_init(NULL, &c, &o), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_watch_init(&watch, NULL, &o), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_watch_init(&watch, &c, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_watch_init(&watch, &none, &o), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_watch_init(&watch, &fast, &o), RAMPWISE_ERROR_STEP_LENGTH);
#define REFUSED(change, status)                                                                              \
    do {                                                                                                     \
        o = options_of(RAMPWISE_DISPLACEMENT);                                                               \
        o.level_count = 4;                                                                                   \
        for (int i = 0; i < 4; ++i)                                                                          \
            o.level[i] = (rampwise_level){1, 0, 1, 0};                                                       \
        change;                                                                                              \
        ck_assert_int_eq(rampwise_watch_init(&watch, &c, &o), status);                                       \
    } while (0)
    REFUSED(o.size = 0, RAMPWISE_ERROR_COUNT);
    REFUSED(o.level_count = 5, RAMPWISE_ERROR_COUNT);
    REFUSED(o.level_count = -1, RAMPWISE_ERROR_COUNT);
    REFUSED(o.window_steps = 1, RAMPWISE_ERROR_MISSING);
    REFUSED(o.event_capacity = 1, RAMPWISE_ERROR_MISSING);
    REFUSED(o.level[3].value = NAN, RAMPWISE_ERROR_STATE);
    REFUSED(o.level[3].hysteresis = -1, RAMPWISE_ERROR_STATE);
    REFUSED(o.level[3].direction = 0, RAMPWISE_ERROR_STATE);
    REFUSED(o.level[3].latch = 2, RAMPWISE_ERROR_STATE);
    REFUSED(o.output.quantity = 0, RAMPWISE_ERROR_QUANTITY);
#undef REFUSED
    ck_assert_mem_eq(&watch, &before, sizeof watch);
    o = options_of(RAMPWISE_DISPLACEMENT);
    ck_assert_int_eq(rampwise_watch_init(&watch, &other, &o), RAMPWISE_OK);
    rampwise_stream stream;
    rampwise_stream_options so;
    rampwise_stream_options_init(&so);
    ck_assert_int_eq(rampwise_stream_init(&stream, &c, &so), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_attach(&stream, &watch), RAMPWISE_ERROR_DIFFERENT);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, without_hysteresis);
    tcase_add_test(tests, with_hysteresis);
    tcase_add_test(tests, latch);
    tcase_add_test(tests, queue);
    tcase_add_test(tests, two_extremes_in_a_step);
    tcase_add_test(tests, window);
    tcase_add_test(tests, resets);
    tcase_add_test(tests, too_long_a_bridge);
    tcase_add_test(tests, levels_that_equal_the_signal);
    tcase_add_test(tests, saved_and_resumed);
    tcase_add_test(tests, retuning);
    tcase_add_test(tests, refused_options);
}

int main(void)
{
    return suite_run("watches", add_tests);
}
