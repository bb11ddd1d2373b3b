/* An acceleration: a row of the coefficients over {u, v, p, p - p_before}. */
#ifndef RAMPWISE_ROW_H
#define RAMPWISE_ROW_H

#include "rampwise/step.h"

/* The last entry is asked first: where the change does not count, it may overflow. */
static inline double row_value(const double row[4], const rampwise_state *s)
{
    const double change = row[3] != 0 ? row[3] * (s->p - s->p_before) : 0;
    return RAMPWISE_FMA(row[0], s->u, RAMPWISE_FMA(row[1], s->v, RAMPWISE_FMA(row[2], s->p, change)));
}

#endif
