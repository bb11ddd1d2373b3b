/* Four lanes a vector: AVX2 with fused multiply-add. */
#include <immintrin.h>

#define VECTOR __m256d
#define LANES 4
#define LIMITS limits_avx2
#define INSTRUCTIONS RAMPWISE_AVX2
#define SET_NAME "AVX2"
#define KEEP(x) __asm__ volatile("" : "+x"(x))
#define vector_all(a) _mm256_set1_pd(a)
#define vector_load(x) _mm256_loadu_pd(x)
#define vector_store(x, a) _mm256_storeu_pd((x), (a))
#define vector_fma(a, b, c) _mm256_fmadd_pd((a), (b), (c))
#define vector_product(a, b) _mm256_mul_pd((a), (b))
#define vector_sum(a, b) _mm256_add_pd((a), (b))
#define vector_size(a) _mm256_andnot_pd(_mm256_set1_pd(-0.0), (a))
#define vector_larger(a, b) _mm256_max_pd((a), (b))

#include "machine_limits_body.h"
