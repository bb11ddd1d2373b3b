/* One entry of a record: the state at a sample into the outputs. */
#ifndef RAMPWISE_ENTRY_H
#define RAMPWISE_ENTRY_H

#include <math.h>
#include "row.h"

/* The state at a sample into entry i of the outputs; 0 and nothing written where it overflows. */
static inline int put_state(const real_coeffs *c, const real_state *s, const real_history *out, size_t i)
{
    const real a = out->a != NULL ? row_value(c->acceleration, s) : 0;
    const real total = out->total != NULL ? row_value(c->total, s) : 0;
    if (__builtin_expect(!isfinite(s->u) || !isfinite(s->v) || !isfinite(a) || !isfinite(total), 0))
        return 0;
    if (out->u != NULL)
        out->u[i] = s->u;
    if (out->v != NULL)
        out->v[i] = s->v;
    if (out->a != NULL)
        out->a[i] = a;
    if (out->total != NULL)
        out->total[i] = total;
    return 1;
}

/* The outputs that a caller wants, from place `place` of each on; NULL wants nothing. */
static inline real_history wanted_from(const real_history *out, size_t place)
{
    const real_history nothing = {NULL, NULL, NULL, NULL};
    if (out == NULL)
        return nothing;
    return (real_history){out->u != NULL ? out->u + place : NULL, out->v != NULL ? out->v + place : NULL,
                          out->a != NULL ? out->a + place : NULL,
                          out->total != NULL ? out->total + place : NULL};
}

#endif
