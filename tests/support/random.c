#include "random.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

gsl_rng *random_make(const char *test)
{
    const char *const given = getenv("RAMPWISE_SEED");
    const unsigned long seed = given != NULL ? strtoul(given, NULL, 10) : 20261201;
    gsl_rng *const r = gsl_rng_alloc(gsl_rng_mt19937);
    gsl_rng_set(r, seed);
    printf("%s: seed %lu\n", test, seed);
    return r;
}

double random_between(gsl_rng *r, double low, double high)
{
    return low + (high - low) * gsl_rng_uniform(r);
}

double random_log(gsl_rng *r, double low, double high)
{
    return low * pow(high / low, gsl_rng_uniform(r));
}

double random_sign(gsl_rng *r)
{
    return gsl_rng_uniform_int(r, 2) == 0 ? 1 : -1;
}

void random_fill(gsl_rng *r, double *x, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        x[i] = random_between(r, -1, 1);
}

void random_whisper(gsl_rng *r, double *x, size_t n)
{
    for (size_t i = 0; i < n; ++i) {
        const int is_zero = gsl_rng_uniform_int(r, 3) == 0;
        const int exponent = -908 + (int)gsl_rng_uniform_int(r, 16);
        x[i] = is_zero ? 0 : ldexp(random_between(r, -1, 1), exponent);
    }
}

void random_record(gsl_rng *r, double *p, int n)
{
    random_fill(r, p, (size_t)n);
    for (int i = n / 3; i < n / 2; ++i)
        p[i] = 0;
}
