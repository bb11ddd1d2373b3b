/* The response of one oscillator over one step, in twofold arithmetic: what the coefficients of both precisions
   are rounded from. */
#ifndef RAMPWISE_STEP_RESPONSE_H
#define RAMPWISE_STEP_RESPONSE_H

#include <math.h>
#include "rampwise/system.h"
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

/* One oscillator and one step, without units: K = k h^2/m, S = c h/m. */
typedef struct step {
    scaled K, S, h, h_over_m, stiffness_h_over_m;
} step;

/* Displacements after the step, from rest, for a unit of initial velocity, of constant load and of
   a ramp from zero to one, in units of h, h^2/m and h^3/m. They satisfy g + S G1 + K G2 = 1. */
typedef struct response {
    twofold g, G1, G2;
} response;

/* Of sys over dt for an input and between: RAMPWISE_OK, or what rampwise_coeffs_make answers. */
int rampwise_step_response_(step *s, response *r, const rampwise_system *sys, double dt, int input,
                            int between);

#endif
