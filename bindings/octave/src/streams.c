/* Streams: one oscillator on live data, with the watches attached to it. */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gateway.h"

/* A watch stays where it is, with its memory behind it. */
typedef struct kept_watch {
    rampwise_watch watch;
    size_t level_count;
    rampwise_event *events;
    rampwise_watched *window;
} kept_watch;

typedef struct kept_stream {
    rampwise_stream stream;
    size_t output_count, watch_count;
    kept_watch **watch;
} kept_stream;

static void release_watch(kept_watch *w)
{
    if (w != NULL) {
        free(w->events);
        free(w->window);
    }
    free(w);
}

static void release_stream(void *object)
{
    kept_stream *const k = object;
    for (size_t i = 0; i < k->watch_count; ++i)
        release_watch(k->watch[i]);
    free(k->watch);
    free(k);
}

static const object_kind streams = {"stream", release_stream};

static uint64_t sample_number(const mxArray *a)
{
    const double x = scalar(a);
    if (!(x >= 0 && x <= 9007199254740992.0) || x != floor(x))
        refuse("a sample's number is whole, and not negative");
    return (uint64_t)x;
}

/* UINT64_MAX is the library's "none". */
static double from_number(uint64_t x)
{
    return x == UINT64_MAX ? NAN : (double)x;
}

static rampwise_stream_options stream_options(const mxArray **in)
{
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.start = integer(in[0]);
    o.missing = integer(in[1]);
    o.beyond = integer(in[2]);
    o.longest = sample_number(in[3]);
    o.ticks = sample_number(in[4]);
    const double *const rails = doubles(in[5], 2);
    o.rail_low = rails[0];
    o.rail_high = rails[1];
    const size_t count = mxGetNumberOfElements(real_double(in[6]));
    if (count > RAMPWISE_STREAM_OUTPUTS)
        refuse("too many outputs");
    o.output_count = (int32_t)count;
    for (size_t i = 0; i < count; ++i) {
        const double quantity = mxGetPr(in[6])[i];
        if (!(fabs(quantity) < 1e6))
            refuse("an output is no quantity");
        o.output[i] = (rampwise_output){{0}, (int32_t)quantity, 0};
    }
    return o;
}

/* system, dt, input, between; start, missing, beyond, longest, ticks, rails, quantities -> object */
void stream_make(mxArray **out, const mxArray **in)
{
    if (count_systems(in[0]) != 1)
        refuse("a stream has one oscillator");
    const rampwise_stream_options o = stream_options(in + 4);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    kept_stream *const k = calloc(1, sizeof *k);
    int status = RAMPWISE_ERROR_MEMORY;
    if (k != NULL) {
        k->output_count = (size_t)o.output_count;
        status = rampwise_stream_init(&k->stream, c, &o);
    }
    if (status != RAMPWISE_OK)
        free(k);
    if (answer(out, status, 1) == RAMPWISE_OK)
        out[2] = object_keep(&streams, k);
}

/* object, samples, stamps (int64, or empty where samples are one dt apart) -> frames of the outputs as columns, flags;
   an overflow is a status beside answers, whose rest is NaN */
void stream_put(mxArray **out, const mxArray **in)
{
    kept_stream *const k = object_find(in[0], &streams);
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const int stamped = !mxIsEmpty(in[2]);
    if (stamped && (!mxIsInt64(in[2]) || mxGetNumberOfElements(in[2]) != n))
        refuse("stamps are of class int64, as many as samples");
    answer(out, RAMPWISE_OK, 0);
    out[2] = matrix(k->output_count, n);
    out[3] = mxCreateNumericMatrix((mwSize)n, 1, mxUINT8_CLASS, mxREAL);
    double *const frames = mxGetPr(out[2]);
    for (size_t i = 0; i < k->output_count * n; ++i)
        frames[i] = NAN;
    const double *const p = mxGetPr(in[1]);
    size_t bad = 0;
    const int status =
        stamped ? rampwise_stream_put_at(&k->stream, n, mxGetData(in[2]), p, frames, mxGetData(out[3]), &bad)
                : rampwise_stream_put(&k->stream, n, p, frames, mxGetData(out[3]), &bad);
    mxGetPr(out[0])[0] = status;
    mxGetPr(out[1])[0] = status == RAMPWISE_OK ? 0 : (double)bad + 1;
}

