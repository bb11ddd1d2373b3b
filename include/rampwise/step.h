/* rampwise/step.h: one sample, one step, in double and in single precision.

   Three ways to start, for three situations:

   - At once. rampwise_start(&s, u0, v0, p0): the input is p0 from this instant on, a jump if p0 is
   not zero. For a record that is simply given from its first sample on, and for initial conditions.
   - By a ramp from nothing. rampwise_start(&s, 0, 0, 0), then a step to p[0]: the input rises from
   zero over the dt before the first sample. For a record cut out of silence.
   - Settled. rampwise_start_settled(&c, &s, p0): static equilibrium under p0, as if it had always
   been there. For a sensor with a standing value, gravity or a preload.

   Threads: a state belongs to one thread at a time; coefficients may be shared. */
#ifndef RAMPWISE_STEP_H
#define RAMPWISE_STEP_H

#include <stddef.h>
#include "coefficients.h"
#include "fused.h"

/* Public, frozen. u, v: displacement and velocity at the present sample; p: the input there, as
   given; p_before: the input one dt earlier on the line that ends at p (the sample before, when all
   steps are dt long). */
typedef struct rampwise_state {
    double u, v, p, p_before;
} rampwise_state;

/* The same in single precision. u_low, v_low: what u and v had no room for when they were last rounded, so
   that u + u_low and v + v_low are the better values (of the order of half an ulp of u and v; 0 at a start).
   A state taken over by u, v, p and p_before alone, low words 0, is a good one too. Public, frozen. */
typedef struct rampwise_state_f32 {
    float u, v, p, p_before, u_low, v_low;
} rampwise_state_f32;

RAMPWISE_BEGIN

/* Static equilibrium under the input p0: force u = p0/k; base acceleration u = -p0 m/k; base
   velocity u = 0; base displacement u = p0; v = 0. RAMPWISE_ERROR_NO_REST where stiffness is 0 and
   the input is a force or base acceleration that is not; _MISSING, _NOT_MADE, _SAMPLE (p0 not
   finite), _OVERFLOW (u is not). Constant work. Since 0.1. */
RAMPWISE_API int rampwise_start_settled(const rampwise_coeffs *c, rampwise_state *s, double p0);
RAMPWISE_API int rampwise_start_settled_f32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, float p0);

/* The exact state at a fraction (0 to 1) of the coming step, from *s towards p_next, for the input
   as c takes it between samples; *s stays. at may be s. Fraction 1 is rampwise_step to p_next, bit
   for bit; at fraction 0, at->p_before already belongs to the coming line. Otherwise one making of
   coefficients (0.4 to 1.3 microseconds).
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _FRACTION, _STATE, _SAMPLE (p_next), _OVERFLOW. Since 0.1. */
RAMPWISE_API int rampwise_inside(const rampwise_coeffs *c, const rampwise_state *s, double p_next,
                                 double fraction, rampwise_state *at);

#if defined(__FAST_MATH__) || defined(_M_FP_FAST) ||                                                         \
    (defined(__FLT_EVAL_METHOD__) && __FLT_EVAL_METHOD__ != 0 && __FLT_EVAL_METHOD__ != 16)
#define RAMPWISE_STEP_BY_CALL 1
struct rampwise_history;
struct rampwise_history_f32;
RAMPWISE_API int rampwise_run(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p,
                              const struct rampwise_history *out, size_t *bad);
RAMPWISE_API int rampwise_run_f32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n,
                                  const float *p, const struct rampwise_history_f32 *out, size_t *bad);
#endif

RAMPWISE_END

/* The state under the input p0 from this instant on. Cannot fail; nothing is checked. Since 0.1. */
static inline void rampwise_start(rampwise_state *s, double u0, double v0, double p0)
{
    s->u = u0;
    s->v = v0;
    s->p = p0;
    s->p_before = p0;
}

static inline void rampwise_start_f32(rampwise_state_f32 *s, float u0, float v0, float p0)
{
    s->u = u0;
    s->v = v0;
    s->p = p0;
    s->p_before = p0;
    s->u_low = 0;
    s->v_low = 0;
}

