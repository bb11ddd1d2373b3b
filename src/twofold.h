/* Twofold arithmetic: a number carried as the unevaluated sum of two doubles, hi + lo with
   |lo| <= ulp(hi)/2, about 106 bits. T. J. Dekker, Numer. Math. 18, 224-242, 1971; sums after
   D. E. Knuth.

   Exact products come from a fused multiply-add where the target has one and from splitting
   elsewhere. Both are exact, so the bits are equal, as long as nothing overflows in the splitting
   or underflows in its tail: callers keep every factor between 2^-400 and 2^450 in size, or so
   small that its tail is nothing beside what it is added to. */
#ifndef RAMPWISE_TWOFOLD_H
#define RAMPWISE_TWOFOLD_H

#include <stdint.h>
#include <string.h>
#include "rampwise/fused.h"

typedef struct twofold {
    double hi, lo;
} twofold;

/* a + b where |a| >= |b|, or a = 0 */
static inline twofold twofold_ordered_sum(double a, double b)
{
    const double sum = a + b;
    return (twofold){sum, b - (sum - a)};
}

static inline twofold twofold_sum(double a, double b)
{
    const double sum = a + b;
    const double b_part = sum - a;
    return (twofold){sum, (a - (sum - b_part)) + (b - b_part)};
}

static inline twofold twofold_product(double a, double b)
{
    const double product = a * b;
#ifdef RAMPWISE_FMA_IN_HARDWARE
    return (twofold){product, RAMPWISE_FMA(a, b, -product)};
#else
    const double splitter = 134217729.0; /* 2^27 + 1 */
    const double a_wide = splitter * a, b_wide = splitter * b;
    const double a_hi = a_wide - (a_wide - a), b_hi = b_wide - (b_wide - b);
    const double a_lo = a - a_hi, b_lo = b - b_hi;
    return (twofold){product, ((a_hi * b_hi - product) + a_hi * b_lo + a_lo * b_hi) + a_lo * b_lo};
#endif
}

static inline twofold twofold_negative(twofold a)
{
    return (twofold){-a.hi, -a.lo};
}

/* Good to 2^-104 of the larger operand: what cancels is not won back, since operands are not exact. */
static inline twofold twofold_add(twofold a, twofold b)
{
    const twofold sum = twofold_sum(a.hi, b.hi);
    return twofold_ordered_sum(sum.hi, sum.lo + (a.lo + b.lo));
}

static inline twofold twofold_subtract(twofold a, twofold b)
{
    return twofold_add(a, twofold_negative(b));
}

static inline twofold twofold_multiply(twofold a, twofold b)
{
    const twofold product = twofold_product(a.hi, b.hi);
    return twofold_ordered_sum(product.hi, product.lo + (a.hi * b.lo + a.lo * b.hi));
}

static inline twofold twofold_multiply_by(twofold a, double b)
{
    const twofold product = twofold_product(a.hi, b);
    return twofold_ordered_sum(product.hi, product.lo + a.lo * b);
}

/* Two digits of long division and the remainder's third. */
static inline twofold twofold_divide(twofold a, twofold b)
{
    const double first = a.hi / b.hi;
    const twofold rest = twofold_subtract(a, twofold_multiply_by(b, first));
    const double second = rest.hi / b.hi;
    const twofold last = twofold_subtract(rest, twofold_multiply_by(b, second));
    const twofold quotient = twofold_ordered_sum(first, second);
    return twofold_ordered_sum(quotient.hi, quotient.lo + last.hi / b.hi);
}

/* 2^exponent, -1022 to 1023 */
static inline double power_of_two(int exponent)
{
    const uint64_t bits = (uint64_t)(exponent + 1023) << 52;
    double power;
    memcpy(&power, &bits, sizeof power);
    return power;
}

/* a 2^exponent, where neither leaves the normal range */
static inline twofold twofold_times_power(twofold a, int exponent)
{
    const double power = power_of_two(exponent);
    return (twofold){a.hi * power, a.lo * power};
}

#endif
