/* rampwise/step.h: one sample, one step.

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

RAMPWISE_BEGIN

/* Static equilibrium under the input p0: force u = p0/k; base acceleration u = -p0 m/k; base
   velocity u = 0; base displacement u = p0; v = 0. RAMPWISE_ERROR_NO_REST where stiffness is 0 and
   the input is a force or base acceleration that is not; _MISSING, _NOT_MADE, _SAMPLE (p0 not
   finite), _OVERFLOW (u is not). Constant work. Since 0.1. */
RAMPWISE_API int rampwise_start_settled(const rampwise_coeffs *c, rampwise_state *s, double p0);

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
RAMPWISE_API int rampwise_run(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p,
                              const struct rampwise_history *out, size_t *bad);
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

#endif
