/* text_table: the rows of a table kept as text, cut into fields, with messages that name the line.

   Read over: blank lines, lines that begin with '#', a UTF-8 byte order mark, CR before LF, and one
   heading (a first row in which nothing is a number). */
#ifndef TEXT_TABLE_H
#define TEXT_TABLE_H

#include <stddef.h>
#include <stdio.h>

enum { TEXT_TABLE_FIELDS = 4 };

typedef struct text_table {
    const char *path;
    FILE *stream;
    size_t line;         /* of the present row, from 1 */
    int blanks_separate; /* else only comma, semicolon and tab do, and a field may have blanks */
    int row_seen;
    char *text;
    size_t room;
    size_t n_fields; /* all of the row; pointers are kept to the first few */
    char *field[TEXT_TABLE_FIELDS];
} text_table;

/* For messages; every program defines its own. */
extern const char *const program_name;

/* One message on stderr, "PROGRAM: ...", and the answer -1, which callers hand on. */
int complain(const char *format, ...)
#ifdef __GNUC__
    __attribute__((format(printf, 1, 2)))
#endif
    ;

/* All answer -1 after a message. A table that did not open needs no closing. */
int text_table_open(text_table *table, const char *path, int blanks_separate);
int text_table_next(text_table *table); /* 1: a row of at least one field; 0: the end */
int text_table_number(const text_table *table, size_t field, double *value);
void text_table_close(text_table *table);

/* Whether all of text is one decimal number, which may be infinite or not a number. No message. */
int text_is_number(const char *text, double *value);

#endif
