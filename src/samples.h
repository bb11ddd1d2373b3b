/* Samples that enter: all finite, or the index of the first that is not. */
#ifndef RAMPWISE_SAMPLES_H
#define RAMPWISE_SAMPLES_H

#include "kernels/kernels.h"
#include "valid.h"

static inline int check_samples(size_t n, const real *p, size_t *bad)
{
    const size_t wrong = PRIVATE(kernels)(RAMPWISE_FASTEST)->first_not_finite(n, p);
    return wrong < n ? blame(RAMPWISE_ERROR_SAMPLE, wrong, bad) : RAMPWISE_OK;
}

#endif
