/* NEON in single precision. */
#define SINGLE_PRECISION
#include "neon.c"
