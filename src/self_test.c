#include "rampwise/version.h"

#include <stddef.h>
#include <stdint.h>
#include <string.h>
#include "known_answers.h"
#include "rampwise/motion.h"
#include "rampwise/status.h"

static int same_bits(double a, double b)
{
    return memcmp(&a, &b, sizeof a) == 0;
}

/* Operands pass through volatile objects, so that the compiler does not answer for the processor. */
static int fused_is_right(const known_fused *known)
{
    volatile double x = known->x, y = known->y, z = known->z;
    return same_bits(RAMPWISE_FMA(x, y, z), known->answer) && same_bits(rampwise_fma(x, y, z), known->answer);
}

static int fusedf_is_right(const known_fusedf *known)
{
    volatile float x = known->x, y = known->y, z = known->z;
    const float answers[2] = {RAMPWISE_FMAF(x, y, z), rampwise_fmaf(x, y, z)};
    const float right[2] = {known->answer, known->answer};
    return memcmp(answers, right, sizeof right) == 0;
}

static int response_is_right(const known_response *known)
{
    rampwise_coeffs c;
    rampwise_state s;
    const volatile double dt = known->dt;
    if (rampwise_coeffs_make(&c, &known->system, dt, known->input, known->between) != RAMPWISE_OK)
        return 0;
    if (memcmp(&c, known->coefficients, sizeof known->coefficients) != 0)
        return 0;
    rampwise_start(&s, 0.5, -0.25, known_sample(0));
    for (int i = 1; i < KNOWN_SAMPLES; ++i)
        rampwise_step(&c, &s, known_sample(i));
    return same_bits(s.u, known->u) && same_bits(s.v, known->v) &&
           same_bits(rampwise_total_acceleration(&c, &s), known->total);
}

static int single_is_right(const known_response *known)
{
    rampwise_coeffs_f32 c;
    rampwise_state_f32 s;
    const volatile double dt = known->dt;
    if (rampwise_coeffs_make_f32(&c, &known->system, dt, known->input, known->between) != RAMPWISE_OK)
        return 0;
    rampwise_start_f32(&s, 0.5f, -0.25f, (float)known_sample(0));
    for (int i = 1; i < KNOWN_SAMPLES; ++i)
        rampwise_step_f32(&c, &s, (float)known_sample(i));
    const float single[4] = {s.u, s.v, s.u_low, s.v_low};
    return memcmp(single, known->single, sizeof single) == 0;
}

/* Subnormal numbers are neither flushed nor read as zero. */
static int subnormals_count(void)
{
    volatile double smallest = 0x1p-1074, small = 0x1p-1020;
    return smallest * 0x1p60 == 0x1p-1014 && small * 0x1p-30 == 0x1p-1050;
}

int rampwise_self_test(void)
{
    if (!subnormals_count())
        return RAMPWISE_ERROR_ARITHMETIC;
    for (size_t i = 0; i < sizeof known_fuseds / sizeof *known_fuseds; ++i)
        if (!fused_is_right(&known_fuseds[i]))
            return RAMPWISE_ERROR_FUSED;
    for (size_t i = 0; i < sizeof known_fusedfs / sizeof *known_fusedfs; ++i)
        if (!fusedf_is_right(&known_fusedfs[i]))
            return RAMPWISE_ERROR_FUSED;
    for (size_t i = 0; i < sizeof known_responses / sizeof *known_responses; ++i)
        if (!response_is_right(&known_responses[i]) || !single_is_right(&known_responses[i]))
            return RAMPWISE_ERROR_ARITHMETIC;
    return RAMPWISE_OK;
}
