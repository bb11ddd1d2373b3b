/* The coefficients of a step from the closed forms, in MPFR, with enough bits for what they lose. */
#ifndef EXACT_H
#define EXACT_H

#include <mpfr.h>
#include "rampwise.h"

enum { EXACT_COUNT = 10 }; /* in the order of the first ten members of rampwise_coeffs */
extern const char *const exact_names[EXACT_COUNT];

enum { EXACT_REGISTERS = 12 };

/* One oscillator over one step: made once, asked for several inputs. */
typedef struct exact_step {
    const rampwise_system *sys;
    mpfr_t x[EXACT_REGISTERS];
    mpfr_t value[EXACT_COUNT];
} exact_step;

/* With the bits that the closed forms need for this oscillator at dt, and 250 beyond. */
void exact_init(exact_step *e, const rampwise_system *sys, double dt);
void exact_clear(exact_step *e);

/* A, B, A', B' and both increments of a step of fraction * dt. */
void exact_free_motion(exact_step *e, double dt, double fraction);

/* Then C, D, C', D'. */
void exact_input(exact_step *e, int input, int between);

#endif
