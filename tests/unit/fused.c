/* The library's own fused multiply-add: 2e7 triples a precision against the processor's, and a
   share of them against MPFR. RAMPWISE_TRIPLES in the environment changes the number. */
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/nearest.h"
#include "../support/random.h"
#include "../support/suite.h"
#include "rampwise.h"

#if defined(__x86_64__)
#define HARDWARE __attribute__((target("fma")))
static int processor_fuses(void)
{
    return __builtin_cpu_supports("fma");
}
#else
#define HARDWARE
static int processor_fuses(void)
{
#ifdef __FP_FAST_FMA
    return 1;
#else
    return 0;
#endif
}
#endif

static long triples(void)
{
    const char *const given = getenv("RAMPWISE_TRIPLES");
    return given != NULL ? atol(given) : 20000000;
}

static uint64_t random_bits(gsl_rng *r)
{
    return (uint64_t)gsl_rng_get(r) << 32 | gsl_rng_get(r);
}

static double as_double(uint64_t bits)
{
    double x;
    memcpy(&x, &bits, sizeof x);
    return x;
}

static float as_float(uint32_t bits)
{
    float x;
    memcpy(&x, &bits, sizeof x);
    return x;
}

/* The exponent field moved to `centre` plus or minus `spread`, sign and fraction kept; the fraction
   cut to its leading bits now and then, for ties. `places` is the number of fraction bits. */
static uint64_t near_exponent(uint64_t bits, uint64_t choice, int centre, int spread, int places)
{
    const uint64_t fraction_mask = (UINT64_C(1) << places) - 1;
    const int exponent = centre + (int)(choice % (uint64_t)(2 * spread + 1)) - spread;
    uint64_t fraction = bits & fraction_mask;
    if (choice >> 60 < 4)
        fraction &= ~(fraction_mask >> (choice >> 40 & 31));
    return (exponent > 0 ? (uint64_t)exponent << places : 0) | fraction;
}

/* Four families in turn: any bits at all; near each other; a product near the smallest numbers; and
   an addend that cancels the rounded product but for a few units in the last place. */
static void double_triple(gsl_rng *r, long i, double *x, double *y, double *z)
{
    const uint64_t sign = UINT64_C(1) << 63;
    const uint64_t a = random_bits(r), b = random_bits(r), c = random_bits(r);
    const int centre = i % 5 == 2 ? 512 : 1023, spread = i % 5 == 2 ? 40 : 30;
    if (i % 5 == 0) {
        *x = as_double(a);
        *y = as_double(b);
        *z = as_double(c);
        return;
    }
    *x = as_double(near_exponent(a, b, centre, spread, 52) | (a & sign));
    *y = as_double(near_exponent(b, c, centre, spread, 52) | (b & sign));
    *z = as_double(near_exponent(c, a, i % 5 == 2 ? 1 : 1023, 60, 52) | (c & sign));
    if (i % 5 == 3) {
        uint64_t bits;
        *z = -(*x * *y);
        memcpy(&bits, z, sizeof bits);
        *z = as_double(bits + (a & 7) - 3);
    }
    if (i % 5 == 4) {
        *x = as_double(near_exponent(a, b, 700, 20, 52) & ~UINT64_C(0x3ffffff)) * (a & sign ? -1 : 1);
        *y = (double)(b % (UINT64_C(1) << 27));
        *z = as_double(near_exponent(c, a, 1023, 0, 52) | (c & sign)) * *x * ldexp(1, -60 - (int)(c % 60));
    }
}

static void float_triple(gsl_rng *r, long i, float *x, float *y, float *z)
{
    const uint32_t sign = UINT32_C(1) << 31;
    const uint64_t a = random_bits(r), b = random_bits(r), c = random_bits(r);
    const int centre = i % 5 == 2 ? 64 : 127, spread = i % 5 == 2 ? 16 : 20;
    if (i % 5 == 0) {
        *x = as_float((uint32_t)a);
        *y = as_float((uint32_t)b);
        *z = as_float((uint32_t)c);
        return;
    }
    *x = as_float((uint32_t)near_exponent(a, b, centre, spread, 23) | ((uint32_t)a & sign));
    *y = as_float((uint32_t)near_exponent(b, c, centre, spread, 23) | ((uint32_t)b & sign));
    *z = as_float((uint32_t)near_exponent(c, a, i % 5 == 2 ? 1 : 127, 30, 23) | ((uint32_t)c & sign));
    if (i % 5 == 3) {
        uint32_t bits;
        *z = -(*x * *y);
        memcpy(&bits, z, sizeof bits);
        *z = as_float(bits + (uint32_t)(a & 7) - 3);
    }
    if (i % 5 == 4) {
        *x = as_float(((uint32_t)a & 0x807ff800) | UINT32_C(120) << 23);
        *y = (float)(b % 4096);
        *z = ldexpf(as_float(((uint32_t)c & 0x807fffff) | UINT32_C(127) << 23), -40 - (int)(a >> 58));
    }
}

