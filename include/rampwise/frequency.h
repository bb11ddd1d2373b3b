/* rampwise/frequency.h: how the sampled oscillator answers a steady tone, beside the continuous one.

   The samples p[n] = cos(omega n dt) of an endless tone bring a stable oscillator to an output
   gain cos(omega n dt + phase) at the samples. From the recurrence of coefficients.h,
   with z = exp(i omega dt),

       {U, V} = (z - M)^-1 ({C, C'} + {D, D'} z),    M = {{A, B}, {A', B'}}

   and p_before is 1/z. That is the exact answer to the tone as it is taken between its samples. Under a ramp
   it is the sum over all k of sinc^2(w_k dt/2) times the continuous answer at w_k = omega + 2 pi k/dt: the
   factor of k = 0 is real, so the ramp adds no delay; what differs from the continuous phase are images,
   whose share falls with (omega dt)^2 and faster. A held input is late by dt/2.

   The continuous oscillator's answer is that of the equation of motion to p(t) = cos(omega t); p - p_before
   of a row counts as dt p'(t) there. */
#ifndef RAMPWISE_FREQUENCY_H
#define RAMPWISE_FREQUENCY_H

#include "output.h"

/* gain: output per input, 0 or more; phase: by how much the output leads, in (-pi, pi] radians. */
typedef struct rampwise_response {
    double gain, phase;
} rampwise_response;

RAMPWISE_BEGIN

/* The response of an output of the oscillator c at the circular frequency omega (rad per unit of time, 0 or
   more): at the samples, and of the continuous oscillator; either pointer may be NULL. Above pi/dt the
   samples see an alias, at a lower frequency. For an unstable oscillator the numbers are those of the
   formula, and no steady answer exists. Good to about 1e-12 away from an undamped resonance; uses the
   platform's sine and cosine, so that the last bits are not the same everywhere.
   RAMPWISE_ERROR_MISSING (c or output), _NOT_MADE, _QUANTITY, _COEFFICIENT (output.h); _FREQUENCY (negative
   or not finite); _OVERFLOW (a gain is not finite: an undamped resonance, or a free mass at 0). Any thread;
   some hundred operations. Since 0.1. */
RAMPWISE_API int rampwise_frequency_response(const rampwise_coeffs *c, const rampwise_output *output,
                                             double omega, rampwise_response *sampled,
                                             rampwise_response *continuous);

RAMPWISE_END

#endif
