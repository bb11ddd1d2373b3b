/* coefficients.h in single precision. */
#define SINGLE_PRECISION
#include "coefficients.c"
