/* What all methods are given: one synthetic record, and oscillators of unit mass under it.

   The load is zero before the first sample, rises to it over one interval, and is a straight line from sample
   to sample: every sample is the end of one step. */
#ifndef CASE_H
#define CASE_H

#include <stddef.h>
#include "rampwise.h"

enum {
    CASE_SAMPLES = 20000,
    CASE_OSCILLATORS = 1000,
    CASE_FEW = 8,        /* oscillators of the slow methods, spread evenly over the others */
    CASE_STRETCH = 2000, /* samples of the slow methods, the first ones */
    CASE_SEED = 20
};

#define CASE_DT 0.005
#define CASE_ZETA 0.05
#define CASE_SHORTEST 0.02
#define CASE_LONGEST 10.0

typedef struct bench_case {
    double p[CASE_SAMPLES];
    rampwise_system sys[CASE_OSCILLATORS];
    rampwise_coeffs c[CASE_OSCILLATORS];
    size_t stretch; /* samples of the slow methods in this run, CASE_STRETCH or fewer */
} bench_case;

void case_make(bench_case *in, size_t stretch);

/* White noise instead of the record, p[CASE_SAMPLES]: no sample knows of the one before. */
void case_white(double *p);

/* Number k of `count` oscillators spread evenly over all, both ends among them. */
size_t case_spread(size_t k, size_t count);

/* Zeroed memory, or the end of the program; for what lives as long as the program. */
void *case_memory(size_t bytes);

#endif
