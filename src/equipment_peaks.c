/* Peaks of equipment, between the samples too: equipment.h says how. */
#include <math.h>
#include <string.h>
#include "equipment_core.h"
#include "modes_peaks_core.h"

/* Of a piece with a spring and no negative damper: frequency, damping rate over it, and 1/stiffness. */
typedef struct envelope {
    double omega, ratio, per_stiffness;
} envelope;

/* By how much a quantity exceeds its values at the ends of a stretch (limits_of), for one of |x| there, of
   the rise of x, of |y| with its excess, of the rise of y, and of the excess of y. */
typedef struct curvature {
    double by_u, by_rise, by_y, by_y_rise, by_y_excess;
} curvature;

/* What bounds a piece in stretches of one length. */
typedef struct limits {
    int is_short, swings;       /* which of the two below are there */
    curvature of[LOOKED_AT];    /* short */
    envelope to;                /* swings */
    double as_total, per_angle; /* a free vibration of size 1 as a total acceleration; 1/(omega h) */
    double on_u, on_v;          /* the total acceleration */
} limits;

/* Bounds of displacement and total acceleration over a stretch. */
typedef struct reach {
    double high[LOOKED_AT], low[LOOKED_AT];
} reach;

struct equipment_peaks {
    rampwise_peak *peak[LOOKED_AT];                       /* [count] */
    double *floor_high[LOOKED_AT], *floor_low[LOOKED_AT]; /* as those of outputs */
    limits *step, *part;                                  /* [count] */
    double *step_weight, *part_weight; /* [groups][LANES][width]: of the rest in a step and in a part */
    double *rest_tile, *rest_step, *rest_part; /* [TILES][width], [TILE][width] and again */
    equipment_steps by_part;                   /* steps as long as a part */
    /* of a step that is looked at: */
    unsigned char *wanted;       /* [count]: bits of quantities that may have a peak */
    size_t *which;               /* [count][2]: columns of the pieces that are looked at */
    size_t pieces;               /* how many these are */
    double *inside;              /* [count][2][PARTS]: gains, then states at the ends of the parts */
    uint32_t *spans[LOOKED_AT];  /* [count]: bits of those that may hold a peak */
    double *u_inside, *v_inside; /* [count]: where the next piece of a span begins */
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
        x->spans[q] = rampwise_room_take_(r, count, sizeof(uint32_t));
    }
    x->step = rampwise_room_take_(r, count, sizeof *x->step);
    x->part = rampwise_room_take_(r, count, sizeof *x->part);
    x->step_weight = rampwise_room_take_(r, m->groups * LANES, row);
    x->part_weight = rampwise_room_take_(r, m->groups * LANES, row);
    x->rest_tile = rampwise_room_take_(r, TILES, row);
    x->rest_step = rampwise_room_take_(r, TILE, row);
    x->rest_part = rampwise_room_take_(r, TILE, row);
    rampwise_equipment_steps_take_(m, &x->by_part, count, r);
    x->which = rampwise_room_take_(r, count, 2 * sizeof *x->which);
    x->inside = rampwise_room_take_(r, count, (size_t)2 * PARTS * sizeof(double));
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
   Re(-Y exp(s t)/D) under it, D = s^2 + c s + k: k e (envelope_of) moves with s (s + c)/D, and k x with k/D.
   Beside it goes the free motion that makes the sum begin at rest. */
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

/* What a free vibration of a mode, with the energy bound 1 of its q'' in a step, can do to a piece within a
   stretch of length h inside, beyond what the values of y at its ends tell; envelope_of below says how. The
   smallest of several bounds. */
