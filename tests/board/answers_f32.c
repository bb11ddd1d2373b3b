/* The answers in single precision. */
#define SINGLE_PRECISION
#include "answers.c"
