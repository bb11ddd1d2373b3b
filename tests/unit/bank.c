/* Banks: on every instruction set that runs here, for every number of lanes in the last block, the bits of
   rampwise_run; states, retuning, histories, largest values, overflow, refusals. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MOST = 70, N = 300 };

/* n oscillators of all regimes and lengths of period under one kind of input. */
static void make_oscillators(rampwise_coeffs *c, int n, int kind)
{
    for (int i = 0; i < n; ++i) {
        rampwise_system sys = regime_system(i % 7, 1e-4 * pow(1.2, i % 60), 0.01);
        if (kind == KINDS - 1)
            sys.damper = 0;
        c[i] = made(sys, 0.01, kind);
    }
}

static rampwise_bank *make_bank(int n, const rampwise_coeffs *c, int set)
{
    rampwise_bank *bank = NULL;
    ck_assert_int_eq(rampwise_bank_create((size_t)n, c, set, &bank), RAMPWISE_OK);
    ck_assert_uint_eq(rampwise_bank_count(bank), (size_t)n);
    ck_assert_int_eq(rampwise_bank_instructions(bank), set);
    return bank;
}

static void run_in_chunks(gsl_rng *r, rampwise_bank *bank, int n, const double *p,
                          const rampwise_bank_wanted *wanted)
{
    for (int done = 0; done < n;) {
        int part = (int)gsl_rng_uniform_int(r, 90);
        part = part > n - done ? n - done : part;
        ck_assert_int_eq(rampwise_bank_run(bank, (size_t)part, p + done, wanted, NULL), RAMPWISE_OK);
        done += part;
    }
}

/* States and readings of the whole bank against single oscillators. */
static void check_states(const rampwise_bank *bank, int n, const rampwise_coeffs *c, const rampwise_state *s)
{
    rampwise_state got[MOST];
    double now[4][MOST];
    const rampwise_history at = {now[0], now[1], now[2], now[3]};
    ck_assert_int_eq(rampwise_bank_get(bank, got), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_read(bank, &at), RAMPWISE_OK);
    ck_assert_mem_eq(got, s, (size_t)n * sizeof *s);
    for (int i = 0; i < n; ++i) {
        ck_assert(now[0][i] == s[i].u && now[1][i] == s[i].v);
        ck_assert(now[2][i] == rampwise_acceleration(&c[i], &s[i]));
        ck_assert(now[3][i] == rampwise_total_acceleration(&c[i], &s[i]));
    }
}

START_TEST(every_set_and_tail)
{
    gsl_rng *const r = random_make("every_set_and_tail");
    rampwise_coeffs c[MOST];
    double p[N + 1], largest[MOST + 1], expected[MOST];
    random_record(r, p, N + 1);
    for (int i = 0; i < SETS; ++i)
        for (int n = 1; n <= MOST && runs_here(sets[i]); ++n) {
            rampwise_state s[MOST];
            rampwise_bank_wanted wanted;
            make_oscillators(c, n, n % KINDS);
            rampwise_bank *const bank = make_bank(n, c, sets[i]);
            rampwise_bank_wanted_init(&wanted);
            wanted.largest = largest + 1; /* not aligned to a vector */
            for (int j = 0; j < n; ++j) {
                double u[N];
                const rampwise_history out = {u, NULL, NULL, NULL};
                s[j] = (rampwise_state){0, 0, 0, 0};
                ck_assert_int_eq(rampwise_run(&c[j], &s[j], N, p + 1, &out, NULL), RAMPWISE_OK);
                expected[j] = wanted.largest[j] = 1e-5 * j;
                for (int k = 0; k < N; ++k)
                    expected[j] = fmax(expected[j], fabs(u[k]));
            }
            wanted.largest[n < MOST ? n : 0] += n < MOST ? 77 : 0;
            const double beyond = wanted.largest[n < MOST ? n : 0];
            run_in_chunks(r, bank, N, p + 1, &wanted);
            check_states(bank, n, c, s);
            ck_assert_mem_eq(wanted.largest, expected, (size_t)n * sizeof *expected);
            if (n < MOST)
                ck_assert(wanted.largest[n] == beyond);
            /* Again, from rest, without largest values: the same ends. */
            ck_assert_int_eq(rampwise_bank_start(bank, 0), RAMPWISE_OK);
            run_in_chunks(r, bank, N, p + 1, NULL);
            check_states(bank, n, c, s);
            rampwise_bank_free(bank);
        }
    gsl_rng_free(r);
}
END_TEST

