/* Says how many instructions a sample takes in the precision of the file, and how many bytes of stack. */
#include <string.h>
#include "../../src/precision.h"
#include "../bits/numbers.h"
#include "programs.h"
#include "rampwise/status.h"
#include "rampwise/stream.h"
#include "say.h"

#ifdef SINGLE_PRECISION
#define NAMED(what) "single " what
#define QUIET (-140) /* exponent of subnormal numbers */
#define LOUD 100
#else
#define NAMED(what) "double " what
#define QUIET (-1040)
#define LOUD 900
#endif

enum { SAMPLES = 40, WINDOW = 4, LEVELS = 4, EVENTS = 4 };

/* What comes in. */
enum { NOISE, HUGE, ALTERNATING, ZEROS, SUBNORMAL, SILENCE, SIGNALS };

static real_coeffs c;
static real_state s;
static PUBLIC(stream) stream;
static PUBLIC(watch) watch;
static PUBLIC(watched) window[2 * WINDOW];
static PUBLIC(interval) prepared;
static rampwise_event event[EVENTS];
static real p, last, out;
static int64_t stamp;
static rampwise_stream_options o;
static rampwise_watch_options w;
static uint8_t flags;
static int status;

static void set_signal(int signal, int i)
{
    const double noise = signed_number(-1);
    p = signal == NOISE         ? (real)noise
        : signal == HUGE        ? (real)(noise * number(LOUD))
        : signal == ALTERNATING ? (real)(i % 2 == 0 ? 1 : -1)
        : signal == SUBNORMAL   ? (real)(noise * 0x1p-30 * number(QUIET + 30))
        : signal == SILENCE     ? (real)(i < 3)
                                : 0;
}

static void step(void)
{
    PUBLIC(step)(&c, &s, p);
}

static void product(void)
{
    out = p * last;
}

static void sum(void)
{
    out = p + last;
}

static void put(void)
{
    status |= PUBLIC(stream_put)(&stream, 1, &p, &out, &flags, NULL);
}

static void put_at(void)
{
    status |= PUBLIC(stream_put_at)(&stream, 1, &stamp, &p, &out, &flags, NULL);
}

static void init_stream(void)
{
    status |= PUBLIC(stream_init)(&stream, &c, &o);
}

static void init_watch(void)
{
    status |= PUBLIC(watch_init)(&watch, &c, &w);
}

static void make_stream(int watched)
{
    rampwise_stream_options_init(&o);
    o.ticks = 1000;
    o.intervals = &prepared;
    o.interval_count = 1;
    o.output[0].quantity = RAMPWISE_TOTAL_ACCELERATION;
    init_stream();
    rampwise_watch_options_init(&w);
    w.output.quantity = RAMPWISE_TOTAL_ACCELERATION;
    w.level_count = LEVELS;
    for (int i = 0; i < LEVELS; ++i)
        w.level[i] = (rampwise_level){0.1 * i, 0, 1, 0};
    w.window = window;
    w.window_steps = WINDOW;
    w.events = event;
    w.event_capacity = EVENTS;
    init_watch();
    if (watched)
        status |= PUBLIC(stream_attach)(&stream, &watch);
}

static void make(void)
{
    const rampwise_system sys = {2, 0.375, 3600};
    status |= PUBLIC(coeffs_make)(&c, &sys, 0.01, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
}

/* The fewest and the most instructions over samples of one signal after another. */
static void say_range(const char *loud, const char *silent, int watched, void (*work)(void))
{
    uint64_t least = UINT64_MAX, most = 0;
    for (int signal = 0; signal < SIGNALS; ++signal) {
        PUBLIC(start)(&s, 0, 0, 0);
        make_stream(watched);
        p = 0;
        put();
        for (int i = 0; i < SAMPLES; ++i) {
            set_signal(signal, i);
            const uint64_t taken = instructions_of(work);
            least = taken < least ? taken : least;
            most = taken > most ? taken : most;
        }
        if (signal == ALTERNATING || signal == SILENCE) {
            const char *const name = signal == SILENCE ? silent : loud;
            say(name);
            say_number(" least", least);
            say(name);
            say_number(" most", most);
            least = UINT64_MAX;
            most = 0;
        }
    }
}

/* The most instructions of one product or sum of noise, fetched and stored. */
static void say_operation(const char *name, void (*work)(void))
{
    uint64_t most = 0;
    for (int i = 0; i < SAMPLES; ++i) {
        last = p;
        set_signal(NOISE, i);
        const uint64_t taken = instructions_of(work);
        most = taken > most ? taken : most;
    }
    say_number(name, most);
}

/* Samples a prepared interval apart, and one that is not. */
static void say_jitter(void)
{
    make_stream(0);
    stamp = 0;
    put_at();
    stamp += 990;
    say_number(NAMED("interval prepared"), instructions_of(put_at));
    stamp += 985;
    say_number(NAMED("interval not prepared"), instructions_of(put_at));
    stamp += 985;
    say_number(NAMED("interval met before"), instructions_of(put_at));
}

static void say_stack(void)
{
    say_number(NAMED("stack step"), stack_of(step));
    make_stream(0);
    stamp = 0;
    put_at();
    say_number(NAMED("stack stream"), stack_of(put));
    stamp += 1985;
    say_number(NAMED("stack stream making an interval"), stack_of(put_at));
    make_stream(1);
    put();
    p = 1;
    say_number(NAMED("stack watched"), stack_of(put));
    say_number(NAMED("stack init"), stack_of(init_stream));
    say_number(NAMED("stack watch init"), stack_of(init_watch));
}

void PUBLIC(costs)(void)
{
    say_number(NAMED("coefficients"), instructions_of(make));
    status |= PUBLIC(interval_make)(&prepared, &c, 1000, 990);
    say_range(NAMED("step"), NAMED("silent step"), 0, step);
    say_range(NAMED("stream"), NAMED("silent stream"), 0, put);
    say_range(NAMED("watched"), NAMED("silent watched"), 1, put);
    say_operation(NAMED("product"), product);
    say_operation(NAMED("sum"), sum);
    say_jitter();
    say_stack();
    say_number(NAMED("status"), (uint64_t)-status);
    say_number(NAMED("bytes of a stream"), sizeof stream);
    say_number(NAMED("bytes of a watch"), sizeof watch);
}

#ifndef SINGLE_PRECISION
void program(void)
{
    rampwise_costs();
    rampwise_costs_f32();
}
#endif
