/* The motion inside a piece of a step as a power series, its slope's zeros and where it turns: one body for both
   precisions. The including file has defined REAL, REAL_C (a constant of it), REAL_EPSILON and
   REAL_SIZE (the absolute value). */
#ifndef RAMPWISE_SERIES_H
#define RAMPWISE_SERIES_H

/* z over a piece of length 1: z + sum of e[n] x^n, n = 1 to count. Above the second power the terms follow
   z'''' + S z''' + K z'' = 0; they end where two in a row have fallen below 2^-60 of the first two. With |S| and
   |K| up to 1 that is before 24. */
enum { TERMS = 24 };

typedef struct series {
    REAL z, e[TERMS + 1];
    int count;
} series;

/* clang-format off */
static const REAL inverse_factorial[TERMS + 1] = {
    REAL_C(1.0), REAL_C(1.0), REAL_C(0.5), REAL_C(0.16666666666666666), REAL_C(0.041666666666666664),
    REAL_C(0.008333333333333333), REAL_C(0.001388888888888889), REAL_C(0.0001984126984126984), REAL_C(2.48015873015873e-05), REAL_C(2.7557319223985893e-06),
    REAL_C(2.755731922398589e-07), REAL_C(2.505210838544172e-08), REAL_C(2.08767569878681e-09), REAL_C(1.6059043836821613e-10), REAL_C(1.1470745597729725e-11),
    REAL_C(7.647163731819816e-13), REAL_C(4.779477332387385e-14), REAL_C(2.8114572543455206e-15), REAL_C(1.5619206968586225e-16), REAL_C(8.22063524662433e-18),
    REAL_C(4.110317623312165e-19), REAL_C(1.9572941063391263e-20), REAL_C(8.896791392450574e-22), REAL_C(3.8681701706306835e-23), REAL_C(1.6117375710961184e-24),
};
/* clang-format on */

/* From z and three derivatives where the piece begins. */
static void series_make(series *s, REAL z, REAL z1, REAL z2, REAL z3, REAL damping, REAL stiffness,
                        REAL length)
{
    const REAL S = damping * length, K = stiffness * length * length;
    REAL before = z2 * length * length, last = z3 * length * length * length;
    s->z = z;
    s->e[1] = z1 * length;
    s->e[2] = before / 2;
    s->e[3] = last * inverse_factorial[3];
    const REAL small = REAL_EPSILON / 256 * (REAL_SIZE(s->e[1]) + REAL_SIZE(s->e[2]));
    int n = 3;
    while (n < TERMS && REAL_SIZE(s->e[n]) + REAL_SIZE(s->e[n - 1]) > small) {
        const REAL next = -S * last - K * before;
        before = last;
        last = next;
        ++n;
        s->e[n] = last * inverse_factorial[n];
    }
    s->count = n;
}

static REAL series_value(const series *s, REAL x)
{
    REAL sum = 0;
    for (int n = s->count; n >= 1; --n)
        sum = (sum + s->e[n]) * x;
    return s->z + sum;
}

/* The first derivative and the second. */
static REAL series_slope(const series *s, REAL x, REAL *second)
{
    REAL first = 0, next = 0;
    for (int n = s->count; n >= 1; --n) {
        next = next * x + first;
        first = first * x + (REAL)n * s->e[n];
    }
    *second = next;
    return first;
}

static int opposite(REAL a, REAL b)
{
    return (a < 0 && b > 0) || (a > 0 && b < 0);
}

/* The zero of the slope between low and high, where it has opposite signs: Newton's steps, halving where one
   leaves the bracket. */
static REAL slope_zero(const series *s, REAL low, REAL high, REAL at_low, REAL at_high)
{
    const int rising = at_low < 0;
    REAL x = low + (high - low) * (at_low / (at_low - at_high)), second;
    for (int i = 0; i < 100; ++i) {
        const REAL slope = series_slope(s, x, &second);
        if (slope == 0)
            return x;
        if ((slope < 0) == rising)
            low = x;
        else
            high = x;
        REAL next = x - slope / second;
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
static REAL turning_point(const series *s)
{
    REAL low = 0, high = 1, second;
    (void)series_slope(s, 0, &second);
    const int rising = second < 0;
    for (int i = 0; i < 54; ++i) {
        const REAL middle = (low + high) / 2;
        (void)series_slope(s, middle, &second);
        if ((second < 0) == rising)
            low = middle;
        else
            high = middle;
    }
    return (low + high) / 2;
}

#endif
