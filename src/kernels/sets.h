/* Which instruction sets this compiler builds for this platform. With our own fused multiply-add
   everywhere, the baseline alone. RAMPWISE_ALL_INSTRUCTIONS makes it an error where a set is
   missing. */
#ifndef RAMPWISE_SETS_H
#define RAMPWISE_SETS_H

#if defined(__GNUC__) && !defined(RAMPWISE_OWN_FMA)
#if defined(__x86_64__)
#define RAMPWISE_BUILD_X86 1
#elif defined(__aarch64__) && defined(__ARM_NEON)
#define RAMPWISE_BUILD_NEON 1
#endif
#endif

#if defined(RAMPWISE_ALL_INSTRUCTIONS) && !defined(RAMPWISE_BUILD_X86) && !defined(RAMPWISE_BUILD_NEON)
#error "no instruction set beyond the baseline is built here"
#endif

#endif
