/* whole_file: a file of results, written whole or not at all. */
#ifndef WHOLE_FILE_H
#define WHOLE_FILE_H

#include <stdio.h>

/* Writes content to stream; whole_file_write looks after its errors. */
typedef void whole_file_writer(FILE *stream, const void *content);

/* input has the n_inputs paths that must not be written over. 0, or -1 after a message and with
   nothing written. */
int whole_file_write(const char *path, size_t n_inputs, const char *const *input, whole_file_writer *write,
                     const void *content);

/* With as many digits as it takes to read the same double back. */
void whole_file_number(FILE *stream, double value);

#endif
