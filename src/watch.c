#include "rampwise/watch.h"

#include <math.h>
#include <string.h>
#include "row.h"
#include "saved.h"
#include "series.h"
#include "valid.h"
#include "watch.h"
#include "whole.h"

typedef PUBLIC(watched) real_watched;
typedef PUBLIC(instant) real_instant;
typedef PUBLIC(peak) real_peak;
typedef struct PRIVATE(watch_queue) queue;
typedef struct PRIVATE(watch_level) level_state;

enum { MOST_PIECES = 64 };

/* Motion against the base, y'' + damping y' + stiffness y = f, with the input p on its line. */
typedef struct relative {
    real y, w, f, f_slope, p, p_slope;
} relative;

/* The output and its first three derivatives. */
typedef struct derivatives {
    real z, z1, z2, z3;
} derivatives;

/* One step while it is looked into. */
typedef struct passage {
    real_watch *w;
    uint64_t sample;
    real samples, pieces, piece; /* spanned; how many pieces, and which is looked at */
    uint32_t flags;
    real_peak peak; /* of the step */
} passage;

/* ---- values ---- */

static real value_at(const real_watch *w, const real_state *s)
{
    return row_value(w->row_, s);
}

/* z on its way, but for a constant that differs from step to step. */
static derivatives derivatives_of(const real_watch *w, const relative *r)
{
    const real a2 = r->f - w->damping_ * r->w - w->stiffness_ * r->y;
    const real a3 = r->f_slope - w->damping_ * a2 - w->stiffness_ * r->w;
    const real a4 = -w->damping_ * a3 - w->stiffness_ * a2;
    const real *const row = w->relative_;
    return (derivatives){row[0] * r->y + row[1] * r->w + row[2] * r->p,
                         row[0] * r->w + row[1] * a2 + row[2] * r->p_slope, row[0] * a2 + row[1] * a3,
                         row[0] * a3 + row[1] * a4};
}

static relative relative_at_begin(const real_watch *w, const real_state *s, const real_state *next, real h)
{
    const real slope = w->between_ == RAMPWISE_RAMP ? (next->p - s->p) / h : 0;
    switch (w->input_) {
    case RAMPWISE_FORCE:
        return (relative){s->u, s->v, s->p * w->inertia_, slope * w->inertia_, s->p, slope};
    case RAMPWISE_BASE_ACCELERATION:
        return (relative){s->u, s->v, -s->p, -slope, s->p, slope};
    case RAMPWISE_BASE_VELOCITY:
        return (relative){s->u, s->v, -slope, 0, s->p, slope};
    default:
        return (relative){s->u - s->p, s->v - slope, 0, 0, s->p, slope};
    }
}

static relative relative_at_end(const real_watch *w, const relative *begin, const real_state *next, real h)
{
    relative end = *begin;
    end.f += begin->f_slope * h;
    end.p = w->between_ == RAMPWISE_RAMP ? next->p : begin->p;
    end.y = next->u;
    end.w = next->v;
    if (w->input_ == RAMPWISE_BASE_DISPLACEMENT) {
        end.y -= end.p;
        end.w -= begin->p_slope;
    }
    return end;
}

/* A piece of this length later; the mass of the piece's system is the oscillator's. */
static relative later(const real_watch *w, const real_coeffs *piece, real length, const relative *r)
{
    relative end = *r;
    real_state s;
    end.f += r->f_slope * length;
    end.p += r->p_slope * length;
    PUBLIC(start)(&s, r->y, r->w, r->f / w->inertia_);
    PUBLIC(step)(piece, &s, end.f / w->inertia_);
    end.y = s.u;
    end.w = s.v;
    return end;
}

/* ---- events ---- */

static real_instant instant_at(real value, uint64_t sample)
{
    return (real_instant){.value = value, .sample = sample, .fraction = 0};
}

static real_instant instant_of(const passage *at, real x, real value)
{
    const real steps = (at->piece + x) * (at->samples / at->pieces);
    real fraction;
    const uint64_t whole = whole_of(steps, &fraction);
    return (real_instant){.value = value, .sample = at->sample + whole, .fraction = fraction};
}

