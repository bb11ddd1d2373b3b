/* rampwise/modes.h: a whole structure by its modes.

   n modes, each an oscillator of its own (coefficients.h), under inputs that they share:

       m_j q_j'' + c_j q_j' + k_j q_j = sum over i of load[j][i] input[i]       (RAMPWISE_FORCE)
       q_j'' + (c_j/m_j) q_j' + (k_j/m_j) q_j = - sum of load[j][i] input[i]    (RAMPWISE_BASE_ACCELERATION)

   and outputs that are weighted sums:

       output[o] = sum over j of (on_displacement[j][o] q_j + on_velocity[j][o] q_j' + on_acceleration[j][o] q_j'')
                 + sum over i of on_input[i][o] input[i]

   Modes come from the caller's own eigenvalue solver. With modes shape[j] of the matrices M and K, load is
   shape[j]' F under forces F input, and the participation factor shape[j]' M r / m_j under a base
   acceleration in the direction r, up to three of them (inputs that mean different things may be mixed under
   RAMPWISE_FORCE). A rigid-body mode is an oscillator without a spring. on_displacement[j][o] = shape[j] at a
   degree of freedom gives its displacement; on_acceleration, together with on_input = 1 in that direction,
   its acceleration against a fixed frame. structure.h brings static corrections, and damping of any
   distribution.

   Every mode is exact for inputs that are straight (or held) between the samples, with the bits of
   rampwise_run. The order of an output's sum is fixed: direct terms in the order of inputs, then modes in
   groups of 32, in each first the displacements and then the velocities in the order of modes, every term one
   fused multiply-add. So is the order of a modal load: inputs in their order, from zero. Accelerations are
   taken into the weights of displacement, velocity and input when the object is made: q'' is a row of the
   coefficients. Bits do not depend on the set of instructions, nor on how a record is cut into calls.

   Peaks between the samples, where the plan asks for them. An output is a sum of modes and has no closed form
   for its extremes. (1) q_j'' of a mode is a free vibration inside a step, so the energy in it bounds its
   size and its slope's over the whole step by their values where the step begins; an output exceeds the
   samples beside it by at most the weighted sum of those bounds times dt^2/8 or, in a step of more than 4
   radians, times twice the inverse of omega_j^2. A tile of 16 samples that cannot exceed the peak so far is
   passed by, and so is a step. (2) In the steps that are left, the modes go through 16 equal parts of the
   step, by coefficients of that interval, and the outputs in question are summed where the parts begin. These
   values raise what must be exceeded, and between them an output's excess is bounded as in (1), with the
   length of a part; most is outdone by that. All steps of 256 samples go through it before any goes on. (3)
   Where something may still exceed, the power series of all modes are summed to one polynomial for each
   output in question, on pieces of the step so short that w h and c h/m of every mode are at most 1. (4) The
   polynomial's extremes, where it can exceed the peak, are found by halving until its slope is monotone, or
   no more can be gained, and then by Newton's steps inside the bracket. The peak is right to rounding: 1e-12
   of the sum of the sizes of its terms.
   Where held inputs make an output jump at a sample, both values count.

   Threads: an object belongs to one thread at a time. Nothing is allocated after it is made. Work for a
   sample and mode: a step at lane speed, one fused multiply-add for each input and each output (two where
   velocities or accelerations are weighted; outputs are taken by eights). Peaks take a bounded number of
   looks into steps, more of them the more of an output is in modes of many radians a step. Measured by
   bench/run over 20,000 samples of a building of 100 masses, w dt up to 4, 50 outputs, all with peaks:
   displacements take 1.8 times as long as without, total accelerations twice as long under a shake, and 14
   times under white noise; more with faster modes. Memory for a mode: some 130 bytes, 8 for each input and
   for each output (16), with peaks 1,070 and 16 for each output more; 2 KiB for each output, 3 with peaks;
   outputs count to the next multiple of 8, the number of samples not at all. All since 0.1. */
#ifndef RAMPWISE_MODES_H
#define RAMPWISE_MODES_H

#include <stddef.h>
#include <stdint.h>
#include "coefficients.h"
#include "instructions.h"
#include "peak.h"

/* What an object is made of; everything is copied. Begin with rampwise_modes_plan_init: zero but for the size
   and RAMPWISE_FASTEST. */
typedef struct rampwise_modes_plan {
    size_t size;                   /* of this struct */
    size_t modes, inputs, outputs; /* 1 or more each */
    const rampwise_coeffs *c;      /* [modes]: one dt and between, one input, force or base acceleration */
    const double *load;            /* [modes][inputs] */
    const double *on_displacement; /* [modes][outputs], and so the two below; NULL where all are zero */
    const double *on_velocity;
    const double *on_acceleration;
    const double *on_input; /* [inputs][outputs], or NULL */
    int32_t peaks;          /* 1 where peaks are wanted, else 0 */
    int32_t instructions;   /* of instructions.h */
    /* Light equipment (equipment.h): piece e stands on the point whose acceleration is output point[e]. */
    size_t equipment_count;
    const rampwise_system *equipment;
    const size_t *point;
    size_t reserve[5];
} rampwise_modes_plan;

typedef struct rampwise_modes rampwise_modes;

RAMPWISE_BEGIN

