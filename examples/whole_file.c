#include "whole_file.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>
#include "text_table.h"

void whole_file_number(FILE *stream, double value)
{
    char text[40];
    for (int digits = 15; digits <= 17; ++digits) {
        snprintf(text, sizeof text, "%.*g", digits, value);
        if (strtod(text, NULL) == value)
            break;
    }
    fputs(text, stream);
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
static int check_target(const char *path, size_t n_inputs, const char *const *input)
{
    struct stat target;
    if (stat(path, &target) != 0)
        return 0;
    if (S_ISDIR(target.st_mode))
        return complain("%s: cannot be written: it is a directory", path);
    if (!S_ISREG(target.st_mode))
        return complain("%s: cannot be written: it is not a regular file", path);
    for (size_t i = 0; i < n_inputs; ++i)
        if (is_file(&target, input[i]))
            return complain("%s: cannot be written: it is one of the inputs", path);
    return 0;
}

static int write_and_rename(const char *path, const char *partial, whole_file_writer *write,
                            const void *content)
{
    FILE *const stream = fopen(partial, "wx");
    if (stream == NULL)
        return complain("%s: cannot be written: %s", path, strerror(errno));
    write(stream, content);
    if (finish(stream) == 0 && rename(partial, path) == 0)
        return 0;
    complain("%s: cannot be written: %s", path, strerror(errno));
    remove(partial);
    return -1;
}

int whole_file_write(const char *path, size_t n_inputs, const char *const *input, whole_file_writer *write,
                     const void *content)
{
    if (check_target(path, n_inputs, input) != 0)
        return -1;
    const size_t room = strlen(path) + 40;
    char *const partial = malloc(room);
    if (partial == NULL)
        return complain("%s: cannot be written: %s", path, strerror(errno));
    snprintf(partial, room, "%s.%ld.partial", path, (long)getpid());
    const int status = write_and_rename(path, partial, write, content);
    free(partial);
    return status;
}