static double rest_of(const envelope *to, const rampwise_coeffs *mode, double h, double on_u, double on_v)
{
    const double angle = to->omega * h, S = to->ratio * to->omega;
    const double stiffness = -mode->acceleration[0], damping = -mode->acceleration[1];
    const double slowest = 0.25 / (mode->dt * mode->dt), w = sqrt(fmax(stiffness, slowest));
    const double slow = (on_u + on_v * w) * to->per_stiffness * h / to->omega * (1.5 + S * h + to->ratio);
    if (!(stiffness >= slowest && damping >= 0))
        return slow;
    const swing swinging = {w, 0.5 * damping / w, w / to->omega};
    const double inverse = inverse_of(stiffness, damping), turned = sqrt(inverse) * stiffness;
    const double ends = 2 + 2 / angle + to->ratio * (2 + swinging.ratio + 2 / angle);
    double size = 2 * angle / swinging.ratio * (1 + to->ratio) * (1 + 2 * swinging.zeta) + ends;
    if (swinging.zeta < 1)
        size = fmin(size, detuned(&swinging, to, h, ends));
    return fmin(slow, (on_u + on_v * turned) * inverse * to->per_stiffness * size);
}

static envelope envelope_made(const rampwise_coeffs *c)
{
    const double k = -c->total[0], damping = -c->total[1];
    if (!(k > 0 && damping >= 0))
        return (envelope){0, 0, 0};
    return (envelope){sqrt(k), damping / sqrt(k), 1 / k};
}

/* What a stretch can hold of a quantity beyond its ends: x'' = -k x - c x' - y, so with M the largest |x''|,
   |x| is at most its ends' and h^2/8 M, |x'| at most the rise of x over h and h M, and M (1 - K/8 - S) is at
   most k |x| + c rise/h + |y|. The second derivative of the total acceleration -(c x' + k x) is -(c x''' + k
   x''), and x''' follows from y', which is at most the rise of y over h and h y'' = 8/h of the excess of y.
   Where a mode turns by more than 4 radians in h, its slope may be more, its excess being twice its size A;
   but it comes to and fro in x' by A/omega alone, so that the total acceleration exceeds its ends by 2 c
   A/omega < c h A/2, which is less than the 2 c h A that are counted. Per mass. */
static limits limits_of(const rampwise_coeffs *c, double h)
{
    const double k = fabs(c->total[0]), damping = fabs(c->total[1]), rest = 1 - k * h * h / 8 - damping * h;
    const double curved = 1.0001 * h * h / 8, by_most = k + damping * (k * h + damping);
    limits l = {.is_short = rest > 0.25, .to = envelope_made(c), .on_u = c->total[0], .on_v = c->total[1]};
    const curvature most = {k / rest, damping / h / rest, 1 / rest, 0, 0};
    l.of[0] = (curvature){curved * most.by_u, curved * most.by_rise, curved * most.by_y, 0, 0};
    l.of[1] = (curvature){curved * by_most * most.by_u, curved * (by_most * most.by_rise + damping * k / h),
                          curved * by_most * most.by_y, curved * damping / h, curved * damping * 8 / h};
    l.swings = l.to.omega > 0;
    l.as_total = k * size_of(1, l.to.ratio);
    l.per_angle = l.swings ? 1 / (l.to.omega * h) : 0;
    return l;
}

int rampwise_equipment_peaks_fill_(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    x->step[i] = limits_of(&e->steps.c[i], m->dt);
    x->part[i] = limits_of(&e->steps.c[i], m->dt / PARTS);
    const envelope *const to = &x->step[i].to;
    for (size_t j = 0; x->step[i].swings && j < m->modes; ++j) {
        const size_t weight = j * m->width + e->point[i], at = j * e->width + i;
        const double on_u = fabs(m->weight_u[weight]);
        const double on_v = m->weight_v != NULL ? fabs(m->weight_v[weight]) : 0;
        x->step_weight[at] = 1.0001 * rest_of(to, &plan->c[j], m->dt, on_u, on_v);
        x->part_weight[at] = 1.0001 * rest_of(to, &plan->c[j], m->dt / PARTS, on_u, on_v);
    }
    return rampwise_equipment_steps_fill_(m, plan, &x->by_part, m->dt / PARTS, i);
}

