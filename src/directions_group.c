#include "directions_group.h"

#include <float.h>
#include <math.h>
#include <string.h>
#include "lanes.h"
#include "rampwise/status.h"
#include "relative.h"

/* Slacks: between samples, half of what is promised; of an ellipse at the samples, where points are in a line
   but for what rounding does on the way to them; and of what only serves to pass by as much as possible. */
#define BETWEEN 5e-7
#define SLIM 1e-13
#define COARSE 0.002

static void take_excess(const extremes *x, double excess[4])
{
    const double from[4] = {x->constant, x->from_p, x->from_change, x->from_size};
    memcpy(excess, from, sizeof from);
}

static void make_lane(directions_lane *l, const rampwise_coeffs *c, int quantity, int at_samples)
{
    extremes *const x = &l->x;
    l->c = *c;
    rampwise_extremes_bound_(x, &l->c, quantity);
    if (!at_samples || !x->sampled)
        take_excess(x, l->excess[0]);
    rampwise_extremes_bound_steps_(x, SPAN);
    take_excess(x, l->excess[1]);
    if (!at_samples)
        (void)rampwise_extremes_make_(x, &l->c, quantity); /* parts of a step that could be made */
}

void rampwise_directions_group_make_(directions_group *g, size_t count, const rampwise_coeffs *c,
                                     int quantity, int at_samples)
{
    memset(g, 0, sizeof *g);
    g->count = count;
    g->at_samples = at_samples;
    g->slack = at_samples ? OUTLINE_ROUNDING : BETWEEN;
    g->ellipse_slack = at_samples ? SLIM : BETWEEN / sqrt(2); /* sqrt 2 of it can be lost (outline.h) */
    for (size_t j = 0; j < count; ++j) {
        make_lane(&g->lane[j], &c[j], quantity, at_samples);
        for (size_t i = 0; i < 3; ++i)
            g->row[i][j] = c[j].total[i];
    }
}

/* The ellipse's size has changed. */
static void take_size(directions_group *g, size_t j)
{
    directions_lane *const l = &g->lane[j];
    l->changes = l->outline.changes;
    l->looked = 0;
    g->limit[j] = l->excess[0][0] == 0 ? l->inside.size * l->inside.size : -1;
}

static void make_ellipse(directions_group *g, size_t j)
{
    directions_lane *const l = &g->lane[j];
    const ellipse before = l->inside;
    rampwise_outline_ellipse_(&l->outline, g->ellipse_slack, &l->inside);
    take_size(g, j);
    const double more = before.length > 0 ? rampwise_ellipse_larger_(&before, &l->inside) : INFINITY;
    for (size_t i = 0; i < l->waiting; ++i)
        l->stretch[i].largest *= more;
    l->made = g->stretches;
    for (int i = 0; i < 2; ++i) {
        g->form[2 * i][j] = l->inside.form[i].x;
        g->form[2 * i + 1][j] = l->inside.form[i].y;
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
    g->stretches = 0;
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
        make_ellipse(g, j);
    }
    return RAMPWISE_OK;
}

/* Coefficients over the 2^-level part of a step: kept from a short piece on, else made into *scratch.
   NULL where there are none. */
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

/* Does the outline hold the curve from begin to end, a part of a step `length` long? Its second derivative
   z'' is a free vibration, z''(t) = g(t) z''(0) + h(t) z'''(0), and with damping and stiffness not negative
   |g| <= 1 and |h| <= t, |h| <= 1/sqrt(stiffness) (the energy of a free vibration does not grow). The curve
   is off its chord by at most t (length - t)/2 of what z'' can be, so that it lies within the chord and the
   four points that are off its middle by length^2/4 of that. */
static int holds_curve(directions_lane *l, double length, const relative begin[2], const relative end[2])
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

/* In a long step of many cycles the extremes of one sign are convex in order, whatever the angle: only
   those near its ends can count. */
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

