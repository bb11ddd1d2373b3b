/* rampwise/record.h: many samples at a time.

   Functions in _f32 are the same in single precision.

   Arrays need the alignment of a double, or float, only. Outputs are arrays as long as p; an output may be p
   itself (the same first element, in place), otherwise nothing may overlap. n = 0 does nothing.

   All samples, times and states are checked before the first step: RAMPWISE_ERROR_SAMPLE, _STATE or
   _TIME leave everything as it was. If a response, or an acceleration asked for, overflows at some
   sample, RAMPWISE_ERROR_OVERFLOW: outputs before that sample are valid, it and later ones are not
   written, and the state is the one before it. bad may be NULL; in both cases it gets the index of
   the sample at fault, and is otherwise left alone.

   Other errors: RAMPWISE_ERROR_MISSING, _NOT_MADE.

   Threads: calls with different states may run at the same time, on shared coefficients and input.
   Work: one step a sample (step.h); nothing is allocated. */
#ifndef RAMPWISE_RECORD_H
#define RAMPWISE_RECORD_H

#include <stddef.h>
#include "step.h"

/* Pointers to the wanted outputs, NULL where not wanted: u, v, u'', and the acceleration against a
   fixed frame, one value a sample, as in motion.h. */
typedef struct rampwise_history {
    double *u, *v, *a, *total;
} rampwise_history;

typedef struct rampwise_history_f32 {
    float *u, *v, *a, *total;
} rampwise_history_f32;

RAMPWISE_BEGIN

/* The next n samples, p[0] to p[n-1], each dt after the one before: one step each. out may be NULL.
   The bits do not depend on how a record is cut into calls. Since 0.1. */
RAMPWISE_API int rampwise_run(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p,
                              const rampwise_history *out, size_t *bad);
RAMPWISE_API int rampwise_run_f32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n,
                                  const float *p, const rampwise_history_f32 *out, size_t *bad);

/* A whole record of n samples, n - 1 steps, from displacement u0 and velocity v0: entry 0 of each
   output is the initial state under p[0] (the start "at once" of step.h). The same bits as
   rampwise_start with p[0] and rampwise_run over the others. Since 0.1. */
RAMPWISE_API int rampwise_solve(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p,
                                const rampwise_history *out, size_t *bad);
RAMPWISE_API int rampwise_solve_f32(const rampwise_coeffs_f32 *c, float u0, float v0, size_t n,
                                    const float *p, const rampwise_history_f32 *out, size_t *bad);

/* The next n samples at the times t[0] < t[1] < ..., the state being at *t_last < t[0]; exact for any gaps.
   *t_last becomes the time of the state. c tells system, input and between; its own dt may be any, such as
   the usual interval, and belongs to p_before of the state.
   Eight lengths of interval are remembered (by their bits, on the stack, 2 KiB), c->dt first: while the
   intervals are among them the work is a little more than that of rampwise_run, else one making of
   coefficients more. With intervals of exactly c->dt, the bits are those of rampwise_run.
   RAMPWISE_ERROR_TIME, with the index in bad, where a time is not finite or not later than the one before;
   an interval that rampwise_coeffs_make refuses gives that error, and bad its sample. Since 0.1. */
RAMPWISE_API int rampwise_run_at(const rampwise_coeffs *c, rampwise_state *s, double *t_last, size_t n,
                                 const double *t, const double *p, const rampwise_history *out, size_t *bad);

RAMPWISE_END

#endif
