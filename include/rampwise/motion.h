/* rampwise/motion.h: what follows from a state at a sample: accelerations, relative motion, forces.

   c must be the coefficients that the state has been stepped with; nothing is checked. Where the input or
   its slope jumps at a sample, RAMPWISE_RAMP gives the value just before the sample, RAMPWISE_HOLD the one
   just after; at the start, a line of slope zero is taken to end there. p and p_before are read only where
   the input enters: forces and relative motion under a force, base acceleration or base velocity need u and
   v alone. For a moving base, spring force + damper force = -mass * total acceleration.

   Each is a handful of operations, never fails, and answers NaN or infinity where its arguments do.
   Any thread. Functions in _f32 are the same in single precision. All since 0.1. */
#ifndef RAMPWISE_MOTION_H
#define RAMPWISE_MOTION_H

#include "step.h"

RAMPWISE_BEGIN

/* u'', the second derivative of u: from the equation of motion. */
RAMPWISE_API double rampwise_acceleration(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_acceleration_f32(const rampwise_coeffs_f32 *c, const rampwise_state_f32 *s);

/* The acceleration of the mass against a fixed frame: u'' for a force and a base displacement (u is
   absolute there), u'' plus the base's acceleration for the other two, -(c u' + k u)/m. */
RAMPWISE_API double rampwise_total_acceleration(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_total_acceleration_f32(const rampwise_coeffs_f32 *c, const rampwise_state_f32 *s);

/* Displacement of the mass against the base: u, or u - x_g for a base displacement. */
RAMPWISE_API double rampwise_relative_displacement(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_relative_displacement_f32(const rampwise_coeffs_f32 *c,
                                                      const rampwise_state_f32 *s);

/* Velocity of the mass against the base: v, or v - x_g' for a base displacement. */
RAMPWISE_API double rampwise_relative_velocity(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_relative_velocity_f32(const rampwise_coeffs_f32 *c, const rampwise_state_f32 *s);

/* Force in the spring, stiffness times relative displacement; positive when stretched along +u. */
RAMPWISE_API double rampwise_spring_force(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_spring_force_f32(const rampwise_coeffs_f32 *c, const rampwise_state_f32 *s);

/* Force in the damper, damper times relative velocity; positive when it is pulled apart along +u. */
RAMPWISE_API double rampwise_damper_force(const rampwise_coeffs *c, const rampwise_state *s);
RAMPWISE_API float rampwise_damper_force_f32(const rampwise_coeffs_f32 *c, const rampwise_state_f32 *s);

RAMPWISE_END

#endif
