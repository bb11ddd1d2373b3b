/* Peaks of equipment, between the samples too: equipment.h says how. */
#include <math.h>
#include <string.h>
#include "equipment_core.h"

/* Of a piece with a spring and no negative damper: frequency, damping rate over it, 1/stiffness, and what its free
   vibration of size 1 is as a total acceleration. */
typedef struct envelope {
    double omega, ratio, per_stiffness, as_total;
} envelope;

/* Bounds of displacement and total acceleration over one step. */
typedef struct reach {
    double high[LOOKED_AT], low[LOOKED_AT];
} reach;

struct equipment_peaks {
    rampwise_peak *peak[LOOKED_AT]; /* [count] */
    double *floor_high[LOOKED_AT], *floor_low[LOOKED_AT];
    envelope *envelope;                          /* [count]; omega is 0 where there is none */
    double *rest_weight, *rest_tile, *rest_step; /* [groups][LANES][width], [TILES][width], [TILE][width] */
    uint32_t *tiles[LOOKED_AT];                  /* [count]: bits of those that may hold a peak */
    uint32_t *first[LOOKED_AT];                  /* [count]: the step that promises most */
    unsigned char *wanted;       /* [count]: bits of quantities that are looked at in a step */
    double *u_inside, *v_inside; /* [count]: where the next piece of it begins */
    uint32_t first_tiles;        /* bits of those where pieces have it */
};

equipment_peaks *rampwise_equipment_peaks_take_(const rampwise_modes *m, size_t count, room *r)
{
    const size_t row = padded(count) * sizeof(double);
    equipment_peaks counted;
    equipment_peaks *const made = rampwise_room_take_(r, 1, sizeof counted), *const x = made != NULL
                                                                                            ? made
                                                                                            : &counted;
    for (int q = 0; q < LOOKED_AT; ++q) {
        x->peak[q] = rampwise_room_take_(r, count, sizeof(rampwise_peak));
        x->floor_high[q] = rampwise_room_take_(r, 1, row);
        x->floor_low[q] = rampwise_room_take_(r, 1, row);
        x->tiles[q] = rampwise_room_take_(r, count, sizeof(uint32_t));
        x->first[q] = rampwise_room_take_(r, count, sizeof(uint32_t));
    }
    x->envelope = rampwise_room_take_(r, count, sizeof *x->envelope);
    x->rest_weight = rampwise_room_take_(r, m->groups * LANES, row);
    x->rest_tile = rampwise_room_take_(r, TILES, row);
    x->rest_step = rampwise_room_take_(r, TILE, row);
    x->wanted = rampwise_room_take_(r, count, 1);
    x->u_inside = rampwise_room_take_(r, 1, row);
    x->v_inside = rampwise_room_take_(r, 1, row);
    return made;
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

void rampwise_equipment_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i)
{
    equipment_core *const e = m->equipment;
    const double k = -e->c[i].total[0], damping = -e->c[i].total[1];
    envelope *const to = &e->peaks->envelope[i];
    if (!(k > 0 && damping >= 0))
        return;
    const double omega = sqrt(k), ratio = damping / omega;
    *to = (envelope){omega, ratio, 1 / k, k * size_of(1, ratio)};
    for (size_t j = 0; j < m->modes; ++j) {
        const size_t weight = j * m->width + e->point[i];
        const double on_v = m->weight_v != NULL ? fabs(m->weight_v[weight]) : 0;
        e->peaks->rest_weight[j * e->width + i] =
            1.0001 * rest_of(m, to, &plan->c[j], fabs(m->weight_u[weight]), on_v);
    }
}

void rampwise_equipment_peaks_start_(rampwise_modes *m)
{
    equipment_core *const e = m->equipment;
    for (int q = 0; q < LOOKED_AT; ++q)
        memset(e->peaks->peak[q], 0, e->count * sizeof(rampwise_peak));
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
    const envelope *const to = &e->peaks->envelope[i];
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
        looking ? e->peaks->rest_step[k % TILE * e->width + i] : e->peaks->rest_tile[k / TILE * e->width + i];
    state_at(e, i, k, &u[0], &v[0]);
    state_at(e, i, k + 1, &u[1], &v[1]);
    *r = (reach){{INFINITY, INFINITY}, {-INFINITY, -INFINITY}};
    if (e->peaks->envelope[i].omega > 0)
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
    return !(r->high[q] <= fmax(e->peaks->floor_high[q][i], e->peaks->peak[q][i].high.value) &&
             r->low[q] >= fmin(e->peaks->floor_low[q][i], e->peaks->peak[q][i].low.value));
}

static void bound_rest(const rampwise_modes *m, size_t g, size_t n, const double *largest, double *rest)
{
    const equipment_core *const e = m->equipment;
    if (g == 0)
        memset(rest, 0, n * e->width * sizeof *rest);
    m->k->accumulate(modes_in(m, g), n, largest, LANES, e->peaks->rest_weight + g * LANES * e->width,
                     e->width, rest);
}

void rampwise_equipment_bound_group_(rampwise_modes *m, size_t g, size_t tiles, const double *largest)
{
    bound_rest(m, g, tiles, largest, m->equipment->peaks->rest_tile);
}