/* object -> counts (next, good, missing, clipped, bridges, starts, longest, last missing, last clipped), state and its
   sample's number (empty before the first good sample), how many watches */
void stream_read(mxArray **out, const mxArray **in)
{
    const kept_stream *const k = object_find(in[0], &streams);
    rampwise_stream_counts n;
    rampwise_state s;
    uint64_t at;
    if (rampwise_stream_count(&k->stream, &n) != RAMPWISE_OK)
        refuse("a stream cannot be read");
    const double counts[9] = {
        from_number(n.next),    from_number(n.good),         from_number(n.missing),
        from_number(n.clipped), from_number(n.bridges),      from_number(n.starts),
        from_number(n.longest), from_number(n.last_missing), from_number(n.last_clipped)};
    out[0] = matrix(9, 1);
    memcpy(mxGetPr(out[0]), counts, sizeof counts);
    out[1] = empty();
    out[2] = empty();
    if (rampwise_stream_state(&k->stream, &s, &at) == RAMPWISE_OK) {
        out[1] = matrix(4, 1);
        memcpy(mxGetPr(out[1]), &s, sizeof s);
        out[2] = number((double)at);
    }
    out[3] = number((double)k->watch_count);
}

/* object, state (four, or empty: by the next sample), number */
void stream_start(mxArray **out, const mxArray **in)
{
    kept_stream *const k = object_find(in[0], &streams);
    const uint64_t at = sample_number(in[2]);
    rampwise_state s;
    if (!mxIsEmpty(in[1]))
        memcpy(&s, doubles(in[1], 4), sizeof s);
    answer(out, rampwise_stream_start(&k->stream, mxIsEmpty(in[1]) ? NULL : &s, at), 1);
}

/* object, number of the next sample that will come */
void stream_skip(mxArray **out, const mxArray **in)
{
    kept_stream *const k = object_find(in[0], &streams);
    answer(out, rampwise_stream_skip_to(&k->stream, sample_number(in[1])), 1);
}

/* ---- watches ---- */

/* Columns {value; hysteresis; direction; latch}. */
static void take_levels(rampwise_watch_options *o, const mxArray *a)
{
    const double *const given = mxGetPr(real_double(a));
    const size_t count = mxGetN(a);
    if (count > RAMPWISE_WATCH_LEVELS || (count > 0 && mxGetM(a) != 4))
        refuse("levels are up to four columns of four");
    o->level_count = (int32_t)count;
    for (size_t i = 0; i < count; ++i)
        o->level[i] = (rampwise_level){given[4 * i], given[4 * i + 1], given[4 * i + 2] < 0 ? -1 : 1,
                                       given[4 * i + 3] != 0};
}

/* NULL where there is no memory, or the status is an error. */
static kept_watch *watch_make(const rampwise_coeffs *c, rampwise_watch_options *o, int *status)
{
    kept_watch *const w = calloc(1, sizeof *w);
    *status = RAMPWISE_ERROR_MEMORY;
    if (w == NULL)
        return NULL;
    w->level_count = (size_t)o->level_count;
    w->events = calloc(o->event_capacity + 1, sizeof *w->events);
    w->window = calloc(2 * o->window_steps + 1, sizeof *w->window);
    if (w->events != NULL && w->window != NULL) {
        o->events = o->event_capacity > 0 ? w->events : NULL;
        o->window = o->window_steps > 0 ? w->window : NULL;
        *status = rampwise_watch_init(&w->watch, c, o);
    }
    if (*status == RAMPWISE_OK)
        return w;
    release_watch(w);
    return NULL;
}

