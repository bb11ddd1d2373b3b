/* live_line: one sample as it is sent, a line of text:

       NUMBER,STAMP,VALUE      120,119998750,-0.0375
       NUMBER,end              20000,end

   NUMBER counts the samples, from any number on. STAMP is the instant of the sample in whole nanoseconds.
   VALUE is a decimal number in m/s^2, or, where both ends agree on a size of a count, a whole number of counts.
   "end" says that no sample comes from NUMBER on. A datagram holds one or more whole lines. */
#ifndef LIVE_LINE_H
#define LIVE_LINE_H

#include <stddef.h>
#include <stdint.h>

enum {
    LIVE_LINE_ROOM = 80,
    LIVE_LINE_RAIL = 32767,        /* counts: a 16-bit converter */
    LIVE_LINE_LARGEST = 1000000000 /* m/s^2: no responses overflow under it */
};

typedef struct live_line {
    uint64_t number;
    int64_t stamp; /* ns */
    double value;  /* m/s^2, LIVE_LINE_LARGEST at most; whole where counts are sent */
    int is_end;
} live_line;

/* Whether text is such a line; counts: whether VALUE must be a whole number from -LIVE_LINE_RAIL to
   LIVE_LINE_RAIL. Nothing is allocated. */
int live_line_read(live_line *line, const char *text, int counts);

/* With its end of line; the length. */
int live_line_print(char text[LIVE_LINE_ROOM], const live_line *line);

/* The interval of so many samples a second, as the text of an option: 0, or -1 after a message where that is no
   whole number of nanoseconds. */
int live_line_interval(uint64_t *nanoseconds, const char *rate);

/* The number of a UDP port, and the size of a count (m/s^2), likewise. */
int live_line_port(uint16_t *port, const char *text);
int live_line_count_size(double *size, const char *text);

#endif
