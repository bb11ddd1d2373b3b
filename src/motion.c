#include "rampwise/motion.h"

#include "row.h"

double rampwise_acceleration(const rampwise_coeffs *c, const rampwise_state *s)
{
    return row_value(c->acceleration, s);
}

double rampwise_total_acceleration(const rampwise_coeffs *c, const rampwise_state *s)
{
    return row_value(c->total, s);
}

double rampwise_relative_displacement(const rampwise_coeffs *c, const rampwise_state *s)
{
    return c->input == RAMPWISE_BASE_DISPLACEMENT ? s->u - s->p : s->u;
}

double rampwise_relative_velocity(const rampwise_coeffs *c, const rampwise_state *s)
{
    if (c->input == RAMPWISE_BASE_DISPLACEMENT && c->between == RAMPWISE_RAMP)
        return s->v - (s->p - s->p_before) / c->dt;
    return s->v;
}

double rampwise_spring_force(const rampwise_coeffs *c, const rampwise_state *s)
{
    return c->system.stiffness * rampwise_relative_displacement(c, s);
}

double rampwise_damper_force(const rampwise_coeffs *c, const rampwise_state *s)
{
    return c->system.damper * rampwise_relative_velocity(c, s);
}