/* The sample at `back` before number i of a run: 1 or 2. */
static double sample_before(const two_inputs *in, int which, size_t i, size_t back)
{
    if (i >= back)
        return in->p[which][i - back];
    return i + 1 == back ? in->p_last[which] : in->p_before[which];
}

static double larger(double a, double b)
{
    return a > b ? a : b;
}

/* The square of how far out a point is, in sizes of the ellipse. */
static double square_out(const ellipse *e, double x, double y)
{
    const double along = e->form[0].x * x + e->form[0].y * y, across = e->form[1].x * x + e->form[1].y * y;
    return along * along + across * across;
}

/* What some samples, the inputs there and the changes of these are out by at most. */
typedef struct reached {
    double z, p, change;
} reached;

static void reach_inputs(const ellipse *e, const two_inputs *in, size_t first, size_t n, reached *r)
{
    double x = sample_before(in, 0, first, 1), y = sample_before(in, 1, first, 1);
    r->p = square_out(e, x, y);
    r->change = 0;
    for (size_t i = first; i < first + n; ++i) {
        const double before_x = x, before_y = y;
        x = in->p[0][i];
        y = in->p[1][i];
        r->p = larger(square_out(e, x, y), r->p);
        r->change = larger(square_out(e, x - before_x, y - before_y), r->change);
    }
    r->p = sqrt(r->p);
    r->change = sqrt(r->change);
}

/* Any a x + b y is a quantity under an input, so that its excess is bounded as one is. */
static double excess_of(const double from[4], const reached *r)
{
    return from[0] + from[1] * r->p + from[2] * r->change + from[3] * r->z;
}

/* Does a stretch stay inside the ellipse, as far as the largest of each input by itself tell? */
static int stays_inside(const directions_group *g, size_t j, double largest, const reached input[2])
{
    if (g->at_samples)
        return largest <= g->limit[j];
    const directions_lane *const l = &g->lane[j];
    const ellipse *const e = &l->inside;
    const double x = sqrt(square_out(e, 1, 0)), y = sqrt(square_out(e, 0, 1));
    const reached r = {sqrt(largest), x * input[0].p + y * input[1].p,
                       x * input[0].change + y * input[1].change};
    return r.z + excess_of(l->excess[0], &r) <= e->size;
}

/* Does the outline hold all between two samples with this excess? It does where it holds them with a share of
   itself to spare that holds an ellipse of the excess. */
static int holds_way(directions_lane *l, const double from[4], const point end[2], reached *r)
{
    r->z =
        sqrt(larger(square_out(&l->inside, end[0].x, end[0].y), square_out(&l->inside, end[1].x, end[1].y)));
    const double excess = excess_of(from, r), share = excess / l->inside.size;
    if (r->z + excess <= l->inside.size)
        return 1;
    if (!(share < 0.5))
        return 0;
    for (int i = 0; i < 2; ++i)
        if (!rampwise_outline_holds_(&l->outline, (point){end[i].x / (1 - share), end[i].y / (1 - share)}, 0))
            return 0;
    return 1;
}

/* The largest |p| and the largest change along a stretch. */
static void bound_input(double before, size_t n, const double *p, reached *r)
{
    *r = (reached){0, fabs(before), 0};
    for (size_t i = 0; i < n; ++i) {
        r->p = larger(fabs(p[i]), r->p);
        r->change = larger(fabs(p[i] - before), r->change);
        before = p[i];
    }
}

/* The steps of a stretch. */
typedef struct steps {
    rampwise_state s[2][SPAN + 1];
    point z[SPAN + 1];
} steps;

static rampwise_state begin_of(const two_inputs *in, const waiting_stretch *at, int which)
{
    return (rampwise_state){at->u[which], at->v[which], sample_before(in, which, at->first, 1),
                            sample_before(in, which, at->first, 2)};
}

static point point_of(const extremes *x, const rampwise_state *first, const rampwise_state *second)
{
    return (point){value_of(x, first), value_of(x, second)};
}

