#include "rampwise/directions.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "directions_group.h"
#include "lanes.h"
#include "rampwise/status.h"
#include "samples.h"
#include "saved.h"
#include "spectrum_list.h"
#include "valid.h"

static int check_percent(size_t count, const double *percent, size_t *bad)
{
    for (size_t i = 0; i < count; ++i)
        if (!(percent[i] >= 0 && percent[i] <= 100))
            return blame(RAMPWISE_ERROR_PERCENT, i, bad);
    return RAMPWISE_OK;
}

static int check_two(size_t n, const double *p1, const double *p2, size_t *bad)
{
    const int status = check_samples(n, p1, bad);
    return status == RAMPWISE_OK ? check_samples(n, p2, bad) : status;
}

static void take_percentiles(size_t arc_count, const arc *arcs, size_t n, const double *percent,
                             double *value)
{
    for (size_t i = 0; i < n; ++i)
        value[i] = rampwise_arcs_percentile_(arc_count, arcs, percent[i]);
}

/* By arcs of its own. */
static int outline_percentiles(const outline *o, size_t n, const double *percent, double *value)
{
    arc *const arcs = malloc((o->count + 1) * sizeof *arcs);
    if (arcs == NULL)
        return RAMPWISE_ERROR_MEMORY;
    take_percentiles(rampwise_outline_arcs_(o, arcs), arcs, n, percent, value);
    free(arcs);
    return RAMPWISE_OK;
}

int rampwise_percentiles_over_angle(size_t n, const double *x, const double *y, size_t n_percent,
                                    const double *percent, double *value, size_t *bad)
{
    if (x == NULL || y == NULL || (n_percent > 0 && (percent == NULL || value == NULL)))
        return RAMPWISE_ERROR_MISSING;
    if (n == 0)
        return RAMPWISE_ERROR_COUNT;
    int status = check_percent(n_percent, percent, bad);
    if (status == RAMPWISE_OK)
        status = check_two(n, x, y, bad);
    if (status != RAMPWISE_OK)
        return status;
    outline o = {0};
    for (size_t i = 0; status == RAMPWISE_OK && i < n; ++i)
        status = rampwise_outline_add_(&o, (point){x[i], y[i]}, OUTLINE_ROUNDING);
    if (status == RAMPWISE_OK)
        status = outline_percentiles(&o, n_percent, percent, value);
    rampwise_outline_clear_(&o);
    return status;
}

typedef struct two_records {
    record_kind kind;
    const double *p[2];
    size_t n_percent;
    const double *percent;
} two_records;

/* A stiff oscillator without limit: the mass goes with its base. */
static int follow_base(const two_records *r, double *value)
{
    outline o = {0};
    int status = RAMPWISE_OK;
    const int moves = r->kind.quantity == RAMPWISE_TOTAL_ACCELERATION;
    const double *const p1 = r->p[0], *const p2 = r->p[1];
    for (size_t i = 0; moves && status == RAMPWISE_OK && i < r->kind.n; ++i) {
        if (r->kind.input == RAMPWISE_BASE_ACCELERATION)
            status = rampwise_outline_add_(&o, (point){p1[i], p2[i]}, OUTLINE_ROUNDING);
        else if (r->kind.input == RAMPWISE_BASE_VELOCITY && i > 0)
            status = rampwise_outline_add_(
                &o, (point){(p1[i] - p1[i - 1]) / r->kind.dt, (p2[i] - p2[i - 1]) / r->kind.dt},
                OUTLINE_ROUNDING);
    }
    if (status == RAMPWISE_OK)
        status = outline_percentiles(&o, r->n_percent, r->percent, value);
    rampwise_outline_clear_(&o);
    return status;
}

static void clear_group(directions_group *g)
{
    for (size_t j = 0; j < g->count; ++j)
        rampwise_outline_clear_(&g->lane[j].outline);
}

