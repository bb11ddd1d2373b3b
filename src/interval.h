/* The length of a step that is given in ticks. */
#ifndef RAMPWISE_INTERVAL_H
#define RAMPWISE_INTERVAL_H

#include <stdint.h>

/* dt ticks / per, rounded once; ticks and per up to 2^53. */
double rampwise_interval_dt_(double dt, uint64_t ticks, uint64_t per);

#endif
