/* Two lanes a vector: AArch64. */
#include "sets.h"

#ifdef RAMPWISE_BUILD_NEON

#include <arm_neon.h>
#include <stddef.h>

#define WIDTH 2
#define VECTOR float64x2_t
#define MASK uint64x2_t
#define KERNELS rampwise_kernels_neon_
#define KERNELS_NAME RAMPWISE_NEON

static inline float64x2_t vector_load(const double *x)
{
    return vld1q_f64(x);
}

static inline void vector_store(double *x, float64x2_t a)
{
    vst1q_f64(x, a);
}

static inline float64x2_t vector_all(double a)
{
    return vdupq_n_f64(a);
}

static inline float64x2_t vector_fma(float64x2_t a, float64x2_t b, float64x2_t c)
{
    return vfmaq_f64(c, a, b);
}

static inline float64x2_t vector_product(float64x2_t a, float64x2_t b)
{
    return vmulq_f64(a, b);
}

static inline float64x2_t vector_sum(float64x2_t a, float64x2_t b)
{
    return vaddq_f64(a, b);
}

static inline float64x2_t vector_difference(float64x2_t a, float64x2_t b)
{
    return vsubq_f64(a, b);
}

static inline float64x2_t vector_masked(float64x2_t a, uint64x2_t cleared)
{
    return vreinterpretq_f64_u64(vbicq_u64(vreinterpretq_u64_f64(a), cleared));
}

static inline float64x2_t vector_product_unless_zero(float64x2_t a, float64x2_t b)
{
    return vector_masked(vmulq_f64(a, b), vceqzq_f64(a));
}

static inline float64x2_t vector_size(float64x2_t a)
{
    return vabsq_f64(a);
}

static inline float64x2_t vector_larger(float64x2_t a, float64x2_t b)
{
    return vmaxq_f64(a, b);
}

/* The larger of |a| and top, which is not negative */
static inline float64x2_t vector_larger_size(float64x2_t a, float64x2_t top)
{
    return vector_larger(vector_size(a), top);
}

static inline float64x2_t vector_smaller(float64x2_t a, float64x2_t b)
{
    return vminq_f64(a, b);
}

static inline uint64x2_t vector_positive(float64x2_t a)
{
    return vcgtzq_f64(a);
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(uint64x2_t a)
{
    return (unsigned)(vgetq_lane_u64(a, 0) & 1) | (unsigned)(vgetq_lane_u64(a, 1) & 2);
}

static inline uint64x2_t mask_below(float64x2_t a, double limit)
{
    return vcltq_f64(vabsq_f64(a), vdupq_n_f64(limit));
}

static inline uint64x2_t mask_all(void)
{
    return vdupq_n_u64(UINT64_MAX);
}

static inline uint64x2_t mask_both(uint64x2_t a, uint64x2_t b)
{
    return vandq_u64(a, b);
}

static inline int mask_any(uint64x2_t a)
{
    return (vgetq_lane_u64(a, 0) | vgetq_lane_u64(a, 1)) != 0;
}

static inline int vector_any_nan(float64x2_t a)
{
    return vaddvq_f64(a) != vaddvq_f64(a);
}

/* a, or +0 where the mask is set and |a| < limit */
static inline float64x2_t vector_unless_below(float64x2_t a, double limit, uint64x2_t mask)
{
    return vector_masked(a, vandq_u64(mask, mask_below(a, limit)));
}

/* to[j][i] = from[i][j], in two by two parts */
static inline void transpose_4_by_4(const double *from, size_t from_stride, double *to, size_t to_stride)
{
    for (size_t i = 0; i < 4; i += 2)
        for (size_t j = 0; j < 4; j += 2) {
            const float64x2_t a = vld1q_f64(from + i * from_stride + j);
            const float64x2_t b = vld1q_f64(from + (i + 1) * from_stride + j);
            vst1q_f64(to + j * to_stride + i, vzip1q_f64(a, b));
            vst1q_f64(to + (j + 1) * to_stride + i, vzip2q_f64(a, b));
        }
}

#include "body.h"

#endif
