/* rampwise/system.h: one spring-mass-damper system.

       m u'' + c u' + k u = p(t)

   Units are the caller's, any consistent set; results keep them. With masses in kg, lengths in m
   and times in s, forces are in N. Base accelerations given in g answer with displacements in g
   s^2.

   Threads: no function here keeps anything; each call writes only what it is given. */
#ifndef RAMPWISE_SYSTEM_H
#define RAMPWISE_SYSTEM_H

#include "linkage.h"

/* mass above 0; damper and stiffness any finite number. stiffness = 0 is a free mass, stiffness < 0
   a mass that falls away from its place, damper < 0 one that gathers energy. May be filled by hand:
   it is checked where coefficients are made of it. */
typedef struct rampwise_system {
    double mass, damper, stiffness;
} rampwise_system;

RAMPWISE_BEGIN

/* The system of unit mass with natural circular frequency omega (rad per unit of time, 0 or more)
   and damping ratio zeta (1 is critical; any finite number): mass = 1, damper = 2 zeta omega,
   stiffness = omega^2, each correctly rounded. omega = 0 is a free mass. For another mass, multiply all
   three by it.
   RAMPWISE_ERROR_MISSING, _FREQUENCY (negative, not finite, or so extreme that omega^2 is beyond
   the normal range of a double), _DAMPER. Since 0.1. */
RAMPWISE_API int rampwise_system_natural(rampwise_system *sys, double omega, double zeta);

/* The same from the natural frequency in cycles per unit of time: omega = 2 pi frequency, carried
   to twice the digits of a double. Since 0.1. */
RAMPWISE_API int rampwise_system_hertz(rampwise_system *sys, double frequency, double zeta);

/* The same from the natural period (above 0, finite): omega = 2 pi / period. Since 0.1. */
RAMPWISE_API int rampwise_system_period(rampwise_system *sys, double period, double zeta);

RAMPWISE_END

#endif
