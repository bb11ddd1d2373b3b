/* site_spectrum: what a shake does to every oscillator of a range of periods and damping ratios. */
#ifndef SITE_SPECTRUM_H
#define SITE_SPECTRUM_H

#include <stddef.h>
#include <rampwise.h>
#include "site_data.h"

enum { MOST_DAMPINGS = 8 };

/* What is looked at in each oscillator. */
enum {
    LOOK_DISPLACEMENT, /* this and the next with evidence of what the sampling has cost */
    LOOK_ACCELERATION, /* against a fixed frame */
    LOOKS_WITH_EVIDENCE,
    LOOK_DISPLACEMENT_AT_SAMPLES = LOOKS_WITH_EVIDENCE,
    LOOK_ACCELERATION_AT_SAMPLES,
    LOOK_DISPLACEMENT_AFTER, /* the record has ended and the base stays */
    LOOKS
};

/* Oscillators stand damping by damping: that of damping[d] and period[i] is d * n_periods + i. */
typedef struct site_spectrum {
    size_t n_dampings, n_periods;
    double damping[MOST_DAMPINGS]; /* per cent of critical */
    double from, to;               /* s */
    double *period;                /* s, [n_periods] from here on, equal ratios from `from` to `to` */
    double *omega, *zeta;          /* rad/s and 1, [n_dampings * n_periods] */
    rampwise_peak *peak[LOOKS];
    rampwise_evidence *evidence[LOOKS_WITH_EVIDENCE];
} site_spectrum;

/* Fills what the first two lines of the struct ask for, on this many threads (0: one a processor).
   0, or -1 after a message; site_spectrum_free frees it in both cases. */
int site_spectrum_solve(site_spectrum *spectrum, const site_record *record, int threads);
void site_spectrum_free(site_spectrum *spectrum);

/* The size of one peak, in m or m/s^2. */
double site_spectrum_size(const site_spectrum *spectrum, int look, size_t d, size_t i);

/* The same less the estimated error of the sampling. */
double site_spectrum_corrected(const site_spectrum *spectrum, int look, size_t d, size_t i);

/* A dozen periods as a table, and what to know about it, on standard output. */
void site_spectrum_print(const site_spectrum *spectrum, const site_record *record);

/* All periods as CSV: 0, or -1 after a message and with nothing written. */
int site_spectrum_write(const char *path, const site_record *record, const site_spectrum *spectrum);

#endif
