/* trips_of_record GEAR TRIPS RECORD LOG: whether the log of live_watch has every passing of a level by the response
   to a whole record, and no other. The way here is another one: the record's own steps, whatever the live rate was;
   states inside them by rampwise_inside, a quarter of a millisecond apart; bisection between. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <rampwise.h>
#include "../../examples/site_data.h"
#include "../../examples/text_table.h"
#include "../../examples/trip_levels.h"

const char *const program_name = "trips_of_record";

enum { MOST = 4096, PLACES = 6 };

typedef struct passing {
    double time, value;
    int is_trip, direction;
} passing;

typedef struct passings {
    size_t n;
    passing at[MOST];
} passings;

/* One step of the record. */
typedef struct step {
    rampwise_coeffs c;
    rampwise_state begin;
    double p_next, time;
    int quantity;
} step;

static double value_at(const step *x, double fraction)
{
    rampwise_state at;
    if (rampwise_inside(&x->c, &x->begin, x->p_next, fraction, &at) != RAMPWISE_OK)
        return NAN;
    return x->quantity == RAMPWISE_DISPLACEMENT ? at.u
           : x->quantity == RAMPWISE_VELOCITY   ? at.v
                                                : rampwise_total_acceleration(&x->c, &at);
}

/* Where the value passes `threshold` between fractions a and b. */
static double bisect(const step *x, double threshold, double a, double b)
{
    const int above = value_at(x, a) >= threshold;
    for (int i = 0; i < 60; ++i) {
        const double middle = 0.5 * (a + b);
        if ((value_at(x, middle) >= threshold) == above)
            a = middle;
        else
            b = middle;
    }
    return b;
}

static void note(passings *all, const step *x, double fraction, int is_trip, int direction, double value)
{
    if (all->n < MOST)
        all->at[all->n++] = (passing){x->time + fraction * x->c.dt, value, is_trip, direction};
}

/* One level on one side of zero between two fractions of a step. */
static void look(passings *all, const step *x, const trip_level *level, int side, int *beyond, double a,
                 double b)
{
    const double size = *beyond ? level->level - level->hysteresis : level->level;
    const double end = side * value_at(x, b);
    if (*beyond ? end >= size : end < size)
        return;
    const int direction = *beyond ? -side : side;
    note(all, x, bisect(x, side * size, a, b), !*beyond, direction, side * size);
    *beyond = !*beyond;
}

static int expect(passings *all, const trip_level *level, const site_record *record)
{
    rampwise_system system;
    step x = {.quantity = level->of->quantity};
    int beyond[2] = {0, 0},
        status = rampwise_system_hertz(&system, level->gear->frequency, level->gear->damping_ratio);
    rampwise_start(&x.begin, 0, 0, record->acceleration[0]);
    for (size_t i = 0; i + 1 < record->n && status == RAMPWISE_OK; ++i) {
        const double dt = record->uniform ? record->interval : record->time[i + 1] - record->time[i];
        const int parts = (int)ceil(dt / 0.25e-3);
        x.time = record->time[i];
        x.p_next = record->acceleration[i + 1];
        if (i == 0 || dt != x.c.dt)
            status = rampwise_coeffs_make(&x.c, &system, dt, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
        for (int k = 0; k < parts; ++k)
            for (int side = 0; side < 2; ++side)
                look(all, &x, level, side ? -1 : 1, &beyond[side], k / (double)parts,
                     (k + 1) / (double)parts);
        rampwise_step(&x.c, &x.begin, x.p_next);
    }
    return status;
}

/* The fields of a line of the log, cut in place; 0 where there are not as many. */
static int cut(char *line, char *field[PLACES])
{
    for (int i = 0; i < PLACES; ++i) {
        field[i] = line;
        line = strchr(line, ',');
        if (line == NULL)
            return 0;
        *line++ = '\0';
    }
    return 1;
}

static int read_log(passings *all, const trip_level *level, const char *path)
{
    char line[400], *field[PLACES];
    FILE *const log = fopen(path, "r");
    if (log == NULL)
        return complain("%s: no log", path);
    while (fgets(line, sizeof line, log) != NULL) {
        if (!cut(line, field))
            return complain("%s: a line is cut off", path);
        if (strcmp(field[1], level->gear->name) != 0 ||
            strncmp(field[2], level->of->name, strlen(level->of->name)) != 0 || all->n == MOST)
            continue;
        all->at[all->n++] =
            (passing){atof(field[0]), atof(field[5]) / level->of->over, strcmp(field[3], "trip") == 0,
                      strcmp(field[4], "rising") == 0 ? 1 : -1};
    }
    fclose(log);
    return 0;
}

/* A log has times rounded to 1 ns and values of 9 digits; the stamps that a watch sees, and 1e-9 of a step, are far
   below a tenth of a nanosecond beside that. */
static int compare(const passings *want, const passings *got, const trip_level *level, double *furthest)
{
    if (want->n != got->n)
        return complain("%s: %zu passings in the record, %zu in the log", level->gear->name, want->n, got->n);
    for (size_t i = 0; i < want->n; ++i) {
        const passing *const a = &want->at[i], *const b = &got->at[i];
        *furthest = fmax(*furthest, fabs(a->time - b->time));
        if (!(fabs(a->time - b->time) <= 0.6e-9) || !(fabs(a->value - b->value) <= 1e-8 * fabs(a->value)) ||
            a->is_trip != b->is_trip || a->direction != b->direction)
            return complain("%s: passing %zu at %.12f is in the log at %.9f", level->gear->name, i, a->time,
                            b->time);
    }
    return 0;
}

int main(int argc, char **argv)
{
    static site_gear gear;
    static site_record record;
    static trip_levels levels;
    size_t passed = 0;
    double furthest = 0;
    if (argc != 5 || site_gear_read(&gear, argv[1]) != 0 || trip_levels_read(&levels, argv[2], &gear) != 0 ||
        site_record_read(&record, argv[3], (site_unit){"s", 1, 1}, (site_unit){"m/s2", 1, 1}) != 0)
        return 2;
    for (size_t i = 0; i < levels.n; ++i) {
        static passings want, got;
        want.n = got.n = 0;
        if (expect(&want, &levels.at[i], &record) != RAMPWISE_OK ||
            read_log(&got, &levels.at[i], argv[4]) != 0 ||
            compare(&want, &got, &levels.at[i], &furthest) != 0)
            return 1;
        passed += want.n;
    }
    printf("%zu passings, %.2g s apart at most\n", passed, furthest);
    site_record_free(&record);
    site_gear_free(&gear);
    return passed > 0 ? 0 : 1;
}
