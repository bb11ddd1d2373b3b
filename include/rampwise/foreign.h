/* rampwise/foreign.h: for callers from other languages, which cannot read these headers.

   Any thread. Both compare names letter by letter; nothing is allocated. */
#ifndef RAMPWISE_FOREIGN_H
#define RAMPWISE_FOREIGN_H

#include <stddef.h>
#include "linkage.h"

RAMPWISE_BEGIN

/* The value of a public constant by its full name, for example "RAMPWISE_FORCE".
   RAMPWISE_ERROR_NAME if there is none, _MISSING. Since 0.1. */
RAMPWISE_API int rampwise_constant(const char *name, int *value);

/* The size in bytes of a public struct by its name, for example "rampwise_coeffs"; 0 if there is
   none. Since 0.1. */
RAMPWISE_API size_t rampwise_struct_size(const char *name);

RAMPWISE_END

#endif
