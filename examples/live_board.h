/* live_board: shows where every trip stands and logs what happened, in a thread of its own, so that the sample
   path never waits for a terminal or a disk.

   The sample path keeps a picture and offers it after every sample: it is copied where the board is not just
   copying itself, and else stays for the next. Events wait in the picture until they are handed over. */
#ifndef LIVE_BOARD_H
#define LIVE_BOARD_H

#include <pthread.h>
#include <stdint.h>
#include <stdio.h>
#include "trip_levels.h"

enum { LIVE_BOARD_EVENTS = 1024 };

/* One trip level as it stands; SI units, stamps in ns. */
typedef struct live_row {
    double value, peak; /* now; furthest from zero since the start */
    int tripped;        /* latched */
    uint64_t trips;     /* how often the level was passed */
    int64_t last_trip;
} live_row;

typedef struct live_event {
    int64_t stamp; /* ns, rounded */
    double value;  /* SI unit */
    uint32_t flags;
    int16_t row, direction; /* 1 rising, -1 falling */
    int is_trip;            /* else the response has come back by the hysteresis */
} live_event;

typedef struct live_picture {
    int started;
    int64_t stamp;
    live_row row[TRIP_LEVELS_MOST];
    size_t n_events;
    uint64_t lost; /* events that found no room */
    live_event event[LIVE_BOARD_EVENTS];
} live_picture;

typedef struct live_board {
    const trip_levels *levels;
    FILE *show, *log; /* log may be NULL */
    int is_terminal, drawn;
    int done, failed; /* failed: the errno of the log */
    live_picture offered, drawing;
    pthread_mutex_t lock;
    pthread_cond_t ended;
    pthread_t thread;
} live_board;

/* Writes the log's heading and starts. 0, or -1 after a message. */
int live_board_start(live_board *board, const trip_levels *levels, FILE *show, FILE *log);

/* Never waits. Events that were taken over are gone from the picture. */
void live_board_offer(live_board *board, live_picture *mine);

/* Shows the last picture, and ends. 0, or -1 after a message where the log is not whole. */
int live_board_finish(live_board *board, live_picture *mine);

#endif
