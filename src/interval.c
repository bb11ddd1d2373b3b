#include "interval.h"

#include <math.h>
#include "twofold.h"

double rampwise_interval_dt_(double dt, uint64_t ticks, uint64_t per)
{
    int exponent;
    const double mantissa = frexp(dt, &exponent);
    const twofold length =
        twofold_divide(twofold_product(mantissa, (double)ticks), (twofold){(double)per, 0});
    return scalbn(length.hi, exponent);
}
