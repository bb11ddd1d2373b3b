#include "rampwise/combination.h"

#include <math.h>

/* The largest size, so that squares keep within range; 0 where all are 0. */
static double scale_of(size_t n, const double *peak)
{
    double largest = 0;
    for (size_t i = 0; i < n; ++i)
        if (!(fabs(peak[i]) <= largest))
            largest = fabs(peak[i]);
    return largest;
}

double rampwise_combine_absolute_sum(size_t n, const double *peak)
{
    return rampwise_combine_with_share(n, peak, 1);
}

double rampwise_combine_root_of_squares(size_t n, const double *peak)
{
    if (peak == NULL)
        return NAN;
    const double scale = scale_of(n, peak);
    double sum = 0;
    for (size_t i = 0; scale != 0 && i < n; ++i)
        sum += peak[i] / scale * (peak[i] / scale);
    return scale != 0 ? scale * sqrt(sum) : 0;
}

double rampwise_modal_correlation(double omega_1, double zeta_1, double omega_2, double zeta_2)
{
    if (omega_1 == omega_2 && zeta_1 == zeta_2)
        return 1;
    if (omega_1 == 0 || omega_2 == 0)
        return 0;
    /* The formula is symmetric; the smaller ratio is within range. */
    if (omega_2 > omega_1)
        return rampwise_modal_correlation(omega_2, zeta_2, omega_1, zeta_1);
    const double r = omega_2 / omega_1, apart = (1 - r) * (1 + r);
    const double shared = 8 * sqrt(zeta_1 * zeta_2) * (zeta_1 + r * zeta_2) * r * sqrt(r);
    return shared / (apart * apart + 4 * zeta_1 * zeta_2 * r * (1 + r * r) +
                     4 * (zeta_1 * zeta_1 + zeta_2 * zeta_2) * r * r);
}

double rampwise_combine_complete_quadratic(size_t n, const double *peak, const double *omega,
                                           const double *zeta)
{
    if (peak == NULL || omega == NULL || zeta == NULL)
        return NAN;
    const double scale = scale_of(n, peak);
    double sum = 0;
    for (size_t i = 0; scale != 0 && i < n; ++i) {
        sum += peak[i] / scale * (peak[i] / scale);
        for (size_t j = 0; j < i; ++j)
            sum += 2 * rampwise_modal_correlation(omega[i], zeta[i], omega[j], zeta[j]) * (peak[i] / scale) *
                   (peak[j] / scale);
    }
    /* The form is never negative but for rounding. */
    return scale != 0 ? scale * sqrt(sum > 0 ? sum : 0 * sum) : 0;
}

double rampwise_combine_with_share(size_t n, const double *peak, double share)
{
    if (peak == NULL)
        return NAN;
    double sum = 0;
    for (size_t i = 0; i < n; ++i)
        sum += fabs(peak[i]);
    double largest = scale_of(n, peak);
    return share == 1 ? sum : largest + share * (sum - largest);
}
