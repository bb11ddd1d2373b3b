/* The one body of streams, for both precisions. The including file has defined REAL, FMA_OF, NAME, which gives a
   public function its suffix, the types STREAM, INTERVAL, WATCH, COEFFS, STATE, and the functions COEFFS_MAKE,
   COEFFS_OK, STATE_OK, START, START_SETTLED, STEP, OUTPUT_ROW, SAVED_REAL, SAVED_COEFFS, SAVED_STATE and SAVED_KIND. */

#include <string.h>
#include "interval.h"
#include "saved.h"

/* Of watch_body.h: tells whether a watch could be retuned. */
int NAME(rampwise_watch_tunable_)(const WATCH *watch, const COEFFS *c);

/* A block as it came in: p or raw, t or NULL. */
typedef struct block {
    const REAL *p;
    const int32_t *raw;
    const int64_t *t;
} block;

/* One sample of it. */
typedef struct sample {
    REAL p;
    int good, clipped;
    uint64_t ticks; /* since the one before */
} sample;

/* ---- reading a block ---- */

static sample sample_of(const STREAM *x, const block *in, size_t i)
{
    const REAL as_put = in->raw != NULL ? (REAL)in->raw[i] : in->p[i];
    const int good = in->raw != NULL ? in->raw[i] != x->missing_raw_ : isfinite(as_put) != 0;
    const REAL p = in->raw != NULL ? FMA_OF(x->scale_, as_put, x->offset_) : as_put;
    return (sample){p, good, good & ((as_put <= x->rail_low_) | (as_put >= x->rail_high_)), x->ticks_};
}

/* Missing samples before one that comes so many ticks after its predecessor. */
static uint64_t skipped_in(const STREAM *x, uint64_t ticks)
{
    if (ticks < x->ticks_ + (x->ticks_ + 1) / 2)
        return 0;
    const uint64_t whole = ticks / x->ticks_, rest = ticks % x->ticks_;
    return whole - 1 + (rest >= x->ticks_ - rest);
}

/* The ticks to stamp t, 0 where it is not later. */
static uint64_t ticks_to(uint64_t time, int64_t t)
{
    const int64_t before = (int64_t)time;
    return t > before ? (uint64_t)t - time : 0;
}

/* Goes through a block as it would be taken, and changes nothing. */
static int check_block(const STREAM *x, size_t n, const block *in, size_t *bad)
{
    uint64_t run = x->run_, time = x->time_;
    int started = x->started_, timed = x->timed_;
    for (size_t i = 0; i < n; ++i) {
        sample now = sample_of(x, in, i);
        if (in->t != NULL) {
            if (timed)
                now.ticks = ticks_to(time, in->t[i]);
            time = (uint64_t)in->t[i];
            timed = 1;
        }
        if (now.ticks == 0)
            return blame(RAMPWISE_ERROR_TIME, i, bad);
        if (x->missing_ == RAMPWISE_GAP_REFUSE && !now.good)
            return blame(RAMPWISE_ERROR_SAMPLE, i, bad);
        const uint64_t skipped = skipped_in(x, now.ticks);
        run += skipped;
        if (started && ((x->missing_ == RAMPWISE_GAP_REFUSE && skipped > 0) ||
                        (x->beyond_ == RAMPWISE_GAP_REFUSE && now.good && run > x->longest_)))
            return blame(RAMPWISE_ERROR_GAP, i, bad);
        run = now.good ? 0 : run + 1;
        started |= now.good;
    }
    return RAMPWISE_OK;
}

/* ---- steps ---- */

