/* The checksum at the end of saved objects, so that tests can change what is before it unnoticed. */
#ifndef SEAL_H
#define SEAL_H

#include <stddef.h>
#include <stdint.h>

uint32_t checksum(const unsigned char *bytes, size_t count);

/* Makes the last four of the bytes right again. */
void seal(unsigned char *bytes, size_t count);

#endif
