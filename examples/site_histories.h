/* site_histories: every sample of every response as one CSV file, whole or not at all. */
#ifndef SITE_HISTORIES_H
#define SITE_HISTORIES_H

#include "site_data.h"

/* One entry a sample: displacement against the base in m, acceleration against a fixed frame in
   m/s^2. */
typedef struct site_motion {
    double *displacement, *acceleration;
} site_motion;

/* motion has one entry for each piece of gear. 0, or -1 after a message and with nothing written.
   Numbers have as many digits as it takes to read the same double back. */
int site_histories_write(const char *path, const site_record *record, const site_gear *gear,
                         const site_motion *motion);

#endif
