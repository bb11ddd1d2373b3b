/* rampwise/status.h: what a call answers.

   Functions that can fail return RAMPWISE_OK (0) or one of the negative numbers below. The numbers
   are pinned: they never change their meaning, and new ones go into the gaps.

   A call that reports an error has changed nothing: not the state, not the outputs. There is one exception,
   RAMPWISE_ERROR_OVERFLOW from a record, channels or a bank: there the samples before the one at fault are
   valid, the state is the last finite one, and other channels and oscillators have gone on. */
#ifndef RAMPWISE_STATUS_H
#define RAMPWISE_STATUS_H

#include "linkage.h"

enum {
    RAMPWISE_OK = 0,

    /* The call itself is wrong. */
    RAMPWISE_ERROR_MISSING = -10,      /* a pointer that is needed is NULL */
    RAMPWISE_ERROR_INPUT = -12,        /* not a kind of input, or two arguments were swapped */
    RAMPWISE_ERROR_BETWEEN = -14,      /* not RAMPWISE_RAMP or RAMPWISE_HOLD, or two were swapped */
    RAMPWISE_ERROR_IMPULSES = -16,     /* an input would be made of impulses (coefficients.h, energy.h) */
    RAMPWISE_ERROR_FRAME = -17,        /* not RAMPWISE_RELATIVE or RAMPWISE_ABSOLUTE */
    RAMPWISE_ERROR_NOT_MADE = -18,     /* coefficients that rampwise_coeffs_make has not filled */
    RAMPWISE_ERROR_DIFFERENT = -20,    /* what oscillators must share differs */
    RAMPWISE_ERROR_NAME = -22,         /* no constant or struct of that name */
    RAMPWISE_ERROR_MEMORY = -24,       /* memory is short, not aligned, or not to be had */
    RAMPWISE_ERROR_COUNT = -26,        /* a number of things, or the number of one, is out of range */
    RAMPWISE_ERROR_QUANTITY = -27,     /* not a quantity, or not one of this object */
    RAMPWISE_ERROR_INSTRUCTIONS = -28, /* no set of instructions, or not one that runs here */
    RAMPWISE_ERROR_FLAGS = -29,        /* flags that are unknown, or not for this call */

    /* A number that describes the oscillator or the step is out of range. */
    RAMPWISE_ERROR_MASS = -30,        /* mass is not a finite number above 0 */
    RAMPWISE_ERROR_DAMPER = -32,      /* damper, or damping ratio, is not finite */
    RAMPWISE_ERROR_STIFFNESS = -34,   /* stiffness is not finite */
    RAMPWISE_ERROR_FREQUENCY = -36,   /* frequency negative, period not above 0, or either extreme */
    RAMPWISE_ERROR_INTERVAL = -38,    /* dt is not a finite number above 0 */
    RAMPWISE_ERROR_STEP_LENGTH = -40, /* the step is too long for an oscillator */
    RAMPWISE_ERROR_COEFFICIENT = -42, /* a coefficient overflows */
    RAMPWISE_ERROR_FRACTION = -44,    /* a fraction of a step that is not from 0 to 1 */
    RAMPWISE_ERROR_PERCENT = -45,     /* a percentile that is not from 0 to 100 */
    RAMPWISE_ERROR_NO_REST = -46,     /* no position of rest: a load on a free mass */
    RAMPWISE_ERROR_DEFECTIVE = -48,   /* roots that coincide without a mode of their own each */
    RAMPWISE_ERROR_WEIGHT = -50,      /* a load factor or weight is not finite */
    RAMPWISE_ERROR_ROOTS = -52,       /* complex roots that are no conjugate pairs, or not finite */

    /* The data are wrong. */
    RAMPWISE_ERROR_SAMPLE = -60, /* a sample is NaN or infinite */
    RAMPWISE_ERROR_STATE = -62,  /* a state is NaN or infinite */
    RAMPWISE_ERROR_TIME = -64,   /* a time is NaN, infinite, or not later than the one before */

    RAMPWISE_ERROR_GAP = -66, /* more samples in a row are missing than allowed */

    /* Saved bytes are. */
    RAMPWISE_ERROR_DAMAGED = -70, /* no saved object, not a whole one, or one with wrong bytes */
    RAMPWISE_ERROR_KIND = -72,    /* saved of another kind of object */
    RAMPWISE_ERROR_EDITION = -74, /* saved by another version, whose bits may differ */

    /* The results are. */
    RAMPWISE_ERROR_OVERFLOW = -80, /* the response is larger than its precision can hold */

    /* The platform is. */
    RAMPWISE_ERROR_FUSED = -90,     /* the fused multiply-add is not one */
    RAMPWISE_ERROR_ARITHMETIC = -92 /* known answers do not come out */
};

RAMPWISE_BEGIN

/* One English sentence for a status, without a full stop; never NULL, also for numbers that are no
   status. The text is constant and may be kept. Any thread. Since 0.1. */
RAMPWISE_API const char *rampwise_status_text(int status);

RAMPWISE_END

#endif
