/* Checks that more than one concept makes where data enter. */
#ifndef RAMPWISE_VALID_H
#define RAMPWISE_VALID_H

#include <math.h>
#include "rampwise/step.h"

static inline int coeffs_are_made(const rampwise_coeffs *c)
{
    return c->input >= RAMPWISE_FORCE && c->input <= RAMPWISE_BASE_DISPLACEMENT &&
           (c->between == RAMPWISE_RAMP || c->between == RAMPWISE_HOLD) && c->dt > 0;
}

static inline int state_is_finite(const rampwise_state *s)
{
    return isfinite(s->u) && isfinite(s->v) && isfinite(s->p) && isfinite(s->p_before);
}

#endif
