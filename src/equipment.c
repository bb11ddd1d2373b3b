#include "rampwise/equipment.h"

#include <math.h>
#include <string.h>
#include "cascade.h"
#include "extremes.h"
#include "modes_core.h"
#include "rampwise/status.h"
#include "twofold.h"
#include "valid.h"

/* Displacement and total acceleration. */
enum { LOOKED_AT = 2 };

struct equipment_core {
    size_t count, width; /* width: count, to the next multiple of 8 */
    size_t *point;
    rampwise_coeffs *c;                /* under base acceleration */
    double *own;                       /* [4][width]: A - 1, B, A', B' - 1 */
    double *u, *v, *u_begin, *v_begin; /* [width]; where the segment began */
    double *from_u, *from_v;           /* [groups][LANES][2][width] */
    double *from_before, *from_now;    /* [inputs][2][width]: the inputs at the two ends of a step */
    double *gain;                      /* [SEGMENT][2][width]; then the states after the steps */
    twofold *sums;                     /* [inputs][4]: while they are being made */
    rampwise_peak *peak[LOOKED_AT];    /* [count], where peaks are wanted */
    double *floor_high[LOOKED_AT], *floor_low[LOOKED_AT];
};

void rampwise_equipment_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r)
{
    equipment_core counted;
    equipment_core *const made = rampwise_room_take_(r, 1, sizeof counted);
    equipment_core *const e = made != NULL ? made : &counted;
    const size_t count = plan->equipment_count, width = padded(count), row = width * sizeof(double);
    m->equipment = made;
    e->count = count;
    e->width = width;
    e->point = rampwise_room_take_(r, count, sizeof *e->point);
    e->c = rampwise_room_take_(r, count, sizeof *e->c);
    e->own = rampwise_room_take_(r, 4, row);
    e->u = rampwise_room_take_(r, 1, row);
    e->v = rampwise_room_take_(r, 1, row);
    e->u_begin = rampwise_room_take_(r, 1, row);
    e->v_begin = rampwise_room_take_(r, 1, row);
    e->from_u = rampwise_room_take_(r, m->groups * LANES, 2 * row);
    e->from_v = rampwise_room_take_(r, m->groups * LANES, 2 * row);
    e->from_before = rampwise_room_take_(r, m->inputs, 2 * row);
    e->from_now = rampwise_room_take_(r, m->inputs, 2 * row);
    e->gain = rampwise_room_take_(r, SEGMENT, 2 * row);
    e->sums = rampwise_room_take_(r, m->inputs, 4 * sizeof *e->sums);
    for (int q = 0; plan->peaks && q < LOOKED_AT; ++q) {
        e->peak[q] = rampwise_room_take_(r, count, sizeof(rampwise_peak));
        e->floor_high[q] = rampwise_room_take_(r, 1, row);
        e->floor_low[q] = rampwise_room_take_(r, 1, row);
    }
}

int rampwise_equipment_check_(const rampwise_modes_plan *plan)
{
    if (plan->equipment == NULL || plan->point == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t i = 0; i < plan->equipment_count; ++i) {
        rampwise_coeffs c;
        if (plan->point[i] >= plan->outputs)
            return RAMPWISE_ERROR_COUNT;
        const int status = rampwise_coeffs_make(&c, &plan->equipment[i], plan->c->dt,
                                                RAMPWISE_BASE_ACCELERATION, plan->c->between);
        if (status != RAMPWISE_OK)
            return status;
    }
    return RAMPWISE_OK;
}

/* What the inputs at the two ends of a step do to piece i: directly, and as the loads of all modes. It cancels much
   of itself, as the direct weight of the point does. */
static void fill_inputs(const rampwise_modes *m, size_t i)
{
    const equipment_core *const e = m->equipment;
    for (size_t in = 0; in < m->inputs; ++in) {
        const twofold *const sum = e->sums + 4 * in;
        double *const before = e->from_before + 2 * in * e->width, *const now =
                                                                       e->from_now + 2 * in * e->width;
        before[i] = sum[0].hi;
        before[e->width + i] = sum[1].hi;
        now[i] = sum[2].hi;
        now[e->width + i] = sum[3].hi;
    }
}

static void begin_inputs(const rampwise_modes *m, size_t i)
{
    const equipment_core *const e = m->equipment;
    const rampwise_coeffs *const c = &e->c[i];
    const double direct[4] = {c->C, c->Cp, c->D, c->Dp};
    for (size_t in = 0; in < m->inputs; ++in)
        for (size_t k = 0; k < 4; ++k)
            e->sums[4 * in + k] = twofold_product(direct[k], m->direct[in * m->width + e->point[i]]);
}

