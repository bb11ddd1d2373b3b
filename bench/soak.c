/* soak [SAMPLES]: how far a stream in single precision is from one in double after very many samples, 1e9 if not
   given; bench/run --soak calls it. Both get the same load, noise from a seed that single precision holds exactly.
   An error that grows with the samples would show from one row to the next. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include "case.h"

enum { BLOCK = 1000, SEED = 20 };

typedef struct pair {
    rampwise_stream twice;
    rampwise_stream_f32 once;
} pair;

/* Of one row: differences in displacement, and the largest displacement. */
typedef struct extent {
    double difference, sum, peak;
} extent;

static int make(pair *x, double period)
{
    rampwise_system system;
    rampwise_coeffs c;
    rampwise_coeffs_f32 single;
    rampwise_stream_options options;
    rampwise_stream_options_init(&options);
    return rampwise_system_period(&system, period, CASE_ZETA) == RAMPWISE_OK &&
           rampwise_coeffs_make(&c, &system, CASE_DT, RAMPWISE_FORCE, RAMPWISE_RAMP) == RAMPWISE_OK &&
           rampwise_coeffs_make_f32(&single, &system, CASE_DT, RAMPWISE_FORCE, RAMPWISE_RAMP) ==
               RAMPWISE_OK &&
           rampwise_stream_init(&x->twice, &c, &options) == RAMPWISE_OK &&
           rampwise_stream_init_f32(&x->once, &single, &options) == RAMPWISE_OK;
}

/* From -1 to 1, 24 bits. A linear congruential generator of 64 bits, of which the high ones are used. */
static float noise(uint64_t *generator)
{
    *generator = *generator * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (float)(*generator >> 40) / 8388608.0f - 1;
}

static int put_block(pair *x, uint64_t *generator, extent *row)
{
    static float p[BLOCK], u[BLOCK];
    static double p_double[BLOCK], u_double[BLOCK];
    for (size_t i = 0; i < BLOCK; ++i) {
        p[i] = noise(generator);
        p_double[i] = (double)p[i];
    }
    if (rampwise_stream_put(&x->twice, BLOCK, p_double, u_double, NULL, NULL) != RAMPWISE_OK ||
        rampwise_stream_put_f32(&x->once, BLOCK, p, u, NULL, NULL) != RAMPWISE_OK)
        return 0;
    for (size_t i = 0; i < BLOCK; ++i) {
        const double off = (double)u[i] - u_double[i];
        row->difference = fmax(row->difference, fabs(off));
        row->peak = fmax(row->peak, fabs(u_double[i]));
        row->sum += off;
    }
    return 1;
}

static int soak(double period, uint64_t samples)
{
    pair x;
    rampwise_stream_counts counts;
    uint64_t generator = SEED, done = 0;
    int good = make(&x, period);
    printf("\nT = %g s, T/h = %g\n", period, period / CASE_DT);
    for (uint64_t end = BLOCK; good && done < samples; end *= 10) {
        const uint64_t from = done, stop = end < samples ? end : samples;
        extent row = {0, 0, 0};
        for (; good && done < stop; done += BLOCK)
            good = put_block(&x, &generator, &row);
        printf("  %11llu to %11llu %16.2e %16.2e\n", (unsigned long long)from, (unsigned long long)done,
               row.difference / row.peak, row.sum / (double)(done - from) / row.peak);
        fflush(stdout);
    }
    good = good && rampwise_stream_count_f32(&x.once, &counts) == RAMPWISE_OK && counts.good == done;
    return good;
}

int main(int count, char **word)
{
    static const double periods[] = {CASE_SHORTEST, 0.5, CASE_LONGEST};
    const double asked = count > 1 ? strtod(word[1], NULL) : 1e9;
    const double blocks = ceil(asked / BLOCK);
    if (count > 2 || !(asked >= 1 && asked <= 1e15)) {
        fprintf(stderr, "usage: soak [SAMPLES]\n");
        return 2;
    }
    printf("rampwise_stream_put_f32 against rampwise_stream_put, the same %.0f samples of noise (seed %d),\n"
           "%g %% damped. Differences of u in units of the largest u of their row.\n\n",
           blocks * BLOCK, SEED, 100 * CASE_ZETA);
    printf("  %26s %16s %16s\n", "samples", "largest", "mean");
    for (size_t i = 0; i < sizeof periods / sizeof *periods; ++i)
        if (!soak(periods[i], (uint64_t)blocks * BLOCK)) {
            fprintf(stderr, "soak: a sample was refused\n");
            return EXIT_FAILURE;
        }
    return EXIT_SUCCESS;
}
