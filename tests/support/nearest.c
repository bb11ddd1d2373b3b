#include "nearest.h"

#include <mpfr.h>

/* The exponents of MPFR's subnormal emulation: see "Exceptions" in its manual. */
static double to_double(mpfr_t exact_rounded, int ternary)
{
    const mpfr_exp_t low = mpfr_get_emin(), high = mpfr_get_emax();
    mpfr_set_emin(-1073);
    mpfr_set_emax(1024);
    ternary = mpfr_check_range(exact_rounded, ternary, MPFR_RNDN);
    (void)mpfr_subnormalize(exact_rounded, ternary, MPFR_RNDN);
    const double result = mpfr_get_d(exact_rounded, MPFR_RNDN);
    mpfr_set_emin(low);
    mpfr_set_emax(high);
    return result;
}

enum { FMA, SUM, QUOTIENT, RATE };

static double nearest(int operation, double x, double y, double z)
{
    mpfr_t a, b, c, r;
    int ternary = 0;
    mpfr_inits2(53, a, b, c, r, (mpfr_ptr)0);
    mpfr_set_d(a, x, MPFR_RNDN);
    mpfr_set_d(b, y, MPFR_RNDN);
    mpfr_set_d(c, z, MPFR_RNDN);
    if (operation == FMA) {
        ternary = mpfr_fma(r, a, b, c, MPFR_RNDN);
    } else if (operation == SUM) {
        ternary = mpfr_add(r, a, b, MPFR_RNDN);
    } else if (operation == QUOTIENT) {
        ternary = mpfr_div(r, a, b, MPFR_RNDN);
    } else {
        mpfr_t product;
        mpfr_init2(product, 106);
        mpfr_mul(product, b, c, MPFR_RNDN);
        ternary = mpfr_div(r, a, product, MPFR_RNDN);
        mpfr_clear(product);
    }
    const double result = to_double(r, ternary);
    mpfr_clears(a, b, c, r, (mpfr_ptr)0);
    return result;
}

double nearest_fma(double x, double y, double z)
{
    return nearest(FMA, x, y, z);
}

double nearest_sum(double x, double y)
{
    return nearest(SUM, x, y, 0);
}

double nearest_quotient(double x, double y)
{
    return nearest(QUOTIENT, x, y, 0);
}

double nearest_rate(double x, double y, double z)
{
    return nearest(RATE, x, y, z);
}

float nearest_fmaf(float x, float y, float z)
{
    const mpfr_exp_t low = mpfr_get_emin(), high = mpfr_get_emax();
    mpfr_t a, b, c, r;
    mpfr_inits2(24, a, b, c, r, (mpfr_ptr)0);
    mpfr_set_flt(a, x, MPFR_RNDN);
    mpfr_set_flt(b, y, MPFR_RNDN);
    mpfr_set_flt(c, z, MPFR_RNDN);
    int ternary = mpfr_fma(r, a, b, c, MPFR_RNDN);
    mpfr_set_emin(-148);
    mpfr_set_emax(128);
    ternary = mpfr_check_range(r, ternary, MPFR_RNDN);
    (void)mpfr_subnormalize(r, ternary, MPFR_RNDN);
    const float result = mpfr_get_flt(r, MPFR_RNDN);
    mpfr_set_emin(low);
    mpfr_set_emax(high);
    mpfr_clears(a, b, c, r, (mpfr_ptr)0);
    return result;
}
