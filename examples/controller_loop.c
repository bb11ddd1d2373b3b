/* controller_loop: the watch of live_watch.c as the main loop of a microcontroller, for one piece of gear.

   Single precision, fixed rate, static memory. The coefficients are constants that tools/coefficients_as_source
   printed when this was built; those of the steps over 1 to LONGEST missing samples are made once, before the
   first sample, so that no pass of the loop makes any. A processor without double arithmetic in hardware needs
   it for nothing but that, the two constants of the levels and the fraction in an event.

   The relay opens at the first passing of a level and stays so: who closes it is not this program. */
#include <rampwise.h>
#include "controller_board.h"
#include "controller_coefficients.h" /* pump_skid: 2.4 Hz, 5 % damped, base acceleration, dt 0.001 s */

enum { LONGEST = 10, RING = 64 /* a power of two */, EVENTS = 8 };
static const double count_size = 1e-4;                /* m/s^2 */
static const double level = 0.04, hysteresis = 0.004; /* m */

/* From the interrupt to the loop: each writes its own index only. */
static volatile struct {
    uint64_t number;
    int32_t raw;
} ring[RING];
static volatile uint32_t written, taken;

static rampwise_interval_f32 intervals[LONGEST];
static rampwise_stream_f32 stream;
static rampwise_watch_f32 watch;
static rampwise_event waiting[EVENTS];

/* A tick that finds the ring full is lost; those after it have their numbers. */
void controller_tick(int32_t raw)
{
    static uint64_t number;
    if (written - taken < RING) {
        ring[written % RING].number = number;
        ring[written % RING].raw = raw;
        written = written + 1;
    }
    ++number;
}

static int prepare(void)
{
    rampwise_stream_options in;
    rampwise_watch_options seen;
    rampwise_stream_options_init(&in);
    in.longest = LONGEST;
    in.missing_raw = CONTROLLER_NO_SAMPLE;
    in.scale = count_size;
    in.rail_low = -32767;
    in.rail_high = 32767;
    in.intervals = intervals;
    in.interval_count = LONGEST;
    rampwise_watch_options_init(&seen);
    seen.level_count = 2;
    seen.level[0] = (rampwise_level){level, hysteresis, 1, 1};
    seen.level[1] = (rampwise_level){-level, hysteresis, -1, 1};
    seen.events = waiting;
    seen.event_capacity = EVENTS;

    int status = rampwise_self_test();
    for (uint64_t i = 0; i < LONGEST && status == RAMPWISE_OK; ++i)
        status = rampwise_interval_make_f32(&intervals[i], &pump_skid, 1, i + 2);
    if (status == RAMPWISE_OK)
        status = rampwise_stream_init_f32(&stream, &pump_skid, &in);
    if (status == RAMPWISE_OK)
        status = rampwise_watch_init_f32(&watch, &pump_skid, &seen);
    if (status == RAMPWISE_OK)
        status = rampwise_stream_attach_f32(&stream, &watch);
    return status;
}

static void report(void)
{
    rampwise_event event;
    while (rampwise_watch_events_f32(&watch, 1, &event) == 1) {
        const int is_trip = event.level == 0 ? event.direction > 0 : event.direction < 0;
        if (event.kind == RAMPWISE_EVENT_LEVEL)
            board_report(event.sample, (float)event.fraction, (float)event.value, is_trip);
    }
}

static int is_tripped(void)
{
    rampwise_level_report up, down;
    (void)rampwise_watch_level_f32(&watch, 0, &up);
    (void)rampwise_watch_level_f32(&watch, 1, &down);
    return up.tripped || down.tripped;
}

static int pass(uint64_t number, int32_t raw)
{
    const int status = rampwise_stream_skip_to_f32(&stream, number);
    return status == RAMPWISE_OK ? rampwise_stream_put_raw_f32(&stream, 1, &raw, NULL, NULL, NULL) : status;
}

int main(void)
{
    int status = prepare();
    while (status == RAMPWISE_OK && board_sleep())
        while (status == RAMPWISE_OK && taken != written) {
            status = pass(ring[taken % RING].number, ring[taken % RING].raw);
            taken = taken + 1;
            board_relay(is_tripped());
            report();
        }
    if (status == RAMPWISE_OK)
        return 0;
    board_relay(1); /* what cannot watch does not run */
    board_fault(rampwise_status_text(status));
    return 2;
}
