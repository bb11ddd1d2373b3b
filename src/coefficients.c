#include "rampwise/coefficients.h"

#include <math.h>
#include <stddef.h>
#include <string.h>
#include "rampwise/status.h"
#include "one_step.h"

/* A to B', and both increments: the same for every input. */
static void free_motion(rampwise_coeffs *c, const step *s, const response *r)
{
    const twofold one = {1, 0};
    const twofold A = twofold_subtract(one, twofold_multiply(beside_one(s->K), r->G1));
    const twofold Sg = twofold_multiply(beside_one(s->S), r->g);
    c->A = A.hi;
    c->B = rounded(s->h, r->g);
    c->Ap = -rounded(s->stiffness_h_over_m, r->g) + 0.0;
    c->Bp = twofold_subtract(A, Sg).hi;
    c->A_minus_1 = -rounded(s->K, r->G1) + 0.0;
    c->Bp_minus_1 = -rounded_pair(s, r->G1, r->g, unity) + 0.0;
}

/* C, D, C', D' where the input acts as a force, unit times the one of the oscillator without units. */
static void load_on_mass(rampwise_coeffs *c, const response *r, scaled for_u, scaled for_v)
{
    if (c->between == RAMPWISE_HOLD) {
        c->C = rounded(for_u, r->G1);
        c->Cp = rounded(for_v, r->g);
        return;
    }
    c->C = rounded(for_u, twofold_subtract(r->G1, r->G2));
    c->D = rounded(for_u, r->G2);
    c->Cp = rounded(for_v, twofold_subtract(r->g, r->G1));
    c->Dp = rounded(for_v, r->G1);
}

/* A ramp of base velocity is the constant force m (v0 - v1)/h on the relative motion. */
static void base_velocity(rampwise_coeffs *c, const step *s, const response *r)
{
    c->C = rounded(s->h, r->G1);
    c->D = -c->C;
    c->Cp = rounded(unity, r->g);
    c->Dp = -c->Cp;
}

/* A ramp of base displacement is the ramp of force k x_g and the constant force c x_g' on the
   absolute motion: C = g - A, D = 1 - g, C' = (B' - 1)/h - A', D' = -(B' - 1)/h. */
static void base_displacement(rampwise_coeffs *c, const step *s, const response *r)
{
    const scaled per_h = scaled_divide(unity, s->h);
    if (c->between == RAMPWISE_HOLD) {
        load_on_mass(c, r, s->K, s->stiffness_h_over_m);
        return;
    }
    c->C = rounded_pair(s, twofold_subtract(r->G1, r->G2), twofold_negative(r->G1), unity);
    c->D = rounded_pair(s, r->G2, r->G1, unity);
    c->Cp = rounded_pair(s, twofold_subtract(r->g, r->G1), twofold_negative(r->g), per_h);
    c->Dp = rounded_pair(s, r->G1, r->g, per_h);
}

static void input_terms(rampwise_coeffs *c, const step *s, const response *r)
{
    const scaled minus_h = {twofold_negative(s->h.value), s->h.exponent};
    switch (c->input) {
    case RAMPWISE_FORCE:
        load_on_mass(c, r, scaled_multiply(s->h_over_m, s->h), s->h_over_m);
        break;
    case RAMPWISE_BASE_ACCELERATION:
        load_on_mass(c, r, scaled_multiply(minus_h, s->h), minus_h);
        break;
    case RAMPWISE_BASE_VELOCITY:
        base_velocity(c, s, r);
        break;
    default:
        base_displacement(c, s, r);
    }
}

/* u'' = -(k/m) u - (c/m) v + what the input adds; the fourth entry meets the input's change over
   the last step. */
static void acceleration_rows(rampwise_coeffs *c, const step *s)
{
    const double stiffness = c->system.stiffness / c->system.mass;
    const twofold one = {1, 0};
    c->acceleration[0] = c->total[0] = -stiffness + 0.0;
    c->acceleration[1] = c->total[1] = -(c->system.damper / c->system.mass) + 0.0;
    switch (c->input) {
    case RAMPWISE_FORCE:
        c->acceleration[2] = c->total[2] = 1 / c->system.mass;
        break;
    case RAMPWISE_BASE_ACCELERATION:
        c->acceleration[2] = -1;
        break;
    case RAMPWISE_BASE_VELOCITY:
        c->acceleration[3] = -1 / c->dt;
        break;
    default:
        c->acceleration[2] = c->total[2] = stiffness;
        c->acceleration[3] = c->total[3] = rounded(scaled_divide(s->S, scaled_multiply(s->h, s->h)), one);
    }
}

static int all_finite(const rampwise_coeffs *c)
{
    double values[offsetof(rampwise_coeffs, system) / sizeof(double)];
    memcpy(values, c, sizeof values);
    for (size_t i = 0; i < sizeof values / sizeof *values; ++i)
        if (!isfinite(values[i]))
            return 0;
    return 1;
}

static int refused(const rampwise_system *sys, double dt, int input, int between)
{
    if (!isfinite(sys->mass) || sys->mass <= 0)
        return RAMPWISE_ERROR_MASS;
    if (!isfinite(sys->damper))
        return RAMPWISE_ERROR_DAMPER;
    if (!isfinite(sys->stiffness))
        return RAMPWISE_ERROR_STIFFNESS;
    if (!isfinite(dt) || dt <= 0)
        return RAMPWISE_ERROR_INTERVAL;
    if (input < RAMPWISE_FORCE || input > RAMPWISE_BASE_DISPLACEMENT)
        return RAMPWISE_ERROR_INPUT;
    if (between != RAMPWISE_RAMP && between != RAMPWISE_HOLD)
        return RAMPWISE_ERROR_BETWEEN;
    if (between == RAMPWISE_HOLD &&
        (input == RAMPWISE_BASE_VELOCITY || (input == RAMPWISE_BASE_DISPLACEMENT && sys->damper != 0)))
        return RAMPWISE_ERROR_IMPULSES;
    return RAMPWISE_OK;
}

int rampwise_coeffs_make(rampwise_coeffs *c, const rampwise_system *sys, double dt, int input, int between)
{
    if (c == NULL || sys == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = refused(sys, dt, input, between);
    if (status != RAMPWISE_OK)
        return status;
    step s;
    response r;
    status = rampwise_step_scale_(&s, sys, dt);
    if (status == RAMPWISE_OK)
        status = rampwise_step_response_(&r, NULL, &s);
    if (status != RAMPWISE_OK)
        return status;
    rampwise_coeffs made;
    memset(&made, 0, sizeof made);
    made.system = *sys;
    made.dt = dt;
    made.input = input;
    made.between = between;
    free_motion(&made, &s, &r);
    input_terms(&made, &s, &r);
    acceleration_rows(&made, &s);
    if (!all_finite(&made))
        return RAMPWISE_ERROR_COEFFICIENT;
    *c = made;
    return RAMPWISE_OK;
}
