/* An acceleration: a row of the coefficients over {u, v, p, p - p_before}. */
#ifndef RAMPWISE_ROW_H
#define RAMPWISE_ROW_H

#include "precision.h"

/* The last entry is asked first: where the change does not count, it may overflow. */
static inline real row_value(const real row[4], const real_state *s)
{
    const real change = row[3] != 0 ? row[3] * (s->p - s->p_before) : 0;
    return REAL_FMA(row[0], s->u, REAL_FMA(row[1], s->v, REAL_FMA(row[2], s->p, change)));
}

#endif
