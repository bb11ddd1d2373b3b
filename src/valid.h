/* Checks that more than one concept makes where data enter. */
#ifndef RAMPWISE_VALID_H
#define RAMPWISE_VALID_H

#include <math.h>
#include <string.h>
#include "precision.h"
#include "rampwise/status.h"

static inline int coeffs_are_made(const real_coeffs *c)
{
    return c->input >= RAMPWISE_FORCE && c->input <= RAMPWISE_BASE_DISPLACEMENT &&
           (c->between == RAMPWISE_RAMP || c->between == RAMPWISE_HOLD);
}

static inline int state_is_finite(const real_state *s)
{
    return isfinite(s->u) && isfinite(s->v) && isfinite(s->p) && isfinite(s->p_before)
#ifdef SINGLE_PRECISION
           && isfinite(s->u_low) && isfinite(s->v_low)
#endif
        ;
}

static inline int check_pair(const real_coeffs *c, const real_state *s)
{
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    return state_is_finite(s) ? RAMPWISE_OK : RAMPWISE_ERROR_STATE;
}

/* A status with the index of the sample at fault. */
static inline int blame(int status, size_t index, size_t *bad)
{
    if (bad != NULL)
        *bad = index;
    return status;
}

/* What the sampling has cost can be estimated where the input is on a line and its kinks do
   not make the response jump. */
static inline int check_estimable(int input, int between)
{
    if (between != RAMPWISE_RAMP)
        return RAMPWISE_ERROR_BETWEEN;
    return input != RAMPWISE_BASE_DISPLACEMENT ? RAMPWISE_OK : RAMPWISE_ERROR_INPUT;
}

/* By the bits: single precision keeps clear of double arithmetic. */
static inline int same_dt(const real_coeffs *a, const real_coeffs *b)
{
    return memcmp(&a->dt, &b->dt, sizeof a->dt) == 0;
}

/* Coefficients of oscillators that share one input. */
static inline int check_alike(size_t n, const real_coeffs *c)
{
    for (size_t i = 0; i < n; ++i) {
        if (!coeffs_are_made(&c[i]))
            return RAMPWISE_ERROR_NOT_MADE;
        if (!same_dt(&c[i], &c[0]) || c[i].input != c[0].input || c[i].between != c[0].between)
            return RAMPWISE_ERROR_DIFFERENT;
    }
    return RAMPWISE_OK;
}

/* Their states. */
static inline int check_shared_input(size_t n, const real_state *s)
{
    for (size_t i = 0; i < n; ++i) {
        if (!state_is_finite(&s[i]))
            return RAMPWISE_ERROR_STATE;
        if (s[i].p != s[0].p || s[i].p_before != s[0].p_before)
            return RAMPWISE_ERROR_DIFFERENT;
    }
    return RAMPWISE_OK;
}

#endif
