/* Light equipment on a structure: what equipment*.c share. */
#ifndef RAMPWISE_EQUIPMENT_CORE_H
#define RAMPWISE_EQUIPMENT_CORE_H

#include "modes_core.h"
#include "twofold.h"

typedef struct equipment_peaks equipment_peaks;

/* What steps of one length make of the motion where they begin. */
typedef struct equipment_steps {
    rampwise_coeffs *c;             /* [count]: under base acceleration */
    double *from_u, *from_v;        /* [groups][LANES][2][width]: from the modes */
    double *from_before, *from_now; /* [inputs][2][width]: from the inputs at the two ends of a step */
} equipment_steps;

struct equipment_core {
    size_t count, width; /* width: count, to the next multiple of 8 */
    size_t *point;
    equipment_steps steps;
    double *own;                       /* [4][width]: A - 1, B, A', B' - 1 */
    double *u, *v, *u_begin, *v_begin; /* [width]; where the segment began */
    double *gain;                      /* [SEGMENT][2][width]; then the states after the steps */
    twofold *sums;                     /* [inputs][4]: while they are being made */
    equipment_peaks *peaks;            /* NULL where not wanted */
};

static inline double total_of(const rampwise_coeffs *c, double u, double v)
{
    return RAMPWISE_FMA(c->total[0], u, c->total[1] * v);
}

/* Displacement and velocity of piece i after k steps of the segment. */
static inline void state_at(const equipment_core *e, size_t i, size_t k, double *u, double *v)
{
    const double *const row = e->gain + 2 * (k - 1) * e->width;
    *u = k > 0 ? row[i] : e->u_begin[i];
    *v = k > 0 ? row[e->width + i] : e->v_begin[i];
}

/* equipment_steps.c: steps of length dt, their memory, and what piece i needs of the plan. */
void rampwise_equipment_steps_take_(const rampwise_modes *m, equipment_steps *steps, size_t count, room *r);
int rampwise_equipment_steps_fill_(rampwise_modes *m, const rampwise_modes_plan *plan, equipment_steps *steps,
                                   double dt, size_t i);

/* equipment_peaks.c; only where peaks are wanted */
equipment_peaks *rampwise_equipment_peaks_take_(const rampwise_modes *m, size_t count, room *r);
int rampwise_equipment_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i);
void rampwise_equipment_peaks_start_(rampwise_modes *m);

#endif