START_TEST(same_silence)
{
    gsl_rng *const r = random_make("same_silence");
    for (int i = 0; i < 50 * SETS; ++i) {
        const double dt = random_log(r, 1e-12, 1e-5);
        rampwise_coeffs c[MOST];
        rampwise_state s[MOST];
        double p[N];
        if (!runs_here(sets[i % SETS]))
            continue;
        random_whisper(r, p, N);
        for (int j = 0; j < MOST; ++j) {
            c[j] = made(regime_system(j % 5, 0.003 * (j + 1), dt), dt, i % 4);
            s[j] = (rampwise_state){0, 0, 0, 0};
            ck_assert_int_eq(rampwise_run(&c[j], &s[j], N, p, NULL, NULL), RAMPWISE_OK);
        }
        rampwise_bank *const bank = make_bank(MOST, c, sets[i % SETS]);
        run_in_chunks(r, bank, N, p, NULL);
        check_states(bank, MOST, c, s);
        rampwise_bank_free(bank);
    }
    gsl_rng_free(r);
}
END_TEST

/* Longer than a segment, so that blocks take turns. */
START_TEST(long_record)
{
    enum { LONG = 5000 };
    static double p[LONG];
    gsl_rng *const r = random_make("long_record");
    rampwise_coeffs c[MOST];
    rampwise_state s[MOST];
    random_record(r, p, LONG);
    make_oscillators(c, MOST, 2);
    rampwise_bank *const bank = make_bank(MOST, c, rampwise_instructions(RAMPWISE_FASTEST));
    for (int j = 0; j < MOST; ++j) {
        s[j] = (rampwise_state){0, 0, 0, 0};
        ck_assert_int_eq(rampwise_run(&c[j], &s[j], LONG, p, NULL, NULL), RAMPWISE_OK);
    }
    ck_assert_int_eq(rampwise_bank_run(bank, LONG, p, NULL, NULL), RAMPWISE_OK);
    check_states(bank, MOST, c, s);
    rampwise_bank_free(bank);
    gsl_rng_free(r);
}
END_TEST

START_TEST(histories)
{
    gsl_rng *const r = random_make("histories");
    static double o[4][MOST * N + 1];
    rampwise_coeffs c[MOST];
    double p[N];
    size_t chosen[MOST];
    random_record(r, p, N);
    for (int i = 0; i < SETS * KINDS; ++i) {
        const int set = sets[i % SETS], n = 41;
        if (!runs_here(set))
            continue;
        make_oscillators(c, n, i / SETS);
        rampwise_bank *const bank = make_bank(n, c, set);
        rampwise_bank_wanted wanted;
        rampwise_bank_wanted_init(&wanted);
        wanted.chosen = chosen;
        wanted.chosen_count = 39;
        wanted.history = (rampwise_history){o[0] + 1, o[1] + 1, o[2] + 1, o[3] + 1};
        for (size_t j = 0; j < 39; ++j)
            chosen[j] = j * 5 % 41;
        ck_assert_int_eq(rampwise_bank_run(bank, N, p, &wanted, NULL), RAMPWISE_OK);
        for (size_t j = 0; j < 39; ++j) {
            double alone[4][N];
            const rampwise_history out = {alone[0], alone[1], alone[2], alone[3]};
            rampwise_state s = {0, 0, 0, 0};
            ck_assert_int_eq(rampwise_run(&c[chosen[j]], &s, N, p, &out, NULL), RAMPWISE_OK);
            for (int k = 0; k < 4; ++k)
                ck_assert_mem_eq(o[k] + 1 + j * N, alone[k], sizeof alone[k]);
        }
        rampwise_bank_free(bank);
    }
    gsl_rng_free(r);
}
END_TEST