/* The stream takes the watch, or it is released. */
static int attach(kept_stream *k, kept_watch *w)
{
    kept_watch **const grown = realloc(k->watch, (k->watch_count + 1) * sizeof(kept_watch *));
    int status = RAMPWISE_ERROR_MEMORY;
    if (grown != NULL) {
        k->watch = grown;
        status = rampwise_stream_attach(&k->stream, &w->watch);
    }
    if (status == RAMPWISE_OK)
        k->watch[k->watch_count++] = w;
    else
        release_watch(w);
    return status;
}

/* object; system, dt, input, between of the stream; quantity, levels, steps of the window, capacity for events
   -> number of the watch, from 1 */
void stream_watch(mxArray **out, const mxArray **in)
{
    kept_stream *const k = object_find(in[0], &streams);
    rampwise_watch_options o;
    rampwise_watch_options_init(&o);
    o.output.quantity = integer(in[5]);
    take_levels(&o, in[6]);
    o.window_steps = whole_number(in[7]);
    o.event_capacity = whole_number(in[8]);
    if (o.window_steps > 10000000 || o.event_capacity > 10000000)
        refuse("a window or queue is too long");
    const rampwise_coeffs *const c = make_coefficients(out, in + 1);
    if (c == NULL)
        return;
    if (count_systems(in[1]) != 1)
        refuse("a stream has one oscillator");
    o.number = (int32_t)k->watch_count + 1;
    int status;
    kept_watch *const w = watch_make(c, &o, &status);
    if (status == RAMPWISE_OK)
        status = attach(k, w);
    if (answer(out, status, 1) == RAMPWISE_OK)
        out[2] = number((double)k->watch_count);
}

static kept_watch *find_watch(const mxArray **in)
{
    const kept_stream *const k = object_find(in[0], &streams);
    const size_t i = whole_number(in[1]);
    if (i < 1 || i > k->watch_count)
        refuse("the stream has no watch of that number");
    return k->watch[i - 1];
}

static void put_instant(double *three, const rampwise_instant *at)
{
    three[0] = at->value;
    three[1] = (double)at->sample;
    three[2] = at->fraction;
}

/* object, watch -> {value; sample; fraction} of high and low since the start, since the reset, in the window: 3 x 6, NaN
   where there is none; {beyond; tripped; passed; cycles} of the levels; events lost; resets */
void watch_read(mxArray **out, const mxArray **in)
{
    static const int spans[3] = {RAMPWISE_SINCE_START, RAMPWISE_SINCE_RESET, RAMPWISE_IN_WINDOW};
    const kept_watch *const w = find_watch(in);
    out[0] = matrix(3, 6);
    for (size_t i = 0; i < 3; ++i) {
        double *const six = mxGetPr(out[0]) + 6 * i;
        rampwise_peak peak;
        if (rampwise_watch_peak(&w->watch, spans[i], &peak) == RAMPWISE_OK) {
            put_instant(six, &peak.high);
            put_instant(six + 3, &peak.low);
        } else
            for (size_t j = 0; j < 6; ++j)
                six[j] = NAN;
    }
    out[1] = matrix(4, w->level_count);
    for (size_t i = 0; i < w->level_count; ++i) {
        rampwise_level_report r;
        if (rampwise_watch_level(&w->watch, i, &r) != RAMPWISE_OK)
            refuse("a level cannot be read");
        memcpy(mxGetPr(out[1]) + 4 * i, (double[4]){r.beyond, r.tripped, (double)r.passed, (double)r.cycles},
               4 * sizeof(double));
    }
    uint64_t lost = 0, resets = 0;
    (void)rampwise_watch_counts(&w->watch, &lost, &resets);
    out[2] = number((double)lost);
    out[3] = number((double)resets);
}

