/* The loops that all time is spent in, compiled once an instruction set from one body.

   Lanes. Many oscillators are stepped side by side, one a lane; lanes never mix. A block holds
   LANES of them, member by member, whatever the instruction set, so that an object looks the same
   to all. */
#ifndef RAMPWISE_KERNELS_H
#define RAMPWISE_KERNELS_H

#include <stddef.h>
#include "rampwise/instructions.h"
#include "rampwise/record.h"

enum { LANES = 32, TILE = 16, LANE_ALIGNMENT = 64 };

typedef struct lane_block {
    _Alignas(LANE_ALIGNMENT) double u[LANES];
    double v[LANES];
    double A_minus_1[LANES], B[LANES], C[LANES], D[LANES];
    double Ap[LANES], Bp_minus_1[LANES], Cp[LANES], Dp[LANES];
} lane_block;

/* Consecutive samples of LANES lanes. */
typedef double lane_tile[TILE][LANES];

typedef struct kernels {
    int name; /* RAMPWISE_BASELINE and so on */

    /* The first of n values that is not finite, or n. */
    size_t (*first_not_finite)(size_t n, const double *x);

    /* One oscillator: entries first, first + stride, ... below end, into the outputs; stops before
       the entry that overflows and returns it, or end. */
    size_t (*advance)(const rampwise_coeffs *c, rampwise_state *s, size_t first, size_t end, size_t stride,
                      const double *p, const rampwise_history *out);

    /* The first `lanes` lanes under one input, from p_last through p[0] to p[n - 1]. Where largest
       is not NULL it gathers the largest |u| of each. Answers whether a lane is not finite any
       more. */
    int (*under_one_input)(lane_block *block, size_t lanes, double p_last, size_t n, const double *p,
                           double *largest);

    /* Each lane under its own input, p[1] to p[n], n <= TILE; p[0] is the sample before. The states
       after each sample go to u and v. */
    void (*under_own_inputs)(lane_block *block, size_t lanes, size_t n, double (*p)[LANES], lane_tile u,
                             lane_tile v);

    /* Each lane's row of the coefficients (row.h) over such a tile. `finite` becomes 0 in lanes
       whose values are all finite, NaN in others. */
    void (*rows)(double (*row)[LANES], size_t lanes, size_t n, double (*p)[LANES], lane_tile u, lane_tile v,
                 lane_tile out, double *finite);

    /* `count` arrays of n <= TILE values, `stride` apart, into the columns of a tile, and back. */
    void (*gather)(const double *from, size_t stride, size_t count, size_t n, double (*tile)[LANES]);
    void (*scatter)(double *to, size_t stride, size_t count, size_t n, double (*tile)[LANES]);
} kernels;

/* Those that are asked for, or with RAMPWISE_FASTEST the best this processor has; NULL where it
   cannot run them or they were not built. */
const kernels *rampwise_kernels_(int name);

#endif
