/* Inside a step of a structure's modes: where they are at the beginnings of its parts, their power series
   there, and weighted sums of either. */
#include <math.h>
#include <string.h>
#include "modes_core.h"
#include "rampwise/status.h"

/* A group on its way through the pieces of a span: its state, per piece of time, and its load and load's
   change. */
typedef struct walk {
    double u[LANES], v[LANES], load[LANES], change[LANES];
} walk;

struct modes_parts {
    lane_block *lanes; /* [groups]: a part is a step of theirs */
    double *input;     /* [PARTS + 1][inputs]: at the ends of the parts */
    double *u, *v;     /* [groups][LANES][PARTS]: where they begin */
    walk *at;          /* [groups]: in a span that is looked into */
    size_t *terms;     /* [groups]: of a series on a piece */
    size_t pieces;     /* of a step */
};

/* At least so many pieces of a step of length h that w h and c h/m are at most 1 on each. */
static size_t pieces_for(size_t pieces, const rampwise_system *sys, double h)
{
    const double S = fabs(sys->damper / sys->mass) * h, K = fabs(sys->stiffness / sys->mass) * h * h;
    while (pieces < 1024 && (S > (double)pieces || K > (double)pieces * (double)pieces))
        pieces *= 2;
    return pieces;
}

void rampwise_modes_parts_take_(rampwise_modes *m, const rampwise_modes_plan *plan, room *r)
{
    modes_parts counted;
    modes_parts *const made = rampwise_room_take_(r, 1, sizeof counted), *const x =
                                                                             made != NULL ? made : &counted;
    m->parts = made;
    x->pieces = 1;
    for (size_t j = 0; j < plan->modes; ++j)
        x->pieces = pieces_for(x->pieces, &plan->c[j].system, plan->c->dt);
    for (size_t i = 0; i < plan->equipment_count; ++i)
        x->pieces = pieces_for(x->pieces, &plan->equipment[i], plan->c->dt);
    x->lanes = rampwise_room_take_(r, m->groups, sizeof *x->lanes);
    x->input = rampwise_room_take_(r, m->inputs, (PARTS + 1) * sizeof(double));
    x->u = rampwise_room_take_(r, m->groups, (size_t)LANES * PARTS * sizeof(double));
    x->v = rampwise_room_take_(r, m->groups, (size_t)LANES * PARTS * sizeof(double));
    x->at = rampwise_room_take_(r, m->groups, sizeof *x->at);
    x->terms = rampwise_room_take_(r, m->groups, sizeof *x->terms);
}

#define PER(n) 1.0 / (((n) + 1) * ((n) + 2))
#define PER_SIX(n) PER(n), PER((n) + 1), PER((n) + 2), PER((n) + 3), PER((n) + 4), PER((n) + 5)
const double rampwise_modes_per_term_[MODES_TERMS] = {PER_SIX(0), PER_SIX(6), PER_SIX(12), PER_SIX(18)};
#undef PER
#undef PER_SIX

/* How many terms a series needs of which S and K are at most these, where no beginning is larger than 1:
   until two in a row are below 2^-60. All there is room for leave 2^-61 of it, with S and K up to 1. */
static size_t terms_for(double S, double K)
{
    double a[MODES_TERMS] = {1, 1};
    size_t terms = 2;
    while (terms < MODES_TERMS && (terms < 5 || a[terms - 1] + a[terms - 2] > 0x1p-60)) {
        const size_t n = terms - 2;
        a[terms++] = ((n < 2) + S * (double)(n + 1) * a[n + 1] + K * a[n]) * rampwise_modes_per_term_[n];
    }
    return terms;
}

static size_t terms_of(const rampwise_modes *m, size_t g)
{
    const double d = m->dt / (double)m->parts->pieces;
    double S = 0, K = 0;
    for (size_t j = 0; j < LANES; ++j) {
        K = larger(fabs(m->group[g].row[0][j]) * d * d, K);
        S = larger(fabs(m->group[g].row[1][j]) * d, S);
    }
    return terms_for(S, K);
}