void rampwise_equipment_peaks_start_(rampwise_modes *m)
{
    equipment_core *const e = m->equipment;
    for (int q = 0; q < LOOKED_AT; ++q)
        memset(e->peaks->peak[q], 0, e->count * sizeof(rampwise_peak));
}

/* A step, or a part of one: a piece's states and its point's acceleration y at the two ends; how much y
   exceeds those in between; the jump of y that is part of it; and what else modes do (rest_of). */
typedef struct stretch {
    double u[2], v[2], y[2], excess, jump, rest;
} stretch;

static double looked_at(const rampwise_coeffs *c, int q, double u, double v)
{
    return q == 0 ? u : total_of(c, u, v);
}

/* The envelope. e = x + y/k swings by itself: e'' + c e' + k e = (y'' + c y')/k. The root of the energy e'^2
   + k e^2 of a free motion never grows, and a driven one's by no more than the time integral of what drives
   it; over omega, that is the size sqrt(e^2 + e'^2/k). e begins with x + y/k, and e' with x' + y'/k, y' being
   the rise of y in the step over h and a part of each mode; the rise drives it too. What else a mode does
   (rest_of, detuned) has three bounds. Either h |q''| bounds its y' less the mean, and the integral of its
   y''. Or y = F' with |F| at most (1 + 2 zeta) |y|/omega_j is taken as it is: it drives x' + F, and x, to no
   more than 2 h (omega + c) |F|, and e differs from that by y/k and the free motion from y/k and its mean
   slope. Or the motion under a mode off tune is known. In the end x = e - y/k, and the total acceleration is
   y - (k e + c e') + c y'/k. */
static reach envelope_of(const limits *l, const stretch *s)
{
    const envelope *const to = &l->to;
    const double high = larger(s->y[0], s->y[1]) + s->excess, low = smaller(s->y[0], s->y[1]) - s->excess;
    /* a jump is part of the excess, not of the rise */
    const double change = s->y[1] - s->y[0], rise = fabs(change) + s->jump;
    const double from_u = s->u[0] + s->y[0] * to->per_stiffness;
    const double from_v = s->v[0] * to->omega * to->per_stiffness + change * to->per_stiffness * l->per_angle;
    const double driven = rise * to->ratio + s->jump * l->per_angle;
    const double size = 1.0001 * (size_of(from_u, from_v) + driven * to->per_stiffness) + s->rest;
    const double total = size * l->as_total + 1.0001 * to->ratio * rise * l->per_angle;
    return (reach){{size - low * to->per_stiffness, total + high},
                   {-size - high * to->per_stiffness, low - total}};
}

/* By dt^2/8 of the largest second derivative. */
static reach curvature_of(const limits *l, const stretch *s)
{
    reach r;
    const double u = larger(fabs(s->u[0]), fabs(s->u[1])), rise = fabs(s->u[1] - s->u[0]);
    const double y = larger(fabs(s->y[0]), fabs(s->y[1])) + s->excess, y_rise = fabs(s->y[1] - s->y[0]);
    for (int q = 0; q < LOOKED_AT; ++q) {
        const curvature *const of = &l->of[q];
        const double begin = q == 0 ? s->u[0] : l->on_u * s->u[0] + l->on_v * s->v[0];
        const double end = q == 0 ? s->u[1] : l->on_u * s->u[1] + l->on_v * s->v[1];
        const double excess = of->by_u * u + of->by_rise * rise + of->by_y * y + of->by_y_rise * y_rise +
                              of->by_y_excess * s->excess;
        r.high[q] = larger(begin, end) + excess;
        r.low[q] = smaller(begin, end) - excess;
    }
    return r;
}

/* Bits of the quantities of piece i that need not stay below what must be exceeded. */
static int exceeding(const equipment_peaks *x, size_t i, reach r)
{
    int bits = 0;
    for (int q = 0; q < LOOKED_AT; ++q)
        bits |= !(r.high[q] <= x->floor_high[q][i] && r.low[q] >= x->floor_low[q][i]) << q;
    return bits;
}

