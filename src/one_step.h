/* One oscillator over one step, without units: what coefficients and energies are made of. */
#ifndef RAMPWISE_ONE_STEP_H
#define RAMPWISE_ONE_STEP_H

#include "rampwise/system.h"
#include "scaled.h"

/* One oscillator and one step, without units: K = k h^2/m, S = c h/m. */
typedef struct step {
    scaled K, S, h, h_over_m, stiffness_h_over_m;
} step;

/* Displacements after the step, from rest, for a unit of initial velocity, of constant load and of
   a ramp from zero to one, in units of h, h^2/m and h^3/m. They satisfy g + S G1 + K G2 = 1. */
typedef struct response {
    twofold g, G1, G2;
} response;

/* For energies: displacements after the loads x^2/2, x^3/6 and x^4/24 from rest, x from 0 to 1, in units
   of h^2/m times the load; and the integrals over x of the squared velocity after a unit of initial velocity,
   under a unit of constant load and under a ramp from zero to one, in units of 1, (h/m)^2 and (h/m)^2. */
typedef struct integrals {
    twofold G3, G4, G5;
    twofold impulse, constant, ramp;
} integrals;

/* RAMPWISE_ERROR_STEP_LENGTH */
int rampwise_step_scale_(step *s, const rampwise_system *sys, double dt);

/* more may be NULL. RAMPWISE_ERROR_COEFFICIENT where the motion grows too large. */
int rampwise_step_response_(response *r, integrals *more, const step *s);

/* (K x + S y) unit, rounded once. */
static inline double rounded_pair(const step *s, twofold x, twofold y, scaled unit)
{
    const int exponent = s->K.exponent > s->S.exponent ? s->K.exponent : s->S.exponent;
    const scaled K = {s->K.value, s->K.exponent - exponent};
    const scaled S = {s->S.value, s->S.exponent - exponent};
    const twofold sum = twofold_add(twofold_multiply(beside_one(K), x), twofold_multiply(beside_one(S), y));
    return rounded((scaled){unit.value, unit.exponent + exponent}, sum);
}

#endif
