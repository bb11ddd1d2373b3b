#include "peaks_group.h"

#include <float.h>
#include <math.h>
#include <string.h>
#include "lanes.h"
#include "rampwise/status.h"

/* What a segment left of each stretch: the states where it begins, the greatest and least values in it. */
typedef struct traces {
    double u[STRETCHES][LANES], v[STRETCHES][LANES];
    double high[STRETCHES][3][LANES], low[STRETCHES][3][LANES];
} traces;

static int kernel_quantity(int quantity)
{
    return quantity - RAMPWISE_DISPLACEMENT;
}

void rampwise_group_make_(peaks_group *g, size_t count, const rampwise_coeffs *c, size_t quantity_count,
                          const int *quantity, unsigned flags)
{
    memset(g, 0, sizeof *g);
    g->count = count;
    g->quantity_count = quantity_count;
    g->at_samples = (flags & RAMPWISE_AT_SAMPLES) != 0;
    for (size_t q = 0; q < quantity_count; ++q) {
        g->quantity[q] = quantity[q];
        g->looked |= 1u << kernel_quantity(quantity[q]);
    }
    for (size_t j = 0; j < count; ++j) {
        g->c[j] = c[j];
        for (size_t i = 0; i < 3; ++i)
            g->row[i][j] = c[j].total[i];
        for (size_t q = 0; q < quantity_count; ++q) {
            extremes x;
            rampwise_extremes_bound_(&x, &c[j], quantity[q]);
            g->excess[q][0][j] = x.constant;
            g->excess[q][1][j] = g->at_samples ? 0 : x.from_p;
            g->excess[q][2][j] = g->at_samples ? 0 : x.from_change;
            g->excess[q][3][j] = g->at_samples ? 0 : x.from_size;
        }
    }
}

/* The floors of one lane, after its peak or candidates have changed. */
static void raise_floors(peaks_group *g, size_t j, size_t q)
{
    const candidate *const top = &g->high[q][j], *const bottom = &g->low[q][j];
    const double high = g->peak[q][j].high.value, low = g->peak[q][j].low.value;
    g->floor_high[q][j] = top->n > 0 && top->best > high ? top->best : high;
    g->floor_low[q][j] = bottom->n > 0 && -bottom->best < low ? -bottom->best : low;
}

void rampwise_group_start_(peaks_group *g, const rampwise_state *s, double p0)
{
    memset(g->stopped, 0, sizeof g->stopped);
    for (size_t q = 0; q < g->quantity_count; ++q)
        for (size_t j = 0; j < g->count; ++j)
            g->high[q][j].n = g->low[q][j].n = 0;
    for (size_t j = 0; j < g->count; ++j) {
        rampwise_state now;
        rampwise_start(&now, 0, 0, p0);
        if (s != NULL)
            now = s[j];
        g->lanes.u[j] = now.u;
        g->lanes.v[j] = now.v;
        rampwise_lane_set_(&g->lanes, j, &g->c[j]);
        for (size_t q = 0; q < g->quantity_count; ++q) {
            extremes x;
            rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
            const double value = rampwise_extremes_value_(&x, &now);
            const rampwise_instant first = {s != NULL ? value : 0, 0, 0}; /* at rest before anything */
            g->peak[q][j] = (rampwise_peak){first, first};
            note_value(&g->peak[q][j], value, 0, 0);
            raise_floors(g, j, q);
        }
    }
}

/* A change of the input, finite where it is beyond the range: it meets factors of zero. */
static double in_range(double change)
{
    return change < DBL_MAX ? change : DBL_MAX;
}

void rampwise_segment_make_(segment *along, uint64_t sample, double p_before, double p_last, size_t n,
                            const double *p)
{
    along->sample = sample;
    along->n = n;
    along->p_before = p_before;
    along->p_last = p_last;
    along->p = p;
    double before = p_last;
    for (size_t i = 0; i < n; i += STRETCH) {
        double largest = fabs(before), change = 0;
        for (size_t j = i; j < n && j < i + STRETCH; ++j) {
            const double size = fabs(p[j]), apart = fabs(p[j] - before);
            largest = size > largest ? size : largest;
            change = apart > change ? apart : change;
            before = p[j];
        }
        along->largest_p[i / STRETCH] = largest;
        along->largest_change[i / STRETCH] = in_range(change);
    }
}

static size_t stretches_of(const segment *along)
{
    return (along->n + STRETCH - 1) / STRETCH;
}

static size_t samples_in(const segment *along, size_t k)
{
    return along->n - k * STRETCH < STRETCH ? along->n - k * STRETCH : STRETCH;
}

/* The sample at `back` before the first of stretch k: 1 or 2. */
static double sample_before(const segment *along, size_t k, size_t back)
{
    if (k * STRETCH >= back)
        return along->p[k * STRETCH - back];
    return k * STRETCH + 1 == back ? along->p_last : along->p_before;
}

/* One step: its beginning where the quantity jumps, its inside where that may hold more, its end, and the
   sample there, z_next. */
