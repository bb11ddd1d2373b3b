/* The self test passes as built, and refuses what changes arithmetic under it: directed rounding
   and flushed subnormal numbers. */
#include <fenv.h>
#include "../support/suite.h"
#include "rampwise.h"
#if defined(__SSE2__)
#include <xmmintrin.h>
#endif

START_TEST(passes)
{
    ck_assert_int_eq(rampwise_self_test(), RAMPWISE_OK);
}
END_TEST

START_TEST(refuses_directed_rounding)
{
    static const int directions[] = {FE_UPWARD, FE_DOWNWARD, FE_TOWARDZERO};
    for (int i = 0; i < 3; ++i) {
        ck_assert_int_eq(fesetround(directions[i]), 0);
        const int status = rampwise_self_test();
        ck_assert_int_eq(fegetround(), directions[i]);
        fesetround(FE_TONEAREST);
        ck_assert_int_lt(status, 0);
    }
    ck_assert_int_eq(rampwise_self_test(), RAMPWISE_OK);
}
END_TEST

#if defined(__SSE2__)
START_TEST(refuses_flushed_subnormals)
{
    const unsigned normal = _mm_getcsr();
    _mm_setcsr(normal | 0x8000); /* flush to zero */
    const int flushed = rampwise_self_test();
    _mm_setcsr(normal | 0x0040); /* subnormal operands are zero */
    const int zeroed = rampwise_self_test();
    _mm_setcsr(normal);
    ck_assert_int_lt(flushed, 0);
    ck_assert_int_lt(zeroed, 0);
}
END_TEST
#endif

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, passes);
    tcase_add_test(tests, refuses_directed_rounding);
#if defined(__SSE2__)
    tcase_add_test(tests, refuses_flushed_subnormals);
#endif
}

int main(void)
{
    return suite_run("self test", add_tests);
}
