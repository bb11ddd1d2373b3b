/* Peaks of up to LANES oscillators: what the object of peaks.h has many of, and a spectrum one at a time. */
#ifndef RAMPWISE_PEAKS_GROUP_H
#define RAMPWISE_PEAKS_GROUP_H

#include "extremes.h"
#include "kernels/kernels.h"
#include "rampwise/evidence.h"

/* Samples of a stretch, whose greatest and least values the kernels keep; stretches of a segment, which is
   gone through twice: all at lane speed, then those stretches that may hold a peak. */
enum { STRETCH = 32, STRETCHES = 16, SEGMENT = STRETCH * STRETCHES };

/* A stretch that may hold the peak of one side, put aside until it must be looked at: most are soon outdone
   by so much that they never are. */
typedef struct candidate {
    double best, most; /* at its samples; what it can hold at most, with the excess between them */
    double u, v;       /* where it begins */
    double error_u, error_v;
    uint64_t sample;
    size_t n;              /* samples; 0 where there is no candidate */
    double p[STRETCH + 3]; /* p_before and p where it begins, its samples; for evidence one more ... */
    int ends_record;       /* ... but here */
} candidate;

typedef struct findings {
    rampwise_peak peak;
    rampwise_evidence evidence;
} findings;

typedef struct peaks_group {
    lane_block lanes, errors;   /* errors: under the input of evidence.h, where that is wanted */
    double excess[3][4][LANES]; /* extremes.h: constant, from_p, from_change, from_size */
    double row[3][LANES];
    rampwise_coeffs c[LANES];
    findings found[3][LANES];
    double floor_high[3][LANES],
        floor_low[3][LANES]; /* what counts must exceed: peaks and candidates so far */
    candidate high[3][LANES], low[3][LANES];
    unsigned char stopped[LANES];
    size_t count, quantity_count;
    int quantity[3];
    unsigned looked; /* bits of the kernel's quantities */
    int at_samples, with_evidence;
} peaks_group;

/* Where the input has come to. With evidence the oscillators stand one sample behind, at the last whose
   second difference d is known: `next` was fed and is still to be stepped to. */
typedef struct input_end {
    uint64_t sample; /* of p */
    double p_before, p, d;
    int is_behind;
    double next;
} input_end;

/* The input along one segment: samples p[0] to p[n - 1], and with evidence p[n]. */
typedef struct segment {
    input_end from;
    size_t n;
    const double *p;
    double largest_p[STRETCHES], largest_change[STRETCHES]; /* 0 where only samples are looked at */
    int with_evidence;
    double d[SEGMENT]; /* second differences (evidence.h), with evidence */
} segment;

void rampwise_group_make_(peaks_group *g, size_t count, const rampwise_coeffs *c, size_t quantity_count,
                          const int *quantity, unsigned flags);

/* States s, or rest under p0 where s is NULL, at sample 0. */
void rampwise_group_start_(peaks_group *g, const rampwise_state *s, double p0);

/* The next n samples of an input that has come to `end`, for groups made with the flags `looks`;
   p[n] is read with evidence. */
void rampwise_segment_make_(segment *along, const input_end *end, size_t n, const double *p, unsigned looks);

/* Moves *end to where the segment ends. */
void rampwise_segment_end_(const segment *along, input_end *end);

void rampwise_group_run_(const kernels *k, peaks_group *g, const segment *along);

/* Everything of one lane that cannot be made of what the object was made with. */
typedef struct group_lane {
    rampwise_coeffs c;
    double u, v, error_u, error_v;
    int stopped;
    findings found[3];
    candidate high[3], low[3];
} group_lane;

void rampwise_group_get_(const peaks_group *g, size_t lane, group_lane *x);

/* The other way, after rampwise_group_make_ with its coefficients. */
void rampwise_group_put_(peaks_group *g, size_t lane, const group_lane *x);

/* What rampwise_peaks_get answers for one lane, and what the evidence is; its ends are the caller's. */
findings rampwise_group_findings_(const kernels *k, const peaks_group *g, size_t lane, size_t q,
                                  unsigned flags, const input_end *end);

#endif
