/* A coefficient set against theta = w h: its largest error and its cost, ours beside the printed formulas. */
#ifndef THETA_H
#define THETA_H

#include <stddef.h>

enum { THETA_OURS, THETA_DOUBLE, THETA_SINGLE, THETA_MAKERS };

extern const char *const theta_makers[THETA_MAKERS];

/* A range of theta, a factor of 10^(1/6) wide: the largest error among all eight coefficients of `sets` sets
   with theta at random in it, in units of the coefficient's largest value over steps of length 0 to h; and
   nanoseconds a set. An error that is no number counts as infinite. */
typedef struct theta_point {
    double theta;
    double error[THETA_MAKERS], cost[THETA_MAKERS];
} theta_point;

enum { THETA_POINTS = 91 }; /* 1e-9 to 1e6 */

void theta_run(theta_point *point, size_t sets, size_t rounds);

#endif
