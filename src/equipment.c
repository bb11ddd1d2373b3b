#include "modes_core.h"
void rampwise_equipment_tile_(rampwise_modes *m, size_t g, size_t t, size_t n, const mode_tile *tile)
{
    (void)m; (void)g; (void)t; (void)n; (void)tile;
}
