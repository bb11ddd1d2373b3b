/* rampwise/channels.h: many inputs at a time, each with an oscillator of its own.

   The rules of record.h for arrays, refusals and threads hold. Each channel has the bits of
   rampwise_run on it alone. One that overflows stops there, as rampwise_run would, and the others
   go on: RAMPWISE_ERROR_OVERFLOW, and bad, an index into p, is the smallest one at fault.

   Work: one step a sample and channel, at lane speed (bank.h) from some eight channels on; 25 KiB
   of stack, nothing allocated. */
#ifndef RAMPWISE_CHANNELS_H
#define RAMPWISE_CHANNELS_H

#include "record.h"

RAMPWISE_BEGIN

/* The next n frames of samples, p[n][channels], channel j under oscillator c[j] with state s[j]:
   outputs are frames too. All c share one dt (RAMPWISE_ERROR_DIFFERENT). Since 0.1. */
RAMPWISE_API int rampwise_run_frames(size_t channels, const rampwise_coeffs *c, rampwise_state *s, size_t n,
                                     const double *p, const rampwise_history *out, size_t *bad);

/* The next n samples of many records, p[records][n], all under one oscillator, record j with state
   s[j]: outputs are [records][n] too. Since 0.1. */
RAMPWISE_API int rampwise_run_records(const rampwise_coeffs *c, size_t records, rampwise_state *s, size_t n,
                                      const double *p, const rampwise_history *out, size_t *bad);

RAMPWISE_END

#endif
