/* rampwise/watch.h: what a live response does between its samples: greatest and least values, levels passed.

   A watch looks at one output (output.h) of one oscillator and is told every step, by a stream (stream.h)
   that it is attached to or by rampwise_watch_step. It keeps

   - the greatest and the least value since the start, since the last reset, and over the last whole steps (a
     bridge that is longer counts as a whole);
   - for up to four levels: whether the response is beyond, the crossings up and down with their exact
     instants, a latch, and counts;
   - a queue of events in the caller's memory.

   Inside a step the response is a line plus a free vibration. A step is cut into pieces so short that the
   second derivative of the output has one zero in each at most; between the zeros of the slope the output is
   monotone, so its extremes and crossings are bracketed, and refined on a power series of the piece. Instants
   are exact to 1e-9 of a step where the response passes the level at an angle. Where an output jumps at a
   sample, because the input or its slope does, the values on both sides count, and a level between them is
   passed at that sample.

   Work a step: one piece for each radian of w dt or unit of c dt/m, whichever are more, as a power of two, 64
   at most. A piece has at most two extremes and, for each level, three crossings; one of them costs at
   most 100 evaluations of a polynomial of degree 24, and most steps have none: some tens of operations.
   A window costs 4 log2(steps) comparisons and some. A step of another length than the coefficients'
   that needs more than one piece costs one making of coefficients. A step that would need more than 64
   pieces (a long gap in a stream) is not looked into: the watch is reset, the reset is counted, and
   levels see the value at its end.

   Threads: a watch belongs to one thread at a time, that of its stream. Nothing is allocated, locked or
   waited for. All since 0.1. */
#ifndef RAMPWISE_WATCH_H
#define RAMPWISE_WATCH_H

#include <stddef.h>
#include "output.h"
#include "step.h"

enum { RAMPWISE_WATCH_LEVELS = 4 };

/* Flags of a sample in a stream, and of what its neighbours' lines touch. */
enum {
    RAMPWISE_STARTED = 1, /* the stream starts with this sample */
    RAMPWISE_CLIPPED = 2, /* an end of the step's line was clipped at a rail */
    RAMPWISE_BRIDGED = 4, /* the step's line was drawn over missing samples, or the load held for them */
    RAMPWISE_WAITING = 8  /* missing: the value is that of the last good sample */
};

/* Which greatest and least value. */
enum { RAMPWISE_SINCE_START = 51, RAMPWISE_SINCE_RESET = 52, RAMPWISE_IN_WINDOW = 53 };

/* Kinds of event. */
enum {
    RAMPWISE_EVENT_LEVEL = 55, /* a level is passed */
    RAMPWISE_EVENT_RESET = 56  /* a step too long to be looked into has reset the watch */
};

/* What happened, when and where: at (sample + fraction) dt, 0 <= fraction < 1. In a stream of
   irregular stamps the fraction is of the step as it was; a bridge over missing samples counts
   as many steps as it spans. */
typedef struct rampwise_event {
    uint64_t sample;
    double fraction;
    double value; /* of the output then */
    int32_t kind;
    int32_t direction; /* 1 rising, -1 falling, 0 neither */
    int32_t output;    /* the watch's number */
    int32_t level;     /* 0 to 3, or -1 */
    uint32_t flags;    /* of the step */
    int32_t reserve;
} rampwise_event;

/* A level. With direction 1 the response is beyond it from the instant that it comes up to `value` (equal
   counts) until it falls below value - hysteresis; with direction -1, from the instant that it comes down to
   `value` until it rises above value + hysteresis. The first value a watch sees counts as coming from
   the side that is not beyond. */
typedef struct rampwise_level {
    double value, hysteresis; /* hysteresis 0 or more */
    int32_t direction;        /* 1 or -1 */
    int32_t latch;            /* 1: once passed, tripped until released; 0: tripped while beyond */
} rampwise_level;

/* How a level stands: beyond and tripped are 0 or 1. `passed` counts the times it went beyond, `cycles` those
   that it came back as well. */
typedef struct rampwise_level_report {
    int32_t beyond, tripped;
    uint64_t passed, cycles;
} rampwise_level_report;

/* One place of a window. */
typedef struct rampwise_watched {
    rampwise_instant at;
    uint64_t begin;
} rampwise_watched;

typedef struct rampwise_instant_f32 {
    uint64_t sample;
    float value, fraction;
} rampwise_instant_f32;

typedef struct rampwise_peak_f32 {
    rampwise_instant_f32 high, low;
} rampwise_peak_f32;

