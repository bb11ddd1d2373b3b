/* motion.h in single precision. */
#define SINGLE_PRECISION
#include "motion.c"