static void add_inputs(const rampwise_modes *m, size_t j, const cascade *row)
{
    const double loads[4] = {row->displacement[2], row->velocity[2], row->displacement[3], row->velocity[3]};
    for (size_t in = 0; in < m->inputs; ++in) {
        const double load = m->load[(j / LANES * m->inputs + in) * LANES + j % LANES];
        for (size_t k = 0; k < 4; ++k) {
            twofold *const sum = &m->equipment->sums[4 * in + k];
            *sum = twofold_add(*sum, twofold_product(loads[k], load));
        }
    }
}

static int fill_piece(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i)
{
    equipment_core *const e = m->equipment;
    rampwise_coeffs *const c = &e->c[i];
    int status = rampwise_coeffs_make(c, &plan->equipment[i], m->dt, RAMPWISE_BASE_ACCELERATION, m->between);
    e->point[i] = plan->point[i];
    const double own[4] = {c->A_minus_1, c->B, c->Ap, c->Bp_minus_1};
    for (size_t k = 0; k < 4; ++k)
        e->own[k * e->width + i] = own[k];
    begin_inputs(m, i);
    for (size_t j = 0; status == RAMPWISE_OK && j < m->modes; ++j) {
        cascade row;
        const size_t weight = j * m->width + e->point[i], to = 2 * j * e->width + i;
        status = rampwise_cascade_make_(&row, &plan->c[j], &plan->equipment[i], m->weight_u[weight],
                                        m->weight_v != NULL ? m->weight_v[weight] : 0);
        e->from_u[to] = row.displacement[0];
        e->from_u[to + e->width] = row.velocity[0];
        e->from_v[to] = row.displacement[1];
        e->from_v[to + e->width] = row.velocity[1];
        add_inputs(m, j, &row);
    }
    fill_inputs(m, i);
    return status;
}

int rampwise_equipment_fill_(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    for (size_t i = 0; i < m->equipment->count; ++i) {
        const int status = fill_piece(m, plan, i);
        if (status != RAMPWISE_OK)
            return status;
    }
    return RAMPWISE_OK;
}

void rampwise_equipment_start_(rampwise_modes *m)
{
    equipment_core *const e = m->equipment;
    memset(e->u, 0, e->width * sizeof *e->u);
    memset(e->v, 0, e->width * sizeof *e->v);
    for (int q = 0; m->peaks != NULL && q < LOOKED_AT; ++q)
        memset(e->peak[q], 0, e->count * sizeof *e->peak[q]);
}

void rampwise_equipment_begin_(rampwise_modes *m, size_t n)
{
    equipment_core *const e = m->equipment;
    memcpy(e->u_begin, e->u, e->width * sizeof *e->u);
    memcpy(e->v_begin, e->v, e->width * sizeof *e->v);
    memset(e->gain, 0, 2 * n * e->width * sizeof *e->gain);
    m->k->accumulate(m->inputs, n, m->input, m->inputs, e->from_before, 2 * e->width, e->gain);
    m->k->accumulate(m->inputs, n, m->input + m->inputs, m->inputs, e->from_now, 2 * e->width, e->gain);
}

void rampwise_equipment_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, mode_tile *tile)
{
    equipment_core *const e = m->equipment;
    const size_t at = 2 * g * LANES * e->width;
    double *const gain = e->gain + 2 * t * TILE * e->width;
    m->k->accumulate(modes_in(m, g), n, tile->u[0], LANES, e->from_u + at, 2 * e->width, gain);
    m->k->accumulate(modes_in(m, g), n, tile->v[0], LANES, e->from_v + at, 2 * e->width, gain);
}

int rampwise_equipment_end_(rampwise_modes *m, size_t n)
{
    equipment_core *const e = m->equipment;
    const size_t values = 2 * n * e->width;
    m->k->under_gains(e->width, n, e->own, e->u, e->v, e->gain);
    return m->k->first_not_finite(values, e->gain) < values;
}

void rampwise_equipment_go_back_(rampwise_modes *m)
{
    equipment_core *const e = m->equipment;
    memcpy(e->u, e->u_begin, e->width * sizeof *e->u);
    memcpy(e->v, e->v_begin, e->width * sizeof *e->v);
}

static double total_of(const rampwise_coeffs *c, double u, double v)
{
    return RAMPWISE_FMA(c->total[0], u, c->total[1] * v);
}

/* Displacement and velocity of piece i after k steps of the segment. */
static void state_at(const equipment_core *e, size_t i, size_t k, double *u, double *v)
{
    const double *const row = e->gain + 2 * (k - 1) * e->width;
    *u = k > 0 ? row[i] : e->u_begin[i];
    *v = k > 0 ? row[e->width + i] : e->v_begin[i];
}

