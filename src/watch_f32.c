/* watch.h in single precision. */
#define SINGLE_PRECISION
#include "watch.c"
