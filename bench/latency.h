/* What one live sample takes, each timed by itself: flat out, and 1,000 a second as a sensor sends them, where
   caches and branch predictors have cooled down in between. */
#ifndef LATENCY_H
#define LATENCY_H

#include "case.h"

/* Seconds. 99.9 % of the samples took `most` or less. */
typedef struct latency_spread {
    double median, most, worst;
} latency_spread;

typedef struct latency_row {
    const char *id, *name;
    latency_spread flat, paced;
} latency_row;

enum { LATENCY_ROWS = 6 };

typedef struct latency {
    size_t flat, paced; /* samples; paced 0: not measured */
    latency_row row[LATENCY_ROWS];
} latency;

void latency_run(latency *l, const bench_case *in, size_t flat, size_t paced);

#endif
