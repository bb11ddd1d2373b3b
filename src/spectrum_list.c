#include "spectrum_list.h"

#include <math.h>
#include "rampwise/peak.h"
#include "rampwise/status.h"
#include "valid.h"

int rampwise_record_kind_check_(const record_kind *r)
{
    if (r->n == 0)
        return RAMPWISE_ERROR_COUNT;
    if (!isfinite(r->dt) || r->dt <= 0)
        return RAMPWISE_ERROR_INTERVAL;
    if (r->input < RAMPWISE_FORCE || r->input > RAMPWISE_BASE_DISPLACEMENT)
        return RAMPWISE_ERROR_INPUT;
    if (r->quantity < RAMPWISE_DISPLACEMENT || r->quantity > RAMPWISE_TOTAL_ACCELERATION)
        return RAMPWISE_ERROR_QUANTITY;
    return RAMPWISE_OK;
}

int rampwise_record_is_stiff_(const record_kind *r, double omega)
{
    return isinf(omega) && omega > 0 && r->input != RAMPWISE_BASE_DISPLACEMENT;
}

int rampwise_record_oscillator_(const record_kind *r, double omega, double zeta, rampwise_coeffs *c)
{
    rampwise_system system;
    const int status = rampwise_system_natural(&system, omega, zeta);
    return status == RAMPWISE_OK ? rampwise_coeffs_make(c, &system, r->dt, r->input, RAMPWISE_RAMP) : status;
}

/* What no maker of coefficients refuses: steps and frequencies far from the ends of the range. */
static int is_everyday(const record_kind *r, double omega, double zeta)
{
    return omega > 1e-60 && omega < 1e60 && r->dt > 1e-60 && r->dt < 1e60 && omega * r->dt < 1e6 &&
           zeta >= 0 && zeta <= 100;
}

int rampwise_record_list_check_(const record_kind *r, size_t n_osc, const double *omega, const double *zeta,
                                size_t *bad)
{
    for (size_t i = 0; i < n_osc; ++i) {
        rampwise_coeffs c;
        if (is_everyday(r, omega[i], zeta[i]))
            continue;
        const int stiff = rampwise_record_is_stiff_(r, omega[i]);
        const int status = !stiff              ? rampwise_record_oscillator_(r, omega[i], zeta[i], &c)
                           : isfinite(zeta[i]) ? RAMPWISE_OK
                                               : RAMPWISE_ERROR_DAMPER;
        if (status != RAMPWISE_OK)
            return blame(status, i, bad);
    }
    return RAMPWISE_OK;
}
