#include "exact.h"

#include <math.h>

const char *const exact_names[EXACT_COUNT] = {"A", "B", "C", "D", "A'", "B'", "C'", "D'", "A - 1", "B' - 1"};

static mpfr_prec_t precision_for(const rampwise_system *sys, double dt)
{
    const double K = fabs(sys->stiffness) / sys->mass * dt * dt;
    const double S = fabs(sys->damper) / sys->mass * dt;
    double bits = 400;
    if (K > 0)
        bits += 3 * fabs(log2(K));
    if (S > 0)
        bits += 3 * fabs(log2(S));
    return (mpfr_prec_t)bits;
}

enum { H, W2, S, K, E, R, SH, CH, G, G1, G2, T };

void exact_init(exact_step *e, const rampwise_system *sys, double dt)
{
    const mpfr_prec_t precision = precision_for(sys, dt);
    e->sys = sys;
    for (int i = 0; i < EXACT_REGISTERS; ++i)
        mpfr_init2(e->x[i], precision);
    for (int i = 0; i < EXACT_COUNT; ++i)
        mpfr_init2(e->value[i], precision);
}

void exact_clear(exact_step *e)
{
    for (int i = 0; i < EXACT_REGISTERS; ++i)
        mpfr_clear(e->x[i]);
    for (int i = 0; i < EXACT_COUNT; ++i)
        mpfr_clear(e->value[i]);
}

/* sinh(r h)/r and cosh(r h) with r^2 = s^2 - k/m, whatever its sign. */
static void free_decay(mpfr_t *x)
{
    const int sign = mpfr_sgn(x[T]);
    if (sign == 0) {
        mpfr_set(x[SH], x[H], MPFR_RNDN);
        mpfr_set_ui(x[CH], 1, MPFR_RNDN);
        return;
    }
    mpfr_abs(x[T], x[T], MPFR_RNDN);
    mpfr_sqrt(x[R], x[T], MPFR_RNDN);
    mpfr_mul(x[T], x[R], x[H], MPFR_RNDN);
    if (sign > 0)
        mpfr_sinh_cosh(x[SH], x[CH], x[T], MPFR_RNDN);
    else
        mpfr_sin_cos(x[SH], x[CH], x[T], MPFR_RNDN);
    mpfr_div(x[SH], x[SH], x[R], MPFR_RNDN);
}

/* From g, or where there is no spring from its integrals. */
static void loads(mpfr_t *x, const mpfr_t A)
{
    if (mpfr_sgn(x[K]) != 0) {
        mpfr_ui_sub(x[G1], 1, A, MPFR_RNDN);
        mpfr_div(x[G1], x[G1], x[K], MPFR_RNDN);
        mpfr_mul(x[T], x[S], x[G1], MPFR_RNDN);
        mpfr_ui_sub(x[G2], 1, x[T], MPFR_RNDN);
        mpfr_sub(x[G2], x[G2], x[G], MPFR_RNDN);
        mpfr_div(x[G2], x[G2], x[K], MPFR_RNDN);
    } else if (mpfr_sgn(x[S]) != 0) {
        mpfr_ui_sub(x[G1], 1, x[G], MPFR_RNDN);
        mpfr_div(x[G1], x[G1], x[S], MPFR_RNDN);
        mpfr_d_sub(x[G2], 0.5, x[G1], MPFR_RNDN);
        mpfr_div(x[G2], x[G2], x[S], MPFR_RNDN);
    } else {
        mpfr_set_d(x[G1], 0.5, MPFR_RNDN);
        mpfr_set_ui(x[G2], 1, MPFR_RNDN);
        mpfr_div_ui(x[G2], x[G2], 6, MPFR_RNDN);
    }
}

/* C, D, C', D' of a unit force on the mass, into e. */
static void force_terms(exact_step *e, int between)
{
    mpfr_t *const x = e->x;
    mpfr_t *const C = &e->value[2], *const D = &e->value[3], *const Cp = &e->value[6],
                  *const Dp = &e->value[7];
    mpfr_div_d(x[T], x[H], e->sys->mass, MPFR_RNDN);
    mpfr_mul(*Dp, x[T], x[G1], MPFR_RNDN);
    mpfr_mul(*Cp, x[T], x[G], MPFR_RNDN);
    mpfr_mul(x[T], x[T], x[H], MPFR_RNDN);
    mpfr_mul(*D, x[T], x[G2], MPFR_RNDN);
    mpfr_mul(*C, x[T], x[G1], MPFR_RNDN);
    if (between == RAMPWISE_HOLD) {
        mpfr_set_ui(*D, 0, MPFR_RNDN);
        mpfr_set_ui(*Dp, 0, MPFR_RNDN);
    } else {
        mpfr_sub(*C, *C, *D, MPFR_RNDN);
        mpfr_sub(*Cp, *Cp, *Dp, MPFR_RNDN);
    }
}

