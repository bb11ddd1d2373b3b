#include "peaks_group.h"

#include <float.h>
#include <math.h>
#include <string.h>
#include "ends.h"
#include "lanes.h"
#include "rampwise/status.h"

/* What a segment left of each stretch: the states where it begins, the greatest and least values in it. */
typedef struct traces {
    double u[STRETCHES][LANES], v[STRETCHES][LANES];
    double error_u[STRETCHES][LANES], error_v[STRETCHES][LANES]; /* with evidence */
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
    g->with_evidence = (flags & RAMPWISE_EVIDENCE) != 0;
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
            g->excess[q][0][j] = g->at_samples && x.sampled ? 0 : x.constant;
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
    const rampwise_peak *const peak = &g->found[q][j].peak;
    const double high = peak->high.value, low = peak->low.value;
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
        g->errors.u[j] = g->errors.v[j] = 0;
        rampwise_lane_set_(&g->errors, j, &g->c[j]);
        for (size_t q = 0; q < g->quantity_count; ++q) {
            extremes x;
            rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
            const double value = rampwise_extremes_value_(&x, &now);
            const rampwise_instant first = {s != NULL ? value : 0, 0, 0}; /* at rest before anything */
            g->found[q][j] = (findings){{first, first}, {0, 0, 0, 0}};
            note_value(&g->found[q][j].peak, value, 0, 0);
            raise_floors(g, j, q);
        }
    }
}

static double larger(double a, double b)
{
    return a > b ? a : b;
}

static double smaller(double a, double b)
{
    return a < b ? a : b;
}

/* A change of the input, finite where it is beyond the range: it meets factors of zero. */
static double in_range(double change)
{
    return change < DBL_MAX ? change : DBL_MAX;
}

/* The greatest sizes of one stretch's samples and changes, the sample before it among them: in four parts,
   which do not wait for each other. */
static void bound_stretch(size_t n, double before, const double *p, double *largest_p, double *largest_change)
{
    double size[4] = {fabs(before), 0, 0, 0}, change[4] = {fabs(p[0] - before), 0, 0, 0};
    size_t i = 1;
    for (; i + 4 <= n; i += 4)
        for (size_t k = 0; k < 4; ++k) {
            size[k] = larger(fabs(p[i + k - 1]), size[k]);
            change[k] = larger(fabs(p[i + k] - p[i + k - 1]), change[k]);
        }
    for (; i < n; ++i) {
        size[0] = larger(fabs(p[i - 1]), size[0]);
        change[0] = larger(fabs(p[i] - p[i - 1]), change[0]);
    }
    size[0] = larger(fabs(p[n - 1]), size[0]);
    *largest_p = larger(larger(size[0], size[1]), larger(size[2], size[3]));
    *largest_change = in_range(larger(larger(change[0], change[1]), larger(change[2], change[3])));
}

static void bound_stretches(segment *along)
{
    for (size_t i = 0; i < along->n; i += STRETCH)
        bound_stretch(along->n - i < STRETCH ? along->n - i : STRETCH,
                      i > 0 ? along->p[i - 1] : along->from.p, along->p + i, &along->largest_p[i / STRETCH],
                      &along->largest_change[i / STRETCH]);
}

void rampwise_segment_make_(segment *along, const input_end *end, size_t n, const double *p, unsigned looks)
{
    along->from = *end;
    along->n = n;
    along->p = p;
    along->with_evidence = (looks & RAMPWISE_EVIDENCE) != 0;
    memset(along->largest_p, 0, sizeof along->largest_p);
    memset(along->largest_change, 0, sizeof along->largest_change);
    if ((looks & RAMPWISE_AT_SAMPLES) == 0)
        bound_stretches(along);
    double before = end->p;
    for (size_t i = 0; along->with_evidence && i < n; ++i) {
        along->d[i] = second_difference(before, p[i], p[i + 1]);
        before = p[i];
    }
}

