/* Reads the shared vectors of tests/vectors: one object a line, numbers as hexadecimal floats in quotes. */
#ifndef VECTORS_H
#define VECTORS_H

#include <stddef.h>
#include <stdio.h>

typedef struct vectors {
    FILE *file;
    char line[1 << 16];
} vectors;

/* Opens file `name` of the directory RAMPWISE_VECTORS of the environment, or of TEST_VECTORS. */
void vectors_open(vectors *v, const char *name);

/* The next object, kept in v->line; 0 at the end, where the file is closed. */
int vectors_next(vectors *v);

/* Of the present object, which fails the test where the key is missing. */
const char *vectors_text(const vectors *v, const char *key, char text[static 32]);
double vectors_number(const vectors *v, const char *key);
size_t vectors_numbers(const vectors *v, const char *key, size_t capacity, double *x);

#endif