static void tell(real_watch *w, int kind, int level, int direction, real_instant when, uint32_t flags)
{
    if (w->event_count_ == w->event_capacity_) {
        w->lost_ += w->event_capacity_ > 0;
        return;
    }
    const size_t place = (w->event_first_ + w->event_count_) % w->event_capacity_;
    w->events_[place] = (rampwise_event){
        when.sample, (double)when.fraction, (double)when.value, kind, direction, w->number_, level, flags, 0};
    ++w->event_count_;
}

/* Whether z takes level i over its edge, and which edge that is, in z's own sign. */
static int edge_between(const level_state *level, real z, real *edge)
{
    const real size = level->sign * z;
    *edge = level->sign * (level->beyond ? level->leave : level->enter);
    return level->beyond ? size < level->leave : size >= level->enter;
}

static void pass(real_watch *w, int i, real_instant when, uint32_t flags)
{
    level_state *const level = &w->level_[i];
    level->beyond = !level->beyond;
    level->passed += (uint64_t)level->beyond;
    level->cycles += (uint64_t)!level->beyond;
    level->latched |= level->latch;
    tell(w, RAMPWISE_EVENT_LEVEL, i, (level->sign > 0) == (level->beyond != 0) ? 1 : -1, when, flags);
}

/* The value z at one instant, come to by a jump. */
static void jump(real_watch *w, real_instant when, uint32_t flags)
{
    real edge;
    for (int i = 0; i < w->level_count_; ++i)
        if (edge_between(&w->level_[i], when.value, &edge))
            pass(w, i, when, flags);
}

/* ---- inside a step ---- */

static void note(real_peak *peak, real_instant at)
{
    if (at.value > peak->high.value)
        peak->high = at;
    if (at.value < peak->low.value)
        peak->low = at;
}

/* Where the series meets `edge` between low and high, over which it is monotone: Newton's steps, halving
   where one leaves the bracket, and every other time when eight have not ended it. */
static real meeting(const series *s, real low, real high, real edge, int rising)
{
    real x = (low + high) / 2, second;
    for (int i = 0; i < 100; ++i) {
        const real apart = series_value(s, x) - edge;
        if ((apart < 0) == rising)
            low = x;
        else
            high = x;
        real next = x - apart / series_slope(s, x, &second);
        if (apart == 0 || REAL_SIZE(next - x) <= REAL_EPSILON)
            return x;
        if (!(next > low && next < high) || (i >= 8 && i % 2 != 0))
            next = (low + high) / 2;
        if (!(low < next && next < high))
            return next;
        x = next;
    }
    return x;
}

/* A monotone stretch of a piece, from z at `low` to z_end at `high`. */
static void stretch(passage *at, const series *s, real low, real high, real z, real z_end)
{
    real_watch *const w = at->w;
    real edge;
    for (int i = 0; i < w->level_count_; ++i)
        if (edge_between(&w->level_[i], z_end, &edge)) {
            real x = z_end == edge ? high : low;
            if (z_end != edge && opposite(z - edge, z_end - edge))
                x = meeting(s, low, high, edge, z_end > z);
            pass(w, i, instant_of(at, x, edge), at->flags);
        }
    note(&at->peak, instant_of(at, high, z_end));
}

/* Whether a stretch from z to z_end passes a level, so that the series is needed. */
static int passes_level(const real_watch *w, real z_end)
{
    real edge;
    for (int i = 0; i < w->level_count_; ++i)
        if (edge_between(&w->level_[i], z_end, &edge))
            return 1;
    return 0;
}

/* The slope keeps its sign: it does not turn, or turns where it is too large to come to zero. */
static int is_monotone(const derivatives *begin, const derivatives *end, real length)
{
    const real a = REAL_SIZE(begin->z1), b = REAL_SIZE(end->z1);
    const real c = REAL_SIZE(begin->z2), d = REAL_SIZE(end->z2);
    return !opposite(begin->z1, end->z1) &&
           (!opposite(begin->z2, end->z2) || (a < b ? a : b) > 2 * length * (c > d ? c : d));
}

/* From `*from` up to x, by way of the zero of the slope between, if there is one; *from and *z become x and
   z_end. */
