#include "rampwise/motion.h"

#include "row.h"

real PUBLIC(acceleration)(const real_coeffs *c, const real_state *s)
{
    return row_value(c->acceleration, s);
}

real PUBLIC(total_acceleration)(const real_coeffs *c, const real_state *s)
{
    return row_value(c->total, s);
}

real PUBLIC(relative_displacement)(const real_coeffs *c, const real_state *s)
{
    return c->input == RAMPWISE_BASE_DISPLACEMENT ? s->u - s->p : s->u;
}

real PUBLIC(relative_velocity)(const real_coeffs *c, const real_state *s)
{
    if (c->input == RAMPWISE_BASE_DISPLACEMENT && c->between == RAMPWISE_RAMP)
        return s->v - over_dt(c, s->p - s->p_before);
    return s->v;
}

real PUBLIC(spring_force)(const real_coeffs *c, const real_state *s)
{
    return stiffness_of(c) * PUBLIC(relative_displacement)(c, s);
}

real PUBLIC(damper_force)(const real_coeffs *c, const real_state *s)
{
    return damper_of(c) * PUBLIC(relative_velocity)(c, s);
}
