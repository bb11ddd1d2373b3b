/* The settled start in single precision. */
#define SINGLE_PRECISION
#include "step.c"
