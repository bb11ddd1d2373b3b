/* Newmark's method with constant average acceleration in a step (beta 1/4, gamma 1/2): N. M. Newmark, J. Eng.
   Mech. Div. ASCE 85(3), 67-94, 1959; from memory. Stable for any step, exact for none. */
#ifndef NEWMARK_H
#define NEWMARK_H

#include <stddef.h>
#include "rampwise.h"

/* What the load and the motion before give of the displacement after a step; 2/h and 4/h^2. */
typedef struct newmark {
    double of_p, of_u, of_v, of_a;
    double twice_rate, acceleration;
} newmark;

void newmark_make(newmark *x, const rampwise_system *sys, double h);

/* From rest under no load, over p[0] to p[n - 1]; displacements to u. */
void newmark_run(const newmark *x, size_t n, const double *p, double *u);

#endif