/* The caller's memory: garbage in it, exactly as large as asked, nothing written beyond it. */
START_TEST(callers_memory)
{
    enum { COUNT = 37 };
    gsl_rng *const r = random_make("callers_memory");
    const size_t size = rampwise_bank_size(COUNT), alignment = rampwise_bank_alignment();
    unsigned char *const all = malloc(size + 3 * alignment);
    unsigned char *const memory = all + alignment - (uintptr_t)all % alignment;
    rampwise_coeffs c[COUNT];
    rampwise_state s[COUNT];
    double p[N];
    make_oscillators(c, COUNT, 0);
    random_record(r, p, N);
    for (int j = 0; j < COUNT; ++j) {
        s[j] = (rampwise_state){0, 0, 0, 0};
        ck_assert_int_eq(rampwise_run(&c[j], &s[j], N, p, NULL, NULL), RAMPWISE_OK);
    }
    for (int i = 0; i < SETS; ++i) {
        rampwise_bank *bank = NULL;
        if (!runs_here(sets[i]))
            continue;
        memset(all, 0xff, size + 3 * alignment); /* NaN in every lane */
        ck_assert_int_eq(rampwise_bank_init(memory, size, COUNT, c, sets[i], &bank), RAMPWISE_OK);
        ck_assert_ptr_eq(bank, memory);
        ck_assert_int_eq(rampwise_bank_run(bank, N, p, NULL, NULL), RAMPWISE_OK);
        check_states(bank, COUNT, c, s);
        for (size_t j = 0; j < alignment; ++j)
            ck_assert(memory[size + j] == 0xff);
    }
    free(all);
    gsl_rng_free(r);
}
END_TEST

