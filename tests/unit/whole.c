/* Whole numbers to and from single precision, beside the compiler's own conversions. */
#define SINGLE_PRECISION
#include <math.h>
#include "../../src/whole.h"
#include "../support/random.h"
#include "../support/suite.h"

enum { CASES = 50000 };

/* Any number of bits, and halves of the last place that count of a float. */
static uint64_t any_whole(gsl_rng *r)
{
    const uint64_t high = gsl_rng_uniform_int(r, 0xffffffffu), low = gsl_rng_uniform_int(r, 0xffffffffu);
    const uint64_t n = (high << 32 | low) >> gsl_rng_uniform_int(r, 64);
    const int kept = 25 + (int)gsl_rng_uniform_int(r, 8);
    const uint64_t lost = n >> kept != 0 ? (UINT64_C(1) << (kept - 1)) - 1 : 0;
    return gsl_rng_uniform_int(r, 2) == 0 ? n : n & ~lost;
}

START_TEST(to_a_float)
{
    gsl_rng *const r = random_make("to_a_float");
    for (int i = 0; i < CASES; ++i) {
        const uint64_t n = any_whole(r);
        ck_assert(real_of(n) == (float)n);
    }
    ck_assert(real_of(0) == 0);
    ck_assert(real_of(UINT64_MAX) == 0x1p64f);
    ck_assert(real_of(UINT64_C(0x8000008000000001)) == 0x1.000002p63f); /* beyond a tie by the last bit */
    ck_assert(real_of(UINT64_C(0x8000008000000000)) == 0x1p63f);
    gsl_rng_free(r);
}
END_TEST

START_TEST(from_a_float)
{
    gsl_rng *const r = random_make("from_a_float");
    for (int i = 0; i < CASES; ++i) {
        const float x = (float)random_log(r, 0x1p-149, 0x1.fffffep63);
        float rest;
        ck_assert_uint_eq(whole_of(x, &rest), (uint64_t)x);
        ck_assert(rest == x - truncf(x));
    }
    float rest = 1;
    ck_assert_uint_eq(whole_of(0, &rest), 0);
    ck_assert(rest == 0);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, to_a_float);
    tcase_add_test(tests, from_a_float);
}

int main(void)
{
    return suite_run("whole numbers", add_tests);
}
