#include "rampwise/record.h"

#include "rampwise/status.h"
#include "entry.h"
#include "kernels/kernels.h"
#include "samples.h"
#include "valid.h"

int PUBLIC(run)(const real_coeffs *c, real_state *s, size_t n, const real *p, const real_history *out,
                size_t *bad)
{
    if (c == NULL || s == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = check_pair(c, s);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    const real_history wanted = wanted_from(out, 0);
    const size_t reached = PRIVATE(kernels)(RAMPWISE_FASTEST)->advance(c, s, 0, n, 1, p, &wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}

int PUBLIC(solve)(const real_coeffs *c, real u0, real v0, size_t n, const real *p, const real_history *out,
                  size_t *bad)
{
    real_state s;
    if (c == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    PUBLIC(start)(&s, u0, v0, 0);
    int status = check_pair(c, &s);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    const real_history wanted = wanted_from(out, 0);
    PUBLIC(start)(&s, u0, v0, p[0]);
    if (!put_state(c, &s, &wanted, 0))
        return blame(RAMPWISE_ERROR_OVERFLOW, 0, bad);
    const size_t reached = PRIVATE(kernels)(RAMPWISE_FASTEST)->advance(c, &s, 1, n, 1, p, &wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}
