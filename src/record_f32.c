/* record.h in single precision. */
#define SINGLE_PRECISION
#include "record.c"
