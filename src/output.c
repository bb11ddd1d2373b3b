#include "rampwise/output.h"

#include <math.h>
#include <string.h>
#include "valid.h"

/* factor (u - x_g) and factor (v - x_g'): relative motion, of the base or of the fixed frame */
static void relative_displacement(const real_coeffs *c, real factor, real row[4])
{
    row[0] = factor;
    row[2] = c->input == RAMPWISE_BASE_DISPLACEMENT ? -factor : 0;
}

static void relative_velocity(const real_coeffs *c, real factor, real row[4])
{
    row[1] = factor;
    if (c->input == RAMPWISE_BASE_DISPLACEMENT && c->between == RAMPWISE_RAMP)
        row[3] = -over_dt(c, factor);
}

int PUBLIC(output_row)(const real_coeffs *c, const rampwise_output *output, real *row)
{
    real made[4] = {0, 0, 0, 0};
    if (c == NULL || output == NULL || row == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    switch (output->quantity) {
    case RAMPWISE_DISPLACEMENT:
        relative_displacement(c, 1, made);
        break;
    case RAMPWISE_VELOCITY:
        relative_velocity(c, 1, made);
        break;
    case RAMPWISE_TOTAL_ACCELERATION:
        memcpy(made, c->total, sizeof made);
        break;
    case RAMPWISE_ACCELERATION:
        memcpy(made, c->acceleration, sizeof made);
        break;
    case RAMPWISE_SPRING_FORCE:
        relative_displacement(c, stiffness_of(c), made);
        break;
    case RAMPWISE_DAMPER_FORCE:
        relative_velocity(c, damper_of(c), made);
        break;
    case RAMPWISE_LOAD:
        made[2] = 1;
        break;
    case RAMPWISE_WEIGHTED:
        for (int i = 0; i < 4; ++i)
            made[i] = (real)output->row[i];
        break;
    default:
        return RAMPWISE_ERROR_QUANTITY;
    }
    for (int i = 0; i < 4; ++i)
        if (!isfinite(made[i]))
            return RAMPWISE_ERROR_COEFFICIENT;
    memcpy(row, made, sizeof made);
    return RAMPWISE_OK;
}