/* Bits of the quantities of piece i that may have a peak in a stretch: by the quicker bound first. */
static unsigned char may_count(const equipment_peaks *x, size_t i, const limits *l, const stretch *s)
{
    int bits = (1 << LOOKED_AT) - 1;
    if (l->is_short)
        bits &= exceeding(x, i, curvature_of(l, s));
    if (bits != 0 && l->swings)
        bits &= exceeding(x, i, envelope_of(l, s));
    return (unsigned char)bits;
}

/* In the step after k; by the bounds of its tile, or, in a tile that is looked at, by its own. */
static unsigned char may_count_in_step(const rampwise_modes *m, size_t i, size_t k, int looking)
{
    const equipment_core *const e = m->equipment;
    const equipment_peaks *const x = e->peaks;
    const double *const y = m->output + k * m->width + e->point[i];
    stretch s = {.y = {y[0], y[m->width]}};
    state_at(e, i, k, &s.u[0], &s.v[0]);
    state_at(e, i, k + 1, &s.u[1], &s.v[1]);
    s.excess = looking ? step_excess(m, k % TILE, e->point[i]) : tile_excess(m, k / TILE, e->point[i]);
    s.jump = m->between == RAMPWISE_HOLD ? s.excess : 0;
    s.rest = looking ? x->rest_step[k % TILE * e->width + i] : x->rest_tile[k / TILE * e->width + i];
    return may_count(x, i, &x->step[i], &s);
}

static void bound_rest(const rampwise_modes *m, size_t g, size_t n, const double *largest,
                       const double *weight, double *rest)
{
    const size_t width = m->equipment->width;
    if (g == 0)
        memset(rest, 0, n * width * sizeof *rest);
    m->k->accumulate(modes_in(m, g), n, largest, LANES, weight + g * LANES * width, width, rest);
}

void rampwise_equipment_bound_group_(rampwise_modes *m, size_t g, size_t tiles, const double *largest)
{
    const equipment_peaks *const x = m->equipment->peaks;
    bound_rest(m, g, tiles, largest, x->step_weight, x->rest_tile);
}

void rampwise_equipment_bound_steps_(rampwise_modes *m, size_t g, size_t n, const double *largest)
{
    const equipment_peaks *const x = m->equipment->peaks;
    bound_rest(m, g, n, largest, x->step_weight, x->rest_step);
    bound_rest(m, g, n, largest, x->part_weight, x->rest_part);
}

/* The samples of a piece. */
static void note_samples(const rampwise_modes *m, size_t n, size_t i, int q)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    rampwise_peak *const peak = &x->peak[q][i];
    for (size_t k = 1; k <= n; ++k) {
        double u, v;
        state_at(e, i, k, &u, &v);
        const double z = looked_at(&e->steps.c[i], q, u, v);
        if (z >= peak->high.value || z <= peak->low.value)
            rampwise_modes_note_(peak, z, m->sample + k, 0);
    }
    x->floor_high[q][i] = peak->high.value;
    x->floor_low[q][i] = peak->low.value;
}

void rampwise_equipment_note_(rampwise_modes *m, size_t n)
{
    for (size_t i = 0; i < m->equipment->count; ++i)
        for (int q = 0; q < LOOKED_AT; ++q)
            note_samples(m, n, i, q);
}

int rampwise_equipment_may_count_(const rampwise_modes *m, size_t t, size_t n)
{
    for (size_t i = 0; i < m->equipment->count; ++i)
        for (size_t k = t * TILE; k < t * TILE + n; ++k)
            if (may_count_in_step(m, i, k, 0))
                return 1;
    return 0;
}

