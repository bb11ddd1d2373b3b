#include "site_data.h"

#include <ctype.h>
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "text_table.h"

/* Room for one entry more: doubled, so that a long table costs few moves. 0 where there is none. */
static int grow(void **entries, size_t room, size_t size)
{
    if (room > SIZE_MAX / size)
        return 0;
    void *const larger = realloc(*entries, room * size);
    if (larger != NULL)
        *entries = larger;
    return larger != NULL;
}

static size_t doubled(size_t room)
{
    return room == 0 ? 64 : room > SIZE_MAX / 2 ? SIZE_MAX : 2 * room;
}

static double in_si(double value, site_unit unit)
{
    return value * unit.times / unit.over;
}

/* How finely the stamps are printed, the most of each over all of them. */
typedef struct printed {
    int decimals, significant;
} printed;

static void note_digits(printed *most, const char *text)
{
    const char *const exponent = strpbrk(text, "eE");
    int decimals = 0, significant = 0, after_point = 0;
    for (; *text != '\0' && text != exponent; ++text) {
        if (*text == '.')
            after_point = 1;
        if (!isdigit((unsigned char)*text))
            continue;
        decimals += after_point;
        significant += significant > 0 || *text != '0';
    }
    if (exponent != NULL) {
        const long power = strtol(exponent + 1, NULL, 10);
        decimals -= (int)(power < -400 ? -400 : power > 400 ? 400 : power);
    }
    if (decimals > most->decimals)
        most->decimals = decimals;
    if (significant > most->significant)
        most->significant = significant;
}

/* One unit in the last printed place of the largest stamp, for stamps printed with a fixed number
   of decimals as well as with a fixed number of significant digits. */
static double last_place(const printed *most, double largest)
{
    const double before_point = floor(log10(largest)) + 1;
    return fmax(pow(10, -most->decimals), pow(10, before_point - most->significant));
}

static int on_grid(const site_record *record, double interval, double tolerance)
{
    for (size_t i = 0; i < record->n; ++i)
        if (!(fabs(record->time[i] - record->time[0] - (double)i * interval) <= tolerance))
            return 0;
    return 1;
}

/* The interval with the fewest digits whose grid meets all stamps: 0.005 rather than a neighbour of
   it. 0 where no grid does. */
static double common_interval(const site_record *record, double tolerance)
{
    const double mean = (record->time[record->n - 1] - record->time[0]) / (double)(record->n - 1);
    if (!on_grid(record, mean, tolerance))
        return 0;
    for (int digits = 1; digits < 17; ++digits) {
        char text[40];
        snprintf(text, sizeof text, "%.*g", digits, mean);
        const double shorter = strtod(text, NULL);
        if (on_grid(record, shorter, tolerance))
            return shorter;
    }
    return mean;
}

/* Stamps of a uniform record are printed with few digits, so their intervals are not quite equal.
   Two rounded ends move the mean line, and a rounded stamp leaves it, by half a unit in the last
   place each. Where that is more than a tenth of an interval, nobody could tell rounding from a
   truly irregular record, and only equal intervals count as equal. */
static void find_interval(site_record *record, const printed *most)
{
    const double first = record->time[0], last = record->time[record->n - 1];
    const double mean = (last - first) / (double)(record->n - 1);
    const double unit = in_si(1, record->time_unit);
    const double largest = fmax(fabs(first), fabs(last));
    const double place = last_place(most, largest / unit) * unit;
    double tolerance = fmax(4 * DBL_EPSILON * largest, 1e-6 * mean);
    if (place <= mean / 10)
        tolerance = fmax(tolerance, place);

    double longest = 0;
    record->shortest = INFINITY;
    for (size_t i = 1; i < record->n; ++i) {
        longest = fmax(longest, record->time[i] - record->time[i - 1]);
        record->shortest = fmin(record->shortest, record->time[i] - record->time[i - 1]);
    }
    const double common = common_interval(record, tolerance);
    record->uniform = common > 0;
    record->interval = record->uniform ? common : longest;
}

static int add_sample(site_record *record, double time, double acceleration)
{
    if (record->n == record->room) {
        const size_t room = doubled(record->room);
        void *times = record->time, *accelerations = record->acceleration;
        const int grown = grow(&times, room, sizeof *record->time) &&
                          grow(&accelerations, room, sizeof *record->acceleration);
        record->time = times;
        record->acceleration = accelerations;
        if (!grown)
            return complain("%s: too long for the memory of this machine", record->path);
        record->room = room;
    }
    record->time[record->n] = time;
    record->acceleration[record->n] = acceleration;
    ++record->n;
    return 0;
}

