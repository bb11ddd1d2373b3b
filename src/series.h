/* The motion inside a piece of a step as a power series, its slope's zeros and where
   it turns, in both precisions. */
#ifndef RAMPWISE_SERIES_H
#define RAMPWISE_SERIES_H

#include <float.h>
#include <math.h>
#include "precision.h"

#ifdef SINGLE_PRECISION
#define REAL_C(x) x##f
#define REAL_EPSILON FLT_EPSILON
#else
#define REAL_C(x) x
#define REAL_EPSILON DBL_EPSILON
#endif

/* z over a piece of length 1: z + sum of e[n] x^n, n = 1 to count. Above the second power the terms follow
   z'''' + S z''' + K z'' = 0; they end where two in a row have fallen below 2^-60 of the first two. With
   |S| and |K| up to 1 that is before 24. */
enum { TERMS = 24 };

typedef struct series {
    real z, e[TERMS + 1];
    int count;
} series;

/* clang-format off */
static const real inverse_factorial[TERMS + 1] = {
    REAL_C(1.0), REAL_C(1.0), REAL_C(0.5), REAL_C(0.16666666666666666), REAL_C(0.041666666666666664),
    REAL_C(0.008333333333333333), REAL_C(0.001388888888888889), REAL_C(0.0001984126984126984),
    REAL_C(2.48015873015873e-05), REAL_C(2.7557319223985893e-06), REAL_C(2.755731922398589e-07),
    REAL_C(2.505210838544172e-08), REAL_C(2.08767569878681e-09), REAL_C(1.6059043836821613e-10),
    REAL_C(1.1470745597729725e-11), REAL_C(7.647163731819816e-13), REAL_C(4.779477332387385e-14),
    REAL_C(2.8114572543455206e-15), REAL_C(1.5619206968586225e-16), REAL_C(8.22063524662433e-18),
    REAL_C(4.110317623312165e-19), REAL_C(1.9572941063391263e-20), REAL_C(8.896791392450574e-22),
    REAL_C(3.8681701706306835e-23), REAL_C(1.6117375710961184e-24),
};
/* clang-format on */

/* From z and three derivatives where the piece begins. */
static void series_make(series *s, real z, real z1, real z2, real z3, real damping, real stiffness,
                        real length)
{
    const real S = damping * length, K = stiffness * length * length;
    real before = z2 * length * length, last = z3 * length * length * length;
    s->z = z;
    s->e[1] = z1 * length;
    s->e[2] = before / 2;
    s->e[3] = last * inverse_factorial[3];
    const real small = REAL_EPSILON / 256 * (REAL_SIZE(s->e[1]) + REAL_SIZE(s->e[2]));
    int n = 3;
    while (n < TERMS && REAL_SIZE(s->e[n]) + REAL_SIZE(s->e[n - 1]) > small) {
        const real next = -S * last - K * before;
        before = last;
        last = next;
        ++n;
        s->e[n] = last * inverse_factorial[n];
    }
    s->count = n;
}

static real series_value(const series *s, real x)
{
    real sum = 0;
    for (int n = s->count; n >= 1; --n)
        sum = (sum + s->e[n]) * x;
    return s->z + sum;
}

/* The first derivative and the second. */
static real series_slope(const series *s, real x, real *second)
{
    real first = 0, next = 0;
    for (int n = s->count; n >= 1; --n) {
        next = next * x + first;
        first = first * x + (real)n * s->e[n];
    }
    *second = next;
    return first;
}

static int opposite(real a, real b)
{
    return (a < 0 && b > 0) || (a > 0 && b < 0);
}

/* The zero of the slope between low and high, where it has opposite signs: Newton's steps, halving where one
   leaves the bracket. */
static real slope_zero(const series *s, real low, real high, real at_low, real at_high)
{
    const int rising = at_low < 0;
    real x = low + (high - low) * (at_low / (at_low - at_high)), second;
    for (int i = 0; i < 100; ++i) {
        const real slope = series_slope(s, x, &second);
        if (slope == 0)
            return x;
        if ((slope < 0) == rising)
            low = x;
        else
            high = x;
        real next = x - slope / second;
        if (!(next > low && next < high))
            next = (low + high) / 2;
        if (REAL_SIZE(next - x) <= REAL_EPSILON / 4)
            return next;
        x = next;
    }
    return x;
}

/* Where the slope turns: the zero of the second derivative, by halving. It need not be sharp: beside it the
   slope is flat. */
static real turning_point(const series *s)
{
    real low = 0, high = 1, second;
    (void)series_slope(s, 0, &second);
    const int rising = second < 0;
    for (int i = 0; i < 54; ++i) {
        const real middle = (low + high) / 2;
        (void)series_slope(s, middle, &second);
        if ((second < 0) == rising)
            low = middle;
        else
            high = middle;
    }
    return (low + high) / 2;
}

#endif
