/* live_source: lines as they arrive, from standard input or from UDP datagrams on this machine's own address,
   127.0.0.1. Nothing is allocated once it is open. */
#ifndef LIVE_SOURCE_H
#define LIVE_SOURCE_H

#include <stddef.h>
#include <stdint.h>

typedef struct live_source {
    int descriptor, datagrams;
    size_t begin, end; /* of what waits in text */
    char text[65536 + 1];
} live_source;

/* port 0 is standard input. 0, or -1 after a message. */
int live_source_open(live_source *source, uint16_t port);
void live_source_close(live_source *source);

/* Nothing came for a tenth of a second, or a signal did; or there will be no more; or a message was given. */
enum { LIVE_SOURCE_LINE = 1, LIVE_SOURCE_QUIET = 2, LIVE_SOURCE_END = 0, LIVE_SOURCE_FAILED = -1 };

/* Waits for the next line that is not blank, without its end; good until the next call. */
int live_source_next(live_source *source, char **line);

#endif
