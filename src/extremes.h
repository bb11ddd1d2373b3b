/* The extremes of one quantity of one oscillator inside one step. */
#ifndef RAMPWISE_EXTREMES_H
#define RAMPWISE_EXTREMES_H

#include "rampwise/coefficients.h"
#include "rampwise/peak.h"
#include "rampwise/step.h"

/* Relative motion y'' + damping y' + stiffness y = f, f on a line, with the quantity z one of y, y' and
   y'' - (the base's part). */
typedef struct extremes {
    const rampwise_coeffs *c;
    int quantity;
    int jumps;   /* z jumps at samples */
    int sampled; /* the kernels' values at the samples are z, and it does not jump there */
    int oscillates;
    int halvings;                /* until a piece is short: |S| and |K| up to 1 */
    double damping, stiffness;   /* per mass */
    rampwise_coeffs piece, leap; /* a short piece; the way to the last pieces of a long step */
    size_t pieces;               /* looked at from either end; all of them where leap is not made */
    /* Bound of the excess over the samples: constant + from_p max|p| + from_change max|p - p_before|
       + from_size max|z|; constant is infinite where there is none. */
    double constant, from_p, from_change, from_size;
} extremes;

/* The bounds and what else needs no coefficients: enough for values at samples. */
void rampwise_extremes_bound_(extremes *x, const rampwise_coeffs *c, int quantity);

/* Of the excess over the first and last sample of so many steps instead, under loads on lines between
   samples; infinite where the quantity has kinks at samples. */
void rampwise_extremes_bound_steps_(extremes *x, size_t steps);

/* All of it. Fails as rampwise_coeffs_make does. */
int rampwise_extremes_make_(extremes *x, const rampwise_coeffs *c, int quantity);

/* The quantity at the sample that s has reached. */
double rampwise_extremes_value_(const extremes *x, const rampwise_state *s);

/* The quantity at the beginning of the step from s to p_next, at the end of the step to s, and at the
   beginning of the free motion after s: where it jumps, other values than the sample's. */
double rampwise_extremes_begin_(const extremes *x, const rampwise_state *s, double p_next);
double rampwise_extremes_end_(const extremes *x, const rampwise_state *s);
double rampwise_extremes_after_begin_(const extremes *x, const rampwise_state *s);

/* Raises and lowers *peak by what lies inside the step from s, which is sample `sample`, to next.
   The ends are the caller's. */
void rampwise_extremes_inside_(const extremes *x, const rampwise_state *s, const rampwise_state *next,
                               uint64_t sample, rampwise_peak *peak);

/* The free motion after s for ever, the base at rest or moving on evenly; times count from `sample` on. */
void rampwise_extremes_after_(const extremes *x, const rampwise_state *s, uint64_t sample,
                              rampwise_peak *peak);

/* What a free motion from s on that stays comes to, where it never gets there. */
double rampwise_extremes_limit_(const extremes *x, const rampwise_state *s);

/* One value at one instant. */
static inline void note_value(rampwise_peak *peak, double value, uint64_t sample, double fraction)
{
    if (value > peak->high.value)
        peak->high = (rampwise_instant){value, sample, fraction};
    if (value < peak->low.value)
        peak->low = (rampwise_instant){value, sample, fraction};
}

#endif
