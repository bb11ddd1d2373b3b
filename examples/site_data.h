/* site_data: a shake of the base, and the gear that stands on it, read from text tables. */
#ifndef SITE_DATA_H
#define SITE_DATA_H

#include <stddef.h>

/* A unit as the user names it: one of it is times / over seconds or m/s^2, so that a number is
   rounded once. */
typedef struct site_unit {
    const char *name;
    double times, over;
} site_unit;

typedef struct site_record {
    const char *path;
    site_unit time_unit, acceleration_unit; /* of the file */
    size_t n, room;
    double *time;         /* s, increasing */
    double *acceleration; /* m/s^2 */
    int uniform;
    double interval; /* s: the step if uniform, else the longest */
    double shortest; /* s */
} site_record;

typedef struct gear_piece {
    char *name;
    double mass, frequency, damping_ratio; /* kg, Hz, 1 is critical */
    size_t line;                           /* in its file, for messages */
} gear_piece;

typedef struct site_gear {
    const char *path;
    size_t n, room;
    gear_piece *piece;
} site_gear;

/* Both answer 0, or -1 after a message; what they have filled is freed by the two below it in every
   case. path must outlive what is read. */
int site_record_read(site_record *record, const char *path, site_unit time, site_unit acceleration);
int site_gear_read(site_gear *gear, const char *path);

void site_record_free(site_record *record);
void site_gear_free(site_gear *gear);

#endif
