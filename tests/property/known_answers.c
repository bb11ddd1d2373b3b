/* The tables of src/known_answers.h against MPFR. With --print: the tables, answers recomputed. */
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "../../src/known_answers.h"
#include "../support/exact.h"
#include "../support/nearest.h"
#include "../support/suite.h"

#define COUNT(array) (sizeof(array) / sizeof *(array))

static double product(double x, double y)
{
    return nearest_fma(x, y, -0.0);
}

/* The recurrence of step.h with operations of MPFR. */
static void expected_steps(known_response *k, double *p, double *p_before)
{
    const double *const q = k->coefficients;
    double u = 0.5, v = -0.25;
    *p = known_sample(0);
    for (int i = 1; i < KNOWN_SAMPLES; ++i) {
        const double next = known_sample(i), old = u;
        const double for_u = nearest_fma(q[2], *p, product(q[3], next));
        const double for_v = nearest_fma(q[6], *p, product(q[7], next));
        u = nearest_sum(u, nearest_fma(q[8], u, nearest_fma(q[1], v, for_u)));
        v = nearest_sum(v, nearest_fma(q[4], old, nearest_fma(q[9], v, for_v)));
        *p_before = *p;
        *p = next;
    }
    k->u = u;
    k->v = v;
}

static float sum_f32(float x, float y)
{
    return nearest_fmaf(1, x, y);
}

static void expected_carry(float *x, float *x_low, float change)
{
    const float with_low = sum_f32(change, *x_low), sum = sum_f32(*x, with_low);
    *x_low = sum_f32(with_low, -sum_f32(sum, -*x));
    *x = sum;
}

/* The recurrence of single precision. */
static void expected_single(known_response *k, const exact_step *e)
{
    float q[EXACT_COUNT], u = 0.5f, v = -0.25f, u_low = 0, v_low = 0, p = (float)known_sample(0);
    for (int i = 0; i < EXACT_COUNT; ++i)
        q[i] = mpfr_get_flt(e->value[i], MPFR_RNDN) + 0.0f;
    for (int i = 1; i < KNOWN_SAMPLES; ++i) {
        const float next = (float)known_sample(i);
        const float for_u = nearest_fmaf(q[2], p, nearest_fmaf(q[3], next, -0.0f));
        const float for_v = nearest_fmaf(q[6], p, nearest_fmaf(q[7], next, -0.0f));
        const float du = nearest_fmaf(q[8], u, nearest_fmaf(q[1], v, for_u));
        const float dv = nearest_fmaf(q[4], u, nearest_fmaf(q[9], v, for_v));
        expected_carry(&u, &u_low, du);
        expected_carry(&v, &v_low, dv);
        p = next;
    }
    const float single[4] = {u, v, u_low, v_low};
    memcpy(k->single, single, sizeof single);
}

static known_response expected_response(known_response k)
{
    exact_step e;
    exact_init(&e, &k.system, k.dt);
    exact_free_motion(&e, k.dt, 1);
    exact_input(&e, k.input, k.between);
    for (int i = 0; i < EXACT_COUNT; ++i)
        k.coefficients[i] = mpfr_get_d(e.value[i], MPFR_RNDN) + 0.0;
    expected_single(&k, &e);
    exact_clear(&e);
    double p = 0, p_before = 0, from_p = 0, from_change = 0;
    expected_steps(&k, &p, &p_before);
    const rampwise_system *const sys = &k.system;
    const double stiffness = nearest_quotient(sys->stiffness, sys->mass);
    const double damper = nearest_quotient(sys->damper, sys->mass);
    if (k.input == RAMPWISE_FORCE)
        from_p = nearest_quotient(1, sys->mass);
    if (k.input == RAMPWISE_BASE_DISPLACEMENT) {
        from_p = stiffness;
        from_change = product(nearest_rate(sys->damper, sys->mass, k.dt), nearest_sum(p, -p_before));
    }
    k.total = nearest_fma(-stiffness, k.u, nearest_fma(-damper, k.v, nearest_fma(from_p, p, from_change)));
    return k;
}