/* NULL where there are none for so long a step. */
static const COEFFS *coeffs_for(STREAM *x, uint64_t ticks)
{
    if (ticks == x->ticks_)
        return &x->c_;
    if (ticks == x->other_ticks_)
        return &x->other_;
    for (size_t i = 0; i < x->interval_count_; ++i)
        if (x->intervals_[i].ticks == ticks)
            return &x->intervals_[i].c;
    const double dt = interval_dt((double)x->c_.dt, ticks, x->ticks_);
    x->other_ticks_ = 0;
    if (COEFFS_MAKE(&x->other_, &x->c_.system, dt, x->c_.input, x->c_.between) != RAMPWISE_OK)
        return NULL;
    x->other_ticks_ = ticks;
    return &x->other_;
}

/* The outputs at a state; 0 where one is not finite. */
static int outputs_at(const STREAM *x, const STATE *s, REAL *out)
{
    int finite = 1;
    for (int i = 0; i < x->output_count_; ++i) {
        const REAL *const row = x->row_[i];
        const REAL last = row[3] != 0 ? row[3] * (s->p - s->p_before) : 0;
        out[i] = FMA_OF(row[0], s->u, FMA_OF(row[1], s->v, FMA_OF(row[2], s->p, last)));
        finite &= isfinite(out[i]) != 0;
    }
    return finite;
}

/* One step over `samples` numbers to the load p; 0 and nothing changed where it overflows. */
static int advance(STREAM *x, uint64_t ticks, REAL p, uint64_t samples, uint32_t flags, REAL *out)
{
    const COEFFS *const c = coeffs_for(x, ticks);
    STATE next = x->s_;
    if (c == NULL)
        return 0;
    STEP(c, &next, p);
    if (ticks != x->ticks_) /* p_before belongs to one dt */
        next.p_before = p - (p - x->s_.p) * (x->c_.dt / c->dt);
    if (!STATE_OK(&next) || !outputs_at(x, &next, out))
        return 0;
    for (WATCH *w = x->watches_; w != NULL; w = w->next_)
        NAME(rampwise_watch_step)(w, c, &x->s_, &next, x->sample_, samples, flags);
    x->s_ = next;
    x->sample_ += samples;
    return 1;
}

/* The stream begins with this sample. */
static int begin(STREAM *x, REAL p, REAL *out)
{
    STATE s;
    START(&s, p);
    if (x->start_ == RAMPWISE_SETTLED && START_SETTLED(&x->c_, &s, p) != RAMPWISE_OK)
        return 0;
    if (!outputs_at(x, &s, out))
        return 0;
    x->s_ = s;
    x->sample_ = x->counts_.next;
    x->started_ = 1;
    ++x->counts_.starts;
    for (WATCH *w = x->watches_; w != NULL; w = w->next_)
        (void)NAME(rampwise_watch_start)(w, &s, x->sample_);
    return 1;
}

/* ---- missing samples ---- */

static void count_missing(STREAM *x, uint64_t samples)
{
    x->run_ += samples;
    x->counts_.missing += samples;
    x->counts_.next += samples;
    x->counts_.last_missing = x->counts_.next - 1;
    if (x->run_ > x->counts_.longest)
        x->counts_.longest = x->run_;
}

static int holds(const STREAM *x)
{
    return x->started_ && x->missing_ == RAMPWISE_GAP_HOLD && x->run_ < x->longest_;
}

/* One missing sample, so many ticks after the one before; 0 where the held load's response overflows. */
static int miss(STREAM *x, uint64_t ticks, REAL *out)
{
    if (!holds(x)) {
        x->pending_ += ticks;
    } else {
        if (!advance(x, ticks, x->s_.p, 1, (uint32_t)x->touched_ | RAMPWISE_BRIDGED, out))
            return 0;
        x->touched_ = RAMPWISE_BRIDGED;
    }
    count_missing(x, 1);
    return 1;
}

/* Several, one dt apart. Those beyond the longest gap, and any where the load is not held, only pass. */
static int miss_many(STREAM *x, uint64_t samples)
{
    REAL out[RAMPWISE_STREAM_OUTPUTS];
    uint64_t left = samples;
    for (; left > 0 && holds(x); --left) {
        if (!miss(x, x->ticks_, out))
            return 0;
        x->time_ += x->ticks_;
    }
    if (left > 0) {
        x->pending_ += left * x->ticks_;
        x->time_ += left * x->ticks_;
        count_missing(x, left);
    }
    return 1;
}

