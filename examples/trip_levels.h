/* trip_levels: at what response of a piece of gear a trip goes off, read from a text table. */
#ifndef TRIP_LEVELS_H
#define TRIP_LEVELS_H

#include "site_data.h"

/* What a level is of, as the user names it; one of its unit is 1 / over of the SI unit. */
typedef struct trip_quantity {
    const char *name, *unit;
    double over;
    int quantity; /* RAMPWISE_DISPLACEMENT and so on */
} trip_quantity;

/* Beyond is from +level upwards and from -level downwards. */
typedef struct trip_level {
    const gear_piece *gear;
    const trip_quantity *of;
    double level, hysteresis; /* SI units; above 0, and from 0 to below level */
    size_t line;              /* in its file, for messages */
} trip_level;

enum { TRIP_LEVELS_MOST = 32 };

typedef struct trip_levels {
    const char *path;
    size_t n;
    trip_level at[TRIP_LEVELS_MOST];
} trip_levels;

/* 0, or -1 after a message. path and gear must outlive what is read. */
int trip_levels_read(trip_levels *levels, const char *path, const site_gear *gear);

#endif
