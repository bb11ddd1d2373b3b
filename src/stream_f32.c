/* stream.h in single precision. */
#define SINGLE_PRECISION
#include "stream.c"
