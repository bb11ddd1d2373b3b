/* The baseline in single precision. */
#define SINGLE_PRECISION
#include "baseline.c"
