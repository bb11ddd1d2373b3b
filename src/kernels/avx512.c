/* Eight lanes a vector, sixteen in single precision: x86-64 with AVX-512F, VL and DQ. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_X86

/* Before the target is set: nothing of the C library is compiled for it. */
#include <immintrin.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../precision.h"

#ifdef __clang__
#pragma clang attribute push(__attribute__((target("avx512f,avx512vl,avx512dq,avx2,fma"))),                  \
                             apply_to = function)
#else
#pragma GCC push_options
#pragma GCC target("avx512f,avx512vl,avx512dq,avx2,fma")
#endif

#ifdef SINGLE_PRECISION
#define WIDTH 16
#define VECTOR __m512
#define MASK __mmask16
#define REAL_OF(name) name##_ps
#define MASK_OF(name) name##_ps_mask
#else
#define WIDTH 8
#define VECTOR __m512d
#define MASK __mmask8
#define REAL_OF(name) name##_pd
#define MASK_OF(name) name##_pd_mask
#endif
#define KERNELS PRIVATE(kernels_avx512)
#define KERNELS_NAME RAMPWISE_AVX512

static inline VECTOR vector_load(const real *x)
{
    return REAL_OF(_mm512_loadu)(x);
}

static inline void vector_store(real *x, VECTOR a)
{
    REAL_OF(_mm512_storeu)(x, a);
}

static inline VECTOR vector_all(real a)
{
    return REAL_OF(_mm512_set1)(a);
}

static inline VECTOR vector_fma(VECTOR a, VECTOR b, VECTOR c)
{
    return REAL_OF(_mm512_fmadd)(a, b, c);
}

static inline VECTOR vector_product(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm512_mul)(a, b);
}

static inline VECTOR vector_sum(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm512_add)(a, b);
}

static inline VECTOR vector_difference(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm512_sub)(a, b);
}

static inline VECTOR vector_product_unless_zero(VECTOR a, VECTOR b)
{
    const MASK asked = MASK_OF(_mm512_cmp)(a, REAL_OF(_mm512_setzero)(), _CMP_NEQ_UQ);
    return REAL_OF(_mm512_maskz_mul)(asked, a, b);
}

static inline VECTOR vector_size(VECTOR a)
{
    return REAL_OF(_mm512_abs)(a);
}

static inline VECTOR vector_larger(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm512_max)(a, b);
}

/* The larger of |a| and top, which is not negative: the larger in size, its sign cleared, in one operation */
static inline VECTOR vector_larger_size(VECTOR a, VECTOR top)
{
    return REAL_OF(_mm512_range)(a, top, 0x0b);
}

static inline VECTOR vector_smaller(VECTOR a, VECTOR b)
{
    return REAL_OF(_mm512_min)(a, b);
}

static inline MASK vector_positive(VECTOR a)
{
    return MASK_OF(_mm512_cmp)(a, REAL_OF(_mm512_setzero)(), _CMP_GT_OQ);
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(MASK a)
{
    return a;
}

static inline MASK mask_below(VECTOR a, real limit)
{
    return MASK_OF(_mm512_cmp)(vector_size(a), REAL_OF(_mm512_set1)(limit), _CMP_LT_OQ);
}

static inline MASK mask_all(void)
{
    return (MASK)-1;
}

static inline MASK mask_both(MASK a, MASK b)
{
    return a & b;
}

static inline int mask_any(MASK a)
{
    return a;
}

static inline int vector_any_nan(VECTOR a)
{
    return MASK_OF(_mm512_cmp)(a, a, _CMP_UNORD_Q) != 0;
}

/* a, or +0 where the mask is set */
static inline VECTOR vector_unless(VECTOR a, MASK mask)
{
    return REAL_OF(_mm512_mask_mov)(a, mask, REAL_OF(_mm512_setzero)());
}

#include "x86_transpose.h"
#include "body.h"

#ifdef __clang__
#pragma clang attribute pop
#else
#pragma GCC pop_options
#endif

#endif