START_TEST(fused)
{
    for (size_t i = 0; i < COUNT(known_fuseds); ++i) {
        const known_fused *const k = &known_fuseds[i];
        const double answer = nearest_fma(k->x, k->y, k->z);
        ck_assert_mem_eq(&answer, &k->answer, sizeof answer);
    }
    for (size_t i = 0; i < COUNT(known_fusedfs); ++i) {
        const known_fusedf *const k = &known_fusedfs[i];
        const float answer = nearest_fmaf(k->x, k->y, k->z);
        ck_assert_mem_eq(&answer, &k->answer, sizeof answer);
    }
}
END_TEST

START_TEST(responses)
{
    for (size_t i = 0; i < COUNT(known_responses); ++i) {
        const known_response expected = expected_response(known_responses[i]);
        ck_assert_mem_eq(expected.coefficients, known_responses[i].coefficients,
                         sizeof expected.coefficients);
        ck_assert_mem_eq(&expected.u, &known_responses[i].u, sizeof(double));
        ck_assert_mem_eq(&expected.v, &known_responses[i].v, sizeof(double));
        ck_assert_mem_eq(&expected.total, &known_responses[i].total, sizeof(double));
        ck_assert_mem_eq(expected.single, known_responses[i].single, sizeof expected.single);
    }
}
END_TEST

START_TEST(library_passes)
{
    ck_assert_int_eq(rampwise_self_test(), RAMPWISE_OK);
}
END_TEST

static void print_tables(void)
{
    static const char *const inputs[] = {"RAMPWISE_FORCE", "RAMPWISE_BASE_ACCELERATION",
                                         "RAMPWISE_BASE_VELOCITY", "RAMPWISE_BASE_DISPLACEMENT"};
    printf("static const known_fused known_fuseds[] = {\n");
    for (size_t i = 0; i < COUNT(known_fuseds); ++i) {
        const known_fused *const k = &known_fuseds[i];
        printf("    {%a, %a, %a, %a},\n", k->x, k->y, k->z, nearest_fma(k->x, k->y, k->z));
    }
    printf("};\n\nstatic const known_fusedf known_fusedfs[] = {\n");
    for (size_t i = 0; i < COUNT(known_fusedfs); ++i) {
        const known_fusedf *const k = &known_fusedfs[i];
        printf("    {%af, %af, %af, %af},\n", (double)k->x, (double)k->y, (double)k->z,
               (double)nearest_fmaf(k->x, k->y, k->z));
    }
    printf("};\n\nstatic const known_response known_responses[] = {\n");
    for (size_t i = 0; i < COUNT(known_responses); ++i) {
        const known_response k = expected_response(known_responses[i]);
        printf("    {{%a, %a, %a},\n     %a,\n     %s,\n     %s,\n     {", k.system.mass, k.system.damper,
               k.system.stiffness, k.dt, inputs[k.input - RAMPWISE_FORCE],
               k.between == RAMPWISE_RAMP ? "RAMPWISE_RAMP" : "RAMPWISE_HOLD");
        for (int j = 0; j < EXACT_COUNT; ++j)
            printf("%s%a", j == 0 ? "" : j % 3 == 0 ? ",\n      " : ", ", k.coefficients[j]);
        printf("},\n     %a,\n     %a,\n     %a,\n", k.u, k.v, k.total);
        printf("     {%af, %af, %af, %af}},\n", (double)k.single[0], (double)k.single[1], (double)k.single[2],
               (double)k.single[3]);
    }
    printf("};\n\n#endif\n");
}

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, fused);
    tcase_add_test(tests, responses);
    tcase_add_test(tests, library_passes);
}

int main(int argc, char **argv)
{
    if (argc == 2 && strcmp(argv[1], "--print") == 0) {
        print_tables();
        return EXIT_SUCCESS;
    }
    return suite_run("known answers", add_tests);
}
