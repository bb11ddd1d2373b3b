#include "cascade.h"

#include <math.h>
#include "one_step.h"
#include "rampwise/status.h"

/* x'' + S2 x' + K2 x = alpha u + beta u', u the motion of the mode, in units of the step. With the mode's
   load a ramp, a constant and an impulse, x after the step from rest is s, p and v, each the slope of the one
   before, and v' that of v. What an initial displacement of the mode adds follows: u = 1 - K1 (the motion
   under a constant load), so x = alpha G1 of the light one - K1 p. There is nothing to divide by the distance
   of the two frequencies: tuned is like any other. */
typedef struct coupling {
    twofold s, p, v, v_slope;
} coupling;

/* One of the two oscillators over the present step. */
typedef struct part {
    response r;
    twofold K, S;
} part;

enum { TERMS = 24, MOST_HALVINGS = 64 };

/* a x + b y */
static twofold both(twofold a, twofold x, twofold b, twofold y)
{
    return twofold_add(twofold_multiply(a, x), twofold_multiply(b, y));
}

/* Taylor series, |S| <= 1/16 and |K| <= 1/256 of both: u = sum of b[n] t^n under a ramp, b[3] = 1/6, and
   (n + 1)(n + 2) a[n + 2] = alpha b[n] + beta (n + 1) b[n + 1] - S2 (n + 1) a[n + 1] - K2 a[n]. */
static coupling short_coupling(const part *mode, const part *light, twofold alpha, twofold beta)
{
    twofold a[TERMS + 1] = {{0, 0}}, b[TERMS + 1] = {{0, 0}};
    coupling x = {{0, 0}, {0, 0}, {0, 0}, {0, 0}};
    b[3] = twofold_divide((twofold){1, 0}, (twofold){6, 0});
    for (int n = 2; n + 2 <= TERMS; ++n) {
        const twofold factor = {(n + 1) * (n + 2), 0};
        const twofold b_slope = twofold_multiply_by(b[n + 1], n + 1),
                      a_slope = twofold_multiply_by(a[n + 1], n + 1);
        b[n + 2] = twofold_divide(twofold_negative(both(mode->S, b_slope, mode->K, b[n])), factor);
        a[n + 2] = twofold_divide(
            twofold_subtract(both(alpha, b[n], beta, b_slope), both(light->S, a_slope, light->K, a[n])),
            factor);
    }
    for (int n = TERMS; n >= 4; --n) {
        x.s = twofold_add(x.s, a[n]);
        x.p = twofold_add(x.p, twofold_multiply_by(a[n], n));
        x.v = twofold_add(x.v, twofold_multiply_by(a[n], n * (n - 1)));
        x.v_slope = twofold_add(x.v_slope, twofold_multiply_by(a[n], n * (n - 1) * (n - 2)));
    }
    return x;
}

/* x and x' after the step for an initial displacement of the mode. */
static twofold from_u(const coupling *x, const part *mode, const part *light, twofold alpha)
{
    return twofold_subtract(twofold_multiply(alpha, light->r.G1), twofold_multiply(mode->K, x->p));
}

static twofold slope_from_u(const coupling *x, const part *mode, const part *light, twofold alpha)
{
    return twofold_subtract(twofold_multiply(alpha, light->r.g), twofold_multiply(mode->K, x->v));
}

static twofold A_of(const part *o)
{
    return twofold_subtract((twofold){1, 0}, twofold_multiply(o->K, o->r.G1));
}

static twofold Bp_of(const part *o)
{
    return twofold_subtract(A_of(o), twofold_multiply(o->S, o->r.g));
}

/* Digits that have died away count as zero, before they reach the end of the range. */
static twofold kept(twofold a, int exponent)
{
    return fabs(a.hi) < 0x1p-300 ? (twofold){0, 0} : twofold_times_power(a, exponent);
}

/* Two equal steps as one: the light one goes on from where the first step left it, under what the mode does
   from where that left the mode; then in units of the longer step. */
static coupling doubled(const coupling *x, const part *mode, const part *light, twofold alpha)
{
    const twofold A = A_of(light), g = light->r.g, Bp = Bp_of(light), Kg = twofold_multiply(light->K, g);
    const twofold u = from_u(x, mode, light, alpha), u_slope = slope_from_u(x, mode, light, alpha);
    const response *const r = &mode->r;
    coupling next;
    next.s = twofold_add(both(A, x->s, g, x->p),
                         twofold_add(both(u, r->G2, x->v, r->G1), twofold_add(x->p, x->s)));
    next.p = twofold_add(both(A, x->p, g, x->v), twofold_add(both(u, r->G1, x->v, r->g), x->p));
    next.v = twofold_add(both(A, x->v, g, x->v_slope), both(u, r->g, x->v, Bp_of(mode)));
    next.v_slope = twofold_add(twofold_subtract(twofold_multiply(Bp, x->v_slope), twofold_multiply(Kg, x->v)),
                               both(u_slope, r->g, x->v_slope, Bp_of(mode)));
    return (coupling){kept(next.s, -3), kept(next.p, -2), kept(next.v, -1), kept(next.v_slope, 0)};
}

