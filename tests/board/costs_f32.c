/* The costs in single precision. */
#define SINGLE_PRECISION
#include "costs.c"
