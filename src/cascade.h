/* A light oscillator on a mode: what the mode's motion inside one step does to it. */
#ifndef RAMPWISE_CASCADE_H
#define RAMPWISE_CASCADE_H

#include "rampwise/coefficients.h"

/* Rows over {q, q', load, next load} of the mode at the step's two ends: what they add to the displacement
   and the velocity of the light one. */
typedef struct cascade {
    double displacement[4], velocity[4];
} cascade;

/* The light oscillator x'' + (c/m) x' + (k/m) x = -(on_u q + on_v q') on the mode of coefficients c, over
   c->dt. RAMPWISE_ERROR_STEP_LENGTH, _COEFFICIENT. */
int rampwise_cascade_make_(cascade *made, const rampwise_coeffs *c, const rampwise_system *light, double on_u,
                           double on_v);

#endif
