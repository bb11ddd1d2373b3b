#include "oscillators.h"

#include <check.h>

const int kinds[KINDS][2] = {
    {RAMPWISE_FORCE, RAMPWISE_RAMP},
    {RAMPWISE_FORCE, RAMPWISE_HOLD},
    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP},
    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_HOLD},
    {RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP},
    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP},
    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD},
};

rampwise_system regime_system(int regime, double theta, double dt)
{
    static const double zeta[REGIMES] = {0, 0.05, 0.7, 1, 4, 0, 0.5, 0.1, -0.02};
    static const double stiffness_sign[REGIMES] = {1, 1, 1, 1, 1, 0, 0, -1, 1};
    const double omega = theta / dt, mass = 2.5;
    return (rampwise_system){mass, 2 * zeta[regime] * omega * mass,
                             stiffness_sign[regime] * omega * omega * mass};
}

int kind_allowed(const rampwise_system *sys, int kind)
{
    return kind != KINDS - 1 || sys->damper == 0;
}

rampwise_coeffs made(rampwise_system sys, double dt, int kind)
{
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, kinds[kind][0], kinds[kind][1]), RAMPWISE_OK);
    return c;
}

const int sets[SETS] = {RAMPWISE_BASELINE, RAMPWISE_AVX2, RAMPWISE_AVX512, RAMPWISE_NEON};

int runs_here(int set)
{
    const int runs = rampwise_instructions(set) == set;
#ifdef RAMPWISE_ALL_INSTRUCTIONS
#if defined(__x86_64__)
    ck_assert(runs || set == RAMPWISE_NEON);
#elif defined(__aarch64__)
    ck_assert(runs || set == RAMPWISE_AVX2 || set == RAMPWISE_AVX512);
#endif
#endif
    return runs;
}
