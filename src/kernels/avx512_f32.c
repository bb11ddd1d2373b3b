/* AVX-512 in single precision. */
#define SINGLE_PRECISION
#include "avx512.c"
