/* Random numbers made from integers, so that no compiler, option or processor can change them, and the hash of results. */
#ifndef BITS_NUMBERS_H
#define BITS_NUMBERS_H

#include <stdint.h>
#include <string.h>
#include "rampwise/coefficients.h"

enum { KINDS = 7 };

static const int kinds[KINDS][2] = {{RAMPWISE_FORCE, RAMPWISE_RAMP},
                                    {RAMPWISE_FORCE, RAMPWISE_HOLD},
                                    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP},
                                    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_HOLD},
                                    {RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP},
                                    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP},
                                    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD}};

static uint64_t state = 20261201;

/* A multiplicative generator: Knuth, The Art of Computer Programming, vol. 2, 3.3.4, line 26. */
static inline uint32_t random_integer(void)
{
    state = state * UINT64_C(6364136223846793005) + 1;
    return (uint32_t)(state >> 32);
}

/* 25 random bits times 2^exponent, by bits alone; products and sums of two are exact */
static inline double number(int exponent)
{
    const uint64_t bits = (uint64_t)(exponent + 1023) << 52 | (uint64_t)(random_integer() >> 8) << 28;
    double x;
    memcpy(&x, &bits, sizeof x);
    return x;
}

static inline double signed_number(int exponent)
{
    const double x = number(exponent);
    return random_integer() & 1 ? -x : x;
}

/* FNV-1a (draft-eastlake-fnv), 64 bits */
static inline uint64_t hashed(uint64_t hash, const void *data, size_t size)
{
    const unsigned char *const bytes = data;
    for (size_t i = 0; i < size; ++i)
        hash = (hash ^ bytes[i]) * UINT64_C(1099511628211);
    return hash;
}

static const uint64_t empty = UINT64_C(14695981039346656037);

static inline int range(int low, int high)
{
    return low + (int)(random_integer() % (uint32_t)(high - low + 1));
}

static inline rampwise_system random_system(int kind)
{
    rampwise_system sys;
    sys.mass = number(range(-20, 20));
    sys.damper = signed_number(range(-40, 4)) * sys.mass;
    sys.stiffness = signed_number(range(-60, 6)) * sys.mass;
    if (kind == KINDS - 1 || random_integer() % 16 == 0)
        sys.damper = 0;
    if (random_integer() % 16 == 0)
        sys.stiffness = 0;
    return sys;
}

#endif
