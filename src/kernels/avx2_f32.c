/* AVX2 in single precision. */
#define SINGLE_PRECISION
#include "avx2.c"
