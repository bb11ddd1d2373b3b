#include "step_response.h"

#include "rampwise/coefficients.h"
#include "rampwise/status.h"

#define TERMS 17 /* powers 3 to 19 of the step */
#define TERMS_IN_TWOFOLD                                                                                     \
    9 /* powers 3 to 11; a double holds the rest, 2^-53 of the sum and less                        \
       */

/* 1/n!, n = 2 to 19 */
static const twofold inverse_factorial[18] = {
    {0x1p-1, 0},
    {0x1.5555555555555p-3, 0x1.5555555555555p-57},
    {0x1.5555555555555p-5, 0x1.5555555555555p-59},
    {0x1.1111111111111p-7, 0x1.1111111111111p-63},
    {0x1.6c16c16c16c17p-10, -0x1.f49f49f49f49fp-65},
    {0x1.a01a01a01a01ap-13, 0x1.a01a01a01a01ap-73},
    {0x1.a01a01a01a01ap-16, 0x1.a01a01a01a01ap-76},
    {0x1.71de3a556c734p-19, -0x1.c154f8ddc6cp-73},
    {0x1.27e4fb7789f5cp-22, 0x1.cbbc05b4fa99ap-76},
    {0x1.ae64567f544e4p-26, -0x1.c062e06d1f209p-80},
    {0x1.1eed8eff8d898p-29, -0x1.2aec959e14c06p-83},
    {0x1.6124613a86d09p-33, 0x1.f28e0cc748ebep-87},
    {0x1.93974a8c07c9dp-37, 0x1.05d6f8a2efd1fp-92},
    {0x1.ae7f3e733b81fp-41, 0x1.1d8656b0ee8cbp-97},
    {0x1.ae7f3e733b81fp-45, 0x1.1d8656b0ee8cbp-101},
    {0x1.952c77030ad4ap-49, 0x1.ac981465ddc6cp-103},
    {0x1.6827863b97d97p-53, 0x1.eec01221a8b0bp-107},
    {0x1.2f49b46814157p-57, 0x1.2650f61dbdcb4p-112},
};

/* Taylor series, |S| <= 1/16, |K| <= 1/256. The unit-ramp response y'' + S y' + K y = t from rest
   has the coefficients d[n]/n! with d[2] = 0, d[3] = 1, d[n] = -S d[n-1] - K d[n-2], |d[n]| <=
   0.102^(n-3); G2 is y at t = 1 and G1 is y'. Nineteen powers leave less than 2^-104 of either. */
static response short_step(twofold K, twofold S)
{
    twofold before = {0, 0}, d = {1, 0};
    twofold G1 = inverse_factorial[0], G2 = inverse_factorial[1];
    for (int i = 1; i < TERMS_IN_TWOFOLD; ++i) {
        const twofold next =
            twofold_negative(twofold_add(twofold_multiply(S, d), twofold_multiply(K, before)));
        before = d;
        d = next;
        G1 = twofold_add(G1, twofold_multiply(d, inverse_factorial[i]));
        G2 = twofold_add(G2, twofold_multiply(d, inverse_factorial[i + 1]));
    }
    double e_before = before.hi, e = d.hi, G1_rest = 0, G2_rest = 0;
    for (int i = TERMS_IN_TWOFOLD; i < TERMS; ++i) {
        const double next = -(S.hi * e + K.hi * e_before);
        e_before = e;
        e = next;
        G1_rest += e * inverse_factorial[i].hi;
        G2_rest += e * inverse_factorial[i + 1].hi;
    }
    G1 = twofold_add(G1, (twofold){G1_rest, 0});
    G2 = twofold_add(G2, (twofold){G2_rest, 0});
    const twofold lost = twofold_add(twofold_multiply(S, G1), twofold_multiply(K, G2));
    return (response){twofold_subtract((twofold){1, 0}, lost), G1, G2};
}

/* A response that has died away counts as zero, before its digits reach the end of the range. */
static twofold unless_spent(twofold a)
{
    return fabs(a.hi) < 0x1p-300 ? (twofold){0, 0} : a;
}

/* Two equal steps as one: with A = 1 - K G1, B = g, B' = A - S g of the single step,
   2 g -> B (A + B'), 4 G1 -> (A + 1) G1 + B^2, 8 G2 -> (A + 1) G2 + (B + 1) G1. */
static response doubled(response r, twofold K, twofold S)
{
    const twofold KG1 = twofold_multiply(K, r.G1), Sg = twofold_multiply(S, r.g);
    const twofold A_plus_1 = twofold_subtract((twofold){2, 0}, KG1);
    const twofold trace = twofold_subtract(twofold_subtract(A_plus_1, KG1), Sg);
    const twofold g_plus_1 = twofold_add(r.g, (twofold){1, 0});
    const twofold G1 = twofold_add(twofold_multiply(A_plus_1, r.G1), twofold_multiply(r.g, r.g));
    const twofold G2 = twofold_add(twofold_multiply(A_plus_1, r.G2), twofold_multiply(g_plus_1, r.G1));
    return (response){unless_spent(twofold_times_power(twofold_multiply(r.g, trace), -1)),
                      twofold_times_power(G1, -2), twofold_times_power(G2, -3)};
}

/* The largest size that may be squared, and that may be answered. */
static int grown_beyond(const response *r, twofold K, twofold S, double limit)
{
    const double size = fmax(1.0, fmax(fabs(K.hi), fabs(S.hi)));
    return !(fabs(r->g.hi) * size < limit && fabs(r->G1.hi) * size < limit && fabs(r->G2.hi) * size < limit);
}

/* Numbers are limited to 2^450 where they are multiplied, and to 2^900 in the result, whatever the
   exact products are made of. */
static int respond(response *r, const step *s)
{
    const int for_K = (s->K.exponent + 9) / 2, for_S = s->S.exponent + 4;
    int halvings = for_K > for_S ? for_K : for_S;
    if (halvings < 0)
        halvings = 0;
    scaled K = s->K, S = s->S;
    K.exponent -= 2 * halvings;
    S.exponent -= halvings;
    *r = short_step(beside_one(K), beside_one(S));
    for (; halvings > 0; --halvings) {
        const twofold K_now = beside_one(K), S_now = beside_one(S);
        if (grown_beyond(r, K_now, S_now, 0x1p450))
            return RAMPWISE_ERROR_COEFFICIENT;
        *r = doubled(*r, K_now, S_now);
        K.exponent += 2;
        S.exponent += 1;
    }
    return grown_beyond(r, beside_one(K), beside_one(S), 0x1p900) ? RAMPWISE_ERROR_COEFFICIENT : RAMPWISE_OK;
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

int rampwise_step_response_(step *s, response *r, const rampwise_system *sys, double dt, int input,
                            int between)
{
    const int status = refused(sys, dt, input, between);
    if (status != RAMPWISE_OK)
        return status;
    s->h = scaled_double(dt);
    s->h_over_m = scaled_divide(s->h, scaled_double(sys->mass));
    s->stiffness_h_over_m = scaled_multiply(scaled_double(sys->stiffness), s->h_over_m);
    s->K = scaled_multiply(s->stiffness_h_over_m, s->h);
    s->S = scaled_multiply(scaled_double(sys->damper), s->h_over_m);
    if (s->K.exponent > 96 || s->S.exponent > 96)
        return RAMPWISE_ERROR_STEP_LENGTH;
    return respond(r, s);
}