static void look_into_step(const extremes *x, int inside, const rampwise_state *s, const rampwise_state *next,
                           double z, double z_next, uint64_t sample, rampwise_peak *peak)
{
    const double excess = x->constant + x->from_p * fmax(fabs(s->p), fabs(next->p)) +
                          x->from_change * in_range(fabs(next->p - s->p)) +
                          x->from_size * fmax(fabs(z), fabs(z_next));
    if (x->jumps)
        note_value(peak, rampwise_extremes_begin_(x, s, next->p), sample, 0);
    if (inside &&
        !(fmax(z, z_next) + excess <= peak->high.value && fmin(z, z_next) - excess >= peak->low.value))
        rampwise_extremes_inside_(x, s, next, sample, peak);
    if (x->jumps)
        note_value(peak, rampwise_extremes_end_(x, next), sample + 1, 0);
    note_value(peak, z_next, sample + 1, 0);
}

/* A candidate sample by sample, and inside each step that may hold more. */
static void look(const kernels *k, const peaks_group *g, const candidate *at, size_t j, size_t q,
                 rampwise_peak *peak)
{
    extremes x;
    double u[STRETCH], v[STRETCH], total[STRETCH];
    rampwise_state s = {at->u, at->v, at->p[1], at->p[0]}, end = s;
    rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
    const int inside = !g->at_samples && rampwise_extremes_make_(&x, &g->c[j], g->quantity[q]) == RAMPWISE_OK;
    const rampwise_history out = {u, v, NULL, x.quantity == RAMPWISE_TOTAL_ACCELERATION ? total : NULL};
    const size_t n = k->advance(x.c, &end, 0, at->n, 1, at->p + 2, &out);
    double z = rampwise_extremes_value_(&x, &s);
    for (size_t i = 0; i < n; ++i) {
        const rampwise_state next = {u[i], v[i], at->p[i + 2], at->p[i + 1]};
        const double z_next = out.total != NULL ? total[i] : rampwise_extremes_value_(&x, &next);
        look_into_step(&x, inside, &s, &next, z, z_next, at->sample + i, peak);
        s = next;
        z = z_next;
    }
}

/* Stretch i of a segment as a candidate. */
static void take_candidate(candidate *to, const segment *along, const traces *t, size_t i, size_t j,
                           double best, double most)
{
    to->best = best;
    to->most = most;
    to->u = t->u[i][j];
    to->v = t->v[i][j];
    to->sample = along->sample + i * STRETCH;
    to->n = samples_in(along, i);
    to->p[0] = sample_before(along, i, 2);
    to->p[1] = sample_before(along, i, 1);
    memcpy(to->p + 2, along->p + i * STRETCH, to->n * sizeof *to->p);
}

/* Stretch i against the candidate of one side; sign turns the low side into a high one. Candidates are looked
   at in the order of time, so that of equal values the earlier counts. */
static void offer(const kernels *k, peaks_group *g, const segment *along, const traces *t, size_t i, size_t j,
                  size_t q, double sign)
{
    const int bit = kernel_quantity(g->quantity[q]);
    candidate *const side = sign > 0 ? &g->high[q][j] : &g->low[q][j];
    rampwise_peak *const peak = &g->peak[q][j];
    const double high = t->high[i][bit][j], low = t->low[i][bit][j];
    const double excess = g->excess[q][0][j] + g->excess[q][1][j] * along->largest_p[i] +
                          g->excess[q][2][j] * along->largest_change[i] +
                          g->excess[q][3][j] * fmax(fabs(high), fabs(low));
    const double best = sign > 0 ? high : -low, most = best + excess;
    if (!(most > (sign > 0 ? peak->high.value : -peak->low.value)))
        return;
    if (side->n > 0 && !(best > side->most)) {
        if (most < side->best || (excess == 0 && most == side->best))
            return;
        look(k, g, side, j, q, peak);
        side->n = 0;
    }
    if (most > (sign > 0 ? peak->high.value : -peak->low.value))
        take_candidate(side, along, t, i, j, best, most);
    raise_floors(g, j, q);
}

/* Whose displacement or velocity is infinite stands still from here on, with a peak of its last sign. */
static void stop_lane(const kernels *k, peaks_group *g, const segment *along, const traces *t, size_t j)
{
    rampwise_state s = {t->u[0][j], t->v[0][j], along->p_last, along->p_before};
    const rampwise_history nothing = {NULL, NULL, NULL, NULL};
    const size_t reached = k->advance(&g->c[j], &s, 0, along->n, 1, along->p, &nothing);
    for (size_t q = 0; q < g->quantity_count; ++q) {
        extremes x;
        for (size_t i = 0; i < stretches_of(along); ++i) {
            candidate at;
            take_candidate(&at, along, t, i, j, 0, 0);
            look(k, g, &at, j, q, &g->peak[q][j]);
        }
        rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
        note_value(&g->peak[q][j], copysign(INFINITY, rampwise_extremes_value_(&x, &s)),
                   along->sample + reached + 1, 0);
        g->high[q][j].n = g->low[q][j].n = 0;
        raise_floors(g, j, q);
    }
    rampwise_lane_still_(&g->lanes, j);
    g->lanes.u[j] = g->lanes.v[j] = 0;
    g->stopped[j] = 1;
}

