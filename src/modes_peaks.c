/* Peaks of sums of modes, between the samples too: modes.h says how. */
#include <math.h>
#include <string.h>
#include "modes_core.h"

/* Powers of a series on a piece with w h and c h/m up to 1: the next are below 2^-60 of the first. */
enum { POWERS = MODES_POWERS };

/* What bounds q'' = z over a step from its beginning. z'' + (c/m) z' + (k/m) z = 0 there, so with K the larger of
   k/m and 1/(4 dt^2) the energy z'^2 + K z^2 grows by no more than e^(1/2) in a step, and not at all where K = k/m:
   |z| <= growth sqrt(z^2 + z'^2/K), |z'| <= sqrt(K) times that. No bound where k or c is negative. */
typedef struct bound {
    _Alignas(LANE_ALIGNMENT) double growth[LANES];
    double per_slope[LANES]; /* 1/sqrt(K) */
} bound;

/* A group on its way through the pieces of a step: its state, per piece of time, and its load and load's change. */
typedef struct walk {
    double u[LANES], v[LANES], load[LANES], change[LANES];
} walk;

struct modes_peaks {
    rampwise_peak *peak;               /* [outputs] */
    double *floor_high, *floor_low;    /* [outputs]: of the peak so far and the segment's samples */
    bound *bounds;                     /* [groups] */
    double *excess_weight;             /* [groups][LANES][width] */
    double *begin;                     /* [groups][TILES][2][LANES] */
    double (*largest)[LANES];          /* [TILES]: of the present group */
    double *excess_tile, *excess_step; /* [TILES][width], [TILE][width] */
    mode_tile *trace;                  /* [groups]: of a tile that is looked at */
    walk *at;                          /* [groups]: inside a step that is looked into */
    double *series;                    /* [POWERS + 1][width]: of all outputs on one piece of it */
    unsigned char *first;              /* [outputs]: the tile of the segment that promises most */
    unsigned char *wanted;             /* [outputs]: those to be looked at in a step */
    size_t pieces;
};

/* At least so many pieces of a step that w h and c h/m are at most 1 on each. */
static size_t pieces_for(size_t pieces, const rampwise_system *sys, double h)
{
    const double S = fabs(sys->damper / sys->mass) * h, K = fabs(sys->stiffness / sys->mass) * h * h;
    while (pieces < 1024 && (S > (double)pieces || K > (double)pieces * (double)pieces))
        pieces *= 2;
    return pieces;
}

void rampwise_modes_peaks_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r)
{
    modes_peaks counted;
    modes_peaks *const made = rampwise_room_take_(r, 1, sizeof counted), *const x =
                                                                             made != NULL ? made : &counted;
    m->peaks = made;
    x->pieces = 1;
    for (size_t j = 0; j < plan->modes; ++j)
        x->pieces = pieces_for(x->pieces, &plan->c[j].system, plan->c->dt);
    for (size_t i = 0; i < plan->equipment_count; ++i)
        x->pieces = pieces_for(x->pieces, &plan->equipment[i], plan->c->dt);
    x->peak = rampwise_room_take_(r, m->outputs, sizeof *x->peak);
    x->floor_high = rampwise_room_take_(r, m->width, sizeof(double));
    x->floor_low = rampwise_room_take_(r, m->width, sizeof(double));
    x->bounds = rampwise_room_take_(r, m->groups, sizeof *x->bounds);
    x->excess_weight = rampwise_room_take_(r, m->groups, LANES * m->width * sizeof(double));
    x->begin = rampwise_room_take_(r, m->groups, (size_t)TILES * 2 * LANES * sizeof(double));
    x->largest = rampwise_room_take_(r, TILES, sizeof *x->largest);
    x->excess_tile = rampwise_room_take_(r, m->width, TILES * sizeof(double));
    x->excess_step = rampwise_room_take_(r, m->width, TILE * sizeof(double));
    x->trace = rampwise_room_take_(r, m->groups, sizeof *x->trace);
    x->at = rampwise_room_take_(r, m->groups, sizeof *x->at);
    x->series = rampwise_room_take_(r, m->width, (POWERS + 1) * sizeof(double));
    x->first = rampwise_room_take_(r, m->outputs, 1);
    x->wanted = rampwise_room_take_(r, m->outputs, 1);
}

double rampwise_modes_inverse_(double stiffness, double damping)
{
    const double ratio = 0.5 * damping / sqrt(stiffness), inverse = ratio + sqrt(1 + ratio * ratio);
    return inverse * inverse / stiffness;
}