static void up_to(passage *at, const series *s, real *from, real *z, real x, real z_end)
{
    real second;
    const real begin = series_slope(s, *from, &second), end = series_slope(s, x, &second);
    if (opposite(begin, end)) {
        const real zero = slope_zero(s, *from, x, begin, end), there = series_value(s, zero);
        stretch(at, s, *from, zero, *z, there);
        *from = zero;
        *z = there;
    }
    stretch(at, s, *from, x, *z, z_end);
    *from = x;
    *z = z_end;
}

/* One piece, from the value z to z_end. */
static void piece(passage *at, const derivatives *begin, const derivatives *end, real length, real z,
                  real z_end)
{
    const real_watch *const w = at->w;
    const int even = is_monotone(begin, end, length);
    series s;
    real from = 0;
    if (even && !passes_level(w, z_end)) {
        note(&at->peak, instant_of(at, 1, z_end));
        return;
    }
    series_make(&s, z, begin->z1, begin->z2, begin->z3, w->damping_, w->stiffness_, length);
    if (even) {
        stretch(at, &s, 0, 1, z, z_end);
        return;
    }
    if (opposite(begin->z2, end->z2)) {
        const real turn = turning_point(&s);
        up_to(at, &s, &from, &z, turn, series_value(&s, turn));
    }
    up_to(at, &s, &from, &z, 1, z_end);
}

/* Pieces of a step of length h, or more than MOST_PIECES. */
static int pieces_of(const real_watch *w, real h)
{
    real S = REAL_SIZE(w->damping_) * h, K = REAL_SIZE(w->stiffness_) * h * h;
    int pieces = 1;
    while (pieces <= MOST_PIECES && !(S <= 1 && K <= 1)) {
        S /= 2;
        K /= 4;
        pieces *= 2;
    }
    return pieces;
}

static int make_piece(const real_coeffs *c, int pieces, real_coeffs *made)
{
    const rampwise_system system = system_of(c);
    return PUBLIC(coeffs_make)(made, &system, c->dt / pieces, RAMPWISE_FORCE, RAMPWISE_RAMP);
}

/* All pieces but the last end where they were stepped to, the last at z_end. */
static void look_into(passage *at, const real_coeffs *one, const real_state *s, const real_state *next,
                      real h, real z, real z_end)
{
    const real_watch *const w = at->w;
    const int pieces = (int)at->pieces;
    relative r = relative_at_begin(w, s, next, h);
    const relative last = relative_at_end(w, &r, next, h);
    derivatives begin = derivatives_of(w, &r);
    const real constant = z - begin.z;
    for (int i = 0; i < pieces; ++i) {
        const int ends = i + 1 == pieces;
        r = ends ? last : later(w, one, h / at->pieces, &r);
        const derivatives end = derivatives_of(w, &r);
        const real there = ends ? z_end : constant + end.z;
        at->piece = (real)i;
        piece(at, &begin, &end, h / at->pieces, z, there);
        begin = end;
        z = there;
    }
    at->piece = at->pieces - 1;
}

/* ---- the window ---- */

static real_watched *place_of(const queue *q, size_t steps, size_t i)
{
    const size_t place = q->first + i;
    return &q->place[place < steps ? place : place - steps];
}

/* Steps that begin before `oldest` leave. Steps are in the order of time. */
static void leave(queue *q, size_t steps, uint64_t oldest)
{
    size_t low = 0, high = q->count;
    while (low < high) {
        const size_t middle = low + (high - low) / 2;
        if (place_of(q, steps, middle)->begin < oldest)
            low = middle + 1;
        else
            high = middle;
    }
    q->first = q->first + low < steps ? q->first + low : q->first + low - steps;
    q->count -= low;
}

/* The greatest (sign 1) or least (-1) value of each step that no later one outdoes, the oldest first: values
   fall. The step that ended now joins, in place of those it outdoes. */
static void join(queue *q, size_t steps, real sign, real_instant at, uint64_t begin)
{
    size_t low = 0, high = q->count;
    while (low < high) {
        const size_t middle = low + (high - low) / 2;
        if (sign * place_of(q, steps, middle)->at.value < sign * at.value)
            high = middle;
        else
            low = middle + 1;
    }
    q->count = low + 1;
    *place_of(q, steps, low) = (real_watched){at, begin};
}

/* ---- the object ---- */

