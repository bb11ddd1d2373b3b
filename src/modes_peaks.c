/* Peaks of sums of modes, between the samples too: modes.h says how. */
#include <math.h>
#include <string.h>
#include "modes_peaks_core.h"

/* What bounds q'' = z over a step from its beginning. z'' + (c/m) z' + (k/m) z = 0 there, so with K the
   larger of k/m and 1/(4 dt^2) the energy z'^2 + K z^2 grows by no more than e^(1/2) in a step, and not at
   all where K = k/m: |z| <= growth sqrt(z^2 + z'^2/K), |z'| <= sqrt(K) times that. No bound where k or c is
   negative. */
struct bound {
    _Alignas(LANE_ALIGNMENT) double growth[LANES];
    double per_slope[LANES]; /* 1/sqrt(K) */
};

void rampwise_modes_peaks_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r)
{
    modes_peaks counted;
    modes_peaks *const made = rampwise_room_take_(r, 1, sizeof counted), *const x =
                                                                             made != NULL ? made : &counted;
    m->peaks = made;
    rampwise_modes_parts_take_(m, plan, r);
    x->peak = rampwise_room_take_(r, m->outputs, sizeof *x->peak);
    x->floor_high = rampwise_room_take_(r, m->width, sizeof(double));
    x->floor_low = rampwise_room_take_(r, m->width, sizeof(double));
    x->bounds = rampwise_room_take_(r, m->groups, sizeof *x->bounds);
    x->step_weight = rampwise_room_take_(r, m->groups, LANES * m->width * sizeof(double));
    x->part_weight = rampwise_room_take_(r, m->groups, LANES * m->width * sizeof(double));
    x->begin = rampwise_room_take_(r, m->groups, (size_t)TILES * 2 * LANES * sizeof(double));
    x->largest = rampwise_room_take_(r, TILES, sizeof *x->largest);
    x->excess_tile = rampwise_room_take_(r, m->width, TILES * sizeof(double));
    x->excess_step = rampwise_room_take_(r, m->width, TILE * sizeof(double));
    x->excess_part = rampwise_room_take_(r, m->width, TILE * sizeof(double));
    x->trace = rampwise_room_take_(r, m->groups, sizeof *x->trace);
    x->wanted = rampwise_room_take_(r, m->outputs, 1);
    x->which = rampwise_room_take_(r, m->outputs, sizeof *x->which);
    x->row = rampwise_room_take_(r, m->outputs, sizeof *x->row);
    x->points = rampwise_room_take_(r, m->outputs, PARTS * sizeof(double));
    x->ends = rampwise_room_take_(r, m->outputs, (PARTS + 1) * sizeof(double));
    x->spans = rampwise_room_take_(r, m->outputs, sizeof *x->spans);
    x->marked = rampwise_room_take_(r, SEGMENT, 1);
    x->series = rampwise_room_take_(r, m->outputs, MODES_TERMS * sizeof(double));
}

/* By how much a free vibration with the energy bound 1 of its second derivative in a step of length h exceeds
   its values at the ends of a stretch of length d inside: d^2/8; but at most twice its own energy bound,
   whatever the length. */
static double excess_unit(double stiffness, double damping, double h, double d)
{
    const double curved = d * d / 8;
    if (!(stiffness >= 0.25 / (h * h) && damping >= 0))
        return curved;
    return fmin(curved, 2 * inverse_of(stiffness, damping));
}

int rampwise_modes_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    modes_peaks *const x = m->peaks;
    const double h = m->dt, root_e_half = 1.2841;
    for (size_t j = 0; j < m->modes; ++j) {
        const double stiffness = -plan->c[j].acceleration[0], damping = -plan->c[j].acceleration[1];
        const double K = fmax(stiffness, 0.25 / (h * h));
        const double of_step = 1.0001 * excess_unit(stiffness, damping, h, h);
        const double of_part = 1.0001 * excess_unit(stiffness, damping, h, h / PARTS);
        bound *const b = &x->bounds[j / LANES];
        b->growth[j % LANES] = stiffness < 0 || damping < 0 ? INFINITY : stiffness < K ? root_e_half : 1;
        b->per_slope[j % LANES] = 1 / sqrt(K);
        for (size_t o = 0; o < m->outputs; ++o) {
            const size_t at = j * m->width + o;
            const double moving = m->weight_v != NULL ? fabs(m->weight_v[at]) * sqrt(K) : 0;
            x->step_weight[at] = of_step * (fabs(m->weight_u[at]) + moving);
            x->part_weight[at] = of_part * (fabs(m->weight_u[at]) + moving);
        }
    }
    rampwise_modes_peaks_start_(m);
    return rampwise_modes_parts_fill_(m, plan);
}

rampwise_peak *rampwise_modes_peak_(const rampwise_modes *m)
{
    return m->peaks->peak;
}

