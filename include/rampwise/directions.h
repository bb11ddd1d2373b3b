/* rampwise/directions.h: two horizontal components, and the largest response over
   all directions in their plane.

   Two histories u1 and u2 at right angles have, in the direction phi, the history
   u1 cos phi + u2 sin phi, and

       S(phi) = max over time of |u1 cos phi + u2 sin phi|

   depends on how the sensor happened to be turned. Percentiles of S, phi uniform on [0, pi), do not: 50 is
   the median, 100 the largest over all angles, which is the largest hypot(u1, u2), and 0 the smallest.
   Source: D. M. Boore, Orientation-independent, nongeometric-mean measures of seismic intensity from two
   horizontal components of motion, Bulletin of the Seismological Society of America 100(4), 1830-1835, 2010.

   How. S is the support function of the outline (the convex hull) of all points +-(u1, u2): between the
   directions of two neighbouring edges S(phi) = |corner| cos(phi - its angle), and no angle is ever tried.
   Both components are stepped side by side, with the bits of rampwise_run; a stretch of samples inside an
   ellipse that the outline holds is passed by at lane speed; others are put aside and, where the outline does
   not hold them in the end, looked at step by step. Work: two steps a sample and oscillator, and for each
   point that the outline gains, a move of its corners (16 bytes each).

   At the samples the outline is exact, to 2e-13 of the largest S for the rounding of points that lie
   nearly in a line. Between the samples it gains exact points of the response inside steps until every
   S(phi) falls short by less than 1e-6 of the largest: a part of a step bends away from its chord by
   no more than its length squared over 8 times its largest second derivative, and parts that could
   stick out by more are halved.

   Percentiles need angles: they are as good as the platform's atan2, acos, sin and cos, and not part of the
   contract of bits. Areas are computed: histories larger than 1e150, or everywhere smaller than 1e-150, are
   out of range. All since 0.1. */
#ifndef RAMPWISE_DIRECTIONS_H
#define RAMPWISE_DIRECTIONS_H

#include <stddef.h>
#include "coefficients.h"
#include "instructions.h"
#include "linkage.h"
#include "peak.h"

RAMPWISE_BEGIN

/* Percentiles of S for n_osc oscillators under two records p1[n] and p2[n], n >= 1, linear between samples dt
   apart, all at rest under the first samples: value[n_osc][n_percent].

   input, omega, quantity as in rampwise_spectrum; zeta[n_osc] must not be negative.
   flags        0, or RAMPWISE_AT_SAMPLES for the samples only; always from the first to the last sample.
   percent      [n_percent], 0 to 100, in any order.

   A response that overflows has infinite percentiles. Outlines take memory from malloc while this runs, 32
   oscillators at a time: some 500 KB, and more where thousands of samples are corners, as in circular motion.

   RAMPWISE_ERROR_MISSING, _COUNT (n is 0), _INTERVAL, _INPUT, _QUANTITY, _FLAGS, _PERCENT (with its index in
   bad); _SAMPLE, with the index in bad (of either record); _FREQUENCY, _DAMPER, or another of
   rampwise_coeffs_make, with the oscillator's index in bad: nothing is written then. _MEMORY: there was none;
   values of the first oscillators may be written. bad may be NULL. Threads: split the list of oscillators. */
RAMPWISE_API int rampwise_spectrum_directions(size_t n, double dt, const double *p1, const double *p2,
                                              int input, size_t n_osc, const double *omega,
                                              const double *zeta, int quantity, unsigned flags,
                                              size_t n_percent, const double *percent, double *value,
                                              size_t *bad);

/* The same of two given histories x[n] and y[n], n >= 1, of whatever is measured or computed:
   value[n_percent]. RAMPWISE_ERROR_MISSING, _COUNT, _PERCENT, _SAMPLE (with the index in bad), _MEMORY:
   nothing is written. Memory from malloc while this runs, up to 136 bytes a corner. Any thread. */