void rampwise_equipment_put_(const rampwise_modes *m, size_t n, const rampwise_history *out)
{
    const equipment_core *const e = m->equipment;
    if (out->u == NULL && out->v == NULL && out->a == NULL && out->total == NULL)
        return;
    for (size_t k = 1; k <= n; ++k)
        for (size_t i = 0; i < e->count; ++i) {
            const size_t to = (k - 1) * e->count + i;
            double u, v;
            state_at(e, i, k, &u, &v);
            if (out->u != NULL)
                out->u[to] = u;
            if (out->v != NULL)
                out->v[to] = v;
            if (out->a != NULL)
                out->a[to] = total_of(&e->c[i], u, v) - m->output[k * m->width + e->point[i]];
            if (out->total != NULL)
                out->total[to] = total_of(&e->c[i], u, v);
        }
}

/* What a stretch of steps can hold of a quantity z beyond its samples: x'' = -k x - c x' - y, so with M the largest
   |x''|, |x| is at most its samples' and h^2/8 M, |x'| at most the rise of x over h and h M, and M (1 - K/8 - S) is at
   most k |x| + c rise/h + |y|. The second derivative of the total acceleration -(c x' + k x) is -(c x''' + k x''), and
   x''' follows from y', which is at most the rise of y over h and h y'' = 8/h of the excess of y. Per mass. */
typedef struct stretch_bound {
    double u, u_rise, y, y_rise, y_excess;
} stretch_bound;

static double excess_of(const rampwise_coeffs *c, int q, const stretch_bound *b)
{
    const double h = c->dt, k = fabs(c->total[0]), damping = fabs(c->total[1]);
    const double rest = 1 - k * h * h / 8 - damping * h, y = b->y + b->y_excess;
    if (!(rest > 0.25))
        return INFINITY;
    const double most = (k * b->u + damping * b->u_rise / h + y) / rest;
    if (q == 0)
        return h * h / 8 * most;
    const double third =
        k * (b->u_rise / h + h * most) + damping * most + b->y_rise / h + 8 / h * b->y_excess;
    return h * h / 8 * (damping * third + k * most);
}

static double looked_at(const rampwise_coeffs *c, int q, double u, double v)
{
    return q == 0 ? u : total_of(c, u, v);
}

/* One piece over steps `first` to `last` of the segment: its bound, and greatest and least z. */
static stretch_bound bound_of(const rampwise_modes *m, size_t i, size_t first, size_t last, int q,
                              double *high, double *low)
{
    const equipment_core *const e = m->equipment;
    stretch_bound b = {0, 0, 0, 0, rampwise_modes_tile_excess_(m, first / TILE, e->point[i])};
    double u_before = 0, y_before = 0;
    *high = -INFINITY;
    *low = INFINITY;
    for (size_t k = first; k <= last; ++k) {
        double u, v;
        const double y = m->output[k * m->width + e->point[i]];
        state_at(e, i, k, &u, &v);
        const double z = looked_at(&e->c[i], q, u, v);
        *high = fmax(*high, z);
        *low = fmin(*low, z);
        b.u = fmax(b.u, fabs(u));
        b.y = fmax(b.y, fabs(y));
        if (k > first) {
            b.u_rise = fmax(b.u_rise, fabs(u - u_before));
            b.y_rise = fmax(b.y_rise, fabs(y - y_before));
        }
        u_before = u;
        y_before = y;
    }
    return b;
}

static int may_count(const rampwise_modes *m, size_t i, size_t first, size_t last, int q)
{
    const equipment_core *const e = m->equipment;
    double high, low;
    const stretch_bound b = bound_of(m, i, first, last, q, &high, &low);
    const double excess = 1.0001 * excess_of(&e->c[i], q, &b);
    return !(high + excess <= e->floor_high[q][i] && low - excess >= e->floor_low[q][i]);
}

/* The power series of x and of its total acceleration from that of y, piece by piece of the step after k:
   (n + 1)(n + 2) a[n + 2] = -S (n + 1) a[n + 1] - K a[n] - y[n] d^2, d the length of a piece. */