/* By how much a free vibration with the energy bound 1 of its second derivative exceeds its values at the ends of a
   step: h^2/8; but at most twice its own energy bound, whatever the step. */
static double excess_unit(double stiffness, double damping, double h)
{
    const double curved = h * h / 8;
    if (!(stiffness >= 0.25 / (h * h) && damping >= 0))
        return curved;
    return fmin(curved, 2 * rampwise_modes_inverse_(stiffness, damping));
}

void rampwise_modes_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    modes_peaks *const x = m->peaks;
    const double h = m->dt, root_e_half = 1.2841;
    for (size_t j = 0; j < m->modes; ++j) {
        const double stiffness = -plan->c[j].acceleration[0], damping = -plan->c[j].acceleration[1];
        const double K = fmax(stiffness, 0.25 / (h * h)), unit = 1.0001 * excess_unit(stiffness, damping, h);
        bound *const b = &x->bounds[j / LANES];
        b->growth[j % LANES] = stiffness < 0 || damping < 0 ? INFINITY : stiffness < K ? root_e_half : 1;
        b->per_slope[j % LANES] = 1 / sqrt(K);
        for (size_t o = 0; o < m->outputs; ++o) {
            const size_t at = j * m->width + o;
            const double moving = m->weight_v != NULL ? fabs(m->weight_v[at]) * sqrt(K) : 0;
            x->excess_weight[at] = unit * (fabs(m->weight_u[at]) + moving);
        }
    }
    rampwise_modes_peaks_start_(m);
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
    m->k->accumulate(modes_in(m, g), tiles, x->largest[0], LANES, x->excess_weight + g * LANES * m->width,
                     m->width, x->excess_tile);
    if (m->equipment != NULL)
        rampwise_equipment_bound_group_(m, g, tiles, x->largest[0]);
}

#define PER(n) 1.0 / (((n) + 1) * ((n) + 2))
#define PER_FIVE(n) PER(n), PER((n) + 1), PER((n) + 2), PER((n) + 3), PER((n) + 4)
const double rampwise_modes_per_term_[POWERS + 1] = {PER_FIVE(0), PER_FIVE(5), PER_FIVE(10), PER_FIVE(15),
                                                     PER_FIVE(20)};
#undef PER
#undef PER_FIVE

/* All groups where the step from row i of a tile begins. */
static void begin_walk(const rampwise_modes *m, size_t i)
{
    modes_peaks *const x = m->peaks;
    const double d = m->dt / (double)x->pieces;
    for (size_t g = 0; g < m->groups; ++g) {
        const mode_tile *const from = &x->trace[g];
        walk *const at = &x->at[g];
        for (size_t j = 0; j < LANES; ++j) {
            const double per_load = m->group[g].row[2][j] * d * d;
            const double change = m->between == RAMPWISE_RAMP ? from->p[i + 1][j] - from->p[i][j] : 0;
            at->u[j] = from->u[i][j];
            at->v[j] = from->v[i][j] * d;
            at->load[j] = per_load * from->p[i][j];
            at->change[j] = per_load * change / (double)x->pieces;
        }
    }
}

/* a[n + 2] of all lanes; answers whether all of row n + 1 and n + 2 are below 2^-60. */
static int next_row(const walk *at, const double *S, const double *K, size_t n, double (*a)[LANES])
{
    int ended = n >= 2;
    for (size_t j = 0; j < LANES; ++j) {
        const double load = n == 0 ? at->load[j] : n == 1 ? at->change[j] : 0;
        a[n + 2][j] =
            (load - S[j] * ((double)(n + 1) * a[n + 1][j]) - K[j] * a[n][j]) * rampwise_modes_per_term_[n];
    }
    for (size_t j = 0; ended && j < LANES; ++j) {
        const double size = fabs(at->u[j]) + fabs(at->v[j]) + fabs(at->load[j]) + fabs(at->change[j]);
        ended = fabs(a[n + 2][j]) + fabs(a[n + 1][j]) <= 0x1p-60 * size;
    }
    return ended;
}

/* The series of one group on the present piece, q = sum of a[n] x^n with x the time in pieces:
   (n + 1)(n + 2) a[n + 2] = f[n] - S (n + 1) a[n + 1] - K a[n]. Goes on to the next piece; answers how many terms. */