int rampwise_modes_parts_fill_(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    for (size_t j = 0; j < m->modes; ++j) {
        const rampwise_coeffs *const whole = &plan->c[j];
        rampwise_coeffs c;
        const int status =
            rampwise_coeffs_make(&c, &whole->system, whole->dt / PARTS, whole->input, whole->between);
        if (status != RAMPWISE_OK)
            return status;
        rampwise_lane_set_(&m->parts->lanes[j / LANES], j % LANES, &c);
    }
    for (size_t g = 0; g < m->groups; ++g)
        m->parts->terms[g] = terms_of(m, g);
    return RAMPWISE_OK;
}

size_t rampwise_modes_pieces_(const rampwise_modes *m)
{
    return m->parts->pieces;
}

size_t rampwise_modes_spans_(const rampwise_modes *m)
{
    return m->parts->pieces < PARTS ? m->parts->pieces : PARTS;
}

const double *rampwise_modes_part_input_(const rampwise_modes *m)
{
    return m->parts->input;
}

void rampwise_modes_parts_begin_(rampwise_modes *m, const double *input)
{
    double *const x = m->parts->input;
    for (size_t in = 0; in < m->inputs; ++in) {
        const double change = m->between == RAMPWISE_RAMP ? input[m->inputs + in] - input[in] : 0;
        for (size_t part = 0; part <= PARTS; ++part)
            x[part * m->inputs + in] = input[in] + change * ((double)part / PARTS);
    }
}

void rampwise_modes_parts_group_(rampwise_modes *m, size_t g, const double *u, const double *v)
{
    modes_parts *const x = m->parts;
    lane_block *const lanes = &x->lanes[g];
    const size_t to = g * LANES * PARTS;
    mode_tile tile;
    memcpy(lanes->u, u, sizeof lanes->u);
    memcpy(lanes->v, v, sizeof lanes->v);
    (void)rampwise_modes_tile_(m, g, lanes, PARTS, x->input, &tile);
    m->k->scatter(x->u + to, PARTS, LANES, PARTS, tile.u);
    m->k->scatter(x->v + to, PARTS, LANES, PARTS, tile.v);
}

/* What one group adds to the chosen sums, x[LANES][columns] being what is summed. Weights are gathered for as
   many sums as the kernel takes together. */
static void add_sums(const rampwise_modes *m, size_t g, const chosen *c, const double *weights,
                     const double *x, size_t columns, double *y)
{
    enum { TOGETHER = 4 };
    const size_t modes = modes_in(m, g);
    const double *const weight = weights + g * LANES * c->width;
    for (size_t done = 0; done < c->count; done += TOGETHER) {
        const size_t n = c->count - done < TOGETHER ? c->count - done : TOGETHER;
        double gathered[TOGETHER][LANES];
        for (size_t j = 0; j < modes; ++j)
            for (size_t i = 0; i < n; ++i)
                gathered[i][j] = weight[j * c->width + c->which[done + i]];
        m->k->accumulate(modes, n, gathered[0], LANES, x, columns, y + done * columns);
    }
}

void rampwise_modes_at_parts_(const rampwise_modes *m, const chosen *c, double *y)
{
    for (size_t g = 0; g < m->groups; ++g) {
        const size_t at = g * LANES * PARTS;
        add_sums(m, g, c, c->on_u, m->parts->u + at, PARTS, y);
        if (c->on_v != NULL)
            add_sums(m, g, c, c->on_v, m->parts->v + at, PARTS, y);
    }
}

void rampwise_modes_begin_span_(rampwise_modes *m, size_t span)
{
    modes_parts *const x = m->parts;
    const size_t spans = rampwise_modes_spans_(m), parts = PARTS / spans, pieces = x->pieces / spans;
    const double d = m->dt / (double)x->pieces;
    for (size_t g = 0; g < m->groups; ++g) {
        walk *const at = &x->at[g];
        double load[2][LANES] = {{0}};
        m->k->accumulate(m->inputs, 2, x->input + span * parts * m->inputs, parts * m->inputs,
                         m->load + g * m->inputs * LANES, LANES, load[0]);
        for (size_t j = 0; j < LANES; ++j) {
            const size_t from = (g * LANES + j) * PARTS + span * parts;
            const double per_load = m->group[g].row[2][j] * d * d;
            at->u[j] = x->u[from];
            at->v[j] = x->v[from] * d;
            at->load[j] = per_load * load[0][j];
            at->change[j] = per_load * (load[1][j] - load[0][j]) / (double)pieces;
        }
    }
}