/* ---- samples ---- */

/* A good sample, so many ticks after the one before; its flags, or -1 where it overflows. */
static int take(STREAM *x, const sample *now, REAL *out)
{
    int flags = now->clipped ? RAMPWISE_CLIPPED : 0;
    if (!x->started_ || x->run_ > x->longest_) {
        if (!begin(x, now->p, out))
            return -1;
        flags |= RAMPWISE_STARTED;
    } else {
        const int held = x->missing_ == RAMPWISE_GAP_HOLD;
        const uint64_t samples = held ? 1 : x->run_ + 1;
        flags |= x->touched_ | (x->run_ > 0 ? RAMPWISE_BRIDGED : 0);
        if (!advance(x, x->pending_ + now->ticks, now->p, samples, (uint32_t)flags, out))
            return -1;
        x->counts_.bridges += x->run_ > 0;
    }
    x->run_ = x->pending_ = 0;
    x->touched_ = now->clipped ? RAMPWISE_CLIPPED : 0;
    ++x->counts_.good;
    if (now->clipped) {
        ++x->counts_.clipped;
        x->counts_.last_clipped = x->counts_.next;
    }
    ++x->counts_.next;
    return flags;
}

/* What a missing sample shows. */
static int show_missing(const STREAM *x, REAL *out)
{
    if (!x->started_)
        for (int i = 0; i < x->output_count_; ++i)
            out[i] = (REAL)NAN;
    else
        (void)outputs_at(x, &x->s_, out);
    return x->started_ && x->pending_ == 0 ? RAMPWISE_BRIDGED : RAMPWISE_WAITING;
}

/* Sample i of a block; its flags, or -1 where it overflows. */
static int take_one(STREAM *x, const block *in, size_t i, REAL *out)
{
    sample now = sample_of(x, in, i);
    if (in->t != NULL && x->timed_)
        now.ticks = ticks_to(x->time_, in->t[i]);
    const uint64_t skipped = skipped_in(x, now.ticks);
    if (skipped > 0 && !miss_many(x, skipped))
        return -1;
    now.ticks -= skipped * x->ticks_;
    const int flags = now.good ? take(x, &now, out) : miss(x, now.ticks, out) ? show_missing(x, out) : -1;
    if (flags < 0)
        return -1;
    if (in->t != NULL)
        x->time_ = (uint64_t)in->t[i];
    else
        x->time_ += x->timed_ ? x->ticks_ : 0;
    x->timed_ = 1;
    return flags;
}

