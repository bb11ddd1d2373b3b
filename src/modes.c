#include "modes_core.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "entry.h"
#include "rampwise/equipment.h"
#include "rampwise/status.h"
#include "samples.h"
#include "saved.h"
#include "twofold.h"
#include "valid.h"

void rampwise_modes_plan_init(rampwise_modes_plan *plan)
{
    memset(plan, 0, sizeof *plan);
    plan->size = sizeof *plan;
    plan->instructions = RAMPWISE_FASTEST;
}

/* a b, or SIZE_MAX where that is too large to be a number of anything */
static size_t times(size_t a, size_t b)
{
    return b != 0 && a > SIZE_MAX / b ? SIZE_MAX : a * b;
}

/* The memory of an object of a plan that is allowed; nothing is filled but pointers and counts. */
static void take_memory(rampwise_modes *m, const rampwise_modes_plan *plan, room *r)
{
    m->modes = plan->modes;
    m->inputs = plan->inputs;
    m->outputs = plan->outputs;
    m->width = padded(plan->outputs);
    m->groups = lane_groups(plan->modes);
    const size_t lanes = times(m->groups, LANES), weights = times(lanes, m->width);
    const int moving = plan->on_velocity != NULL || plan->on_acceleration != NULL;
    m->group = rampwise_room_take_(r, m->groups, sizeof *m->group);
    m->load = rampwise_room_take_(r, times(lanes, m->inputs), sizeof(double));
    m->weight_u = rampwise_room_take_(r, weights, sizeof(double));
    m->weight_v = moving ? rampwise_room_take_(r, weights, sizeof(double)) : NULL;
    m->direct = rampwise_room_take_(r, times(m->inputs, m->width), sizeof(double));
    m->input = rampwise_room_take_(r, times(m->inputs, SEGMENT + 1), sizeof(double));
    m->output = rampwise_room_take_(r, times(m->width, SEGMENT + 1), sizeof(double));
    if (plan->peaks)
        rampwise_modes_peaks_take_(m, plan, r);
    if (plan->equipment_count > 0)
        rampwise_equipment_take_(m, plan, r);
    if (plan->peaks)
        m->kept = rampwise_room_take_(r, kept_size(m, plan->equipment_count), 1);
}

static int counts_fit(const rampwise_modes_plan *plan)
{
    const size_t most = SIZE_MAX / 4096;
    return plan->size == sizeof *plan && plan->modes > 0 && plan->inputs > 0 && plan->outputs > 0 &&
           plan->modes < most && plan->inputs < most && plan->outputs < most && plan->equipment_count < most;
}

static int are_finite(const double *x, size_t rows, size_t columns)
{
    const size_t n = rows * columns;
    return x == NULL || rampwise_kernels_(RAMPWISE_FASTEST)->first_not_finite(n, x) == n;
}

static int weights_are_finite(const rampwise_modes_plan *plan)
{
    return are_finite(plan->load, plan->modes, plan->inputs) &&
           are_finite(plan->on_displacement, plan->modes, plan->outputs) &&
           are_finite(plan->on_velocity, plan->modes, plan->outputs) &&
           are_finite(plan->on_acceleration, plan->modes, plan->outputs) &&
           are_finite(plan->on_input, plan->inputs, plan->outputs);
}

/* Peaks look at pieces of a step, of which there may not be too many. */
static int is_long(const rampwise_system *sys, double dt)
{
    return !(fabs(sys->damper / sys->mass) * dt <= 1024 &&
             fabs(sys->stiffness / sys->mass) * dt * dt <= 0x1p20);
}

static int steps_are_long(const rampwise_modes_plan *plan)
{
    int any = 0;
    for (size_t j = 0; j < plan->modes; ++j)
        any |= is_long(&plan->c[j].system, plan->c->dt);
    for (size_t i = 0; i < plan->equipment_count; ++i)
        any |= is_long(&plan->equipment[i], plan->c->dt);
    return any;
}

