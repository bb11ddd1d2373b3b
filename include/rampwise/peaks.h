/* rampwise/peaks.h: the largest responses of many oscillators under one input, fed in chunks.

   The engine of response spectra, for records of any length: memory, 2.6 KB an oscillator, does not grow with
   the record, and a caller may stop, look and go on between chunks. Values are those of motion.h: between the
   samples they are the true extremes of the exact response, at the samples they have the bits of
   rampwise_run. Where a quantity jumps at a sample, both values count.

   How. Inside a step the response is a line plus a free vibration (with the input on a line), so its second
   derivative is a free vibration too and its slope is monotone between the zeros of that; each zero of the
   slope is bracketed, and refined on a piece so short that a Taylor series holds it. Extremes of one sign are
   convex in order, so in a step of many cycles only those near its ends can win: the work of a step is
   bounded. Most steps are passed by: the excess of an extreme over the samples beside it is at most
   dt^2/8 times the largest second derivative, which the samples of a stretch bound.

   Threads: an object belongs to one thread at a time; a list of oscillators is split over threads by making
   one object for each part. Nothing is allocated after an object is made. All since 0.1. */
#ifndef RAMPWISE_PEAKS_H
#define RAMPWISE_PEAKS_H

#include <stddef.h>
#include "evidence.h"
#include "instructions.h"
#include "peak.h"
#include "step.h"

typedef struct rampwise_peaks rampwise_peaks;

RAMPWISE_BEGIN

/* Bytes of memory for n oscillators, 1 or more, and the alignment of its first byte; 0 where n is 0 or too
   large. The same for every instruction set. */
RAMPWISE_API size_t rampwise_peaks_size(size_t n);
RAMPWISE_API size_t rampwise_peaks_alignment(void);

/* Peaks of n oscillators c[0] to c[n - 1], copied, that share dt, input and between, for quantity[0] to
   quantity[quantity_count - 1] (one to three of peak.h, all different), in the caller's memory; *peaks points
   into it. flags: 0, RAMPWISE_AT_SAMPLES, RAMPWISE_EVIDENCE (evidence.h; for RAMPWISE_RAMP and not base
   displacement) or both. The first sample fed is sample 0, and all are at rest under it.
   RAMPWISE_ERROR_MISSING, _MEMORY, _COUNT (n or quantity_count), _NOT_MADE, _DIFFERENT, _QUANTITY,
   _FLAGS, _INSTRUCTIONS; with evidence _BETWEEN, _INPUT. */
RAMPWISE_API int rampwise_peaks_init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c,
                                     size_t quantity_count, const int *quantity, unsigned flags,
                                     int instructions, rampwise_peaks **peaks);

/* The same in memory from malloc. */
RAMPWISE_API int rampwise_peaks_create(size_t n, const rampwise_coeffs *c, size_t quantity_count,
                                       const int *quantity, unsigned flags, int instructions,
                                       rampwise_peaks **peaks);

/* Frees an object of rampwise_peaks_create; NULL is allowed. */
RAMPWISE_API void rampwise_peaks_free(rampwise_peaks *peaks);

/* Begins anew with the states s[n] as sample 0, which share p and p_before (a settled start for example), or,
   where s is NULL, at rest under the next sample fed.
   RAMPWISE_ERROR_MISSING, _STATE, _DIFFERENT. */
RAMPWISE_API int rampwise_peaks_start(rampwise_peaks *peaks, const rampwise_state *s);

/* The next n samples. RAMPWISE_ERROR_MISSING, _SAMPLE (with the index in bad, which may be NULL): nothing has
   changed. An oscillator that overflows stops, with an infinite peak on the side where it went; the others
   go on. */
RAMPWISE_API int rampwise_peaks_run(rampwise_peaks *peaks, size_t n, const double *p, size_t *bad);

/* The peaks so far, peak[n], of one of the object's quantities: flags is 0 (primary: from sample 0 to the
   last; with RAMPWISE_HOLD the last sample acts for one more dt), RAMPWISE_RESIDUAL (the free motion from
   there on, without limit of time: force and base acceleration are zero at once, the base then keeps its
   velocity or place; under RAMPWISE_AT_SAMPLES too it is looked at everywhere), or RAMPWISE_MAXIMAX. The
   object goes on unchanged. RAMPWISE_ERROR_MISSING, _QUANTITY, _FLAGS, _COUNT (nothing was fed yet). */
RAMPWISE_API int rampwise_peaks_get(const rampwise_peaks *peaks, int quantity, unsigned flags,
                                    rampwise_peak *peak);

/* The estimated errors of those peaks, evidence[n], for an object with RAMPWISE_EVIDENCE (else
   RAMPWISE_ERROR_FLAGS). Errors as rampwise_peaks_get. */
RAMPWISE_API int rampwise_peaks_evidence(const rampwise_peaks *peaks, int quantity, unsigned flags,
                                         rampwise_evidence *evidence);

/* All of it as bytes; resumed, it goes on to the same peaks, on any machine and set of instructions. Resumed
   into an object of as many oscillators for the same quantities and flags (RAMPWISE_ERROR_DIFFERENT);
   coefficients are replaced. The bytes and the other errors are those of rampwise_stream_save and
   rampwise_stream_resume (stream.h). */
RAMPWISE_API size_t rampwise_peaks_saved_size(const rampwise_peaks *peaks);
RAMPWISE_API int rampwise_peaks_save(const rampwise_peaks *peaks, void *bytes, size_t count);
RAMPWISE_API int rampwise_peaks_resume(rampwise_peaks *peaks, const void *bytes, size_t count);

RAMPWISE_END

#endif