/* The whole record, and the percentiles of lane j to value[which[j]]. */
static int respond(const two_records *r, directions_group *g, const size_t *which, double *value)
{
    const double first[2] = {r->p[0][0], r->p[1][0]};
    const two_inputs in = {{first[0], first[1]}, {first[0], first[1]}, {r->p[0] + 1, r->p[1] + 1}};
    int status = rampwise_directions_group_start_(g, first);
    if (status == RAMPWISE_OK)
        status = rampwise_directions_group_run_(rampwise_kernels_(RAMPWISE_FASTEST), g, r->kind.n - 1, &in);
    for (size_t j = 0; status == RAMPWISE_OK && j < g->count; ++j) {
        double *const to = value + which[j] * r->n_percent;
        status = outline_percentiles(&g->lane[j].outline, r->n_percent, r->percent, to);
        for (size_t i = 0; g->lane[j].stopped && i < r->n_percent; ++i)
            to[i] = INFINITY;
    }
    return status;
}

/* The next oscillators until LANES of them are not stiff; *taken tells how many that took. */
static int respond_next(const two_records *r, directions_group *g, size_t left, const double *omega,
                        const double *zeta, int at_samples, double *value, size_t *taken)
{
    rampwise_coeffs c[LANES];
    size_t which[LANES], count = 0, i = 0;
    int status = RAMPWISE_OK;
    for (; status == RAMPWISE_OK && i < left && count < LANES; ++i) {
        if (rampwise_record_is_stiff_(&r->kind, omega[i])) {
            status = follow_base(r, value + i * r->n_percent);
            continue;
        }
        (void)rampwise_record_oscillator_(&r->kind, omega[i], zeta[i], &c[count]);
        which[count++] = i;
    }
    *taken = i;
    if (status != RAMPWISE_OK || count == 0)
        return status;
    rampwise_directions_group_make_(g, count, c, r->kind.quantity, at_samples);
    status = respond(r, g, which, value);
    clear_group(g);
    return status;
}

static int check_records(const two_records *r, unsigned flags, size_t n_osc, const double *omega,
                         const double *zeta, size_t *bad)
{
    int status = rampwise_record_kind_check_(&r->kind);
    if (status == RAMPWISE_OK && (flags & ~(unsigned)RAMPWISE_AT_SAMPLES) != 0)
        status = RAMPWISE_ERROR_FLAGS;
    if (status == RAMPWISE_OK)
        status = check_percent(r->n_percent, r->percent, bad);
    if (status == RAMPWISE_OK)
        status = check_two(r->kind.n, r->p[0], r->p[1], bad);
    for (size_t i = 0; status == RAMPWISE_OK && i < n_osc; ++i)
        if (zeta[i] < 0)
            return blame(RAMPWISE_ERROR_DAMPER, i, bad);
    return status == RAMPWISE_OK ? rampwise_record_list_check_(&r->kind, n_osc, omega, zeta, bad) : status;
}

int rampwise_spectrum_directions(size_t n, double dt, const double *p1, const double *p2, int input,
                                 size_t n_osc, const double *omega, const double *zeta, int quantity,
                                 unsigned flags, size_t n_percent, const double *percent, double *value,
                                 size_t *bad)
{
    const two_records r = {{n, dt, input, quantity}, {p1, p2}, n_percent, percent};
    if (p1 == NULL || p2 == NULL || (n_osc > 0 && (omega == NULL || zeta == NULL)) ||
        (n_percent > 0 && (percent == NULL || (n_osc > 0 && value == NULL))))
        return RAMPWISE_ERROR_MISSING;
    int status = check_records(&r, flags, n_osc, omega, zeta, bad);
    if (status != RAMPWISE_OK || n_osc == 0 || n_percent == 0)
        return status;
    directions_group *const g = aligned_alloc(LANE_ALIGNMENT, sizeof *g);
    if (g == NULL)
        return RAMPWISE_ERROR_MEMORY;
    for (size_t done = 0, taken = 0; status == RAMPWISE_OK && done < n_osc; done += taken)
        status = respond_next(&r, g, n_osc - done, omega + done, zeta + done,
                              (int)(flags & RAMPWISE_AT_SAMPLES), value + done * n_percent, &taken);
    free(g);
    return status;
}