/* Factors are limited to 2^450 (twofold.h). */
static int grown_beyond(const coupling *x, double limit)
{
    return !(fabs(x->s.hi) < limit && fabs(x->p.hi) < limit && fabs(x->v.hi) < limit &&
             fabs(x->v_slope.hi) < limit);
}

static int halvings_of(const step *s)
{
    const int for_K = (s->K.exponent + 9) / 2, for_S = s->S.exponent + 4;
    const int most = for_K > for_S ? for_K : for_S;
    return most > 0 ? most : 0;
}

/* The oscillator over the step halved `halvings` times. */
static int part_of(part *o, const step *whole, int halvings)
{
    step s = *whole;
    s.K.exponent -= 2 * halvings;
    s.S.exponent -= halvings;
    o->K = beside_one(s.K);
    o->S = beside_one(s.S);
    return rampwise_step_response_(&o->r, NULL, &s);
}

static twofold plain(scaled a, int exponent)
{
    return a.exponent + exponent < -900 ? (twofold){0, 0}
                                        : twofold_times_power(a.value, a.exponent + exponent);
}

/* alpha and beta over the whole step, divided by 2^exponent, which makes the larger of them about 1. */
typedef struct forcing {
    scaled alpha, beta;
    int exponent;
} forcing;

static forcing forcing_of(const step *s, double on_u, double on_v)
{
    forcing f;
    f.alpha = scaled_multiply(scaled_multiply(scaled_double(-on_u), s->h), s->h);
    f.beta = scaled_multiply(scaled_double(-on_v), s->h);
    f.exponent = f.alpha.exponent > f.beta.exponent ? f.alpha.exponent : f.beta.exponent;
    f.alpha.exponent -= f.exponent;
    f.beta.exponent -= f.exponent;
    return f;
}

/* In the caller's units. */
static void put_rows(cascade *made, const coupling *x, const part *mode, const part *light, const forcing *f,
                     const step *s, const rampwise_coeffs *c)
{
    const twofold alpha = plain(f->alpha, 0);
    const scaled unit = {{0.5, 0}, 1 + f->exponent}, per_h = scaled_divide(unit, s->h);
    const scaled minus_h = {twofold_negative(s->h.value), s->h.exponent};
    const scaled force = c->input == RAMPWISE_FORCE ? s->h_over_m : minus_h;
    const scaled for_v = {force.value, force.exponent + f->exponent}, for_x = scaled_multiply(for_v, s->h);
    const int ramp = c->between == RAMPWISE_RAMP;
    made->displacement[0] = rounded(unit, from_u(x, mode, light, alpha));
    made->displacement[1] = rounded(scaled_multiply(unit, s->h), x->v);
    made->displacement[2] = rounded(for_x, ramp ? twofold_subtract(x->p, x->s) : x->p);
    made->displacement[3] = ramp ? rounded(for_x, x->s) : 0;
    made->velocity[0] = rounded(per_h, slope_from_u(x, mode, light, alpha));
    made->velocity[1] = rounded(unit, x->v_slope);
    made->velocity[2] = rounded(for_v, ramp ? twofold_subtract(x->v, x->p) : x->v);
    made->velocity[3] = ramp ? rounded(for_v, x->p) : 0;
}

static int is_finite(const cascade *made)
{
    for (size_t i = 0; i < 4; ++i)
        if (!isfinite(made->displacement[i]) || !isfinite(made->velocity[i]))
            return 0;
    return 1;
}

int rampwise_cascade_make_(cascade *made, const rampwise_coeffs *c, const rampwise_system *light, double on_u,
                           double on_v)
{
    step s, s_light;
    part mode = {{{0, 0}, {0, 0}, {0, 0}}, {0, 0}, {0, 0}}, other = mode;
    *made = (cascade){{0}, {0}};
    if (on_u == 0 && on_v == 0)
        return RAMPWISE_OK;
    int status = rampwise_step_scale_(&s, &c->system, c->dt);
    if (status == RAMPWISE_OK)
        status = rampwise_step_scale_(&s_light, light, c->dt);
    if (status != RAMPWISE_OK)
        return status;
    const forcing f = forcing_of(&s, on_u, on_v);
    const int halvings = halvings_of(&s) > halvings_of(&s_light) ? halvings_of(&s) : halvings_of(&s_light);
    coupling x = {{0, 0}, {0, 0}, {0, 0}, {0, 0}};
    for (int left = halvings; left >= 0; --left) {
        /* The step before, of which this one is two. */
        const part mode_before = mode, other_before = other;
        status = part_of(&mode, &s, left);
        if (status == RAMPWISE_OK)
            status = part_of(&other, &s_light, left);
        if (status != RAMPWISE_OK)
            return status;
        if (left == halvings)
            x = short_coupling(&mode, &other, plain(f.alpha, -2 * left), plain(f.beta, -left));
        else
            x = doubled(&x, &mode_before, &other_before, plain(f.alpha, -2 * (left + 1)));
        if (grown_beyond(&x, 0x1p400))
            return RAMPWISE_ERROR_COEFFICIENT;
    }
    put_rows(made, &x, &mode, &other, &f, &s, c);
    return is_finite(made) ? RAMPWISE_OK : RAMPWISE_ERROR_COEFFICIENT;
}
