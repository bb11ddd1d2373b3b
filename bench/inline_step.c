/* The inline steps as a caller writes them. meson.build compiles this file twice, with INLINE_STEP the name of
   the function, INLINE_STEP_F32 that of its twin, and other processors in mind. */
#include "methods.h"

void INLINE_STEP(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u)
{
    /* copies, so that no store to u can be taken for one to them */
    const rampwise_coeffs mine = *c;
    rampwise_state now = *s;
    for (size_t i = 0; i < n; ++i) {
        rampwise_step(&mine, &now, p[i]);
        u[i] = now.u;
    }
    *s = now;
}

void INLINE_STEP_F32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p, float *u)
{
    const rampwise_coeffs_f32 mine = *c;
    rampwise_state_f32 now = *s;
    for (size_t i = 0; i < n; ++i) {
        rampwise_step_f32(&mine, &now, p[i]);
        u[i] = now.u;
    }
    *s = now;
}
