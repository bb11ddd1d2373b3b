/* The lanes in single precision. */
#define SINGLE_PRECISION
#include "lanes.c"