static int put(STREAM *x, size_t n, const block *in, REAL *out, uint8_t *flags, size_t *bad)
{
    if (x == NULL || (in->p == NULL && in->raw == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_block(x, n, in, bad);
    if (status != RAMPWISE_OK)
        return status;
    for (size_t i = 0; i < n; ++i) {
        REAL frame[RAMPWISE_STREAM_OUTPUTS];
        const int touched = take_one(x, in, i, frame);
        if (touched < 0)
            return blame(RAMPWISE_ERROR_OVERFLOW, i, bad);
        for (int j = 0; out != NULL && j < x->output_count_; ++j)
            *out++ = frame[j];
        if (flags != NULL)
            flags[i] = (uint8_t)touched;
    }
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_put)(STREAM *stream, size_t n, const REAL *p, REAL *out, uint8_t *flags, size_t *bad)
{
    const block in = {p, NULL, NULL};
    return put(stream, n, &in, out, flags, bad);
}

int NAME(rampwise_stream_put_raw)(STREAM *stream, size_t n, const int32_t *raw, REAL *out, uint8_t *flags,
                                  size_t *bad)
{
    const block in = {NULL, raw, NULL};
    return put(stream, n, &in, out, flags, bad);
}

int NAME(rampwise_stream_put_at)(STREAM *stream, size_t n, const int64_t *t, const REAL *p, REAL *out,
                                 uint8_t *flags, size_t *bad)
{
    const block in = {p, NULL, t};
    return t == NULL && n > 0 ? RAMPWISE_ERROR_MISSING : put(stream, n, &in, out, flags, bad);
}

int NAME(rampwise_stream_put_raw_at)(STREAM *stream, size_t n, const int64_t *t, const int32_t *raw,
                                     REAL *out, uint8_t *flags, size_t *bad)
{
    const block in = {NULL, raw, t};
    return t == NULL && n > 0 ? RAMPWISE_ERROR_MISSING : put(stream, n, &in, out, flags, bad);
}

int NAME(rampwise_stream_skip_to)(STREAM *stream, uint64_t number)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (number < stream->counts_.next)
        return RAMPWISE_ERROR_TIME;
    if (number > stream->counts_.next && stream->missing_ == RAMPWISE_GAP_REFUSE)
        return RAMPWISE_ERROR_GAP;
    return miss_many(stream, number - stream->counts_.next) ? RAMPWISE_OK : RAMPWISE_ERROR_OVERFLOW;
}

/* ---- making, starting, reading ---- */

static int check_options(const rampwise_stream_options *o)
{
    const uint64_t most = (uint64_t)1 << 52;
    if (o->size != sizeof *o || o->output_count < 0 || o->output_count > RAMPWISE_STREAM_OUTPUTS ||
        o->ticks == 0 || o->ticks > most || o->longest >= most / o->ticks)
        return RAMPWISE_ERROR_COUNT;
    if ((o->start != RAMPWISE_AT_REST && o->start != RAMPWISE_SETTLED) || o->missing < RAMPWISE_GAP_BRIDGE ||
        o->missing > RAMPWISE_GAP_REFUSE ||
        (o->beyond != RAMPWISE_GAP_RESTART && o->beyond != RAMPWISE_GAP_REFUSE))
        return RAMPWISE_ERROR_FLAGS;
    if (!isfinite(o->scale) || !isfinite(o->offset) || isnan(o->rail_low) || isnan(o->rail_high))
        return RAMPWISE_ERROR_SAMPLE;
    return o->intervals == NULL && o->interval_count > 0 ? RAMPWISE_ERROR_MISSING : RAMPWISE_OK;
}

/* Prepared intervals must be of the oscillator c. */
static int check_intervals(const COEFFS *c, const INTERVAL *intervals, size_t count)
{
    for (size_t i = 0; i < count; ++i) {
        const COEFFS *const other = &intervals[i].c;
        if (other->system.mass != c->system.mass || other->system.damper != c->system.damper ||
            other->system.stiffness != c->system.stiffness || other->input != c->input ||
            other->between != c->between)
            return RAMPWISE_ERROR_DIFFERENT;
    }
    return RAMPWISE_OK;
}

/* Whatever follows from the coefficients, into *x; nothing else is touched. */
static int tune(STREAM *x, const COEFFS *c, const INTERVAL *intervals, size_t count)
{
    COEFFS bridge;
    STATE settled;
    if (!COEFFS_OK(c))
        return RAMPWISE_ERROR_NOT_MADE;
    int status = check_intervals(c, intervals, count);
    if (status == RAMPWISE_OK)
        status = COEFFS_MAKE(&bridge, &c->system, (double)c->dt * (2 * ((double)x->longest_ + 1)), c->input,
                             c->between);
    if (status == RAMPWISE_OK && x->start_ == RAMPWISE_SETTLED)
        status = START_SETTLED(c, &settled, 1);
    for (int i = 0; i < x->output_count_ && status == RAMPWISE_OK; ++i)
        status = OUTPUT_ROW(c, &x->output_[i], x->row_[i]);
    x->c_ = *c;
    x->other_ticks_ = 0;
    x->intervals_ = intervals;
    x->interval_count_ = count;
    return status;
}

int NAME(rampwise_stream_init)(STREAM *stream, const COEFFS *c, const rampwise_stream_options *options)
{
    STREAM made;
    if (stream == NULL || c == NULL || options == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = check_options(options);
    if (status != RAMPWISE_OK)
        return status;
    memset(&made, 0, sizeof made);
    made.start_ = options->start;
    made.missing_ = options->missing;
    made.beyond_ = options->beyond;
    made.missing_raw_ = options->missing_raw;
    made.longest_ = options->longest;
    made.ticks_ = options->ticks;
    made.scale_ = (REAL)options->scale;
    made.offset_ = (REAL)options->offset;
    made.rail_low_ = (REAL)options->rail_low;
    made.rail_high_ = (REAL)options->rail_high;
    made.output_count_ = options->output_count;
    memcpy(made.output_, options->output, sizeof made.output_);
    made.counts_.last_missing = made.counts_.last_clipped = UINT64_MAX;
    status = tune(&made, c, options->intervals, options->interval_count);
    if (status == RAMPWISE_OK)
        *stream = made;
    return status;
}

int NAME(rampwise_stream_start)(STREAM *stream, const STATE *s, uint64_t number)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (s != NULL && !STATE_OK(s))
        return RAMPWISE_ERROR_STATE;
    stream->run_ = stream->pending_ = stream->time_ = 0;
    stream->timed_ = stream->touched_ = 0;
    stream->started_ = s != NULL;
    stream->counts_.next = number;
    if (s == NULL)
        return RAMPWISE_OK;
    stream->s_ = *s;
    stream->sample_ = number;
    ++stream->counts_.next;
    ++stream->counts_.starts;
    for (WATCH *w = stream->watches_; w != NULL; w = w->next_)
        (void)NAME(rampwise_watch_start)(w, s, number);
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_read)(const STREAM *stream, REAL *out, uint8_t *flags)
{
    REAL frame[RAMPWISE_STREAM_OUTPUTS];
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!stream->started_)
        return RAMPWISE_ERROR_COUNT;
    (void)outputs_at(stream, &stream->s_, frame);
    if (out != NULL)
        memcpy(out, frame, (size_t)stream->output_count_ * sizeof *out);
    if (flags != NULL)
        *flags = stream->run_ > 0 ? (uint8_t)show_missing(stream, frame) : (uint8_t)stream->touched_;
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_state)(const STREAM *stream, STATE *s, uint64_t *number)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!stream->started_)
        return RAMPWISE_ERROR_COUNT;
    if (s != NULL)
        *s = stream->s_;
    if (number != NULL)
        *number = stream->sample_;
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_count)(const STREAM *stream, rampwise_stream_counts *counts)
{
    if (stream == NULL || counts == NULL)
        return RAMPWISE_ERROR_MISSING;
    *counts = stream->counts_;
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_retune)(STREAM *stream, const COEFFS *c, const INTERVAL *intervals,
                                 size_t interval_count)
{
    if (stream == NULL || c == NULL || (intervals == NULL && interval_count > 0))
        return RAMPWISE_ERROR_MISSING;
    if (c->dt != stream->c_.dt || c->input != stream->c_.input || c->between != stream->c_.between)
        return COEFFS_OK(c) ? RAMPWISE_ERROR_DIFFERENT : RAMPWISE_ERROR_NOT_MADE;
    STREAM tuned = *stream;
    int status = tune(&tuned, c, intervals, interval_count);
    for (const WATCH *w = stream->watches_; w != NULL && status == RAMPWISE_OK; w = w->next_)
        status = NAME(rampwise_watch_tunable_)(w, c);
    if (status != RAMPWISE_OK)
        return status;
    *stream = tuned;
    for (WATCH *w = stream->watches_; w != NULL; w = w->next_)
        (void)NAME(rampwise_watch_retune)(w, c, &stream->s_);
    return RAMPWISE_OK;
}