/* The same bits, or both not a number: which NaN is not promised. */
static int same_double(double a, double b)
{
    return (isnan(a) && isnan(b)) || memcmp(&a, &b, sizeof a) == 0;
}

static int same_float(float a, float b)
{
    return (isnan(a) && isnan(b)) || memcmp(&a, &b, sizeof a) == 0;
}

HARDWARE static long doubles_by_processor(gsl_rng *r, long count)
{
    long different = 0;
    for (long i = 0; i < count; ++i) {
        double x, y, z;
        double_triple(r, i, &x, &y, &z);
        different += !same_double(rampwise_fma(x, y, z), __builtin_fma(x, y, z));
    }
    return different;
}

HARDWARE static long floats_by_processor(gsl_rng *r, long count)
{
    long different = 0;
    for (long i = 0; i < count; ++i) {
        float x, y, z;
        float_triple(r, i, &x, &y, &z);
        different += !same_float(rampwise_fmaf(x, y, z), __builtin_fmaf(x, y, z));
    }
    return different;
}

START_TEST(double_against_processor)
{
    gsl_rng *const r = random_make("double_against_processor");
    ck_assert_msg(processor_fuses(), "this processor has no fused multiply-add to compare with");
    ck_assert_int_eq(doubles_by_processor(r, triples()), 0);
    gsl_rng_free(r);
}
END_TEST

START_TEST(float_against_processor)
{
    gsl_rng *const r = random_make("float_against_processor");
    ck_assert_msg(processor_fuses(), "this processor has no fused multiply-add to compare with");
    ck_assert_int_eq(floats_by_processor(r, triples()), 0);
    gsl_rng_free(r);
}
END_TEST

START_TEST(against_mpfr)
{
    gsl_rng *const r = random_make("against_mpfr");
    for (long i = 0; i < triples() / 100; ++i) {
        double x, y, z;
        float p, q, s;
        double_triple(r, i, &x, &y, &z);
        float_triple(r, i, &p, &q, &s);
        if (!same_double(rampwise_fma(x, y, z), nearest_fma(x, y, z)))
            ck_abort_msg("fma(%a, %a, %a) = %a, not %a", x, y, z, rampwise_fma(x, y, z),
                         nearest_fma(x, y, z));
        if (!same_float(rampwise_fmaf(p, q, s), nearest_fmaf(p, q, s)))
            ck_abort_msg("fmaf(%a, %a, %a) = %a, not %a", (double)p, (double)q, (double)s,
                         (double)rampwise_fmaf(p, q, s), (double)nearest_fmaf(p, q, s));
    }
    gsl_rng_free(r);
}
END_TEST

static const double special[] = {0.0,
                                 1.0,
                                 3.0,
                                 0x1p-1074,
                                 0x1.8p-1073,
                                 0x1p-1022,
                                 0x1p-537,
                                 0x1.fffffffffffffp-1023,
                                 0x1.fffffffffffffp1023,
                                 0x1p512,
                                 0x1p1023,
                                 0x1.0000000000001p0,
                                 INFINITY,
                                 NAN};

/* Every triple of special numbers and signs: zeros keep the sign that IEEE 754 gives them. */
START_TEST(special_numbers)
{
    enum { COUNT = sizeof special / sizeof *special };
    for (int i = 0; i < COUNT * COUNT * COUNT * 8; ++i) {
        const double x = (i & 1 ? -1 : 1) * special[i / 8 % COUNT];
        const double y = (i & 2 ? -1 : 1) * special[i / 8 / COUNT % COUNT];
        const double z = (i & 4 ? -1 : 1) * special[i / 8 / COUNT / COUNT];
        const float p = (float)x, q = (float)y, s = (float)z;
        ck_assert(same_double(rampwise_fma(x, y, z), nearest_fma(x, y, z)));
        ck_assert(same_float(rampwise_fmaf(p, q, s), nearest_fmaf(p, q, s)));
    }
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, double_against_processor);
    tcase_add_test(tests, float_against_processor);
    tcase_add_test(tests, against_mpfr);
    tcase_add_test(tests, special_numbers);
}

int main(void)
{
    return suite_run("fused multiply-add", add_tests);
}
