/* The one place that knows processors. */
#include "kernels.h"
#include "sets.h"

extern const kernels PRIVATE(kernels_baseline), PRIVATE(kernels_avx2), PRIVATE(kernels_avx512),
    PRIVATE(kernels_neon);

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

const kernels *PRIVATE(kernels)(int name)
{
#ifdef RAMPWISE_BUILD_X86
    if ((name == RAMPWISE_AVX512 || name == RAMPWISE_FASTEST) && runs_avx512())
        return &PRIVATE(kernels_avx512);
    if ((name == RAMPWISE_AVX2 || name == RAMPWISE_FASTEST) && runs_avx2())
        return &PRIVATE(kernels_avx2);
#endif
#ifdef RAMPWISE_BUILD_NEON
    if (name == RAMPWISE_NEON || name == RAMPWISE_FASTEST)
        return &PRIVATE(kernels_neon);
#endif
    if (name == RAMPWISE_BASELINE || name == RAMPWISE_FASTEST)
        return &PRIVATE(kernels_baseline);
    return NULL;
}