int rampwise_modes_check_(const rampwise_modes_plan *plan)
{
    if (plan == NULL || plan->c == NULL || plan->load == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!counts_fit(plan))
        return RAMPWISE_ERROR_COUNT;
    rampwise_modes counted = {0};
    room r = {NULL, 0};
    take_memory(&counted, plan, &r);
    if (r.size == SIZE_MAX)
        return RAMPWISE_ERROR_COUNT;
    int status = check_alike(plan->modes, plan->c);
    if (status == RAMPWISE_OK && plan->equipment_count > 0)
        status = rampwise_equipment_check_(plan);
    if (status != RAMPWISE_OK)
        return status;
    if (plan->c->input != RAMPWISE_FORCE && plan->c->input != RAMPWISE_BASE_ACCELERATION)
        return RAMPWISE_ERROR_INPUT;
    if (!weights_are_finite(plan))
        return RAMPWISE_ERROR_WEIGHT;
    if (rampwise_kernels_(plan->instructions) == NULL)
        return RAMPWISE_ERROR_INSTRUCTIONS;
    return plan->peaks && steps_are_long(plan) ? RAMPWISE_ERROR_STEP_LENGTH : RAMPWISE_OK;
}

static double weight_at(const double *weights, size_t at)
{
    return weights != NULL ? weights[at] : 0;
}

/* Weights of mode j, its acceleration's taken into those of displacement and velocity. */
static void fill_mode(rampwise_modes *m, const rampwise_modes_plan *plan, size_t j)
{
    const rampwise_coeffs *const c = &plan->c[j];
    mode_group *const g = &m->group[j / LANES];
    rampwise_lane_set_(&g->lanes, j % LANES, c);
    for (size_t i = 0; i < 3; ++i)
        g->row[i][j % LANES] = c->acceleration[i];
    for (size_t i = 0; i < m->inputs; ++i)
        m->load[(j / LANES * m->inputs + i) * LANES + j % LANES] = plan->load[j * m->inputs + i];
    for (size_t o = 0; o < m->outputs; ++o) {
        const size_t at = j * m->outputs + o;
        const double on_acceleration = weight_at(plan->on_acceleration, at);
        m->weight_u[j * m->width + o] =
            RAMPWISE_FMA(on_acceleration, c->acceleration[0], weight_at(plan->on_displacement, at));
        if (m->weight_v != NULL)
            m->weight_v[j * m->width + o] =
                RAMPWISE_FMA(on_acceleration, c->acceleration[1], weight_at(plan->on_velocity, at));
    }
}

/* What accelerations take from the inputs. It cancels much of a direct weight, as 1 - sum of factor shape, so
   it is summed in twofold arithmetic. */
static void fill_direct(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i, size_t o)
{
    twofold sum = {weight_at(plan->on_input, i * m->outputs + o), 0};
    for (size_t j = 0; plan->on_acceleration != NULL && j < m->modes; ++j) {
        const twofold factor = twofold_product(plan->c[j].acceleration[2], plan->load[j * m->inputs + i]);
        sum = twofold_add(sum, twofold_multiply_by(factor, plan->on_acceleration[j * m->outputs + o]));
    }
    m->direct[i * m->width + o] = sum.hi;
}

/* A number that another plan will not have. */
static uint64_t mixed(uint64_t number, size_t n, const double *x)
{
    for (size_t i = 0; x != NULL && i < n; ++i) {
        uint64_t bits;
        memcpy(&bits, &x[i], sizeof bits);
        number = (number ^ bits) * 0x100000001b3u; /* FNV-1a, Fowler, Noll and Vo, by eight bytes */
        number ^= number >> 32;
    }
    return number;
}

