/* rampwise/evidence.h: what the sampling of the load has cost, as an estimate.

   A response is exact for a load that is straight between its samples. If the load is smooth, a ramp cuts its
   corners: it differs from the load by h^2/12 p'' on average over a step of length h. The second
   difference of the samples over 12,

       d[i] = (p[i - 1] - 2 p[i] + p[i + 1]) / 12,     d = 0 at the first and the last sample,

   stands for that, so the response e to d as the input estimates the error of the response u, and u - e is
   closer to the response of the smooth load. For records of a smooth load that begin and end at rest (tapered
   over 100 samples or more, content up to 0.6 of the Nyquist frequency) estimate over true error of the
   displacement is 0.7 to 1.15 for periods from 6 to 200 samples, and from 10 samples on the corrected
   displacement is off by a fifth of that error at most. Velocity and total acceleration, and all under a base
   velocity, hold more of the highest frequencies: 0.55 to 1.15, and less than half
   (tests/outside/sampling_error.c; measured 0.61 to 0.98, and 0.40).

   It is an estimate, and no more. Loads that really have corners at their samples and none between, pulses of
   straight lines for example, need none: their response is exact, and e is meaningless. It sees neither
   aliasing nor what was resampled or filtered earlier. Where the record starts or stops abruptly it is
   worthless: `abrupt` says so where one of the four samples next to an end has a second difference above a
   twentieth of the record's largest (a threshold of ours; a taper over 20 samples passes).

   For peaks: RAMPWISE_EVIDENCE and rampwise_peaks_evidence of peaks.h, or rampwise_spectrum_evidence of
   spectrum.h. For whole histories: rampwise_evidence_input, then rampwise_solve with the same coefficients
   from u0 = v0 = 0. Live: a second state, stepped one sample late with the d of the sample before the newest.

   Input straight between samples and equal intervals only. All since 0.1. */
#ifndef RAMPWISE_EVIDENCE_H
#define RAMPWISE_EVIDENCE_H

#include <stddef.h>
#include <stdint.h>
#include "peak.h"

/* Bits of rampwise_evidence.abrupt. */
enum {
    RAMPWISE_ABRUPT_START = 1, /* estimates are worth nothing */
    RAMPWISE_ABRUPT_END = 2    /* of the last samples, and of residuals, they are worth nothing */
};

/* The estimated errors of a peak's two values, each at the instant that the peak tells: value - error is the
   corrected value. NaN where there is none: the value is infinite. */
typedef struct rampwise_evidence {
    double error_high, error_low;
    uint32_t abrupt, reserve; /* reserve is 0 */
} rampwise_evidence;

RAMPWISE_BEGIN

/* d[n] from p[n], both in the unit of p; d may be p. In a displacement response and, under a force or base
   acceleration, in velocity and base acceleration's total acceleration, its response is the estimate at
   samples. n of 2 or less gives zeros. RAMPWISE_ERROR_MISSING; _SAMPLE with the index in bad (may be NULL):
   nothing is written then. Any thread; work n. */
RAMPWISE_API int rampwise_evidence_input(size_t n, const double *p, double *d, size_t *bad);

/* The size of the error over that of the value, for the larger of the two (rampwise_peak_larger); 0 where
   both are 0. Pointers must not be NULL. */
RAMPWISE_API double rampwise_evidence_share(const rampwise_peak *peak, const rampwise_evidence *evidence);

/* The verdict on a spectrum: the shortest of the n periods 2 pi/omega[i], in any order, from which on upwards
   all have a share of at most `share` (0 or more; 0.01 is one per cent). *period is INFINITY where the
   longest has more. Where an end is abrupt the estimates, and so this, are worth nothing: look first.
   RAMPWISE_ERROR_MISSING, _COUNT (n is 0), _FRACTION (share). Work n. */
RAMPWISE_API int rampwise_shortest_period(size_t n, const double *omega, const rampwise_peak *peak,
                                          const rampwise_evidence *evidence, double share, double *period);

RAMPWISE_END

#endif
