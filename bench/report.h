/* The figures as a table, as JSON, and as data of the pictures. */
#ifndef REPORT_H
#define REPORT_H

#include "latency.h"
#include "machine.h"
#include "readings.h"
#include "task.h"
#include "theta.h"

typedef struct report {
    int quick; /* too short to mean much */
    machine machine;
    char scipy[128]; /* empty where it is not there */
    size_t stretch, rounds, sets;
    task_list tasks;
    size_t reading_count;
    reading reading[READINGS_MOST];
    theta_point theta[THETA_POINTS];
    latency latency;
} report;

void report_print(const report *r);

/* 0 where a file could not be written. */
int report_json(const report *r, const char *path);
int report_cost(const report *r, const char *path);  /* error and cost of every method, CSV */
int report_theta(const report *r, const char *path); /* error and cost against theta, CSV */

/* The method that others are compared with. */
#define REPORT_BASE "bank_1000_largest"

#endif
