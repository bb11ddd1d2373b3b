#include "directions_group.h"

#include <float.h>
#include <math.h>
#include <string.h>
#include "lanes.h"
#include "rampwise/status.h"
#include "relative.h"

/* Slacks: between samples, half of what is promised; and of what only serves to pass by as much as possible. */
#define BETWEEN 5e-7
#define COARSE 0.02

static void make_lane(directions_lane *l, const rampwise_coeffs *c, int quantity, int at_samples)
{
    l->c = *c;
    rampwise_extremes_bound_(&l->x, &l->c, quantity);
    if (!at_samples)
        (void)rampwise_extremes_make_(&l->x, &l->c, quantity); /* parts of a step that could be made */
}

void rampwise_directions_group_make_(directions_group *g, size_t count, const rampwise_coeffs *c,
                                     int quantity, int at_samples)
{
    memset(g, 0, sizeof *g);
    g->count = count;
    g->at_samples = at_samples;
    g->slack = at_samples ? OUTLINE_ROUNDING : BETWEEN;
    for (size_t j = 0; j < count; ++j) {
        directions_lane *const l = &g->lane[j];
        make_lane(l, &c[j], quantity, at_samples);
        const int followed =
            !l->x.jumps && c[j].input != RAMPWISE_BASE_DISPLACEMENT; /* by the kernel's quantity */
        g->excess[0][j] = !at_samples ? l->x.constant : followed ? 0 : INFINITY;
        g->excess[1][j] = at_samples ? 0 : l->x.from_p;
        g->excess[2][j] = at_samples ? 0 : l->x.from_change;
        g->excess[3][j] = at_samples ? 0 : l->x.from_size;
        for (size_t i = 0; i < 3; ++i)
            g->row[i][j] = c[j].total[i];
    }
}

static void take_sides(directions_group *g, size_t j)
{
    double side[SIDES][2];
    rampwise_outline_sides_(&g->lane[j].outline, g->slack, side);
    for (int i = 0; i < 2; ++i) {
        g->reach[i][j] = 0;
        for (int k = 0; k < SIDES; ++k) {
            g->side[k][i][j] = side[k][i];
            g->reach[i][j] = fmax(g->reach[i][j], fabs(side[k][i]));
        }
    }
}

static double value_of(const extremes *x, const rampwise_state *s)
{
    return x->quantity == RAMPWISE_DISPLACEMENT && x->c->input != RAMPWISE_BASE_DISPLACEMENT
               ? s->u
               : rampwise_extremes_value_(x, s);
}

static int add_values(directions_lane *l, double z1, double z2, double slack)
{
    return rampwise_outline_add_(&l->outline, (point){z1, z2}, slack);
}

