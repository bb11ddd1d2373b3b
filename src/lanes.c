#include "lanes.h"

#include <math.h>
#include <string.h>

void PRIVATE(lane_set)(lane_block *block, size_t lane, const real_coeffs *c)
{
    block->A_minus_1[lane] = c->A_minus_1;
    block->B[lane] = c->B;
    block->C[lane] = c->C;
    block->D[lane] = c->D;
    block->Ap[lane] = c->Ap;
    block->Bp_minus_1[lane] = c->Bp_minus_1;
    block->Cp[lane] = c->Cp;
    block->Dp[lane] = c->Dp;
}

void PRIVATE(lane_still)(lane_block *block, size_t lane)
{
    static const real_coeffs still = {0};
    PRIVATE(lane_set)(block, lane, &still);
}

/* One group of lanes on its way through a record. */
typedef struct group {
    const kernels *k;
    size_t count, left; /* left: lanes that have not stopped */
    const real_coeffs *const *c;
    real_state *s;
    size_t *reached;
    lane_block block;
    _Alignas(LANE_ALIGNMENT) real acceleration[4][LANES];
    real total[4][LANES], p[TILE + 1][LANES], p_before[LANES]; /* before p[0] */
    lane_tile u, v, a, t;                                      /* t: total */
} group;

static void group_start(group *g, size_t n)
{
    memset(&g->block, 0, sizeof g->block);
    memset(g->acceleration, 0, sizeof g->acceleration);
    memset(g->total, 0, sizeof g->total);
    memset(g->p, 0, sizeof g->p);
    g->left = g->count;
    for (size_t j = 0; j < g->count; ++j) {
        PRIVATE(lane_set)(&g->block, j, g->c[j]);
        lane_put(&g->block, j, &g->s[j]);
        g->p[0][j] = g->s[j].p;
        g->p_before[j] = g->s[j].p_before;
        g->reached[j] = n;
        for (size_t i = 0; i < 4; ++i) {
            g->acceleration[i][j] = g->c[j]->acceleration[i];
            g->total[i][j] = g->c[j]->total[i];
        }
    }
}

static void take_samples(group *g, size_t n, const real *p, layout in)
{
    if (in.sample == 1 && in.lane != 0) {
        g->k->gather(p, in.lane, g->count, n, g->p + 1);
        return;
    }
    for (size_t i = 0; i < n; ++i) {
        if (in.lane == 1)
            memcpy(g->p[i + 1], p + i * in.sample, g->count * sizeof *p);
        else
            for (size_t j = 0; j < g->count; ++j)
                g->p[i + 1][j] = p[j * in.lane + i * in.sample];
    }
}

/* Lane j met an overflow in this tile: taken again by itself, from where the tile began. */
static void stop_lane(group *g, size_t j, real_state s, size_t before, size_t n, const real_history *out)
{
    const real_history column = {g->u[0] + j, g->v[0] + j, out->a != NULL ? g->a[0] + j : NULL,
                                 out->total != NULL ? g->t[0] + j : NULL};
    const size_t end = n * LANES;
    g->reached[j] = before + g->k->advance(g->c[j], &s, 0, end, LANES, g->p[1] + j, &column) / LANES;
    g->s[j] = s;
    PRIVATE(lane_still)(&g->block, j);
    lane_put(&g->block, j, &(const real_state){0});
    --g->left;
}

static void step_tile(group *g, size_t before, size_t n, const real_history *out)
{
    real a_finite[LANES] = {0}, total_finite[LANES] = {0};
    lane_block at;
    lanes_copy_motion(&at, &g->block);
    int lost = g->k->under_own_inputs(&g->block, g->count, n, g->p, g->u, g->v);
    if (out->a != NULL)
        lost |= g->k->rows(g->acceleration, g->count, n, g->p, g->u, g->v, g->a, a_finite);
    if (out->total != NULL)
        lost |= g->k->rows(g->total, g->count, n, g->p, g->u, g->v, g->t, total_finite);
    for (size_t j = 0; lost && j < g->count; ++j) {
        const int finite =
            isfinite(g->block.u[j]) && isfinite(g->block.v[j]) && a_finite[j] == 0 && total_finite[j] == 0;
        if (!finite && g->reached[j] > before)
            stop_lane(g, j, lane_state(&at, j, g->p[0][j], g->p_before[j]), before, n, out);
    }
}

static void put_tile(const group *g, size_t before, size_t n, real *to, layout at, lane_tile tile)
{
    if (at.sample == 1 && g->left == g->count) {
        g->k->scatter(to, at.lane, g->count, n, tile);
        return;
    }
    for (size_t i = 0; i < n; ++i) {
        if (at.lane == 1 && g->left == g->count)
            memcpy(to + i * at.sample, tile[i], g->count * sizeof *to);
        else
            for (size_t j = 0; j < g->count; ++j)
                if (before + i < g->reached[j])
                    to[j * at.lane + i * at.sample] = tile[i][j];
    }
}

static void put_outputs(group *g, size_t before, size_t n, const real_history *out, layout to)
{
    const size_t shift = before * to.sample;
    if (out->u != NULL)
        put_tile(g, before, n, out->u + shift, to, g->u);
    if (out->v != NULL)
        put_tile(g, before, n, out->v + shift, to, g->v);
    if (out->a != NULL)
        put_tile(g, before, n, out->a + shift, to, g->a);
    if (out->total != NULL)
        put_tile(g, before, n, out->total + shift, to, g->t);
}

void PRIVATE(lanes_run)(const kernels *k, size_t count, const real_coeffs *const *c, real_state *s, size_t n,
                        const real *p, layout in, const real_history *out, layout to, size_t *reached)
{
    group g;
    g.k = k;
    g.count = count;
    g.c = c;
    g.s = s;
    g.reached = reached;
    group_start(&g, n);
    for (size_t before = 0, part = 0; before < n && g.left > 0; before += part) {
        part = n - before < TILE ? n - before : TILE;
        take_samples(&g, part, p + before * in.sample, in);
        step_tile(&g, before, part, out);
        put_outputs(&g, before, part, out, to);
        memcpy(g.p_before, g.p[part - 1], sizeof g.p_before);
        memcpy(g.p[0], g.p[part], sizeof g.p[0]);
    }
    for (size_t j = 0; j < count; ++j)
        if (reached[j] == n)
            s[j] = lane_state(&g.block, j, g.p[0][j], g.p_before[j]);
}