void rampwise_modes_peaks_start_(rampwise_modes *m)
{
    for (size_t o = 0; o < m->outputs; ++o) {
        const rampwise_instant now = {m->output[o], 0, 0};
        m->peaks->peak[o] = (rampwise_peak){now, now};
    }
}

/* The bounds of |q''| over the n steps of a tile. */
static void bound_steps(const rampwise_modes *m, size_t g, size_t n, mode_tile *tile, double (*most)[LANES])
{
    const bound *const b = &m->peaks->bounds[g];
    const double per_step = m->between == RAMPWISE_RAMP ? 1 / m->dt : 0;
    m->k->free_motion_bounds(LANES, n, m->group[g].row, per_step, tile->p, tile->u, tile->v, b->growth,
                             b->per_slope, most);
}

void rampwise_modes_peaks_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, mode_tile *tile)
{
    modes_peaks *const x = m->peaks;
    double *const largest = x->largest[t], most[TILE][LANES];
    memcpy(x->begin + (g * TILES + t) * 2 * LANES, tile->u[0], sizeof tile->u[0]);
    memcpy(x->begin + ((g * TILES + t) * 2 + 1) * LANES, tile->v[0], sizeof tile->v[0]);
    bound_steps(m, g, n, tile, most);
    memcpy(largest, most[0], sizeof most[0]);
    for (size_t i = 1; i < n; ++i)
        for (size_t j = 0; j < LANES; ++j)
            largest[j] = most[i][j] > largest[j] ? most[i][j] : largest[j];
}

void rampwise_modes_peaks_group_(rampwise_modes *m, size_t g, size_t tiles)
{
    modes_peaks *const x = m->peaks;
    if (g == 0)
        memset(x->excess_tile, 0, tiles * m->width * sizeof *x->excess_tile);
    m->k->accumulate(modes_in(m, g), tiles, x->largest[0], LANES, x->step_weight + g * LANES * m->width,
                     m->width, x->excess_tile);
    if (m->equipment != NULL)
        rampwise_equipment_bound_group_(m, g, tiles, x->largest[0]);
}

/* Held inputs make an output jump where a step ends, by no more than this. */
static void add_jumps(const rampwise_modes *m, const double *input, size_t i, double *excess)
{
    for (size_t in = 0; m->between == RAMPWISE_HOLD && in < m->inputs; ++in) {
        const double change = fabs(input[(i + 1) * m->inputs + in] - input[i * m->inputs + in]);
        for (size_t o = 0; o < m->outputs; ++o)
            excess[o] += fabs(m->direct[in * m->width + o]) * change;
    }
}

static int may_count(const modes_peaks *x, size_t o, double high, double low, double excess)
{
    return !(high + excess <= x->floor_high[o] && low - excess >= x->floor_low[o]);
}

/* And the bounds of each step. */
static void trace(rampwise_modes *m, size_t t, size_t n)
{
    modes_peaks *const x = m->peaks;
    const double *const input = m->input + t * TILE * m->inputs;
    memset(x->excess_step, 0, n * m->width * sizeof *x->excess_step);
    memset(x->excess_part, 0, n * m->width * sizeof *x->excess_part);
    for (size_t g = 0; g < m->groups; ++g) {
        const size_t modes = modes_in(m, g), at = g * LANES * m->width;
        lane_block lanes = m->group[g].lanes;
        double most[TILE][LANES];
        memcpy(lanes.u, x->begin + (g * TILES + t) * 2 * LANES, sizeof lanes.u);
        memcpy(lanes.v, x->begin + ((g * TILES + t) * 2 + 1) * LANES, sizeof lanes.v);
        (void)rampwise_modes_tile_(m, g, &lanes, n, input, &x->trace[g]);
        bound_steps(m, g, n, &x->trace[g], most);
        m->k->accumulate(modes, n, most[0], LANES, x->step_weight + at, m->width, x->excess_step);
        m->k->accumulate(modes, n, most[0], LANES, x->part_weight + at, m->width, x->excess_part);
        if (m->equipment != NULL)
            rampwise_equipment_bound_steps_(m, g, n, most[0]);
    }
    for (size_t i = 0; i < n; ++i)
        add_jumps(m, input, i, x->excess_step + i * m->width);
}

/* Which outputs may have a peak in step i of tile t; answers whether one does. */
static int want_in_step(const rampwise_modes *m, size_t t, size_t i)
{
    modes_peaks *const x = m->peaks;
    const double *const before = m->output + (t * TILE + i) * m->width, *const after = before + m->width;
    const double *const excess = x->excess_step + i * m->width;
    int any = 0;
    for (size_t o = 0; o < m->outputs; ++o) {
        x->wanted[o] = (unsigned char)may_count(x, o, larger(before[o], after[o]),
                                                smaller(before[o], after[o]), excess[o]);
        any |= x->wanted[o];
    }
    return any;
}

