#include "rampwise/coefficients.h"

#include <math.h>
#include <stddef.h>
#include <stdint.h>
#include <string.h>
#include "one_step.h"
#include "precision.h"
#include "rampwise/status.h"

#ifdef SINGLE_PRECISION
enum { COMPUTED = offsetof(rampwise_coeffs_f32, dt) / sizeof(float) }; /* members that can overflow */

/* The twofold number as a double whose last bit tells whether there is more behind it (rounding to odd: S.
   Boldo and G. Melquiond, IEEE Trans. Computers 57(4), 462-471, 2008), which makes the float it is rounded to
   next the nearest to the twofold number itself. */
static double sticky(twofold x)
{
    uint64_t bits;
    double odd;
    memcpy(&bits, &x.hi, sizeof bits);
    if (x.lo != 0 && (bits & 1) == 0)
        bits += (x.lo > 0) == (x.hi > 0) ? 1 : UINT64_MAX;
    memcpy(&odd, &bits, sizeof odd);
    return odd;
}

/* x 2^exponent, rounded once; + 0.0f makes -0 plain. */
static float rounded_power(twofold x, int exponent)
{
    return (float)scalbn(sticky(x), exponent) + 0.0f;
}

/* x/y, rounded once. */
static float quotient(double x, double y)
{
    const scaled q = scaled_divide(scaled_double(x), scaled_double(y));
    return rounded_power(q.value, q.exponent);
}

/* factor x, rounded once */
static float real_product(scaled factor, twofold x)
{
    return rounded_power(twofold_multiply(factor.value, x), factor.exponent);
}

static float real_value(twofold x)
{
    return rounded_power(x, 0);
}

static void describe(rampwise_coeffs_f32 *c, const rampwise_system *sys)
{
    c->mass = (float)sys->mass;
    c->damper = (float)sys->damper;
    c->stiffness = (float)sys->stiffness;
    c->rate = quotient(1, c->dt);
}
#else
enum { COMPUTED = offsetof(rampwise_coeffs, system) / sizeof(double) };

static double quotient(double x, double y)
{
    return x / y;
}

static double real_product(scaled factor, twofold x)
{
    return rounded(factor, x);
}

static double real_value(twofold x)
{
    return x.hi + 0.0;
}

static void describe(rampwise_coeffs *c, const rampwise_system *sys)
{
    c->system = *sys;
}
#endif

/* (K x + S y) unit, rounded once. */
static real real_pair(const step *s, twofold x, twofold y, scaled unit)
{
    const twofold sum = weighted_pair(s, x, y, &unit);
    return real_product(unit, sum);
}

/* A to B', and both increments: the same for every input. */
static void free_motion(real_coeffs *c, const step *s, const response *r)
{
    const twofold one = {1, 0};
    const twofold A = twofold_subtract(one, twofold_multiply(beside_one(s->K), r->G1));
    const twofold Sg = twofold_multiply(beside_one(s->S), r->g);
    c->A = real_value(A);
    c->B = real_product(s->h, r->g);
    c->Ap = -real_product(s->stiffness_h_over_m, r->g) + 0;
    c->Bp = real_value(twofold_subtract(A, Sg));
    c->A_minus_1 = -real_product(s->K, r->G1) + 0;
    c->Bp_minus_1 = -real_pair(s, r->G1, r->g, unity) + 0;
}

/* C, D, C', D' where the input acts as a force, unit times the one of the oscillator without units. */
static void load_on_mass(real_coeffs *c, const response *r, scaled for_u, scaled for_v)
{
    if (c->between == RAMPWISE_HOLD) {
        c->C = real_product(for_u, r->G1);
        c->Cp = real_product(for_v, r->g);
        return;
    }
    c->C = real_product(for_u, twofold_subtract(r->G1, r->G2));
    c->D = real_product(for_u, r->G2);
    c->Cp = real_product(for_v, twofold_subtract(r->g, r->G1));
    c->Dp = real_product(for_v, r->G1);
}

/* A ramp of base velocity is the constant force m (v0 - v1)/h on the relative motion. */
static void base_velocity(real_coeffs *c, const step *s, const response *r)
{
    c->C = real_product(s->h, r->G1);
    c->D = -c->C;
    c->Cp = real_product(unity, r->g);
    c->Dp = -c->Cp;
}

/* A ramp of base displacement is the ramp of force k x_g and the constant force c x_g' on the
   absolute motion: C = g - A, D = 1 - g, C' = (B' - 1)/h - A', D' = -(B' - 1)/h. */
static void base_displacement(real_coeffs *c, const step *s, const response *r)
{
    const scaled per_h = scaled_divide(unity, s->h);
    if (c->between == RAMPWISE_HOLD) {
        load_on_mass(c, r, s->K, s->stiffness_h_over_m);
        return;
    }
    c->C = real_pair(s, twofold_subtract(r->G1, r->G2), twofold_negative(r->G1), unity);
    c->D = real_pair(s, r->G2, r->G1, unity);
    c->Cp = real_pair(s, twofold_subtract(r->g, r->G1), twofold_negative(r->g), per_h);
    c->Dp = real_pair(s, r->G1, r->g, per_h);
}

static void input_terms(real_coeffs *c, const step *s, const response *r)
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
static void acceleration_rows(real_coeffs *c, const step *s, const rampwise_system *sys)
{
    const real stiffness = quotient(sys->stiffness, sys->mass);
    const twofold one = {1, 0};
    c->acceleration[0] = c->total[0] = -stiffness + 0;
    c->acceleration[1] = c->total[1] = -quotient(sys->damper, sys->mass) + 0;
    switch (c->input) {
    case RAMPWISE_FORCE:
        c->acceleration[2] = c->total[2] = quotient(1, sys->mass);
        break;
    case RAMPWISE_BASE_ACCELERATION:
        c->acceleration[2] = -1;
        break;
    case RAMPWISE_BASE_VELOCITY:
        c->acceleration[3] = quotient(-1, c->dt);
        break;
    default:
        c->acceleration[2] = c->total[2] = stiffness;
        c->acceleration[3] = c->total[3] =
            real_product(scaled_divide(s->S, scaled_multiply(s->h, s->h)), one);
    }
}

static int all_finite(const real_coeffs *c)
{
    real values[COMPUTED];
    memcpy(values, c, sizeof values);
    for (size_t i = 0; i < COMPUTED; ++i)
        if (!isfinite(values[i]))
            return 0;
    return 1;
}

int PUBLIC(coeffs_make)(real_coeffs *c, const rampwise_system *sys, double dt, int input, int between)
{
    step s;
    response r;
    if (c == NULL || sys == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = rampwise_step_refused_(sys, dt, input, between);
    if (status == RAMPWISE_OK)
        status = rampwise_step_scale_(&s, sys, dt);
    if (status == RAMPWISE_OK)
        status = rampwise_step_response_(&r, NULL, &s);
    if (status != RAMPWISE_OK)
        return status;
    real_coeffs made;
    memset(&made, 0, sizeof made);
    made.dt = dt;
    made.input = input;
    made.between = between;
    describe(&made, sys);
    free_motion(&made, &s, &r);
    input_terms(&made, &s, &r);
    acceleration_rows(&made, &s, sys);
    if (!all_finite(&made))
        return RAMPWISE_ERROR_COEFFICIENT;
    *c = made;
    return RAMPWISE_OK;
}
