/* What a stream asks of a watch beside its public functions. */
#ifndef RAMPWISE_WATCH_PRIVATE_H
#define RAMPWISE_WATCH_PRIVATE_H

#include "precision.h"
#include "rampwise/watch.h"

typedef PUBLIC(watch) real_watch;

/* Whether a watch may be retuned to c, and suits a stream of it. */
int PRIVATE(watch_tunable)(const real_watch *watch, const real_coeffs *c);

#endif