void rampwise_segment_end_(const segment *along, input_end *end)
{
    const size_t n = along->n;
    end->p_before = n > 1 ? along->p[n - 2] : end->p;
    end->p = along->p[n - 1];
    end->sample += n;
    end->d = along->with_evidence ? along->d[n - 1] : 0;
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
    return k * STRETCH + 1 == back ? along->from.p : along->from.p_before;
}

/* What samples reach in any case: less than that, wherever it is, is no peak. */
typedef struct reach {
    double high, low;
} reach;

static int may_hold_more(double high, double low, reach sampled, const rampwise_peak *peak)
{
    return (high >= sampled.high && !(high <= peak->high.value)) ||
           (low <= sampled.low && !(low >= peak->low.value));
}

/* One step: its beginning where the quantity jumps, its inside where that may hold more, its end, and the
   sample there, z_next. */
static void look_into_step(const extremes *x, int inside, const rampwise_state *s, const rampwise_state *next,
                           double z, double z_next, reach sampled, uint64_t sample, rampwise_peak *peak)
{
    const double excess = x->constant + x->from_p * larger(fabs(s->p), fabs(next->p)) +
                          x->from_change * in_range(fabs(next->p - s->p)) +
                          x->from_size * larger(fabs(z), fabs(z_next));
    if (x->jumps)
        note_value(peak, rampwise_extremes_begin_(x, s, next->p), sample, 0);
    if (inside && may_hold_more(larger(z, z_next) + excess, smaller(z, z_next) - excess, sampled, peak))
        rampwise_extremes_inside_(x, s, next, sample, peak);
    if (x->jumps)
        note_value(peak, rampwise_extremes_end_(x, next), sample + 1, 0);
    note_value(peak, z_next, sample + 1, 0);
}

/* How much of the input's own error a quantity has at once, beside what the motion has: the factor of p in it
   where the motion is held still. A ramp is off by 6 f (1 - f) d at the fraction f of a step, and so by d on
   average, which is what d as the input has at the samples too. */
static double direct_share(const extremes *x)
{
    const rampwise_system *const system = &x->c->system;
    if (x->c->input == RAMPWISE_FORCE)
        return x->quantity == RAMPWISE_TOTAL_ACCELERATION ? 1 / system->mass : 0;
    if (x->c->input == RAMPWISE_BASE_ACCELERATION || x->quantity == RAMPWISE_DISPLACEMENT)
        return 0;
    return x->quantity == RAMPWISE_VELOCITY ? -1 : system->damper / system->mass;
}

/* The estimated error of the quantity where the motion's is e, under e->p = d. */
static double error_of(const extremes *x, const rampwise_state *e, double fraction)
{
    const double direct = direct_share(x);
    const double value = rampwise_extremes_value_(x, e);
    return direct != 0 ? value + direct * (6 * fraction * (1 - fraction) - 1) * e->p : value;
}

/* The second difference at the sample i after the candidate's first one; none at the record's ends. */
static double difference_at(const candidate *at, size_t i)
{
    if (at->sample + i == 0 || (at->ends_record && i == at->n))
        return 0;
    return second_difference(at->p[i], at->p[i + 1], at->p[i + 2]);
}

static double error_at(const extremes *x, const candidate *at, const rampwise_instant *when)
{
    const size_t whole = (size_t)(when->sample - at->sample);
    rampwise_state e = {at->error_u, at->error_v, difference_at(at, 0), 0};
    for (size_t i = 1; i <= whole; ++i)
        rampwise_step(x->c, &e, difference_at(at, i));
    if (when->fraction > 0 &&
        rampwise_inside(x->c, &e, difference_at(at, whole + 1), when->fraction, &e) != RAMPWISE_OK)
        return NAN;
    return error_of(x, &e, when->fraction);
}

static int moved(const rampwise_instant *before, const rampwise_instant *now)
{
    return before->sample != now->sample || before->fraction != now->fraction || before->value != now->value;
}

