#include "rampwise/peak.h"

#include <math.h>

const rampwise_instant *rampwise_peak_larger(const rampwise_peak *peak)
{
    const rampwise_instant *const high = &peak->high, *const low = &peak->low;
    if (fabs(high->value) != fabs(low->value))
        return fabs(high->value) > fabs(low->value) ? high : low;
    if (high->sample != low->sample)
        return high->sample < low->sample ? high : low;
    return high->fraction <= low->fraction ? high : low;
}
