/* rampwise/structure.h: from a structure to the plan of modes.h: what modes left out still do, and
   damping of any distribution.

   Threads: nothing is kept; each call writes only what it is given. All since 0.1. */
#ifndef RAMPWISE_STRUCTURE_H
#define RAMPWISE_STRUCTURE_H

#include "modes.h"

RAMPWISE_BEGIN

/* Static correction: the weights on the input, on_input[inputs][outputs], with which the outputs of the plan
   settle where the whole structure does: exact for a slowly varying load, although modes were left out. They
   replace the plan's own on_input, which is not read; on_input may be a copy of it.

       on_input[i][o] = settled[i][o] - sum over j of on_displacement[j][o] load[j][i] / k_j  (RAMPWISE_FORCE)

   (under RAMPWISE_BASE_ACCELERATION -m_j/k_j stands for 1/k_j). settled[inputs][outputs] is every output at
   rest under a constant unit of every input, from the caller's own K: 0 for velocities and relative
   accelerations, 1 for a total acceleration in the direction of the base's. Modes without a spring settle
   nowhere and are passed over: settled is then that of the elastic part, under the load less the inertia of
   the body's rigid acceleration. Summed in twofold arithmetic. This is the residual-mode, or missing-mass,
   correction of the trade. RAMPWISE_ERROR_MISSING; _WEIGHT (a number is not finite, or comes out so); and as
   rampwise_modes_init refuses the plan. */
RAMPWISE_API int rampwise_static_correction(const rampwise_modes_plan *plan, const double *settled,
                                            double *on_input);

/* The share of the mass that the modes of the plan take in every direction, share[inputs]: the sum of the
   effective modal masses over mass[inputs], the whole mass that moves in that direction. load is the
   participation factor under RAMPWISE_BASE_ACCELERATION (effective mass m_j load^2) or -shape' M r under
   RAMPWISE_FORCE (load^2/m_j). 1 where no mode is missing; codes ask for 0.9 as a rule (common practice).
   RAMPWISE_ERROR_MISSING, _MASS, and as rampwise_modes_init refuses the plan. */
RAMPWISE_API int rampwise_mass_share(const rampwise_modes_plan *plan, const double *mass, double *share);

/* A structure whose damping is not classical, by the roots and shapes of

       (root^2 M + root C + K) shape = 0

   with symmetric M, C, K: 2 bodies roots, from the caller's own solver, for example of the companion matrix
   [0, 1; -M^-1 K, -M^-1 C], whose eigenvectors begin with the shapes. Complex numbers are two doubles, the
   real part first. Zero but for the size after its init. */
typedef struct rampwise_roots {
    size_t size; /* of this struct */
    size_t bodies, inputs, outputs;
    const double *mass, *damper; /* [bodies][bodies] */
    const double *root;          /* [2 bodies][2]; those that are not real come in conjugate pairs */
    const double *shape;         /* [2 bodies][bodies][2], of any scale */
    const double *force; /* [inputs][bodies]: forces for a unit of the input; -M r for base acceleration */
    /* [outputs][bodies]: weights on the displacements and velocities of the bodies; NULL where all are zero.
       For the acceleration of a body, e' u'' = -e' M^-1 C u' - e' M^-1 K u + e' M^-1 force: three rows of
       weights, the last for on_input of the plan. */
    const double *on_displacement, *on_velocity;
    size_t reserve[4];
} rampwise_roots;

RAMPWISE_API void rampwise_roots_init(rampwise_roots *roots);

/* How many oscillators they make: `bodies` under one input, twice as many under
   several; 0 where roots is NULL. */
RAMPWISE_API size_t rampwise_roots_modes(const rampwise_roots *roots);

/* The structure as that many ordinary oscillators of unit mass under RAMPWISE_FORCE, with weights on
   displacement and velocity, in the arrays of a plan: sys[modes], load[modes][inputs],
   on_displacement[modes][outputs], on_velocity[modes][outputs]. For motions that begin at rest.

   A pair of roots a, b with the residues R, Q of an output under an input is one oscillator (A. S. Veletsos
   and C. E. Ventura, Earthquake Engineering and Structural Dynamics 14(2), 217-243, 1986, from memory):

       R/(s - a) + Q/(s - b) = ((R + Q) s - (R b + Q a)) / (s^2 - (a + b) s + a b)

   complex roots with their conjugates; real ones, smallest first, with the one whose residues in the
   displacements cancel best, so that a zero root goes with the damper root of the same body and no drift is
   left to cancel. Residues are (weights shape) (shape' force) / (shape' (2 root M + C) shape). Under several
   inputs a pair makes two oscillators, because the phases of its loads differ.

   RAMPWISE_ERROR_DEFECTIVE where shape' (2 root M + C) shape is below a millionth of the sum of the sizes of
   its terms: roots that coincide without a shape of their own each, as in critical damping; move a damper by
   some 1e-7 of it. Within 1e-6 of coincidence digits are lost: measured 8e-10 of the peak there, 5e-8 at 1e-8,
   7e-6 at 1e-10. Strong dampers cost digits of the eigenvalue solver too. An undamped rigid body has a double
   zero root of that kind: it belongs to a plan as a mode of its own. RAMPWISE_ERROR_MISSING, _COUNT (a number
   is 0, or not begun with its init), _ROOTS (a complex root without its conjugate, or one not finite), _WEIGHT
   (something comes out not finite). Work grows as bodies^3, where most roots are real as bodies^4. */
RAMPWISE_API int rampwise_roots_to_modes(const rampwise_roots *roots, rampwise_system *sys, double *load,
                                         double *on_displacement, double *on_velocity);

RAMPWISE_END

#endif