static void take_steps(const kernels *k, const directions_lane *l, const two_inputs *in,
                       const waiting_stretch *at, steps *to)
{
    double u[2][SPAN], v[2][SPAN];
    for (int i = 0; i < 2; ++i) {
        const double *const p = in->p[i] + at->first;
        const rampwise_history out = {u[i], v[i], NULL, NULL};
        rampwise_state end = to->s[i][0] = begin_of(in, at, i);
        (void)k->advance(&l->c, &end, 0, at->n, 1, p, &out);
        for (size_t m = 0; m < at->n; ++m)
            to->s[i][m + 1] = (rampwise_state){u[i][m], v[i][m], p[m], to->s[i][m].p};
    }
    for (size_t m = 0; m <= at->n; ++m)
        to->z[m] = point_of(&l->x, &to->s[0][m], &to->s[1][m]);
}

static int is_out(const ellipse *e, point z)
{
    return !(square_out(e, z.x, z.y) <= e->size * e->size);
}

/* Step m of a stretch between its samples. */
static int look_between(directions_group *g, size_t j, const two_inputs *in, size_t sample, const steps *at,
                        size_t m)
{
    directions_lane *const l = &g->lane[j];
    const rampwise_state s[2] = {at->s[0][m], at->s[1][m]}, next[2] = {at->s[0][m + 1], at->s[1][m + 1]};
    reached r;
    if (l->x.jumps && add_jump(l, s, next, g->slack) != RAMPWISE_OK)
        return RAMPWISE_ERROR_MEMORY;
    if (g->at_samples)
        return RAMPWISE_OK;
    reach_inputs(&l->inside, in, sample, 1, &r);
    return holds_way(l, l->excess[0], at->z + m, &r) ? RAMPWISE_OK : add_inside(l, s, next);
}

/* A stretch step by step. */
static int look(const kernels *k, directions_group *g, size_t j, const two_inputs *in,
                const waiting_stretch *at)
{
    directions_lane *const l = &g->lane[j];
    steps step;
    int status = RAMPWISE_OK;
    take_steps(k, l, in, at, &step);
    for (size_t m = 1; status == RAMPWISE_OK && m <= at->n; ++m)
        if (is_out(&l->inside, step.z[m]))
            status = add_values(l, step.z[m].x, step.z[m].y, g->slack);
    for (size_t m = 0; (!g->at_samples || l->x.jumps) && status == RAMPWISE_OK && m < at->n; ++m)
        status = look_between(g, j, in, at->first + m, &step, m);
    l->looked += at->n;
    return status;
}

/* Does the ellipse, or the outline, hold a stretch without a look at its steps? */
static int is_held(directions_group *g, size_t j, const two_inputs *in, const waiting_stretch *at)
{
    directions_lane *const l = &g->lane[j];
    const int is_short = l->excess[1][0] + l->excess[1][3] < 0.1; /* of little excess over its ends */
    reached r = {sqrt(at->largest), 0, 0};
    if (g->at_samples && (at->largest <= g->limit[j] || !is_short))
        return at->largest <= g->limit[j];
    reach_inputs(&l->inside, in, at->first, at->n, &r);
    if (r.z + excess_of(l->excess[0], &r) <= l->inside.size)
        return 1;
    if (!is_short)
        return 0;
    const rampwise_state first = begin_of(in, at, 0), second = begin_of(in, at, 1);
    const point way[2] = {point_of(&l->x, &first, &second), at->end};
    return holds_way(l, l->excess[1], way, &r);
}

/* After the outline has grown, where enough has been looked at to pay for it. */
static void inscribe(directions_group *g, size_t j)
{
    directions_lane *const l = &g->lane[j];
    if (l->changes == l->outline.changes || 4 * l->looked < l->outline.count)
        return;
    rampwise_outline_inscribe_(&l->outline, g->ellipse_slack, &l->inside);
    take_size(g, j);
}

/* The farthest to the end. */
static void sort_waiting(directions_lane *l)
{
    for (size_t i = 1; i < l->waiting; ++i) {
        const waiting_stretch at = l->stretch[i];
        size_t to = i;
        for (; to > 0 && l->stretch[to - 1].largest > at.largest; --to)
            l->stretch[to] = l->stretch[to - 1];
        l->stretch[to] = at;
    }
}

