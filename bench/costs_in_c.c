/* costs_in_c SAMPLES CALLS: seconds of the processor for one call of what a binding is measured by: coefficients and the
   four histories of one oscillator, into arrays made once; the best of seven rounds of so many calls. */
#include <rampwise.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { ROUNDS = 7 };

static int respond(size_t n, const double *p, const rampwise_history *out)
{
    rampwise_system sys;
    rampwise_coeffs c;
    int status = rampwise_system_period(&sys, 0.7, 0.05);
    if (status == RAMPWISE_OK)
        status = rampwise_coeffs_make(&c, &sys, 0.01, RAMPWISE_FORCE, RAMPWISE_RAMP);
    return status == RAMPWISE_OK ? rampwise_solve(&c, 0, 0, n, p, out, NULL) : status;
}

int main(int argc, char **argv)
{
    if (argc != 3)
        return 2;
    const size_t n = strtoul(argv[1], NULL, 10), calls = strtoul(argv[2], NULL, 10);
    double *const memory = calloc(5 * n, sizeof *memory);
    if (memory == NULL || n == 0 || calls == 0)
        return 2;
    double *const p = memory;
    double best = 1e9;
    const rampwise_history out = {memory + n, memory + 2 * n, memory + 3 * n, memory + 4 * n};
    for (size_t i = 0; i < n; ++i)
        p[i] = (double)(i * 7919 % 2000) / 1000 - 1;
    for (int round = 0; round < ROUNDS; ++round) {
        const clock_t start = clock();
        for (size_t k = 0; k < calls; ++k)
            if (respond(n, p, &out) != RAMPWISE_OK)
                return 1;
        const double each = (double)(clock() - start) / CLOCKS_PER_SEC / (double)calls;
        best = each < best ? each : best;
    }
    printf("%.9e\n", best);
    free(memory);
    return 0;
}
