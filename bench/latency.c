#define _GNU_SOURCE
#include "latency.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { OSCILLATOR = 500, EVENTS = 64, TICKS = 1000, PACE_NS = 1000000 };

/* All that is fed: what a program with one oscillator would have, each in memory of its own. */
typedef struct fed {
    const bench_case *in;
    rampwise_state s;
    rampwise_stream plain, watched, stamped;
    rampwise_watch watch, watch_of_stamped;
    rampwise_stream_f32 watched_f32;
    rampwise_watch_f32 watch_f32;
    rampwise_event event[3][EVENTS];
    int64_t time;
} fed;

typedef void feed(fed *x, size_t i);

static double load(const fed *x, size_t i)
{
    return x->in->p[i % CASE_SAMPLES];
}

static void nothing(fed *x, size_t i)
{
    (void)x;
    (void)i;
}

static void step(fed *x, size_t i)
{
    rampwise_step(&x->in->c[OSCILLATOR], &x->s, load(x, i));
}

static void put(fed *x, size_t i)
{
    const double p = load(x, i);
    double u;
    (void)rampwise_stream_put(&x->plain, 1, &p, &u, NULL, NULL);
}

static void put_watched(fed *x, size_t i)
{
    const double p = load(x, i);
    double u;
    rampwise_event events[EVENTS];
    (void)rampwise_stream_put(&x->watched, 1, &p, &u, NULL, NULL);
    (void)rampwise_watch_events(&x->watch, EVENTS, events);
}

static void put_watched_f32(fed *x, size_t i)
{
    const float p = (float)load(x, i);
    float u;
    rampwise_event events[EVENTS];
    (void)rampwise_stream_put_f32(&x->watched_f32, 1, &p, &u, NULL, NULL);
    (void)rampwise_watch_events_f32(&x->watch_f32, EVENTS, events);
}

/* Stamps up to a tenth of an interval off: no two intervals alike. */
static void put_stamped(fed *x, size_t i)
{
    const double p = load(x, i);
    double u;
    rampwise_event events[EVENTS];
    const int64_t stamp = (int64_t)(i + 1) * TICKS + (int64_t)(i * 7919 % 201) - 100;
    (void)rampwise_stream_put_at(&x->stamped, 1, &stamp, &p, &u, NULL, NULL);
    (void)rampwise_watch_events(&x->watch_of_stamped, EVENTS, events);
}

static const struct {
    const char *id, *name;
    feed *one;
} kinds[LATENCY_ROWS] = {
    {"clock", "the clock alone, in all the others", nothing},
    {"step", "rampwise_step inline, plain target", step},
    {"stream_put", "rampwise_stream_put", put},
    {"stream_watched", "the same, a watch of two levels", put_watched},
    {"stream_watched_f32", "the same in single precision", put_watched_f32},
    {"stream_stamped", "watched, every interval another", put_stamped},
};

/* The largest displacement of the whole record, of which the levels are a half. */
static double peak_of(const bench_case *in)
{
    rampwise_state s;
    double largest = 0;
    rampwise_start(&s, 0, 0, 0);
    for (size_t i = 0; i < CASE_SAMPLES; ++i) {
        rampwise_step(&in->c[OSCILLATOR], &s, in->p[i]);
        largest = s.u > largest ? s.u : -s.u > largest ? -s.u : largest;
    }
    return largest;
}

static int make(fed *x, const bench_case *in)
{
    const rampwise_coeffs *const c = &in->c[OSCILLATOR];
    const double level = 0.5 * peak_of(in);
    rampwise_coeffs_f32 single;
    rampwise_stream_options stream;
    rampwise_watch_options watch;
    rampwise_stream_options_init(&stream);
    rampwise_watch_options_init(&watch);
    watch.level_count = 2;
    watch.level[0] = (rampwise_level){level, 0.1 * level, 1, 0};
    watch.level[1] = (rampwise_level){-level, 0.1 * level, -1, 0};
    watch.event_capacity = EVENTS;
    *x = (fed){.in = in};
    int good = rampwise_coeffs_make_f32(&single, &in->sys[OSCILLATOR], CASE_DT, RAMPWISE_FORCE,
                                        RAMPWISE_RAMP) == RAMPWISE_OK;
    good &= rampwise_stream_init(&x->plain, c, &stream) == RAMPWISE_OK;
    good &= rampwise_stream_init(&x->watched, c, &stream) == RAMPWISE_OK;
    good &= rampwise_stream_init_f32(&x->watched_f32, &single, &stream) == RAMPWISE_OK;
    stream.ticks = TICKS;
    good &= rampwise_stream_init(&x->stamped, c, &stream) == RAMPWISE_OK;
    watch.events = x->event[0];
    good &= rampwise_watch_init(&x->watch, c, &watch) == RAMPWISE_OK;
    watch.events = x->event[1];
    good &= rampwise_watch_init_f32(&x->watch_f32, &single, &watch) == RAMPWISE_OK;
    watch.events = x->event[2];
    good &= rampwise_watch_init(&x->watch_of_stamped, c, &watch) == RAMPWISE_OK;
    good &= rampwise_stream_attach(&x->watched, &x->watch) == RAMPWISE_OK;
    good &= rampwise_stream_attach_f32(&x->watched_f32, &x->watch_f32) == RAMPWISE_OK;
    good &= rampwise_stream_attach(&x->stamped, &x->watch_of_stamped) == RAMPWISE_OK;
    return good;
}

static int64_t now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (int64_t)t.tv_sec * 1000000000 + t.tv_nsec;
}

static void sleep_until(int64_t instant)
{
    const struct timespec t = {(time_t)(instant / 1000000000), (long)(instant % 1000000000)};
    while (clock_nanosleep(CLOCK_MONOTONIC, TIMER_ABSTIME, &t, NULL) == EINTR)
        ;
}

static int ascending(const void *a, const void *b)
{
    const int64_t x = *(const int64_t *)a, y = *(const int64_t *)b;
    return (x > y) - (x < y);
}

/* Sorts taken[n]. */
static latency_spread spread_of(int64_t *taken, size_t n)
{
    qsort(taken, n, sizeof *taken, ascending);
    return (latency_spread){1e-9 * (double)taken[(n - 1) / 2], 1e-9 * (double)taken[n - 1 - n / 1000],
                            1e-9 * (double)taken[n - 1]};
}

static latency_spread time_samples(fed *x, feed *one, size_t first, size_t n, int64_t pace, int64_t *taken)
{
    const int64_t start = now();
    for (size_t i = 0; i < n; ++i) {
        if (pace > 0)
            sleep_until(start + (int64_t)i * pace);
        const int64_t begin = now();
        one(x, first + i);
        taken[i] = now() - begin;
    }
    return spread_of(taken, n);
}

void latency_run(latency *l, const bench_case *in, size_t flat, size_t paced)
{
    fed *const x = case_memory(sizeof *x);
    int64_t *const taken = case_memory((flat > paced ? flat : paced) * sizeof *taken);
    *l = (latency){.flat = flat, .paced = paced};
    if (!make(x, in))
        fprintf(stderr, "bench: no streams\n");
    for (size_t i = 0; i < LATENCY_ROWS; ++i) {
        latency_row *const row = &l->row[i];
        row->id = kinds[i].id;
        row->name = kinds[i].name;
        row->flat = time_samples(x, kinds[i].one, 0, flat, 0, taken);
        if (paced > 0)
            row->paced = time_samples(x, kinds[i].one, flat, paced, PACE_NS, taken);
    }
    free(taken);
    free(x);
}
