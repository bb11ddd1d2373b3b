/* Peaks of sums of modes, between the samples too: modes.h says how. */
#include <math.h>
#include <string.h>
#include "extremes.h"
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

struct modes_peaks {
    rampwise_peak *peak;               /* [outputs] */
    double *floor_high, *floor_low;    /* [outputs]: of the peak so far and the segment's samples */
    bound *bounds;                     /* [groups] */
    double *excess_weight;             /* [groups][LANES][width] */
    double *begin;                     /* [groups][TILES][2][LANES] */
    double (*largest)[LANES];          /* [TILES]: of the present group */
    double *excess_tile, *excess_step; /* [TILES][width], [TILE][width] */
    mode_tile *trace;                  /* [groups]: of a tile that is looked at */
    double (*series)[POWERS + 1];      /* [pieces]: of an output in a step */
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
    x->series = rampwise_room_take_(r, x->pieces, sizeof *x->series);
}

void rampwise_modes_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    modes_peaks *const x = m->peaks;
    const double h = m->dt, unit = 1.0001 * h * h / 8, root_e_half = 1.2841;
    for (size_t j = 0; j < m->modes; ++j) {
        const double stiffness = -plan->c[j].acceleration[0], damping = -plan->c[j].acceleration[1];
        const double K = fmax(stiffness, 0.25 / (h * h));
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
}

/* 1/((n + 1)(n + 2)) */
#define PER(n) 1.0 / (((n) + 1) * ((n) + 2))
#define PER_FOUR(n) PER(n), PER((n) + 1), PER((n) + 2), PER((n) + 3)
static const double per_term[POWERS] = {PER_FOUR(0),  PER_FOUR(4),  PER_FOUR(8),
                                        PER_FOUR(12), PER_FOUR(16), PER_FOUR(20)};
#undef PER
#undef PER_FOUR

/* The series of one mode in one step, added to those of an output. With x the time in pieces, q = sum of a[n] x^n:
   (n + 1)(n + 2) a[n + 2] = f[n] - S (n + 1) a[n + 1] - K a[n]; they end where two in a row are below 2^-60. */
static void add_mode(const rampwise_modes *m, size_t g, size_t j, size_t i, double on_u, double on_v)
{
    modes_peaks *const x = m->peaks;
    const mode_tile *const at = &x->trace[g];
    const double h = m->dt / (double)x->pieces, per_load = m->group[g].row[2][j] * h * h;
    const double K = -m->group[g].row[0][j] * h * h, S = -m->group[g].row[1][j] * h;
    const double change = m->between == RAMPWISE_RAMP ? at->p[i + 1][j] - at->p[i][j] : 0;
    double u = at->u[i][j], v = at->v[i][j] * h, f[POWERS] = {per_load * at->p[i][j]};
    f[1] = per_load * change / (double)x->pieces;
    for (size_t piece = 0; piece < x->pieces; ++piece) {
        double a[POWERS + 2] = {u, v}, *const sum = x->series[piece];
        const double small = 0x1p-60 * (fabs(u) + fabs(v) + fabs(f[0]) + fabs(f[1]));
        size_t last = 1;
        while (last < POWERS + 1 && (last < 4 || fabs(a[last]) + fabs(a[last - 1]) > small)) {
            a[last + 1] = (f[last - 1] - S * ((double)last * a[last]) - K * a[last - 1]) * per_term[last - 1];
            ++last;
        }
        u = v = 0;
        for (size_t n = last; n > 0; --n) {
            u += a[n];
            v += (double)n * a[n];
            sum[n - 1] += on_u * a[n - 1] + on_v / h * ((double)n * a[n]);
        }
        u += a[0];
        f[0] += f[1];
    }
}

/* The series of output o in the step from row i of a tile, whose inputs begin at `input`. */
static void make_series(const rampwise_modes *m, const double *input, size_t i, size_t o)
{
    modes_peaks *const x = m->peaks;
    memset(x->series, 0, x->pieces * sizeof *x->series);
    for (size_t in = 0; in < m->inputs; ++in) {
        const double weight = m->direct[in * m->width + o], now = input[i * m->inputs + in];
        const double change = m->between == RAMPWISE_RAMP ? input[(i + 1) * m->inputs + in] - now : 0;
        for (size_t piece = 0; piece < x->pieces; ++piece) {
            x->series[piece][0] += weight * (now + change * ((double)piece / (double)x->pieces));
            x->series[piece][1] += weight * (change / (double)x->pieces);
        }
    }
    for (size_t j = 0; j < m->groups * LANES; ++j) {
        const double on_u = m->weight_u[j * m->width + o];
        const double on_v = m->weight_v != NULL ? m->weight_v[j * m->width + o] : 0;
        if (on_u != 0 || on_v != 0)
            add_mode(m, j / LANES, j % LANES, i, on_u, on_v);
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

static void note_on(const curve *c, double value, double x)
{
    const double fraction = ((double)c->piece + x) / (double)c->pieces;
    if (fraction < 1)
        note_value(c->peak, value, c->sample, fraction);
    else
        note_value(c->peak, value, c->sample + 1, 0);
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
    curve c = {a, 0, 0, fabs(a[0]) + fabs(a[1]), floor_high, floor_low, sample, piece, pieces, peak};
    for (size_t n = 2; n <= POWERS; ++n) {
        c.noise += fabs(a[n]);
        c.second += (double)(n * (n - 1)) * fabs(a[n]);
        c.third += (double)(n * (n - 1) * (n - 2)) * fabs(a[n]);
    }
    c.noise *= 0x1p-44;
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
    return !(high + excess <= x->floor_high[o] && low - excess >= x->floor_low[o]);
}

/* And the bounds of each step. */
void rampwise_modes_trace_(rampwise_modes *m, size_t t, size_t n)
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
    }
    for (size_t i = 0; i < n; ++i)
        add_jumps(m, input, i, x->excess_step + i * m->width);
}

