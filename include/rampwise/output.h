/* rampwise/output.h: one value of the response, as a weighted row.

   Whatever follows from a state at a sample is a row of four weights over {u, v, p, p - p_before}: named ones
   below, which are those of motion.h, or any other. A row is evaluated as

       row[0] u + (row[1] v + (row[2] p + row[3] (p - p_before)))

   with a fused multiply-add for each of the three sums; for u, v, u'' and the total acceleration that has the bits
   of rampwise_run. For relative velocity and forces it may differ from motion.h in the last digit. */
#ifndef RAMPWISE_OUTPUT_H
#define RAMPWISE_OUTPUT_H

#include <stdint.h>
#include "coefficients.h"
#include "peak.h"

/* Beside RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY and RAMPWISE_TOTAL_ACCELERATION of peak.h. */
enum {
    RAMPWISE_ACCELERATION = 34, /* of the mass against the base: u'' */
    RAMPWISE_SPRING_FORCE = 35,
    RAMPWISE_DAMPER_FORCE = 36,
    RAMPWISE_LOAD = 37,    /* the input as given, p */
    RAMPWISE_WEIGHTED = 38 /* the weights of `row` */
};

/* `row` counts where quantity is RAMPWISE_WEIGHTED. */
typedef struct rampwise_output {
    double row[4];
    int32_t quantity, reserve;
} rampwise_output;

RAMPWISE_BEGIN

/* The weights of an output under coefficients c into row[4].
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _QUANTITY, _COEFFICIENT (a weight is not finite). Any thread; constant work.
   Since 0.1. */
RAMPWISE_API int rampwise_output_row(const rampwise_coeffs *c, const rampwise_output *output, double *row);
RAMPWISE_API int rampwise_output_row_f32(const rampwise_coeffs_f32 *c, const rampwise_output *output,
                                         float *row);

RAMPWISE_END

#endif