int rampwise_directions_group_start_(directions_group *g, const double p0[2])
{
    lane_block *const block[2] = {&g->first, &g->second};
    for (size_t j = 0; j < g->count; ++j) {
        directions_lane *const l = &g->lane[j];
        rampwise_state s[2];
        for (int i = 0; i < 2; ++i) {
            rampwise_start(&s[i], 0, 0, p0[i]);
            block[i]->u[j] = block[i]->v[j] = 0;
        }
        rampwise_lane_set_(&g->first, j, &l->c);
        l->stopped = 0;
        l->waiting = 0;
        l->outline.count = 0;
        l->outline.largest = 0;
        l->outline.thinned = 0;
        if (add_values(l, value_of(&l->x, &s[0]), value_of(&l->x, &s[1]), g->slack) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
        take_sides(g, j);
    }
    return RAMPWISE_OK;
}

/* Coefficients over the 2^-level part of a step: kept from a short piece on, else made into *scratch. NULL where there
   are none. */
static const rampwise_coeffs *over_part(directions_lane *l, int level, rampwise_coeffs *scratch)
{
    const int kept = level - l->x.halvings;
    rampwise_coeffs *to = scratch;
    if (kept >= PARTS)
        return NULL;
    for (int i = kept < 0 ? 0 : l->parts; i <= (kept < 0 ? 0 : kept); ++i) {
        const int deep = kept < 0 ? level : l->x.halvings + i;
        to = kept < 0 ? scratch : &l->part[i];
        if (rampwise_coeffs_make(to, &l->c.system, ldexp(l->c.dt, -deep), RAMPWISE_FORCE, RAMPWISE_RAMP) !=
            RAMPWISE_OK)
            return NULL;
        l->parts += kept >= 0;
    }
    return kept < 0 ? scratch : &l->part[kept];
}

/* Does the outline hold the curve from begin to end, a part of a step `length` long? Its second derivative z'' is a free
   vibration, z''(t) = g(t) z''(0) + h(t) z'''(0), and with damping and stiffness not negative |g| <= 1 and |h| <= t, |h|
   <= 1/sqrt(stiffness) (the energy of a free vibration does not grow). The curve is off its chord by at most t (length
   - t)/2 of what z'' can be, so that it lies within the chord and the four points that are off its middle by
   length^2/4 of that. */
static int holds_curve(const directions_lane *l, double length, const relative begin[2],
                       const relative end[2])
{
    const extremes *const x = &l->x;
    const double span = fmin(length, 1 / sqrt(x->stiffness)), off = length * length / 4;
    const derivatives d1 = derivatives_of(x, begin[0]), d2 = derivatives_of(x, begin[1]);
    const double bend1 = off * (fabs(d1.z2) + span * fabs(d1.z3)),
                 bend2 = off * (fabs(d2.z2) + span * fabs(d2.z3));
    if (bend1 + bend2 <= 2 * BETWEEN * l->outline.largest)
        return 1; /* near enough to its chord, even where that was thinned away */
    const point middle = {0.5 * (d1.z + derivatives_of(x, end[0]).z),
                          0.5 * (d2.z + derivatives_of(x, end[1]).z)};
    for (int i = 0; i < 4; ++i) {
        const double a = i % 2 == 0 ? off : -off, b = (i / 2 == 0 ? off : -off) * span;
        const point reached = {middle.x + a * d1.z2 + b * d1.z3, middle.y + a * d2.z2 + b * d2.z3};
        if (!rampwise_outline_holds_(&l->outline, reached, BETWEEN))
            return 0;
    }
    return 1;
}

/* The 2^-level part of a step from begin to end, both in the outline: halved until all of it is. */
static int add_curve(directions_lane *l, int level, const relative begin[2], const relative end[2])
{
    rampwise_coeffs scratch;
    if (holds_curve(l, ldexp(l->c.dt, -level), begin, end))
        return RAMPWISE_OK;
    const rampwise_coeffs *const half = over_part(l, level + 1, &scratch);
    if (half == NULL)
        return RAMPWISE_OK;
    const relative middle[2] = {later(half, begin[0]), later(half, begin[1])};
    if (add_values(l, derivatives_of(&l->x, middle[0]).z, derivatives_of(&l->x, middle[1]).z, BETWEEN) !=
        RAMPWISE_OK)
        return RAMPWISE_ERROR_MEMORY;
    const int status = add_curve(l, level + 1, begin, middle);
    return status == RAMPWISE_OK ? add_curve(l, level + 1, middle, end) : status;
}

/* The short pieces from r on. */
static int add_pieces(directions_lane *l, const relative begin[2])
{
    relative r[2] = {begin[0], begin[1]};
    for (size_t i = 0; i < l->x.pieces; ++i) {
        const relative next[2] = {later(&l->x.piece, r[0]), later(&l->x.piece, r[1])};
        int status =
            add_values(l, derivatives_of(&l->x, next[0]).z, derivatives_of(&l->x, next[1]).z, BETWEEN);
        if (status == RAMPWISE_OK)
            status = add_curve(l, l->x.halvings, r, next);
        if (status != RAMPWISE_OK)
            return status;
        memcpy(r, next, sizeof r);
    }
    return RAMPWISE_OK;
}

/* In a long step of many cycles the extremes of one sign are convex in order, whatever the angle: only those near its
   ends can count. */
static int add_inside(directions_lane *l, const rampwise_state s[2], const rampwise_state next[2])
{
    const extremes *const x = &l->x;
    const relative begin[2] = {relative_to_base(x->c, &s[0], next[0].p),
                               relative_to_base(x->c, &s[1], next[1].p)};
    if (x->halvings == 0 || !x->oscillates) {
        const relative end[2] = {relative_at_end(x->c, &begin[0], &s[0], &next[0]),
                                 relative_at_end(x->c, &begin[1], &s[1], &next[1])};
        return add_curve(l, 0, begin, end);
    }
    int status = add_pieces(l, begin);
    if (status == RAMPWISE_OK && ldexp((double)x->pieces, -x->halvings) < 1) {
        const relative last[2] = {later(&x->leap, begin[0]), later(&x->leap, begin[1])};
        status = add_values(l, derivatives_of(x, last[0]).z, derivatives_of(x, last[1]).z, BETWEEN);
        if (status == RAMPWISE_OK)
            status = add_pieces(l, last);
    }
    return status;
}

/* Whether the step's end, or with the excess between samples its inside, may be beyond the outline's sides. */
static int may_stick_out(const directions_group *g, size_t j, const rampwise_state s[2],
                         const rampwise_state next[2], const double z[2], const double z_next[2])
{
    double most = 0;
    for (int k = 0; g->at_samples && k < SIDES; ++k) {
        const double end = fabs(g->side[k][0][j] * z_next[0] + g->side[k][1][j] * z_next[1]);
        most = end > most ? end : most;
    }
    for (int k = 0; !g->at_samples && k < SIDES; ++k) {
        const double a = g->side[k][0][j], b = g->side[k][1][j], end = fabs(a * z_next[0] + b * z_next[1]);
        const double begin = fabs(a * z[0] + b * z[1]), size = fmax(begin, end);
        const double p = fmax(fabs(a * s[0].p + b * s[1].p), fabs(a * next[0].p + b * next[1].p));
        const double change = fabs(a * (next[0].p - s[0].p) + b * (next[1].p - s[1].p));
        const double reached = size + g->excess[1][j] * p + g->excess[2][j] * change + g->excess[3][j] * size;
        if (!(reached <= 1))
            return 1;
        most = fmax(most, reached);
    }
    return !(most + g->excess[0][j] <= 1);
}

/* Both values where the quantity jumps. */
static int add_jump(directions_lane *l, const rampwise_state s[2], const rampwise_state next[2], double slack)
{
    const extremes *const x = &l->x;
    const int status = add_values(l, rampwise_extremes_begin_(x, &s[0], next[0].p),
                                  rampwise_extremes_begin_(x, &s[1], next[1].p), slack);
    if (status != RAMPWISE_OK)
        return status;
    return add_values(l, rampwise_extremes_end_(x, &next[0]), rampwise_extremes_end_(x, &next[1]), slack);
}

static int add_step(directions_group *g, size_t j, const rampwise_state s[2], const rampwise_state next[2],
                    const double z_next[2])
{
    directions_lane *const l = &g->lane[j];
    int status = l->x.jumps ? add_jump(l, s, next, g->slack) : RAMPWISE_OK;
    if (status == RAMPWISE_OK)
        status = add_values(l, z_next[0], z_next[1], g->slack);
    return status == RAMPWISE_OK && !g->at_samples ? add_inside(l, s, next) : status;
}

/* The sample at `back` before number i of a run: 1 or 2. */
static double sample_before(const two_inputs *in, int which, size_t i, size_t back)
{
    if (i >= back)
        return in->p[which][i - back];
    return i + 1 == back ? in->p_last[which] : in->p_before[which];
}

/* A stretch step by step. */
static int look(const kernels *k, directions_group *g, size_t j, const two_inputs *in,
                const waiting_stretch *at)
{
    directions_lane *const l = &g->lane[j];
    rampwise_state s[2];
    double u[2][SPAN], v[2][SPAN], z[2];
    for (int i = 0; i < 2; ++i) {
        s[i] = (rampwise_state){at->u[i], at->v[i], sample_before(in, i, at->first, 1),
                                sample_before(in, i, at->first, 2)};
        const rampwise_history out = {u[i], v[i], NULL, NULL};
        rampwise_state end = s[i];
        (void)k->advance(&l->c, &end, 0, at->n, 1, in->p[i] + at->first, &out);
        z[i] = value_of(&l->x, &s[i]);
    }
    for (size_t i = 0; i < at->n; ++i) {
        const rampwise_state next[2] = {{u[0][i], v[0][i], in->p[0][at->first + i], s[0].p},
                                        {u[1][i], v[1][i], in->p[1][at->first + i], s[1].p}};
        const double z_next[2] = {value_of(&l->x, &next[0]), value_of(&l->x, &next[1])};
        if (may_stick_out(g, j, s, next, z, z_next) && add_step(g, j, s, next, z_next) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
        memcpy(s, next, sizeof next);
        memcpy(z, z_next, sizeof z);
    }
    return RAMPWISE_OK;
}

/* The largest |p| and the largest change along a stretch. */
static void bound_input(double p_last, size_t n, const double *p, double *largest, double *change)
{
    double before = p_last;
    *largest = fabs(before);
    *change = 0;
    for (size_t i = 0; i < n; ++i) {
        const double size = fabs(p[i]), apart = fabs(p[i] - before);
        *largest = size > *largest ? size : *largest;
        *change = apart > *change ? apart : *change;
        before = p[i];
    }
}

/* Of both inputs of a stretch. */
typedef struct input_bound {
    double largest[2], change[2];
} input_bound;

static input_bound bound_inputs(const two_inputs *in, size_t first, size_t n)
{
    input_bound b;
    for (int i = 0; i < 2; ++i)
        bound_input(sample_before(in, i, first, 1), n, in->p[i] + first, &b.largest[i], &b.change[i]);
    return b;
}

/* What lane j reaches of the sides with the excess between samples, where its samples reach `outside`. */
static inline double with_excess(const directions_group *g, size_t j, double outside, const input_bound *b)
{
    return outside + g->excess[0][j] + g->excess[3][j] * outside +
           g->reach[0][j] * (g->excess[1][j] * b->largest[0] + g->excess[2][j] * b->change[0]) +
           g->reach[1][j] * (g->excess[1][j] * b->largest[1] + g->excess[2][j] * b->change[1]);
}

/* Is a stretch inside the outline by now? Its octagon (kernels.h) is, or with its excess inside the sides. */
static int is_outdone(const directions_group *g, size_t j, const two_inputs *in, const waiting_stretch *at)
{
    const double *const e = at->extent;
    const double x[4] = {e[0], e[2] - e[1], e[1] - e[3], -e[0]},
                 y[4] = {e[2] - e[0], e[1], e[1], e[3] - e[0]};
    double outside = 0;
    for (int k = 0; k < SIDES; ++k)
        for (int i = 0; i < 4; ++i) {
            const double reached = fabs(g->side[k][0][j] * x[i] + g->side[k][1][j] * y[i]);
            outside = reached > outside ? reached : outside;
        }
    if (g->at_samples && !(outside <= 1) && g->excess[0][j] == 0) {
        for (int i = 0; i < 4; ++i)
            if (!rampwise_outline_holds_(&g->lane[j].outline, (point){x[i], y[i]}, g->slack))
                return 0;
        return 1;
    }
    const input_bound b = bound_inputs(in, at->first, at->n);
    return with_excess(g, j, outside, &b) <= 1;
}

/* Those that wait: first what is outdone goes, and if that leaves many (or `all` is asked) all are looked at. */
static int settle(const kernels *k, directions_group *g, size_t j, const two_inputs *in, int all)
{
    directions_lane *const l = &g->lane[j];
    size_t kept = 0;
    for (size_t i = 0; i < l->waiting; ++i)
        if (!is_outdone(g, j, in, &l->stretch[i]))
            l->stretch[kept++] = l->stretch[i];
    l->waiting = kept;
    if (!all && kept <= WAITING / 2)
        return RAMPWISE_OK;
    l->waiting = 0;
    for (size_t i = 0; i < kept; ++i)
        if ((i == 0 || !is_outdone(g, j, in, &l->stretch[i])) &&
            look(k, g, j, in, &l->stretch[i]) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    take_sides(g, j);
    return RAMPWISE_OK;
}

/* Lanes with a state that is not finite stand still from here on. */
static void stop_lost(directions_group *g)
{
    for (size_t j = 0; j < g->count; ++j) {
        const double zero = 0 * g->first.u[j] + 0 * g->first.v[j] + 0 * g->second.u[j] + 0 * g->second.v[j];
        if (zero == 0)
            continue;
        rampwise_lane_still_(&g->first, j);
        g->first.u[j] = g->first.v[j] = g->second.u[j] = g->second.v[j] = 0;
        g->lane[j].stopped = 1;
    }
}

/* States where a stretch begins, and what the kernel finds along it. */
typedef struct traces {
    double u[2][LANES], v[2][LANES], outside[LANES], extent[4][LANES];
} traces;

/* Puts the stretch aside, and takes its last sample into the outline where that makes it much larger. */
static int put_aside(const kernels *k, directions_group *g, size_t j, const two_inputs *in, size_t first,
                     size_t n, const traces *t)
{
    directions_lane *const l = &g->lane[j];
    if (l->waiting == WAITING && settle(k, g, j, in, 0) != RAMPWISE_OK)
        return RAMPWISE_ERROR_MEMORY;
    waiting_stretch *const to = &l->stretch[l->waiting++];
    *to = (waiting_stretch){{t->u[0][j], t->u[1][j]}, {t->v[0][j], t->v[1][j]}, {0}, first, n};
    for (int i = 0; i < 4; ++i)
        to->extent[i] = t->extent[i][j];
    const rampwise_state s[2] = {
        {g->first.u[j], g->first.v[j], in->p[0][first + n - 1], sample_before(in, 0, first + n, 2)},
        {g->second.u[j], g->second.v[j], in->p[1][first + n - 1], sample_before(in, 1, first + n, 2)}};
    const point z = {value_of(&l->x, &s[0]), value_of(&l->x, &s[1])};
    if (rampwise_outline_holds_(&l->outline, z, COARSE))
        return RAMPWISE_OK;
    const int status = rampwise_outline_add_(&l->outline, z, COARSE);
    take_sides(g, j);
    return status;
}

static int run_stretch(const kernels *k, directions_group *g, const two_inputs *in, size_t first, size_t n)
{
    traces t;
    const double p_last[2] = {sample_before(in, 0, first, 1), sample_before(in, 1, first, 1)};
    const double *const p[2] = {in->p[0] + first, in->p[1] + first};
    memcpy(t.u[0], g->first.u, sizeof t.u[0]);
    memcpy(t.v[0], g->first.v, sizeof t.v[0]);
    memcpy(t.u[1], g->second.u, sizeof t.u[1]);
    memcpy(t.v[1], g->second.v, sizeof t.v[1]);
    if (k->under_two_inputs(&g->first, &g->second, g->count, g->lane[0].x.quantity - RAMPWISE_DISPLACEMENT,
                            g->row, g->side, p_last, n, p, t.outside, t.extent))
        stop_lost(g);
    const input_bound b = bound_inputs(in, first, n);
    for (size_t j = 0; j < g->count; ++j)
        if (!(with_excess(g, j, t.outside[j], &b) <= 1) && !g->lane[j].stopped &&
            put_aside(k, g, j, in, first, n, &t) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    return RAMPWISE_OK;
}

int rampwise_directions_group_run_(const kernels *k, directions_group *g, size_t n, const two_inputs *in)
{
    for (size_t done = 0; done < n; done += SPAN)
        if (run_stretch(k, g, in, done, n - done < SPAN ? n - done : SPAN) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    for (size_t j = 0; j < g->count; ++j)
        if (!g->lane[j].stopped && settle(k, g, j, in, 1) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    return RAMPWISE_OK;
}
