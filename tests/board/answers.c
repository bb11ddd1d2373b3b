/* Says what a board and the host must agree on bit for bit, in the precision of the file: coefficients, steps, streams
   of every policy with jitter, rails and missing samples, watches, saved objects. Random numbers are the same everywhere. */
#include <math.h>
#include <string.h>
#include "../../src/precision.h"
#include "../bits/numbers.h"
#include "programs.h"
#include "rampwise/motion.h"
#include "rampwise/status.h"
#include "rampwise/stream.h"
#include "rampwise/version.h"
#include "say.h"

#ifdef SINGLE_PRECISION
#define NAMED(what) "single " what
#else
#define NAMED(what) "double " what
#endif

enum { SETS = 70, STEPS = 100, SAMPLES = 140, OUTPUTS = 7, EVENTS = 4, WINDOW = 5, SAVED = 1600 };

static uint64_t hash;

static void add(const void *data, size_t size)
{
    hash = hashed(hash, data, size);
}

static void demand(int status, int wanted)
{
    if (status != wanted)
        say_number("REFUSED", (uint64_t)-status);
}

static void tell(const char *name)
{
    say_bits(name, &hash, sizeof hash);
    hash = empty;
}

/* ---- arithmetic ---- */

static real any_bits(void)
{
    real x;
#ifdef SINGLE_PRECISION
    const uint32_t bits = random_integer();
#else
    const uint64_t bits = (uint64_t)random_integer() << 32 | random_integer();
#endif
    memcpy(&x, &bits, sizeof x);
    return x;
}

/* NaNs are one and the same. */
static void add_real(real x)
{
    const real plain = isnan(x) ? (real)NAN : x;
    add(&plain, sizeof plain);
}

static void fused(void)
{
    const int middle = (int)(sizeof(real) == 4 ? 60 : 500);
    for (int i = 0; i < 20 * SETS; ++i) {
        const real x = any_bits(), y = any_bits(), z = any_bits();
        add_real(REAL_FMA(x, y, z));
        const real a = (real)signed_number(range(-middle, middle)), b = (real)signed_number(range(-30, 30));
        add_real(REAL_FMA(a, b, -a * b)); /* the rounding of the product alone */
    }
    tell(NAMED("fused"));
}

static void coefficients(void)
{
    for (int i = 0; i < SETS; ++i) {
        const int kind = i % KINDS;
        const rampwise_system sys = random_system(kind);
        real_coeffs c;
        memset(&c, 0, sizeof c);
        const int status =
            PUBLIC(coeffs_make)(&c, &sys, number(range(-12, 8)), kinds[kind][0], kinds[kind][1]);
        add(&status, sizeof status);
        add(&c, sizeof c);
    }
    tell(NAMED("coefficients"));
}

static real_coeffs oscillator(int kind, double stiffness, double dt)
{
    const rampwise_system sys = {2, kind == KINDS - 1 ? 0 : 0.375, stiffness};
    real_coeffs c;
    memset(&c, 0, sizeof c);
    demand(PUBLIC(coeffs_make)(&c, &sys, dt, kinds[kind][0], kinds[kind][1]), RAMPWISE_OK);
    return c;
}

/* Loud, then silent until the motion is spent. */
static void steps(void)
{
    for (int kind = 0; kind < KINDS; ++kind) {
        const real_coeffs c = oscillator(kind, 3600, 0x1p-7);
        real_state s;
        PUBLIC(start)(&s, (real)0.25, (real)-0.5, 0);
        for (int i = 0; i < STEPS; ++i) {
            PUBLIC(step)(&c, &s, i < STEPS / 2 ? (real)signed_number(range(-30, 3)) : 0);
            if (i == STEPS / 2)
                s.u = s.v = (real)(sizeof(real) == 4 ? 0x1p-99 : 0x1p-959);
            const real a = PUBLIC(acceleration)(&c, &s), total = PUBLIC(total_acceleration)(&c, &s);
            add(&s, sizeof s);
            add(&a, sizeof a);
            add(&total, sizeof total);
        }
    }
    tell(NAMED("steps"));
}

/* ---- live ---- */

static PUBLIC(stream) stream;
static PUBLIC(watch) watch[2];
static PUBLIC(watched) window[2][2 * WINDOW];
static rampwise_event event[2][EVENTS];
static PUBLIC(interval) prepared[2];
#ifdef SINGLE_PRECISION
extern unsigned char board_saved[SAVED];
#else
unsigned char board_saved[SAVED]; /* RAM is scarce: one for both precisions */
#endif

static const int64_t lengths[6] = {1000, 990, 1010, 700, 1499, 2600};

static void make_stream(int kind, int missing, const real_coeffs *c)
{
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.missing = missing;
    o.beyond = missing == RAMPWISE_GAP_REFUSE ? RAMPWISE_GAP_REFUSE : RAMPWISE_GAP_RESTART;
    o.start = kind % 2 == 0 ? RAMPWISE_SETTLED : RAMPWISE_AT_REST;
    o.longest = 3;
    o.ticks = 1000;
    o.scale = 0.0009765625;
    o.offset = 0.1;
    o.rail_low = -900;
    o.rail_high = 900;
    o.output_count = OUTPUTS;
    for (int i = 0; i < OUTPUTS; ++i)
        o.output[i].quantity = RAMPWISE_DISPLACEMENT + i;
    for (int i = 0; i < 2; ++i)
        demand(PUBLIC(interval_make)(&prepared[i], c, 1000, (uint64_t)lengths[i + 1]), RAMPWISE_OK);
    o.intervals = prepared;
    o.interval_count = 2;
    demand(PUBLIC(stream_init)(&stream, c, &o), RAMPWISE_OK);
}

