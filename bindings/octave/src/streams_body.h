/* Commands of streams and their watches, included once a precision. */

/* A watch stays where it is, with its memory behind it. */
typedef struct PRECISION(kept_watch) {
    PRECISION(rampwise_watch) watch;
    size_t level_count;
    rampwise_event *events;
    PRECISION(rampwise_watched) * window;
} PRECISION(kept_watch);

typedef struct PRECISION(kept_stream) {
    PRECISION(rampwise_stream) stream;
    PRECISION(rampwise_coeffs) c; /* where `tuned`: what was resumed may have others */
    int tuned;
    size_t output_count, watch_count;
    PRECISION(kept_watch) * *watch;
} PRECISION(kept_stream);

static void PRECISION(release_watch)(PRECISION(kept_watch) * w)
{
    if (w != NULL) {
        free(w->events);
        free(w->window);
    }
    free(w);
}

static void PRECISION(release_stream)(void *object)
{
    PRECISION(kept_stream) *const k = object;
    for (size_t i = 0; i < k->watch_count; ++i)
        PRECISION(release_watch)(k->watch[i]);
    free(k->watch);
    free(k);
}

static const object_kind PRECISION(streams) = {"stream" IN_WORDS, PRECISION(release_stream)};

/* system, dt, input, between; start, missing, beyond, longest, ticks, rails, outputs, raw -> object */
void PRECISION(stream_make)(mxArray **out, const mxArray **in)
{
    if (count_systems(in[0]) != 1)
        refuse("a stream has one oscillator");
    const rampwise_stream_options o = stream_options(in + 4);
    const PRECISION(rampwise_coeffs) *const c = PRECISION(make_coefficients)(out, in);
    if (c == NULL)
        return;
    PRECISION(kept_stream) *const k = calloc(1, sizeof *k);
    int status = RAMPWISE_ERROR_MEMORY;
    if (k != NULL) {
        k->output_count = (size_t)o.output_count;
        k->c = *c;
        k->tuned = 1;
        status = PRECISION(rampwise_stream_init)(&k->stream, c, &o);
    }
    if (status != RAMPWISE_OK)
        free(k);
    if (answer(out, status, 1) == RAMPWISE_OK)
        out[2] = object_keep(&PRECISION(streams), k);
}

/* Samples are of the precision's class, or raw ones of class int32. */
static int PRECISION(put)(PRECISION(kept_stream) * k, const mxArray *p, const int64_t *t, REAL *frames,
                          uint8_t *flags, size_t *bad)
{
    const size_t n = mxGetNumberOfElements(p);
    const void *const x = mxGetData(p);
    if (mxIsInt32(p))
        return t != NULL ? PRECISION(rampwise_stream_put_raw_at)(&k->stream, n, t, x, frames, flags, bad)
                         : PRECISION(rampwise_stream_put_raw)(&k->stream, n, x, frames, flags, bad);
    return t != NULL ? PRECISION(rampwise_stream_put_at)(&k->stream, n, t, x, frames, flags, bad)
                     : PRECISION(rampwise_stream_put)(&k->stream, n, x, frames, flags, bad);
}

/* object, samples, stamps (int64, or empty where samples are one dt apart) -> frames of the outputs as columns, flags;
   an overflow is a status beside answers, whose rest is NaN */
void PRECISION(stream_put)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    const size_t n = mxGetNumberOfElements(of_class(in[1], mxIsInt32(in[1]) ? mxINT32_CLASS : CLASS));
    const int stamped = !mxIsEmpty(in[2]);
    if (stamped && (!mxIsInt64(in[2]) || mxIsComplex(in[2]) || mxGetNumberOfElements(in[2]) != n))
        refuse("stamps are of class int64, as many as samples");
    answer(out, RAMPWISE_OK, 0);
    out[2] = zeros(CLASS, k->output_count, n);
    out[3] = zeros(mxUINT8_CLASS, n, 1);
    REAL *const frames = mxGetData(out[2]);
    for (size_t i = 0; i < k->output_count * n; ++i)
        frames[i] = (REAL)NAN;
    size_t bad = 0;
    const int status =
        PRECISION(put)(k, in[1], stamped ? mxGetData(in[2]) : NULL, frames, mxGetData(out[3]), &bad);
    mxGetPr(out[0])[0] = status;
    mxGetPr(out[1])[0] = status == RAMPWISE_OK ? 0 : (double)bad + 1;
}