/* A candidate sample by sample, and inside each step that may hold more. */
static void look(const kernels *k, const peaks_group *g, const candidate *at, size_t j, size_t q,
                 findings *found)
{
    extremes x;
    double u[STRETCH], v[STRETCH], total[STRETCH], z[STRETCH + 1];
    rampwise_state s = {at->u, at->v, at->p[1], at->p[0]}, end = s;
    const rampwise_peak before = found->peak;
    rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
    const int inside = !g->at_samples && rampwise_extremes_make_(&x, &g->c[j], g->quantity[q]) == RAMPWISE_OK;
    const rampwise_history out = {u, v, NULL, x.quantity == RAMPWISE_TOTAL_ACCELERATION ? total : NULL};
    const size_t n = k->advance(x.c, &end, 0, at->n, 1, at->p + 2, &out);
    z[0] = rampwise_extremes_value_(&x, &s);
    reach sampled = {z[0], z[0]};
    for (size_t i = 0; i < n; ++i) {
        const rampwise_state next = {u[i], v[i], at->p[i + 2], at->p[i + 1]};
        z[i + 1] = out.total != NULL ? total[i] : rampwise_extremes_value_(&x, &next);
        sampled = (reach){larger(z[i + 1], sampled.high), smaller(z[i + 1], sampled.low)};
    }
    for (size_t i = 0; i < n; ++i) {
        const rampwise_state next = {u[i], v[i], at->p[i + 2], at->p[i + 1]};
        look_into_step(&x, inside, &s, &next, z[i], z[i + 1], sampled, at->sample + i, &found->peak);
        s = next;
    }
    if (g->with_evidence && moved(&before.high, &found->peak.high))
        found->evidence.error_high = error_at(&x, at, &found->peak.high);
    if (g->with_evidence && moved(&before.low, &found->peak.low))
        found->evidence.error_low = error_at(&x, at, &found->peak.low);
}

/* Stretch i of a segment as a candidate. */
static void take_candidate(candidate *to, const peaks_group *g, const segment *along, const traces *t,
                           size_t i, size_t j, double best, double most)
{
    to->best = best;
    to->most = most;
    to->u = t->u[i][j];
    to->v = t->v[i][j];
    to->error_u = t->error_u[i][j];
    to->error_v = t->error_v[i][j];
    to->sample = along->from.sample + i * STRETCH;
    to->n = samples_in(along, i);
    to->ends_record = 0;
    to->p[0] = sample_before(along, i, 2);
    to->p[1] = sample_before(along, i, 1);
    memcpy(to->p + 2, along->p + i * STRETCH, (to->n + (g->with_evidence ? 1 : 0)) * sizeof *to->p);
}

/* Stretch i against the candidate of one side; sign turns the low side into a high one. Candidates are looked
   at in the order of time, so that of equal values the earlier counts. */
static void offer(const kernels *k, peaks_group *g, const segment *along, const traces *t, size_t i, size_t j,
                  size_t q, double sign)
{
    const int bit = kernel_quantity(g->quantity[q]);
    candidate *const side = sign > 0 ? &g->high[q][j] : &g->low[q][j];
    const rampwise_peak *const peak = &g->found[q][j].peak;
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
        look(k, g, side, j, q, &g->found[q][j]);
        side->n = 0;
    }
    if (most > (sign > 0 ? peak->high.value : -peak->low.value))
        take_candidate(side, g, along, t, i, j, best, most);
    raise_floors(g, j, q);
}

/* An infinite peak on the side where the last finite state was, without an estimate. */
static void note_overflow(const extremes *x, const rampwise_state *s, uint64_t sample, findings *found)
{
    const double side = copysign(INFINITY, rampwise_extremes_value_(x, s));
    note_value(&found->peak, side, sample, 0);
    *(side > 0 ? &found->evidence.error_high : &found->evidence.error_low) = NAN;
}