static int read_sample(site_record *record, const text_table *table)
{
    double time, acceleration;
    if (table->n_fields != 2)
        return complain("%s:%zu: %zu field%s instead of 2, time and acceleration%s", table->path, table->line,
                        table->n_fields, table->n_fields == 1 ? "" : "s",
                        table->n_fields > 2 ? " (numbers have a decimal point, not a comma)" : "");
    if (text_table_number(table, 0, &time) != 0 || text_table_number(table, 1, &acceleration) != 0)
        return -1;
    time = in_si(time, record->time_unit);
    acceleration = in_si(acceleration, record->acceleration_unit);
    if (!isfinite(acceleration))
        return complain("%s:%zu: field 2, '%s', is too large", table->path, table->line, table->field[1]);
    if (record->n > 0 && time <= record->time[record->n - 1])
        return complain("%s:%zu: time %s is not later than the one before it", table->path, table->line,
                        table->field[0]);
    return add_sample(record, time, acceleration);
}

int site_record_read(site_record *record, const char *path, site_unit time, site_unit acceleration)
{
    text_table table;
    printed most = {-400, 0};
    *record = (site_record){.path = path, .time_unit = time, .acceleration_unit = acceleration};
    if (text_table_open(&table, path, 1) != 0)
        return -1;
    int found;
    while ((found = text_table_next(&table)) == 1) {
        if (read_sample(record, &table) != 0) {
            found = -1;
            break;
        }
        note_digits(&most, table.field[0]);
    }
    text_table_close(&table);
    if (found < 0)
        return -1;
    if (table.line == 0)
        return complain("%s: the file is empty", path);
    if (record->n < 2)
        return complain("%s:%zu: the file ends with %s; a record needs at least 2", path, table.line,
                        record->n == 0 ? "no sample" : "one sample");
    find_interval(record, &most);
    return 0;
}

static int check_name(const site_gear *gear, const text_table *table, const char *name)
{
    if (*name == '\0')
        return complain("%s:%zu: the name is missing", table->path, table->line);
    if (strpbrk(name, ",\"") != NULL)
        return complain("%s:%zu: a name cannot have a comma or a double quote", table->path, table->line);
    for (size_t i = 0; i < gear->n; ++i)
        if (strcmp(gear->piece[i].name, name) == 0)
            return complain("%s:%zu: the name '%s' is taken by line %zu", table->path, table->line, name,
                            gear->piece[i].line);
    return 0;
}

static int read_numbers(gear_piece *piece, const text_table *table)
{
    if (text_table_number(table, 1, &piece->mass) != 0 ||
        text_table_number(table, 2, &piece->frequency) != 0 ||
        text_table_number(table, 3, &piece->damping_ratio) != 0)
        return -1;
    if (piece->mass <= 0)
        return complain("%s:%zu: the mass, %s kg, is not above 0", table->path, table->line, table->field[1]);
    if (piece->frequency <= 0)
        return complain("%s:%zu: the natural frequency, %s Hz, is not above 0", table->path, table->line,
                        table->field[2]);
    if (piece->damping_ratio < 0)
        return complain("%s:%zu: the damping ratio, %s, is negative", table->path, table->line,
                        table->field[3]);
    return 0;
}

static int add_piece(site_gear *gear, gear_piece piece, const char *name)
{
    void *pieces = gear->piece;
    const size_t room = gear->n < gear->room ? gear->room : doubled(gear->room);
    const int grown = room == gear->room || grow(&pieces, room, sizeof piece);
    gear->piece = pieces;
    piece.name = grown ? strdup(name) : NULL;
    if (piece.name == NULL)
        return complain("%s: too long for the memory of this machine", gear->path);
    gear->room = room;
    gear->piece[gear->n++] = piece;
    return 0;
}

static int read_piece(site_gear *gear, const text_table *table)
{
    gear_piece piece = {.line = table->line};
    if (table->n_fields != 4)
        return complain("%s:%zu: %zu field%s instead of 4, name, mass, natural frequency and "
                        "damping ratio",
                        table->path, table->line, table->n_fields, table->n_fields == 1 ? "" : "s");
    if (check_name(gear, table, table->field[0]) != 0 || read_numbers(&piece, table) != 0)
        return -1;
    return add_piece(gear, piece, table->field[0]);
}

int site_gear_read(site_gear *gear, const char *path)
{
    text_table table;
    *gear = (site_gear){.path = path};
    if (text_table_open(&table, path, 0) != 0)
        return -1;
    int found;
    while ((found = text_table_next(&table)) == 1)
        if (read_piece(gear, &table) != 0) {
            found = -1;
            break;
        }
    text_table_close(&table);
    if (found < 0)
        return -1;
    if (table.line == 0)
        return complain("%s: the file is empty", path);
    if (gear->n == 0)
        return complain("%s:%zu: the file ends without any gear", path, table.line);
    return 0;
}

void site_record_free(site_record *record)
{
    free(record->time);
    free(record->acceleration);
}

void site_gear_free(site_gear *gear)
{
    for (size_t i = 0; i < gear->n; ++i)
        free(gear->piece[i].name);
    free(gear->piece);
}