struct rampwise_directions {
    const kernels *k;
    size_t n, directions;
    int started;
    two_inputs in; /* the last samples */
    directions_group *groups;
    arc *arcs; /* [2 directions], scratch */
};

_Static_assert(sizeof(directions_group) % LANE_ALIGNMENT == 0, "groups follow each other aligned");

static const size_t header_size =
    (sizeof(struct rampwise_directions) + LANE_ALIGNMENT - 1) / LANE_ALIGNMENT * LANE_ALIGNMENT;

/* Two lists of corners for each oscillator, and the arcs of one. */
size_t rampwise_directions_size(size_t n, size_t directions)
{
    const size_t groups = lane_groups_size(n, header_size, sizeof(directions_group));
    if (groups == 0 || directions < 2 || n > SIZE_MAX / (4 * sizeof(point)) - sizeof(arc))
        return 0;
    const size_t each = n * 4 * sizeof(point) + 2 * sizeof(arc);
    if (directions > (SIZE_MAX - LANE_ALIGNMENT - groups) / each)
        return 0;
    return (groups + directions * each + LANE_ALIGNMENT - 1) / LANE_ALIGNMENT * LANE_ALIGNMENT;
}

size_t rampwise_directions_alignment(void)
{
    return LANE_ALIGNMENT;
}

static int check_oscillators(size_t n, const rampwise_coeffs *c)
{
    const int status = check_alike(n, c);
    for (size_t i = 0; status == RAMPWISE_OK && i < n; ++i) {
        if (c[i].between != RAMPWISE_RAMP)
            return RAMPWISE_ERROR_BETWEEN;
        if (c[i].system.damper < 0)
            return RAMPWISE_ERROR_DAMPER;
        if (c[i].system.stiffness < 0)
            return RAMPWISE_ERROR_STIFFNESS;
    }
    return status;
}

