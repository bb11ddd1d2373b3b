/* Oscillators of every damping regime, for tests that go through all inputs and kinds. */
#ifndef OSCILLATORS_H
#define OSCILLATORS_H

#include "rampwise.h"
#include "random.h"

enum { KINDS = 7, REGIMES = 9 };

/* Every allowed pair of input and between; the last only without a damper. */
extern const int kinds[KINDS][2];

/* Undamped, lightly, strongly, critically and over-damped, free mass, mass on a damper, negative
   stiffness, negative damper; about theta radians a step of dt. */
rampwise_system regime_system(int regime, double theta, double dt);

/* Coefficients for kind `kind`, which the test fails without. */
rampwise_coeffs made(rampwise_system sys, double dt, int kind);

/* Whether the kind is allowed for the system. */
int kind_allowed(const rampwise_system *sys, int kind);

/* Every set of instructions there is, and whether this processor runs it. Built with
   RAMPWISE_ALL_INSTRUCTIONS, a set that its platform should have must run. */
enum { SETS = 4 };
extern const int sets[SETS];
int runs_here(int set);

#endif
