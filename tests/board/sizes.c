/* Programs for their size in flash: STEP, STREAM, WATCH and MAKE (coefficients, on the board) say what is in them; with
   none of them it is the board's own start. Constants come from tools/coefficients_as_source. */
#include "programs.h"
#include "rampwise/status.h"
#include "rampwise/stream.h"
#include "rampwise/version.h"
#include "oscillator.h"

volatile int32_t converter; /* what an analogue input and a clock would write */
volatile int64_t ticks;
volatile float shown;
volatile uint64_t passed;

#ifdef STEP
void program(void)
{
    rampwise_state_f32 s;
    rampwise_start_f32(&s, 0, 0, 0);
    while (converter >= 0) {
        rampwise_step_f32(&oscillator, &s, (float)converter);
        shown = s.u;
    }
}
#elif defined(STREAM)
static rampwise_stream_f32 stream;

#ifdef WATCH
static rampwise_watch_f32 watch;
static rampwise_event queue[4];

static int watched(const rampwise_coeffs_f32 *c)
{
    rampwise_watch_options o;
    rampwise_watch_options_init(&o);
    o.level[0] = (rampwise_level){0.01, 0, 1, 1};
    o.level_count = 1;
    o.events = queue;
    o.event_capacity = 4;
    return rampwise_watch_init_f32(&watch, c, &o) == RAMPWISE_OK &&
           rampwise_stream_attach_f32(&stream, &watch) == RAMPWISE_OK;
}

static void show_events(void)
{
    rampwise_event event;
    while (rampwise_watch_events_f32(&watch, 1, &event) > 0)
        passed = event.sample;
}
#else
static int watched(const rampwise_coeffs_f32 *c)
{
    return c != 0;
}

static void show_events(void)
{
}
#endif

static int started(void)
{
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.ticks = 1000;
#ifdef MAKE
    rampwise_system sys;
    rampwise_coeffs_f32 oscillator_made;
    if (rampwise_self_test() != RAMPWISE_OK || rampwise_system_hertz(&sys, 4, 0.05) != RAMPWISE_OK ||
        rampwise_coeffs_make_f32(&oscillator_made, &sys, 0.005, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP) !=
            RAMPWISE_OK)
        return 0;
    const rampwise_coeffs_f32 *const c = &oscillator_made;
#else
    const rampwise_coeffs_f32 *const c = &oscillator;
    o.intervals = oscillator_intervals;
    o.interval_count = sizeof oscillator_intervals / sizeof *oscillator_intervals;
#endif
    return rampwise_stream_init_f32(&stream, c, &o) == RAMPWISE_OK && watched(c);
}

void program(void)
{
    if (!started())
        return;
    while (converter >= 0) {
        const int32_t raw = converter;
        const int64_t t = ticks;
        float out;
        if (rampwise_stream_put_raw_at_f32(&stream, 1, &t, &raw, &out, 0, 0) == RAMPWISE_OK)
            shown = out;
        show_events();
    }
}
#else
void program(void)
{
    shown = (float)converter;
}
#endif
