/* Random cases from GSL's generator. Each test that uses it prints its seed; RAMPWISE_SEED in the
   environment repeats one. */
#ifndef RANDOM_H
#define RANDOM_H

#include <gsl/gsl_rng.h>

gsl_rng *random_make(const char *test); /* prints the seed; free with gsl_rng_free */
double random_between(gsl_rng *r, double low, double high);
double random_log(gsl_rng *r, double low, double high); /* evenly spread logarithm */
double random_sign(gsl_rng *r);
void random_fill(gsl_rng *r, double *x, size_t n); /* in [-1, 1) */

/* A record in [-1, 1) with a pause of exact zeros from a third to a half, so that silence is met. */
void random_record(gsl_rng *r, double *p, int n);

/* Samples around the limit of silence, 2^-900, zeros among them. */
void random_whisper(gsl_rng *r, double *x, size_t n);

#endif