/* Keeps a value in a register of its own: compilers like to pack u and v into one vector, and would
   unpack it again in every step. Computes nothing. */
#if defined(__GNUC__) && defined(__SSE2__)
#define RAMPWISE_APART_(x) __asm__("" : "+x"(x))
#elif defined(__GNUC__) && defined(__aarch64__)
#define RAMPWISE_APART_(x) __asm__("" : "+w"(x))
#else
#define RAMPWISE_APART_(x) ((void)0)
#endif

/* The bare recurrence of coefficients.h, in the order that is part of the contract:

       u1 = u0 + fma(A - 1, u0, fma(B,      v0, fma(C,  p0, D  p1)))
       v1 = v0 + fma(A',    u0, fma(B' - 1, v0, fma(C', p0, D' p1)))

   For rampwise_step and the library. */
static inline double rampwise_next_u_(const rampwise_coeffs *c, double u, double v, double p, double p_next)
{
    const double loaded = RAMPWISE_FMA(c->C, p, c->D * p_next);
    return u + RAMPWISE_FMA(c->A_minus_1, u, RAMPWISE_FMA(c->B, v, loaded));
}

static inline double rampwise_next_v_(const rampwise_coeffs *c, double u, double v, double p, double p_next)
{
    const double loaded = RAMPWISE_FMA(c->Cp, p, c->Dp * p_next);
    return v + RAMPWISE_FMA(c->Ap, u, RAMPWISE_FMA(c->Bp_minus_1, v, loaded));
}

/* Silence. An input is silent when its two samples of a step are below 2^-900 in size; a response
   is spent below 2^-960. After a silent step a spent u or v becomes +0, so that no oscillator is
   left in subnormal numbers, where some processors are 10 to 100 times slower. For rampwise_step
   and the library. */
static inline int rampwise_silent_(double p, double p_next)
{
    const double silent = 1.1830521861667747e-271; /* 2^-900 */
    return (p < silent) & (p > -silent) & (p_next < silent) & (p_next > -silent);
}

static inline double rampwise_unless_spent_(double x)
{
    const double spent = 1.0261342003245941e-289; /* 2^-960 */
    return ((x < spent) & (x > -spent)) ? 0.0 : x;
}

/* Takes the state over one step of c->dt, to the sample p_next. Cannot fail and checks nothing: a
   NaN goes in and comes out. 6 fused multiply-adds, 2 products, 2 sums, and the rule of silence
   without a branch. rampwise_run with n = 1 is the exported twin with the same bits for finite
   numbers; where the compiler is told to change arithmetic (-ffast-math, extended precision) this
   is that call, and then leaves the state as it was where a number is not finite. Since 0.1. */
static inline void rampwise_step(const rampwise_coeffs *c, rampwise_state *s, double p_next)
{
#ifdef RAMPWISE_STEP_BY_CALL
    (void)rampwise_run(c, s, 1, &p_next, NULL, NULL);
#else
    const int silent = rampwise_silent_(s->p, p_next);
    double u = rampwise_next_u_(c, s->u, s->v, s->p, p_next);
    double v = rampwise_next_v_(c, s->u, s->v, s->p, p_next);
    u = silent ? rampwise_unless_spent_(u) : u;
    v = silent ? rampwise_unless_spent_(v) : v;
    RAMPWISE_APART_(u);
    RAMPWISE_APART_(v);
    s->u = u;
    s->v = v;
    s->p_before = s->p;
    s->p = p_next;
#endif
}

/* Keeps a float rounded, and the compiler from seeing through it: -fassociative-math alone cannot be told
   from the preprocessor, and would find the compensation below to be zero. Computes nothing. */
#if defined(__GNUC__) && defined(__SSE2__)
#define RAMPWISE_ROUNDED_(x) __asm__("" : "+x"(x))
#elif defined(__GNUC__) && defined(__aarch64__)
#define RAMPWISE_ROUNDED_(x) __asm__("" : "+w"(x))
#elif defined(__GNUC__) && defined(__arm__) && defined(__ARM_FP)
#define RAMPWISE_ROUNDED_(x) __asm__("" : "+t"(x))
#elif defined(__GNUC__)
#define RAMPWISE_ROUNDED_(x) __asm__("" : "+m"(x))
#else
#define RAMPWISE_ROUNDED_(x) ((void)0)
#endif

