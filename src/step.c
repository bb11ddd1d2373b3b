#include "rampwise/step.h"

#include <math.h>
#include "rampwise/status.h"
#include "valid.h"

/* Static equilibrium, without a check of its size. */
static real rest_position(const real_coeffs *c, real p0)
{
    switch (c->input) {
    case RAMPWISE_FORCE:
        return p0 / stiffness_of(c);
    case RAMPWISE_BASE_ACCELERATION:
        return p0 / c->acceleration[0]; /* -k/m */
    case RAMPWISE_BASE_VELOCITY:
        return 0;
    default:
        return p0;
    }
}

int PUBLIC(start_settled)(const real_coeffs *c, real_state *s, real p0)
{
    if (c == NULL || s == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    if (!isfinite(p0))
        return RAMPWISE_ERROR_SAMPLE;
    const int loaded = p0 != 0 && (c->input == RAMPWISE_FORCE || c->input == RAMPWISE_BASE_ACCELERATION);
    if (loaded && stiffness_of(c) == 0)
        return RAMPWISE_ERROR_NO_REST;
    const real u = p0 != 0 ? rest_position(c, p0) : 0;
    if (!isfinite(u))
        return RAMPWISE_ERROR_OVERFLOW;
    PUBLIC(start)(s, u, 0, p0);
    return RAMPWISE_OK;
}