static int level_is_right(const rampwise_level *level)
{
    return isfinite(level->value) && isfinite(level->hysteresis) && level->hysteresis >= 0 &&
           (level->direction == 1 || level->direction == -1) && (level->latch == 0 || level->latch == 1);
}

static int check_options(const rampwise_watch_options *o)
{
    if (o->size != sizeof *o || o->level_count < 0 || o->level_count > RAMPWISE_WATCH_LEVELS)
        return RAMPWISE_ERROR_COUNT;
    if ((o->window == NULL) != (o->window_steps == 0) || (o->events == NULL) != (o->event_capacity == 0))
        return RAMPWISE_ERROR_MISSING;
    for (int i = 0; i < o->level_count; ++i)
        if (!level_is_right(&o->level[i]))
            return RAMPWISE_ERROR_STATE;
    return RAMPWISE_OK;
}

/* What follows from the coefficients. */
static int tune(real_watch *w, const real_coeffs *c)
{
    real row[4];
    int status = PUBLIC(output_row)(c, &w->output_, row);
    if (status != RAMPWISE_OK)
        return status;
    const int moved = c->input == RAMPWISE_BASE_DISPLACEMENT, ramp = c->between == RAMPWISE_RAMP;
    memcpy(w->row_, row, sizeof row);
    w->relative_[0] = row[0];
    w->relative_[1] = row[1];
    w->relative_[2] = moved ? row[2] + row[0] : row[2];
    w->jumps_ = row[3] != 0 || (!ramp && row[2] != 0);
    const rampwise_system system = system_of(c);
    w->inertia_ = (real)(1 / system.mass);
    w->damping_ = (real)(system.damper / system.mass);
    w->stiffness_ = (real)(system.stiffness / system.mass);
    w->input_ = c->input;
    w->between_ = c->between;
    w->dt_ = c->dt;
    w->step_ = (real)c->dt;
    w->pieces_ = pieces_of(w, w->step_);
    if (w->pieces_ > MOST_PIECES)
        return RAMPWISE_ERROR_STEP_LENGTH;
    return w->pieces_ > 1 ? make_piece(c, w->pieces_, &w->piece_) : RAMPWISE_OK;
}

static void set_levels(real_watch *w, const rampwise_watch_options *o)
{
    for (int i = 0; i < o->level_count; ++i) {
        const rampwise_level *const level = &o->level[i];
        const double enter = level->direction * level->value;
        w->level_[i] = (level_state){.enter = (real)enter,
                                     .leave = (real)(enter - level->hysteresis),
                                     .sign = (real)level->direction,
                                     .latch = level->latch};
    }
}