int rampwise_equipment_want_(rampwise_modes *m, size_t k)
{
    equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    x->pieces = 0;
    for (size_t i = 0; i < e->count; ++i) {
        x->wanted[i] = may_count_in_step(m, i, k, 1);
        if (x->wanted[i] == 0)
            continue;
        ask_for(m, e->point[i]);
        x->which[2 * x->pieces] = i;
        x->which[2 * x->pieces + 1] = e->width + i;
        ++x->pieces;
    }
    return x->pieces > 0;
}

/* From what drives a piece in each part, u[PARTS] and v[PARTS], to its states at their ends. */
static void walk(const rampwise_coeffs *c, double u_now, double v_now, double *u, double *v)
{
    for (size_t part = 0; part < PARTS; ++part) {
        const double u_before = u_now;
        u_now += c->A_minus_1 * u_before + (c->B * v_now + u[part]);
        v_now += c->Ap * u_before + (c->Bp_minus_1 * v_now + v[part]);
        u[part] = u_now;
        v[part] = v_now;
    }
}

/* All pieces that are looked at, through the step after k. */
static void walk_inside(rampwise_modes *m, size_t k)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    const equipment_steps *const by = &x->by_part;
    const chosen c = {2 * x->pieces, x->which, 2 * e->width, by->from_u, by->from_v};
    const double *const input = rampwise_modes_part_input_(m);
    memset(x->inside, 0, c.count * PARTS * sizeof *x->inside);
    for (size_t i = 0; i < c.count; ++i)
        for (size_t in = 0; in < m->inputs; ++in) {
            const size_t at = in * c.width + c.which[i];
            for (size_t part = 0; part < PARTS; ++part)
                x->inside[i * PARTS + part] += by->from_before[at] * input[part * m->inputs + in] +
                                               by->from_now[at] * input[(part + 1) * m->inputs + in];
        }
    rampwise_modes_at_parts_(m, &c, x->inside);
    for (size_t r = 0; r < x->pieces; ++r) {
        const size_t i = x->which[2 * r];
        double *const u_inside = x->inside + 2 * r * PARTS, u, v;
        state_at(e, i, k, &u, &v);
        walk(&by->c[i], u, v, u_inside, u_inside + PARTS);
    }
}

/* Piece which[2 r] where a part of the step after k begins. */
static void state_inside(const equipment_core *e, size_t r, size_t k, size_t part, double *u, double *v)
{
    const double *const ends = e->peaks->inside + 2 * r * PARTS;
    if (part == 0) {
        state_at(e, e->peaks->which[2 * r], k, u, v);
        return;
    }
    *u = ends[part - 1];
    *v = ends[PARTS + part - 1];
}

static unsigned char may_count_in_part(const rampwise_modes *m, size_t r, size_t k, size_t part)
{
    const equipment_core *const e = m->equipment;
    const equipment_peaks *const x = e->peaks;
    const size_t i = x->which[2 * r];
    const double *const y = points_of(m, e->point[i]) + part;
    stretch s = {.y = {y[0], y[1]},
                 .excess = part_excess(m, k % TILE, e->point[i]),
                 .rest = x->rest_part[k % TILE * e->width + i]};
    state_inside(e, r, k, part, &s.u[0], &s.v[0]);
    state_inside(e, r, k, part + 1, &s.u[1], &s.v[1]);
    return x->wanted[i] & may_count(x, i, &x->part[i], &s);
}

static void raise_inside(const rampwise_modes *m, size_t r, size_t k, int q)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    const size_t i = x->which[2 * r];
    for (size_t part = 0; part <= PARTS; ++part) {
        double u, v;
        state_inside(e, r, k, part, &u, &v);
        const double z = q == 0 ? u : x->part[i].on_u * u + x->part[i].on_v * v;
        raise_floors(z, &x->floor_high[q][i], &x->floor_low[q][i]);
    }
}

