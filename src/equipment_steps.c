/* What steps of one length make of the motion of equipment: equipment.h says how. */
#include "cascade.h"
#include "equipment_core.h"
#include "rampwise/status.h"

void rampwise_equipment_steps_take_(const rampwise_modes *m, equipment_steps *steps, size_t count, room *r)
{
    const size_t rows = 2 * padded(count) * sizeof(double);
    steps->c = rampwise_room_take_(r, count, sizeof *steps->c);
    steps->from_u = rampwise_room_take_(r, m->groups * LANES, rows);
    steps->from_v = rampwise_room_take_(r, m->groups * LANES, rows);
    steps->from_before = rampwise_room_take_(r, m->inputs, rows);
    steps->from_now = rampwise_room_take_(r, m->inputs, rows);
}

/* What the inputs at the two ends of a step do to piece i: directly, and as the loads of all modes. It
   cancels much of itself, as the direct weight of the point does. */
static void fill_inputs(const rampwise_modes *m, const equipment_steps *steps, size_t i)
{
    const size_t width = m->equipment->width;
    for (size_t in = 0; in < m->inputs; ++in) {
        const twofold *const sum = m->equipment->sums + 4 * in;
        double *const before = steps->from_before + 2 * in * width;
        double *const now = steps->from_now + 2 * in * width;
        before[i] = sum[0].hi;
        before[width + i] = sum[1].hi;
        now[i] = sum[2].hi;
        now[width + i] = sum[3].hi;
    }
}

static void begin_inputs(const rampwise_modes *m, const rampwise_coeffs *c, size_t i)
{
    const equipment_core *const e = m->equipment;
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

int rampwise_equipment_steps_fill_(rampwise_modes *m, const rampwise_modes_plan *plan, equipment_steps *steps,
                                   double dt, size_t i)
{
    const size_t point = m->equipment->point[i], width = m->equipment->width;
    int status =
        rampwise_coeffs_make(&steps->c[i], &plan->equipment[i], dt, RAMPWISE_BASE_ACCELERATION, m->between);
    begin_inputs(m, &steps->c[i], i);
    for (size_t j = 0; status == RAMPWISE_OK && j < m->modes; ++j) {
        cascade row;
        rampwise_coeffs mode = plan->c[j];
        const size_t weight = j * m->width + point, to = 2 * j * width + i;
        mode.dt = dt;
        status = rampwise_cascade_make_(&row, &mode, &plan->equipment[i], m->weight_u[weight],
                                        m->weight_v != NULL ? m->weight_v[weight] : 0);
        steps->from_u[to] = row.displacement[0];
        steps->from_u[to + width] = row.velocity[0];
        steps->from_v[to] = row.displacement[1];
        steps->from_v[to + width] = row.velocity[1];
        add_inputs(m, j, &row);
    }
    fill_inputs(m, steps, i);
    return status;
}
