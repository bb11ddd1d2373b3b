/* rampwise/coefficients.h: everything a step needs, made once.

   Between two samples the input is a straight line (RAMPWISE_RAMP) or stays where it was
   (RAMPWISE_HOLD). On such a step of length h = dt the response of a linear oscillator is known in
   closed form (N. C. Nigam and P. C. Jennings, Bull. Seism. Soc. Am. 59(2), 909-922, 1969):

       u1 = A  u0 + B  v0 + C  p0 + D  p1
       v1 = A' u0 + B' v0 + C' p0 + D' p1

   u, v: displacement and velocity; p0, p1: the input at the two ends of the step. The primed four
   are Ap, Bp, Cp, Dp below. A step is taken with the increments A - 1 and B' - 1, which keep the
   digits that A and B' have no room for when the step is short against the period.

   How they are made. With K = k h^2/m and S = c h/m, three numbers carry the step: g, G1 and G2,
   the displacements after it for a unit velocity, a unit constant load and a unit ramp, in units of
   h, h^2/m and h^3/m. They come from their Taylor series on a step halved until |S| <= 1/16 and |K|
   <= 1/256, and are then doubled back by the composition of two equal steps, all in twofold
   arithmetic (a number carried as the unevaluated sum of two doubles). There is no branch on the
   kind of damping and no sine or exponential, so undamped, under-, critically and over-damped
   systems, free masses and unstable systems all take one path, and the bits are the same on every
   machine.

   Accuracy. For w h up to 1e6 (w^2 = k/m), damping ratios from 0 to 100, and unstable systems with
   |K|, |S| up to 50: every coefficient and both increments within 0.6 ulp of its own largest value
   over steps of length 0 to h; for force and base acceleration with w h < 1, 0.6 ulp of itself.

   Threads: coefficients are never changed after they are made and may be shared. */
#ifndef RAMPWISE_COEFFICIENTS_H
#define RAMPWISE_COEFFICIENTS_H

#include <stdint.h>
#include "linkage.h"
#include "system.h"

/* What the samples are. */
enum {
    RAMPWISE_FORCE = 11,             /* p: force on the mass; u against a fixed frame */
    RAMPWISE_BASE_ACCELERATION = 12, /* a_g; u relative to the base; p is a_g itself, never -m a_g */
    RAMPWISE_BASE_VELOCITY = 13,     /* v_g; u relative to the base */
    RAMPWISE_BASE_DISPLACEMENT = 14  /* x_g; u absolute, against a fixed frame */
};

/* What the input does between two samples. Values of different kinds never coincide, so swapped
   arguments are refused. */
enum {
    RAMPWISE_RAMP = 21, /* a straight line from sample to sample */
    RAMPWISE_HOLD = 22  /* constant from each sample until the next */
};

/* Public, of frozen layout, to be read; only rampwise_coeffs_make writes it.
   Dimensions: A, Bp none; B time; Ap 1/time; C, D displacement per input; Cp, Dp velocity per
   input. */
typedef struct rampwise_coeffs {
    double A, B, C, D;
    double Ap, Bp, Cp, Dp;
    double A_minus_1, Bp_minus_1;
    /* u'' and the acceleration against a fixed frame, each a row over
       {u, v, p, p - p_before} at a sample. */
    double acceleration[4];
    double total[4];
    rampwise_system system;
    double dt;
    int32_t input, between;
    double reserve[9]; /* zero */
} rampwise_coeffs;

/* The same for steps in single precision. Public, of frozen layout, to be read; only rampwise_coeffs_make_f32
   writes it, here or on a host that prints it as a constant. dt is kept as it was given: nothing in single
   precision computes with it. */
typedef struct rampwise_coeffs_f32 {
    float A, B, C, D;
    float Ap, Bp, Cp, Dp;
    float A_minus_1, Bp_minus_1;
    float acceleration[4];
    float total[4];
    float mass, damper, stiffness, rate; /* rate: 1/dt */
    double dt;
    int32_t input, between;
    float reserve[6]; /* zero */
} rampwise_coeffs_f32;

RAMPWISE_BEGIN

/* Fills *c for one oscillator and one length of step.

   sys     as in system.h; *sys is copied, and may lie in *c.
   dt      length of a step, above 0, in the unit of time of sys.
   input   RAMPWISE_FORCE, _BASE_ACCELERATION, _BASE_VELOCITY or _BASE_DISPLACEMENT.
   between RAMPWISE_RAMP or RAMPWISE_HOLD.

   A ramp of base velocity is a constant base acceleration inside the step, and a ramp of base
   displacement a constant base velocity, which a damper feels: there the input's change over the
   last step is part of u'' (p_before of the state). Held base velocity, and held base displacement
   with a damper, would be trains of impulses: RAMPWISE_ERROR_IMPULSES.

   Other errors: RAMPWISE_ERROR_MISSING, _MASS, _DAMPER, _STIFFNESS, _INTERVAL, _INPUT, _BETWEEN;
   _STEP_LENGTH where |k| dt^2/m or |c| dt/m is 2^96 or more; _COEFFICIENT where a coefficient
   overflows, or a motion of an unstable system grows more than 2^900 times in one step. A
   coefficient below the smallest normal double comes out subnormal or zero.

   About 0.4 to 1.3 microseconds, growing with log2(w dt); no allocation. Since 0.1. */
RAMPWISE_API int rampwise_coeffs_make(rampwise_coeffs *c, const rampwise_system *sys, double dt, int input,
                                      int between);

/* The same for single precision. Every member is the float nearest to the exact value for sys and dt as they
   are given, rounded once (subnormal floats included); only where a free motion has decayed within the step
   may it be off, by 2^-100 of its largest value over steps of length 0 to h. RAMPWISE_ERROR_COEFFICIENT also
   where a member is larger than a float can hold. This is double arithmetic; where that is dear, let a host
   make constants (tools/coefficients_as_source). Since 0.1. */
RAMPWISE_API int rampwise_coeffs_make_f32(rampwise_coeffs_f32 *c, const rampwise_system *sys, double dt,
                                          int input, int between);

RAMPWISE_END

#endif