static uint64_t number_of(const rampwise_modes *m, const rampwise_modes_plan *plan)
{
    const double counts[6] = {(double)m->modes, (double)m->inputs, (double)m->outputs, m->dt,
                              m->between,       m->peaks != NULL};
    const size_t lanes = m->groups * LANES;
    uint64_t number = mixed(0xcbf29ce484222325u, 6, counts);
    for (size_t g = 0; g < m->groups; ++g)
        number = mixed(number, sizeof m->group[g].row / sizeof(double), m->group[g].row[0]);
    number = mixed(number, lanes * m->inputs, m->load);
    number = mixed(number, lanes * m->width, m->weight_u);
    number = mixed(number, lanes * m->width, m->weight_v);
    for (size_t i = 0; i < plan->equipment_count; ++i) {
        const rampwise_system *const sys = &plan->equipment[i];
        const double piece[4] = {sys->mass, sys->damper, sys->stiffness, (double)plan->point[i]};
        number = mixed(number, 4, piece);
    }
    return mixed(number, m->inputs * m->width, m->direct);
}

static int fill(rampwise_modes *m, const rampwise_modes_plan *plan)
{
    m->k = rampwise_kernels_(plan->instructions);
    m->dt = plan->c->dt;
    m->between = plan->c->between;
    for (size_t j = 0; j < m->modes; ++j)
        fill_mode(m, plan, j);
    for (size_t i = 0; i < m->inputs; ++i)
        for (size_t o = 0; o < m->outputs; ++o)
            fill_direct(m, plan, i, o);
    if (!are_finite(m->weight_u, m->groups * LANES, m->width) ||
        !are_finite(m->weight_v, m->groups * LANES, m->width) || !are_finite(m->direct, m->inputs, m->width))
        return RAMPWISE_ERROR_WEIGHT;
    m->plan = number_of(m, plan);
    const int status = m->peaks != NULL ? rampwise_modes_peaks_fill_(m, plan) : RAMPWISE_OK;
    return status == RAMPWISE_OK && m->equipment != NULL ? rampwise_equipment_fill_(m, plan) : status;
}

size_t rampwise_modes_size(const rampwise_modes_plan *plan)
{
    room r = {NULL, 0};
    if (rampwise_modes_check_(plan) != RAMPWISE_OK)
        return 0;
    rampwise_modes counted = {0};
    (void)rampwise_room_take_(&r, 1, sizeof counted);
    take_memory(&counted, plan, &r);
    return r.size == SIZE_MAX ? 0 : r.size;
}

size_t rampwise_modes_alignment(void)
{
    return LANE_ALIGNMENT;
}