/* For the base's motion, from those of the force: the effective force of a ramp of base velocity is
   -m (v1 - v0)/h, that of base displacement k x + c (x1 - x0)/h. */
static void base_terms(mpfr_t first, mpfr_t second, mpfr_t *x, const rampwise_system *sys, int input)
{
    if (input == RAMPWISE_BASE_ACCELERATION) {
        mpfr_mul_d(first, first, -sys->mass, MPFR_RNDN);
        mpfr_mul_d(second, second, -sys->mass, MPFR_RNDN);
        return;
    }
    mpfr_add(x[T], first, second, MPFR_RNDN);
    mpfr_div(x[T], x[T], x[H], MPFR_RNDN);
    if (input == RAMPWISE_BASE_VELOCITY) {
        mpfr_mul_d(first, x[T], sys->mass, MPFR_RNDN);
        mpfr_neg(second, first, MPFR_RNDN);
        return;
    }
    mpfr_mul_d(x[T], x[T], sys->damper, MPFR_RNDN);
    mpfr_mul_d(first, first, sys->stiffness, MPFR_RNDN);
    mpfr_mul_d(second, second, sys->stiffness, MPFR_RNDN);
    mpfr_sub(first, first, x[T], MPFR_RNDN);
    mpfr_add(second, second, x[T], MPFR_RNDN);
}

void exact_free_motion(exact_step *e, double dt, double fraction)
{
    mpfr_t *const x = e->x;
    mpfr_t *const A = &e->value[0], *const B = &e->value[1], *const Ap = &e->value[4],
                  *const Bp = &e->value[5];
    mpfr_set_d(x[H], dt, MPFR_RNDN);
    mpfr_mul_d(x[H], x[H], fraction, MPFR_RNDN);
    mpfr_set_d(x[W2], e->sys->stiffness, MPFR_RNDN);
    mpfr_div_d(x[W2], x[W2], e->sys->mass, MPFR_RNDN);
    mpfr_mul(x[K], x[W2], x[H], MPFR_RNDN);
    mpfr_mul(x[K], x[K], x[H], MPFR_RNDN);
    mpfr_set_d(x[E], e->sys->damper, MPFR_RNDN);
    mpfr_div_d(x[E], x[E], e->sys->mass, MPFR_RNDN);
    mpfr_mul(x[S], x[E], x[H], MPFR_RNDN);
    mpfr_div_ui(x[E], x[E], 2, MPFR_RNDN); /* half the damper, per mass */
    mpfr_sqr(x[T], x[E], MPFR_RNDN);
    mpfr_sub(x[T], x[T], x[W2], MPFR_RNDN);
    free_decay(x);
    mpfr_mul(x[R], x[E], x[SH], MPFR_RNDN);
    mpfr_add(*A, x[CH], x[R], MPFR_RNDN);
    mpfr_sub(*Bp, x[CH], x[R], MPFR_RNDN);
    mpfr_mul(x[E], x[E], x[H], MPFR_RNDN);
    mpfr_neg(x[E], x[E], MPFR_RNDN);
    mpfr_exp(x[E], x[E], MPFR_RNDN);
    mpfr_mul(*A, *A, x[E], MPFR_RNDN);
    mpfr_mul(*Bp, *Bp, x[E], MPFR_RNDN);
    mpfr_mul(*B, x[E], x[SH], MPFR_RNDN);
    if (mpfr_sgn(x[K]) == 0) /* no spring: exactly */
        mpfr_set_ui(*A, 1, MPFR_RNDN);
    mpfr_mul(*Ap, *B, x[W2], MPFR_RNDN);
    mpfr_neg(*Ap, *Ap, MPFR_RNDN);
    mpfr_div(x[G], *B, x[H], MPFR_RNDN);
    mpfr_sub_ui(e->value[8], *A, 1, MPFR_RNDN);
    mpfr_sub_ui(e->value[9], *Bp, 1, MPFR_RNDN);
    loads(x, *A);
}

void exact_input(exact_step *e, int input, int between)
{
    force_terms(e, between);
    if (input != RAMPWISE_FORCE) {
        base_terms(e->value[2], e->value[3], e->x, e->sys, input);
        base_terms(e->value[6], e->value[7], e->x, e->sys, input);
    }
}
