/* Outlines of up to LANES oscillators under two inputs: what the object of directions.h has many of, and the
   everyday form one at a time. */
#ifndef RAMPWISE_DIRECTIONS_GROUP_H
#define RAMPWISE_DIRECTIONS_GROUP_H

#include "extremes.h"
#include "kernels/kernels.h"
#include "outline.h"

/* Halvings of a short piece (extremes.h) that are kept: 4^-16 of a curve's height is far below the slack. */
enum { PARTS = 17 };

/* Samples of a stretch, of which the kernels keep the farthest; stretches of a lane that are put aside until
   they must be looked at: most are outdone before that. */
enum { SPAN = 16, WAITING = 128 };

typedef struct waiting_stretch {
    double u[2], v[2]; /* where it begins */
    point end;
    double largest;  /* of the ellipse's sum of squares */
    size_t first, n; /* its samples, counted from the first of this run */
} waiting_stretch;

typedef struct directions_lane {
    outline outline;
    ellipse inside;      /* the outline */
    size_t changes;      /* of the outline, when the ellipse was last inscribed */
    size_t made, looked; /* stretches before the ellipse was made; samples looked at since it was inscribed */
    double excess[2]
                 [4]; /* extremes.h, of a step and of a stretch: constant, from_p, from_change, from_size */
    rampwise_coeffs c;
    extremes x;
    rampwise_coeffs part[PARTS]; /* of a short piece's length over 2^i */
    int parts, stopped;          /* parts that are made already */
    size_t waiting;
    waiting_stretch stretch[WAITING];
} directions_lane;

typedef struct directions_group {
    lane_block first, second;
    double form[4][LANES]; /* of the ellipses */
    double row[3][LANES];
    directions_lane lane[LANES];
    double limit[LANES];     /* the sizes squared; -1 where samples do not tell enough */
    size_t count, stretches; /* stretches so far */
    int at_samples;
    double slack, ellipse_slack; /* of the outlines in the end; of the ellipses */
} directions_group;

/* Two inputs at once; p_before and p_last are the samples before p[0]. */
typedef struct two_inputs {
    double p_before[2], p_last[2];
    const double *p[2];
} two_inputs;

/* Outlines that grow; an object gives them memory afterwards. */
void rampwise_directions_group_make_(directions_group *g, size_t count, const rampwise_coeffs *c,
                                     int quantity, int at_samples);

/* All at rest under p0, with empty outlines. */
int rampwise_directions_group_start_(directions_group *g, const double p0[2]);

/* The next n samples. RAMPWISE_ERROR_MEMORY where an outline cannot grow. */
int rampwise_directions_group_run_(const kernels *k, directions_group *g, size_t n, const two_inputs *in);

#endif
