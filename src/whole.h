/* Whole numbers of 64 bits from and to the precision of a file, in single precision too without double
   arithmetic, by which compilers do it where there is no instruction for it. */
#ifndef RAMPWISE_WHOLE_H
#define RAMPWISE_WHOLE_H

#include "precision.h"

/* x, 0 or more and below 2^64, cut to a whole number; *rest is what was cut off. Nothing is rounded. */
static inline uint64_t whole_of(real x, real *rest)
{
    const real wrap = (real)4294967296.0;
    const uint32_t high = (uint32_t)(x / wrap);
    const real below = x - (real)high * wrap;
    const uint32_t low = (uint32_t)below;
    *rest = below - (real)low;
    return (uint64_t)high << 32 | low;
}

/* n, rounded once */
static inline real real_of(uint64_t n)
{
#ifdef SINGLE_PRECISION
    real unit = 1;
    for (; n >> 32 != 0; n = n >> 1 | (n & 1)) /* the last bit tells whether there was more behind it */
        unit *= 2;
    return (real)(uint32_t)n * unit;
#else
    return (real)n;
#endif
}

#endif