START_TEST(set_and_retune)
{
    enum { COUNT = 40 };
    gsl_rng *const r = random_make("set_and_retune");
    rampwise_coeffs c[COUNT];
    rampwise_state s[COUNT];
    double p[N];
    make_oscillators(c, COUNT, 2);
    random_record(r, p, N);
    rampwise_bank *const bank = make_bank(COUNT, c, rampwise_instructions(RAMPWISE_FASTEST));
    for (int j = 0; j < COUNT; ++j)
        s[j] = (rampwise_state){0.1 * j, -0.2 * j, 3, 4};
    ck_assert_int_eq(rampwise_bank_set(bank, s), RAMPWISE_OK);
    check_states(bank, COUNT, c, s);
    const rampwise_coeffs other = made(regime_system(1, 0.6, 0.01), 0.01, 2);
    ck_assert_int_eq(rampwise_bank_run(bank, 100, p, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_retune(bank, 33, &other), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_run(bank, N - 100, p + 100, NULL, NULL), RAMPWISE_OK);
    for (int j = 0; j < COUNT; ++j) {
        ck_assert_int_eq(rampwise_run(&c[j], &s[j], 100, p, NULL, NULL), RAMPWISE_OK);
        c[j] = j == 33 ? other : c[j];
        ck_assert_int_eq(rampwise_run(&c[j], &s[j], N - 100, p + 100, NULL, NULL), RAMPWISE_OK);
    }
    check_states(bank, COUNT, c, s);
    rampwise_bank_free(bank);
    gsl_rng_free(r);
}
END_TEST

/* Oscillators 5 and 36 run away, as rampwise_run says where; the others never notice. */
START_TEST(overflow)
{
    enum { COUNT = 40 };
    gsl_rng *const r = random_make("overflow");
    static double o[COUNT * N];
    double p[N], largest[COUNT];
    random_record(r, p, N);
    for (int i = 0; i < SETS; ++i) {
        rampwise_coeffs c[COUNT];
        rampwise_state s[COUNT];
        rampwise_bank_wanted wanted;
        const size_t chosen[3] = {36, 4, 5};
        size_t bad = 0, first = 0, at[COUNT];
        if (!runs_here(sets[i]))
            continue;
        make_oscillators(c, COUNT, 0);
        c[5] = made((rampwise_system){1, 0, -9e4}, 0.01, 0);
        c[36] = made((rampwise_system){1, 0, -25e4}, 0.01, 0);
        rampwise_bank *const bank = make_bank(COUNT, c, sets[i]);
        rampwise_bank_wanted_init(&wanted);
        wanted.largest = largest;
        wanted.chosen = chosen;
        wanted.chosen_count = 3;
        wanted.history.u = o;
        memset(largest, 0, sizeof largest);
        for (int j = 0; j < COUNT * N; ++j)
            o[j] = -7;
        ck_assert_int_eq(rampwise_bank_run(bank, N, p, &wanted, &bad), RAMPWISE_ERROR_OVERFLOW);
        for (int j = 0; j < COUNT; ++j) {
            at[j] = N;
            s[j] = (rampwise_state){0, 0, 0, 0};
            const int status = rampwise_run(&c[j], &s[j], N, p, NULL, &at[j]);
            ck_assert_int_eq(status, j == 5 || j == 36 ? RAMPWISE_ERROR_OVERFLOW : RAMPWISE_OK);
            s[j].p = p[N - 1];
            s[j].p_before = p[N - 2];
        }
        ck_assert_uint_eq(bad, at[36]);
        ck_assert_uint_eq(rampwise_bank_stopped(bank, &first), 2);
        ck_assert_uint_eq(first, 5);
        rampwise_state got[COUNT];
        ck_assert_int_eq(rampwise_bank_get(bank, got), RAMPWISE_OK);
        ck_assert_mem_eq(got, s, sizeof s);
        ck_assert(largest[36] == fabs(s[36].u) && isfinite(largest[5]) && largest[5] >= fabs(s[5].u));
        ck_assert(o[at[36] - 1] == s[36].u && o[at[36]] == -7 && o[N - 1] == -7);
        ck_assert(o[2 * N + at[5] - 1] == s[5].u && o[2 * N + at[5]] == -7);
        ck_assert(o[2 * N - 1] == s[4].u);
        /* Stopped ones stay, their histories are not written, and their accelerations are not numbers. */
        double a[COUNT];
        const rampwise_history now = {NULL, NULL, a, NULL};
        o[0] = o[2 * N] = -8;
        ck_assert_int_eq(rampwise_bank_run(bank, N, p, &wanted, &bad), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_read(bank, &now), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_get(bank, got), RAMPWISE_OK);
        ck_assert(got[36].u == s[36].u && got[5].v == s[5].v && isnan(a[5]) && isnan(a[36]) && !isnan(a[4]));
        ck_assert(o[0] == -8 && o[2 * N] == -8 && o[N] != -7);
        /* Tuned anew, it goes on. */
        const rampwise_coeffs tame = made(regime_system(1, 0.3, 0.01), 0.01, 0);
        ck_assert_int_eq(rampwise_bank_retune(bank, 5, &tame), RAMPWISE_OK);
        ck_assert_uint_eq(rampwise_bank_stopped(bank, &first), 1);
        ck_assert_uint_eq(first, 36);
        ck_assert_int_eq(rampwise_bank_start(bank, 0), RAMPWISE_OK);
        ck_assert_uint_eq(rampwise_bank_stopped(bank, NULL), 0);
        rampwise_bank_free(bank);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(refusals)
{
    rampwise_coeffs c[3];
    rampwise_bank *bank = NULL;
    _Alignas(64) static unsigned char memory[16384];
    const size_t size = rampwise_bank_size(3);
    make_oscillators(c, 3, 0);
    ck_assert_uint_le(size, sizeof memory);
    ck_assert_uint_eq(rampwise_bank_size(0), 0);
    ck_assert_uint_eq(rampwise_bank_size(SIZE_MAX), 0);
    ck_assert_uint_eq(rampwise_bank_size(SIZE_MAX / 300), 0);
    const int any = RAMPWISE_FASTEST;
    ck_assert_int_eq(rampwise_bank_init(NULL, size, 3, c, any, &bank), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_init(memory, size, 3, NULL, any, &bank), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_init(memory, size, 3, c, any, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_init(memory, size - 1, 3, c, any, &bank), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(rampwise_bank_init(memory + 8, size, 3, c, any, &bank), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(rampwise_bank_init(memory, size, 0, c, any, &bank), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_bank_init(memory, size, 3, c, 40, &bank), RAMPWISE_ERROR_INSTRUCTIONS);
    ck_assert_int_eq(rampwise_bank_create(0, c, any, &bank), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_bank_create(3, NULL, any, &bank), RAMPWISE_ERROR_MISSING);
    rampwise_coeffs odd[3] = {c[0], c[1], c[2]};
    odd[2].dt = 0.02;
    ck_assert_int_eq(rampwise_bank_create(3, odd, any, &bank), RAMPWISE_ERROR_DIFFERENT);
    odd[2] = made(c[2].system, 0.01, 1);
    ck_assert_int_eq(rampwise_bank_create(3, odd, any, &bank), RAMPWISE_ERROR_DIFFERENT);
    memset(&odd[1], 0, sizeof odd[1]);
    ck_assert_int_eq(rampwise_bank_create(3, odd, any, &bank), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_ptr_null(bank);
    rampwise_bank_free(NULL);
    ck_assert_uint_eq(rampwise_bank_count(NULL), 0);
    ck_assert_uint_eq(rampwise_bank_stopped(NULL, NULL), 0);
    ck_assert_int_eq(rampwise_instructions(0), RAMPWISE_ERROR_INSTRUCTIONS);
}
END_TEST

START_TEST(refusals_of_a_bank)
{
    rampwise_coeffs c[3];
    rampwise_bank_wanted wanted;
    size_t bad = 77;
    const size_t chosen = 3;
    double p[4] = {1, 2, NAN, 4};
    make_oscillators(c, 3, 0);
    rampwise_bank *const bank = make_bank(3, c, rampwise_instructions(RAMPWISE_FASTEST));
    rampwise_state s[3] = {{1, 2, 3, 4}, {5, 6, 3, 4}, {7, 8, 3, 4}}, before[3], after[3];
    ck_assert_int_eq(rampwise_bank_set(bank, s), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_get(bank, before), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_run(bank, 4, p, NULL, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert_int_eq(rampwise_bank_run(bank, 4, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_run(NULL, 4, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_run(bank, 0, NULL, NULL, NULL), RAMPWISE_OK);
    rampwise_bank_wanted_init(&wanted);
    wanted.chosen_count = 1;
    ck_assert_int_eq(rampwise_bank_run(bank, 2, p, &wanted, NULL), RAMPWISE_ERROR_MISSING);
    wanted.chosen = &chosen;
    ck_assert_int_eq(rampwise_bank_run(bank, 2, p, &wanted, NULL), RAMPWISE_ERROR_COUNT);
    wanted.size = 0;
    ck_assert_int_eq(rampwise_bank_run(bank, 2, p, &wanted, NULL), RAMPWISE_ERROR_COUNT);
    s[1].p = 9;
    ck_assert_int_eq(rampwise_bank_set(bank, s), RAMPWISE_ERROR_DIFFERENT);
    s[1] = (rampwise_state){NAN, 0, 3, 4};
    ck_assert_int_eq(rampwise_bank_set(bank, s), RAMPWISE_ERROR_STATE);
    ck_assert_int_eq(rampwise_bank_set(bank, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_get(bank, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_read(bank, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_start(bank, INFINITY), RAMPWISE_ERROR_SAMPLE);
    ck_assert_int_eq(rampwise_bank_start(NULL, 0), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_retune(bank, 3, &c[0]), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_bank_retune(bank, 0, NULL), RAMPWISE_ERROR_MISSING);
    const rampwise_coeffs other = made(c[0].system, 0.02, 0), never_made = {0};
    ck_assert_int_eq(rampwise_bank_retune(bank, 0, &other), RAMPWISE_ERROR_DIFFERENT);
    ck_assert_int_eq(rampwise_bank_retune(bank, 0, &never_made), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_bank_get(bank, after), RAMPWISE_OK);
    ck_assert_mem_eq(before, after, sizeof before);
    rampwise_bank_free(bank);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, every_set_and_tail);
    tcase_add_test(tests, same_silence);
    tcase_add_test(tests, long_record);
    tcase_add_test(tests, histories);
    tcase_add_test(tests, callers_memory);
    tcase_add_test(tests, set_and_retune);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, refusals_of_a_bank);
}

int main(void)
{
    return suite_run("banks", add_tests);
}
