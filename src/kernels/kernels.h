/* The loops that all time is spent in, compiled once an instruction set from one body.

   Lanes. Many oscillators are stepped side by side, one a lane; lanes never mix. A block holds
   LANES of them, member by member, whatever the instruction set, so that an object looks the same
   to all. */
#ifndef RAMPWISE_KERNELS_H
#define RAMPWISE_KERNELS_H

#include <stddef.h>
#include <stdint.h>
#include "rampwise/instructions.h"
#include "../precision.h"

enum { LANES = 32, TILE = 16, LANE_ALIGNMENT = 64 };

typedef struct lane_block {
    _Alignas(LANE_ALIGNMENT) real u[LANES];
    real v[LANES];
#ifdef SINGLE_PRECISION
    real u_low[LANES], v_low[LANES];
#endif
    real A_minus_1[LANES], B[LANES], C[LANES], D[LANES];
    real Ap[LANES], Bp_minus_1[LANES], Cp[LANES], Dp[LANES];
} lane_block;

/* Consecutive samples of LANES lanes. */
typedef real lane_tile[TILE][LANES];

#ifndef SINGLE_PRECISION
struct energy_sums;    /* energy_steps.h */
struct rampwise_meter; /* rampwise/energy.h */
struct rampwise_energy;
#endif

typedef struct kernels {
    int name; /* RAMPWISE_BASELINE and so on */

    /* The first of n values that is not finite, or n. */
    size_t (*first_not_finite)(size_t n, const real *x);

    /* One oscillator: entries first, first + stride, ... below end, into the outputs; stops before
       the entry that overflows and returns it, or end. */
    size_t (*advance)(const real_coeffs *c, real_state *s, size_t first, size_t end, size_t stride,
                      const real *p, const real_history *out);

    /* The first `lanes` lanes under one input, from p_last through p[0] to p[n - 1]. Where largest
       is not NULL it gathers the largest |u| of each. Answers whether a lane is not finite any
       more. */
    int (*under_one_input)(lane_block *block, size_t lanes, real p_last, size_t n, const real *p,
                           real *largest);

#ifndef SINGLE_PRECISION /* which has neither peaks between samples nor structures */
    /* As under_one_input, gathering for each quantity that is looked at (bit 0 u, 1 v, 2 the row over
       {u, v, p}) the greatest and least of the stretch's samples, the one it begins with among them. */
    int (*stretch)(lane_block *block, size_t lanes, unsigned looked, real (*row)[LANES], real p_last,
                   size_t n, const real *p, real (*high)[LANES], real (*low)[LANES]);

    /* Which lanes of which of `count` stretches may exceed a floor, and what the samples of the other
       stretches reach, at or between their samples, with the excess of extremes.h: flags[2 i] has a
       bit a lane for the high side of stretch i, flags[2 i + 1] for the low one. high and low of
       stretch i are at i stride. */
    void (*may_exceed)(size_t lanes, size_t count, const real *high, const real *low, size_t stride,
                       const real *floor_high, const real *floor_low, real (*excess)[LANES],
                       const real *largest_p, const real *largest_change, uint32_t *flags);

    /* The first `lanes` lanes under two inputs apart, states in two blocks, oscillators in the first: from
       p_last through p[0] to p[n - 1] of each. With x and y the quantity (0 u, 1 v, 2 the row over {u, v, p})
       under either input, largest becomes the largest (form[0] x + form[1] y)^2 + (form[2] x + form[3] y)^2
       of the samples, the one it begins with among them. Answers whether a lane is not finite any more. */
    int (*under_two_inputs)(lane_block *first, lane_block *second, size_t lanes, int quantity,
                            double (*row)[LANES], double (*form)[LANES], const double *p_last, size_t n,
                            const double *const *p, double *largest);

    /* y[i][o] += sum of x[i][k] weight[k][o] for i < n, k < count, o < width, where rows of x are `stride`
       apart and rows of y and weight `width`, a multiple of 8: y = fma(x, weight, y), k = 0 first. */
    void (*accumulate)(size_t count, size_t n, const double *x, size_t stride, const double *weight,
                       size_t width, double *y);

    /* For each of n <= TILE steps of a tile (row i to row i + 1), growth sqrt(z^2 + (per_slope z')^2)
       or a little more, z = row over {u, v, p} where the step begins and z' its slope, the load
       changing by per_step (p - p_before). */
    void (*free_motion_bounds)(size_t lanes, size_t n, double (*row)[LANES], double per_step,
                               double (*p)[LANES], double (*u)[LANES], double (*v)[LANES],
                               const double *growth, const double *per_slope, double (*most)[LANES]);

    /* Oscillators of `width` lanes (a multiple of 8) over n samples: gain[2 i] and gain[2 i + 1], rows of
       `width`, are what each step adds to u and v beside their own motion, own[0] to own[3] of `width`
       (A - 1, B, A', B' - 1); they become the states after the step. */
    void (*under_gains)(size_t width, size_t n, const double *own, double *u, double *v, double *gain);

    /* One oscillator and its energies (energy_steps.h) after each of n samples; stops before the one that
       overflows and answers how many went by. */
    size_t (*energies)(const struct rampwise_meter *meter, rampwise_state *s, struct energy_sums *so_far,
                       size_t n, const double *p, struct rampwise_energy *energy);
#endif

    /* Each lane under its own input, p[1] to p[n], n <= TILE; p[0] is the sample before. The states
       after each sample go to u and v. Answers whether a lane is not finite any more. */
    int (*under_own_inputs)(lane_block *block, size_t lanes, size_t n, real (*p)[LANES], lane_tile u,
                            lane_tile v);

    /* Each lane's row of the coefficients (row.h) over such a tile. `finite` becomes 0 in lanes
       whose values are all finite, NaN in others, and it answers whether there are others. */
    int (*rows)(real (*row)[LANES], size_t lanes, size_t n, real (*p)[LANES], lane_tile u, lane_tile v,
                lane_tile out, real *finite);

    /* `count` arrays of n <= TILE values, `stride` apart, into the columns of a tile, and back. */
    void (*gather)(const real *from, size_t stride, size_t count, size_t n, real (*tile)[LANES]);
    void (*scatter)(real *to, size_t stride, size_t count, size_t n, real (*tile)[LANES]);
} kernels;

/* Those that are asked for, or with RAMPWISE_FASTEST the best this processor has; NULL where it
   cannot run them or they were not built. */
const kernels *PRIVATE(kernels)(int name);

#endif
