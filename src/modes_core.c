#include "modes_core.h"

#include <string.h>

void *rampwise_room_take_(room *r, size_t count, size_t each)
{
    const size_t left = SIZE_MAX - r->size;
    char *const piece = r->begin != NULL ? r->begin + r->size : NULL;
    if (left < LANE_ALIGNMENT || count > (left - LANE_ALIGNMENT) / each) {
        r->size = SIZE_MAX;
        return NULL;
    }
    r->size += (count * each + LANE_ALIGNMENT - 1) / LANE_ALIGNMENT * LANE_ALIGNMENT;
    return piece;
}

/* At n + 1 samples. */
static void loads_of_group(const rampwise_modes *m, size_t g, size_t n, const double *input,
                           double (*p)[LANES])
{
    memset(p, 0, (n + 1) * sizeof *p);
    m->k->accumulate(m->inputs, n + 1, input, m->inputs, m->load + g * m->inputs * LANES, LANES, p[0]);
}

int rampwise_modes_tile_(const rampwise_modes *m, size_t g, lane_block *lanes, size_t n, const double *input,
                         mode_tile *tile)
{
    memcpy(tile->u[0], lanes->u, sizeof lanes->u);
    memcpy(tile->v[0], lanes->v, sizeof lanes->v);
    loads_of_group(m, g, n, input, tile->p);
    return m->k->under_own_inputs(lanes, modes_in(m, g), n, tile->p, tile->u + 1, tile->v + 1);
}