/* x, x_low and the change of x + x_low over a step: what the sum x + change loses is the new low word (T. J.
   Dekker, Numer. Math. 18, 224-242, 1971; compensated summation after W. Kahan, Comm. ACM 8(1),
   40, 1965). Where the change is larger than x it is lost to half an ulp of the change, the size
   of the change's own rounding. */
static inline void rampwise_carry_f32_(float *x, float *x_low, float change)
{
    float sum, gained;
    RAMPWISE_ROUNDED_(change);
    sum = *x + change;
    RAMPWISE_ROUNDED_(sum);
    gained = sum - *x;
    RAMPWISE_ROUNDED_(gained);
    *x = sum;
    *x_low = change - gained;
}

/* The bare recurrence in single precision, in the order that is part of the contract:

       du = fma(A - 1, u0, fma(B,      v0, fma(C,  p0, D  p1))) + u_low
       dv = fma(A',    u0, fma(B' - 1, v0, fma(C', p0, D' p1))) + v_low
       u1 = u0 + du,  u_low = du - (u1 - u0);  v1 = v0 + dv,  v_low = dv - (v1 - v0)

   For rampwise_step_f32 and the library. */
static inline void rampwise_next_f32_(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, float p_next)
{
    const float u = s->u, v = s->v, p = s->p;
    const float for_u = RAMPWISE_FMAF(c->C, p, c->D * p_next);
    const float for_v = RAMPWISE_FMAF(c->Cp, p, c->Dp * p_next);
    const float du = RAMPWISE_FMAF(c->A_minus_1, u, RAMPWISE_FMAF(c->B, v, for_u));
    const float dv = RAMPWISE_FMAF(c->Ap, u, RAMPWISE_FMAF(c->Bp_minus_1, v, for_v));
    rampwise_carry_f32_(&s->u, &s->u_low, du + s->u_low);
    rampwise_carry_f32_(&s->v, &s->v_low, dv + s->v_low);
    s->p_before = p;
    s->p = p_next;
}

/* Silence in single precision: inputs below 2^-90, responses below 2^-100, whose low words go with them. */
static inline int rampwise_silent_f32_(float p, float p_next)
{
    const float silent = 8.0779356694631609e-28f; /* 2^-90 */
    return (p < silent) & (p > -silent) & (p_next < silent) & (p_next > -silent);
}

static inline void rampwise_unless_spent_f32_(rampwise_state_f32 *s, int silent)
{
    const float spent = 7.8886090522101181e-31f; /* 2^-100 */
    const int u_spent = silent & (s->u < spent) & (s->u > -spent);
    const int v_spent = silent & (s->v < spent) & (s->v > -spent);
    s->u = u_spent ? 0.0f : s->u;
    s->u_low = u_spent ? 0.0f : s->u_low;
    s->v = v_spent ? 0.0f : s->v;
    s->v_low = v_spent ? 0.0f : s->v_low;
}

/* rampwise_step in single precision: the increments are the same, and the low words carry what rounding takes
   from u and v. Nothing in it is computed in double. Six fused multiply-adds, two products, eight sums.

   Error against the exact response in units of its largest value, at every one of 2,000,000 samples of random
   load, w dt from 1e-6 to 3: 1e-7/zeta for zeta from 0.5 to 5 %, most of which is the rounding of the
   coefficients, a shift of frequency by some 1e-8 of itself; 1e-6 against exact arithmetic with the rounded
   coefficients. Under a sine at resonance for ever the latter may reach 2e-6 for zeta = 0.5 % and w dt above
   0.3. rampwise_run_f32 is the exported twin, as for rampwise_step. Since 0.1. */
static inline void rampwise_step_f32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, float p_next)
{
#ifdef RAMPWISE_STEP_BY_CALL
    (void)rampwise_run_f32(c, s, 1, &p_next, NULL, NULL);
#else
    const int silent = rampwise_silent_f32_(s->p, p_next);
    rampwise_next_f32_(c, s, p_next);
    rampwise_unless_spent_f32_(s, silent);
#endif
}

#endif
