/* The response of one oscillator in quad precision, scanned densely: every step is cut into pieces of less
   than a quarter radian, each piece is held by a Taylor series, and every change of sign of the quantity's
   slope, or of the slope's slope, is looked into. Slow, and passes nothing by. */
#ifndef QUAD_RESPONSE_H
#define QUAD_RESPONSE_H

#include <stddef.h>
#include "rampwise.h"

typedef __float128 quad;

typedef struct quad_extreme {
    quad value, time; /* in steps after sample 0 */
    quad sharp;       /* |z''| dt^2 of an extreme inside a step, 0 at a sample */
} quad_extreme;

typedef struct quad_peaks {
    quad_extreme high, low;   /* the earliest of equal ones */
    quad next_high, next_low; /* the best of the others, further than a thousandth of a step away */
} quad_peaks;

/* From u0, v0 under p[0], over n - 1 steps; the quantity is one of peak.h. */
void quad_response(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p, int quantity,
                   quad_peaks *peaks);

/* The quantity at a time (in steps) of the same response. */
quad quad_value(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p, int quantity,
                quad time);

/* Energies of the same response at the samples, by their definitions: the products under the integrals are
   multiplied out. moved is the largest, over the four, of the sums of the sizes of all changes so far, the energy
   at the start being the first; moved_inside also counts what comes and goes inside the steps. frame is one of energy.h. */
typedef struct quad_energy {
    quad input, kinetic, strain, dissipated, moved, moved_inside;
} quad_energy;

void quad_energies(const rampwise_coeffs *c, int frame, double u0, double v0, size_t n, const double *p,
                   quad_energy *energy);

#endif