static chosen choose(rampwise_modes *m)
{
    modes_peaks *const x = m->peaks;
    x->count = 0;
    for (size_t o = 0; o < m->outputs; ++o)
        if (x->wanted[o] != 0) {
            x->row[o] = x->count;
            x->which[x->count++] = o;
        }
    return (chosen){x->count, x->which, m->width, m->weight_u, m->weight_v};
}

/* The chosen outputs at the ends of the parts of step k: where each begins, and where the step ends, before
   what held inputs make it jump by. */
static void make_points(rampwise_modes *m, size_t k)
{
    modes_peaks *const x = m->peaks;
    const chosen c = choose(m);
    const double *const input = rampwise_modes_part_input_(m), *const next = m->input + (k + 1) * m->inputs;
    memset(x->points, 0, c.count * PARTS * sizeof *x->points);
    for (size_t i = 0; i < c.count; ++i)
        for (size_t in = 0; in < m->inputs; ++in)
            for (size_t part = 0; part < PARTS; ++part)
                x->points[i * PARTS + part] +=
                    m->direct[in * m->width + c.which[i]] * input[part * m->inputs + in];
    rampwise_modes_at_parts_(m, &c, x->points);
    for (size_t i = 0; i < c.count; ++i) {
        double *const points = x->ends + i * (PARTS + 1);
        memcpy(points, x->points + i * PARTS, PARTS * sizeof *points);
        points[PARTS] = m->output[(k + 1) * m->width + c.which[i]];
        for (size_t in = 0; in < m->inputs; ++in)
            points[PARTS] +=
                m->direct[in * m->width + c.which[i]] * (input[PARTS * m->inputs + in] - next[in]);
    }
}

/* In which spans of step i of a tile output o may have a peak, its floors raised by its values at the ends of
   parts. */
static uint32_t spans_of(const rampwise_modes *m, size_t o, size_t i)
{
    modes_peaks *const x = m->peaks;
    const size_t parts = PARTS / rampwise_modes_spans_(m);
    const double *const y = points_of(m, o), excess = x->excess_part[i * m->width + o];
    uint32_t spans = 0;
    for (size_t part = 0; part <= PARTS; ++part)
        raise_floors(y[part], &x->floor_high[o], &x->floor_low[o]);
    for (size_t part = 0; part < PARTS; ++part)
        if (may_count(x, o, larger(y[part], y[part + 1]), smaller(y[part], y[part + 1]), excess))
            spans |= (uint32_t)1 << part / parts;
    return spans;
}

/* The series of the chosen outputs on the next piece of a span, which is `piece` of the step. */
static void make_series(rampwise_modes *m, const chosen *c, size_t piece)
{
    modes_peaks *const x = m->peaks;
    const double begin = (double)piece / (double)rampwise_modes_pieces_(m);
    const double end = (double)(piece + 1) / (double)rampwise_modes_pieces_(m);
    const double *const input = rampwise_modes_part_input_(m), *const last = input + PARTS * m->inputs;
    memset(x->series, 0, c->count * MODES_TERMS * sizeof *x->series);
    for (size_t i = 0; i < c->count; ++i)
        for (size_t in = 0; in < m->inputs; ++in) {
            const double weight = m->direct[in * m->width + c->which[i]], change = last[in] - input[in];
            x->series[i * MODES_TERMS] += weight * (input[in] + change * begin);
            x->series[i * MODES_TERMS + 1] += weight * (change * (end - begin));
        }
    rampwise_modes_series_(m, c, x->series);
}

static void look_at_piece(const rampwise_modes *m, size_t o, uint64_t sample, size_t piece)
{
    modes_peaks *const x = m->peaks;
    const size_t pieces = rampwise_modes_pieces_(m);
    const double *const series = series_of(m, o);
    rampwise_modes_curve_(series, sample, piece, pieces, &x->peak[o]);
    if (m->between == RAMPWISE_HOLD && piece + 1 == pieces) { /* where it jumps, the value before */
        double sum = 0;
        for (size_t n = MODES_TERMS; n-- > 0;)
            sum += series[n];
        rampwise_modes_note_(&x->peak[o], sum, sample + 1, 0);
    }
}

static void look_at_span(rampwise_modes *m, size_t k, size_t span)
{
    modes_peaks *const x = m->peaks;
    const size_t pieces = rampwise_modes_pieces_(m) / rampwise_modes_spans_(m);
    for (size_t o = 0; o < m->outputs; ++o)
        x->wanted[o] = x->spans[o] >> span & MAY_COUNT;
    if (m->equipment != NULL)
        rampwise_equipment_begin_span_(m, k, span);
    const chosen c = choose(m);
    rampwise_modes_begin_span_(m, span);
    for (size_t piece = span * pieces; piece < (span + 1) * pieces; ++piece) {
        make_series(m, &c, piece);
        for (size_t i = 0; i < c.count; ++i)
            if (x->wanted[c.which[i]] & MAY_COUNT)
                look_at_piece(m, c.which[i], m->sample + k, piece);
        if (m->equipment != NULL)
            rampwise_equipment_look_(m, k, span, piece);
    }
}