typedef struct rampwise_watched_f32 {
    rampwise_instant_f32 at;
    uint64_t begin;
} rampwise_watched_f32;

typedef struct rampwise_watch_options {
    size_t size; /* of this struct */
    rampwise_output output;
    rampwise_level level[RAMPWISE_WATCH_LEVELS];
    int32_t level_count; /* 0 to 4 */
    int32_t number;      /* the caller's name for the output, in its events */
    /* The window: 2 window_steps places of rampwise_watched (rampwise_watched_f32 in single precision), NULL
       and 0 for none. */
    void *window;
    size_t window_steps;
    /* The queue of events, NULL and 0 for none. An event that finds it full is lost and counted. */
    rampwise_event *events;
    size_t event_capacity;
    size_t reserve[4];
} rampwise_watch_options;

/* Both sides of one span. */
struct rampwise_watch_queue_ {
    rampwise_watched *place;
    size_t first, count;
};

struct rampwise_watch_level_ {
    double enter, leave, sign; /* in the level's own direction: up is beyond */
    uint64_t passed, cycles;
    int32_t beyond, latch, latched, reserve;
};

/* In the caller's memory, and of fixed size; all members are private. It must stay where it is while it is
   attached to a stream. */
typedef struct rampwise_watch {
    struct rampwise_watch *next_; /* of the same stream */
    rampwise_coeffs piece_;       /* of the usual step, where that has several pieces */
    rampwise_output output_;
    double row_[4], relative_[3]; /* over {u, v, p, p - p_before}; over motion against the base, and p */
    double damping_, stiffness_, inertia_, step_, dt_; /* step_: dt as real numbers are */
    double now_;                                       /* the value at the sample reached */
    uint64_t sample_;
    rampwise_peak since_start_, since_reset_;
    struct rampwise_watch_queue_ high_, low_;
    size_t window_steps_;
    struct rampwise_watch_level_ level_[RAMPWISE_WATCH_LEVELS];
    rampwise_event *events_;
    size_t event_capacity_, event_first_, event_count_;
    uint64_t lost_, resets_;
    int32_t level_count_, number_, pieces_, input_, between_, jumps_, started_, reserve_;
} rampwise_watch;

/* In single precision. Options, events, reports and peaks read are the same; nothing in a step is double but
   the numbers in an event. */
struct rampwise_watch_queue_f32_ {
    rampwise_watched_f32 *place;
    size_t first, count;
};

struct rampwise_watch_level_f32_ {
    float enter, leave, sign;
    uint64_t passed, cycles;
    int32_t beyond, latch, latched, reserve;
};

typedef struct rampwise_watch_f32 {
    struct rampwise_watch_f32 *next_;
    rampwise_coeffs_f32 piece_;
    rampwise_output output_;
    float row_[4], relative_[3];
    float damping_, stiffness_, inertia_, step_;
    double dt_;
    float now_;
    uint64_t sample_;
    rampwise_peak_f32 since_start_, since_reset_;
    struct rampwise_watch_queue_f32_ high_, low_;
    size_t window_steps_;
    struct rampwise_watch_level_f32_ level_[RAMPWISE_WATCH_LEVELS];
    rampwise_event *events_;
    size_t event_capacity_, event_first_, event_count_;
    uint64_t lost_, resets_;
    int32_t level_count_, number_, pieces_, input_, between_, jumps_, started_, reserve_;
} rampwise_watch_f32;

RAMPWISE_BEGIN

/* Options of nothing but the displacement's greatest and least. */
RAMPWISE_API void rampwise_watch_options_init(rampwise_watch_options *options);

/* A watch over steps of coefficients c (not kept). options is copied, its window and events are used.
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _QUANTITY, _COEFFICIENT; _COUNT (level_count, or options not begun with
   its init); _STATE (a level is not a finite number with hysteresis 0 or more and direction 1 or -1);
   _STEP_LENGTH (a step would need more than 64 pieces). */
RAMPWISE_API int rampwise_watch_init(rampwise_watch *watch, const rampwise_coeffs *c,
                                     const rampwise_watch_options *options);

/* Begins anew at the state s, which is sample `sample`. Counts, latches and events stay.
   RAMPWISE_ERROR_MISSING, _STATE. */
RAMPWISE_API int rampwise_watch_start(rampwise_watch *watch, const rampwise_state *s, uint64_t sample);

/* The step that took `before`, sample `sample`, to `after`, sample + samples, with coefficients c: for
   callers who step by themselves. flags go into its events. A watch that was not started starts at `before`.
   Cannot fail; nothing is checked. */
