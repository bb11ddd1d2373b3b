/* bank.h in single precision. */
#define SINGLE_PRECISION
#include "bank.c"
