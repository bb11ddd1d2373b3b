/* Eight lanes a vector: x86-64 with AVX-512F, VL and DQ. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_X86

/* Before the target is set: nothing of the C library is compiled for it. */
#include <immintrin.h>
#include <math.h>
#include <stdint.h>
#include <string.h>

#ifdef __clang__
#pragma clang attribute push(__attribute__((target("avx512f,avx512vl,avx512dq,avx2,fma"))),                  \
                             apply_to = function)
#else
#pragma GCC push_options
#pragma GCC target("avx512f,avx512vl,avx512dq,avx2,fma")
#endif

#define WIDTH 8
#define VECTOR __m512d
#define MASK __mmask8
#define KERNELS rampwise_kernels_avx512_
#define KERNELS_NAME RAMPWISE_AVX512

static inline __m512d vector_load(const double *x)
{
    return _mm512_loadu_pd(x);
}

static inline void vector_store(double *x, __m512d a)
{
    _mm512_storeu_pd(x, a);
}

static inline __m512d vector_all(double a)
{
    return _mm512_set1_pd(a);
}

static inline __m512d vector_fma(__m512d a, __m512d b, __m512d c)
{
    return _mm512_fmadd_pd(a, b, c);
}

static inline __m512d vector_product(__m512d a, __m512d b)
{
    return _mm512_mul_pd(a, b);
}

static inline __m512d vector_sum(__m512d a, __m512d b)
{
    return _mm512_add_pd(a, b);
}

static inline __m512d vector_difference(__m512d a, __m512d b)
{
    return _mm512_sub_pd(a, b);
}

static inline __m512d vector_product_unless_zero(__m512d a, __m512d b)
{
    const __mmask8 asked = _mm512_cmp_pd_mask(a, _mm512_setzero_pd(), _CMP_NEQ_UQ);
    return _mm512_maskz_mul_pd(asked, a, b);
}

static inline __m512d vector_size(__m512d a)
{
    return _mm512_abs_pd(a);
}

static inline __m512d vector_larger(__m512d a, __m512d b)
{
    return _mm512_max_pd(a, b);
}

/* The larger of |a| and top, which is not negative: the larger in size, its sign cleared, in one operation */
static inline __m512d vector_larger_size(__m512d a, __m512d top)
{
    return _mm512_range_pd(a, top, 0x0b);
}

static inline __m512d vector_smaller(__m512d a, __m512d b)
{
    return _mm512_min_pd(a, b);
}

static inline __mmask8 vector_positive(__m512d a)
{
    return _mm512_cmp_pd_mask(a, _mm512_setzero_pd(), _CMP_GT_OQ);
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(__mmask8 a)
{
    return a;
}

static inline __mmask8 mask_below(__m512d a, double limit)
{
    return _mm512_cmp_pd_mask(vector_size(a), _mm512_set1_pd(limit), _CMP_LT_OQ);
}

static inline __mmask8 mask_all(void)
{
    return 0xff;
}

static inline __mmask8 mask_both(__mmask8 a, __mmask8 b)
{
    return a & b;
}

static inline int mask_any(__mmask8 a)
{
    return a;
}

static inline int vector_any_nan(__m512d a)
{
    return _mm512_cmp_pd_mask(a, a, _CMP_UNORD_Q) != 0;
}

/* a, or +0 where the mask is set and |a| < limit */
static inline __m512d vector_unless_below(__m512d a, double limit, __mmask8 mask)
{
    const __mmask8 zeroed = mask & mask_below(a, limit);
    return _mm512_mask_mov_pd(a, zeroed, _mm512_setzero_pd());
}

#include "x86_transpose.h"
#include "body.h"

#ifdef __clang__
#pragma clang attribute pop
#else
#pragma GCC pop_options
#endif

#endif
