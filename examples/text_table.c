#include "text_table.h"

#include <errno.h>
#include <math.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

int complain(const char *format, ...)
{
    va_list values;
    va_start(values, format);
    fprintf(stderr, "%s: ", program_name);
    vfprintf(stderr, format, values);
    fputc('\n', stderr);
    va_end(values);
    return -1;
}

int text_table_open(text_table *table, const char *path, int blanks_separate)
{
    *table = (text_table){.path = path, .blanks_separate = blanks_separate};
    table->stream = fopen(path, "r");
    if (table->stream == NULL)
        return complain("%s: cannot be read: %s", path, strerror(errno));
    return 0;
}

void text_table_close(text_table *table)
{
    fclose(table->stream); /* nothing was written to it, so nothing can be lost */
    free(table->text);
}

/* The next line without its end; 1, 0 at the end of the file, -1 after a message. */
static int next_line(text_table *table)
{
    errno = 0;
    const ssize_t length = getline(&table->text, &table->room, table->stream);
    if (length < 0) {
        if (feof(table->stream) && !ferror(table->stream))
            return 0;
        return complain("%s: cannot be read: %s", table->path, strerror(errno));
    }
    ++table->line;
    if (strlen(table->text) != (size_t)length)
        return complain("%s:%zu: a zero byte; this is not plain text", table->path, table->line);
    table->text[strcspn(table->text, "\r\n")] = '\0';
    return 1;
}

/* strtod also reads hexadecimal, which no table here means. */
int text_is_number(const char *text, double *value)
{
    char *end;
    *value = strtod(text, &end);
    return end != text && *end == '\0' && strpbrk(text, "xX") == NULL;
}

static void keep_field(text_table *table, char *start, char *end)
{
    while (end > start && strchr(" \t", end[-1]) != NULL)
        --end;
    *end = '\0';
    if (table->n_fields < TEXT_TABLE_FIELDS)
        table->field[table->n_fields] = start;
    ++table->n_fields;
}

/* A separator is one comma or semicolon (or tab), with any blanks around it, or blanks alone. */
static void cut_fields(text_table *table, char *at)
{
    const char *const signs = table->blanks_separate ? ",;" : ",;\t";
    const char *const blanks = table->blanks_separate ? " \t" : " ";
    const char *const stops = table->blanks_separate ? ",; \t" : ",;\t";
    int more = 1;
    table->n_fields = 0;
    while (more) {
        char *const start = at + strspn(at, blanks);
        char *const end = start + strcspn(start, stops);
        at = end + strspn(end, blanks);
        more = *at != '\0';
        if (more && strchr(signs, *at) != NULL)
            ++at;
        keep_field(table, start, end);
    }
}

static int is_heading(const text_table *table)
{
    double value;
    for (size_t i = 0; i < table->n_fields && i < TEXT_TABLE_FIELDS; ++i)
        if (text_is_number(table->field[i], &value))
            return 0;
    return 1;
}

int text_table_next(text_table *table)
{
    int found;
    while ((found = next_line(table)) == 1) {
        char *start = table->text;
        if (table->line == 1 && strncmp(start, "\xEF\xBB\xBF", 3) == 0)
            start += 3;
        start += strspn(start, " \t");
        if (*start == '\0' || *start == '#')
            continue;
        cut_fields(table, start);
        const int first = !table->row_seen;
        table->row_seen = 1;
        if (!first || !is_heading(table))
            break;
    }
    return found;
}

int text_table_number(const text_table *table, size_t field, double *value)
{
    const char *const text = table->field[field];
    if (!text_is_number(text, value))
        return complain("%s:%zu: field %zu, '%s', is not a number", table->path, table->line, field + 1,
                        text);
    if (!isfinite(*value))
        return complain("%s:%zu: field %zu, '%s', is not a finite number", table->path, table->line,
                        field + 1, text);
    return 0;
}
