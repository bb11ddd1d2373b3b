/* Two lanes a vector: AArch64 Advanced SIMD. */
#include <arm_neon.h>

#define VECTOR float64x2_t
#define LANES 2
#define LIMITS limits_neon
#define INSTRUCTIONS RAMPWISE_NEON
#define SET_NAME "NEON"
#define KEEP(x) __asm__ volatile("" : "+w"(x))
#define vector_all(a) vdupq_n_f64(a)
#define vector_load(x) vld1q_f64(x)
#define vector_store(x, a) vst1q_f64((x), (a))
#define vector_fma(a, b, c) vfmaq_f64((c), (a), (b))
#define vector_product(a, b) vmulq_f64((a), (b))
#define vector_sum(a, b) vaddq_f64((a), (b))
#define vector_size(a) vabsq_f64(a)
#define vector_larger(a, b) vmaxnmq_f64((a), (b))

#include "machine_limits_body.h"