RAMPWISE_API int rampwise_percentiles_over_angle(size_t n, const double *x, const double *y, size_t n_percent,
                                                 const double *percent, double *value, size_t *bad);

/* The same fed in chunks, in bounded memory: the caller gives a number of directions M. As soon as an outline
   has more than 2 M corners it is thinned to those that are the farthest in one of the directions m pi/M: S
   stays exact there, and may fall short between them. */
typedef struct rampwise_directions rampwise_directions;

/* Bytes of memory for n oscillators and M directions, n >= 1, M >= 2, and the alignment of its
   first byte; 0 where either is out of range. About 15 KB and 64 M bytes an oscillator. The same
   for every instruction set. */
RAMPWISE_API size_t rampwise_directions_size(size_t n, size_t directions);
RAMPWISE_API size_t rampwise_directions_alignment(void);

/* n oscillators c[0] to c[n - 1], copied, that share dt and input, between RAMPWISE_RAMP, dampers and
   stiffnesses not negative; one quantity of peak.h; flags 0 or RAMPWISE_AT_SAMPLES. In the caller's memory;
   *made points into it. RAMPWISE_ERROR_MISSING, _MEMORY, _COUNT (n or directions), _NOT_MADE, _DIFFERENT,
   _BETWEEN (held inputs), _DAMPER, _STIFFNESS, _QUANTITY, _FLAGS, _INSTRUCTIONS. */
RAMPWISE_API int rampwise_directions_init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c,
                                          int quantity, size_t directions, unsigned flags, int instructions,
                                          rampwise_directions **made);

/* The same in memory from malloc. */
RAMPWISE_API int rampwise_directions_create(size_t n, const rampwise_coeffs *c, int quantity,
                                            size_t directions, unsigned flags, int instructions,
                                            rampwise_directions **made);

/* Frees an object of rampwise_directions_create; NULL is allowed. */
RAMPWISE_API void rampwise_directions_free(rampwise_directions *d);

/* Begins anew, at rest under the next samples fed. RAMPWISE_ERROR_MISSING. */
RAMPWISE_API int rampwise_directions_start(rampwise_directions *d);

/* The next n samples of both inputs. RAMPWISE_ERROR_MISSING, _SAMPLE (with the index in bad, which may
   be NULL): nothing has changed. How a record is cut changes no S by more than what is said above.
   Chunks of some hundred samples or more are best: at the end of each, what may be part of the outline
   is looked at step by step. */
RAMPWISE_API int rampwise_directions_run(rampwise_directions *d, size_t n, const double *p1, const double *p2,
                                         size_t *bad);

/* The percentiles so far, value[n][n_percent], and, where shortfall is not NULL, how far each may fall short
   for the limited number of directions, shortfall[n][n_percent]: the percentile of the full outline lies
   between value and value / (1 - shortfall). It is 0 where nothing was thinned away; for the largest it is
   at most 1 - cos(pi/2M); for others it is computed from the lines that touch the outline in the M
   directions, is mostly of that size too, and can be larger, to 1 (motion in nearly one line, and a
   percentile near 0). The object goes on unchanged; its scratch is used. RAMPWISE_ERROR_MISSING, _PERCENT,
   _COUNT (nothing was fed yet). */
RAMPWISE_API int rampwise_directions_get(rampwise_directions *d, size_t n_percent, const double *percent,
                                         double *value, double *shortfall);

/* All of it as bytes; resumed, it goes on to the same percentiles. Resumed into an object of the same
   oscillators, quantity, flags and number of directions (RAMPWISE_ERROR_DIFFERENT). The bytes and the other
   errors are those of rampwise_stream_save and rampwise_stream_resume (stream.h). */
RAMPWISE_API size_t rampwise_directions_saved_size(const rampwise_directions *d);
RAMPWISE_API int rampwise_directions_save(const rampwise_directions *d, void *bytes, size_t count);
RAMPWISE_API int rampwise_directions_resume(rampwise_directions *d, const void *bytes, size_t count);

RAMPWISE_END

#endif