static size_t group_series(const rampwise_modes *m, size_t g, double (*a)[LANES])
{
    walk *const at = &m->peaks->at[g];
    const double d = m->dt / (double)m->peaks->pieces;
    double S[LANES], K[LANES];
    for (size_t j = 0; j < LANES; ++j) {
        K[j] = -m->group[g].row[0][j] * d * d;
        S[j] = -m->group[g].row[1][j] * d;
    }
    memcpy(a[0], at->u, sizeof at->u);
    memcpy(a[1], at->v, sizeof at->v);
    size_t n = 0;
    while (n + 2 <= POWERS && !next_row(at, S, K, n, a))
        ++n;
    const size_t last = n + 2 <= POWERS ? n + 2 : POWERS;
    memset(at->u, 0, sizeof at->u);
    memset(at->v, 0, sizeof at->v);
    for (size_t k = last + 1; k-- > 0;)
        for (size_t j = 0; j < LANES; ++j) {
            at->u[j] += a[k][j];
            at->v[j] += (double)k * a[k][j];
        }
    for (size_t j = 0; j < LANES; ++j)
        at->load[j] += at->change[j];
    return last + 1;
}

/* The series of all outputs on a piece of the step from row i of a tile, whose inputs begin at `input`. */
static void make_series(const rampwise_modes *m, const double *input, size_t i, size_t piece)
{
    modes_peaks *const x = m->peaks;
    const double pieces = (double)x->pieces, per_piece = pieces / m->dt;
    memset(x->series, 0, (POWERS + 1) * m->width * sizeof *x->series);
    for (size_t in = 0; in < m->inputs; ++in) {
        const double now = input[i * m->inputs + in];
        const double change = m->between == RAMPWISE_RAMP ? input[(i + 1) * m->inputs + in] - now : 0;
        for (size_t o = 0; o < m->width; ++o) {
            const double weight = m->direct[in * m->width + o];
            x->series[o] += weight * (now + change * ((double)piece / pieces));
            x->series[m->width + o] += weight * (change / pieces);
        }
    }
    for (size_t g = 0; g < m->groups; ++g) {
        double a[POWERS + 1][LANES];
        const size_t terms = group_series(m, g, a), at = g * LANES * m->width;
        m->k->accumulate(modes_in(m, g), terms, a[0], LANES, m->weight_u + at, m->width, x->series);
        for (size_t n = 1; m->weight_v != NULL && n < terms; ++n)
            for (size_t j = 0; j < LANES; ++j)
                a[n - 1][j] = (double)n * a[n][j] * per_piece;
        if (m->weight_v != NULL)
            m->k->accumulate(modes_in(m, g), terms - 1, a[0], LANES, m->weight_v + at, m->width, x->series);
    }
}

/* One piece: its polynomial over [0, 1], bounds of the second and third derivative, and what must be exceeded. */
typedef struct curve {
    const double *a;
    double second, third, noise, floor_high, floor_low;
    uint64_t sample;
    size_t piece, pieces;
    rampwise_peak *peak;
} curve;

static double value_at(const curve *c, double x, double *slope, double *second)
{
    double value = 0, first = 0, half = 0;
    for (size_t n = POWERS + 1; n-- > 0;) {
        half = half * x + first;
        first = first * x + value;
        value = value * x + c->a[n];
    }
    *slope = first;
    *second = 2 * half;
    return value;
}

static int is_earlier(const rampwise_instant *a, const rampwise_instant *b)
{
    return a->sample < b->sample || (a->sample == b->sample && a->fraction < b->fraction);
}

/* Steps are not looked into in their order. */
void rampwise_modes_note_(rampwise_peak *peak, double value, uint64_t sample, double fraction)
{
    const rampwise_instant at = {value, sample, fraction};
    if (value > peak->high.value || (value == peak->high.value && is_earlier(&at, &peak->high)))
        peak->high = at;
    if (value < peak->low.value || (value == peak->low.value && is_earlier(&at, &peak->low)))
        peak->low = at;
}

static void note_on(const curve *c, double value, double x)
{
    const double fraction = ((double)c->piece + x) / (double)c->pieces;
    if (fraction < 1)
        rampwise_modes_note_(c->peak, value, c->sample, fraction);
    else
        rampwise_modes_note_(c->peak, value, c->sample + 1, 0);
}

/* The extreme between low and high, where the slope has opposite signs and is monotone: Newton's steps, halving
   where one leaves the bracket. */
static void note_extreme(const curve *c, double low, double high, int rising)
{
    double x = 0.5 * (low + high), slope, second, value = value_at(c, x, &slope, &second);
    for (int i = 0; i < 100 && slope != 0; ++i) {
        if ((slope < 0) == rising)
            low = x;
        else
            high = x;
        double next = x - slope / second;
        if (!(next > low && next < high))
            next = 0.5 * (low + high);
        if (fabs(next - x) <= 0x1p-50)
            break;
        x = next;
        value = value_at(c, x, &slope, &second);
    }
    note_on(c, value, x);
}