static double sum_of(const double *series)
{
    double sum = 0;
    for (size_t n = POWERS + 1; n-- > 0;)
        sum += series[n];
    return sum;
}

static void look_at_step(rampwise_modes *m, size_t t, size_t i, const double *input)
{
    modes_peaks *const x = m->peaks;
    const double *const before = m->output + (t * TILE + i) * m->width, *const after = before + m->width;
    for (size_t o = 0; o < m->outputs; ++o) {
        if (!may_count(x, o, fmax(before[o], after[o]), fmin(before[o], after[o]),
                       x->excess_step[i * m->width + o]))
            continue;
        make_series(m, input, i, o);
        const uint64_t sample = m->sample + t * TILE + i;
        for (size_t piece = 0; piece < x->pieces; ++piece)
            rampwise_modes_curve_(x->series[piece], x->floor_high[o], x->floor_low[o], sample, piece,
                                  x->pieces, &x->peak[o]);
        if (m->between == RAMPWISE_HOLD) /* where it jumps, the value before */
            note_value(&x->peak[o], sum_of(x->series[x->pieces - 1]), sample + 1, 0);
    }
}

/* Whether an output may have a peak in tile t of n steps. */
static int tile_may_count(const rampwise_modes *m, size_t t, size_t n)
{
    const modes_peaks *const x = m->peaks;
    for (size_t o = 0; o < m->outputs; ++o) {
        const double *const y = m->output + t * TILE * m->width + o;
        double high = y[0], low = y[0];
        for (size_t i = 1; i <= n; ++i) {
            high = fmax(high, y[i * m->width]);
            low = fmin(low, y[i * m->width]);
        }
        if (may_count(x, o, high, low, x->excess_tile[t * m->width + o]))
            return 1;
    }
    return 0;
}

static void finish_tile(rampwise_modes *m, size_t t, size_t n)
{
    modes_peaks *const x = m->peaks;
    const double *const input = m->input + t * TILE * m->inputs;
    for (size_t i = 0; i < n; ++i)
        add_jumps(m, input, i, x->excess_tile + t * m->width);
    const int looking = tile_may_count(m, t, n);
    if (looking)
        rampwise_modes_trace_(m, t, n);
    for (size_t i = 0; i < n; ++i) {
        if (looking)
            look_at_step(m, t, i, input);
        for (size_t o = 0; o < m->outputs; ++o)
            note_value(&x->peak[o], m->output[(t * TILE + i + 1) * m->width + o],
                       m->sample + t * TILE + i + 1, 0);
    }
}

void rampwise_modes_peaks_segment_(rampwise_modes *m, size_t n)
{
    modes_peaks *const x = m->peaks;
    for (size_t o = 0; o < m->outputs; ++o) {
        x->floor_high[o] = x->peak[o].high.value;
        x->floor_low[o] = x->peak[o].low.value;
        for (size_t i = 1; i <= n; ++i) {
            x->floor_high[o] = fmax(x->floor_high[o], m->output[i * m->width + o]);
            x->floor_low[o] = fmin(x->floor_low[o], m->output[i * m->width + o]);
        }
    }
    for (size_t t = 0; t * TILE < n; ++t)
        finish_tile(m, t, n - t * TILE < TILE ? n - t * TILE : TILE);
}

double (*rampwise_modes_series_(rampwise_modes *m, size_t k, size_t o, size_t *pieces))[POWERS + 1]
{
    make_series(m, m->input + k / TILE * TILE * m->inputs, k % TILE, o);
    *pieces = m->peaks->pieces;
    return m->peaks->series;
}

double rampwise_modes_tile_excess_(const rampwise_modes *m, size_t t, size_t o)
{
    return m->peaks->excess_tile[t * m->width + o];
}
