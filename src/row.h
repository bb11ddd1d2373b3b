/* An acceleration: a row of the coefficients over {u, v, p, p - p_before}. */
#ifndef RAMPWISE_ROW_H
#define RAMPWISE_ROW_H

#include "precision.h"

/* The last entry is asked first: where the change does not count, it may overflow. */
static inline real row_over(const real row[4], real u, real v, real p, real change)
{
    const real last = row[3] != 0 ? row[3] * change : 0;
    return REAL_FMA(row[0], u, REAL_FMA(row[1], v, REAL_FMA(row[2], p, last)));
}

static inline real row_value(const real row[4], const real_state *s)
{
    return row_over(row, s->u, s->v, s->p, s->p - s->p_before);
}

#endif
