#include "trip_levels.h"

#include <string.h>
#include <rampwise.h>
#include "text_table.h"

static const trip_quantity quantities[] = {{"displacement", "mm", 1000, RAMPWISE_DISPLACEMENT},
                                           {"velocity", "mm/s", 1000, RAMPWISE_VELOCITY},
                                           {"acceleration", "m/s^2", 1, RAMPWISE_TOTAL_ACCELERATION},
                                           {NULL, NULL, 0, 0}};

static const gear_piece *find_gear(const site_gear *gear, const char *name)
{
    for (size_t j = 0; j < gear->n; ++j)
        if (strcmp(gear->piece[j].name, name) == 0)
            return &gear->piece[j];
    return NULL;
}

static const trip_quantity *find_quantity(const char *name)
{
    for (const trip_quantity *of = quantities; of->name != NULL; ++of)
        if (strcmp(of->name, name) == 0)
            return of;
    return NULL;
}

static int is_taken(const trip_levels *levels, const trip_level *now)
{
    for (size_t i = 0; i < levels->n; ++i)
        if (levels->at[i].gear == now->gear && levels->at[i].of == now->of)
            return complain("%s:%zu: '%s' has a level of %s already, in line %zu", levels->path, now->line,
                            now->gear->name, now->of->name, levels->at[i].line);
    return 0;
}

static int read_level(trip_levels *levels, const text_table *table, const site_gear *gear)
{
    trip_level now = {.line = table->line};
    if (table->n_fields != 4)
        return complain("%s:%zu: %zu field%s instead of 4, gear, quantity, level and hysteresis", table->path,
                        table->line, table->n_fields, table->n_fields == 1 ? "" : "s");
    now.gear = find_gear(gear, table->field[0]);
    if (now.gear == NULL)
        return complain("%s:%zu: there is no '%s' in %s", table->path, table->line, table->field[0],
                        gear->path);
    now.of = find_quantity(table->field[1]);
    if (now.of == NULL)
        return complain("%s:%zu: '%s' is not displacement, velocity or acceleration", table->path,
                        table->line, table->field[1]);
    if (is_taken(levels, &now) != 0 || text_table_number(table, 2, &now.level) != 0 ||
        text_table_number(table, 3, &now.hysteresis) != 0)
        return -1;
    if (now.level <= 0)
        return complain("%s:%zu: the level, %s %s, is not above 0", table->path, table->line, table->field[2],
                        now.of->unit);
    if (now.hysteresis < 0 || now.hysteresis >= now.level)
        return complain("%s:%zu: the hysteresis, %s %s, is not from 0 to below the level", table->path,
                        table->line, table->field[3], now.of->unit);
    if (levels->n == TRIP_LEVELS_MOST)
        return complain("%s:%zu: more than %d levels", table->path, table->line, TRIP_LEVELS_MOST);
    now.level /= now.of->over;
    now.hysteresis /= now.of->over;
    levels->at[levels->n++] = now;
    return 0;
}

int trip_levels_read(trip_levels *levels, const char *path, const site_gear *gear)
{
    text_table table;
    *levels = (trip_levels){.path = path};
    if (text_table_open(&table, path, 0) != 0)
        return -1;
    int found;
    while ((found = text_table_next(&table)) == 1)
        if (read_level(levels, &table, gear) != 0) {
            found = -1;
            break;
        }
    text_table_close(&table);
    if (found < 0)
        return -1;
    if (table.line == 0)
        return complain("%s: the file is empty", path);
    if (levels->n == 0)
        return complain("%s:%zu: the file ends without any level", path, table.line);
    return 0;
}
