#include "rampwise/equipment.h"

#include <math.h>
#include <string.h>
#include "cascade.h"
#include "modes_core.h"
#include "rampwise/status.h"
#include "twofold.h"
#include "valid.h"

/* Displacement and total acceleration. */
enum { LOOKED_AT = 2 };

/* Of a piece with a spring and no negative damper: frequency, damping rate over it, 1/stiffness, and what its free
   vibration of size 1 is as a total acceleration. */
typedef struct envelope {
    double omega, ratio, per_stiffness, as_total;
} envelope;

/* Bounds of displacement and total acceleration over one step. */
typedef struct reach {
    double high[LOOKED_AT], low[LOOKED_AT];
} reach;

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
    envelope *envelope;                          /* [count]; omega is 0 where there is none */
    double *rest_weight, *rest_tile, *rest_step; /* [groups][LANES][width], [TILES][width], [TILE][width] */
    uint32_t *tiles[LOOKED_AT];                  /* [count]: bits of those that may hold a peak */
    uint32_t *first[LOOKED_AT];                  /* [count]: the step that promises most */
    unsigned char *wanted;       /* [count]: bits of quantities that are looked at in a step */
    double *u_inside, *v_inside; /* [count]: where the next piece of it begins */
    uint32_t first_tiles;        /* bits of those where pieces have it */
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
        e->tiles[q] = rampwise_room_take_(r, count, sizeof(uint32_t));
        e->first[q] = rampwise_room_take_(r, count, sizeof(uint32_t));
    }
    if (!plan->peaks)
        return;
    e->envelope = rampwise_room_take_(r, count, sizeof *e->envelope);
    e->rest_weight = rampwise_room_take_(r, m->groups * LANES, row);
    e->rest_tile = rampwise_room_take_(r, TILES, row);
    e->rest_step = rampwise_room_take_(r, TILE, row);
    e->wanted = rampwise_room_take_(r, count, 1);
    e->u_inside = rampwise_room_take_(r, 1, row);
    e->v_inside = rampwise_room_take_(r, 1, row);
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

/* A mode that swings, seen by a piece: w, zeta, and w/omega. */
typedef struct swing {
    double w, zeta, ratio;
} swing;

/* sqrt(a^2 + b^2) */
static double size_of(double a, double b)
{
    return sqrt(a * a + b * b);
}

/* Its motion y = Re(Y exp(s t)) has |Y| at most 1/sqrt(1 - zeta) of its energy bound, and the piece a motion
   Re(-Y exp(s t)/D) under it, D = s^2 + c s + k: k e (envelope_of) moves with s (s + c)/D, and k x with k/D. Beside it
   goes the free motion that makes the sum begin at rest. */
static double detuned(const swing *mode, const envelope *to, double h, double ends)
{
    const double w = mode->w, zeta = mode->zeta, root = sqrt(1 - zeta * zeta);
    const double c = to->ratio * to->omega, k = to->omega * to->omega;
    const double D = size_of(w * w * (2 * zeta * zeta - 1) - c * zeta * w + k, root * w * (c - 2 * zeta * w));
    const double beside = (1 + size_of(1, mode->ratio)) / (D * sqrt(1 - zeta));
    const double inverse = zeta + sqrt(1 + zeta * zeta);
    const double off_mean = fmin(0.5 * h * w * w * inverse * inverse, w + 2 / h);
    const double by_e = beside * w * size_of(c - zeta * w, root * w) +
                        (1 + to->ratio) * off_mean / to->omega + to->ratio * fmin(2, w * h);
    return fmin(by_e, beside * k + ends);
}

/* What a free vibration of mode j, with the energy bound 1 of its q'', can do to a piece within one step, beyond what
   the values of y at its ends tell; envelope_of below says how. The smallest of several bounds. */