static size_t drop_held(directions_group *g, size_t j, const two_inputs *in)
{
    directions_lane *const l = &g->lane[j];
    size_t kept = 0;
    for (size_t i = 0; i < l->waiting; ++i)
        if (!is_held(g, j, in, &l->stretch[i]))
            l->stretch[kept++] = l->stretch[i];
    return l->waiting = kept;
}

/* Those that wait: first what is held by now goes, and if that leaves many (or `all` is asked) half of the
   room (or all) is made free by looking at the farthest first: most of the others are held then. */
static int settle(const kernels *k, directions_group *g, size_t j, const two_inputs *in, int all)
{
    directions_lane *const l = &g->lane[j];
    if (l->waiting == 0 || (drop_held(g, j, in) <= WAITING / 2 && !all))
        return RAMPWISE_OK;
    sort_waiting(l);
    for (; l->waiting > (all ? 0 : WAITING / 2); --l->waiting) {
        const waiting_stretch *const at = &l->stretch[l->waiting - 1];
        if (is_held(g, j, in, at))
            continue;
        if (look(k, g, j, in, at) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
        inscribe(g, j);
    }
    make_ellipse(g, j);
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

/* Puts a stretch aside, and takes its last sample into the outline where that makes it much larger. The
   ellipse is then made anew if the run is twice as long as at the last time. */
static int put_aside(const kernels *k, directions_group *g, size_t j, const two_inputs *in,
                     const waiting_stretch *at)
{
    directions_lane *const l = &g->lane[j];
    waiting_stretch *const to = &l->stretch[l->waiting++];
    const size_t next = at->first + at->n;
    *to = *at;
    const rampwise_state end[2] = {
        {g->first.u[j], g->first.v[j], in->p[0][next - 1], sample_before(in, 0, next, 2)},
        {g->second.u[j], g->second.v[j], in->p[1][next - 1], sample_before(in, 1, next, 2)}};
    to->end = point_of(&l->x, &end[0], &end[1]);
    if (is_out(&l->inside, to->end) && add_values(l, to->end.x, to->end.y, COARSE) != RAMPWISE_OK)
        return RAMPWISE_ERROR_MEMORY;
    if (l->changes != l->outline.changes && 2 * (g->stretches - l->made) >= g->stretches)
        make_ellipse(g, j);
    l->looked += at->n;
    inscribe(g, j);
    return l->waiting == WAITING ? settle(k, g, j, in, 0) : RAMPWISE_OK;
}

static int run_stretch(const kernels *k, directions_group *g, const two_inputs *in, size_t first, size_t n)
{
    const double p_last[2] = {sample_before(in, 0, first, 1), sample_before(in, 1, first, 1)};
    const double *const p[2] = {in->p[0] + first, in->p[1] + first};
    double u[2][LANES], v[2][LANES], largest[LANES];
    reached input[2] = {{0, 0, 0}, {0, 0, 0}};
    memcpy(u[0], g->first.u, sizeof u[0]);
    memcpy(v[0], g->first.v, sizeof v[0]);
    memcpy(u[1], g->second.u, sizeof u[1]);
    memcpy(v[1], g->second.v, sizeof v[1]);
    if (k->under_two_inputs(&g->first, &g->second, g->count, g->lane[0].x.quantity - RAMPWISE_DISPLACEMENT,
                            g->row, g->form, p_last, n, p, largest))
        stop_lost(g);
    for (int i = 0; i < 2 && !g->at_samples; ++i)
        bound_input(p_last[i], n, p[i], &input[i]);
    ++g->stretches;
    for (size_t j = 0; j < g->count; ++j) {
        if (stays_inside(g, j, largest[j], input) || g->lane[j].stopped)
            continue;
        const waiting_stretch at = {{u[0][j], u[1][j]}, {v[0][j], v[1][j]}, {0, 0}, largest[j], first, n};
        if (put_aside(k, g, j, in, &at) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    }
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
