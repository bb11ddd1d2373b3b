/* rampwise/combination.h: the peak of a sum of modes where only a spectrum is known.

   A response spectrum gives the peak of every mode, and not when. These rules say what the sum of the modes
   then reaches, roughly; the true peak of a record's response is in modes.h. All since 0.1.

   peak[n] are peaks of one response quantity, a mode each, with their signs: shape times participation factor
   times spectral value. Any thread; nothing is kept. They answer NaN where a pointer is missing. */
#ifndef RAMPWISE_COMBINATION_H
#define RAMPWISE_COMBINATION_H

#include <stddef.h>
#include "linkage.h"

RAMPWISE_BEGIN

/* Absolute sum: sum of |peak|. Never exceeded. */
RAMPWISE_API double rampwise_combine_absolute_sum(size_t n, const double *peak);

/* Square root of the sum of squares (SRSS), for modes whose frequencies lie well apart; also for what
   directions at right angles cause in one response quantity. */
RAMPWISE_API double rampwise_combine_root_of_squares(size_t n, const double *peak);

/* Complete quadratic combination (CQC): the root of sum over i and j of rho_ij peak[i] peak[j], with the
   coefficients below; omega[n] (0 or more) and zeta[n] (0 or more) are those of the modes. n^2 work. */
RAMPWISE_API double rampwise_combine_complete_quadratic(size_t n, const double *peak, const double *omega,
                                                        const double *zeta);

/* How far two modes' responses to a broad-banded load go together, 0 to 1:

       rho = 8 sqrt(zeta_1 zeta_2) (zeta_1 + r zeta_2) r^(3/2)
             / ((1 - r^2)^2 + 4 zeta_1 zeta_2 r (1 + r^2) + 4 (zeta_1^2 + zeta_2^2) r^2),  r = omega_2/omega_1

   (A. Der Kiureghian, Earthquake Engineering and Structural Dynamics 9(5), 419-435, 1981). 1 for equal modes,
   also undamped ones; 0 where one of two that differ is undamped or at rest. */
RAMPWISE_API double rampwise_modal_correlation(double omega_1, double zeta_1, double omega_2, double zeta_2);

/* One direction with a share of the others: the largest of |peak[i]| + share times the sum of the
   other sizes. peak has up to three directions of the load; shares in use are 0.3 and 0.4 (the code
   that governs says which). */
RAMPWISE_API double rampwise_combine_with_share(size_t n, const double *peak, double share);

RAMPWISE_END

#endif
