#include "vectors.h"

#include <check.h>
#include <stdlib.h>
#include <string.h>

#ifndef TEST_VECTORS
#define TEST_VECTORS "tests/vectors"
#endif

void vectors_open(vectors *v, const char *name)
{
    char path[4096];
    const char *const directory = getenv("RAMPWISE_VECTORS");
    snprintf(path, sizeof path, "%s/%s.json", directory != NULL ? directory : TEST_VECTORS, name);
    v->file = fopen(path, "r");
    ck_assert_msg(v->file != NULL, "%s cannot be read", path);
}

int vectors_next(vectors *v)
{
    while (fgets(v->line, sizeof v->line, v->file) != NULL) {
        ck_assert_msg(strchr(v->line, '\n') != NULL, "a line is too long");
        if (strchr(v->line, '{') != NULL)
            return 1;
    }
    fclose(v->file);
    return 0;
}

/* What follows `"key": `. */
static const char *value_of(const vectors *v, const char *key)
{
    char quoted[64];
    snprintf(quoted, sizeof quoted, "\"%s\": ", key);
    const char *const found = strstr(v->line, quoted);
    ck_assert_msg(found != NULL, "there is no %s", key);
    return found + strlen(quoted);
}

/* The number in quotes at *at, which moves behind it. */
static double number_at(const char **at)
{
    char *end;
    ck_assert(**at == '"');
    const double x = strtod(*at + 1, &end);
    ck_assert(*end == '"');
    *at = end + 1;
    return x;
}

const char *vectors_text(const vectors *v, const char *key, char text[static 32])
{
    ck_assert_int_eq(sscanf(value_of(v, key), "\"%31[^\"]\"", text), 1);
    return text;
}

double vectors_number(const vectors *v, const char *key)
{
    const char *at = value_of(v, key);
    return number_at(&at);
}

size_t vectors_numbers(const vectors *v, const char *key, size_t capacity, double *x)
{
    size_t n = 0;
    const char *at = value_of(v, key);
    ck_assert(*at == '[');
    while (*at != ']') {
        at += strspn(at, "[, ");
        ck_assert_uint_lt(n, capacity);
        x[n++] = number_at(&at);
    }
    return n;
}
