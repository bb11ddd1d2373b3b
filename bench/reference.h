/* The answer that all methods are measured against: coefficients from MPFR, rounded to numbers of 113 bits,
   and the recurrence in numbers of 113 bits. */
#ifndef REFERENCE_H
#define REFERENCE_H

#include "case.h"

/* Displacements of one oscillator at every sample, each as the sum of two doubles. */
typedef struct reference {
    double high[CASE_SAMPLES], low[CASE_SAMPLES];
} reference;

void reference_make(reference *r, const bench_case *in, size_t oscillator);

/* The largest error of u[0] to u[n - 1], in units of the largest displacement there. */
double reference_error(const reference *r, size_t n, const double *u);

#endif
