/* Streams: one oscillator on live data, with the watches attached to it. */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gateway.h"

/* UINT64_MAX is the library's "none". */
static double from_number(uint64_t x)
{
    return x == UINT64_MAX ? NAN : (double)x;
}

/* {quantity; its four weights} */
static rampwise_output output_from(const double *five)
{
    if (!(fabs(five[0]) < 1e6))
        refuse("an output is no quantity");
    return (rampwise_output){{five[1], five[2], five[3], five[4]}, (int32_t)five[0], 0};
}

static rampwise_stream_options stream_options(const mxArray **in)
{
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.start = integer(in[0]);
    o.missing = integer(in[1]);
    o.beyond = integer(in[2]);
    o.longest = sample_number(in[3]);
    o.ticks = sample_number(in[4]);
    const double *const rails = doubles(in[5], 2);
    o.rail_low = rails[0];
    o.rail_high = rails[1];
    const size_t count = mxGetN(real_double(in[6]));
    if (count > RAMPWISE_STREAM_OUTPUTS || (count > 0 && mxGetM(in[6]) != 5))
        refuse("outputs are up to eight columns of five");
    o.output_count = (int32_t)count;
    for (size_t i = 0; i < count; ++i)
        o.output[i] = output_from(mxGetPr(in[6]) + 5 * i);
    const double *const raw = doubles(in[7], 3);
    o.scale = raw[0];
    o.offset = raw[1];
    if (!(raw[2] >= INT32_MIN && raw[2] <= INT32_MAX))
        refuse("a raw sample is of 32 bits");
    o.missing_raw = (int32_t)raw[2];
    return o;
}

/* Columns {value; hysteresis; direction; latch}. */
static void take_levels(rampwise_watch_options *o, const mxArray *a)
{
    const double *const given = mxGetPr(real_double(a));
    const size_t count = mxGetN(a);
    if (count > RAMPWISE_WATCH_LEVELS || (count > 0 && mxGetM(a) != 4))
        refuse("levels are up to four columns of four");
    o->level_count = (int32_t)count;
    for (size_t i = 0; i < count; ++i)
        o->level[i] = (rampwise_level){given[4 * i], given[4 * i + 1], given[4 * i + 2] < 0 ? -1 : 1,
                                       given[4 * i + 3] != 0};
}

static void put_instant(double *three, const rampwise_instant *at)
{
    three[0] = at->value;
    three[1] = (double)at->sample;
    three[2] = at->fraction;
}

#define BODY "streams_body.h"
#include "both_precisions.h"
