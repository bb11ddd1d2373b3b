/* rampwise/version.h: which library this is, and which bits it gives.

   Threads: every function here may be called from any thread at any time. */
#ifndef RAMPWISE_VERSION_H
#define RAMPWISE_VERSION_H

#include "linkage.h"

/* The version of these headers. Until 1.0 the face may change with the middle number. */
#define RAMPWISE_VERSION_MAJOR 0
#define RAMPWISE_VERSION_MINOR 1
#define RAMPWISE_VERSION_PATCH 0

/* The edition of the arithmetic these headers compile into the caller. */
#define RAMPWISE_ARITHMETIC_EDITION 1

RAMPWISE_BEGIN

/* The version of the library that is linked, as text: "0.1.0". Never NULL. Since 0.1. */
RAMPWISE_API const char *rampwise_version(void);

/* The edition of the arithmetic of the library that is linked. It changes whenever any bit of any
   result may change, and never otherwise, so stored results of equal edition may be compared bit
   for bit. It must equal RAMPWISE_ARITHMETIC_EDITION where inline steps and library calls are
   mixed. Since 0.1. */
RAMPWISE_API int rampwise_arithmetic_edition(void);

/* Known answers, bit for bit: the fused multiply-add that this build uses, coefficients, and steps.
   Returns RAMPWISE_OK, RAMPWISE_ERROR_FUSED (the platform's fma is not correctly rounded) or
   RAMPWISE_ERROR_ARITHMETIC (any other wrong bit: a compiler option such as -ffast-math at the link,
   extended precision, or a rounding mode or flushing of subnormal numbers set in the calling thread).
   Some tens of microseconds; allocates nothing and changes nothing. Since 0.1. */
RAMPWISE_API int rampwise_self_test(void);

RAMPWISE_END

#endif
