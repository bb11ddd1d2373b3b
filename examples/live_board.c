#include "live_board.h"

#include <errno.h>
#include <string.h>
#include <time.h>
#include <unistd.h>
#include <rampwise.h>
#include "text_table.h"

enum { TURN_MS = 100, PLAIN_TURNS = 10 }; /* without a terminal, lines come once a second */

/* Seconds from nanoseconds, all digits. */
static void print_stamp(FILE *stream, int64_t stamp)
{
    fprintf(stream, "%lld.%09lld", (long long)(stamp / 1000000000), (long long)(stamp % 1000000000));
}

/* ---- the log ---- */

static void log_event(const live_board *board, const live_event *e)
{
    const trip_level *const level = &board->levels->at[e->row];
    print_stamp(board->log, e->stamp);
    fprintf(board->log, ",%s,%s (%s),%s,%s,%.9g,%s%s%s\n", level->gear->name, level->of->name,
            level->of->unit, e->is_trip ? "trip" : "return",
            e->direction > 0   ? "rising"
            : e->direction < 0 ? "falling"
                               : "-",
            e->value * level->of->over, e->flags & RAMPWISE_STARTED ? "started " : "",
            e->flags & RAMPWISE_BRIDGED ? "bridged " : "", e->flags & RAMPWISE_CLIPPED ? "clipped" : "");
}

static void write_log(live_board *board)
{
    const live_picture *const now = &board->drawing;
    if (board->log == NULL)
        return;
    for (size_t i = 0; i < now->n_events; ++i)
        log_event(board, &now->event[i]);
    if ((fflush(board->log) != 0 || ferror(board->log)) && board->failed == 0)
        board->failed = errno;
}

/* ---- the lines ---- */

static void show_row(const live_board *board, size_t i)
{
    const trip_level *const level = &board->levels->at[i];
    const live_row *const row = &board->drawing.row[i];
    const double over = level->of->over;
    fprintf(board->show, "%8.3f s  %-21s %-12s %+9.3f  peak %+9.3f %-5s  ",
            (double)board->drawing.stamp * 1e-9, level->gear->name, level->of->name, row->value * over,
            row->peak * over, level->of->unit);
    if (row->trips == 0)
        fputs("quiet", board->show);
    else {
        fprintf(board->show, "%s %llu, last ", row->tripped ? "TRIPPED" : "released",
                (unsigned long long)row->trips);
        print_stamp(board->show, row->last_trip);
    }
}

static void show_all(live_board *board)
{
    const size_t n = board->levels->n;
    if (!board->drawing.started)
        return;
    if (board->is_terminal && board->drawn)
        fprintf(board->show, "\033[%zuA", n); /* up, over the lines of the last time */
    if (board->is_terminal)
        fputs("\033[?7l", board->show); /* lines that are too long for it are cut, not wrapped */
    for (size_t i = 0; i < n; ++i) {
        show_row(board, i);
        fputs(board->is_terminal ? "\033[K\n" : "\n", board->show); /* and nothing of the last ones stays */
    }
    if (board->is_terminal)
        fputs("\033[?7h", board->show);
    board->drawn = 1;
    fflush(board->show);
}

/* ---- handing over ---- */

static void hand_over(live_picture *to, live_picture *from, size_t n_rows)
{
    const size_t room = LIVE_BOARD_EVENTS - to->n_events;
    const size_t count = from->n_events < room ? from->n_events : room;
    to->started = from->started;
    to->stamp = from->stamp;
    to->lost = from->lost;
    memcpy(to->row, from->row, n_rows * sizeof *to->row);
    memcpy(to->event + to->n_events, from->event, count * sizeof *to->event);
    to->n_events += count;
    from->n_events -= count;
    memmove(from->event, from->event + count, from->n_events * sizeof *from->event);
}

void live_board_offer(live_board *board, live_picture *mine)
{
    if (pthread_mutex_trylock(&board->lock) != 0)
        return;
    hand_over(&board->offered, mine, board->levels->n);
    pthread_mutex_unlock(&board->lock);
}

/* A turn later, or at the end. */
static int wait_turn(live_board *board)
{
    struct timespec until;
    clock_gettime(CLOCK_REALTIME, &until);
    until.tv_nsec += TURN_MS * 1000000;
    until.tv_sec += until.tv_nsec / 1000000000;
    until.tv_nsec %= 1000000000;
    pthread_mutex_lock(&board->lock);
    while (!board->done && pthread_cond_timedwait(&board->ended, &board->lock, &until) != ETIMEDOUT)
        ;
    board->drawing.n_events = 0;
    hand_over(&board->drawing, &board->offered, board->levels->n);
    const int done = board->done;
    pthread_mutex_unlock(&board->lock);
    return done;
}

static void *work(void *argument)
{
    live_board *const board = argument;
    for (int turn = 1, done = 0; !done; ++turn) {
        done = wait_turn(board);
        write_log(board);
        if (done || board->is_terminal || turn % PLAIN_TURNS == 0)
            show_all(board);
    }
    return NULL;
}

int live_board_start(live_board *board, const trip_levels *levels, FILE *show, FILE *log)
{
    board->levels = levels;
    board->show = show;
    board->log = log;
    board->is_terminal = isatty(fileno(show));
    if (log != NULL) {
        fputs("time (s),gear,quantity,event,direction,value,step\n", log);
        if (fflush(log) != 0)
            return complain("the log cannot be written: %s", strerror(errno));
    }
    pthread_mutex_init(&board->lock, NULL);
    pthread_cond_init(&board->ended, NULL);
    const int status = pthread_create(&board->thread, NULL, work, board);
    return status == 0 ? 0 : complain("no thread to show anything in: %s", strerror(status));
}

int live_board_finish(live_board *board, live_picture *mine)
{
    pthread_mutex_lock(&board->lock);
    hand_over(&board->offered, mine, board->levels->n);
    board->done = 1;
    pthread_cond_signal(&board->ended);
    pthread_mutex_unlock(&board->lock);
    pthread_join(board->thread, NULL);
    /* What found no room in the last picture comes after it. */
    while (mine->n_events > 0) {
        board->drawing.n_events = 0;
        hand_over(&board->drawing, mine, board->levels->n);
        write_log(board);
    }
    return board->failed == 0 ? 0 : complain("the log cannot be written: %s", strerror(board->failed));
}