int PUBLIC(watch_init)(real_watch *watch, const real_coeffs *c, const rampwise_watch_options *options)
{
    real_watch made;
    if (watch == NULL || c == NULL || options == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = check_options(options);
    if (status != RAMPWISE_OK)
        return status;
    memset(&made, 0, sizeof made);
    made.output_ = options->output;
    made.number_ = options->number;
    made.level_count_ = options->level_count;
    made.window_steps_ = options->window_steps;
    made.events_ = options->events;
    made.event_capacity_ = options->event_capacity;
    if (options->events != NULL)
        memset(options->events, 0, options->event_capacity * sizeof *options->events);
    if (options->window != NULL) {
        memset(options->window, 0, 2 * options->window_steps * sizeof *made.high_.place);
        made.high_.place = options->window;
        made.low_.place = made.high_.place + options->window_steps;
    }
    set_levels(&made, options);
    status = tune(&made, c);
    if (status == RAMPWISE_OK)
        *watch = made;
    return status;
}

/* The spans that a reset begins anew. */
static void begin_spans(real_watch *w, real_instant now)
{
    w->since_reset_ = (real_peak){now, now};
    w->high_.first = w->high_.count = w->low_.first = w->low_.count = 0;
}

static void start(real_watch *w, const real_state *s, uint64_t sample)
{
    const real_instant now = instant_at(value_at(w, s), sample);
    w->started_ = 1;
    w->now_ = now.value;
    w->sample_ = sample;
    w->since_start_ = (real_peak){now, now};
    begin_spans(w, now);
    jump(w, now, RAMPWISE_STARTED);
}

int PUBLIC(watch_start)(real_watch *watch, const real_state *s, uint64_t sample)
{
    if (watch == NULL || s == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!state_is_finite(s))
        return RAMPWISE_ERROR_STATE;
    start(watch, s, sample);
    return RAMPWISE_OK;
}

/* A step that is not looked into. */
static void leap(real_watch *w, const real_state *after, uint64_t sample, uint32_t flags)
{
    const real_instant now = instant_at(value_at(w, after), sample);
    ++w->resets_;
    note(&w->since_start_, now);
    begin_spans(w, now);
    w->now_ = now.value;
    w->sample_ = sample;
    tell(w, RAMPWISE_EVENT_RESET, -1, 0, now, flags);
    jump(w, now, flags);
}

/* The values at the ends of the step as its own line has them. */
static real at_begin(const real_watch *w, const real_state *s, const real_state *next)
{
    const real_state *const line = w->between_ == RAMPWISE_RAMP ? next : s;
    return row_over(w->row_, s->u, s->v, s->p, line->p - line->p_before);
}

static real at_end(const real_watch *w, const real_state *s, const real_state *next)
{
    const real_state *const line = w->between_ == RAMPWISE_RAMP ? next : s;
    return row_over(w->row_, next->u, next->v, line->p, line->p - line->p_before);
}

static void jump_to(passage *at, real x, real z)
{
    const real_instant there = instant_of(at, x, z);
    note(&at->peak, there);
    jump(at->w, there, at->flags);
}

static void keep(real_watch *w, const passage *at)
{
    note(&w->since_start_, at->peak.high);
    note(&w->since_start_, at->peak.low);
    note(&w->since_reset_, at->peak.high);
    note(&w->since_reset_, at->peak.low);
    if (w->window_steps_ > 0) {
        const uint64_t oldest = w->sample_ > w->window_steps_ ? w->sample_ - w->window_steps_ : 0;
        leave(&w->high_, w->window_steps_, oldest);
        leave(&w->low_, w->window_steps_, oldest);
        join(&w->high_, w->window_steps_, 1, at->peak.high, at->sample);
        join(&w->low_, w->window_steps_, -1, at->peak.low, at->sample);
    }
}

void PUBLIC(watch_step)(real_watch *watch, const real_coeffs *c, const real_state *before,
                        const real_state *after, uint64_t sample, uint64_t samples, uint32_t flags)
{
    real_watch *const w = watch;
    real_coeffs made;
    const real_coeffs *one = &w->piece_;
    if (!w->started_)
        start(w, before, sample);
    int pieces = w->pieces_;
    real h = w->step_;
    if (memcmp(&c->dt, &w->dt_, sizeof c->dt) != 0) {
        h = (real)c->dt;
        pieces = pieces_of(w, h);
        one = &made;
        if (pieces > MOST_PIECES || (pieces > 1 && make_piece(c, pieces, &made) != RAMPWISE_OK)) {
            leap(w, after, sample + samples, flags);
            return;
        }
    }
    const real_instant first = instant_at(w->now_, sample);
    passage at = {w, sample, real_of(samples), (real)pieces, 0, flags, {first, first}};
    if (w->jumps_)
        jump_to(&at, 0, at_begin(w, before, after));
    const real z = w->jumps_ ? at_begin(w, before, after) : w->now_;
    look_into(&at, one, before, after, h, z, at_end(w, before, after));
    w->now_ = value_at(w, after);
    if (w->jumps_)
        jump_to(&at, 1, w->now_);
    w->sample_ = sample + samples;
    keep(w, &at);
}

int PRIVATE(watch_tunable)(const real_watch *watch, const real_coeffs *c)
{
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    if (c->dt != watch->dt_ || c->input != watch->input_ || c->between != watch->between_)
        return RAMPWISE_ERROR_DIFFERENT;
    real_watch tuned = *watch;
    return tune(&tuned, c);
}

int PUBLIC(watch_retune)(real_watch *watch, const real_coeffs *c, const real_state *now)
{
    if (watch == NULL || c == NULL || now == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!state_is_finite(now))
        return RAMPWISE_ERROR_STATE;
    const int status = PRIVATE(watch_tunable)(watch, c);
    if (status != RAMPWISE_OK)
        return status;
    (void)tune(watch, c);
    if (watch->started_) {
        const real_instant there = instant_at(value_at(watch, now), watch->sample_);
        watch->now_ = there.value;
        note(&watch->since_start_, there);
        note(&watch->since_reset_, there);
        jump(watch, there, 0);
    }
    return RAMPWISE_OK;
}

static rampwise_instant wide(real_instant at)
{
    return (rampwise_instant){(double)at.value, at.sample, (double)at.fraction};
}

int PUBLIC(watch_peak)(const real_watch *watch, int span, rampwise_peak *peak)
{
    if (watch == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int window = span == RAMPWISE_IN_WINDOW && watch->window_steps_ > 0;
    if (!window && span != RAMPWISE_SINCE_START && span != RAMPWISE_SINCE_RESET)
        return RAMPWISE_ERROR_QUANTITY;
    if (!watch->started_ || (window && watch->high_.count == 0))
        return RAMPWISE_ERROR_COUNT;
    if (window) {
        peak->high = wide(place_of(&watch->high_, watch->window_steps_, 0)->at);
        peak->low = wide(place_of(&watch->low_, watch->window_steps_, 0)->at);
        return RAMPWISE_OK;
    }
    const real_peak *const from = span == RAMPWISE_SINCE_START ? &watch->since_start_ : &watch->since_reset_;
    peak->high = wide(from->high);
    peak->low = wide(from->low);
    return RAMPWISE_OK;
}

int PUBLIC(watch_reset)(real_watch *watch)
{
    if (watch == NULL)
        return RAMPWISE_ERROR_MISSING;
    const real_instant now = instant_at(watch->now_, watch->sample_);
    watch->since_reset_ = (real_peak){now, now};
    return RAMPWISE_OK;
}

int PUBLIC(watch_level)(const real_watch *watch, size_t i, rampwise_level_report *report)
{
    if (watch == NULL || report == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (i >= (size_t)watch->level_count_)
        return RAMPWISE_ERROR_COUNT;
    const level_state *const level = &watch->level_[i];
    *report =
        (rampwise_level_report){level->beyond, level->beyond | level->latched, level->passed, level->cycles};
    return RAMPWISE_OK;
}

int PUBLIC(watch_release)(real_watch *watch, size_t i)
{
    if (watch == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (i >= (size_t)watch->level_count_)
        return RAMPWISE_ERROR_COUNT;
    watch->level_[i].latched &= watch->level_[i].beyond;
    return RAMPWISE_OK;
}

size_t PUBLIC(watch_events)(real_watch *watch, size_t capacity, rampwise_event *events)
{
    size_t taken = 0;
    for (; watch != NULL && events != NULL && taken < capacity && watch->event_count_ > 0; ++taken) {
        events[taken] = watch->events_[watch->event_first_];
        watch->event_first_ = (watch->event_first_ + 1) % watch->event_capacity_;
        --watch->event_count_;
    }
    return taken;
}

int PUBLIC(watch_counts)(const real_watch *watch, uint64_t *lost, uint64_t *resets)
{
    if (watch == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (lost != NULL)
        *lost = watch->lost_;
    if (resets != NULL)
        *resets = watch->resets_;
    return RAMPWISE_OK;
}

/* ---- saving ---- */

static void pass_level(saved *s, level_state *level)
{
    saved_real(s, &level->enter);
    saved_real(s, &level->leave);
    saved_real(s, &level->sign);
    rampwise_saved_uint64_(s, &level->passed);
    rampwise_saved_uint64_(s, &level->cycles);
    saved_int(s, &level->beyond);
    saved_int(s, &level->latch);
    saved_int(s, &level->latched);
}

/* All but what lies in the window and the queue. */
static void pass_members(saved *s, real_watch *w)
{
    saved_size(s, &w->window_steps_);
    saved_size(s, &w->event_capacity_);
    saved_coeffs(s, &w->piece_);
    saved_doubles(s, w->output_.row, 4);
    saved_int(s, &w->output_.quantity);
    saved_reals(s, w->row_, 4);
    saved_reals(s, w->relative_, 3);
    saved_real(s, &w->damping_);
    saved_real(s, &w->stiffness_);
    saved_real(s, &w->inertia_);
    rampwise_saved_double_(s, &w->dt_);
    saved_real(s, &w->step_);
    saved_real(s, &w->now_);
    rampwise_saved_uint64_(s, &w->sample_);
    saved_peak(s, &w->since_start_);
    saved_peak(s, &w->since_reset_);
    saved_size(s, &w->high_.first);
    saved_size(s, &w->high_.count);
    saved_size(s, &w->low_.first);
    saved_size(s, &w->low_.count);
    for (int i = 0; i < RAMPWISE_WATCH_LEVELS; ++i)
        pass_level(s, &w->level_[i]);
    saved_size(s, &w->event_first_);
    saved_size(s, &w->event_count_);
    rampwise_saved_uint64_(s, &w->lost_);
    rampwise_saved_uint64_(s, &w->resets_);
    int32_t *const numbers[] = {&w->level_count_, &w->number_, &w->pieces_, &w->input_,
                                &w->between_,     &w->jumps_,  &w->started_};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        saved_int(s, numbers[i]);
}

static void pass_event(saved *s, rampwise_event *event)
{
    rampwise_saved_uint64_(s, &event->sample);
    rampwise_saved_double_(s, &event->fraction);
    rampwise_saved_double_(s, &event->value);
    saved_int(s, &event->kind);
    saved_int(s, &event->direction);
    saved_int(s, &event->output);
    saved_int(s, &event->level);
    rampwise_saved_uint32_(s, &event->flags);
}

static void pass_arrays(saved *s, real_watch *w)
{
    for (size_t i = 0; i < w->window_steps_; ++i) {
        saved_instant(s, &w->high_.place[i].at);
        rampwise_saved_uint64_(s, &w->high_.place[i].begin);
        saved_instant(s, &w->low_.place[i].at);
        rampwise_saved_uint64_(s, &w->low_.place[i].begin);
    }
    for (size_t i = 0; i < w->event_capacity_; ++i)
        pass_event(s, &w->events_[i]);
}

static void pass_watch(saved *s, void *object)
{
    pass_members(s, object);
    pass_arrays(s, object);
}

#ifdef SINGLE_PRECISION
static const saved_kind kind = {SAVED_WATCH_F32, 1, pass_watch};
#else
static const saved_kind kind = {SAVED_WATCH, 1, pass_watch};

void rampwise_watch_options_init(rampwise_watch_options *options)
{
    memset(options, 0, sizeof *options);
    options->size = sizeof *options;
    options->output.quantity = RAMPWISE_DISPLACEMENT;
}
#endif

size_t PUBLIC(watch_saved_size)(const real_watch *watch)
{
    return rampwise_saved_size_(&kind, watch);
}

int PUBLIC(watch_save)(const real_watch *watch, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, watch, bytes, count);
}

static int queue_is_right(const queue *q, size_t capacity)
{
    return q->count <= capacity && (q->first < capacity || capacity == 0);
}

/* What the code relies on: numbers of things in their ranges, capacities those of this watch. */
static int may_become(const real_watch *read, const real_watch *watch)
{
    return read->window_steps_ == watch->window_steps_ && read->event_capacity_ == watch->event_capacity_ &&
           read->level_count_ >= 0 && read->level_count_ <= RAMPWISE_WATCH_LEVELS && read->pieces_ >= 1 &&
           read->pieces_ <= MOST_PIECES && queue_is_right(&read->high_, read->window_steps_) &&
           queue_is_right(&read->low_, read->window_steps_) && read->event_count_ <= read->event_capacity_ &&
           (read->event_first_ < read->event_capacity_ || read->event_capacity_ == 0);
}

int PUBLIC(watch_resume)(real_watch *watch, const void *bytes, size_t count)
{
    saved s;
    const int status = rampwise_saved_open_(&kind, watch, bytes, count, &s);
    if (status != RAMPWISE_OK)
        return status;
    real_watch read = *watch;
    pass_members(&s, &read);
    if (!may_become(&read, watch))
        return RAMPWISE_ERROR_DAMAGED;
    pass_arrays(&s, &read);
    *watch = read;
    return RAMPWISE_OK;
}