static void make_watch(int i, const real_coeffs *c)
{
    rampwise_watch_options o;
    rampwise_watch_options_init(&o);
    o.output.quantity = i == 0 ? RAMPWISE_DISPLACEMENT : RAMPWISE_TOTAL_ACCELERATION;
    o.level_count = 2;
    o.level[0] = (rampwise_level){i == 0 ? 0.001 : 0.5, 0.0002, 1, 1};
    o.level[1] = (rampwise_level){0, 0, -1, 0};
    o.number = i;
    o.window = window[i];
    o.window_steps = WINDOW;
    o.events = event[i];
    o.event_capacity = EVENTS;
    demand(PUBLIC(watch_init)(&watch[i], c, &o), RAMPWISE_OK);
    demand(PUBLIC(stream_attach)(&stream, &watch[i]), RAMPWISE_OK);
}

static int64_t stamp;

/* One sample: raw or not, most a dt after the one before, missing now and then. */
static int32_t next_raw(int i)
{
    const uint32_t luck = random_integer() % 8;
    stamp += luck < 2 ? lengths[1 + random_integer() % 5] : luck < 3 ? 1000 * (int64_t)range(2, 6) : 1000;
    return i > 0 && random_integer() % 8 == 0 ? INT32_MIN : range(-1000, 1000);
}

static void put_next(int i)
{
    real out[OUTPUTS];
    uint8_t flags = 0;
    int status;
    const int32_t raw = next_raw(i);
    const real p = raw == INT32_MIN ? (real)NAN : (real)raw;
    memset(out, 0, sizeof out);
    if (i % 2 == 0)
        status = PUBLIC(stream_put_raw_at)(&stream, 1, &stamp, &raw, out, &flags, NULL);
    else
        status = PUBLIC(stream_put_at)(&stream, 1, &stamp, &p, out, &flags, NULL);
    if (status == RAMPWISE_ERROR_GAP)
        demand(PUBLIC(stream_start)(&stream, NULL, 0), RAMPWISE_OK);
    add(&status, sizeof status);
    add(out, sizeof out);
    add(&flags, sizeof flags);
}

static void add_watch(PUBLIC(watch) * w)
{
    rampwise_event taken[EVENTS];
    rampwise_peak peak;
    uint64_t counts[2];
    const size_t count = PUBLIC(watch_events)(w, EVENTS, taken);
    add(taken, count * sizeof *taken);
    for (int span = RAMPWISE_SINCE_START; span <= RAMPWISE_IN_WINDOW; ++span)
        if (PUBLIC(watch_peak)(w, span, &peak) == RAMPWISE_OK)
            add(&peak, sizeof peak);
    demand(PUBLIC(watch_counts)(w, &counts[0], &counts[1]), RAMPWISE_OK);
    add(counts, sizeof counts);
}

/* Saved, overwritten by more samples, and back. */
static void save_and_resume(void)
{
    const size_t size = PUBLIC(stream_saved_size)(&stream);
    demand(PUBLIC(stream_save)(&stream, board_saved, sizeof board_saved), RAMPWISE_OK);
    add(board_saved, size);
    const int64_t kept = stamp;
    for (int i = 0; i < 5; ++i)
        put_next(i);
    stamp = kept;
    demand(PUBLIC(stream_resume)(&stream, board_saved, size), RAMPWISE_OK);
    const size_t watch_size = PUBLIC(watch_saved_size)(&watch[0]);
    demand(PUBLIC(watch_save)(&watch[0], board_saved, sizeof board_saved), RAMPWISE_OK);
    add(board_saved, watch_size);
    demand(PUBLIC(watch_resume)(&watch[0], board_saved, watch_size), RAMPWISE_OK);
}

static void live(const char *name, int missing, double stiffness)
{
    for (int kind = 0; kind < KINDS; ++kind) {
        const real_coeffs c = oscillator(kind, stiffness, 0.01);
        real_state s;
        rampwise_stream_counts counts;
        make_stream(kind, missing, &c);
        make_watch(0, &c);
        make_watch(1, &c);
        stamp = 0;
        for (int i = 0; i < SAMPLES / KINDS; ++i) {
            put_next(i);
            if (i % 7 == 6) {
                add_watch(&watch[0]);
                add_watch(&watch[1]);
            }
        }
        save_and_resume();
        demand(PUBLIC(stream_count)(&stream, &counts), RAMPWISE_OK);
        add(&counts, sizeof counts);
        if (PUBLIC(stream_state)(&stream, &s, NULL) == RAMPWISE_OK)
            add(&s, sizeof s);
    }
    tell(name);
}

void PUBLIC(answers)(void)
{
    hash = empty;
    fused();
    coefficients();
    steps();
    live(NAMED("bridged"), RAMPWISE_GAP_BRIDGE, 3600);
    live(NAMED("held"), RAMPWISE_GAP_HOLD, 3600);
    live(NAMED("refused"), RAMPWISE_GAP_REFUSE, 3600);
    live(NAMED("in pieces"), RAMPWISE_GAP_BRIDGE, 300000); /* w dt = 4: a watch cuts its steps */
}

#ifndef SINGLE_PRECISION
void program(void)
{
    demand(rampwise_self_test(), RAMPWISE_OK);
    say_number("self test", (uint64_t)-rampwise_self_test());
    say_number("edition", (uint64_t)rampwise_arithmetic_edition());
    rampwise_answers();
    rampwise_answers_f32();
}
#endif
