#include "one_step.h"

#include <math.h>
#include <stddef.h>
#include "rampwise/coefficients.h"
#include "rampwise/status.h"

/* Powers 3 to 19 of the step; those to 11 in twofold arithmetic: a double holds the rest, 2^-53 of the sum
   and less. */
#define TERMS 17
#define TERMS_IN_TWOFOLD 9

/* 1/n!, n = 2 to 23 */
static const twofold inverse_factorial[22] = {
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
    {0x1.e542ba4020225p-62, 0x1.ea72b4afe3c2fp-120},
    {0x1.71b8ef6dcf572p-66, -0x1.d043ae40c4647p-120},
    {0x1.0ce396db7f853p-70, -0x1.aebcdbd20331cp-124},
    {0x1.761b41316381ap-75, -0x1.3423c7d91404fp-130},
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

/* The same series for the loads x^2/2, x^3/6 and x^4/24, and the square of the ramp's velocity term by
   term: with v = sum of d[i] x^(i+2)/(i+2)!, its integral is the sum of d[i] d[j]/((i+2)! (j+2)! (i+j+5)),
   to i + j = 18. The other two squares follow from the equation of motion times v and times v'', not from
   the balance of energy, which is left to be a check. */
static integrals short_integrals(const response *r, twofold K, twofold S)
{
    enum { LAST = 17, LAST_POWER = 18 };
    twofold d[LAST + 1] = {{1, 0}, twofold_negative(S)}, v[LAST + 1];
    integrals more = {{0, 0}, {0, 0}, {0, 0}, {0, 0}, {0, 0}, {0, 0}};
    for (int i = 2; i <= LAST; ++i)
        d[i] = twofold_negative(twofold_add(twofold_multiply(S, d[i - 1]), twofold_multiply(K, d[i - 2])));
    for (int i = LAST; i >= 0; --i) {
        v[i] = twofold_multiply(d[i], inverse_factorial[i]);
        more.G3 = twofold_add(more.G3, twofold_multiply(d[i], inverse_factorial[i + 2]));
        more.G4 = twofold_add(more.G4, twofold_multiply(d[i], inverse_factorial[i + 3]));
        more.G5 = twofold_add(more.G5, twofold_multiply(d[i], inverse_factorial[i + 4]));
    }
    for (int power = LAST_POWER; power >= 0; --power) {
        twofold sum = {0, 0};
        for (int i = power > LAST ? power - LAST : 0; 2 * i < power; ++i)
            sum = twofold_add(sum, twofold_multiply(v[i], v[power - i]));
        sum = twofold_times_power(sum, 1);
        if (power % 2 == 0)
            sum = twofold_add(sum, twofold_multiply(v[power / 2], v[power / 2]));
        more.ramp = twofold_add(more.ramp, twofold_divide(sum, (twofold){power + 5, 0}));
    }
    const twofold gG1 = twofold_multiply(r->g, r->G1);
    const twofold SG1_half = twofold_times_power(twofold_multiply(S, r->G1), -1);
    const twofold Sg_half = twofold_times_power(twofold_multiply(S, r->g), -1);
    more.constant = twofold_add(twofold_multiply(K, more.ramp), twofold_multiply(SG1_half, r->G1));
    more.constant = twofold_add(twofold_subtract(gG1, r->G2), more.constant);
    more.impulse = twofold_multiply(K, twofold_subtract(more.constant, gG1));
    more.impulse = twofold_add(r->g, twofold_subtract(more.impulse, twofold_multiply(Sg_half, r->g)));
    return more;
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

/* a x + b y + c z */
static twofold sum_of_three(twofold a, twofold x, twofold b, twofold y, twofold c, twofold z)
{
    return twofold_add(twofold_add(twofold_multiply(a, x), twofold_multiply(b, y)), twofold_multiply(c, z));
}

/* Displacement after two steps under the load x^k/k!, k = n - 2: the first leaves G[n] and G[n - 1], and in
   the second the load is (1 + x)^k/k!: A G[n] + g G[n - 1] + the sum of G[j + 2]/(k - j)!, over 2^n; G lists
   g, G1, G2 and so on from place 1. */
static twofold doubled_load(const twofold *G, int n, twofold A)
{
    twofold sum = twofold_add(twofold_multiply(A, G[n]), twofold_multiply(G[1], G[n - 1]));
    sum = twofold_add(sum, twofold_add(G[n], G[n - 1]));
    for (int j = 2; j < n - 1; ++j)
        sum = twofold_add(sum, twofold_multiply(G[j], inverse_factorial[n - j - 2]));
    return twofold_times_power(sum, -n);
}

/* The squares over two steps: those over the first, and over the second with what the first leaves. An
   impulse leaves the velocity B' and the force -K g, a constant load g and A, a ramp G1 and e = g + S G1, in
   units of one step. The products of two velocities have the integrals g^2/2 (impulse and constant load),
   G1^2/2 (constant load and ramp), and g G1 - the constant's square (impulse and ramp). */
static integrals doubled_integrals(const integrals *i, const response *r, twofold K, twofold S)
{
    const twofold one = {1, 0};
    const twofold g = r->g, G1 = r->G1;
    const twofold A = twofold_subtract(one, twofold_multiply(K, G1)), Kg = twofold_multiply(K, g);
    const twofold Bp = twofold_subtract(A, twofold_multiply(S, g));
    const twofold e = twofold_add(g, twofold_multiply(S, G1));
    const twofold gg = twofold_multiply(g, g), G1G1 = twofold_multiply(G1, G1);
    const twofold AA_plus_1 = twofold_add(one, twofold_multiply(A, A));
    const twofold BpBp_plus_1 = twofold_add(one, twofold_multiply(Bp, Bp));
    const twofold impulse_and_ramp = twofold_subtract(twofold_multiply(g, G1), i->constant);
    const twofold G[7] = {{0, 0}, g, G1, r->G2, i->G3, i->G4, i->G5};
    integrals next;
    next.G3 = doubled_load(G, 4, A);
    next.G4 = doubled_load(G, 5, A);
    next.G5 = doubled_load(G, 6, A);
    next.impulse = sum_of_three(BpBp_plus_1, i->impulse, twofold_multiply(Kg, Kg), i->constant,
                                twofold_negative(twofold_multiply(Bp, Kg)), gg);
    next.constant = sum_of_three(AA_plus_1, i->constant, gg, i->impulse, twofold_multiply(A, g), gg);
    next.ramp =
        sum_of_three(G1G1, i->impulse, twofold_multiply(e, e), i->constant, twofold_multiply(G1, e), gg);
    next.ramp = twofold_add(next.ramp, twofold_times_power(i->ramp, 1));
    next.ramp = twofold_add(next.ramp, twofold_times_power(twofold_multiply(G1, impulse_and_ramp), 1));
    next.ramp = twofold_add(next.ramp, twofold_multiply(e, G1G1));
    next.impulse = twofold_times_power(next.impulse, -1);
    next.constant = twofold_times_power(next.constant, -3);
    next.ramp = twofold_times_power(next.ramp, -5);
    return next;
}

/* The largest size that may be squared, and that may be answered. */
static int grown_beyond(const response *r, twofold K, twofold S, double limit)
{
    const double size = fmax(1.0, fmax(fabs(K.hi), fabs(S.hi)));
    return !(fabs(r->g.hi) * size < limit && fabs(r->G1.hi) * size < limit && fabs(r->G2.hi) * size < limit);
}

/* Numbers are limited to 2^450 where they are multiplied, and to 2^900 in the result, whatever the
   exact products are made of; to 2^200 where the integrals square them. */
int rampwise_step_response_(response *r, integrals *more, const step *s)
{
    const double multiplied = more != NULL ? 0x1p200 : 0x1p450, answered = more != NULL ? 0x1p200 : 0x1p900;
    const int for_K = (s->K.exponent + 9) / 2, for_S = s->S.exponent + 4;
    int halvings = for_K > for_S ? for_K : for_S;
    if (halvings < 0)
        halvings = 0;
    scaled K = s->K, S = s->S;
    K.exponent -= 2 * halvings;
    S.exponent -= halvings;
    *r = short_step(beside_one(K), beside_one(S));
    if (more != NULL)
        *more = short_integrals(r, beside_one(K), beside_one(S));
    for (; halvings > 0; --halvings) {
        const twofold K_now = beside_one(K), S_now = beside_one(S);
        if (grown_beyond(r, K_now, S_now, multiplied))
            return RAMPWISE_ERROR_COEFFICIENT;
        if (more != NULL)
            *more = doubled_integrals(more, r, K_now, S_now);
        *r = doubled(*r, K_now, S_now);
        K.exponent += 2;
        S.exponent += 1;
    }
    return grown_beyond(r, beside_one(K), beside_one(S), answered) ? RAMPWISE_ERROR_COEFFICIENT : RAMPWISE_OK;
}

int rampwise_step_scale_(step *s, const rampwise_system *sys, double dt)
{
    s->h = scaled_double(dt);
    s->h_over_m = scaled_divide(s->h, scaled_double(sys->mass));
    s->stiffness_h_over_m = scaled_multiply(scaled_double(sys->stiffness), s->h_over_m);
    s->K = scaled_multiply(s->stiffness_h_over_m, s->h);
    s->S = scaled_multiply(scaled_double(sys->damper), s->h_over_m);
    return s->K.exponent > 96 || s->S.exponent > 96 ? RAMPWISE_ERROR_STEP_LENGTH : RAMPWISE_OK;
}

int rampwise_step_refused_(const rampwise_system *sys, double dt, int input, int between)
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