/* object -> counts (next, good, missing, clipped, bridges, starts, longest, last missing, last clipped), state and its
   sample's number (empty before the first good sample), how many watches */
void PRECISION(stream_read)(mxArray **out, const mxArray **in)
{
    const PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    rampwise_stream_counts n;
    PRECISION(rampwise_state) s;
    uint64_t at;
    if (PRECISION(rampwise_stream_count)(&k->stream, &n) != RAMPWISE_OK)
        refuse("a stream cannot be read");
    const double counts[9] = {
        from_number(n.next),    from_number(n.good),         from_number(n.missing),
        from_number(n.clipped), from_number(n.bridges),      from_number(n.starts),
        from_number(n.longest), from_number(n.last_missing), from_number(n.last_clipped)};
    out[0] = matrix(9, 1);
    memcpy(mxGetPr(out[0]), counts, sizeof counts);
    out[1] = empty();
    out[2] = empty();
    if (PRECISION(rampwise_stream_state)(&k->stream, &s, &at) == RAMPWISE_OK) {
        out[1] = zeros(CLASS, sizeof s / sizeof(REAL), 1);
        memcpy(mxGetData(out[1]), &s, sizeof s);
        out[2] = number((double)at);
    }
    out[3] = number((double)k->watch_count);
}

/* object, state (or empty: by the next sample), number */
void PRECISION(stream_start)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    const uint64_t at = sample_number(in[2]);
    PRECISION(rampwise_state) s;
    const int given = !mxIsEmpty(in[1]);
    if (given && mxGetNumberOfElements(of_class(in[1], CLASS)) != sizeof s / sizeof(REAL))
        refuse("a state has the wrong number of elements");
    if (given)
        memcpy(&s, mxGetData(in[1]), sizeof s);
    answer(out, PRECISION(rampwise_stream_start)(&k->stream, given ? &s : NULL, at), 1);
}

/* object, number of the next sample that will come */
void PRECISION(stream_skip)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    answer(out, PRECISION(rampwise_stream_skip_to)(&k->stream, sample_number(in[1])), 1);
}

/* object; system, dt, input, between */
void PRECISION(stream_retune)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    if (count_systems(in[1]) != 1)
        refuse("a stream has one oscillator");
    const PRECISION(rampwise_coeffs) *const c = PRECISION(make_coefficients)(out, in + 1);
    if (c == NULL || answer(out, PRECISION(rampwise_stream_retune)(&k->stream, c, NULL, 0), 1) != RAMPWISE_OK)
        return;
    k->c = *c;
    k->tuned = 1;
}

/* ---- watches ---- */

/* NULL where there is no memory, or the status is an error. */
static PRECISION(kept_watch) *
    PRECISION(watch_make)(const PRECISION(rampwise_coeffs) * c, rampwise_watch_options *o, int *status)
{
    PRECISION(kept_watch) *const w = calloc(1, sizeof *w);
    *status = RAMPWISE_ERROR_MEMORY;
    if (w == NULL)
        return NULL;
    w->level_count = (size_t)o->level_count;
    w->events = calloc(o->event_capacity + 1, sizeof *w->events);
    w->window = calloc(2 * o->window_steps + 1, sizeof *w->window);
    if (w->events != NULL && w->window != NULL) {
        o->events = o->event_capacity > 0 ? w->events : NULL;
        o->window = o->window_steps > 0 ? w->window : NULL;
        *status = PRECISION(rampwise_watch_init)(&w->watch, c, o);
    }
    if (*status == RAMPWISE_OK)
        return w;
    PRECISION(release_watch)(w);
    return NULL;
}