RAMPWISE_API void rampwise_modes_plan_init(rampwise_modes_plan *plan);

/* Bytes of memory for the object, and the alignment of its first byte; 0 where the plan is refused. The
   same for every set of instructions. */
RAMPWISE_API size_t rampwise_modes_size(const rampwise_modes_plan *plan);
RAMPWISE_API size_t rampwise_modes_alignment(void);

/* The object in the caller's memory, at rest under zero input. RAMPWISE_ERROR_MISSING; _COUNT (a number of
   the plan is 0 or too large, a point is not an output, or it was not begun with its init); _NOT_MADE;
   _DIFFERENT; _INPUT (neither force nor base acceleration); _WEIGHT (a load factor or weight is not finite,
   or an acceleration's overflows); _INSTRUCTIONS; _MEMORY; _STEP_LENGTH (peaks are wanted, and a mode or
   piece of equipment has w dt or c dt/m above 1024); for equipment, and with peaks for steps of dt/16, also
   what rampwise_coeffs_make refuses. */
RAMPWISE_API int rampwise_modes_init(void *memory, size_t bytes, const rampwise_modes_plan *plan,
                                     rampwise_modes **modes);

/* The same in memory from malloc. */
RAMPWISE_API int rampwise_modes_create(const rampwise_modes_plan *plan, rampwise_modes **modes);

/* Frees an object of rampwise_modes_create; NULL is allowed. */
RAMPWISE_API void rampwise_modes_free(rampwise_modes *modes);

/* How many modes; 0 where modes is NULL. */
RAMPWISE_API size_t rampwise_modes_count(const rampwise_modes *modes);

/* All modes at rest under input[inputs] at once (step.h), which is sample 0; peaks begin anew with its
   outputs. input may be NULL: zeros. RAMPWISE_ERROR_MISSING, _SAMPLE, _OVERFLOW (an output). */
RAMPWISE_API int rampwise_modes_start(rampwise_modes *modes, const double *input);

/* The same from modal displacements u[modes] and velocities v[modes]; _STATE where one is not finite. */
RAMPWISE_API int rampwise_modes_set(rampwise_modes *modes, const double *u, const double *v,
                                    const double *input);

/* Displacement and velocity of each mode at the present sample, [modes]; NULL where not wanted. */
RAMPWISE_API int rampwise_modes_get(const rampwise_modes *modes, double *u, double *v);

/* The outputs at the present sample, output[outputs]. */
RAMPWISE_API int rampwise_modes_read(const rampwise_modes *modes, double *output);

/* The next n samples, input[n][inputs], one step each; output[n][outputs], or NULL. They may not overlap. n =
   1 is a live step. RAMPWISE_ERROR_MISSING; _SAMPLE, with its row in bad: nothing has changed. _OVERFLOW: a
   mode or an output is larger than a double can hold at row bad; outputs before it are valid, and the object
   stands at the sample before. bad may be NULL. */
RAMPWISE_API int rampwise_modes_run(rampwise_modes *modes, size_t n, const double *input, double *output,
                                    size_t *bad);

/* The peaks of all outputs from sample 0 to the present, peak[outputs]. RAMPWISE_ERROR_MISSING, _QUANTITY
   (the plan did not ask for peaks). */
RAMPWISE_API int rampwise_modes_peaks(const rampwise_modes *modes, rampwise_peak *peak);

/* The peaks of all outputs after the present sample, peak[outputs], where the input is zero from there on at
   once (with RAMPWISE_RESIDUAL's meaning in peak.h; instants count from sample 0 as ever). A sum of free
   vibrations has no closed form for its extremes: the motion is walked along, `samples` steps at most, and
   less where a bound tells that nothing later exceeds the peaks. later[outputs], where not NULL, becomes that
   bound: no later value is larger in size. Where it is at most min(high, -low), but for the rounding of both,
   the peak is that of all time; where it is not, as with undamped modes, whose sum comes near its bound at
   some far time, peak and bound enclose it. It is infinite where a mode drifts or grows. The bound of a mode
   is its energy, which never grows: sqrt(z^2 + z'^2/(k/m)), z its part of the output. The object goes on
   unchanged. With RAMPWISE_HOLD feed a zero first where the last sample is to act for its dt. Work: that of a
   run with peaks, and a look at the bounds every 256 steps. RAMPWISE_ERROR_MISSING, _QUANTITY. */
RAMPWISE_API int rampwise_modes_residual(rampwise_modes *modes, uint64_t samples, rampwise_peak *peak,
                                         double *later);

/* The object as bytes (state, sample and peaks; not the plan), and back into one made of the same plan, on
   any machine: the same bits go on. RAMPWISE_ERROR_MISSING, _MEMORY (fewer bytes than
   rampwise_modes_saved_size); _DAMAGED, _KIND, _EDITION; _DIFFERENT (another plan); a call that fails has
   changed nothing. */
RAMPWISE_API size_t rampwise_modes_saved_size(const rampwise_modes *modes);
RAMPWISE_API int rampwise_modes_save(const rampwise_modes *modes, void *bytes, size_t count);
RAMPWISE_API int rampwise_modes_resume(rampwise_modes *modes, const void *bytes, size_t count);

RAMPWISE_END

#endif