static void offer_where_needed(const kernels *k, peaks_group *g, const segment *along, const traces *t,
                               size_t q)
{
    const int bit = kernel_quantity(g->quantity[q]);
    uint32_t flags[2 * STRETCHES];
    k->may_exceed(g->count, stretches_of(along), t->high[0][bit], t->low[0][bit], 3 * LANES, g->floor_high[q],
                  g->floor_low[q], g->excess[q], along->largest_p, along->largest_change, flags);
    for (size_t i = 0; i < 2 * stretches_of(along); ++i)
        for (size_t j = 0; flags[i] != 0; ++j, flags[i] >>= 1)
            if ((flags[i] & 1) && j < g->count && !g->stopped[j])
                offer(k, g, along, t, i / 2, j, q, i % 2 == 0 ? 1 : -1);
}

void rampwise_group_run_(const kernels *k, peaks_group *g, const segment *along)
{
    traces t;
    int lost = 0;
    for (size_t i = 0; i < stretches_of(along); ++i) {
        memcpy(t.u[i], g->lanes.u, sizeof t.u[i]);
        memcpy(t.v[i], g->lanes.v, sizeof t.v[i]);
        lost |= k->stretch(&g->lanes, g->count, g->looked, g->row, sample_before(along, i, 1),
                           samples_in(along, i), along->p + i * STRETCH, t.high[i], t.low[i]);
    }
    for (size_t j = 0; lost && j < g->count; ++j)
        if (!isfinite(g->lanes.u[j]) || !isfinite(g->lanes.v[j]))
            stop_lane(k, g, along, &t, j);
    for (size_t q = 0; q < g->quantity_count; ++q)
        offer_where_needed(k, g, along, &t, q);
}

/* The peak so far, candidates looked at in the order of time. */
static rampwise_peak settled(const kernels *k, const peaks_group *g, size_t j, size_t q)
{
    rampwise_peak peak = g->peak[q][j];
    const candidate *first = &g->high[q][j], *second = &g->low[q][j];
    if (first->n > 0 && second->n > 0 && second->sample < first->sample) {
        first = &g->low[q][j];
        second = &g->high[q][j];
    }
    if (first->n > 0)
        look(k, g, first, j, q, &peak);
    if (second->n > 0)
        look(k, g, second, j, q, &peak);
    return peak;
}

rampwise_peak rampwise_group_peak_(const kernels *k, const peaks_group *g, size_t lane, size_t q,
                                   unsigned flags, double p_before, double p, uint64_t sample)
{
    extremes x;
    rampwise_peak peak = settled(k, g, lane, q);
    rampwise_state s = {g->lanes.u[lane], g->lanes.v[lane], p, p_before};
    if (g->stopped[lane] || rampwise_extremes_make_(&x, &g->c[lane], g->quantity[q]) != RAMPWISE_OK)
        return peak;
    if (x.c->between == RAMPWISE_HOLD) {
        rampwise_state next = s;
        rampwise_step(x.c, &next, p);
        look_into_step(&x, !g->at_samples, &s, &next, rampwise_extremes_value_(&x, &s),
                       rampwise_extremes_value_(&x, &next), sample++, &peak);
        s = next;
    }
    if (flags == RAMPWISE_RESIDUAL) {
        const rampwise_instant first = {rampwise_extremes_after_begin_(&x, &s), sample, 0};
        peak = (rampwise_peak){first, first};
    }
    if (flags != 0)
        rampwise_extremes_after_(&x, &s, sample, &peak);
    return peak;
}

void rampwise_group_get_(const peaks_group *g, size_t lane, group_lane *x)
{
    memset(x, 0, sizeof *x);
    x->c = g->c[lane];
    x->u = g->lanes.u[lane];
    x->v = g->lanes.v[lane];
    x->stopped = g->stopped[lane];
    for (size_t q = 0; q < g->quantity_count; ++q) {
        x->peak[q] = g->peak[q][lane];
        x->high[q] = g->high[q][lane];
        x->low[q] = g->low[q][lane];
    }
}

void rampwise_group_put_(peaks_group *g, size_t lane, const group_lane *x)
{
    g->lanes.u[lane] = x->u;
    g->lanes.v[lane] = x->v;
    g->stopped[lane] = (unsigned char)x->stopped;
    if (x->stopped)
        rampwise_lane_still_(&g->lanes, lane);
    else
        rampwise_lane_set_(&g->lanes, lane, &g->c[lane]);
    for (size_t q = 0; q < g->quantity_count; ++q) {
        g->peak[q][lane] = x->peak[q];
        g->high[q][lane] = x->high[q];
        g->low[q][lane] = x->low[q];
        raise_floors(g, lane, q);
    }
}
