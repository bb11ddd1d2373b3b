#include "rampwise/equipment.h"

#include <string.h>
#include "equipment_core.h"
#include "rampwise/status.h"

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
    rampwise_equipment_steps_take_(m, &e->steps, count, r);
    e->own = rampwise_room_take_(r, 4, row);
    e->u = rampwise_room_take_(r, 1, row);
    e->v = rampwise_room_take_(r, 1, row);
    e->u_begin = rampwise_room_take_(r, 1, row);
    e->v_begin = rampwise_room_take_(r, 1, row);
    e->gain = rampwise_room_take_(r, SEGMENT, 2 * row);
    e->sums = rampwise_room_take_(r, m->inputs, 4 * sizeof *e->sums);
    e->peaks = plan->peaks ? rampwise_equipment_peaks_take_(m, count, r) : NULL;
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

static int fill_piece(rampwise_modes *m, const rampwise_modes_plan *plan, size_t i)
{
    equipment_core *const e = m->equipment;
    const rampwise_coeffs *const c = &e->steps.c[i];
    e->point[i] = plan->point[i];
    const int status = rampwise_equipment_steps_fill_(m, plan, &e->steps, m->dt, i);
    const double own[4] = {c->A_minus_1, c->B, c->Ap, c->Bp_minus_1};
    for (size_t k = 0; k < 4; ++k)
        e->own[k * e->width + i] = own[k];
    return status == RAMPWISE_OK && e->peaks != NULL ? rampwise_equipment_peaks_fill_(m, plan, i) : status;
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
    if (e->peaks != NULL)
        rampwise_equipment_peaks_start_(m);
}

void rampwise_equipment_begin_(rampwise_modes *m, size_t n)
{
    equipment_core *const e = m->equipment;
    memcpy(e->u_begin, e->u, e->width * sizeof *e->u);
    memcpy(e->v_begin, e->v, e->width * sizeof *e->v);
    memset(e->gain, 0, 2 * n * e->width * sizeof *e->gain);
    m->k->accumulate(m->inputs, n, m->input, m->inputs, e->steps.from_before, 2 * e->width, e->gain);
    m->k->accumulate(m->inputs, n, m->input + m->inputs, m->inputs, e->steps.from_now, 2 * e->width, e->gain);
}

void rampwise_equipment_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, mode_tile *tile)
{
    equipment_core *const e = m->equipment;
    const size_t at = 2 * g * LANES * e->width;
    double *const gain = e->gain + 2 * t * TILE * e->width;
    m->k->accumulate(modes_in(m, g), n, tile->u[0], LANES, e->steps.from_u + at, 2 * e->width, gain);
    m->k->accumulate(modes_in(m, g), n, tile->v[0], LANES, e->steps.from_v + at, 2 * e->width, gain);
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
                out->a[to] = total_of(&e->steps.c[i], u, v) - m->output[k * m->width + e->point[i]];
            if (out->total != NULL)
                out->total[to] = total_of(&e->steps.c[i], u, v);
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
    memcpy(peak, rampwise_equipment_peak_(modes, 0, quantity == RAMPWISE_TOTAL_ACCELERATION),
           e->count * sizeof *peak);
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
