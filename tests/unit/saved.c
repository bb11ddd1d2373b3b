/* Banks in both precisions and peaks as bytes: what is resumed goes on with the same bits, on every set of
   instructions, stopped oscillators too; damaged bytes and those of other objects are refused and change
   nothing, as do numbers that cannot be in modes and directions. The rest of those, streams and watches are
   in tests of their own. */
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/seal.h"
#include "../support/suite.h"

enum { MOST = 40, N = 200 };

static void make_oscillators(rampwise_coeffs *c, int n, int kind, double faster)
{
    for (int i = 0; i < n; ++i) {
        rampwise_system sys = regime_system(i % 9, faster * 1e-2 * pow(1.15, i % 40), 0.01);
        if (kind == KINDS - 1)
            sys.damper = 0;
        c[i] = made(sys, 0.01, kind);
    }
}

static void check_refusals(int (*resume)(void *object, const void *bytes, size_t count), void *object,
                           unsigned char *bytes, size_t size)
{
    for (size_t i = 0; i < size; i += 1 + size / 40) {
        bytes[i] ^= 0x10;
        ck_assert_int_eq(resume(object, bytes, size), RAMPWISE_ERROR_DAMAGED);
        bytes[i] ^= 0x10;
    }
    ck_assert_int_eq(resume(object, bytes, size - 1), RAMPWISE_ERROR_DAMAGED);
    ck_assert_int_eq(resume(object, bytes, 0), RAMPWISE_ERROR_DAMAGED);
    ck_assert_int_eq(resume(object, NULL, size), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(resume(NULL, bytes, size), RAMPWISE_ERROR_MISSING);
}

static int resume_bank(void *object, const void *bytes, size_t count)
{
    return rampwise_bank_resume(object, bytes, count);
}

static int resume_peaks(void *object, const void *bytes, size_t count)
{
    return rampwise_peaks_resume(object, bytes, count);
}

START_TEST(banks)
{
    gsl_rng *const r = random_make("banks");
    static const int counts[] = {1, 31, 32, 33, MOST};
    static unsigned char bytes[40000], again[40000];
    double p[N];
    for (int i = 0; i < 5 * SETS; ++i) {
        const int n = counts[i % 5], set = sets[i / 5], kind = i % KINDS;
        rampwise_coeffs c[MOST], other[MOST];
        rampwise_state s[MOST], before[MOST], after[MOST];
        rampwise_bank *bank, *resumed;
        if (!runs_here(set))
            continue;
        make_oscillators(c, n, kind, 1);
        make_oscillators(other, n, (kind + 1) % KINDS, 2);
        ck_assert_int_eq(rampwise_bank_create((size_t)n, c, set, &bank), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_create((size_t)n, other, RAMPWISE_BASELINE, &resumed), RAMPWISE_OK);
        random_record(r, p, N);
        ck_assert_int_eq(rampwise_bank_get(bank, s), RAMPWISE_OK);
        s[n / 2].u = s[n / 2].v = 1.7e308; /* stops at once, where it does not decay */
        ck_assert_int_eq(rampwise_bank_set(bank, s), RAMPWISE_OK);
        (void)rampwise_bank_run(bank, N / 2, p, NULL, NULL);
        const size_t size = rampwise_bank_saved_size(bank);
        ck_assert(size <= sizeof bytes);
        ck_assert_int_eq(rampwise_bank_save(bank, bytes, size - 1), RAMPWISE_ERROR_MEMORY);
        ck_assert_int_eq(rampwise_bank_save(bank, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_get(resumed, before), RAMPWISE_OK);
        check_refusals(resume_bank, resumed, bytes, size);
        ck_assert_int_eq(rampwise_bank_get(resumed, after), RAMPWISE_OK);
        ck_assert_mem_eq(before, after, (size_t)n * sizeof *before);
        ck_assert_int_eq(rampwise_bank_resume(resumed, bytes, size), RAMPWISE_OK);
        ck_assert_uint_eq(rampwise_bank_stopped(resumed, NULL), rampwise_bank_stopped(bank, NULL));
        (void)rampwise_bank_run(bank, N / 2, p + N / 2, NULL, NULL);
        (void)rampwise_bank_run(resumed, N / 2, p + N / 2, NULL, NULL);
        ck_assert_int_eq(rampwise_bank_save(bank, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_save(resumed, again, size), RAMPWISE_OK);
        ck_assert_mem_eq(bytes, again, size);
        /* A bank of another number, and another kind of object. */
        rampwise_bank *larger;
        rampwise_peaks *peaks;
        const int u = RAMPWISE_DISPLACEMENT;
        if (n < MOST) {
            c[n] = c[0];
            ck_assert_int_eq(rampwise_bank_create((size_t)n + 1, c, set, &larger), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_bank_resume(larger, bytes, size), RAMPWISE_ERROR_DIFFERENT);
            rampwise_bank_free(larger);
        }
        ck_assert_int_eq(rampwise_peaks_create((size_t)n, c, 1, &u, 0, set, &peaks), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_resume(peaks, bytes, size), RAMPWISE_ERROR_KIND);
        rampwise_peaks_free(peaks);
        rampwise_bank_free(bank);
        rampwise_bank_free(resumed);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(single_banks)
{
    gsl_rng *const r = random_make("single_banks");
    static unsigned char bytes[40000];
    float p[N];
    for (int kind = 0; kind < KINDS; ++kind) {
        rampwise_coeffs wide[MOST];
        rampwise_coeffs_f32 c[MOST];
        rampwise_state_f32 s[2][MOST];
        rampwise_bank_f32 *bank, *resumed;
        make_oscillators(wide, MOST, kind, 1);
        for (int i = 0; i < MOST; ++i)
            ck_assert_int_eq(
                rampwise_coeffs_make_f32(&c[i], &wide[i].system, 0.01, kinds[kind][0], kinds[kind][1]),
                RAMPWISE_OK);
        for (int i = 0; i < N; ++i)
            p[i] = (float)random_between(r, -1, 1);
        ck_assert_int_eq(rampwise_bank_create_f32(MOST, c, RAMPWISE_FASTEST, &bank), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_create_f32(MOST, c, RAMPWISE_BASELINE, &resumed), RAMPWISE_OK);
        (void)rampwise_bank_run_f32(bank, N / 2, p, NULL, NULL); /* some stop */
        const size_t size = rampwise_bank_saved_size_f32(bank);
        ck_assert(size <= sizeof bytes);
        ck_assert_int_eq(rampwise_bank_save_f32(bank, bytes, size), RAMPWISE_OK);
        bytes[size / 2] ^= 1;
        ck_assert_int_eq(rampwise_bank_resume_f32(resumed, bytes, size), RAMPWISE_ERROR_DAMAGED);
        bytes[size / 2] ^= 1;
        ck_assert_int_eq(rampwise_bank_resume_f32(resumed, bytes, size), RAMPWISE_OK);
        (void)rampwise_bank_run_f32(bank, N / 2, p + N / 2, NULL, NULL);    /* some stop */
        (void)rampwise_bank_run_f32(resumed, N / 2, p + N / 2, NULL, NULL); /* some stop */
        ck_assert_int_eq(rampwise_bank_get_f32(bank, s[0]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_get_f32(resumed, s[1]), RAMPWISE_OK);
        ck_assert_mem_eq(s[0], s[1], sizeof s[0]);
        ck_assert_uint_eq(rampwise_bank_stopped_f32(bank, NULL), rampwise_bank_stopped_f32(resumed, NULL));
        rampwise_bank_free_f32(bank);
        rampwise_bank_free_f32(resumed);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(peaks)
{
    gsl_rng *const r = random_make("peaks");
    static unsigned char bytes[200000];
    static double p[4 * N];
    static const int quantity[2] = {RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_DISPLACEMENT};
    for (int i = 0; i < 2 * KINDS; ++i) {
        const int kind = i % KINDS, n = i < KINDS ? MOST : 3;
        const unsigned flags = i % 3 == 0 ? RAMPWISE_AT_SAMPLES : 0;
        const size_t first = i % 5 == 4 ? 0 : gsl_rng_uniform_int(r, 4 * N);
        rampwise_coeffs c[MOST], other[MOST];
        rampwise_peaks *whole, *resumed, *different;
        rampwise_peak want[MOST], got[MOST];
        make_oscillators(c, n, kind, 1);
        make_oscillators(other, n, (kind + 1) % KINDS, 3);
        random_record(r, p, 4 * N);
        ck_assert_int_eq(rampwise_peaks_create((size_t)n, c, 2, quantity, flags, RAMPWISE_FASTEST, &whole),
                         RAMPWISE_OK);
        ck_assert_int_eq(
            rampwise_peaks_create((size_t)n, other, 2, quantity, flags, RAMPWISE_BASELINE, &resumed),
            RAMPWISE_OK);
        ck_assert_int_eq(
            rampwise_peaks_create((size_t)n, c, 1, quantity, flags, RAMPWISE_BASELINE, &different),
            RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(whole, first, p, NULL), RAMPWISE_OK);
        const size_t size = rampwise_peaks_saved_size(whole);
        ck_assert(size <= sizeof bytes);
        ck_assert_int_eq(rampwise_peaks_save(whole, bytes, size), RAMPWISE_OK);
        if (i % KINDS == 0)
            check_refusals(resume_peaks, resumed, bytes, size);
        ck_assert_int_eq(rampwise_peaks_resume(different, bytes, size), RAMPWISE_ERROR_DIFFERENT);
        ck_assert_int_eq(rampwise_peaks_resume(resumed, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(whole, 4 * N - first, p + first, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(resumed, 4 * N - first, p + first, NULL), RAMPWISE_OK);
        for (int q = 0; q < 2; ++q) {
            ck_assert_int_eq(rampwise_peaks_get(whole, quantity[q], RAMPWISE_MAXIMAX, want), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_peaks_get(resumed, quantity[q], RAMPWISE_MAXIMAX, got), RAMPWISE_OK);
            ck_assert_mem_eq(want, got, (size_t)n * sizeof *want);
        }
        rampwise_peaks_free(whole);
        rampwise_peaks_free(resumed);
        rampwise_peaks_free(different);
    }
    gsl_rng_free(r);
}
END_TEST

/* With evidence: its errors too, and the ends of the record before and after. */
START_TEST(evidence)
{
    gsl_rng *const r = random_make("evidence");
    static unsigned char bytes[200000];
    static double p[4 * N];
    static const int quantity[2] = {RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_DISPLACEMENT};
    for (int i = 0; i < 12; ++i) {
        const unsigned flags = RAMPWISE_EVIDENCE | (i % 3 == 0 ? RAMPWISE_AT_SAMPLES : 0);
        const size_t first = i == 4 ? 0 : i == 5 ? 1 : gsl_rng_uniform_int(r, 4 * N);
        rampwise_coeffs c[3], other[3];
        rampwise_peaks *whole, *resumed, *plain;
        rampwise_evidence want[3], got[3];
        make_oscillators(c, 3, 0, 1);
        make_oscillators(other, 3, 0, 3);
        random_record(r, p, 4 * N);
        ck_assert_int_eq(rampwise_peaks_create(3, c, 2, quantity, flags, RAMPWISE_FASTEST, &whole),
                         RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_create(3, other, 2, quantity, flags, RAMPWISE_BASELINE, &resumed),
                         RAMPWISE_OK);
        ck_assert_int_eq(
            rampwise_peaks_create(3, c, 2, quantity, flags & RAMPWISE_AT_SAMPLES, RAMPWISE_BASELINE, &plain),
            RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(whole, first, p, NULL), RAMPWISE_OK);
        const size_t size = rampwise_peaks_saved_size(whole);
        ck_assert(size <= sizeof bytes);
        ck_assert_int_eq(rampwise_peaks_save(whole, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_resume(plain, bytes, size), RAMPWISE_ERROR_DIFFERENT);
        ck_assert_int_eq(rampwise_peaks_resume(resumed, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(whole, 4 * N - first, p + first, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(resumed, 4 * N - first, p + first, NULL), RAMPWISE_OK);
        for (int q = 0; q < 2; ++q) {
            ck_assert_int_eq(rampwise_peaks_evidence(whole, quantity[q], RAMPWISE_MAXIMAX, want),
                             RAMPWISE_OK);
            ck_assert_int_eq(rampwise_peaks_evidence(resumed, quantity[q], RAMPWISE_MAXIMAX, got),
                             RAMPWISE_OK);
            ck_assert_mem_eq(want, got, sizeof want);
        }
        rampwise_peaks_free(whole);
        rampwise_peaks_free(resumed);
        rampwise_peaks_free(plain);
    }
    gsl_rng_free(r);
}
END_TEST

/* The last number of all becomes NaN, under a right checksum. */
static void check_nonsense(int (*resume)(void *object, const void *bytes, size_t count), void *object,
                           unsigned char *bytes, size_t size)
{
    static const double nonsense = NAN;
    memcpy(bytes + size - 4 - sizeof nonsense, &nonsense, sizeof nonsense);
    seal(bytes, size);
    ck_assert_int_eq(resume(object, bytes, size), RAMPWISE_ERROR_DAMAGED);
}

static int resume_modes(void *object, const void *bytes, size_t count)
{
    return rampwise_modes_resume(object, bytes, count);
}

static int resume_directions(void *object, const void *bytes, size_t count)
{
    return rampwise_directions_resume(object, bytes, count);
}

START_TEST(nonsense_in_modes)
{
    unsigned char bytes[300], before[300], after[300];
    const double load[2] = {1, -2}, weight[2] = {1, 1}, p[3] = {1, -1, 3};
    double output[3];
    const rampwise_coeffs c[2] = {made(regime_system(1, 0.1, 0.01), 0.01, 0),
                                  made(regime_system(2, 0.4, 0.01), 0.01, 0)};
    rampwise_modes_plan plan;
    rampwise_modes *modes, *other;
    rampwise_modes_plan_init(&plan);
    plan.modes = 2;
    plan.inputs = plan.outputs = 1;
    plan.c = c;
    plan.load = load;
    plan.on_displacement = weight;
    ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_create(&plan, &other), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_run(modes, 3, p, output, NULL), RAMPWISE_OK);
    const size_t size = rampwise_modes_saved_size(modes);
    ck_assert(size <= sizeof bytes);
    ck_assert_int_eq(rampwise_modes_save(modes, bytes, size), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_save(other, before, size), RAMPWISE_OK);
    check_nonsense(resume_modes, other, bytes, size);
    ck_assert_int_eq(rampwise_modes_save(other, after, size), RAMPWISE_OK);
    ck_assert_mem_eq(before, after, size);
    rampwise_modes_free(modes);
    rampwise_modes_free(other);
}
END_TEST

START_TEST(nonsense_in_directions)
{
    static unsigned char bytes[4000], before[4000], after[4000];
    const double p1[3] = {1, -1, 3}, p2[3] = {2, 5, -4};
    const rampwise_coeffs c = made(regime_system(1, 0.1, 0.01), 0.01, 0);
    rampwise_directions *d, *other;
    ck_assert_int_eq(rampwise_directions_create(1, &c, RAMPWISE_DISPLACEMENT, 8, 0, RAMPWISE_FASTEST, &d),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_directions_create(1, &c, RAMPWISE_DISPLACEMENT, 8, 0, RAMPWISE_FASTEST, &other),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_directions_run(d, 3, p1, p2, NULL), RAMPWISE_OK);
    const size_t size = rampwise_directions_saved_size(d);
    ck_assert(size <= sizeof bytes);
    ck_assert_int_eq(rampwise_directions_save(d, bytes, size), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_directions_save(other, before, size), RAMPWISE_OK);
    check_nonsense(resume_directions, other, bytes, size);
    ck_assert_int_eq(rampwise_directions_save(other, after, size), RAMPWISE_OK);
    ck_assert_mem_eq(before, after, size);
    rampwise_directions_free(d);
    rampwise_directions_free(other);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, banks);
    tcase_add_test(tests, single_banks);
    tcase_add_test(tests, peaks);
    tcase_add_test(tests, evidence);
    tcase_add_test(tests, nonsense_in_modes);
    tcase_add_test(tests, nonsense_in_directions);
}

int main(void)
{
    return suite_run("saved objects", add_tests);
}
