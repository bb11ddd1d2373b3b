/* Up to LANES oscillators side by side, each under its own input: the transposition between what
   callers hold and what the kernels step. */
#ifndef RAMPWISE_LANES_H
#define RAMPWISE_LANES_H

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

/* The oscillator of one lane of a block, and one that stands still for ever. */
void rampwise_lane_set_(lane_block *block, size_t lane, const rampwise_coeffs *c);
void rampwise_lane_still_(lane_block *block, size_t lane);

/* The next n samples of `count` lanes, oscillators *c[j] with states s[j]: as rampwise_run on each.
   Lane j stops before sample reached[j] where that overflows, else reached[j] = n. Samples lie in p
   and outputs in out as told; an output may be p itself where the layouts are equal. */
void rampwise_lanes_run_(const kernels *k, size_t count, const rampwise_coeffs *const *c, rampwise_state *s,
                         size_t n, const double *p, layout in, const rampwise_history *out, layout to,
                         size_t *reached);

#endif