/* object, watch -> columns {sample; fraction; value; kind; direction; level from 1, or 0; flags}, taken out of the queue */
void watch_events(mxArray **out, const mxArray **in)
{
    enum { AT_A_TIME = 64 };
    kept_watch *const w = find_watch(in);
    rampwise_event events[AT_A_TIME];
    size_t total = 0, got;
    double *columns = NULL;
    while ((got = rampwise_watch_events(&w->watch, AT_A_TIME, events)) > 0) {
        columns = mxRealloc(columns, 7 * (total + got) * sizeof(double));
        for (size_t i = 0; i < got; ++i, ++total) {
            const rampwise_event *const e = &events[i];
            memcpy(columns + 7 * total,
                   (double[7]){(double)e->sample, e->fraction, e->value, e->kind, e->direction, e->level + 1,
                               e->flags},
                   7 * sizeof(double));
        }
    }
    out[0] = matrix(7, total);
    if (total > 0)
        memcpy(mxGetPr(out[0]), columns, 7 * total * sizeof(double));
}

/* object, watch: since the reset begins anew */
void watch_reset(mxArray **out, const mxArray **in)
{
    answer(out, rampwise_watch_reset(&find_watch(in)->watch), 0);
}

/* object, watch, level from 1: its latch is let go of */
void watch_release(mxArray **out, const mxArray **in)
{
    kept_watch *const w = find_watch(in);
    const size_t i = whole_number(in[2]);
    answer(out, i > 0 ? rampwise_watch_release(&w->watch, i - 1) : RAMPWISE_ERROR_COUNT, 0);
}

/* ---- bytes: those of the stream, then those of its watches in order ---- */

static size_t saved_size(const kept_stream *k)
{
    size_t size = rampwise_stream_saved_size(&k->stream);
    for (size_t i = 0; i < k->watch_count; ++i)
        size += rampwise_watch_saved_size(&k->watch[i]->watch);
    return size;
}

/* object -> uint8 column */
void stream_save(mxArray **out, const mxArray **in)
{
    const kept_stream *const k = object_find(in[0], &streams);
    mxArray *const saved = mxCreateNumericMatrix((mwSize)saved_size(k), 1, mxUINT8_CLASS, mxREAL);
    uint8_t *at = mxGetData(saved);
    int status = rampwise_stream_save(&k->stream, at, rampwise_stream_saved_size(&k->stream));
    at += rampwise_stream_saved_size(&k->stream);
    for (size_t i = 0; status == RAMPWISE_OK && i < k->watch_count; ++i) {
        const size_t part = rampwise_watch_saved_size(&k->watch[i]->watch);
        status = rampwise_watch_save(&k->watch[i]->watch, at, part);
        at += part;
    }
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = saved;
}

/* Bytes of the stream's own size. What comes before the part that is refused has been taken. */
static int resume(kept_stream *k, const uint8_t *at)
{
    size_t part = rampwise_stream_saved_size(&k->stream);
    int status = rampwise_stream_resume(&k->stream, at, part);
    for (size_t i = 0; status == RAMPWISE_OK && i < k->watch_count; ++i) {
        at += part;
        part = rampwise_watch_saved_size(&k->watch[i]->watch);
        status = rampwise_watch_resume(&k->watch[i]->watch, at, part);
    }
    return status;
}

/* object, uint8 vector: all of it, or, where anything is refused, nothing */
void stream_resume(mxArray **out, const mxArray **in)
{
    kept_stream *const k = object_find(in[0], &streams);
    if (!mxIsUint8(in[1]))
        refuse("saved bytes are of class uint8");
    if (mxGetNumberOfElements(in[1]) != saved_size(k)) {
        answer(out, RAMPWISE_ERROR_DAMAGED, 0);
        return;
    }
    mxArray *before[ANSWERS];
    stream_save(before, in);
    const int status = resume(k, mxGetData(in[1]));
    if (status != RAMPWISE_OK)
        (void)resume(k, mxGetData(before[2]));
    answer(out, status, 0);
}
