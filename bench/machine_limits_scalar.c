/* One lane at a time, with fused multiply-add in hardware. */
#include <math.h>

#define VECTOR double
#define LANES 1
#define LIMITS limits_scalar
#define INSTRUCTIONS RAMPWISE_BASELINE
#define SET_NAME "scalar"
#if defined(__x86_64__)
#define KEEP(x) __asm__ volatile("" : "+x"(x))
#else
#define KEEP(x) __asm__ volatile("" : "+w"(x))
#endif
#define vector_all(a) ((double)(a))
#define vector_load(x) (*(x))
#define vector_store(x, a) (*(x) = (a))
#define vector_fma(a, b, c) __builtin_fma((a), (b), (c))
#define vector_product(a, b) ((a) * (b))
#define vector_sum(a, b) ((a) + (b))
#define vector_size(a) fabs(a)
#define vector_larger(a, b) ((a) > (b) ? (a) : (b))

#include "machine_limits_body.h"