/* The stream takes the watch, or it is released. */
static int PRECISION(attach)(PRECISION(kept_stream) * k, PRECISION(kept_watch) * w)
{
    PRECISION(kept_watch) **const grown =
        realloc(k->watch, (k->watch_count + 1) * sizeof(PRECISION(kept_watch) *));
    int status = RAMPWISE_ERROR_MEMORY;
    if (grown != NULL) {
        k->watch = grown;
        status = PRECISION(rampwise_stream_attach)(&k->stream, &w->watch);
    }
    if (status == RAMPWISE_OK)
        k->watch[k->watch_count++] = w;
    else
        PRECISION(release_watch)(w);
    return status;
}

/* object, output (a quantity and its four weights), levels, steps of the window, capacity for events
   -> number of the watch, from 1 */
void PRECISION(stream_watch)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    rampwise_watch_options o;
    rampwise_watch_options_init(&o);
    o.output = output_from(doubles(in[1], 5));
    take_levels(&o, in[2]);
    o.window_steps = whole_number(in[3]);
    o.event_capacity = whole_number(in[4]);
    if (o.window_steps > 10000000 || o.event_capacity > 10000000)
        refuse("a window or queue is too long");
    o.number = (int32_t)k->watch_count + 1;
    int status = RAMPWISE_ERROR_NOT_MADE;
    PRECISION(kept_watch) *const w = k->tuned ? PRECISION(watch_make)(&k->c, &o, &status) : NULL;
    if (status == RAMPWISE_OK)
        status = PRECISION(attach)(k, w);
    if (answer(out, status, 1) == RAMPWISE_OK)
        out[2] = number((double)k->watch_count);
}

static PRECISION(kept_watch) * PRECISION(find_watch)(const mxArray **in)
{
    const PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    const size_t i = whole_number(in[1]);
    if (i < 1 || i > k->watch_count)
        refuse("the stream has no watch of that number");
    return k->watch[i - 1];
}

/* object, watch -> {value; sample; fraction} of high and low since the start, since the reset, in the window: 3 x 6, NaN
   where there is none; {beyond; tripped; passed; cycles} of the levels; events lost; resets */
void PRECISION(watch_read)(mxArray **out, const mxArray **in)
{
    static const int spans[3] = {RAMPWISE_SINCE_START, RAMPWISE_SINCE_RESET, RAMPWISE_IN_WINDOW};
    const PRECISION(kept_watch) *const w = PRECISION(find_watch)(in);
    out[0] = matrix(3, 6);
    for (size_t i = 0; i < 3; ++i) {
        double *const six = mxGetPr(out[0]) + 6 * i;
        rampwise_peak peak;
        if (PRECISION(rampwise_watch_peak)(&w->watch, spans[i], &peak) == RAMPWISE_OK) {
            put_instant(six, &peak.high);
            put_instant(six + 3, &peak.low);
        } else
            for (size_t j = 0; j < 6; ++j)
                six[j] = NAN;
    }
    out[1] = matrix(4, w->level_count);
    for (size_t i = 0; i < w->level_count; ++i) {
        rampwise_level_report r;
        if (PRECISION(rampwise_watch_level)(&w->watch, i, &r) != RAMPWISE_OK)
            refuse("a level cannot be read");
        memcpy(mxGetPr(out[1]) + 4 * i, (double[4]){r.beyond, r.tripped, (double)r.passed, (double)r.cycles},
               4 * sizeof(double));
    }
    uint64_t lost = 0, resets = 0;
    (void)PRECISION(rampwise_watch_counts)(&w->watch, &lost, &resets);
    out[2] = number((double)lost);
    out[3] = number((double)resets);
}

