/* The choice of kernels in single precision. */
#define SINGLE_PRECISION
#include "dispatch.c"
