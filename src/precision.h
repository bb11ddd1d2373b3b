/* Names in the precision that a file is compiled for. A file that serves both precisions is compiled by
   itself in double; its twin X_f32.c defines SINGLE_PRECISION and includes it. */
#ifndef RAMPWISE_PRECISION_H
#define RAMPWISE_PRECISION_H

#include "rampwise/record.h"

#ifdef SINGLE_PRECISION
typedef float real;
#define PUBLIC(name) rampwise_##name##_f32
#define PRIVATE(name) rampwise_##name##_f32_
#define REAL_FMA RAMPWISE_FMAF
#define REAL_SIZE fabsf
#else
typedef double real;
#define PUBLIC(name) rampwise_##name
#define PRIVATE(name) rampwise_##name##_
#define REAL_FMA RAMPWISE_FMA
#define REAL_SIZE fabs
#endif

typedef PUBLIC(coeffs) real_coeffs;
typedef PUBLIC(state) real_state;
typedef PUBLIC(history) real_history;

#ifdef SINGLE_PRECISION
static inline float stiffness_of(const rampwise_coeffs_f32 *c)
{
    return c->stiffness;
}

static inline float damper_of(const rampwise_coeffs_f32 *c)
{
    return c->damper;
}

/* The oscillator, as far as single precision kept it */
static inline rampwise_system system_of(const rampwise_coeffs_f32 *c)
{
    return (rampwise_system){(double)c->mass, (double)c->damper, (double)c->stiffness};
}

/* A change over one step, by the time it took */
static inline float over_dt(const rampwise_coeffs_f32 *c, float change)
{
    return change * c->rate;
}
#else
static inline double stiffness_of(const rampwise_coeffs *c)
{
    return c->system.stiffness;
}

static inline double damper_of(const rampwise_coeffs *c)
{
    return c->system.damper;
}

static inline rampwise_system system_of(const rampwise_coeffs *c)
{
    return c->system;
}

static inline double over_dt(const rampwise_coeffs *c, double change)
{
    return change / c->dt;
}
#endif

#endif
