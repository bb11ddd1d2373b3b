/* Four lanes a vector: x86-64 with AVX2 and fused multiply-add. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_X86

/* Before the target is set: nothing of the C library is compiled for it. */
#include <immintrin.h>
#include <math.h>
#include <stdint.h>
#include <string.h>

#ifdef __clang__
#pragma clang attribute push(__attribute__((target("avx2,fma"))), apply_to = function)
#else
#pragma GCC push_options
#pragma GCC target("avx2,fma")
#endif

#define WIDTH 4
#define VECTOR __m256d
#define MASK __m256d
#define KERNELS rampwise_kernels_avx2_
#define KERNELS_NAME RAMPWISE_AVX2

static inline __m256d vector_load(const double *x)
{
    return _mm256_loadu_pd(x);
}

static inline void vector_store(double *x, __m256d a)
{
    _mm256_storeu_pd(x, a);
}

static inline __m256d vector_all(double a)
{
    return _mm256_set1_pd(a);
}

static inline __m256d vector_fma(__m256d a, __m256d b, __m256d c)
{
    return _mm256_fmadd_pd(a, b, c);
}

static inline __m256d vector_product(__m256d a, __m256d b)
{
    return _mm256_mul_pd(a, b);
}

static inline __m256d vector_sum(__m256d a, __m256d b)
{
    return _mm256_add_pd(a, b);
}

static inline __m256d vector_difference(__m256d a, __m256d b)
{
    return _mm256_sub_pd(a, b);
}

static inline __m256d vector_product_unless_zero(__m256d a, __m256d b)
{
    const __m256d asked = _mm256_cmp_pd(a, _mm256_setzero_pd(), _CMP_NEQ_UQ);
    return _mm256_and_pd(asked, _mm256_mul_pd(a, b));
}

static inline __m256d vector_size(__m256d a)
{
    return _mm256_andnot_pd(_mm256_set1_pd(-0.0), a);
}

static inline __m256d vector_larger(__m256d a, __m256d b)
{
    return _mm256_max_pd(a, b);
}

/* The larger of |a| and top, which is not negative */
static inline __m256d vector_larger_size(__m256d a, __m256d top)
{
    return vector_larger(vector_size(a), top);
}

static inline __m256d vector_smaller(__m256d a, __m256d b)
{
    return _mm256_min_pd(a, b);
}

static inline __m256d vector_positive(__m256d a)
{
    return _mm256_cmp_pd(a, _mm256_setzero_pd(), _CMP_GT_OQ);
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(__m256d a)
{
    return (unsigned)_mm256_movemask_pd(a);
}

static inline __m256d mask_below(__m256d a, double limit)
{
    return _mm256_cmp_pd(vector_size(a), _mm256_set1_pd(limit), _CMP_LT_OQ);
}

static inline __m256d mask_all(void)
{
    return _mm256_cmp_pd(_mm256_setzero_pd(), _mm256_setzero_pd(), _CMP_EQ_OQ);
}

static inline __m256d mask_both(__m256d a, __m256d b)
{
    return _mm256_and_pd(a, b);
}

static inline int mask_any(__m256d a)
{
    return _mm256_movemask_pd(a);
}

static inline int vector_any_nan(__m256d a)
{
    return mask_any(_mm256_cmp_pd(a, a, _CMP_UNORD_Q));
}

/* a, or +0 where the mask is set and |a| < limit */
static inline __m256d vector_unless_below(__m256d a, double limit, __m256d mask)
{
    return _mm256_andnot_pd(_mm256_and_pd(mask, mask_below(a, limit)), a);
}

#include "x86_transpose.h"
#include "body.h"

#ifdef __clang__
#pragma clang attribute pop
#else
#pragma GCC pop_options
#endif

#endif