/* Whose displacement or velocity is infinite stands still from here on, with a peak of its last sign. */
static void stop_lane(const kernels *k, peaks_group *g, const segment *along, const traces *t, size_t j)
{
    rampwise_state s = {t->u[0][j], t->v[0][j], along->from.p, along->from.p_before};
    const rampwise_history nothing = {NULL, NULL, NULL, NULL};
    const size_t reached = k->advance(&g->c[j], &s, 0, along->n, 1, along->p, &nothing);
    for (size_t q = 0; q < g->quantity_count; ++q) {
        extremes x;
        for (size_t i = 0; i < stretches_of(along); ++i) {
            candidate at;
            take_candidate(&at, g, along, t, i, j, 0, 0);
            look(k, g, &at, j, q, &g->found[q][j]);
        }
        rampwise_extremes_bound_(&x, &g->c[j], g->quantity[q]);
        note_overflow(&x, &s, along->from.sample + reached + 1, &g->found[q][j]);
        g->high[q][j].n = g->low[q][j].n = 0;
        raise_floors(g, j, q);
    }
    rampwise_lane_still_(&g->lanes, j);
    rampwise_lane_still_(&g->errors, j);
    g->errors.u[j] = g->errors.v[j] = 0;
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

static void run_errors(const kernels *k, peaks_group *g, const segment *along, size_t i, traces *t)
{
    memcpy(t->error_u[i], g->errors.u, sizeof t->error_u[i]);
    memcpy(t->error_v[i], g->errors.v, sizeof t->error_v[i]);
    (void)k->under_one_input(&g->errors, g->count, i > 0 ? along->d[i * STRETCH - 1] : along->from.d,
                             samples_in(along, i), along->d + i * STRETCH, NULL);
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
        if (g->with_evidence)
            run_errors(k, g, along, i, &t);
    }
    for (size_t j = 0; lost && j < g->count; ++j)
        if (!isfinite(g->lanes.u[j]) || !isfinite(g->lanes.v[j]))
            stop_lane(k, g, along, &t, j);
    for (size_t q = 0; q < g->quantity_count; ++q)
        offer_where_needed(k, g, along, &t, q);
}

/* What was found so far, candidates looked at in the order of time. */
static findings settled(const kernels *k, const peaks_group *g, size_t j, size_t q)
{
    findings found = g->found[q][j];
    const candidate *first = &g->high[q][j], *second = &g->low[q][j];
    if (first->n > 0 && second->n > 0 && second->sample < first->sample) {
        first = &g->low[q][j];
        second = &g->high[q][j];
    }
    if (first->n > 0)
        look(k, g, first, j, q, &found);
    if (second->n > 0)
        look(k, g, second, j, q, &found);
    return found;
}

/* One lane's motion and its error where the input has come to its end. */
typedef struct last_states {
    rampwise_state s, e;
    uint64_t sample;
} last_states;

/* The last step of a record with evidence, whose last second difference is zero. */
static int take_last_step(const kernels *k, const peaks_group *g, size_t j, size_t q, const extremes *x,
                          const input_end *end, last_states *last, findings *found)
{
    candidate at = {.u = last->s.u, .v = last->s.v, .error_u = last->e.u, .error_v = last->e.v};
    rampwise_state next = last->s;
    at.sample = last->sample;
    at.n = 1;
    at.ends_record = 1;
    at.p[0] = last->s.p_before;
    at.p[1] = last->s.p;
    at.p[2] = end->next;
    rampwise_step(x->c, &next, end->next);
    rampwise_step(x->c, &last->e, 0);
    ++last->sample;
    look(k, g, &at, j, q, found);
    if (!isfinite(next.u) || !isfinite(next.v)) {
        note_overflow(x, &last->s, last->sample, found);
        return 0;
    }
    last->s = next;
    return 1;
}

/* Held inputs act for one more dt. */
static void take_held_step(const peaks_group *g, const extremes *x, last_states *last, rampwise_peak *peak)
{
    rampwise_state next = last->s;
    rampwise_step(x->c, &next, last->s.p);
    const reach nothing = {-INFINITY, INFINITY};
    look_into_step(x, !g->at_samples, &last->s, &next, rampwise_extremes_value_(x, &last->s),
                   rampwise_extremes_value_(x, &next), nothing, last->sample++, peak);
    last->s = next;
}

