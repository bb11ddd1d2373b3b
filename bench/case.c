#include "case.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>

/* From -1 to 1. A linear congruential generator of 64 bits, of which the high ones are used. */
static double noise(uint64_t *generator)
{
    *generator = *generator * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*generator >> 33) / 1073741824.0 - 1;
}

static void stop_unless(int good, const char *what)
{
    if (good)
        return;
    fprintf(stderr, "bench: %s\n", what);
    exit(EXIT_FAILURE);
}

/* Noise through two lags, which leave the frequencies of a shake: in plain arithmetic, so that no method has
   a hand in its own input. */
static void make_record(double *p)
{
    uint64_t generator = CASE_SEED;
    double first = 0, second = 0, slow = 0;
    for (size_t i = 0; i < CASE_SAMPLES; ++i) {
        first += 0.15 * (noise(&generator) - first);
        second += 0.15 * (first - second);
        slow += 0.01 * (second - slow);
        p[i] = 10 * (second - slow);
    }
}

void case_white(double *p)
{
    uint64_t generator = CASE_SEED + 1;
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        p[i] = noise(&generator);
}

static void make_oscillators(bench_case *in)
{
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j) {
        const double share = (double)j / (CASE_OSCILLATORS - 1);
        const double period = CASE_SHORTEST * pow(CASE_LONGEST / CASE_SHORTEST, share);
        stop_unless(rampwise_system_period(&in->sys[j], period, CASE_ZETA) == RAMPWISE_OK, "no system");
        stop_unless(rampwise_coeffs_make(&in->c[j], &in->sys[j], CASE_DT, RAMPWISE_FORCE, RAMPWISE_RAMP) ==
                        RAMPWISE_OK,
                    "no coefficients");
    }
}

void case_make(bench_case *in, size_t stretch)
{
    make_record(in->p);
    make_oscillators(in);
    in->stretch = stretch;
}

size_t case_spread(size_t k, size_t count)
{
    return count > 1 ? k * (CASE_OSCILLATORS - 1) / (count - 1) : CASE_OSCILLATORS / 2;
}

void *case_memory(size_t bytes)
{
    void *const memory = calloc(1, bytes);
    stop_unless(memory != NULL, "no memory");
    return memory;
}