int NAME(rampwise_stream_attach)(STREAM *stream, WATCH *watch)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (watch == NULL) {
        stream->watches_ = NULL;
        return RAMPWISE_OK;
    }
    const int status = NAME(rampwise_watch_tunable_)(watch, &stream->c_);
    if (status != RAMPWISE_OK)
        return status;
    watch->next_ = stream->watches_;
    stream->watches_ = watch;
    return stream->started_ ? NAME(rampwise_watch_start)(watch, &stream->s_, stream->sample_) : RAMPWISE_OK;
}

/* ---- saving ---- */

static void pass_counts(saved *s, rampwise_stream_counts *counts)
{
    uint64_t *const numbers[] = {&counts->next,    &counts->good,         &counts->missing,
                                 &counts->clipped, &counts->bridges,      &counts->starts,
                                 &counts->longest, &counts->last_missing, &counts->last_clipped};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        rampwise_saved_uint64_(s, numbers[i]);
}

static void pass_outputs(saved *s, STREAM *x)
{
    for (int i = 0; i < RAMPWISE_STREAM_OUTPUTS; ++i) {
        saved_doubles(s, x->output_[i].row, 4);
        saved_int(s, &x->output_[i].quantity);
        for (int j = 0; j < 4; ++j)
            SAVED_REAL(s, &x->row_[i][j]);
    }
}