/* object, watch -> columns {sample; fraction; value; kind; direction; level from 1, or 0; flags}, taken out of the queue */
void PRECISION(watch_events)(mxArray **out, const mxArray **in)
{
    enum { AT_A_TIME = 64 };
    PRECISION(kept_watch) *const w = PRECISION(find_watch)(in);
    rampwise_event events[AT_A_TIME];
    size_t total = 0, got;
    double *columns = NULL;
    while ((got = PRECISION(rampwise_watch_events)(&w->watch, AT_A_TIME, events)) > 0) {
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
void PRECISION(watch_reset)(mxArray **out, const mxArray **in)
{
    answer(out, PRECISION(rampwise_watch_reset)(&PRECISION(find_watch)(in)->watch), 0);
}

/* object, watch, level from 1: its latch is let go of */
void PRECISION(watch_release)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_watch) *const w = PRECISION(find_watch)(in);
    const size_t i = whole_number(in[2]);
    answer(out, i > 0 ? PRECISION(rampwise_watch_release)(&w->watch, i - 1) : RAMPWISE_ERROR_COUNT, 0);
}

/* ---- bytes: those of the stream, then those of its watches in order ---- */

static size_t PRECISION(saved_size)(const PRECISION(kept_stream) * k)
{
    size_t size = PRECISION(rampwise_stream_saved_size)(&k->stream);
    for (size_t i = 0; i < k->watch_count; ++i)
        size += PRECISION(rampwise_watch_saved_size)(&k->watch[i]->watch);
    return size;
}

/* object -> uint8 column */
void PRECISION(stream_save)(mxArray **out, const mxArray **in)
{
    const PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    mxArray *const saved = mxCreateNumericMatrix((mwSize)PRECISION(saved_size)(k), 1, mxUINT8_CLASS, mxREAL);
    uint8_t *at = mxGetData(saved);
    int status =
        PRECISION(rampwise_stream_save)(&k->stream, at, PRECISION(rampwise_stream_saved_size)(&k->stream));
    at += PRECISION(rampwise_stream_saved_size)(&k->stream);
    for (size_t i = 0; status == RAMPWISE_OK && i < k->watch_count; ++i) {
        const size_t part = PRECISION(rampwise_watch_saved_size)(&k->watch[i]->watch);
        status = PRECISION(rampwise_watch_save)(&k->watch[i]->watch, at, part);
        at += part;
    }
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = saved;
}

/* Bytes of the stream's own size. What comes before the part that is refused has been taken. */
static int PRECISION(resume)(PRECISION(kept_stream) * k, const uint8_t *at)
{
    size_t part = PRECISION(rampwise_stream_saved_size)(&k->stream);
    int status = PRECISION(rampwise_stream_resume)(&k->stream, at, part);
    for (size_t i = 0; status == RAMPWISE_OK && i < k->watch_count; ++i) {
        at += part;
        part = PRECISION(rampwise_watch_saved_size)(&k->watch[i]->watch);
        status = PRECISION(rampwise_watch_resume)(&k->watch[i]->watch, at, part);
    }
    return status;
}

/* object, uint8 vector: all of it, or, where anything is refused, nothing */
void PRECISION(stream_resume)(mxArray **out, const mxArray **in)
{
    PRECISION(kept_stream) *const k = object_find(in[0], &PRECISION(streams));
    if (!mxIsUint8(in[1]))
        refuse("saved bytes are of class uint8");
    if (mxGetNumberOfElements(in[1]) != PRECISION(saved_size)(k)) {
        answer(out, RAMPWISE_ERROR_DAMAGED, 0);
        return;
    }
    mxArray *before[ANSWERS];
    PRECISION(stream_save)(before, in);
    const int status = PRECISION(resume)(k, mxGetData(in[1]));
    if (status != RAMPWISE_OK)
        (void)PRECISION(resume)(k, mxGetData(before[2]));
    else
        k->tuned = 0;
    answer(out, status, 0);
}