void rampwise_equipment_bound_steps_(rampwise_modes *m, size_t g, size_t n, const double *largest)
{
    bound_rest(m, g, n, largest, m->equipment->peaks->rest_step);
}

static void raise_floors(const rampwise_modes *m, size_t n, size_t i, int q)
{
    equipment_core *const e = m->equipment;
    double high = e->peaks->peak[q][i].high.value, low = e->peaks->peak[q][i].low.value;
    for (size_t k = 1; k <= n; ++k) {
        double u, v;
        state_at(e, i, k, &u, &v);
        const double z = looked_at(&e->c[i], q, u, v);
        high = z > high ? z : high;
        low = z < low ? z : low;
    }
    e->peaks->floor_high[q][i] = high;
    e->peaks->floor_low[q][i] = low;
}

static void prepare_piece(rampwise_modes *m, size_t n, size_t i)
{
    equipment_core *const e = m->equipment;
    double most[LOOKED_AT] = {-INFINITY, -INFINITY};
    for (int q = 0; q < LOOKED_AT; ++q) {
        raise_floors(m, n, i, q);
        e->peaks->tiles[q][i] = 0;
    }
    for (size_t k = 0; k < n; ++k) {
        reach r;
        reach_of(m, i, k, 0, &r);
        for (int q = 0; q < LOOKED_AT; ++q) {
            if (!may_count(e, i, q, &r))
                continue;
            e->peaks->tiles[q][i] |= (uint32_t)1 << k / TILE;
            if (most[q] < fmax(r.high[q], -r.low[q])) {
                most[q] = fmax(r.high[q], -r.low[q]);
                e->peaks->first[q][i] = (uint32_t)k;
            }
        }
    }
    for (int q = 0; q < LOOKED_AT; ++q)
        if (e->peaks->tiles[q][i] != 0)
            e->peaks->first_tiles |= (uint32_t)1 << e->peaks->first[q][i] / TILE;
}

void rampwise_equipment_prepare_(rampwise_modes *m, size_t n)
{
    m->equipment->peaks->first_tiles = 0;
    for (size_t i = 0; i < m->equipment->count; ++i)
        prepare_piece(m, n, i);
}

/* Whether piece i may count for q in the step after k, in this pass. */
static int is_wanted(const rampwise_modes *m, size_t i, int q, size_t k, int pass, int looking)
{
    const equipment_core *const e = m->equipment;
    reach r;
    if ((e->peaks->tiles[q][i] >> k / TILE & 1) == 0 || (e->peaks->first[q][i] == k) != (pass == 0))
        return 0;
    reach_of(m, i, k, looking, &r);
    return may_count(e, i, q, &r);
}

int rampwise_equipment_may_count_(const rampwise_modes *m, size_t t, size_t n, int pass)
{
    const equipment_core *const e = m->equipment;
    if (pass == 0)
        return (int)(e->peaks->first_tiles >> t & 1);
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
        e->peaks->wanted[i] = 0;
        for (int q = 0; q < LOOKED_AT; ++q)
            e->peaks->wanted[i] |= (unsigned char)(is_wanted(m, i, q, k, pass, 1) << q);
        state_at(e, i, k, &e->peaks->u_inside[i], &e->peaks->v_inside[i]);
        any |= e->peaks->wanted[i];
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
    double u = e->peaks->u_inside[i], v = e->peaks->v_inside[i] * d, z[MODES_POWERS + 1];
    double a[MODES_POWERS + 3] = {u, v};
    for (size_t n = 0; n <= MODES_POWERS; ++n)
        a[n + 2] = (-S * (double)(n + 1) * a[n + 1] - K * a[n] - series[n * m->width + e->point[i]] * d * d) *
                   rampwise_modes_per_term_[n];
    u = v = 0;
    for (size_t n = MODES_POWERS + 2; n > 0; --n) {
        u += a[n];
        v += (double)n * a[n];
    }
    e->peaks->u_inside[i] = u + a[0];
    e->peaks->v_inside[i] = v / d;
    for (int q = 0; q < LOOKED_AT; ++q) {
        if ((e->peaks->wanted[i] >> q & 1) == 0)
            continue;
        for (size_t n = 0; n <= MODES_POWERS; ++n)
            z[n] = q == 0 ? a[n] : c->total[0] * a[n] + c->total[1] / d * ((double)(n + 1) * a[n + 1]);
        rampwise_modes_curve_(z, e->peaks->floor_high[q][i], e->peaks->floor_low[q][i], m->sample + k, piece,
                              pieces, &e->peaks->peak[q][i]);
    }
}

void rampwise_equipment_look_(rampwise_modes *m, size_t k, size_t piece, size_t pieces, const double *series)
{
    for (size_t i = 0; i < m->equipment->count; ++i)
        if (m->equipment->peaks->wanted[i] != 0)
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
                rampwise_modes_note_(&e->peaks->peak[q][i], looked_at(&e->c[i], q, u, v), m->sample + k, 0);
            }
}

rampwise_peak *rampwise_equipment_peak_(const rampwise_modes *m, size_t i, int q)
{
    return &m->equipment->peaks->peak[q][i];
}
