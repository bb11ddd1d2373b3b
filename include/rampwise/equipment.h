/* rampwise/equipment.h: light equipment on a structure, and floor spectra.

   A piece of equipment on a point of a structure is an oscillator under the point's acceleration y, which is
   an output of modes.h (a total acceleration: on_acceleration = the shapes there, on_input = 1 in the
   direction):

       m x'' + c x' + k x = -m y(t)

   x is relative to the point. The equipment is so light that the structure does not feel it. The answer is
   exact for the record that shakes the base: between two samples y is no straight line, but the sum of the
   free vibrations of the modes, and a step of the equipment takes displacement, velocity and the loads of
   every mode:

       x1 = A x0 + B x0' + sum over j of (E_j q_j + F_j q_j' + G_j load0_j + H_j load1_j) + direct terms of y

   and x1' likewise. E to H come from the equations of mode and equipment together, by power series and
   doubling in twofold arithmetic like all coefficients (coefficients.h), never from differences of two
   oscillators, which lose eps over the distance of the frequencies: tuned equipment is as exact as any other.
   Loads of all modes are gathered to the inputs.

   A floor spectrum has a piece of equipment for every period. The usual, re-sampled way needs nothing of this
   header: it takes the history of y at the samples as a record of its own, straight between them, from
   rampwise_modes_run to rampwise_spectrum (under RAMPWISE_BASE_ACCELERATION), as examples/floor_spectra.c
   does beside the exact way. Its error is what y does between the samples: a mode of N samples a cycle acts
   with sinc^2(1/N) of its size at its own frequency (-19 % at N = 4, -3.2 % at 10, -0.8 % at 20). It has no
   bound for a spectrum as a whole: the example prints the largest difference, 0.45 % with its fastest mode at
   N = 20.

   Equipment is part of the plan of modes.h; all functions there work on the object. Pieces are at rest
   against their points at every start. Their order of arithmetic: the direct terms at the two ends of the
   step, each in the order of inputs; modes in groups of 32 as in modes.h; then u + fma(A - 1, u, fma(B, v,
   sum)). Peaks, where the plan asks for them, are true between the samples as those of modes.h are. A step is
   passed by where either of two bounds does not exceed the peak: dt^2/8 of the largest second derivative
   beyond the samples, up to w dt = 2 or so; and at any w dt, for a piece with a spring, the energy of its
   motion about -y/(k/m) where the step begins, with what each mode can add to that in a step. In the steps
   that are left, the pieces in question go through the 16 parts of the step, by coefficients E to H of that
   interval, and the same two bounds hold for each part. Where a piece may still exceed, the power series of y
   goes into that of x.

   Work: to make a piece, some coefficients for each mode and doubling of the step; for a sample, 4 fused
   multiply-adds a mode and piece. Peaks, measured by bench/run with 100 modes, 10 floors and 100 pieces, w dt
   up to 4, over 20,000 samples, take 3.3 times as long as without under a shake, and 12 times under white
   noise; more with faster modes and pieces. Making the pieces takes 1.6 times as long with peaks. Memory: 32
   bytes a mode and piece, 80 with peaks. All since 0.1. */
#ifndef RAMPWISE_EQUIPMENT_H
#define RAMPWISE_EQUIPMENT_H

#include "modes.h"
#include "record.h"

RAMPWISE_BEGIN

/* The next n samples, as rampwise_modes_run, with histories of the equipment where wanted, each
   [n][equipment_count]: x, x', x'' and the total acceleration of the piece, -(c x' + k x)/m. history may be
   NULL. RAMPWISE_ERROR_OVERFLOW also for equipment. */
RAMPWISE_API int rampwise_equipment_run(rampwise_modes *modes, size_t n, const double *input, double *output,
                                        const rampwise_history *history, size_t *bad);

/* Displacement x and velocity x' of each piece at the present sample, [equipment_count]; NULL where not
   wanted. */
RAMPWISE_API int rampwise_equipment_get(const rampwise_modes *modes, double *u, double *v);

/* The peaks of all pieces from sample 0 to the present, peak[equipment_count]; quantity is
   RAMPWISE_DISPLACEMENT (x) or RAMPWISE_TOTAL_ACCELERATION. RAMPWISE_ERROR_MISSING, _QUANTITY (another, or
   the plan did not ask for peaks). */
RAMPWISE_API int rampwise_equipment_peaks(const rampwise_modes *modes, int quantity, rampwise_peak *peak);

/* The peaks of all pieces after the present sample, under zero input from there on, peak[equipment_count],
   and what no later value exceeds, later[equipment_count] or NULL: as rampwise_modes_residual (modes.h) has
   them for outputs. The bound: off the frequencies of the modes x is a free vibration and motions that follow
   the modes, each below its energy; near one (damped), the mode adds to the root of the energy of x no more
   than the integral of its part of |y|. Undamped equipment with k/m of an undamped mode that moves its point
   grows for ever: its peaks are infinite and never reached (peak.h), while those of any record are finite.
   RAMPWISE_ERROR_MISSING, _QUANTITY. */
RAMPWISE_API int rampwise_equipment_residual(rampwise_modes *modes, int quantity, uint64_t samples,
                                             rampwise_peak *peak, double *later);

RAMPWISE_END

#endif
