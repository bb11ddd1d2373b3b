/* Peaks of sums of modes on their way through a segment: what modes_peaks.c and equipment_peaks.c share. */
#ifndef RAMPWISE_MODES_PEAKS_CORE_H
#define RAMPWISE_MODES_PEAKS_CORE_H

#include <math.h>
#include "modes_core.h"

typedef struct bound bound;

struct modes_peaks {
    rampwise_peak *peak; /* [outputs] */
    /* [outputs]: what must be exceeded: the peak after a segment's samples, then points in its steps too */
    double *floor_high, *floor_low;
    bound *bounds; /* [groups] */
    /* [groups][LANES][width]: of the excess over the ends of a step and of a part */
    double *step_weight, *part_weight;
    double *begin;                                   /* [groups][TILES][2][LANES] */
    double (*largest)[LANES];                        /* [TILES]: of the present group */
    double *excess_tile, *excess_step, *excess_part; /* [TILES][width], [TILE][width] and again */
    mode_tile *trace;                                /* [groups]: of a tile that is looked at */
    unsigned char *marked;                           /* [SEGMENT]: steps in which there may be a peak */
    /* of a step that is looked at: */
    unsigned char *wanted; /* [outputs]: bits: those that may have a peak, those that equipment asks for */
    size_t *which, *row;   /* [outputs]: these together, and where an output is among them */
    size_t count;          /* of them */
    double *points, *ends; /* [outputs][PARTS], where the parts begin; [outputs][PARTS + 1] */
    uint32_t *spans;       /* [outputs]: bits of those that may hold a peak */
    double *series;        /* [outputs][MODES_TERMS]: on a piece */
};

/* The energy bound of a free vibration whose second derivative has the bound 1. */
static inline double inverse_of(double stiffness, double damping)
{
    const double ratio = 0.5 * damping / sqrt(stiffness), inverse = ratio + sqrt(1 + ratio * ratio);
    return inverse * inverse / stiffness;
}

/* A value inside a step that the series there will find again, with other rounding: so floors stay a little
   behind. */
static inline void raise_floors(double value, double *high, double *low)
{
    const double margin = 0x1p-30 * fabs(value);
    *high = larger(value - margin, *high);
    *low = smaller(value + margin, *low);
}

/* Bits of wanted. */
enum { MAY_COUNT = 1, ASKED_FOR = 2 };

/* For equipment: an output that it needs in the step or span that is to be looked into. */
static inline void ask_for(rampwise_modes *m, size_t o)
{
    m->peaks->wanted[o] |= ASKED_FOR;
}

/* Of such an output, its values at the ends of the parts, [PARTS + 1], and its series on a piece. */
static inline const double *points_of(const rampwise_modes *m, size_t o)
{
    return m->peaks->ends + m->peaks->row[o] * (PARTS + 1);
}

static inline const double *series_of(const rampwise_modes *m, size_t o)
{
    return m->peaks->series + m->peaks->row[o] * MODES_TERMS;
}

/* How much an output can exceed its values at the ends of a step in tile t of a segment, of step i of the
   tile that is being looked at, or of a part of that. */
static inline double tile_excess(const rampwise_modes *m, size_t t, size_t o)
{
    return m->peaks->excess_tile[t * m->width + o];
}

static inline double step_excess(const rampwise_modes *m, size_t i, size_t o)
{
    return m->peaks->excess_step[i * m->width + o];
}

static inline double part_excess(const rampwise_modes *m, size_t i, size_t o)
{
    return m->peaks->excess_part[i * m->width + o];
}

#endif