int rampwise_modes_init(void *memory, size_t bytes, const rampwise_modes_plan *plan, rampwise_modes **modes)
{
    if (memory == NULL || modes == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = rampwise_modes_check_(plan);
    if (status != RAMPWISE_OK)
        return status;
    const size_t size = rampwise_modes_size(plan);
    if (bytes < size || (uintptr_t)memory % LANE_ALIGNMENT != 0)
        return RAMPWISE_ERROR_MEMORY;
    memset(memory, 0, size);
    room r = {memory, 0};
    rampwise_modes *const made = rampwise_room_take_(&r, 1, sizeof *made);
    take_memory(made, plan, &r);
    status = fill(made, plan);
    if (status == RAMPWISE_OK)
        *modes = made;
    return status;
}

int rampwise_modes_create(const rampwise_modes_plan *plan, rampwise_modes **modes)
{
    if (modes == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = rampwise_modes_check_(plan);
    if (status != RAMPWISE_OK)
        return status;
    const size_t size = rampwise_modes_size(plan);
    void *const memory = aligned_alloc(LANE_ALIGNMENT, size);
    if (memory == NULL)
        return RAMPWISE_ERROR_MEMORY;
    status = rampwise_modes_init(memory, size, plan, modes);
    if (status != RAMPWISE_OK)
        free(memory);
    return status;
}

void rampwise_modes_free(rampwise_modes *modes)
{
    free(modes);
}

size_t rampwise_modes_count(const rampwise_modes *modes)
{
    return modes != NULL ? modes->modes : 0;
}

/* What n states of one group add to n rows of outputs. */
static void add_outputs(const rampwise_modes *m, size_t g, size_t n, double (*u)[LANES], double (*v)[LANES],
                        double *output)
{
    const size_t at = g * LANES * m->width;
    m->k->accumulate(modes_in(m, g), n, u[0], LANES, m->weight_u + at, m->width, output);
    if (m->weight_v != NULL)
        m->k->accumulate(modes_in(m, g), n, v[0], LANES, m->weight_v + at, m->width, output);
}

/* One group over the samples of a segment. */
static int run_group(rampwise_modes *m, size_t g, size_t n)
{
    mode_tile tile;
    int lost = 0;
    memcpy(m->group[g].begin[0], m->group[g].lanes.u, sizeof m->group[g].begin[0]);
    memcpy(m->group[g].begin[1], m->group[g].lanes.v, sizeof m->group[g].begin[1]);
    for (size_t t = 0; t * TILE < n; ++t) {
        const size_t part = n - t * TILE < TILE ? n - t * TILE : TILE;
        lost |= rampwise_modes_tile_(m, g, &m->group[g].lanes, part, m->input + t * TILE * m->inputs, &tile);
        add_outputs(m, g, part, tile.u + 1, tile.v + 1, m->output + (t * TILE + 1) * m->width);
        if (m->peaks != NULL)
            rampwise_modes_peaks_tile_(m, g, t, part, &tile);
        if (m->equipment != NULL)
            rampwise_equipment_tile_(m, g, t, part, &tile);
    }
    if (m->peaks != NULL)
        rampwise_modes_peaks_group_(m, g, (n + TILE - 1) / TILE);
    return lost;
}

/* The samples in rows 1 to n of the inputs; answers whether something is not finite any more. */
static int run_segment(rampwise_modes *m, size_t n)
{
    int lost = 0;
    memset(m->output + m->width, 0, n * m->width * sizeof *m->output);
    m->k->accumulate(m->inputs, n, m->input + m->inputs, m->inputs, m->direct, m->width,
                     m->output + m->width);
    if (m->equipment != NULL)
        rampwise_equipment_begin_(m, n);
    for (size_t g = 0; g < m->groups; ++g)
        lost |= run_group(m, g, n);
    if (m->equipment != NULL)
        lost |= rampwise_equipment_end_(m, n);
    return lost || m->k->first_not_finite(n * m->width, m->output + m->width) < n * m->width;
}

static void go_back(rampwise_modes *m)
{
    for (size_t g = 0; g < m->groups; ++g) {
        memcpy(m->group[g].lanes.u, m->group[g].begin[0], sizeof m->group[g].begin[0]);
        memcpy(m->group[g].lanes.v, m->group[g].begin[1], sizeof m->group[g].begin[1]);
    }
    if (m->equipment != NULL)
        rampwise_equipment_go_back_(m);
}

/* Where a chunk goes: outputs of the structure and histories of the equipment. */
typedef struct destination {
    double *output;
    rampwise_history history;
} destination;

static destination later(const rampwise_modes *m, const destination *to, size_t n)
{
    return (destination){to->output != NULL ? to->output + n * m->outputs : NULL,
                         wanted_from(&to->history, n * rampwise_equipment_count_(m))};
}

/* After a segment without a fault: row n becomes the present sample. */
static void finish_segment(rampwise_modes *m, size_t n, const destination *to)
{
    double *const output = to->output;
    if (m->peaks != NULL)
        rampwise_modes_peaks_segment_(m, n);
    if (m->equipment != NULL)
        rampwise_equipment_put_(m, n, &to->history);
    for (size_t i = 0; output != NULL && i < n; ++i)
        memcpy(output + i * m->outputs, m->output + (i + 1) * m->width, m->outputs * sizeof *output);
    memcpy(m->input, m->input + n * m->inputs, m->inputs * sizeof *m->input);
    memcpy(m->output, m->output + n * m->width, m->width * sizeof *m->output);
    m->sample += n;
}

int rampwise_modes_go_on_(rampwise_modes *m, size_t n)
{
    const destination nowhere = {NULL, {NULL, NULL, NULL, NULL}};
    memset(m->input + m->inputs, 0, n * m->inputs * sizeof *m->input);
    const int lost = run_segment(m, n);
    if (lost)
        go_back(m);
    else
        finish_segment(m, n, &nowhere);
    return !lost;
}

/* Up to SEGMENT samples; how many went by before a fault. */
static size_t advance(rampwise_modes *m, size_t n, const double *input, const destination *to)
{
    memcpy(m->input + m->inputs, input, n * m->inputs * sizeof *input);
    if (!run_segment(m, n)) {
        finish_segment(m, n, to);
        return n;
    }
    go_back(m);
    size_t i = 0;
    for (; n > 1 && i < n; ++i) {
        const destination next = later(m, to, i);
        if (advance(m, 1, input + i * m->inputs, &next) == 0)
            break;
    }
    return i;
}

int rampwise_modes_run(rampwise_modes *modes, size_t n, const double *input, double *output, size_t *bad)
{
    return rampwise_equipment_run(modes, n, input, output, NULL, bad);
}

int rampwise_equipment_run(rampwise_modes *modes, size_t n, const double *input, double *output,
                           const rampwise_history *history, size_t *bad)
{
    const destination to = {output, wanted_from(history, 0)};
    if (modes == NULL || (input == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    size_t wrong;
    const int status = check_samples(n * modes->inputs, input, &wrong);
    if (status != RAMPWISE_OK)
        return blame(status, wrong / modes->inputs, bad);
    for (size_t done = 0, part = 0; done < n; done += part) {
        part = n - done < SEGMENT ? n - done : SEGMENT;
        const destination next = later(modes, &to, done);
        const size_t went = advance(modes, part, input + done * modes->inputs, &next);
        if (went < part)
            return blame(RAMPWISE_ERROR_OVERFLOW, done + went, bad);
    }
    return RAMPWISE_OK;
}

/* Up to LANES values from the present group's first mode on; zeros where there are none. */
static void take_lanes(double *lanes, const rampwise_modes *m, size_t g, const double *x)
{
    const size_t count = modes_in(m, g);
    memset(lanes, 0, LANES * sizeof *lanes);
    if (x != NULL)
        memcpy(lanes, x + g * LANES, count * sizeof *x);
}

/* The outputs of a state into row 1. */
static void outputs_of(rampwise_modes *m, const double *u, const double *v)
{
    double *const row = m->output + m->width;
    memset(row, 0, m->width * sizeof *row);
    m->k->accumulate(m->inputs, 1, m->input + m->inputs, m->inputs, m->direct, m->width, row);
    for (size_t g = 0; g < m->groups; ++g) {
        double u_lanes[1][LANES], v_lanes[1][LANES];
        take_lanes(u_lanes[0], m, g, u);
        take_lanes(v_lanes[0], m, g, v);
        add_outputs(m, g, 1, u_lanes, v_lanes, row);
    }
}

void rampwise_modes_release_(rampwise_modes *m)
{
    memset(m->input, 0, m->inputs * sizeof *m->input);
    memset(m->output, 0, m->width * sizeof *m->output);
    for (size_t g = 0; g < m->groups; ++g)
        add_outputs(m, g, 1, &m->group[g].lanes.u, &m->group[g].lanes.v, m->output);
}

static int begin(rampwise_modes *m, const double *u, const double *v, const double *input)
{
    if (!are_finite(u, m->modes, 1) || !are_finite(v, m->modes, 1))
        return RAMPWISE_ERROR_STATE;
    if (!are_finite(input, m->inputs, 1))
        return RAMPWISE_ERROR_SAMPLE;
    memset(m->input + m->inputs, 0, m->inputs * sizeof *m->input);
    if (input != NULL)
        memcpy(m->input + m->inputs, input, m->inputs * sizeof *input);
    outputs_of(m, u, v);
    if (!are_finite(m->output + m->width, 1, m->width))
        return RAMPWISE_ERROR_OVERFLOW;
    memcpy(m->input, m->input + m->inputs, m->inputs * sizeof *m->input);
    memcpy(m->output, m->output + m->width, m->width * sizeof *m->output);
    for (size_t g = 0; g < m->groups; ++g) {
        take_lanes(m->group[g].lanes.u, m, g, u);
        take_lanes(m->group[g].lanes.v, m, g, v);
    }
    m->sample = 0;
    if (m->equipment != NULL)
        rampwise_equipment_start_(m);
    if (m->peaks != NULL)
        rampwise_modes_peaks_start_(m);
    return RAMPWISE_OK;
}

int rampwise_modes_start(rampwise_modes *modes, const double *input)
{
    return modes != NULL ? begin(modes, NULL, NULL, input) : RAMPWISE_ERROR_MISSING;
}

int rampwise_modes_set(rampwise_modes *modes, const double *u, const double *v, const double *input)
{
    if (modes == NULL || u == NULL || v == NULL)
        return RAMPWISE_ERROR_MISSING;
    return begin(modes, u, v, input);
}

int rampwise_modes_get(const rampwise_modes *modes, double *u, double *v)
{
    if (modes == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t j = 0; j < modes->modes; ++j) {
        if (u != NULL)
            u[j] = modes->group[j / LANES].lanes.u[j % LANES];
        if (v != NULL)
            v[j] = modes->group[j / LANES].lanes.v[j % LANES];
    }
    return RAMPWISE_OK;
}

int rampwise_modes_read(const rampwise_modes *modes, double *output)
{
    if (modes == NULL || output == NULL)
        return RAMPWISE_ERROR_MISSING;
    memcpy(output, modes->output, modes->outputs * sizeof *output);
    return RAMPWISE_OK;
}

int rampwise_modes_peaks(const rampwise_modes *modes, rampwise_peak *peak)
{
    if (modes == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (modes->peaks == NULL)
        return RAMPWISE_ERROR_QUANTITY;
    memcpy(peak, rampwise_modes_peak_(modes), modes->outputs * sizeof *peak);
    return RAMPWISE_OK;
}

/* ---- saving ---- */

static void pass_doubles(saved *s, double *x, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        s->damaged |= !isfinite(rampwise_saved_double_(s, &x[i]));
}

static void pass_peak(saved *s, rampwise_peak *peak)
{
    rampwise_instant *const side[2] = {&peak->high, &peak->low};
    for (int i = 0; i < 2; ++i) {
        pass_doubles(s, &side[i]->value, 1);
        rampwise_saved_uint64_(s, &side[i]->sample);
        pass_doubles(s, &side[i]->fraction, 1);
    }
}

static void pass_modes(saved *s, void *object)
{
    rampwise_modes *const m = object;
    saved_equal(s, m->plan);
    rampwise_saved_uint64_(s, &m->sample);
    pass_doubles(s, m->input, m->inputs);
    pass_doubles(s, m->output, m->outputs);
    for (size_t j = 0; j < m->modes; ++j) {
        pass_doubles(s, &m->group[j / LANES].lanes.u[j % LANES], 1);
        pass_doubles(s, &m->group[j / LANES].lanes.v[j % LANES], 1);
    }
    rampwise_peak *const peak = m->peaks != NULL ? rampwise_modes_peak_(m) : NULL;
    for (size_t o = 0; peak != NULL && o < m->outputs; ++o)
        pass_peak(s, &peak[o]);
    for (size_t i = 0; i < rampwise_equipment_count_(m); ++i) {
        pass_doubles(s, rampwise_equipment_state_(m, i, 0), 1);
        pass_doubles(s, rampwise_equipment_state_(m, i, 1), 1);
        for (int q = 0; peak != NULL && q < LOOKED_AT; ++q)
            pass_peak(s, rampwise_equipment_peak_(m, i, q));
    }
}

static const saved_kind kind = {SAVED_MODES, 1, pass_modes};

size_t rampwise_modes_saved_size(const rampwise_modes *modes)
{
    return rampwise_saved_size_(&kind, modes);
}

int rampwise_modes_save(const rampwise_modes *modes, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, modes, bytes, count);
}

int rampwise_modes_resume(rampwise_modes *modes, const void *bytes, size_t count)
{
    return rampwise_saved_resume_(&kind, modes, bytes, count);
}
