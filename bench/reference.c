#include "reference.h"

#include <float.h>
#include <math.h>
#include "../tests/support/exact.h"

#ifdef __SIZEOF_FLOAT128__
typedef __float128 quad;
#else
typedef long double quad;
_Static_assert(LDBL_MANT_DIG >= 113, "the reference needs numbers of 113 bits");
#endif

enum { A, B, C, D, AP, BP, CP, DP };

/* The sum of three doubles, which hold 159 bits. */
static quad quad_of(const mpfr_t exact)
{
    mpfr_t rest;
    quad sum = 0;
    mpfr_init2(rest, mpfr_get_prec(exact));
    mpfr_set(rest, exact, MPFR_RNDN);
    for (int i = 0; i < 3; ++i) {
        const double part = mpfr_get_d(rest, MPFR_RNDN);
        sum += (quad)part;
        mpfr_sub_d(rest, rest, part, MPFR_RNDN);
    }
    mpfr_clear(rest);
    return sum;
}

static void exact_coefficients(quad value[8], const rampwise_system *sys)
{
    exact_step e;
    exact_init(&e, sys, CASE_DT);
    exact_free_motion(&e, CASE_DT, 1);
    exact_input(&e, RAMPWISE_FORCE, RAMPWISE_RAMP);
    for (int i = 0; i < 8; ++i)
        value[i] = quad_of(e.value[i]);
    exact_clear(&e);
}

void reference_make(reference *r, const bench_case *in, size_t oscillator)
{
    quad x[8], u = 0, v = 0, before = 0;
    exact_coefficients(x, &in->sys[oscillator]);
    for (size_t i = 0; i < CASE_SAMPLES; ++i) {
        const quad now = in->p[i], old = u;
        u = x[A] * old + x[B] * v + x[C] * before + x[D] * now;
        v = x[AP] * old + x[BP] * v + x[CP] * before + x[DP] * now;
        before = now;
        r->high[i] = (double)u;
        r->low[i] = (double)(u - (quad)r->high[i]);
    }
}

double reference_error(const reference *r, size_t n, const double *u)
{
    double largest = 0, error = 0;
    for (size_t i = 0; i < n; ++i) {
        const double off = fabs((u[i] - r->high[i]) - r->low[i]);
        largest = fmax(largest, fabs(r->high[i]));
        if (!(off <= error)) /* so that a NaN stays */
            error = off;
    }
    return error / largest;
}
