#include "ends.h"

#include <math.h>
#include "rampwise/evidence.h"

void rampwise_ends_take_(record_ends *ends, size_t n, const double *d)
{
    for (size_t i = 0; i < n; ++i) {
        const double size = fabs(d[i]);
        ends->largest = size > ends->largest ? size : ends->largest;
        if (ends->n < END_SAMPLES && size > ends->at_start)
            ends->at_start = size;
        ends->recent[ends->n++ % END_SAMPLES] = size;
    }
}

uint32_t rampwise_ends_abrupt_(const record_ends *ends)
{
    double at_end = 0;
    for (size_t i = 0; i < END_SAMPLES; ++i)
        at_end = ends->recent[i] > at_end ? ends->recent[i] : at_end;
    return (ends->at_start > ends->largest / 20 ? RAMPWISE_ABRUPT_START : 0) |
           (at_end > ends->largest / 20 ? RAMPWISE_ABRUPT_END : 0);
}
