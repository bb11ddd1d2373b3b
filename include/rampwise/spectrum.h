/* rampwise/spectrum.h: response spectra of a whole record, and what goes with them. All since 0.1. */
#ifndef RAMPWISE_SPECTRUM_H
#define RAMPWISE_SPECTRUM_H

#include <stddef.h>
#include "evidence.h"
#include "peak.h"
#include "system.h"

RAMPWISE_BEGIN

/* The peaks of n_osc oscillators under one record p[n], n >= 1, linear between samples dt apart, all at rest
   under p[0] at sample 0: peak[n_osc].

   input    a kind of input of coefficients.h; for RAMPWISE_FORCE the mass is 1.
   omega    natural circular frequencies, [n_osc]: 0 is a free mass; INFINITY is allowed for a force (all is
            zero) and for base acceleration and velocity (no relative motion, the base's own acceleration).
   zeta     damping ratios, [n_osc].
   quantity RAMPWISE_DISPLACEMENT, _VELOCITY or _TOTAL_ACCELERATION.
   flags    0: the true peaks from the first to the last sample. RAMPWISE_AT_SAMPLES: at the samples only.
            RAMPWISE_RESIDUAL: the free motion after the last sample (rampwise_peaks_get).
            RAMPWISE_MAXIMAX: both times.

   An oscillator that overflows has an infinite peak (peaks.h). Residuals are looked at everywhere, also with
   RAMPWISE_AT_SAMPLES. For several quantities in one pass, several kinds of start, held inputs, and records
   that come in chunks: peaks.h.

   RAMPWISE_ERROR_MISSING, _COUNT (n is 0), _INTERVAL, _INPUT, _QUANTITY, _FLAGS; _SAMPLE, with the sample's
   index in bad; _FREQUENCY, _DAMPER, or another of rampwise_coeffs_make, with the oscillator's index in this
   call's list. Nothing is written then. bad may be NULL.
   Threads: split the list of oscillators. Work: n n_osc steps at lane speed (peaks.h), so that lists are best
   handed over by 32 or more at a time; no allocation, 140 KiB of stack. */
RAMPWISE_API int rampwise_spectrum(size_t n, double dt, const double *p, int input, size_t n_osc,
                                   const double *omega, const double *zeta, int quantity, unsigned flags,
                                   rampwise_peak *peak, size_t *bad);

/* The same with evidence[n_osc] of what the sampling has cost (evidence.h), for force, base
   acceleration and base velocity: RAMPWISE_ERROR_INPUT for base displacement, whose kinks make the
   response jump. Half as much work again. */
RAMPWISE_API int rampwise_spectrum_evidence(size_t n, double dt, const double *p, int input, size_t n_osc,
                                            const double *omega, const double *zeta, int quantity,
                                            unsigned flags, rampwise_peak *peak, rampwise_evidence *evidence,
                                            size_t *bad);

/* omega times the larger displacement, and omega^2 times: the pseudo-velocity and the pseudo-acceleration, in
   size. Not the peaks of velocity and total acceleration, but close for light damping. */
RAMPWISE_API double rampwise_pseudo_velocity(double omega, const rampwise_peak *displacement);
RAMPWISE_API double rampwise_pseudo_acceleration(double omega, const rampwise_peak *displacement);

/* The larger displacement under a force over the one that p0 causes when it rests: stiffness |u| / |p0|. */
RAMPWISE_API double rampwise_dynamic_load_factor(const rampwise_system *sys,
                                                 const rampwise_peak *displacement, double p0);

/* n values from first to last, both above 0 and either the larger, at equal ratios, list[n]: periods or
   frequencies of a spectrum; n = 1 gives first. The ends are exact; those between are as good as the
   platform's pow. RAMPWISE_ERROR_MISSING, _FREQUENCY. */
RAMPWISE_API int rampwise_list_log(size_t n, double first, double last, double *list);

/* The same with `per_octave` values to each doubling, from first upwards, last included if it is met (within
   1e-9 of an octave). *n tells how many there are; where list is NULL that is all, else list[capacity] gets
   them: RAMPWISE_ERROR_COUNT where it is too short, or per_octave is 0. */
RAMPWISE_API int rampwise_list_octaves(double first, double last, size_t per_octave, size_t capacity,
                                       double *list, size_t *n);

RAMPWISE_END

#endif
