/* The two ends of a record as its second differences show them: is one of them abrupt? */
#ifndef RAMPWISE_ENDS_H
#define RAMPWISE_ENDS_H

#include <stddef.h>
#include <stdint.h>

enum { END_SAMPLES = 4 }; /* next to each end */

typedef struct record_ends {
    uint64_t n; /* second differences taken, from that of sample 1 on */
    double largest, at_start, recent[END_SAMPLES];
} record_ends;

/* The second difference over 12 at the middle one of three samples. */
static inline double second_difference(double before, double now, double after)
{
    return ((before - now) + (after - now)) / 12;
}

void rampwise_ends_take_(record_ends *ends, size_t n, const double *d);

/* Bits of rampwise_evidence. */
uint32_t rampwise_ends_abrupt_(const record_ends *ends);

#endif
