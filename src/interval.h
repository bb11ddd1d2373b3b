/* The length of a step that is given in ticks. */
#ifndef RAMPWISE_INTERVAL_H
#define RAMPWISE_INTERVAL_H

#include <math.h>
#include "twofold.h"

/* dt ticks / per, rounded once; ticks and per up to 2^53. */
static inline double interval_dt(double dt, uint64_t ticks, uint64_t per)
{
    int exponent;
    const double mantissa = frexp(dt, &exponent);
    const twofold length =
        twofold_divide(twofold_product(mantissa, (double)ticks), (twofold){(double)per, 0});
    return ldexp(length.hi, exponent);
}

#endif
