/* rampwise/peak.h: the greatest and the least value of a response, and when.

   Where two values are equal, the earlier counts. */
#ifndef RAMPWISE_PEAK_H
#define RAMPWISE_PEAK_H

#include <stdint.h>
#include "linkage.h"

/* What is looked at. */
enum {
    RAMPWISE_DISPLACEMENT = 31,      /* of the mass against the base (motion.h) */
    RAMPWISE_VELOCITY = 32,          /* of the mass against the base */
    RAMPWISE_TOTAL_ACCELERATION = 33 /* of the mass against a fixed frame */
};

/* Flags, to be added up. */
enum {
    RAMPWISE_AT_SAMPLES = 1, /* look at the samples only; without it, between them too */
    RAMPWISE_RESIDUAL = 2,   /* the free motion after the last sample, instead of the time before */
    RAMPWISE_MAXIMAX = 4,    /* both times */
    RAMPWISE_EVIDENCE = 8    /* estimate what the sampling has cost too (evidence.h) */
};

/* A value at (sample + fraction) dt after sample 0, 0 <= fraction < 1. In residuals sample is
   UINT64_MAX for a value that is never reached: an infinite one, or a limit. */
typedef struct rampwise_instant {
    double value;
    uint64_t sample;
    double fraction;
} rampwise_instant;

/* From rest, which counts as the value 0 at sample 0, high.value >= 0 >= low.value. */
typedef struct rampwise_peak {
    rampwise_instant high, low;
} rampwise_peak;

RAMPWISE_BEGIN

/* The larger in size of the two, whose value carries the sign; the earlier where they are equal. peak
   must not be NULL. Any thread. Since 0.1. */
RAMPWISE_API const rampwise_instant *rampwise_peak_larger(const rampwise_peak *peak);

RAMPWISE_END

#endif