static void look_at_step(rampwise_modes *m, size_t i, size_t k, int q)
{
    equipment_core *const e = m->equipment;
    const rampwise_coeffs *const c = &e->c[i];
    size_t pieces;
    double(*const series)[MODES_POWERS + 1] = rampwise_modes_series_(m, k, e->point[i], &pieces);
    const double d = c->dt / (double)pieces, K = -c->total[0] * d * d, S = -c->total[1] * d;
    double u, v;
    state_at(e, i, k, &u, &v);
    v *= d;
    for (size_t piece = 0; piece < pieces; ++piece) {
        double a[MODES_POWERS + 3] = {u, v}, z[MODES_POWERS + 1];
        for (size_t n = 0; n <= MODES_POWERS; ++n)
            a[n + 2] = (-S * (double)(n + 1) * a[n + 1] - K * a[n] - series[piece][n] * d * d) /
                       (double)((n + 1) * (n + 2));
        u = v = 0;
        for (size_t n = MODES_POWERS + 2; n > 0; --n) {
            u += a[n];
            v += (double)n * a[n];
        }
        u += a[0];
        for (size_t n = 0; n <= MODES_POWERS; ++n)
            z[n] = q == 0 ? a[n] : c->total[0] * a[n] + c->total[1] / d * ((double)(n + 1) * a[n + 1]);
        rampwise_modes_curve_(z, e->floor_high[q][i], e->floor_low[q][i], m->sample + k, piece, pieces,
                              &e->peak[q][i]);
    }
}

static void raise_floors(const rampwise_modes *m, size_t n, size_t i, int q)
{
    equipment_core *const e = m->equipment;
    double high = e->peak[q][i].high.value, low = e->peak[q][i].low.value;
    for (size_t k = 1; k <= n; ++k) {
        double u, v;
        state_at(e, i, k, &u, &v);
        const double z = looked_at(&e->c[i], q, u, v);
        high = fmax(high, z);
        low = fmin(low, z);
    }
    e->floor_high[q][i] = high;
    e->floor_low[q][i] = low;
}

/* Tile t, steps `first` to `last`; *traced tells whether the modes have been taken over it again. */
static void finish_tile(rampwise_modes *m, size_t first, size_t last, size_t i, int q, int *traced)
{
    equipment_core *const e = m->equipment;
    const int looking = may_count(m, i, first, last, q);
    if (looking && !*traced) {
        rampwise_modes_trace_(m, first / TILE, last - first);
        *traced = 1;
    }
    for (size_t k = first; k < last; ++k) {
        double u, v;
        if (looking && may_count(m, i, k, k + 1, q))
            look_at_step(m, i, k, q);
        state_at(e, i, k + 1, &u, &v);
        note_value(&e->peak[q][i], looked_at(&e->c[i], q, u, v), m->sample + k + 1, 0);
    }
}

void rampwise_equipment_segment_(rampwise_modes *m, size_t n)
{
    equipment_core *const e = m->equipment;
    for (int q = 0; q < LOOKED_AT; ++q)
        for (size_t i = 0; i < e->count; ++i)
            raise_floors(m, n, i, q);
    for (size_t first = 0; first < n; first += TILE) {
        int traced = 0;
        const size_t last = n - first < TILE ? n : first + TILE;
        for (int q = 0; q < LOOKED_AT; ++q)
            for (size_t i = 0; i < e->count; ++i)
                finish_tile(m, first, last, i, q, &traced);
    }
}

int rampwise_equipment_get(const rampwise_modes *modes, double *u, double *v)
{
    if (modes == NULL)
        return RAMPWISE_ERROR_MISSING;
    const equipment_core *const e = modes->equipment;
    const size_t count = e != NULL ? e->count : 0;
    if (u != NULL && count > 0)
        memcpy(u, e->u, count * sizeof *u);
    if (v != NULL && count > 0)
        memcpy(v, e->v, count * sizeof *v);
    return RAMPWISE_OK;
}

int rampwise_equipment_peaks(const rampwise_modes *modes, int quantity, rampwise_peak *peak)
{
    if (modes == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    const equipment_core *const e = modes->equipment;
    if (e == NULL || modes->peaks == NULL ||
        (quantity != RAMPWISE_DISPLACEMENT && quantity != RAMPWISE_TOTAL_ACCELERATION))
        return RAMPWISE_ERROR_QUANTITY;
    memcpy(peak, e->peak[quantity == RAMPWISE_TOTAL_ACCELERATION], e->count * sizeof *peak);
    return RAMPWISE_OK;
}

size_t rampwise_equipment_count_(const rampwise_modes *m)
{
    return m->equipment != NULL ? m->equipment->count : 0;
}

double *rampwise_equipment_state_(const rampwise_modes *m, size_t i, int velocity)
{
    return (velocity ? m->equipment->v : m->equipment->u) + i;
}

rampwise_peak *rampwise_equipment_peak_(const rampwise_modes *m, size_t i, int q)
{
    return &m->equipment->peak[q][i];
}
