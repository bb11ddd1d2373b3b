/* Peaks of up to LANES oscillators: what the object of peaks.h has many of, and a spectrum one at a time. */
#ifndef RAMPWISE_PEAKS_GROUP_H
#define RAMPWISE_PEAKS_GROUP_H

#include "extremes.h"
#include "kernels/kernels.h"

/* Samples of a stretch, whose greatest and least values the kernels keep; stretches of a segment, which is gone
   through twice: all at lane speed, then those stretches that may hold a peak. */
enum { STRETCH = 32, STRETCHES = 16, SEGMENT = STRETCH * STRETCHES };

/* A stretch that may hold the peak of one side, put aside until it must be looked at: most are soon outdone by
   so much that they never are. */
typedef struct candidate {
    double best, most; /* at its samples; what it can hold at most, with the excess between them */
    double u, v;       /* where it begins */
    uint64_t sample;
    size_t n;              /* samples; 0 where there is no candidate */
    double p[STRETCH + 2]; /* p_before and p where it begins, then its samples */
} candidate;

typedef struct peaks_group {
    lane_block lanes;
    double excess[3][4][LANES]; /* extremes.h: constant, from_p, from_change, from_size */
    double row[3][LANES];
    rampwise_coeffs c[LANES];
    rampwise_peak peak[3][LANES];
    double floor_high[3][LANES],
        floor_low[3][LANES]; /* what counts must exceed: peaks and candidates so far */
    candidate high[3][LANES], low[3][LANES];
    unsigned char stopped[LANES];
    size_t count, quantity_count;
    int quantity[3];
    unsigned looked; /* bits of the kernel's quantities */
    int at_samples;
} peaks_group;

/* The input along one segment. */
typedef struct segment {
    uint64_t sample; /* of p_last */
    size_t n;
    double p_before, p_last;
    const double *p;
    double largest_p[STRETCHES], largest_change[STRETCHES];
} segment;

void rampwise_group_make_(peaks_group *g, size_t count, const rampwise_coeffs *c, size_t quantity_count,
                          const int *quantity, unsigned flags);

/* States s, or rest under p0 where s is NULL, at sample 0. */
void rampwise_group_start_(peaks_group *g, const rampwise_state *s, double p0);

void rampwise_segment_make_(segment *along, uint64_t sample, double p_before, double p_last, size_t n,
                            const double *p);

void rampwise_group_run_(const kernels *k, peaks_group *g, const segment *along);

/* Everything of one lane that cannot be made of what the object was made with. */
typedef struct group_lane {
    rampwise_coeffs c;
    double u, v;
    int stopped;
    rampwise_peak peak[3];
    candidate high[3], low[3];
} group_lane;

void rampwise_group_get_(const peaks_group *g, size_t lane, group_lane *x);

/* The other way, after rampwise_group_make_ with its coefficients. */
void rampwise_group_put_(peaks_group *g, size_t lane, const group_lane *x);

/* The peak of one lane as rampwise_peaks_get answers it. */
rampwise_peak rampwise_group_peak_(const kernels *k, const peaks_group *g, size_t lane, size_t q,
                                   unsigned flags, double p_before, double p, uint64_t sample);

#endif