RAMPWISE_API void rampwise_watch_step(rampwise_watch *watch, const rampwise_coeffs *c,
                                      const rampwise_state *before, const rampwise_state *after,
                                      uint64_t sample, uint64_t samples, uint32_t flags);

/* Other coefficients of the same dt, input and between, from the present state on: a named output changes its
   weights with them, and may jump. A stream does it for those attached. Errors as rampwise_watch_init;
   _DIFFERENT. */
RAMPWISE_API int rampwise_watch_retune(rampwise_watch *watch, const rampwise_coeffs *c,
                                       const rampwise_state *now);

/* The greatest and least value over a span. RAMPWISE_ERROR_MISSING, _QUANTITY (no span, or no window), _COUNT
   (nothing seen yet). */
RAMPWISE_API int rampwise_watch_peak(const rampwise_watch *watch, int span, rampwise_peak *peak);

/* RAMPWISE_SINCE_RESET begins anew with the present value. RAMPWISE_ERROR_MISSING. */
RAMPWISE_API int rampwise_watch_reset(rampwise_watch *watch);

/* How level i stands. RAMPWISE_ERROR_MISSING, _COUNT (no such level). */
RAMPWISE_API int rampwise_watch_level(const rampwise_watch *watch, size_t i, rampwise_level_report *report);

/* Lets go of the latch of level i. While the response is beyond the level nothing changes: it stays tripped.
   RAMPWISE_ERROR_MISSING, _COUNT. */
RAMPWISE_API int rampwise_watch_release(rampwise_watch *watch, size_t i);

/* Takes the oldest events out of the queue, up to capacity, into events; returns how many. Events come step
   by step; those of one monotone stretch inside a step come level by level. */
RAMPWISE_API size_t rampwise_watch_events(rampwise_watch *watch, size_t capacity, rampwise_event *events);

/* Events lost, and steps too long to be looked into. Either pointer may be NULL. RAMPWISE_ERROR_MISSING. */
RAMPWISE_API int rampwise_watch_counts(const rampwise_watch *watch, uint64_t *lost, uint64_t *resets);

/* All of a watch as bytes, its window and waiting events too (as in stream.h). It is resumed into a watch
   that was made with the same capacities; the attachment to a stream stays. */
RAMPWISE_API size_t rampwise_watch_saved_size(const rampwise_watch *watch);
RAMPWISE_API int rampwise_watch_save(const rampwise_watch *watch, void *bytes, size_t count);
RAMPWISE_API int rampwise_watch_resume(rampwise_watch *watch, const void *bytes, size_t count);

/* The same in single precision. */
RAMPWISE_API int rampwise_watch_init_f32(rampwise_watch_f32 *watch, const rampwise_coeffs_f32 *c,
                                         const rampwise_watch_options *options);
RAMPWISE_API int rampwise_watch_start_f32(rampwise_watch_f32 *watch, const rampwise_state_f32 *s,
                                          uint64_t sample);
RAMPWISE_API void rampwise_watch_step_f32(rampwise_watch_f32 *watch, const rampwise_coeffs_f32 *c,
                                          const rampwise_state_f32 *before, const rampwise_state_f32 *after,
                                          uint64_t sample, uint64_t samples, uint32_t flags);
RAMPWISE_API int rampwise_watch_retune_f32(rampwise_watch_f32 *watch, const rampwise_coeffs_f32 *c,
                                           const rampwise_state_f32 *now);
RAMPWISE_API int rampwise_watch_peak_f32(const rampwise_watch_f32 *watch, int span, rampwise_peak *peak);
RAMPWISE_API int rampwise_watch_reset_f32(rampwise_watch_f32 *watch);
RAMPWISE_API int rampwise_watch_level_f32(const rampwise_watch_f32 *watch, size_t i,
                                          rampwise_level_report *report);
RAMPWISE_API int rampwise_watch_release_f32(rampwise_watch_f32 *watch, size_t i);
RAMPWISE_API size_t rampwise_watch_events_f32(rampwise_watch_f32 *watch, size_t capacity,
                                              rampwise_event *events);
RAMPWISE_API int rampwise_watch_counts_f32(const rampwise_watch_f32 *watch, uint64_t *lost, uint64_t *resets);
RAMPWISE_API size_t rampwise_watch_saved_size_f32(const rampwise_watch_f32 *watch);
RAMPWISE_API int rampwise_watch_save_f32(const rampwise_watch_f32 *watch, void *bytes, size_t count);
RAMPWISE_API int rampwise_watch_resume_f32(rampwise_watch_f32 *watch, const void *bytes, size_t count);

RAMPWISE_END

#endif