/* All extremes between low and high that can count. */
static void search(const curve *c, double low, double high, int depth)
{
    double at_low, at_high, in_middle, second;
    const double width = high - low, middle = 0.5 * (low + high);
    const double first = value_at(c, low, &at_low, &second), last = value_at(c, high, &at_high, &second);
    const double value = value_at(c, middle, &in_middle, &second);
    if (fabs(second) > 0.5 * width * c->third) {
        if ((at_low < 0 && at_high > 0) || (at_low > 0 && at_high < 0))
            note_extreme(c, low, high, at_low < 0);
        return;
    }
    const double most = width * width / 8 * c->second;
    if (fmax(first, last) + most <= c->floor_high + c->noise &&
        fmin(first, last) - most >= c->floor_low - c->noise)
        return;
    if (depth == 0) {
        note_on(c, value, middle);
        return;
    }
    search(c, low, middle, depth - 1);
    search(c, middle, high, depth - 1);
}

void rampwise_modes_curve_(const double *a, double floor_high, double floor_low, uint64_t sample,
                           size_t piece, size_t pieces, rampwise_peak *peak)
{
    const double high = fmax(floor_high, peak->high.value), low = fmin(floor_low, peak->low.value);
    curve c = {a, 0, 0, fabs(a[0]) + fabs(a[1]), high, low, sample, piece, pieces, peak};
    double end = a[0] + a[1];
    for (size_t n = 2; n <= POWERS; ++n) {
        end += a[n];
        c.noise += fabs(a[n]);
        c.second += (double)(n * (n - 1)) * fabs(a[n]);
        c.third += (double)(n * (n - 1) * (n - 2)) * fabs(a[n]);
    }
    c.noise *= 0x1p-44;
    const double excess = c.second / 8 + c.noise;
    if (fmax(a[0], end) + excess <= high && fmin(a[0], end) - excess >= low)
        return;
    search(&c, 0, 1, 12);
    /* An extreme may lie on the end of a piece. */
    double slope, second;
    if (piece + 1 < pieces)
        note_on(&c, value_at(&c, 1, &slope, &second), 1);
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
    return !(high + excess <= fmax(x->floor_high[o], x->peak[o].high.value) &&
             low - excess >= fmin(x->floor_low[o], x->peak[o].low.value));
}

/* And the bounds of each step. */
static void trace(rampwise_modes *m, size_t t, size_t n)
{
    modes_peaks *const x = m->peaks;
    const double *const input = m->input + t * TILE * m->inputs;
    memset(x->excess_step, 0, n * m->width * sizeof *x->excess_step);
    for (size_t g = 0; g < m->groups; ++g) {
        lane_block lanes = m->group[g].lanes;
        double most[TILE][LANES];
        memcpy(lanes.u, x->begin + (g * TILES + t) * 2 * LANES, sizeof lanes.u);
        memcpy(lanes.v, x->begin + ((g * TILES + t) * 2 + 1) * LANES, sizeof lanes.v);
        (void)rampwise_modes_tile_(m, g, &lanes, n, input, &x->trace[g]);
        bound_steps(m, g, n, &x->trace[g], most);
        m->k->accumulate(modes_in(m, g), n, most[0], LANES, x->excess_weight + g * LANES * m->width, m->width,
                         x->excess_step);
        if (m->equipment != NULL)
            rampwise_equipment_bound_steps_(m, g, n, most[0]);
    }
    for (size_t i = 0; i < n; ++i)
        add_jumps(m, input, i, x->excess_step + i * m->width);
}

/* Which outputs may have a peak in step i of tile t; answers whether one does. */
static int want_in_step(const rampwise_modes *m, size_t t, size_t i, int pass)
{
    modes_peaks *const x = m->peaks;
    const double *const before = m->output + (t * TILE + i) * m->width, *const after = before + m->width;
    int any = 0;
    for (size_t o = 0; o < m->outputs; ++o) {
        x->wanted[o] = (x->first[o] == t) == (pass == 0) &&
                       may_count(x, o, fmax(before[o], after[o]), fmin(before[o], after[o]),
                                 x->excess_step[i * m->width + o]);
        any |= x->wanted[o];
    }
    return any;
}

