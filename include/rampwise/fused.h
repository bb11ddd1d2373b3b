/* rampwise/fused.h: the fused multiply-add of the step, x y + z rounded once.

   The bits of a step are part of the contract, and they hang on a fused multiply-add that is one.
   RAMPWISE_FMA is
   - the hardware's where the compiler says that the target has it (on x86-64: compile the caller
   with -mfma or -march=x86-64-v3 or later),
   - else glibc's fma, which is correctly rounded: three to four times the cost of a step with the
     hardware behind it, about a hundred times without,
   - elsewhere the library's own below: small C libraries compute fma as a product and a sum.
   All three give the same bits. RAMPWISE_OWN_FMA, defined before the header, chooses the last.
   The same holds for single precision, which microcontrollers may have in hardware alone. */
#ifndef RAMPWISE_FUSED_H
#define RAMPWISE_FUSED_H

#include <stdint.h> /* tells glibc from other C libraries */
#include "linkage.h"

RAMPWISE_BEGIN

/* x y + z, correctly rounded to nearest, ties to even, for all doubles: infinite, NaN, subnormal
   and signed zero as IEEE 754-2008 says (in rounding to nearest; no flags are promised). Integer
   arithmetic, about 10 ns. Any thread. Since 0.1. */
RAMPWISE_API double rampwise_fma(double x, double y, double z);

/* The same for single precision. Since 0.1. */
RAMPWISE_API float rampwise_fmaf(float x, float y, float z);

RAMPWISE_END

/* The fastest correct one here, in double and in single precision (x, y, z of type float). */
#if defined(RAMPWISE_OWN_FMA) || !defined(__GNUC__)
#define RAMPWISE_FMA(x, y, z) rampwise_fma((x), (y), (z))
#elif defined(__FP_FAST_FMA) || (defined(__FMA__) && defined(__SSE2__)) ||                                   \
    (defined(__ARM_FEATURE_FMA) && defined(__aarch64__))
#define RAMPWISE_FMA_IN_HARDWARE 1
#define RAMPWISE_FMA(x, y, z) __builtin_fma((x), (y), (z))
#elif defined(__GLIBC__)
#define RAMPWISE_FMA(x, y, z) __builtin_fma((x), (y), (z))
#else
#define RAMPWISE_FMA(x, y, z) rampwise_fma((x), (y), (z))
#endif

#if defined(RAMPWISE_OWN_FMA) || !defined(__GNUC__)
#define RAMPWISE_FMAF(x, y, z) rampwise_fmaf((x), (y), (z))
#elif defined(__FP_FAST_FMAF) || (defined(__FMA__) && defined(__SSE2__)) ||                                  \
    (defined(__ARM_FEATURE_FMA) && (defined(__aarch64__) || (defined(__ARM_FP) && (__ARM_FP & 4)))) ||       \
    defined(__GLIBC__)
#define RAMPWISE_FMAF(x, y, z) __builtin_fmaf((x), (y), (z))
#else
#define RAMPWISE_FMAF(x, y, z) rampwise_fmaf((x), (y), (z))
#endif

#endif
