#include "rampwise/watch.h"

#include <float.h>
#include <math.h>
#include "valid.h"

#define REAL double
#define REAL_C(x) x
#define REAL_EPSILON DBL_EPSILON
#define REAL_SIZE fabs
#define FMA_OF RAMPWISE_FMA
#define FLOOR floor
#define NAME(name) name
#define WATCH rampwise_watch
#define WATCHED rampwise_watched
#define QUEUE struct rampwise_watch_queue_
#define LEVEL_STATE struct rampwise_watch_level_
#define INSTANT rampwise_instant
#define PEAK rampwise_peak
#define COEFFS rampwise_coeffs
#define STATE rampwise_state
#define COEFFS_MAKE rampwise_coeffs_make
#define COEFFS_OK coeffs_are_made
#define STATE_OK state_is_finite
#define STEP rampwise_step
#define OUTPUT_ROW rampwise_output_row
#define SAVED_REAL rampwise_saved_double_
#define SAVED_COEFFS saved_coeffs
#define SAVED_KIND SAVED_WATCH
#include "watch_body.h"

void rampwise_watch_options_init(rampwise_watch_options *options)
{
    memset(options, 0, sizeof *options);
    options->size = sizeof *options;
    options->output.quantity = RAMPWISE_DISPLACEMENT;
}
