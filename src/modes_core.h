/* A structure's modes on their way through a record: what modes*.c and equipment*.c share. */
#ifndef RAMPWISE_MODES_CORE_H
#define RAMPWISE_MODES_CORE_H

#include <stdint.h>
#include "lanes.h"
#include "rampwise/modes.h"

/* Samples that all groups pass before the outputs are finished. */
enum { TILES = 16, SEGMENT = TILE * TILES };

/* Displacement and total acceleration: equipment has peaks of these. */
enum { LOOKED_AT = 2 };

/* Row 0 is the sample before a tile. */
typedef double states_tile[TILE + 1][LANES];

/* q'' = row[0] q + row[1] q' + row[2] load */
typedef struct mode_group {
    lane_block lanes;
    double row[3][LANES];
    _Alignas(LANE_ALIGNMENT) double begin[2][LANES]; /* q and q' where the segment began */
} mode_group;

/* One group over one tile: states at its samples, loads, and the sample before it in row 0 of each. */
typedef struct mode_tile {
    _Alignas(LANE_ALIGNMENT) states_tile u, v, p;
} mode_tile;

typedef struct modes_peaks modes_peaks;
typedef struct modes_parts modes_parts;
typedef struct equipment_core equipment_core;

struct rampwise_modes {
    const kernels *k;
    size_t modes, inputs, outputs, width, groups; /* width: outputs, to the next multiple of 8 */
    double dt;
    int between;
    uint64_t sample, plan; /* plan: a number made of all that the plan holds */
    mode_group *group;
    double *load;              /* [groups][inputs][LANES] */
    double *weight_u;          /* [groups][LANES][width] */
    double *weight_v;          /* the same, or NULL where all are zero */
    double *direct;            /* [inputs][width] */
    double *input;             /* [SEGMENT + 1][inputs]; row 0 is the present sample */
    double *output;            /* [SEGMENT + 1][width]; likewise */
    modes_peaks *peaks;        /* NULL where not wanted */
    modes_parts *parts;        /* likewise */
    equipment_core *equipment; /* NULL where there is none */
    char *kept;                /* room for all that moves, where peaks are wanted */
};

/* Bytes of all that moves, with so many pieces of equipment: in the order of modes_residual.c, which keeps
   it. */
static inline size_t kept_size(const rampwise_modes *m, size_t pieces)
{
    const size_t doubles = m->inputs + m->width + 2 * LANES * m->groups, peaks = sizeof(rampwise_peak);
    return sizeof m->sample + doubles * sizeof(double) + m->outputs * peaks +
           pieces * (2 * sizeof(double) + LOOKED_AT * peaks);
}

/* Memory handed out piece by piece, each aligned; counted only where begin is NULL. size is SIZE_MAX once it
   does not fit a size_t. */
typedef struct room {
    char *begin;
    size_t size;
} room;

void *rampwise_room_take_(room *r, size_t count, size_t each);

static inline size_t padded(size_t outputs)
{
    return (outputs + 7) & ~(size_t)7;
}

static inline size_t modes_in(const rampwise_modes *m, size_t g)
{
    return m->modes - g * LANES < LANES ? m->modes - g * LANES : LANES;
}

static inline double larger(double a, double b)
{
    return a > b ? a : b;
}

static inline double smaller(double a, double b)
{
    return a < b ? a : b;
}

/* One group over a tile from its lanes' states on; answers whether one is not finite any more. */
int rampwise_modes_tile_(const rampwise_modes *m, size_t g, lane_block *lanes, size_t n, const double *input,
                         mode_tile *tile);

/* modes_parts.c: a step in equal parts, where values are made; and in equal pieces, as many as power series
   need. A span is one part or one piece, whichever is longer. Only for peaks. */
enum { PARTS = 16, MODES_TERMS = 24 };
extern const double rampwise_modes_per_term_[MODES_TERMS]; /* 1/((n + 1)(n + 2)) */

/* Weighted sums over all modes: columns which[count] of on_u, [groups][LANES][width], and of on_v, which may
   be NULL. */
typedef struct chosen {
    size_t count;
    const size_t *which;
    size_t width;
    const double *on_u, *on_v;
} chosen;