/* In which spans of the step after k a piece may have a peak. */
static uint32_t spans_of(const rampwise_modes *m, size_t r, size_t k)
{
    equipment_peaks *const x = m->equipment->peaks;
    const size_t i = x->which[2 * r], parts = PARTS / rampwise_modes_spans_(m);
    for (int q = 0; q < LOOKED_AT; ++q) {
        x->spans[q][i] = 0;
        if (x->wanted[i] >> q & 1)
            raise_inside(m, r, k, q);
    }
    for (size_t part = 0; part < PARTS; ++part) {
        const uint32_t bits = may_count_in_part(m, r, k, part);
        for (int q = 0; q < LOOKED_AT; ++q)
            x->spans[q][i] |= (bits >> q & 1) << part / parts;
    }
    return x->spans[0][i] | x->spans[1][i];
}

uint32_t rampwise_equipment_spans_(rampwise_modes *m, size_t k)
{
    uint32_t spans = 0;
    walk_inside(m, k);
    for (size_t r = 0; r < m->equipment->peaks->pieces; ++r)
        spans |= spans_of(m, r, k);
    return spans;
}

static int is_in_span(const equipment_peaks *x, size_t i, size_t span)
{
    return (int)((x->spans[0][i] | x->spans[1][i]) >> span & 1);
}

void rampwise_equipment_begin_span_(rampwise_modes *m, size_t k, size_t span)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    const size_t parts = PARTS / rampwise_modes_spans_(m);
    for (size_t r = 0; r < x->pieces; ++r) {
        const size_t i = x->which[2 * r];
        if (!is_in_span(x, i, span))
            continue;
        ask_for(m, e->point[i]);
        state_inside(e, r, k, span * parts, &x->u_inside[i], &x->v_inside[i]);
    }
}

/* The power series of x and of its total acceleration from that of y, on a piece of length d of a step:
   (n + 1)(n + 2) a[n + 2] = -S (n + 1) a[n + 1] - K a[n] - y[n] d^2. */
static void look_at_piece(rampwise_modes *m, size_t i, size_t k, size_t span, size_t piece)
{
    const equipment_core *const e = m->equipment;
    equipment_peaks *const x = e->peaks;
    const rampwise_coeffs *const c = &e->steps.c[i];
    const size_t pieces = rampwise_modes_pieces_(m);
    const double d = m->dt / (double)pieces, K = -c->total[0] * d * d, S = -c->total[1] * d;
    const double *const y = series_of(m, e->point[i]);
    double u = x->u_inside[i], v = x->v_inside[i] * d, z[MODES_TERMS];
    double a[MODES_TERMS + 2] = {u, v};
    for (size_t n = 0; n < MODES_TERMS; ++n)
        a[n + 2] = (-S * (double)(n + 1) * a[n + 1] - K * a[n] - y[n] * d * d) * rampwise_modes_per_term_[n];
    u = v = 0;
    for (size_t n = MODES_TERMS + 1; n > 0; --n) {
        u += a[n];
        v += (double)n * a[n];
    }
    x->u_inside[i] = u + a[0];
    x->v_inside[i] = v / d;
    for (int q = 0; q < LOOKED_AT; ++q) {
        if ((x->spans[q][i] >> span & 1) == 0)
            continue;
        for (size_t n = 0; n < MODES_TERMS; ++n)
            z[n] = q == 0 ? a[n] : c->total[0] * a[n] + c->total[1] / d * ((double)(n + 1) * a[n + 1]);
        rampwise_modes_curve_(z, m->sample + k, piece, pieces, &x->peak[q][i]);
    }
}

void rampwise_equipment_look_(rampwise_modes *m, size_t k, size_t span, size_t piece)
{
    const equipment_peaks *const x = m->equipment->peaks;
    for (size_t r = 0; r < x->pieces; ++r) {
        const size_t i = x->which[2 * r];
        if (is_in_span(x, i, span))
            look_at_piece(m, i, k, span, piece);
    }
}

rampwise_peak *rampwise_equipment_peak_(const rampwise_modes *m, size_t i, int q)
{
    return &m->equipment->peaks->peak[q][i];
}
