#include "site_histories.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>
#include <rampwise.h>
#include "text_table.h"

static void write_number(FILE *stream, double value)
{
    char text[40];
    for (int digits = 15; digits <= 17; ++digits) {
        snprintf(text, sizeof text, "%.*g", digits, value);
        if (strtod(text, NULL) == value)
            break;
    }
    fputs(text, stream);
}

static void write_heading(FILE *stream, const site_gear *gear)
{
    fprintf(stream, "# response from rest to base acceleration, straight lines between samples\n");
    fprintf(stream, "# displacement against the base, acceleration against a fixed frame\n");
    fprintf(stream, "# rampwise %s, arithmetic edition %d\n", rampwise_version(),
            rampwise_arithmetic_edition());
    fprintf(stream, "time (s),base acceleration (m/s^2)");
    for (size_t j = 0; j < gear->n; ++j)
        fprintf(stream, ",%s: displacement (m),%s: total acceleration (m/s^2)", gear->piece[j].name,
                gear->piece[j].name);
    fputc('\n', stream);
}

static void write_samples(FILE *stream, const site_record *record, size_t n_gear, const site_motion *motion)
{
    for (size_t i = 0; i < record->n && !ferror(stream); ++i) {
        write_number(stream, record->time[i]);
        fputc(',', stream);
        write_number(stream, record->acceleration[i]);
        for (size_t j = 0; j < n_gear; ++j) {
            fputc(',', stream);
            write_number(stream, motion[j].displacement[i]);
            fputc(',', stream);
            write_number(stream, motion[j].acceleration[i]);
        }
        fputc('\n', stream);
    }
}

/* Everything is on the disk before the file gets its name, and a failed write shows here at the
   latest: ferror keeps it. */
static int finish(FILE *stream)
{
    const int failed = fflush(stream) != 0 || ferror(stream) || fsync(fileno(stream)) != 0;
    const int reason = errno;
    const int lost = fclose(stream) != 0;
    if (failed)
        errno = reason;
    return failed || lost ? -1 : 0;
}

static int is_file(const struct stat *target, const char *path)
{
    struct stat other;
    return stat(path, &other) == 0 && other.st_dev == target->st_dev && other.st_ino == target->st_ino;
}

/* A renamed file would take the place of whatever has the name: of a device, for one. */
static int check_target(const char *path, const site_record *record, const site_gear *gear)
{
    struct stat target;
    if (stat(path, &target) != 0)
        return 0;
    if (S_ISDIR(target.st_mode))
        return complain("%s: cannot be written: it is a directory", path);
    if (!S_ISREG(target.st_mode))
        return complain("%s: cannot be written: it is not a regular file", path);
    if (is_file(&target, record->path) || is_file(&target, gear->path))
        return complain("%s: cannot be written: it is one of the inputs", path);
    return 0;
}

static int write_and_rename(const char *path, const char *partial, const site_record *record,
                            const site_gear *gear, const site_motion *motion)
{
    FILE *const stream = fopen(partial, "wx");
    if (stream == NULL)
        return complain("%s: cannot be written: %s", path, strerror(errno));
    write_heading(stream, gear);
    write_samples(stream, record, gear->n, motion);
    if (finish(stream) == 0 && rename(partial, path) == 0)
        return 0;
    complain("%s: cannot be written: %s", path, strerror(errno));
    remove(partial);
    return -1;
}

int site_histories_write(const char *path, const site_record *record, const site_gear *gear,
                         const site_motion *motion)
{
    if (check_target(path, record, gear) != 0)
        return -1;
    const size_t room = strlen(path) + 40;
    char *const partial = malloc(room);
    if (partial == NULL)
        return complain("%s: cannot be written: %s", path, strerror(errno));
    snprintf(partial, room, "%s.%ld.partial", path, (long)getpid());
    const int status = write_and_rename(path, partial, record, gear, motion);
    free(partial);
    return status;
}
