#include "rampwise/evidence.h"

#include <math.h>
#include "ends.h"
#include "rampwise/status.h"
#include "samples.h"

int rampwise_evidence_input(size_t n, const double *p, double *d, size_t *bad)
{
    if (n > 0 && (p == NULL || d == NULL))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    double before = p[0];
    d[0] = 0;
    for (size_t i = 1; i + 1 < n; ++i) {
        const double now = p[i];
        d[i] = second_difference(before, now, p[i + 1]);
        before = now;
    }
    d[n - 1] = 0;
    return RAMPWISE_OK;
}

double rampwise_evidence_share(const rampwise_peak *peak, const rampwise_evidence *evidence)
{
    const rampwise_instant *const larger = rampwise_peak_larger(peak);
    const double error = larger == &peak->high ? evidence->error_high : evidence->error_low;
    return error == 0 ? 0 : fabs(error) / fabs(larger->value);
}

/* NaN counts as more than any share. */
static int exceeds(double share, double most)
{
    return !(share <= most);
}

int rampwise_shortest_period(size_t n, const double *omega, const rampwise_peak *peak,
                             const rampwise_evidence *evidence, double share, double *period)
{
    if (omega == NULL || peak == NULL || evidence == NULL || period == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (n == 0)
        return RAMPWISE_ERROR_COUNT;
    if (!(share >= 0))
        return RAMPWISE_ERROR_FRACTION;
    double exceeding = NAN, shortest = 0; /* the lowest frequency that exceeds, the highest below it */
    for (size_t i = 0; i < n; ++i)
        if (exceeds(rampwise_evidence_share(&peak[i], &evidence[i]), share) && !(omega[i] >= exceeding))
            exceeding = omega[i];
    for (size_t i = 0; i < n; ++i)
        if (!(omega[i] >= exceeding) && omega[i] > shortest)
            shortest = omega[i];
    *period = 6.283185307179586 / shortest;
    return RAMPWISE_OK;
}
