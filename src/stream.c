#include "rampwise/stream.h"

#include <math.h>
#include "valid.h"

#define REAL double
#define FMA_OF RAMPWISE_FMA
#define NAME(name) name
#define STREAM rampwise_stream
#define INTERVAL rampwise_interval
#define WATCH rampwise_watch
#define COEFFS rampwise_coeffs
#define STATE rampwise_state
#define COEFFS_MAKE rampwise_coeffs_make
#define COEFFS_OK coeffs_are_made
#define STATE_OK state_is_finite
#define START(s, p) rampwise_start(s, 0, 0, p)
#define START_SETTLED rampwise_start_settled
#define STEP rampwise_step
#define OUTPUT_ROW rampwise_output_row
#define SAVED_REAL rampwise_saved_double_
#define SAVED_COEFFS saved_coeffs
#define SAVED_STATE saved_state
#define SAVED_KIND SAVED_STREAM
#include "stream_body.h"

void rampwise_stream_options_init(rampwise_stream_options *options)
{
    memset(options, 0, sizeof *options);
    options->size = sizeof *options;
    options->start = RAMPWISE_AT_REST;
    options->missing = RAMPWISE_GAP_BRIDGE;
    options->beyond = RAMPWISE_GAP_RESTART;
    options->missing_raw = INT32_MIN;
    options->longest = 10;
    options->ticks = 1;
    options->scale = 1;
    options->rail_low = -INFINITY;
    options->rail_high = INFINITY;
    options->output_count = 1;
    options->output[0].quantity = RAMPWISE_DISPLACEMENT;
}

int rampwise_interval_make(rampwise_interval *interval, const rampwise_coeffs *c, uint64_t ticks,
                           uint64_t interval_ticks)
{
    const uint64_t most = (uint64_t)1 << 53;
    rampwise_interval made;
    if (interval == NULL || c == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    if (ticks == 0 || interval_ticks == 0 || ticks > most || interval_ticks > most)
        return RAMPWISE_ERROR_COUNT;
    made.ticks = interval_ticks;
    const int status = rampwise_coeffs_make(&made.c, &c->system, interval_dt(c->dt, interval_ticks, ticks),
                                            c->input, c->between);
    if (status == RAMPWISE_OK)
        *interval = made;
    return status;
}
