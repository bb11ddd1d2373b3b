/* Up to LANES oscillators side by side, each under its own input: the transposition between what
   callers hold and what the kernels step. */
#ifndef RAMPWISE_LANES_H
#define RAMPWISE_LANES_H

#include <string.h>
#include "kernels/kernels.h"

/* Objects of many oscillators are a header and groups of LANES after it. */
static inline size_t lane_groups(size_t n)
{
    return n / LANES + (n % LANES != 0);
}

/* The bytes that takes; 0 where n is 0 or they are too many. Sizes are multiples of LANE_ALIGNMENT. */
static inline size_t lane_groups_size(size_t n, size_t header, size_t group)
{
    if (n == 0 || lane_groups(n) > (SIZE_MAX - header) / group)
        return 0;
    return header + lane_groups(n) * group;
}

/* Where value i of lane j is: at j lane + i sample, from the first lane's first value. */
typedef struct layout {
    size_t lane, sample;
} layout;

/* The displacement and velocity of one lane, under an input, and back. */
static inline real_state lane_state(const lane_block *block, size_t lane, real p, real p_before)
{
    real_state s = {.u = block->u[lane], .v = block->v[lane], .p = p, .p_before = p_before};
#ifdef SINGLE_PRECISION
    s.u_low = block->u_low[lane];
    s.v_low = block->v_low[lane];
#endif
    return s;
}

static inline void lane_put(lane_block *block, size_t lane, const real_state *s)
{
    block->u[lane] = s->u;
    block->v[lane] = s->v;
#ifdef SINGLE_PRECISION
    block->u_low[lane] = s->u_low;
    block->v_low[lane] = s->v_low;
#endif
}

/* The displacements and velocities of all lanes, and nothing else, from another block. */
static inline void lanes_copy_motion(lane_block *to, const lane_block *from)
{
    memcpy(to, from, offsetof(lane_block, A_minus_1));
}

/* The oscillator of one lane of a block, and one that stands still for ever. */
void PRIVATE(lane_set)(lane_block *block, size_t lane, const real_coeffs *c);
void PRIVATE(lane_still)(lane_block *block, size_t lane);

/* The next n samples of `count` lanes, oscillators *c[j] with states s[j]: as rampwise_run on each.
   Lane j stops before sample reached[j] where that overflows, else reached[j] = n. Samples lie in p
   and outputs in out as told; an output may be p itself where the layouts are equal. */
void PRIVATE(lanes_run)(const kernels *k, size_t count, const real_coeffs *const *c, real_state *s, size_t n,
                        const real *p, layout in, const real_history *out, layout to, size_t *reached);

#endif
