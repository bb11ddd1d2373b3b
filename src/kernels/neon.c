/* Two lanes a vector, four in single precision: AArch64. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_NEON

#include <arm_neon.h>
#include <math.h>
#include <stddef.h>
#include "../precision.h"

#ifdef SINGLE_PRECISION
#define WIDTH 4
#define VECTOR float32x4_t
#define MASK uint32x4_t
#define REAL_OF(name) name##_f32
#define MASK_OF(name) name##_u32
#define BITS_OF_REAL vreinterpretq_u32_f32
#define REAL_OF_BITS vreinterpretq_f32_u32
#else
#define WIDTH 2
#define VECTOR float64x2_t
#define MASK uint64x2_t
#define REAL_OF(name) name##_f64
#define MASK_OF(name) name##_u64
#define BITS_OF_REAL vreinterpretq_u64_f64
#define REAL_OF_BITS vreinterpretq_f64_u64
#endif
#define KERNELS PRIVATE(kernels_neon)
#define KERNELS_NAME RAMPWISE_NEON

static inline VECTOR vector_load(const real *x)
{
    return REAL_OF(vld1q)(x);
}

static inline void vector_store(real *x, VECTOR a)
{
    REAL_OF(vst1q)(x, a);
}

static inline VECTOR vector_all(real a)
{
    return REAL_OF(vdupq_n)(a);
}

static inline VECTOR vector_fma(VECTOR a, VECTOR b, VECTOR c)
{
    return REAL_OF(vfmaq)(c, a, b);
}

static inline VECTOR vector_product(VECTOR a, VECTOR b)
{
    return REAL_OF(vmulq)(a, b);
}

static inline VECTOR vector_sum(VECTOR a, VECTOR b)
{
    return REAL_OF(vaddq)(a, b);
}

static inline VECTOR vector_difference(VECTOR a, VECTOR b)
{
    return REAL_OF(vsubq)(a, b);
}

/* a, or +0 where the mask is set */
static inline VECTOR vector_unless(VECTOR a, MASK mask)
{
    return REAL_OF_BITS(MASK_OF(vbicq)(BITS_OF_REAL(a), mask));
}

static inline VECTOR vector_product_unless_zero(VECTOR a, VECTOR b)
{
    return vector_unless(REAL_OF(vmulq)(a, b), REAL_OF(vceqzq)(a));
}

static inline VECTOR vector_size(VECTOR a)
{
    return REAL_OF(vabsq)(a);
}

static inline VECTOR vector_larger(VECTOR a, VECTOR b)
{
    return REAL_OF(vmaxq)(a, b);
}

/* The larger of |a| and top, which is not negative */
static inline VECTOR vector_larger_size(VECTOR a, VECTOR top)
{
    return vector_larger(vector_size(a), top);
}

static inline VECTOR vector_smaller(VECTOR a, VECTOR b)
{
    return REAL_OF(vminq)(a, b);
}

static inline MASK vector_positive(VECTOR a)
{
    return REAL_OF(vcgtzq)(a);
}

#ifndef SINGLE_PRECISION
/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(MASK a)
{
    return (unsigned)(vgetq_lane_u64(a, 0) & 1) | (unsigned)(vgetq_lane_u64(a, 1) & 2);
}
#endif

static inline MASK mask_below(VECTOR a, real limit)
{
    return REAL_OF(vcltq)(REAL_OF(vabsq)(a), REAL_OF(vdupq_n)(limit));
}

static inline MASK mask_all(void)
{
    return REAL_OF(vceqq)(vector_all(0), vector_all(0));
}

static inline MASK mask_both(MASK a, MASK b)
{
    return MASK_OF(vandq)(a, b);
}

static inline int mask_any(MASK a)
{
    return vmaxvq_u32((uint32x4_t)a) != 0;
}

static inline int vector_any_nan(VECTOR a)
{
    return REAL_OF(vaddvq)(a) != REAL_OF(vaddvq)(a);
}

#ifdef SINGLE_PRECISION
/* to[j][i] = from[i][j] */
static inline void transpose_4_by_4(const float *from, size_t from_stride, float *to, size_t to_stride)
{
    const float32x4x2_t ab = vtrnq_f32(vld1q_f32(from), vld1q_f32(from + from_stride));
    const float32x4x2_t cd = vtrnq_f32(vld1q_f32(from + 2 * from_stride), vld1q_f32(from + 3 * from_stride));
    vst1q_f32(to, vcombine_f32(vget_low_f32(ab.val[0]), vget_low_f32(cd.val[0])));
    vst1q_f32(to + to_stride, vcombine_f32(vget_low_f32(ab.val[1]), vget_low_f32(cd.val[1])));
    vst1q_f32(to + 2 * to_stride, vcombine_f32(vget_high_f32(ab.val[0]), vget_high_f32(cd.val[0])));
    vst1q_f32(to + 3 * to_stride, vcombine_f32(vget_high_f32(ab.val[1]), vget_high_f32(cd.val[1])));
}
#else
/* to[j][i] = from[i][j], in two by two parts */
static inline void transpose_4_by_4(const real *from, size_t from_stride, real *to, size_t to_stride)
{
    for (size_t i = 0; i < 4; i += 2)
        for (size_t j = 0; j < 4; j += 2) {
            const VECTOR a = REAL_OF(vld1q)(from + i * from_stride + j);
            const VECTOR b = REAL_OF(vld1q)(from + (i + 1) * from_stride + j);
            REAL_OF(vst1q)(to + j * to_stride + i, REAL_OF(vzip1q)(a, b));
            REAL_OF(vst1q)(to + (j + 1) * to_stride + i, REAL_OF(vzip2q)(a, b));
        }
}

#endif

#include "body.h"

#endif
