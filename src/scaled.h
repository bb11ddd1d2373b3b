/* Twofold numbers with an exponent of their own, for what is on the way to a coefficient. */
#ifndef RAMPWISE_SCALED_H
#define RAMPWISE_SCALED_H

#include <math.h>
#include "twofold.h"

/* A twofold number times a power of two, so that the range of doubles does not limit what is on the
   way: value.hi is in [0.5, 1), or 0 with an exponent below all others. */
typedef struct scaled {
    twofold value;
    int exponent;
} scaled;

static const scaled scaled_zero = {{0, 0}, -100000};

static inline scaled scaled_double(double x)
{
    int exponent;
    const double mantissa = frexp(x, &exponent);
    return x == 0 ? scaled_zero : (scaled){{mantissa, 0}, exponent};
}

/* value is 0 or in (0.125, 4). */
static inline scaled scaled_of(twofold value, int exponent)
{
    if (value.hi == 0)
        return scaled_zero;
    const double size = fabs(value.hi);
    const int shift = (size >= 0.25) + (size >= 0.5) + (size >= 1) + (size >= 2) - 2;
    return (scaled){twofold_times_power(value, -shift), exponent + shift};
}

static inline scaled scaled_multiply(scaled a, scaled b)
{
    return scaled_of(twofold_multiply(a.value, b.value), a.exponent + b.exponent);
}

static inline scaled scaled_divide(scaled a, scaled b)
{
    return scaled_of(twofold_divide(a.value, b.value), a.exponent - b.exponent);
}

/* What is below 2^-120 cannot touch numbers near 1 in twofold arithmetic, and its powers would
   underflow: it counts as zero. */
static inline twofold beside_one(scaled a)
{
    return a.exponent < -120 ? (twofold){0, 0} : twofold_times_power(a.value, a.exponent);
}

static const scaled unity = {{0.5, 0}, 1};

/* factor x, rounded once; + 0.0 makes -0 plain. */
static inline double rounded(scaled factor, twofold x)
{
    return scalbn(twofold_multiply(factor.value, x).hi, factor.exponent) + 0.0;
}

#endif