static void look_at_piece(const rampwise_modes *m, size_t o, uint64_t sample, size_t piece)
{
    modes_peaks *const x = m->peaks;
    double series[POWERS + 1], sum = 0;
    for (size_t n = POWERS + 1; n-- > 0;) {
        series[n] = x->series[n * m->width + o];
        sum += series[n];
    }
    rampwise_modes_curve_(series, x->floor_high[o], x->floor_low[o], sample, piece, x->pieces, &x->peak[o]);
    if (m->between == RAMPWISE_HOLD && piece + 1 == x->pieces) /* where it jumps, the value before */
        rampwise_modes_note_(&x->peak[o], sum, sample + 1, 0);
}

static void look_at_step(rampwise_modes *m, size_t t, size_t i, const double *input, int pass)
{
    modes_peaks *const x = m->peaks;
    const size_t k = t * TILE + i;
    int any = want_in_step(m, t, i, pass);
    if (m->equipment != NULL)
        any |= rampwise_equipment_want_(m, k, pass);
    if (!any)
        return;
    begin_walk(m, i);
    for (size_t piece = 0; piece < x->pieces; ++piece) {
        make_series(m, input, i, piece);
        for (size_t o = 0; o < m->outputs; ++o)
            if (x->wanted[o])
                look_at_piece(m, o, m->sample + k, piece);
        if (m->equipment != NULL)
            rampwise_equipment_look_(m, k, piece, x->pieces, x->series);
    }
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

static int output_may_count(const rampwise_modes *m, size_t t, size_t n, int pass)
{
    const modes_peaks *const x = m->peaks;
    for (size_t o = 0; o < m->outputs; ++o) {
        double high, low;
        if ((x->first[o] == t) != (pass == 0))
            continue;
        range_of(m, t, n, o, &high, &low);
        if (may_count(x, o, high, low, x->excess_tile[t * m->width + o]))
            return 1;
    }
    return 0;
}

static size_t steps_of(size_t t, size_t n)
{
    return n - t * TILE < TILE ? n - t * TILE : TILE;
}

/* Floors that the samples raise, and the tile that can exceed them most. */
static void prepare(const rampwise_modes *m, size_t n, size_t o)
{
    modes_peaks *const x = m->peaks;
    double most = -INFINITY;
    x->floor_high[o] = x->peak[o].high.value;
    x->floor_low[o] = x->peak[o].low.value;
    x->first[o] = 0;
    for (size_t t = 0; t * TILE < n; ++t) {
        double high, low;
        range_of(m, t, steps_of(t, n), o, &high, &low);
        x->floor_high[o] = fmax(x->floor_high[o], high);
        x->floor_low[o] = fmin(x->floor_low[o], low);
        const double size = fmax(high, -low) + x->excess_tile[t * m->width + o];
        if (size > most) {
            most = size;
            x->first[o] = (unsigned char)t;
        }
    }
}

static void look_at_tile(rampwise_modes *m, size_t t, size_t n, int pass)
{
    const double *const input = m->input + t * TILE * m->inputs;
    if (!output_may_count(m, t, n, pass) &&
        !(m->equipment != NULL && rampwise_equipment_may_count_(m, t, n, pass)))
        return;
    trace(m, t, n);
    for (size_t i = 0; i < n; ++i)
        look_at_step(m, t, i, input, pass);
}

/* First what promises most, so that the rest is outdone. */
void rampwise_modes_peaks_segment_(rampwise_modes *m, size_t n)
{
    modes_peaks *const x = m->peaks;
    for (size_t k = 0; k < n; ++k)
        add_jumps(m, m->input, k, x->excess_tile + k / TILE * m->width);
    for (size_t o = 0; o < m->outputs; ++o)
        prepare(m, n, o);
    if (m->equipment != NULL)
        rampwise_equipment_prepare_(m, n);
    for (int pass = 0; pass < 2; ++pass)
        for (size_t t = 0; t * TILE < n; ++t)
            look_at_tile(m, t, steps_of(t, n), pass);
    for (size_t k = 1; k <= n; ++k)
        for (size_t o = 0; o < m->outputs; ++o)
            rampwise_modes_note_(&x->peak[o], m->output[k * m->width + o], m->sample + k, 0);
    if (m->equipment != NULL)
        rampwise_equipment_note_(m, n);
}

double rampwise_modes_tile_excess_(const rampwise_modes *m, size_t t, size_t o)
{
    return m->peaks->excess_tile[t * m->width + o];
}

double rampwise_modes_step_excess_(const rampwise_modes *m, size_t i, size_t o)
{
    return m->peaks->excess_step[i * m->width + o];
}
