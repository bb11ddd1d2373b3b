#include "rampwise/system.h"

#include <float.h>
#include <math.h>
#include <stddef.h>
#include "rampwise/status.h"
#include "twofold.h"

/* 2 pi to 106 bits */
static const twofold two_pi = {0x1.921fb54442d18p+2, 0x1.1a62633145c07p-52};

/* omega 2^exponent, omega in [0.25, 8) or 0. Mantissas and exponents go apart, so that nothing on
   the way leaves the range of twofold arithmetic. */
static int natural(rampwise_system *sys, twofold omega, int exponent, double zeta)
{
    const twofold square = twofold_multiply(omega, omega);
    const double stiffness = scalbn(square.hi, 2 * exponent);
    int zeta_exponent;
    const double zeta_mantissa = frexp(zeta, &zeta_exponent);
    const double damper = scalbn(twofold_multiply_by(omega, zeta_mantissa).hi, exponent + zeta_exponent + 1);
    if (stiffness > DBL_MAX || (omega.hi > 0 && stiffness < DBL_MIN))
        return RAMPWISE_ERROR_FREQUENCY;
    if (!isfinite(damper))
        return RAMPWISE_ERROR_DAMPER;
    *sys = (rampwise_system){1.0, damper, stiffness};
    return RAMPWISE_OK;
}

static int refuse(const rampwise_system *sys, double frequency, double zeta)
{
    if (sys == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!isfinite(frequency) || frequency < 0)
        return RAMPWISE_ERROR_FREQUENCY;
    if (!isfinite(zeta))
        return RAMPWISE_ERROR_DAMPER;
    return RAMPWISE_OK;
}

int rampwise_system_natural(rampwise_system *sys, double omega, double zeta)
{
    const int status = refuse(sys, omega, zeta);
    int exponent;
    if (status != RAMPWISE_OK)
        return status;
    const double mantissa = frexp(omega, &exponent);
    return natural(sys, (twofold){mantissa, 0}, exponent, zeta);
}

int rampwise_system_hertz(rampwise_system *sys, double frequency, double zeta)
{
    const int status = refuse(sys, frequency, zeta);
    int exponent;
    if (status != RAMPWISE_OK)
        return status;
    const double mantissa = frexp(frequency, &exponent);
    return natural(sys, twofold_multiply_by(two_pi, mantissa), exponent, zeta);
}

int rampwise_system_period(rampwise_system *sys, double period, double zeta)
{
    const int status = refuse(sys, period, zeta);
    int exponent;
    if (status != RAMPWISE_OK)
        return status;
    if (period == 0)
        return RAMPWISE_ERROR_FREQUENCY;
    const double mantissa = frexp(period, &exponent);
    const twofold omega =
        twofold_times_power(twofold_divide(two_pi, (twofold){mantissa, 0}), -1); /* [pi, 2 pi] */
    return natural(sys, omega, 1 - exponent, zeta);
}
