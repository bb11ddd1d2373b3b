#include "rampwise/stream.h"

#include <math.h>
#include <string.h>
#include "interval.h"
#include "row.h"
#include "saved.h"
#include "valid.h"
#include "watch.h"

typedef PUBLIC(stream) real_stream;
typedef PUBLIC(interval) real_interval;

/* A block as it came in: p or raw, t or NULL. */
typedef struct block {
    const real *p;
    const int32_t *raw;
    const int64_t *t;
} block;

/* One sample of it. */
typedef struct sample {
    real p;
    int good, clipped;
    uint64_t ticks; /* since the one before */
} sample;

/* ---- reading a block ---- */

static sample sample_of(const real_stream *x, const block *in, size_t i)
{
    const real as_put = in->raw != NULL ? (real)in->raw[i] : in->p[i];
    const int good = in->raw != NULL ? in->raw[i] != x->missing_raw_ : isfinite(as_put) != 0;
    const real p = in->raw != NULL ? REAL_FMA(x->scale_, as_put, x->offset_) : as_put;
    return (sample){p, good, good & ((as_put <= x->rail_low_) | (as_put >= x->rail_high_)), x->ticks_};
}

/* Missing samples before one that comes so many ticks after its predecessor. */
static uint64_t skipped_in(const real_stream *x, uint64_t ticks)
{
    if (ticks < x->ticks_ + (x->ticks_ + 1) / 2 || (x->numbered_ && ticks <= (x->longest_ + 1) * x->ticks_))
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
static int check_block(const real_stream *x, size_t n, const block *in, size_t *bad)
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

/* Coefficients of a step of `ticks` under those of one dt, c, of `per` ticks. */
static int make_interval(const real_coeffs *c, uint64_t per, uint64_t ticks, real_coeffs *made)
{
    const rampwise_system system = system_of(c);
    return PUBLIC(coeffs_make)(made, &system, rampwise_interval_dt_(c->dt, ticks, per), c->input, c->between);
}

/* One dt by the time of another step */
static real dt_over(const real_coeffs *c, const real_coeffs *step)
{
#ifdef SINGLE_PRECISION
    return step->rate / c->rate;
#else
    return c->dt / step->dt;
#endif
}

/* NULL where there are none for so long a step. */
static const real_coeffs *coeffs_for(real_stream *x, uint64_t ticks)
{
    if (ticks == x->ticks_)
        return &x->c_;
    if (ticks == x->other_ticks_)
        return &x->other_;
    for (size_t i = 0; i < x->interval_count_; ++i)
        if (x->intervals_[i].ticks == ticks)
            return &x->intervals_[i].c;
    x->other_ticks_ = 0;
    if (make_interval(&x->c_, x->ticks_, ticks, &x->other_) != RAMPWISE_OK)
        return NULL;
    x->other_ticks_ = ticks;
    return &x->other_;
}

/* The outputs at a state; 0 where one is not finite. */
static int outputs_at(const real_stream *x, const real_state *s, real *out)
{
    int finite = 1;
    for (int i = 0; i < x->output_count_; ++i) {
        out[i] = row_value(x->row_[i], s);
        finite &= isfinite(out[i]) != 0;
    }
    return finite;
}

#ifdef SINGLE_PRECISION
typedef uint32_t real_bits;
#else
typedef uint64_t real_bits;
#endif

/* x, or +0 where the condition, 0 or 1, holds. */
static real unless(int condition, real x)
{
    real_bits bits;
    memcpy(&bits, &x, sizeof bits);
    bits &= (real_bits)condition - 1;
    memcpy(&x, &bits, sizeof bits);
    return x;
}

/* The step of step.h, bit for bit, with masks where compilers make branches of the rule of silence: every
   sample takes the same instructions. */
static void step_evenly(const real_coeffs *c, real_state *s, real p)
{
#ifdef SINGLE_PRECISION
    const real spent = 0x1p-100f;
    const int silent = rampwise_silent_f32_(s->p, p);
    rampwise_next_f32_(c, s, p);
    const int u_spent = silent & (s->u < spent) & (s->u > -spent);
    const int v_spent = silent & (s->v < spent) & (s->v > -spent);
    s->u_low = unless(u_spent, s->u_low);
    s->v_low = unless(v_spent, s->v_low);
#else
    const real spent = 0x1p-960;
    const int silent = rampwise_silent_(s->p, p);
    const real u = rampwise_next_u_(c, s->u, s->v, s->p, p), v = rampwise_next_v_(c, s->u, s->v, s->p, p);
    const int u_spent = silent & (u < spent) & (u > -spent), v_spent = silent & (v < spent) & (v > -spent);
    *s = (real_state){u, v, p, s->p};
#endif
    s->u = unless(u_spent, s->u);
    s->v = unless(v_spent, s->v);
}

/* One step over `samples` numbers to the load p; 0 and nothing changed where it overflows. */
static int advance(real_stream *x, uint64_t ticks, real p, uint64_t samples, uint32_t flags, real *out)
{
    const real_coeffs *const c = coeffs_for(x, ticks);
    real_state next = x->s_;
    if (c == NULL)
        return 0;
    step_evenly(c, &next, p);
    if (ticks != x->ticks_) /* p_before belongs to one dt */
        next.p_before = p - (p - x->s_.p) * dt_over(&x->c_, c);
    if (!state_is_finite(&next) || !outputs_at(x, &next, out))
        return 0;
    for (real_watch *w = x->watches_; w != NULL; w = w->next_)
        PUBLIC(watch_step)(w, c, &x->s_, &next, x->sample_, samples, flags);
    x->s_ = next;
    x->sample_ += samples;
    return 1;
}

/* The stream begins with this sample. */
static int begin(real_stream *x, real p, real *out)
{
    real_state s;
    PUBLIC(start)(&s, 0, 0, p);
    if (x->start_ == RAMPWISE_SETTLED && PUBLIC(start_settled)(&x->c_, &s, p) != RAMPWISE_OK)
        return 0;
    if (!outputs_at(x, &s, out))
        return 0;
    x->s_ = s;
    x->sample_ = x->counts_.next;
    x->started_ = 1;
    ++x->counts_.starts;
    for (real_watch *w = x->watches_; w != NULL; w = w->next_)
        (void)PUBLIC(watch_start)(w, &s, x->sample_);
    return 1;
}

/* ---- missing samples ---- */

static void count_missing(real_stream *x, uint64_t samples)
{
    x->run_ += samples;
    x->counts_.missing += samples;
    x->counts_.next += samples;
    x->counts_.last_missing = x->counts_.next - 1;
    if (x->run_ > x->counts_.longest)
        x->counts_.longest = x->run_;
}

static int holds(const real_stream *x)
{
    return x->started_ && x->missing_ == RAMPWISE_GAP_HOLD && x->run_ < x->longest_;
}

/* One missing sample, so many ticks after the one before; 0 where the held load's response overflows. */
static int miss(real_stream *x, uint64_t ticks, real *out)
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
static int miss_many(real_stream *x, uint64_t samples)
{
    real out[RAMPWISE_STREAM_OUTPUTS];
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
static int take(real_stream *x, const sample *now, real *out)
{
    int flags = now->clipped * RAMPWISE_CLIPPED;
    if (!x->started_ || x->run_ > x->longest_) {
        if (!begin(x, now->p, out))
            return -1;
        flags |= RAMPWISE_STARTED;
    } else {
        const int held = x->missing_ == RAMPWISE_GAP_HOLD;
        const uint64_t samples = held ? 1 : x->run_ + 1;
        flags |= x->touched_ | (x->run_ > 0) * RAMPWISE_BRIDGED;
        if (!advance(x, x->pending_ + now->ticks, now->p, samples, (uint32_t)flags, out))
            return -1;
        x->counts_.bridges += x->run_ > 0;
    }
    x->run_ = x->pending_ = 0;
    x->touched_ = now->clipped * RAMPWISE_CLIPPED;
    ++x->counts_.good;
    x->counts_.clipped += (uint64_t)now->clipped;
    x->counts_.last_clipped += (x->counts_.next - x->counts_.last_clipped) * (uint64_t)now->clipped;
    ++x->counts_.next;
    return flags;
}

/* What a missing sample shows. */
static int show_missing(const real_stream *x, real *out)
{
    if (!x->started_)
        for (int i = 0; i < x->output_count_; ++i)
            out[i] = (real)NAN;
    else
        (void)outputs_at(x, &x->s_, out);
    const int held = x->started_ && x->missing_ == RAMPWISE_GAP_HOLD && x->run_ <= x->longest_;
    return held ? RAMPWISE_BRIDGED : RAMPWISE_WAITING;
}

/* Sample i of a block; its flags, or -1 where it overflows. */
static int take_one(real_stream *x, const block *in, size_t i, real *out)
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
    x->flags_ = flags;
    return flags;
}

static int put(real_stream *x, size_t n, const block *in, real *out, uint8_t *flags, size_t *bad)
{
    if (x == NULL || (in->p == NULL && in->raw == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_block(x, n, in, bad);
    if (status != RAMPWISE_OK)
        return status;
    for (size_t i = 0; i < n; ++i) {
        real frame[RAMPWISE_STREAM_OUTPUTS];
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

int PUBLIC(stream_put)(real_stream *stream, size_t n, const real *p, real *out, uint8_t *flags, size_t *bad)
{
    const block in = {p, NULL, NULL};
    return put(stream, n, &in, out, flags, bad);
}

int PUBLIC(stream_put_raw)(real_stream *stream, size_t n, const int32_t *raw, real *out, uint8_t *flags,
                           size_t *bad)
{
    const block in = {NULL, raw, NULL};
    return put(stream, n, &in, out, flags, bad);
}

int PUBLIC(stream_put_at)(real_stream *stream, size_t n, const int64_t *t, const real *p, real *out,
                          uint8_t *flags, size_t *bad)
{
    const block in = {p, NULL, t};
    return t == NULL && n > 0 ? RAMPWISE_ERROR_MISSING : put(stream, n, &in, out, flags, bad);
}

int PUBLIC(stream_put_raw_at)(real_stream *stream, size_t n, const int64_t *t, const int32_t *raw, real *out,
                              uint8_t *flags, size_t *bad)
{
    const block in = {NULL, raw, t};
    return t == NULL && n > 0 ? RAMPWISE_ERROR_MISSING : put(stream, n, &in, out, flags, bad);
}

int PUBLIC(stream_skip_to)(real_stream *stream, uint64_t number)
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
        (o->beyond != RAMPWISE_GAP_RESTART && o->beyond != RAMPWISE_GAP_REFUSE) || o->numbered < 0 ||
        o->numbered > 1)
        return RAMPWISE_ERROR_FLAGS;
    if (!isfinite(o->scale) || !isfinite(o->offset) || isnan(o->rail_low) || isnan(o->rail_high))
        return RAMPWISE_ERROR_SAMPLE;
    return o->intervals == NULL && o->interval_count > 0 ? RAMPWISE_ERROR_MISSING : RAMPWISE_OK;
}

/* Prepared intervals must be of the oscillator c. */
static int check_intervals(const real_coeffs *c, const real_interval *intervals, size_t count)
{
    const rampwise_system system = system_of(c);
    for (size_t i = 0; i < count; ++i) {
        const rampwise_system other = system_of(&intervals[i].c);
        if (other.mass != system.mass || other.damper != system.damper ||
            other.stiffness != system.stiffness || intervals[i].c.input != c->input ||
            intervals[i].c.between != c->between)
            return RAMPWISE_ERROR_DIFFERENT;
    }
    return RAMPWISE_OK;
}

/* Whatever follows from the coefficients, into *x; nothing else is touched. */
static int tune(real_stream *x, const real_coeffs *c, const real_interval *intervals, size_t count)
{
    real_coeffs bridge;
    real_state settled;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    int status = check_intervals(c, intervals, count);
    if (status == RAMPWISE_OK)
        status = make_interval(c, 1, 2 * (x->longest_ + 1), &bridge);
    if (status == RAMPWISE_OK && x->start_ == RAMPWISE_SETTLED)
        status = PUBLIC(start_settled)(c, &settled, 1);
    for (int i = 0; i < x->output_count_ && status == RAMPWISE_OK; ++i)
        status = PUBLIC(output_row)(c, &x->output_[i], x->row_[i]);
    x->c_ = *c;
    x->other_ticks_ = 0;
    x->intervals_ = intervals;
    x->interval_count_ = count;
    return status;
}

int PUBLIC(stream_init)(real_stream *stream, const real_coeffs *c, const rampwise_stream_options *options)
{
    real_stream made;
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
    made.scale_ = (real)options->scale;
    made.offset_ = (real)options->offset;
    made.rail_low_ = (real)options->rail_low;
    made.rail_high_ = (real)options->rail_high;
    made.output_count_ = options->output_count;
    made.numbered_ = options->numbered;
    memcpy(made.output_, options->output, sizeof made.output_);
    made.counts_.last_missing = made.counts_.last_clipped = UINT64_MAX;
    status = tune(&made, c, options->intervals, options->interval_count);
    if (status == RAMPWISE_OK)
        *stream = made;
    return status;
}

int PUBLIC(stream_start)(real_stream *stream, const real_state *s, uint64_t number)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (s != NULL && !state_is_finite(s))
        return RAMPWISE_ERROR_STATE;
    stream->run_ = stream->pending_ = stream->time_ = 0;
    stream->timed_ = stream->touched_ = stream->flags_ = 0;
    stream->started_ = s != NULL;
    stream->counts_.next = number;
    if (s == NULL)
        return RAMPWISE_OK;
    stream->s_ = *s;
    stream->sample_ = number;
    ++stream->counts_.next;
    ++stream->counts_.starts;
    for (real_watch *w = stream->watches_; w != NULL; w = w->next_)
        (void)PUBLIC(watch_start)(w, s, number);
    return RAMPWISE_OK;
}

int PUBLIC(stream_read)(const real_stream *stream, real *out, uint8_t *flags)
{
    real frame[RAMPWISE_STREAM_OUTPUTS];
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!stream->started_)
        return RAMPWISE_ERROR_COUNT;
    (void)outputs_at(stream, &stream->s_, frame);
    if (out != NULL)
        memcpy(out, frame, (size_t)stream->output_count_ * sizeof *out);
    if (flags != NULL)
        *flags = (uint8_t)(stream->run_ > 0 ? show_missing(stream, frame) : stream->flags_);
    return RAMPWISE_OK;
}

int PUBLIC(stream_state)(const real_stream *stream, real_state *s, uint64_t *number)
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

int PUBLIC(stream_count)(const real_stream *stream, rampwise_stream_counts *counts)
{
    if (stream == NULL || counts == NULL)
        return RAMPWISE_ERROR_MISSING;
    *counts = stream->counts_;
    return RAMPWISE_OK;
}

int PUBLIC(stream_retune)(real_stream *stream, const real_coeffs *c, const real_interval *intervals,
                          size_t interval_count)
{
    if (stream == NULL || c == NULL || (intervals == NULL && interval_count > 0))
        return RAMPWISE_ERROR_MISSING;
    if (!same_dt(c, &stream->c_) || c->input != stream->c_.input || c->between != stream->c_.between)
        return coeffs_are_made(c) ? RAMPWISE_ERROR_DIFFERENT : RAMPWISE_ERROR_NOT_MADE;
    real_stream tuned = *stream;
    int status = tune(&tuned, c, intervals, interval_count);
    for (const real_watch *w = stream->watches_; w != NULL && status == RAMPWISE_OK; w = w->next_)
        status = PRIVATE(watch_tunable)(w, c);
    if (status != RAMPWISE_OK)
        return status;
    *stream = tuned;
    for (real_watch *w = stream->watches_; w != NULL; w = w->next_)
        (void)PUBLIC(watch_retune)(w, c, &stream->s_);
    return RAMPWISE_OK;
}

int PUBLIC(stream_attach)(real_stream *stream, real_watch *watch)
{
    if (stream == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (watch == NULL) {
        stream->watches_ = NULL;
        return RAMPWISE_OK;
    }
    const int status = PRIVATE(watch_tunable)(watch, &stream->c_);
    if (status != RAMPWISE_OK)
        return status;
    for (const real_watch *w = stream->watches_; w != NULL; w = w->next_)
        if (w == watch)
            return RAMPWISE_OK;
    watch->next_ = stream->watches_;
    stream->watches_ = watch;
    return stream->started_ ? PUBLIC(watch_start)(watch, &stream->s_, stream->sample_) : RAMPWISE_OK;
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

static void pass_outputs(saved *s, real_stream *x)
{
    for (int i = 0; i < RAMPWISE_STREAM_OUTPUTS; ++i) {
        saved_doubles(s, x->output_[i].row, 4);
        saved_int(s, &x->output_[i].quantity);
        for (int j = 0; j < 4; ++j)
            saved_real(s, &x->row_[i][j]);
    }
}

static void pass_stream(saved *s, void *object)
{
    real_stream *const x = object;
    saved_coeffs(s, &x->c_);
    saved_coeffs(s, &x->other_);
    saved_state(s, &x->s_);
    pass_outputs(s, x);
    real *const reals[] = {&x->scale_, &x->offset_, &x->rail_low_, &x->rail_high_};
    for (size_t i = 0; i < sizeof reals / sizeof *reals; ++i)
        saved_real(s, reals[i]);
    uint64_t *const wide[] = {&x->other_ticks_, &x->ticks_,  &x->longest_, &x->time_,
                              &x->pending_,     &x->sample_, &x->run_};
    for (size_t i = 0; i < sizeof wide / sizeof *wide; ++i)
        rampwise_saved_uint64_(s, wide[i]);
    pass_counts(s, &x->counts_);
    int32_t *const numbers[] = {&x->start_,   &x->missing_, &x->beyond_,  &x->missing_raw_, &x->output_count_,
                                &x->started_, &x->timed_,   &x->touched_, &x->flags_,       &x->numbered_};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        saved_int(s, numbers[i]);
}

#ifdef SINGLE_PRECISION
static const saved_kind kind = {SAVED_STREAM_F32, 1, pass_stream};
#else
static const saved_kind kind = {SAVED_STREAM, 1, pass_stream};

void rampwise_stream_options_init(rampwise_stream_options *options)
{
    memset(options, 0, sizeof *options);
    options->size = sizeof *options;
    options->start = RAMPWISE_AT_REST;
    options->missing = RAMPWISE_GAP_BRIDGE;
    options->beyond = RAMPWISE_GAP_RESTART;
    options->missing_raw = INT32_MIN;
    options->longest = 10;
    options->ticks = 1;
    options->scale = 1;
    options->rail_low = -INFINITY;
    options->rail_high = INFINITY;
    options->output_count = 1;
    options->output[0].quantity = RAMPWISE_DISPLACEMENT;
}
#endif

int PUBLIC(interval_make)(real_interval *interval, const real_coeffs *c, uint64_t ticks,
                          uint64_t interval_ticks)
{
    const uint64_t most = (uint64_t)1 << 53;
    real_interval made;
    if (interval == NULL || c == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    if (ticks == 0 || interval_ticks == 0 || ticks > most || interval_ticks > most)
        return RAMPWISE_ERROR_COUNT;
    made.ticks = interval_ticks;
    const int status = make_interval(c, ticks, interval_ticks, &made.c);
    if (status == RAMPWISE_OK)
        *interval = made;
    return status;
}

size_t PUBLIC(stream_saved_size)(const real_stream *stream)
{
    return rampwise_saved_size_(&kind, stream);
}

int PUBLIC(stream_save)(const real_stream *stream, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, stream, bytes, count);
}

int PUBLIC(stream_resume)(real_stream *stream, const void *bytes, size_t count)
{
    saved s;
    int status = rampwise_saved_open_(&kind, stream, bytes, count, &s);
    if (status != RAMPWISE_OK)
        return status;
    real_stream read = *stream;
    pass_stream(&s, &read);
    if (!coeffs_are_made(&read.c_) || !state_is_finite(&read.s_) || read.ticks_ == 0 ||
        read.output_count_ < 0 || read.output_count_ > RAMPWISE_STREAM_OUTPUTS)
        return RAMPWISE_ERROR_DAMAGED;
    status = check_intervals(&read.c_, read.intervals_, read.interval_count_);
    if (status == RAMPWISE_OK)
        *stream = read;
    return status;
}
