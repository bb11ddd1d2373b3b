/* site_report: the largest values of every piece of gear as a table for a reader. */
#ifndef SITE_REPORT_H
#define SITE_REPORT_H

#include <stdio.h>
#include "site_data.h"

/* The value furthest from zero, and the first sample that has it. Begins as {0, 0}. */
typedef struct site_extreme {
    double value;
    size_t sample;
} site_extreme;

void site_note(site_extreme *furthest, double value, size_t sample);

typedef struct site_largest {
    site_extreme displacement; /* m, against the base */
    site_extreme acceleration; /* m/s^2, against a fixed frame */
    site_extreme force;        /* N, of spring and damper together */
    double may_reach;          /* m: bound on the displacement after the record, if the base then stays */
} site_largest;

/* All on standard output, whose errors are the caller's to check. largest has one entry a piece. */
void site_report_print(const site_record *record, const site_gear *gear, const site_largest *largest);

/* Parts of it that other reports share: the record, a blank and a value of four digits, and the
   caution at the end. */
void site_report_record(const site_record *record);
void site_report_value(int width, double value, int with_sign);
void site_report_caution(FILE *stream);

#endif
