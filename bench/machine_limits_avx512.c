/* Eight lanes a vector: AVX-512F. */
#include <immintrin.h>

#define VECTOR __m512d
#define LANES 8
#define LIMITS limits_avx512
#define INSTRUCTIONS RAMPWISE_AVX512
#define SET_NAME "AVX-512"
#define KEEP(x) __asm__ volatile("" : "+v"(x))
#define vector_all(a) _mm512_set1_pd(a)
#define vector_load(x) _mm512_loadu_pd(x)
#define vector_store(x, a) _mm512_storeu_pd((x), (a))
#define vector_fma(a, b, c) _mm512_fmadd_pd((a), (b), (c))
#define vector_product(a, b) _mm512_mul_pd((a), (b))
#define vector_sum(a, b) _mm512_add_pd((a), (b))
#define vector_size(a) _mm512_abs_pd(a)
#define vector_larger(a, b) _mm512_max_pd((a), (b))

#include "machine_limits_body.h"