static void pass_stream(saved *s, void *object)
{
    STREAM *const x = object;
    SAVED_COEFFS(s, &x->c_);
    SAVED_COEFFS(s, &x->other_);
    SAVED_STATE(s, &x->s_);
    pass_outputs(s, x);
    REAL *const reals[] = {&x->scale_, &x->offset_, &x->rail_low_, &x->rail_high_};
    for (size_t i = 0; i < sizeof reals / sizeof *reals; ++i)
        SAVED_REAL(s, reals[i]);
    uint64_t *const wide[] = {&x->other_ticks_, &x->ticks_,  &x->longest_, &x->time_,
                              &x->pending_,     &x->sample_, &x->run_};
    for (size_t i = 0; i < sizeof wide / sizeof *wide; ++i)
        rampwise_saved_uint64_(s, wide[i]);
    pass_counts(s, &x->counts_);
    int32_t *const numbers[] = {&x->start_,        &x->missing_, &x->beyond_, &x->missing_raw_,
                                &x->output_count_, &x->started_, &x->timed_,  &x->touched_};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        saved_int(s, numbers[i]);
}

static const saved_kind kind = {SAVED_KIND, 1, pass_stream};

size_t NAME(rampwise_stream_saved_size)(const STREAM *stream)
{
    return stream != NULL ? rampwise_saved_size_(&kind, stream) : 0;
}

int NAME(rampwise_stream_save)(const STREAM *stream, void *bytes, size_t count)
{
    return stream != NULL && bytes != NULL ? rampwise_saved_write_(&kind, stream, bytes, count)
                                           : RAMPWISE_ERROR_MISSING;
}

int NAME(rampwise_stream_resume)(STREAM *stream, const void *bytes, size_t count)
{
    saved s;
    if (stream == NULL || bytes == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = rampwise_saved_open_(&kind, stream, bytes, count, &s);
    if (status != RAMPWISE_OK)
        return status;
    STREAM read = *stream;
    pass_stream(&s, &read);
    if (!COEFFS_OK(&read.c_) || !STATE_OK(&read.s_) || read.ticks_ == 0 || read.output_count_ < 0 ||
        read.output_count_ > RAMPWISE_STREAM_OUTPUTS)
        return RAMPWISE_ERROR_DAMAGED;
    status = check_intervals(&read.c_, read.intervals_, read.interval_count_);
    if (status == RAMPWISE_OK)
        *stream = read;
    return status;
}
