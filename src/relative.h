/* Relative motion inside a step, where the input is a line: the state of it, its quantity with derivatives,
   and the way from one instant to another. */
#ifndef RAMPWISE_RELATIVE_H
#define RAMPWISE_RELATIVE_H

#include <float.h>
#include <math.h>
#include "extremes.h"

#define RELATIVE_ROUNDING (16 * DBL_EPSILON)

/* Relative motion at one instant: y'' + damping y' + stiffness y = f, f with the slope f_slope; and what
   rounding may have done to y and w. */
typedef struct relative {
    double y, w, f, f_slope, y_noise, w_noise;
} relative;

/* z and its first three derivatives, and what rounding may have done to the first two */
typedef struct derivatives {
    double z, z1, z2, z3, z1_noise, z2_noise;
} derivatives;

static inline derivatives derivatives_of(const extremes *x, relative r)
{
    const double a2 = r.f - x->damping * r.w - x->stiffness * r.y;
    const double a3 = r.f_slope - x->damping * a2 - x->stiffness * r.w;
    const double a4 = -x->damping * a3 - x->stiffness * a2;
    const double a5 = -x->damping * a4 - x->stiffness * a3;
    const double d = fabs(x->damping), k = fabs(x->stiffness);
    const double n2 =
        d * r.w_noise + k * r.y_noise + RELATIVE_ROUNDING * (fabs(r.f) + d * fabs(r.w) + k * fabs(r.y));
    const double n3 = d * n2 + k * r.w_noise, n4 = d * n3 + k * n2;
    if (x->quantity == RAMPWISE_DISPLACEMENT)
        return (derivatives){r.y, r.w, a2, a3, r.w_noise, n2};
    if (x->quantity == RAMPWISE_VELOCITY)
        return (derivatives){r.w, a2, a3, a4, n2, n3};
    if (x->c->input == RAMPWISE_FORCE)
        return (derivatives){a2, a3, a4, a5, n3, n4};
    /* The base's acceleration is -f. */
    return (derivatives){
        -x->damping * r.w - x->stiffness * r.y, -x->damping * a2 - x->stiffness * r.w, a4, a5, n3, n4};
}

/* The motion a step of coefficients `c` later. */
static inline relative later(const rampwise_coeffs *c, relative r)
{
    const double mass = c->system.mass, f = r.f + r.f_slope * c->dt, load = mass * fmax(fabs(r.f), fabs(f));
    rampwise_state s = {r.y, r.w, mass * r.f, 0};
    rampwise_step(c, &s, mass * f);
    const double y_terms = fabs(r.y) + fabs(c->B * r.w) + (fabs(c->C) + fabs(c->D)) * load;
    const double w_terms = fabs(r.w) + fabs(c->Ap * r.y) + (fabs(c->Cp) + fabs(c->Dp)) * load;
    return (relative){s.u, s.v, f, r.f_slope, RELATIVE_ROUNDING * y_terms, RELATIVE_ROUNDING * w_terms};
}

/* At the beginning of the step to p_next, as the step's own line has it. */
static inline relative relative_to_base(const rampwise_coeffs *c, const rampwise_state *s, double p_next)
{
    const double slope = c->between == RAMPWISE_RAMP ? (p_next - s->p) / c->dt : 0;
    const double y_noise = DBL_EPSILON * fabs(s->u), w_noise = DBL_EPSILON * fabs(s->v);
    switch (c->input) {
    case RAMPWISE_FORCE:
        return (relative){s->u, s->v, s->p / c->system.mass, slope / c->system.mass, y_noise, w_noise};
    case RAMPWISE_BASE_ACCELERATION:
        return (relative){s->u, s->v, -s->p, -slope, y_noise, w_noise};
    case RAMPWISE_BASE_VELOCITY:
        return (relative){s->u, s->v, -slope, 0, y_noise, w_noise};
    default:
        return (relative){s->u - s->p, s->v - slope, 0, 0, y_noise, w_noise};
    }
}

/* At the end of the same step. */
static inline relative relative_at_end(const rampwise_coeffs *c, const relative *begin,
                                       const rampwise_state *s, const rampwise_state *next)
{
    relative end = *begin;
    end.f += begin->f_slope * c->dt;
    end.y = next->u;
    end.w = next->v;
    if (c->input == RAMPWISE_BASE_DISPLACEMENT) {
        end.y -= c->between == RAMPWISE_RAMP ? next->p : s->p;
        end.w += begin->w - s->v;
    }
    return end;
}

#endif
