/* output.h in single precision. */
#define SINGLE_PRECISION
#include "output.c"
