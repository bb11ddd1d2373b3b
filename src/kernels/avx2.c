/* Four lanes a vector, eight in single precision: x86-64 with AVX2 and fused multiply-add. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_X86

/* Before the target is set: nothing of the C library is compiled for it. */
#include <immintrin.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../precision.h"

#ifdef __clang__
#pragma clang attribute push(__attribute__((target("avx2,fma"))), apply_to = function)
#else
#pragma GCC push_options
#pragma GCC target("avx2,fma")
#endif

#ifdef SINGLE_PRECISION
#define WIDTH 8
#define VECTOR __m256
#define REAL_OF(name) name##_ps
#else
#define WIDTH 4
#define VECTOR __m256d
#define REAL_OF(name) name##_pd
#endif
#define MASK VECTOR
#define KERNELS PRIVATE(kernels_avx2)
#define KERNELS_NAME RAMPWISE_AVX2

static inline VECTOR vector_load(const real *x)
{
    return REAL_OF(_mm256_loadu)(x);
}

static inline void vector_store(real *x, VECTOR a)
{
    REAL_OF(_mm256_storeu)(x, a);
}

static inline VECTOR vector_all(real a)
{
    return REAL_OF(_mm256_set1)(a);
}

static inline VECTOR vector_fma(VECTOR a, VECTOR b, VECTOR c)
{
    return REAL_OF(_mm256_fmadd)(a, b, c);
}

static inline VECTOR vector_product(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm256_mul)(a, b);
}

static inline VECTOR vector_sum(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm256_add)(a, b);
}

static inline VECTOR vector_difference(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm256_sub)(a, b);
}

static inline VECTOR vector_product_unless_zero(VECTOR a, VECTOR b)
{
    const VECTOR asked = REAL_OF(_mm256_cmp)(a, REAL_OF(_mm256_setzero)(), _CMP_NEQ_UQ);
    return REAL_OF(_mm256_and)(asked, REAL_OF(_mm256_mul)(a, b));
}

static inline VECTOR vector_size(VECTOR a)
{
    return REAL_OF(_mm256_andnot)(REAL_OF(_mm256_set1)(-0.0), a);
}

static inline VECTOR vector_larger(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm256_max)(a, b);
}

/* The larger of |a| and top, which is not negative */
static inline VECTOR vector_larger_size(VECTOR a, VECTOR top)
{
    return vector_larger(vector_size(a), top);
}

static inline VECTOR vector_smaller(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm256_min)(a, b);
}

static inline MASK vector_positive(VECTOR a)
{
    return REAL_OF(_mm256_cmp)(a, REAL_OF(_mm256_setzero)(), _CMP_GT_OQ);
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(MASK a)
{
    return (unsigned)REAL_OF(_mm256_movemask)(a);
}

static inline MASK mask_below(VECTOR a, real limit)
{
    return REAL_OF(_mm256_cmp)(vector_size(a), REAL_OF(_mm256_set1)(limit), _CMP_LT_OQ);
}

static inline MASK mask_all(void)
{
    return REAL_OF(_mm256_cmp)(REAL_OF(_mm256_setzero)(), REAL_OF(_mm256_setzero)(), _CMP_EQ_OQ);
}

static inline MASK mask_both(MASK a, MASK b)
{
    return REAL_OF(_mm256_and)(a, b);
}

static inline int mask_any(MASK a)
{
    return REAL_OF(_mm256_movemask)(a);
}

static inline int vector_any_nan(VECTOR a)
{
    return mask_any(REAL_OF(_mm256_cmp)(a, a, _CMP_UNORD_Q));
}

/* a, or +0 where the mask is set */
static inline VECTOR vector_unless(VECTOR a, MASK mask)
{
    return REAL_OF(_mm256_andnot)(mask, a);
}

#include "x86_transpose.h"
#include "body.h"

#ifdef __clang__
#pragma clang attribute pop
#else
#pragma GCC pop_options
#endif

#endif