/* The error of a value of the free motion after the last sample, whose own error is e there. */
static double error_after(const extremes *x, const last_states *last, const rampwise_instant *when)
{
    rampwise_coeffs c;
    rampwise_state e = last->e;
    const double steps = (double)(when->sample - last->sample) + when->fraction;
    if (when->sample == UINT64_MAX)
        return isfinite(when->value) ? rampwise_extremes_limit_(x, &e) : NAN;
    if (steps == 0)
        return error_of(x, &e, 0);
    if (rampwise_coeffs_make(&c, &x->c->system, steps * x->c->dt, x->c->input, RAMPWISE_RAMP) != RAMPWISE_OK)
        return NAN;
    rampwise_step(&c, &e, 0);
    return error_of(x, &e, 0);
}

/* The free motion after the last sample: instead of what was found before, or beside it. */
static void find_after(const peaks_group *g, const extremes *x, const last_states *last, unsigned flags,
                       findings *found)
{
    if (flags == RAMPWISE_RESIDUAL) {
        const rampwise_instant first = {rampwise_extremes_after_begin_(x, &last->s), last->sample, 0};
        found->peak = (rampwise_peak){first, first};
        found->evidence.error_high = found->evidence.error_low = error_of(x, &last->e, 0);
    }
    const rampwise_peak before = found->peak;
    rampwise_extremes_after_(x, &last->s, last->sample, &found->peak);
    if (g->with_evidence && moved(&before.high, &found->peak.high))
        found->evidence.error_high = error_after(x, last, &found->peak.high);
    if (g->with_evidence && moved(&before.low, &found->peak.low))
        found->evidence.error_low = error_after(x, last, &found->peak.low);
}

findings rampwise_group_findings_(const kernels *k, const peaks_group *g, size_t lane, size_t q,
                                  unsigned flags, const input_end *end)
{
    extremes x;
    findings found = settled(k, g, lane, q);
    last_states last = {{g->lanes.u[lane], g->lanes.v[lane], end->p, end->p_before},
                        {g->errors.u[lane], g->errors.v[lane], end->d, end->d},
                        end->sample};
    if (g->stopped[lane] || rampwise_extremes_make_(&x, &g->c[lane], g->quantity[q]) != RAMPWISE_OK)
        return found;
    if (end->is_behind && !take_last_step(k, g, lane, q, &x, end, &last, &found))
        return found;
    if (x.c->between == RAMPWISE_HOLD)
        take_held_step(g, &x, &last, &found.peak);
    if (flags != 0)
        find_after(g, &x, &last, flags, &found);
    return found;
}

void rampwise_group_get_(const peaks_group *g, size_t lane, group_lane *x)
{
    memset(x, 0, sizeof *x);
    x->c = g->c[lane];
    x->u = g->lanes.u[lane];
    x->v = g->lanes.v[lane];
    x->error_u = g->errors.u[lane];
    x->error_v = g->errors.v[lane];
    x->stopped = g->stopped[lane];
    for (size_t q = 0; q < g->quantity_count; ++q) {
        x->found[q] = g->found[q][lane];
        x->high[q] = g->high[q][lane];
        x->low[q] = g->low[q][lane];
    }
}

void rampwise_group_put_(peaks_group *g, size_t lane, const group_lane *x)
{
    g->lanes.u[lane] = x->u;
    g->lanes.v[lane] = x->v;
    g->errors.u[lane] = x->error_u;
    g->errors.v[lane] = x->error_v;
    g->stopped[lane] = (unsigned char)x->stopped;
    lane_block *const blocks[2] = {&g->lanes, &g->errors};
    for (size_t i = 0; i < 2; ++i)
        if (x->stopped)
            rampwise_lane_still_(blocks[i], lane);
        else
            rampwise_lane_set_(blocks[i], lane, &g->c[lane]);
    for (size_t q = 0; q < g->quantity_count; ++q) {
        g->found[q][lane] = x->found[q];
        g->high[q][lane] = x->high[q];
        g->low[q][lane] = x->low[q];
        raise_floors(g, lane, q);
    }
}
