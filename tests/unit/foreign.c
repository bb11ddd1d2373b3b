/* Constants and sizes by name, and a text for every status. tests/abi/constants checks that the
   table holds every constant of the headers. */
#include <string.h>
#include "../support/suite.h"
#include "rampwise.h"

START_TEST(constants)
{
    int value = 0;
    ck_assert_int_eq(rampwise_constant("RAMPWISE_BASE_DISPLACEMENT", &value), RAMPWISE_OK);
    ck_assert_int_eq(value, RAMPWISE_BASE_DISPLACEMENT);
    ck_assert_int_eq(rampwise_constant("RAMPWISE_ERROR_TIME", &value), RAMPWISE_OK);
    ck_assert_int_eq(value, RAMPWISE_ERROR_TIME);
    value = 77;
    ck_assert_int_eq(rampwise_constant("RAMPWISE_ERROR_TIM", &value), RAMPWISE_ERROR_NAME);
    ck_assert_int_eq(rampwise_constant("", &value), RAMPWISE_ERROR_NAME);
    ck_assert_int_eq(rampwise_constant(NULL, &value), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_constant("RAMPWISE_OK", NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(value, 77);
}
END_TEST

START_TEST(struct_sizes)
{
    ck_assert_uint_eq(rampwise_struct_size("rampwise_system"), 24);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_coeffs"), 256);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_state"), 32);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_history"), 4 * sizeof(double *));
    ck_assert_uint_eq(rampwise_struct_size("rampwise_event"), 48);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_stream"), sizeof(rampwise_stream));
    ck_assert_uint_eq(rampwise_struct_size("rampwise_coeffs_f32"), 128);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_state_f32"), 24);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_history_f32"), 4 * sizeof(float *));
    ck_assert_uint_eq(rampwise_struct_size("rampwise_bank_wanted_f32"), 12 * sizeof(size_t));
    ck_assert_uint_eq(rampwise_struct_size("rampwise_energy"), 32);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_meter"), 512);
    ck_assert_uint_eq(rampwise_struct_size("rampwise_nothing"), 0);
    ck_assert_uint_eq(rampwise_struct_size(NULL), 0);
}
END_TEST

/* Each of the pinned numbers has a text of its own, and no other number has one. */
START_TEST(status_texts)
{
    static const int statuses[] = {0, -10, -12, -14, -16, -17, -18, -20, -22, -24, -26, -27, -28, -29, -30, -32, -34, -36, -38, -40, -42, -44, -45, -46, -48, -50, -52, -60, -62, -64, -66, -70, -72, -74, -80, -90, -92};
    const size_t count = sizeof statuses / sizeof *statuses;
    const char *const none = rampwise_status_text(1);
    size_t known = 0;
    for (int status = -200; status <= 200; ++status)
        known += strcmp(rampwise_status_text(status), none) != 0;
    ck_assert_uint_eq(known, count);
    for (size_t i = 0; i < count; ++i)
        for (size_t j = 0; j < i; ++j)
            ck_assert_str_ne(rampwise_status_text(statuses[i]), rampwise_status_text(statuses[j]));
}
END_TEST

START_TEST(version)
{
    ck_assert_str_eq(rampwise_version(), "0.1.0");
    ck_assert_int_eq(rampwise_arithmetic_edition(), RAMPWISE_ARITHMETIC_EDITION);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, constants);
    tcase_add_test(tests, struct_sizes);
    tcase_add_test(tests, status_texts);
    tcase_add_test(tests, version);
}

int main(void)
{
    return suite_run("foreign callers", add_tests);
}