static int check_directions(size_t n, const rampwise_coeffs *c, int quantity, size_t directions,
                            unsigned flags, int instructions)
{
    if (c == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (rampwise_directions_size(n, directions) == 0)
        return RAMPWISE_ERROR_COUNT;
    const int status = check_oscillators(n, c);
    if (status != RAMPWISE_OK)
        return status;
    if (quantity < RAMPWISE_DISPLACEMENT || quantity > RAMPWISE_TOTAL_ACCELERATION)
        return RAMPWISE_ERROR_QUANTITY;
    if ((flags & ~(unsigned)RAMPWISE_AT_SAMPLES) != 0)
        return RAMPWISE_ERROR_FLAGS;
    return rampwise_kernels_(instructions) != NULL ? RAMPWISE_OK : RAMPWISE_ERROR_INSTRUCTIONS;
}

/* The outlines' memory follows the groups. */
static void give_corners(rampwise_directions *d)
{
    const size_t room = 2 * d->directions;
    point *next = (point *)(d->groups + lane_groups(d->n));
    for (size_t i = 0; i < d->n; ++i) {
        outline *const o = &d->groups[i / LANES].lane[i % LANES].outline;
        o->directions = d->directions;
        o->room = room;
        o->corner = next;
        o->spare = next + room;
        next += 2 * room;
    }
    d->arcs = (arc *)next;
}

int rampwise_directions_init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c, int quantity,
                             size_t directions, unsigned flags, int instructions, rampwise_directions **made)
{
    if (memory == NULL || made == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_directions(n, c, quantity, directions, flags, instructions);
    if (status != RAMPWISE_OK)
        return status;
    if (bytes < rampwise_directions_size(n, directions) || (uintptr_t)memory % LANE_ALIGNMENT != 0)
        return RAMPWISE_ERROR_MEMORY;
    rampwise_directions *const d = memory;
    memset(d, 0, header_size);
    d->k = rampwise_kernels_(instructions);
    d->n = n;
    d->directions = directions;
    d->groups = (directions_group *)((char *)memory + header_size);
    for (size_t g = 0; g < lane_groups(n); ++g) {
        const size_t left = n - g * LANES;
        rampwise_directions_group_make_(&d->groups[g], left < LANES ? left : LANES, c + g * LANES, quantity,
                                        (int)(flags & RAMPWISE_AT_SAMPLES));
    }
    give_corners(d);
    *made = d;
    return RAMPWISE_OK;
}

int rampwise_directions_create(size_t n, const rampwise_coeffs *c, int quantity, size_t directions,
                               unsigned flags, int instructions, rampwise_directions **made)
{
    if (made == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_directions(n, c, quantity, directions, flags, instructions);
    if (status != RAMPWISE_OK)
        return status;
    const size_t bytes = rampwise_directions_size(n, directions);
    void *const memory = aligned_alloc(LANE_ALIGNMENT, bytes);
    if (memory == NULL)
        return RAMPWISE_ERROR_MEMORY;
    return rampwise_directions_init(memory, bytes, n, c, quantity, directions, flags, instructions, made);
}

void rampwise_directions_free(rampwise_directions *d)
{
    free(d);
}

int rampwise_directions_start(rampwise_directions *d)
{
    if (d == NULL)
        return RAMPWISE_ERROR_MISSING;
    d->started = 0;
    return RAMPWISE_OK;
}

/* An outline of bounded room cannot fail to grow. */
int rampwise_directions_run(rampwise_directions *d, size_t n, const double *p1, const double *p2, size_t *bad)
{
    if (d == NULL || (n > 0 && (p1 == NULL || p2 == NULL)))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_two(n, p1, p2, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    const size_t begin = d->started ? 0 : 1;
    const double *const p[2] = {p1, p2};
    for (int i = 0; i < 2; ++i) {
        if (!d->started)
            d->in.p_last[i] = d->in.p_before[i] = p[i][0];
        d->in.p[i] = p[i] + begin;
    }
    for (size_t g = 0; g < lane_groups(d->n); ++g) {
        if (!d->started)
            (void)rampwise_directions_group_start_(&d->groups[g], d->in.p_last);
        (void)rampwise_directions_group_run_(d->k, &d->groups[g], n - begin, &d->in);
    }
    for (int i = 0; i < 2 && n > begin; ++i) {
        d->in.p_before[i] = n - begin > 1 ? p[i][n - 2] : d->in.p_last[i];
        d->in.p_last[i] = p[i][n - 1];
    }
    d->started = 1;
    return RAMPWISE_OK;
}

/* What all that has been thinned away can have reached at most. */
static void take_shortfall(const outline *o, arc *arcs, size_t n, const double *percent, const double *value,
                           double *shortfall)
{
    const size_t count = rampwise_outline_arcs_around_(o, arcs);
    for (size_t i = 0; i < n; ++i) {
        const double most = o->thinned ? rampwise_arcs_percentile_(count, arcs, percent[i]) : value[i];
        shortfall[i] = most > value[i] ? (most - value[i]) / most : 0;
    }
}

int rampwise_directions_get(rampwise_directions *d, size_t n_percent, const double *percent, double *value,
                            double *shortfall)
{
    if (d == NULL || (n_percent > 0 && (percent == NULL || value == NULL)))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_percent(n_percent, percent, NULL);
    if (status != RAMPWISE_OK)
        return status;
    if (!d->started)
        return RAMPWISE_ERROR_COUNT;
    for (size_t i = 0; i < d->n; ++i) {
        const directions_lane *const l = &d->groups[i / LANES].lane[i % LANES];
        double *const to = value + i * n_percent;
        take_percentiles(rampwise_outline_arcs_(&l->outline, d->arcs), d->arcs, n_percent, percent, to);
        for (size_t j = 0; l->stopped && j < n_percent; ++j)
            to[j] = INFINITY;
        if (shortfall != NULL)
            take_shortfall(&l->outline, d->arcs, n_percent, percent, to, shortfall + i * n_percent);
    }
    return RAMPWISE_OK;
}

/* ---- saving ---- */

static void pass_doubles(saved *s, double *x, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        s->damaged |= isnan(rampwise_saved_double_(s, &x[i]));
}

static void pass_flag(saved *s, int *x)
{
    int32_t value = *x;
    const int32_t passed = saved_int(s, &value);
    s->damaged |= passed != 0 && passed != 1;
    if (saved_changes(s))
        *x = passed;
}

static void pass_coeffs(saved *s, const rampwise_coeffs *mine)
{
    rampwise_coeffs c = *mine;
    saved all = *s;
    all.looks = 0;
    saved_coeffs(&all, &c);
    s->at = all.at;
    s->different |= memcmp(&c, mine, sizeof c) != 0;
}

/* All places for corners, so that the length does not depend on how many there are. */
static void pass_outline(saved *s, outline *o)
{
    const size_t count = saved_size(s, &o->count);
    s->damaged |= count > o->room;
    saved_size(s, &o->sector);
    saved_size(s, &o->changes);
    pass_doubles(s, &o->largest, 1);
    pass_flag(s, &o->thinned);
    for (size_t i = 0; i < o->room; ++i) {
        point none = {0, 0}, *const at = i < count ? &o->corner[i] : &none;
        pass_doubles(s, &at->x, 1);
        pass_doubles(s, &at->y, 1);
    }
}

static void pass_ellipse(saved *s, ellipse *e)
{
    double *const numbers[] = {&e->form[0].x, &e->form[0].y, &e->form[1].x,   &e->form[1].y,
                               &e->size,      &e->length,    &e->determinant, &e->longest};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        pass_doubles(s, numbers[i], 1);
}

static void pass_lane(saved *s, directions_group *g, size_t j)
{
    directions_lane *const l = &g->lane[j];
    lane_block *const block[2] = {&g->first, &g->second};
    pass_coeffs(s, &l->c);
    for (int i = 0; i < 2; ++i) {
        pass_doubles(s, &block[i]->u[j], 1);
        pass_doubles(s, &block[i]->v[j], 1);
    }
    pass_flag(s, &l->stopped);
    pass_outline(s, &l->outline);
    pass_ellipse(s, &l->inside);
    saved_size(s, &l->changes);
    saved_size(s, &l->made);
    saved_size(s, &l->looked);
    for (int i = 0; i < 4; ++i)
        pass_doubles(s, &g->form[i][j], 1);
    pass_doubles(s, &g->limit[j], 1);
}

static void pass_directions(saved *s, void *object)
{
    rampwise_directions *const d = object;
    saved_equal(s, d->n);
    saved_equal(s, d->directions);
    saved_equal(s, (uint64_t)d->groups[0].lane[0].x.quantity);
    saved_equal(s, (uint64_t)d->groups[0].at_samples);
    pass_flag(s, &d->started);
    pass_doubles(s, d->in.p_before, 2);
    pass_doubles(s, d->in.p_last, 2);
    for (size_t g = 0; g < lane_groups(d->n); ++g) {
        saved_size(s, &d->groups[g].stretches);
        for (size_t j = 0; j < d->groups[g].count; ++j)
            pass_lane(s, &d->groups[g], j);
    }
}

static const saved_kind kind = {SAVED_DIRECTIONS, 1, pass_directions};

size_t rampwise_directions_saved_size(const rampwise_directions *d)
{
    return rampwise_saved_size_(&kind, d);
}

int rampwise_directions_save(const rampwise_directions *d, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, d, bytes, count);
}

/* A lane that had stopped stands still again. */
static void still_stopped(rampwise_directions *d)
{
    for (size_t i = 0; i < d->n; ++i) {
        directions_group *const g = &d->groups[i / LANES];
        if (g->lane[i % LANES].stopped)
            rampwise_lane_still_(&g->first, i % LANES);
        else
            rampwise_lane_set_(&g->first, i % LANES, &g->lane[i % LANES].c);
    }
}

int rampwise_directions_resume(rampwise_directions *d, const void *bytes, size_t count)
{
    const int status = rampwise_saved_resume_(&kind, d, bytes, count);
    if (status == RAMPWISE_OK)
        still_stopped(d);
    return status;
}
