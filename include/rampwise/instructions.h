/* rampwise/instructions.h: the instruction sets that the inner loops are built for.

   Results do not depend on them. An object stores its choice when it is made; calls without an
   object ask the processor, each time. */
#ifndef RAMPWISE_INSTRUCTIONS_H
#define RAMPWISE_INSTRUCTIONS_H

#include "linkage.h"

enum {
    RAMPWISE_FASTEST = 41,  /* the best that this processor has */
    RAMPWISE_BASELINE = 42, /* what every processor of the platform has */
    RAMPWISE_AVX2 = 43,     /* AVX2 with fused multiply-add */
    RAMPWISE_AVX512 = 44,   /* AVX-512F, VL and DQ */
    RAMPWISE_NEON = 45      /* AArch64 Advanced SIMD */
};

RAMPWISE_BEGIN

/* The set that a request for `instructions` gives here: RAMPWISE_FASTEST one of the others, any
   other itself; RAMPWISE_ERROR_INSTRUCTIONS where it is not a set, was not built, or is not this
   processor's. Any thread. Since 0.1. */
RAMPWISE_API int rampwise_instructions(int instructions);

RAMPWISE_END

#endif
