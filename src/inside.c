#include "rampwise/step.h"

#include <math.h>
#include "rampwise/status.h"
#include "valid.h"

/* The state after a part of the step, for 0 < fraction < 1. */
static int part_of_step(const rampwise_coeffs *c, rampwise_state *s, double p_next, double fraction)
{
    rampwise_coeffs part;
    const int ramp = c->between == RAMPWISE_RAMP;
    const double change = ramp ? p_next - s->p : 0;
    const double p_before = s->p_before;
    const int status = rampwise_coeffs_make(&part, &c->system, fraction * c->dt, c->input, c->between);
    if (status != RAMPWISE_OK)
        return status;
    rampwise_step(&part, s, RAMPWISE_FMA(fraction, change, s->p));
    s->p_before = ramp ? s->p - change : p_before;
    return RAMPWISE_OK;
}

int rampwise_inside(const rampwise_coeffs *c, const rampwise_state *s, double p_next, double fraction,
                    rampwise_state *at)
{
    if (c == NULL || s == NULL || at == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    if (!(fraction >= 0 && fraction <= 1))
        return RAMPWISE_ERROR_FRACTION;
    if (!state_is_finite(s))
        return RAMPWISE_ERROR_STATE;
    if (!isfinite(p_next))
        return RAMPWISE_ERROR_SAMPLE;
    rampwise_state inside = *s;
    int status = RAMPWISE_OK;
    if (fraction == 1)
        rampwise_step(c, &inside, p_next);
    else if (fraction > 0)
        status = part_of_step(c, &inside, p_next, fraction);
    else if (c->between == RAMPWISE_RAMP)
        inside.p_before = s->p - (p_next - s->p);
    if (status != RAMPWISE_OK)
        return status;
    if (!state_is_finite(&inside))
        return RAMPWISE_ERROR_OVERFLOW;
    *at = inside;
    return RAMPWISE_OK;
}
