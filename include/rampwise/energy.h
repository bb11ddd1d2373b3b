/* rampwise/energy.h: where the energy goes, at every sample, exact for the input as it is given.

   With y the displacement of the mass against its base, and c, k damper and stiffness:

       input = kinetic + strain + dissipated - (kinetic + strain at the start)

   strain      k y^2/2, negative where the stiffness is.
   dissipated  the integral of c y'^2 dt from the start; negative where the damper is.
   kinetic     m v^2/2 and
   input       the work of the force that is held to drive the mass, in one of two frames
               (C.-M. Uang and V. V. Bertero, Earthq. Eng. Struct. Dyn. 19, 77-90, 1990):

       RAMPWISE_RELATIVE   v = y', and the force is -m a_g: work -m a_g y' dt
       RAMPWISE_ABSOLUTE   v = y' + v_g, and the force is the one that the base passes to the mass:
                           work m (y'' + a_g) v_g dt

   a_g and v_g are acceleration and velocity of the base. Both inputs differ by m v_g^2/2 + m y' v_g, less its
   value at the start. For a force p the base stands still, both frames are one, and the work is p y' dt.

   What is defined. Base acceleration: v_g starts at 0 and is the exact integral of the samples, carried
   in twice the digits of a double, without any correction of the baseline: a record that leaves the
   base moving has that motion in its absolute energies. Base velocity: v_g is the sample, at the start
   too. Base displacement: absolute only, since its slope jumps at the samples, and a relative input
   would be made of impulses (RAMPWISE_ERROR_IMPULSES); held, it jumps itself, and the work of the jump
   on the spring belongs to the sample at which it happens. There kinetic is m u'^2/2, u' the velocity
   of the mass against a fixed frame.

   How. In a step the velocity of the mass is a linear form in three numbers that vanish at rest: the
   velocity, the force that is not in balance with the spring, and the change of the load over the step. So
   the work is a form in these and the load, and the dissipated energy is the damper times a sum of three
   squares, which no rounding can turn negative. The coefficients of both come from a series on a short
   step and the composition of two equal steps, in twofold arithmetic, as in coefficients.h: no damping
   regimes, no loss where the step is short against the period. None of the four is found from the other
   three: their balance is a check.

   Accuracy. After n steps of a record the balance holds within 4 DBL_EPSILON n times the largest, over the
   four, of the sums of the sizes of all changes at the samples, the energy at the start being the first
   change. To be added in the absolute frame, and for base velocity, whose state carries relative motion only:
   DBL_EPSILON m |v v_g|, v the mass's velocity, which counts where a soft oscillator hardly moves over a
   moving base. The work of one step is as good as that of what comes and goes inside it.

   Energies are products of two responses: for samples below about 1e-150 or above 1e150 they leave the range
   of a double, at the lower end without notice. Their unit is force times length; for a system of unit mass
   they are energies per unit mass, and sqrt(2 E/m) is what is called an equivalent velocity.

   Threads: a meter belongs to one state, and both to one thread at a time. All since 0.1. */
#ifndef RAMPWISE_ENERGY_H
#define RAMPWISE_ENERGY_H

#include <stddef.h>
#include "step.h"

/* Against what the motion is measured. */
enum {
    RAMPWISE_RELATIVE = 71, /* the base */
    RAMPWISE_ABSOLUTE = 72  /* a fixed frame */
};

typedef struct rampwise_energy {
    double input, kinetic, strain, dissipated;
} rampwise_energy;

/* All that the energies of an oscillator need beside its state. Public, of frozen layout, so that it may be
   placed, copied and stored; only the functions below write it, and none of its
   members is to be read by others. */
typedef struct rampwise_meter {
    rampwise_coeffs coeffs;
    double work[3][3];                                /* forms over velocity, force, change of load */
    double into_velocity[2], into_force;              /* the dissipated energy's squares: what is squared, */
    double squares[3];                                /* and its factor */
    double input[2], dissipated[2], base_velocity[2]; /* sums so far, two doubles each */
    int32_t frame, zero;
    double reserve[10]; /* zero */
} rampwise_meter;

RAMPWISE_BEGIN

/* A meter for a state that stands at the start: nothing put in, nothing dissipated, a base of given
   acceleration at rest. *c is copied. About 3 to 6 microseconds.
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _STATE; _FRAME; _IMPULSES for the relative energies of a base
   displacement; _COEFFICIENT where a coefficient overflows, or a motion of an unstable system grows more than
   2^200 times in a step; _OVERFLOW where an energy does. */
RAMPWISE_API int rampwise_meter_start(rampwise_meter *meter, const rampwise_coeffs *c,
                                      const rampwise_state *s, int frame);

/* The next n samples, p[0] to p[n-1]: the state takes the steps of rampwise_run, bit for bit, and energy[n]
   gets the energies at each sample. energy may be NULL; nothing may overlap. However a record is cut into
   calls, the bits are the same. One step and 15 to 20 fused multiply-adds more a sample (in all about 80 ns
   through glibc's fma); nothing is allocated.
   RAMPWISE_ERROR_MISSING; _NOT_MADE (the meter was not started); _STATE; _SAMPLE, with its index in bad.
   Where a response or an energy overflows, RAMPWISE_ERROR_OVERFLOW, with the sample's index in bad:
   entries before it are valid, it and later ones are not written, and state and meter are those of the
   sample before. bad may be NULL. */
RAMPWISE_API int rampwise_meter_run(rampwise_meter *meter, rampwise_state *s, size_t n, const double *p,
                                    rampwise_energy *energy, size_t *bad);

/* The energies at the present sample; s is the state that the meter has gone with.
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _OVERFLOW (an energy is not finite; nothing is written). */
RAMPWISE_API int rampwise_meter_read(const rampwise_meter *meter, const rampwise_state *s,
                                     rampwise_energy *energy);

/* A whole record of n samples, n - 1 steps, from displacement u0 and velocity v0 under p[0]: energy[n], entry
   0 at the start. The steps of rampwise_solve, bit for bit. Errors as in rampwise_meter_start and _run. */
RAMPWISE_API int rampwise_energy_solve(const rampwise_coeffs *c, int frame, double u0, double v0, size_t n,
                                       const double *p, rampwise_energy *energy, size_t *bad);

/* Energy spectra, per unit mass: n_osc oscillators under one record p[n], n >= 1, linear between samples dt
   apart, all starting with u = u' = 0 under p[0].

   input, frame  kinds of coefficients.h and above; for RAMPWISE_FORCE the mass is 1.
   omega, zeta   natural circular frequencies (0 is a free mass) and damping ratios, [n_osc].
   last          the energies at the last sample, [n_osc].
   greatest      the greatest input energy at any sample, 0 or more, [n_osc].

   Either output may be NULL. An oscillator that overflows has infinite entries.
   RAMPWISE_ERROR_MISSING, _COUNT (n is 0), _INTERVAL, _INPUT, _FRAME, _IMPULSES; _SAMPLE, with the sample's
   index in bad; _FREQUENCY, _DAMPER, or another of rampwise_coeffs_make and rampwise_meter_start, with the
   oscillator's index in bad. Nothing is written then. bad may be NULL.
   Threads: split the list of oscillators. Work: n n_osc samples of rampwise_meter_run; no allocation. */
RAMPWISE_API int rampwise_energy_spectrum(size_t n, double dt, const double *p, int input, int frame,
                                          size_t n_osc, const double *omega, const double *zeta,
                                          rampwise_energy *last, double *greatest, size_t *bad);

RAMPWISE_END

#endif
