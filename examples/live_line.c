#include "live_line.h"

#include <ctype.h>
#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "text_table.h"

/* Samples and nanoseconds that leave room for sums: 142 years of the latter. */
static const unsigned long long most = 1ULL << 62;

/* Digits up to `stop`, which is passed. NULL where it is anything else. */
static const char *whole_number(const char *text, char stop, unsigned long long *value)
{
    char *end;
    if (!isdigit((unsigned char)*text))
        return NULL;
    errno = 0;
    *value = strtoull(text, &end, 10);
    return errno == 0 && *value < most && *end == stop ? end + 1 : NULL;
}

static int is_count(double value)
{
    return value == rint(value) && fabs(value) <= LIVE_LINE_RAIL;
}

int live_line_read(live_line *line, const char *text, int counts)
{
    unsigned long long number, stamp;
    *line = (live_line){0};
    text = whole_number(text, ',', &number);
    if (text == NULL)
        return 0;
    line->number = number;
    line->is_end = strcmp(text, "end") == 0;
    if (line->is_end)
        return 1;
    text = whole_number(text, ',', &stamp);
    if (text == NULL || !text_is_number(text, &line->value) || !(fabs(line->value) <= LIVE_LINE_LARGEST))
        return 0;
    line->stamp = (int64_t)stamp;
    return !counts || is_count(line->value);
}

int live_line_print(char text[LIVE_LINE_ROOM], const live_line *line)
{
    const unsigned long long number = line->number;
    return line->is_end ? snprintf(text, LIVE_LINE_ROOM, "%llu,end\n", number)
                        : snprintf(text, LIVE_LINE_ROOM, "%llu,%lld,%.17g\n", number, (long long)line->stamp,
                                   line->value);
}

int live_line_interval(uint64_t *nanoseconds, const char *rate)
{
    double hertz;
    if (!text_is_number(rate, &hertz) || !(hertz >= 1 && hertz <= 1e6))
        return complain("--rate: '%s' is not from 1 to 1000000 samples a second", rate);
    const double interval = rint(1e9 / hertz);
    if (fabs(interval * hertz - 1e9) > 1e-3)
        return complain("--rate: %s samples a second are no whole number of nanoseconds apart", rate);
    *nanoseconds = (uint64_t)interval;
    return 0;
}

int live_line_port(uint16_t *port, const char *text)
{
    unsigned long long number;
    if (whole_number(text, '\0', &number) == NULL || number < 1 || number > 65535)
        return complain("--port: '%s' is not from 1 to 65535", text);
    *port = (uint16_t)number;
    return 0;
}

int live_line_count_size(double *size, const char *text)
{
    if (!text_is_number(text, size) || !(*size > 0 && *size <= 1e6))
        return complain("--count-size: '%s' is not above 0 and up to 1000000 m/s^2", text);
    return 0;
}