/* The points inside step i of tile t, and in which spans of it something may have a peak. */
static uint32_t points_of_step(rampwise_modes *m, size_t t, size_t i)
{
    modes_peaks *const x = m->peaks;
    const size_t k = t * TILE + i;
    uint32_t spans = 0;
    int any = want_in_step(m, t, i);
    if (m->equipment != NULL)
        any |= rampwise_equipment_want_(m, k);
    if (!any)
        return 0;
    rampwise_modes_parts_begin_(m, m->input + k * m->inputs);
    for (size_t g = 0; g < m->groups; ++g)
        rampwise_modes_parts_group_(m, g, x->trace[g].u[i], x->trace[g].v[i]);
    make_points(m, k);
    for (size_t o = 0; o < m->outputs; ++o) {
        x->spans[o] = x->wanted[o] & MAY_COUNT ? spans_of(m, o, i) : 0;
        spans |= x->spans[o];
    }
    return m->equipment != NULL ? spans | rampwise_equipment_spans_(m, k) : spans;
}

/* The greatest and least samples of an output in tile t of n steps. */
static void range_of(const rampwise_modes *m, size_t t, size_t n, size_t o, double *high, double *low)
{
    const double *const y = m->output + t * TILE * m->width + o;
    *high = *low = y[0];
    for (size_t i = 1; i <= n; ++i) {
        *high = y[i * m->width] > *high ? y[i * m->width] : *high;
        *low = y[i * m->width] < *low ? y[i * m->width] : *low;
    }
}

/* The samples of an output. */
static void note_samples(const rampwise_modes *m, size_t n, size_t o)
{
    modes_peaks *const x = m->peaks;
    for (size_t k = 1; k <= n; ++k) {
        const double y = m->output[k * m->width + o];
        if (y >= x->peak[o].high.value || y <= x->peak[o].low.value)
            rampwise_modes_note_(&x->peak[o], y, m->sample + k, 0);
    }
    x->floor_high[o] = x->peak[o].high.value;
    x->floor_low[o] = x->peak[o].low.value;
}

static int output_may_count(const rampwise_modes *m, size_t t, size_t n)
{
    const modes_peaks *const x = m->peaks;
    for (size_t o = 0; o < m->outputs; ++o) {
        double high, low;
        range_of(m, t, n, o, &high, &low);
        if (may_count(x, o, high, low, x->excess_tile[t * m->width + o]))
            return 1;
    }
    return 0;
}

/* Points inside the n steps of tile t; marks the steps in which there may be a peak. */
static void raise_in_tile(rampwise_modes *m, size_t t, size_t n)
{
    unsigned char *const marked = m->peaks->marked + t * TILE;
    memset(marked, 0, n);
    if (!output_may_count(m, t, n) && !(m->equipment != NULL && rampwise_equipment_may_count_(m, t, n)))
        return;
    trace(m, t, n);
    for (size_t i = 0; i < n; ++i)
        marked[i] = points_of_step(m, t, i) != 0;
}

static void look_at_tile(rampwise_modes *m, size_t t, size_t n)
{
    const unsigned char *const marked = m->peaks->marked + t * TILE;
    if (memchr(marked, 1, n) == NULL)
        return;
    trace(m, t, n);
    for (size_t i = 0; i < n; ++i) {
        const uint32_t spans = marked[i] ? points_of_step(m, t, i) : 0;
        for (size_t span = 0; span < PARTS; ++span)
            if (spans >> span & 1)
                look_at_span(m, t * TILE + i, span);
    }
}

static size_t steps_of(size_t t, size_t n)
{
    return n - t * TILE < TILE ? n - t * TILE : TILE;
}

/* Samples and points first, so that most else is outdone. */
void rampwise_modes_peaks_segment_(rampwise_modes *m, size_t n)
{
    modes_peaks *const x = m->peaks;
    for (size_t k = 0; k < n; ++k)
        add_jumps(m, m->input, k, x->excess_tile + k / TILE * m->width);
    for (size_t o = 0; o < m->outputs; ++o)
        note_samples(m, n, o);
    if (m->equipment != NULL)
        rampwise_equipment_note_(m, n);
    for (size_t t = 0; t * TILE < n; ++t)
        raise_in_tile(m, t, steps_of(t, n));
    for (size_t t = 0; t * TILE < n; ++t)
        look_at_tile(m, t, steps_of(t, n));
}
