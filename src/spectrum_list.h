/* What the everyday forms of spectra share: a record's kinds, and the list of oscillators under it. */
#ifndef RAMPWISE_SPECTRUM_LIST_H
#define RAMPWISE_SPECTRUM_LIST_H

#include <stddef.h>
#include "rampwise/coefficients.h"

typedef struct record_kind {
    size_t n;
    double dt;
    int input, quantity;
} record_kind;

int rampwise_record_kind_check_(const record_kind *r);

/* A stiff oscillator without limit, where the input allows one. */
int rampwise_record_is_stiff_(const record_kind *r, double omega);

/* The coefficients of one that is not. */
int rampwise_record_oscillator_(const record_kind *r, double omega, double zeta, rampwise_coeffs *c);

/* Before anything is written: stiff oscillators need a damping ratio too. */
int rampwise_record_list_check_(const record_kind *r, size_t n_osc, const double *omega, const double *zeta,
                                size_t *bad);

#endif