/* The series of one group on the present piece, q = sum of a[n] x^n with x the time in pieces:
   (n + 1)(n + 2) a[n + 2] = f[n] - S (n + 1) a[n + 1] - K a[n]. */
static void group_series(const rampwise_modes *m, size_t g, double d, double (*a)[LANES])
{
    const walk *const at = &m->parts->at[g];
    double S[LANES], K[LANES];
    for (size_t j = 0; j < LANES; ++j) {
        K[j] = -m->group[g].row[0][j] * d * d;
        S[j] = -m->group[g].row[1][j] * d;
        a[0][j] = at->u[j];
        a[1][j] = at->v[j];
        a[2][j] = 0.5 * (at->load[j] - S[j] * a[1][j] - K[j] * a[0][j]);
        a[3][j] = (at->change[j] - 2 * S[j] * a[2][j] - K[j] * a[1][j]) * rampwise_modes_per_term_[1];
    }
    for (size_t n = 2; n + 2 < m->parts->terms[g]; ++n) {
        const double minus_per = -rampwise_modes_per_term_[n], by_slope = (double)(n + 1);
        for (size_t j = 0; j < LANES; ++j)
            a[n + 2][j] = (S[j] * (by_slope * a[n + 1][j]) + K[j] * a[n][j]) * minus_per;
    }
}

/* To the beginning of the next piece. */
static void go_on(walk *at, size_t terms, double (*a)[LANES])
{
    memset(at->u, 0, sizeof at->u);
    memset(at->v, 0, sizeof at->v);
    for (size_t n = terms; n-- > 0;)
        for (size_t j = 0; j < LANES; ++j) {
            at->u[j] += a[n][j];
            at->v[j] += (double)n * a[n][j];
        }
    for (size_t j = 0; j < LANES; ++j)
        at->load[j] += at->change[j];
}

/* a[terms][LANES] as [LANES][MODES_TERMS], zeros behind */
static void turn(const rampwise_modes *m, size_t terms, double (*a)[LANES], double (*turned)[MODES_TERMS])
{
    const size_t first = terms < TILE ? terms : TILE;
    m->k->scatter(turned[0], MODES_TERMS, LANES, first, a);
    m->k->scatter(turned[0] + first, MODES_TERMS, LANES, terms - first, a + first);
    for (size_t j = 0; j < LANES; ++j)
        for (size_t n = terms; n < MODES_TERMS; ++n)
            turned[j][n] = 0;
}

void rampwise_modes_series_(rampwise_modes *m, const chosen *c, double *y)
{
    const double per_piece = (double)m->parts->pieces / m->dt;
    for (size_t g = 0; g < m->groups; ++g) {
        _Alignas(LANE_ALIGNMENT) double a[MODES_TERMS][LANES], turned[LANES][MODES_TERMS];
        const size_t terms = m->parts->terms[g];
        group_series(m, g, 1 / per_piece, a);
        if (m->parts->pieces > rampwise_modes_spans_(m))
            go_on(&m->parts->at[g], terms, a);
        turn(m, terms, a, turned);
        add_sums(m, g, c, c->on_u, turned[0], MODES_TERMS, y);
        if (c->on_v == NULL)
            continue;
        for (size_t n = 1; n < terms; ++n)
            for (size_t j = 0; j < LANES; ++j)
                a[n - 1][j] = (double)n * a[n][j] * per_piece;
        turn(m, terms - 1, a, turned);
        add_sums(m, g, c, c->on_v, turned[0], MODES_TERMS, y);
    }
}
