/* Ratios of the figures, beside what was aimed at. */
#ifndef READINGS_H
#define READINGS_H

#include "task.h"

typedef struct reading {
    const char *id;
    char text[96];
    double value;
    double target; /* NAN where there is none */
    int at_least;  /* the target is a lower bound, else an upper one */
} reading;

enum { READINGS_MOST = 48 };

/* How many there are. */
size_t readings_make(reading *r, const task_list *list);

int reading_met(const reading *r);

#endif