void rampwise_modes_parts_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r);
int rampwise_modes_parts_fill_(rampwise_modes *m, const rampwise_modes_plan *plan);
/* The step between rows 0 and 1 of input[2][inputs], and then each group's states where it begins. */
void rampwise_modes_parts_begin_(rampwise_modes *m, const double *input);
void rampwise_modes_parts_group_(rampwise_modes *m, size_t g, const double *u, const double *v);
/* Inputs at the ends of the parts, [PARTS + 1][inputs]. */
const double *rampwise_modes_part_input_(const rampwise_modes *m);
/* Pieces of a step, and spans. */
size_t rampwise_modes_pieces_(const rampwise_modes *m);
size_t rampwise_modes_spans_(const rampwise_modes *m);
/* Sums where the parts begin are added to y[count][PARTS]. */
void rampwise_modes_at_parts_(const rampwise_modes *m, const chosen *c, double *y);
/* A span of the step; then the series of sums on its pieces, one after the other, added to
   y[count][MODES_TERMS]. */
void rampwise_modes_begin_span_(rampwise_modes *m, size_t span);
void rampwise_modes_series_(rampwise_modes *m, const chosen *c, double *y);

/* modes_curve.c: one value, or the extremes of a series on piece `piece` of a step of so many pieces, noted
   where they exceed the peak. */
void rampwise_modes_note_(rampwise_peak *peak, double value, uint64_t sample, double fraction);
void rampwise_modes_curve_(const double *series, uint64_t sample, size_t piece, size_t pieces,
                           rampwise_peak *peak);

/* modes_peaks.c */
void rampwise_modes_peaks_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r);
int rampwise_modes_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan);
void rampwise_modes_peaks_start_(rampwise_modes *m);
/* Bounds of tile t of a segment. */
void rampwise_modes_peaks_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, mode_tile *tile);
/* After the bounds of all tiles of one group. */
void rampwise_modes_peaks_group_(rampwise_modes *m, size_t g, size_t tiles);
/* After a segment of n samples without a fault. */
void rampwise_modes_peaks_segment_(rampwise_modes *m, size_t n);
rampwise_peak *rampwise_modes_peak_(const rampwise_modes *m);

/* equipment.c and equipment_peaks.c: as the functions above; only where there is equipment */
void rampwise_equipment_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r);
int rampwise_equipment_check_(const rampwise_modes_plan *plan);
int rampwise_equipment_fill_(rampwise_modes *m, const rampwise_modes_plan *plan);
void rampwise_equipment_start_(rampwise_modes *m);
/* Along a segment of n samples: before its modes, a tile of them, after them (whether something is not finite
   any more), and back to where it began. */
void rampwise_equipment_begin_(rampwise_modes *m, size_t n);
void rampwise_equipment_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, mode_tile *tile);
int rampwise_equipment_end_(rampwise_modes *m, size_t n);
void rampwise_equipment_go_back_(rampwise_modes *m);
/* Peaks of a segment: bounds by a group's tiles, largest[tiles][LANES] of q'', or by the steps of a tile that
   is looked at; the samples; whether something may exceed them in a tile, and in the step after k; in which
   spans of it, as bits; what is asked for in such a span, and curves on a piece of it. */
void rampwise_equipment_bound_group_(rampwise_modes *m, size_t g, size_t tiles, const double *largest);
void rampwise_equipment_bound_steps_(rampwise_modes *m, size_t g, size_t n, const double *largest);
void rampwise_equipment_note_(rampwise_modes *m, size_t n);
int rampwise_equipment_may_count_(const rampwise_modes *m, size_t t, size_t n);
int rampwise_equipment_want_(rampwise_modes *m, size_t k);
uint32_t rampwise_equipment_spans_(rampwise_modes *m, size_t k);
void rampwise_equipment_begin_span_(rampwise_modes *m, size_t k, size_t span);
void rampwise_equipment_look_(rampwise_modes *m, size_t k, size_t span, size_t piece);
void rampwise_equipment_put_(const rampwise_modes *m, size_t n, const rampwise_history *out);
size_t rampwise_equipment_count_(const rampwise_modes *m);
double *rampwise_equipment_state_(const rampwise_modes *m, size_t i, int velocity);
rampwise_peak *rampwise_equipment_peak_(const rampwise_modes *m, size_t i, int q);

/* modes.c: what a plan can be refused for, but for memory. */
int rampwise_modes_check_(const rampwise_modes_plan *plan);

/* The base comes to rest, or the forces go, at once: outputs begin with the free motion. */
void rampwise_modes_release_(rampwise_modes *m);

/* n <= SEGMENT samples without input; 0 where something would not be finite any more: nothing has changed. */
int rampwise_modes_go_on_(rampwise_modes *m, size_t n);

#endif