static double rest_of(const rampwise_modes *m, const envelope *to, const rampwise_coeffs *mode, double on_u,
                      double on_v)
{
    const double h = m->dt, angle = to->omega * h, S = to->ratio * to->omega;
    const double stiffness = -mode->acceleration[0], damping = -mode->acceleration[1];
    const double w = sqrt(fmax(stiffness, 0.25 / (h * h)));
    const double slow = (on_u + on_v * w) * to->per_stiffness * h / to->omega * (1.5 + S * h + to->ratio);
    if (!(stiffness >= 0.25 / (h * h) && damping >= 0))
        return slow;
    const swing swinging = {w, 0.5 * damping / w, w / to->omega};
    const double inverse = rampwise_modes_inverse_(stiffness, damping), turned = sqrt(inverse) * stiffness;
    const double ends = 2 + 2 / angle + to->ratio * (2 + swinging.ratio + 2 / angle);
    double size = 2 * angle / swinging.ratio * (1 + to->ratio) * (1 + 2 * swinging.zeta) + ends;
    if (swinging.zeta < 1)
        size = fmin(size, detuned(&swinging, to, h, ends));
    return fmin(slow, (on_u + on_v * turned) * inverse * to->per_stiffness * size);
}

static void fill_envelope(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i)
{
    equipment_core *const e = m->equipment;
    const double k = -e->c[i].total[0], damping = -e->c[i].total[1];
    envelope *const to = &e->envelope[i];
    if (!(k > 0 && damping >= 0))
        return;
    const double omega = sqrt(k), ratio = damping / omega;
    *to = (envelope){omega, ratio, 1 / k, k * size_of(1, ratio)};
    for (size_t j = 0; j < m->modes; ++j) {
        const size_t weight = j * m->width + e->point[i];
        const double on_v = m->weight_v != NULL ? fabs(m->weight_v[weight]) : 0;
        e->rest_weight[j * e->width + i] =
            1.0001 * rest_of(m, to, &plan->c[j], fabs(m->weight_u[weight]), on_v);
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
    if (m->peaks != NULL)
        fill_envelope(m, plan, i);
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

/* The envelope. e = x + y/k swings by itself: e'' + c e' + k e = (y'' + c y')/k. The root of the energy e'^2 + k e^2 of
   a free motion never grows, and a driven one's by no more than the time integral of what drives it; over omega, that is
   the size sqrt(e^2 + e'^2/k). e begins with x + y/k, and e' with x' + y'/k, y' being the rise of y in the step over h
   and a part of each mode; the rise drives it too. What else a mode does (rest_of, detuned) has three bounds. Either h
   |q''| bounds its y' less the mean, and the integral of its y''. Or y = F' with |F| at most (1 + 2 zeta) |y|/omega_j
   is taken as it is: it drives x' + F, and x, to no more than 2 h (omega + c) |F|, and e differs from that by y/k and
   the free motion from y/k and its mean slope. Or the motion under a mode off tune is known. In the end x = e - y/k,
   and the total acceleration is y - (k e + c e') + c y'/k. */
static void envelope_of(const rampwise_modes *m, size_t i, size_t k, double u, double v, double excess,
                        double rest, reach *r)
{
    const equipment_core *const e = m->equipment;
    const envelope *const to = &e->envelope[i];
    const double now = m->output[k * m->width + e->point[i]],
                 next = m->output[(k + 1) * m->width + e->point[i]];
    const double high = (now > next ? now : next) + excess, low = (now < next ? now : next) - excess;
    /* a jump is part of the excess, not of the rise */
    const double jump = m->between == RAMPWISE_HOLD ? excess : 0, rise = fabs(next - now) + jump;
    const double angle = to->omega * m->dt, slope = (next - now) * to->per_stiffness / m->dt;
    const double from_u = u + now * to->per_stiffness, from_v = (v + slope) / to->omega;
    const double driven = rise * to->ratio + jump / angle;
    const double size = 1.0001 * (size_of(from_u, from_v) + driven * to->per_stiffness) + rest;
    const double total = size * to->as_total + 1.0001 * to->ratio * rise / angle;
    *r = (reach){{size - low * to->per_stiffness, total + high},
                 {-size - high * to->per_stiffness, low - total}};
}

/* One piece in the step after k; by the bounds of its tile, or, in a tile that is looked at, by its own. */
static void reach_of(const rampwise_modes *m, size_t i, size_t k, int looking, reach *r)
{
    const equipment_core *const e = m->equipment;
    const rampwise_coeffs *const c = &e->c[i];
    double u[2], v[2];
    const double excess_of_y = looking ? rampwise_modes_step_excess_(m, k % TILE, e->point[i])
                                       : rampwise_modes_tile_excess_(m, k / TILE, e->point[i]);
    const double rest =
        looking ? e->rest_step[k % TILE * e->width + i] : e->rest_tile[k / TILE * e->width + i];
    state_at(e, i, k, &u[0], &v[0]);
    state_at(e, i, k + 1, &u[1], &v[1]);
    *r = (reach){{INFINITY, INFINITY}, {-INFINITY, -INFINITY}};
    if (e->envelope[i].omega > 0)
        envelope_of(m, i, k, u[0], v[0], excess_of_y, rest, r);
    const double y[2] = {m->output[k * m->width + e->point[i]], m->output[(k + 1) * m->width + e->point[i]]};
    const stretch_bound b = {fmax(fabs(u[0]), fabs(u[1])), fabs(u[1] - u[0]), fmax(fabs(y[0]), fabs(y[1])),
                             fabs(y[1] - y[0]), excess_of_y};
    for (int q = 0; q < LOOKED_AT; ++q) {
        const double excess = 1.0001 * excess_of(c, q, &b);
        const double z[2] = {looked_at(c, q, u[0], v[0]), looked_at(c, q, u[1], v[1])};
        r->high[q] = fmin(r->high[q], fmax(z[0], z[1]) + excess);
        r->low[q] = fmax(r->low[q], fmin(z[0], z[1]) - excess);
    }
}

static int may_count(const equipment_core *e, size_t i, int q, const reach *r)
{
    return !(r->high[q] <= fmax(e->floor_high[q][i], e->peak[q][i].high.value) &&
             r->low[q] >= fmin(e->floor_low[q][i], e->peak[q][i].low.value));
}

static void bound_rest(const rampwise_modes *m, size_t g, size_t n, const double *largest, double *rest)
{
    const equipment_core *const e = m->equipment;
    if (g == 0)
        memset(rest, 0, n * e->width * sizeof *rest);
    m->k->accumulate(modes_in(m, g), n, largest, LANES, e->rest_weight + g * LANES * e->width, e->width,
                     rest);
}

void rampwise_equipment_bound_group_(rampwise_modes *m, size_t g, size_t tiles, const double *largest)
{
    bound_rest(m, g, tiles, largest, m->equipment->rest_tile);
}

void rampwise_equipment_bound_steps_(rampwise_modes *m, size_t g, size_t n, const double *largest)
{
    bound_rest(m, g, n, largest, m->equipment->rest_step);
}

static void raise_floors(const rampwise_modes *m, size_t n, size_t i, int q)
{
    equipment_core *const e = m->equipment;
    double high = e->peak[q][i].high.value, low = e->peak[q][i].low.value;
    for (size_t k = 1; k <= n; ++k) {
        double u, v;
        state_at(e, i, k, &u, &v);
        const double z = looked_at(&e->c[i], q, u, v);
        high = z > high ? z : high;
        low = z < low ? z : low;
    }
    e->floor_high[q][i] = high;
    e->floor_low[q][i] = low;
}

static void prepare_piece(rampwise_modes *m, size_t n, size_t i)
{
    equipment_core *const e = m->equipment;
    double most[LOOKED_AT] = {-INFINITY, -INFINITY};
    for (int q = 0; q < LOOKED_AT; ++q) {
        raise_floors(m, n, i, q);
        e->tiles[q][i] = 0;
    }
    for (size_t k = 0; k < n; ++k) {
        reach r;
        reach_of(m, i, k, 0, &r);
        for (int q = 0; q < LOOKED_AT; ++q) {
            if (!may_count(e, i, q, &r))
                continue;
            e->tiles[q][i] |= (uint32_t)1 << k / TILE;
            if (most[q] < fmax(r.high[q], -r.low[q])) {
                most[q] = fmax(r.high[q], -r.low[q]);
                e->first[q][i] = (uint32_t)k;
            }
        }
    }
    for (int q = 0; q < LOOKED_AT; ++q)
        if (e->tiles[q][i] != 0)
            e->first_tiles |= (uint32_t)1 << e->first[q][i] / TILE;
}

void rampwise_equipment_prepare_(rampwise_modes *m, size_t n)
{
    m->equipment->first_tiles = 0;
    for (size_t i = 0; i < m->equipment->count; ++i)
        prepare_piece(m, n, i);
}

/* Whether piece i may count for q in the step after k, in this pass. */
static int is_wanted(const rampwise_modes *m, size_t i, int q, size_t k, int pass, int looking)
{
    const equipment_core *const e = m->equipment;
    reach r;
    if ((e->tiles[q][i] >> k / TILE & 1) == 0 || (e->first[q][i] == k) != (pass == 0))
        return 0;
    reach_of(m, i, k, looking, &r);
    return may_count(e, i, q, &r);
}

int rampwise_equipment_may_count_(const rampwise_modes *m, size_t t, size_t n, int pass)
{
    const equipment_core *const e = m->equipment;
    if (pass == 0)
        return (int)(e->first_tiles >> t & 1);
    for (size_t i = 0; i < e->count; ++i)
        for (int q = 0; q < LOOKED_AT; ++q)
            for (size_t k = t * TILE; k < t * TILE + n; ++k)
                if (is_wanted(m, i, q, k, pass, 0))
                    return 1;
    return 0;
}

int rampwise_equipment_want_(rampwise_modes *m, size_t k, int pass)
{
    equipment_core *const e = m->equipment;
    int any = 0;
    for (size_t i = 0; i < e->count; ++i) {
        e->wanted[i] = 0;
        for (int q = 0; q < LOOKED_AT; ++q)
            e->wanted[i] |= (unsigned char)(is_wanted(m, i, q, k, pass, 1) << q);
        state_at(e, i, k, &e->u_inside[i], &e->v_inside[i]);
        any |= e->wanted[i];
    }
    return any;
}

/* The power series of x and of its total acceleration from that of y:
   (n + 1)(n + 2) a[n + 2] = -S (n + 1) a[n + 1] - K a[n] - y[n] d^2, d the length of a piece of the step. */
static void look_at_piece(rampwise_modes *m, size_t i, size_t k, size_t piece, size_t pieces,
                          const double *series)
{
    equipment_core *const e = m->equipment;
    const rampwise_coeffs *const c = &e->c[i];
    const double d = m->dt / (double)pieces, K = -c->total[0] * d * d, S = -c->total[1] * d;
    double u = e->u_inside[i], v = e->v_inside[i] * d, z[MODES_POWERS + 1];
    double a[MODES_POWERS + 3] = {u, v};
    for (size_t n = 0; n <= MODES_POWERS; ++n)
        a[n + 2] = (-S * (double)(n + 1) * a[n + 1] - K * a[n] - series[n * m->width + e->point[i]] * d * d) *
                   rampwise_modes_per_term_[n];
    u = v = 0;
    for (size_t n = MODES_POWERS + 2; n > 0; --n) {
        u += a[n];
        v += (double)n * a[n];
    }
    e->u_inside[i] = u + a[0];
    e->v_inside[i] = v / d;
    for (int q = 0; q < LOOKED_AT; ++q) {
        if ((e->wanted[i] >> q & 1) == 0)
            continue;
        for (size_t n = 0; n <= MODES_POWERS; ++n)
            z[n] = q == 0 ? a[n] : c->total[0] * a[n] + c->total[1] / d * ((double)(n + 1) * a[n + 1]);
        rampwise_modes_curve_(z, e->floor_high[q][i], e->floor_low[q][i], m->sample + k, piece, pieces,
                              &e->peak[q][i]);
    }
}

void rampwise_equipment_look_(rampwise_modes *m, size_t k, size_t piece, size_t pieces, const double *series)
{
    for (size_t i = 0; i < m->equipment->count; ++i)
        if (m->equipment->wanted[i] != 0)
            look_at_piece(m, i, k, piece, pieces, series);
}

void rampwise_equipment_note_(rampwise_modes *m, size_t n)
{
    equipment_core *const e = m->equipment;
    for (size_t k = 1; k <= n; ++k)
        for (size_t i = 0; i < e->count; ++i)
            for (int q = 0; q < LOOKED_AT; ++q) {
                double u, v;
                state_at(e, i, k, &u, &v);
                rampwise_modes_note_(&e->peak[q][i], looked_at(&e->c[i], q, u, v), m->sample + k, 0);
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

size_t rampwise_equipment_point_(const rampwise_modes *m, size_t i)
{
    return m->equipment->point[i];
}

const double *rampwise_equipment_total_(const rampwise_modes *m, size_t i)
{
    return m->equipment->c[i].total;
}

double rampwise_equipment_value_(const rampwise_modes *m, size_t i, int q)
{
    const equipment_core *const e = m->equipment;
    return looked_at(&e->c[i], q, e->u[i], e->v[i]);
}
