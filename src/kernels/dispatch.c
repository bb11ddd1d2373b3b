/* The one place that knows processors. */
#include "kernels.h"
#include "rampwise/status.h"
#include "sets.h"

extern const kernels rampwise_kernels_baseline_, rampwise_kernels_avx2_, rampwise_kernels_avx512_,
    rampwise_kernels_neon_;

#ifdef RAMPWISE_BUILD_X86
static int runs_avx2(void)
{
    return __builtin_cpu_supports("avx2") && __builtin_cpu_supports("fma");
}

static int runs_avx512(void)
{
    return runs_avx2() && __builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512vl") &&
           __builtin_cpu_supports("avx512dq");
}
#endif

const kernels *rampwise_kernels_(int name)
{
#ifdef RAMPWISE_BUILD_X86
    if ((name == RAMPWISE_AVX512 || name == RAMPWISE_FASTEST) && runs_avx512())
        return &rampwise_kernels_avx512_;
    if ((name == RAMPWISE_AVX2 || name == RAMPWISE_FASTEST) && runs_avx2())
        return &rampwise_kernels_avx2_;
#endif
#ifdef RAMPWISE_BUILD_NEON
    if (name == RAMPWISE_NEON || name == RAMPWISE_FASTEST)
        return &rampwise_kernels_neon_;
#endif
    if (name == RAMPWISE_BASELINE || name == RAMPWISE_FASTEST)
        return &rampwise_kernels_baseline_;
    return NULL;
}

int rampwise_instructions(int instructions)
{
    const kernels *const chosen = rampwise_kernels_(instructions);
    return chosen != NULL ? chosen->name : RAMPWISE_ERROR_INSTRUCTIONS;
}
