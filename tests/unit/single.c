/* Single precision: on every instruction set that runs here, in every way to take a record, the bits of
   rampwise_step_f32; silence, refusals, overflow, starts, motion; and its error against double. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MOST = 70, N = 300 };
static const float GUARD = -12345.0f;

static rampwise_coeffs_f32 made_f32(rampwise_system sys, double dt, int kind)
{
    rampwise_coeffs_f32 c;
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &sys, dt, kinds[kind][0], kinds[kind][1]), RAMPWISE_OK);
    return c;
}

/* n oscillators of the stable regimes and all lengths of period under one kind of input. */
static void make_oscillators(rampwise_coeffs_f32 *c, int n, int kind)
{
    for (int i = 0; i < n; ++i) {
        rampwise_system sys = regime_system(i % 7, 1e-4 * pow(1.2, i % 60), 0.01);
        if (kind == KINDS - 1)
            sys.damper = 0;
        c[i] = made_f32(sys, 0.01, kind);
    }
}

/* A record in [-1, 1) with a pause of exact zeros. */
static void single_record(gsl_rng *r, float *p, int n)
{
    for (int i = 0; i < n; ++i)
        p[i] = i > n / 3 && i < n / 2 ? 0.0f : (float)random_between(r, -1, 1);
}

/* Samples around the limit of silence, 2^-90, zeros among them. */
static void single_whisper(gsl_rng *r, float *p, int n)
{
    for (int i = 0; i < n; ++i)
        p[i] = i % 3 == 0 ? 0.0f : (float)(random_sign(r) * exp2(random_between(r, -100, -88)));
}

typedef struct answers {
    float u[N], v[N], a[N], total[N];
} answers;

/* The recurrence of step.h written again, with fmaf of the C library. */
static void by_the_equations(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, float p1)
{
    const float x = fmaf(c->C, s->p, c->D * p1), y = fmaf(c->Cp, s->p, c->Dp * p1);
    const float du = fmaf(c->A_minus_1, s->u, fmaf(c->B, s->v, x)) + s->u_low;
    const float dv = fmaf(c->Ap, s->u, fmaf(c->Bp_minus_1, s->v, y)) + s->v_low;
    volatile float u = s->u + du, v = s->v + dv;
    volatile float u_gained = u - s->u, v_gained = v - s->v;
    const int silent = fabsf(s->p) < 0x1p-90f && fabsf(p1) < 0x1p-90f;
    const int u_spent = silent && fabsf(u) < 0x1p-100f, v_spent = silent && fabsf(v) < 0x1p-100f;
    *s = (rampwise_state_f32){
        u_spent ? 0 : u, v_spent ? 0 : v, p1, s->p, u_spent ? 0 : du - u_gained, v_spent ? 0 : dv - v_gained};
}

static rampwise_state_f32 stepped(const rampwise_coeffs_f32 *c, const float *p, answers *o)
{
    rampwise_state_f32 s, again;
    rampwise_start_f32(&s, 0.25f, -0.5f, p[0]);
    o->u[0] = s.u;
    o->v[0] = s.v;
    o->a[0] = rampwise_acceleration_f32(c, &s);
    o->total[0] = rampwise_total_acceleration_f32(c, &s);
    for (int i = 1; i < N; ++i) {
        again = s;
        rampwise_step_f32(c, &s, p[i]);
        by_the_equations(c, &again, p[i]);
        ck_assert_mem_eq(&s, &again, sizeof s);
        o->u[i] = s.u;
        o->v[i] = s.v;
        o->a[i] = rampwise_acceleration_f32(c, &s);
        o->total[i] = rampwise_total_acceleration_f32(c, &s);
    }
    return s;
}

START_TEST(run_and_solve)
{
    gsl_rng *const r = random_make("run_and_solve");
    float p[N], o[4][N + 2];
    const rampwise_history_f32 out = {o[0] + 1, o[1] + 1, o[2] + 1, o[3] + 1};
    for (int i = 0; i < 50 * KINDS; ++i) {
        rampwise_coeffs_f32 c[MOST];
        answers expected;
        make_oscillators(c, i % MOST + 1, i % KINDS);
        const rampwise_coeffs_f32 *const one = &c[i % MOST];
        (i % 5 == 0 ? single_whisper : single_record)(r, p, N);
        const rampwise_state_f32 end = stepped(one, p, &expected);
        for (int k = 0; k < 4; ++k)
            for (int j = 0; j < N + 2; ++j)
                o[k][j] = GUARD;
        ck_assert_int_eq(rampwise_solve_f32(one, 0.25f, -0.5f, N, p, &out, NULL), RAMPWISE_OK);
        ck_assert_mem_eq(out.u, expected.u, sizeof expected.u);
        ck_assert_mem_eq(out.v, expected.v, sizeof expected.v);
        ck_assert_mem_eq(out.a, expected.a, sizeof expected.a);
        ck_assert_mem_eq(out.total, expected.total, sizeof expected.total);
        for (int k = 0; k < 4; ++k)
            ck_assert(o[k][0] == GUARD && o[k][N + 1] == GUARD);
        rampwise_state_f32 s;
        rampwise_start_f32(&s, 0.25f, -0.5f, p[0]);
        for (int done = 1, n = 0; done < N; done += n) {
            n = (int)gsl_rng_uniform_int(r, 40);
            n = n > N - done ? N - done : n;
            float *const place = p + done; /* in place */
            const rampwise_history_f32 onto = {place, NULL, NULL, NULL};
            ck_assert_int_eq(rampwise_run_f32(one, &s, (size_t)n, place, &onto, NULL), RAMPWISE_OK);
            ck_assert_mem_eq(place, expected.u + done, (size_t)n * sizeof *place);
        }
        ck_assert_mem_eq(&s, &end, sizeof s);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(banks)
{
    gsl_rng *const r = random_make("banks");
    static float histories[4][MOST * N + 1];
    float p[N], largest[MOST + 1], now[4][MOST];
    const rampwise_history_f32 at = {now[0], now[1], now[2], now[3]};
    for (int i = 0; i < SETS; ++i)
        for (int n = 1; n <= MOST && runs_here(sets[i]); ++n) {
            rampwise_coeffs_f32 c[MOST];
            rampwise_state_f32 s[MOST], got[MOST];
            answers expected[MOST];
            size_t chosen[MOST];
            rampwise_bank_wanted_f32 wanted;
            rampwise_bank_f32 *bank;
            make_oscillators(c, n, n % KINDS);
            (n % 4 == 0 ? single_whisper : single_record)(r, p, N);
            ck_assert_int_eq(rampwise_bank_create_f32((size_t)n, c, sets[i], &bank), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_bank_instructions_f32(bank), sets[i]);
            ck_assert_uint_eq(rampwise_bank_count_f32(bank), (size_t)n);
            for (int j = 0; j < n; ++j) {
                chosen[j] = (size_t)(n - 1 - j);
                rampwise_start_f32(&s[j], 0.25f, -0.5f, p[0]);
            }
            ck_assert_int_eq(rampwise_bank_set_f32(bank, s), RAMPWISE_OK);
            for (int j = 0; j < n; ++j)
                s[j] = stepped(&c[j], p, &expected[j]);
            rampwise_bank_wanted_init_f32(&wanted);
            wanted.largest = largest;
            for (int j = 0; j <= n; ++j)
                largest[j] = j < n ? 0.25f : GUARD;
            wanted.chosen = chosen;
            wanted.chosen_count = (size_t)n;
            wanted.history = (rampwise_history_f32){histories[0], histories[1], histories[2], histories[3]};
            for (int k = 0; k < 4; ++k)
                histories[k][n * (N - 1)] = GUARD;
            ck_assert_int_eq(rampwise_bank_run_f32(bank, N - 1, p + 1, &wanted, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_bank_get_f32(bank, got), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_bank_read_f32(bank, &at), RAMPWISE_OK);
            ck_assert_mem_eq(got, s, (size_t)n * sizeof *s);
            ck_assert(largest[n] == GUARD);
            for (int k = 0; k < 4; ++k)
                ck_assert(histories[k][n * (N - 1)] == GUARD);
            for (int j = 0; j < n; ++j) {
                const answers *const e = &expected[j];
                const size_t row = (size_t)(n - 1 - j) * (N - 1), bytes = (N - 1) * sizeof(float);
                float top = 0.25f;
                for (int k = 1; k < N; ++k)
                    top = fmaxf(top, fabsf(e->u[k]));
                ck_assert(largest[j] == top);
                ck_assert_mem_eq(histories[0] + row, e->u + 1, bytes);
                ck_assert_mem_eq(histories[1] + row, e->v + 1, bytes);
                ck_assert_mem_eq(histories[2] + row, e->a + 1, bytes);
                ck_assert_mem_eq(histories[3] + row, e->total + 1, bytes);
                ck_assert(now[0][j] == s[j].u && now[1][j] == s[j].v);
                ck_assert(now[2][j] == e->a[N - 1] && now[3][j] == e->total[N - 1]);
            }
            rampwise_bank_free_f32(bank);
        }
    gsl_rng_free(r);
}
END_TEST

/* One oscillator grows beyond the range while the others go on; retuned, it goes again. */
START_TEST(bank_overflow)
{
    enum { COUNT = 37, GROWING = 20 };
    for (int i = 0; i < SETS; ++i) {
        rampwise_coeffs_f32 c[COUNT];
        float p[N];
        size_t bad = 0, first = 0, alone = 0;
        rampwise_bank_f32 *bank;
        rampwise_state_f32 s = {0}, got[COUNT];
        if (!runs_here(sets[i]))
            continue;
        make_oscillators(c, COUNT, 0);
        c[GROWING] = made_f32((rampwise_system){1, 0, -1e4}, 0.01, 0);
        for (int j = 0; j < N; ++j)
            p[j] = 1;
        ck_assert_int_eq(rampwise_bank_create_f32(COUNT, c, sets[i], &bank), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_bank_run_f32(bank, N, p, NULL, &bad), RAMPWISE_ERROR_OVERFLOW);
        ck_assert_int_eq(rampwise_run_f32(&c[GROWING], &s, N, p, NULL, &alone), RAMPWISE_ERROR_OVERFLOW);
        ck_assert_uint_eq(bad, alone);
        ck_assert_uint_gt(bad, 50); /* e^88 is the largest float */
        ck_assert_uint_lt(bad, 130);
        ck_assert_uint_eq(rampwise_bank_stopped_f32(bank, &first), 1);
        ck_assert_uint_eq(first, GROWING);
        ck_assert_int_eq(rampwise_bank_get_f32(bank, got), RAMPWISE_OK);
        ck_assert(got[GROWING].u == s.u && got[GROWING].v == s.v && got[GROWING].u_low == s.u_low);
        s = (rampwise_state_f32){0};
        ck_assert_int_eq(rampwise_run_f32(&c[GROWING + 1], &s, N, p, NULL, NULL), RAMPWISE_OK);
        ck_assert_mem_eq(&got[GROWING + 1], &s, sizeof s);
        ck_assert_int_eq(rampwise_bank_retune_f32(bank, GROWING, &c[0]), RAMPWISE_OK);
        ck_assert_uint_eq(rampwise_bank_stopped_f32(bank, NULL), 0);
        rampwise_bank_free_f32(bank);
    }
}
END_TEST

START_TEST(bank_refusals)
{
    rampwise_coeffs_f32 c[2];
    const rampwise_state_f32 apart[2] = {{.p = 1}, {.p = 2}}, infinite[2] = {{.u_low = INFINITY}};
    rampwise_bank_wanted_f32 wanted = {0};
    rampwise_bank_f32 *bank = NULL;
    const float p[2] = {0, NAN};
    size_t bad = 7;
    make_oscillators(c, 2, 0);
    ck_assert_uint_eq(rampwise_bank_size_f32(0), 0);
    ck_assert_uint_eq(rampwise_bank_size_f32(SIZE_MAX), 0);
    ck_assert_int_eq(rampwise_bank_create_f32(2, NULL, RAMPWISE_FASTEST, &bank), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_bank_create_f32(2, c, RAMPWISE_RAMP, &bank), RAMPWISE_ERROR_INSTRUCTIONS);
    c[1].dt = 0.02;
    ck_assert_int_eq(rampwise_bank_create_f32(2, c, RAMPWISE_FASTEST, &bank), RAMPWISE_ERROR_DIFFERENT);
    c[1].input = 0;
    ck_assert_int_eq(rampwise_bank_create_f32(2, c, RAMPWISE_FASTEST, &bank), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_ptr_null(bank);
    make_oscillators(c, 2, 0);
    const size_t size = rampwise_bank_size_f32(2);
    unsigned char *const memory = aligned_alloc(rampwise_bank_alignment_f32(), size);
    ck_assert_int_eq(rampwise_bank_init_f32(memory, size - 1, 2, c, RAMPWISE_FASTEST, &bank),
                     RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(rampwise_bank_init_f32(memory, size, 2, c, RAMPWISE_FASTEST, &bank), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_bank_set_f32(bank, apart), RAMPWISE_ERROR_DIFFERENT);
    ck_assert_int_eq(rampwise_bank_set_f32(bank, infinite), RAMPWISE_ERROR_STATE);
    ck_assert_int_eq(rampwise_bank_start_f32(bank, NAN), RAMPWISE_ERROR_SAMPLE);
    ck_assert_int_eq(rampwise_bank_retune_f32(bank, 2, c), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_bank_run_f32(bank, 2, p, NULL, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 1);
    ck_assert_int_eq(rampwise_bank_run_f32(bank, 1, p, &wanted, NULL), RAMPWISE_ERROR_COUNT);
    free(memory);
}
END_TEST

START_TEST(refusals)
{
    const rampwise_coeffs_f32 never_made = {0}, c = made_f32(regime_system(1, 0.3, 0.01), 0.01, 0);
    const rampwise_state_f32 before = {1, 2, 3, 4, 0, 0};
    rampwise_state_f32 s = before;
    const float p[3] = {1, 2, INFINITY};
    float u[3] = {GUARD, GUARD, GUARD};
    const rampwise_history_f32 out = {u, NULL, NULL, NULL};
    size_t bad = 7;
    ck_assert_int_eq(rampwise_run_f32(NULL, &s, 3, p, &out, &bad), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_f32(&c, NULL, 3, p, &out, &bad), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_f32(&c, &s, 3, NULL, &out, &bad), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_run_f32(&never_made, &s, 3, p, &out, &bad), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_solve_f32(&never_made, 0, 0, 3, p, &out, &bad), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_solve_f32(&c, NAN, 0, 3, p, &out, &bad), RAMPWISE_ERROR_STATE);
    ck_assert_uint_eq(bad, 7);
    ck_assert_int_eq(rampwise_run_f32(&c, &s, 3, p, &out, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert(u[0] == GUARD && u[1] == GUARD && u[2] == GUARD);
    ck_assert_mem_eq(&s, &before, sizeof s);
    s.v_low = NAN;
    ck_assert_int_eq(rampwise_run_f32(&c, &s, 2, p, &out, &bad), RAMPWISE_ERROR_STATE);
}
END_TEST

START_TEST(settled)
{
    rampwise_state_f32 s = {9, 9, 9, 9, 9, 9};
    for (int kind = 0; kind < KINDS; ++kind) {
        /* k/m and m/k are powers of two: the answers are exact */
        const rampwise_coeffs_f32 c = made_f32((rampwise_system){2, 0, 8}, 0.25, kind);
        const float u0[] = {3 / 8.0f, -3 / 4.0f, 0, 3};
        ck_assert_int_eq(rampwise_start_settled_f32(&c, &s, 3), RAMPWISE_OK);
        ck_assert(s.u == u0[c.input - RAMPWISE_FORCE] && s.v == 0 && s.p == 3 && s.p_before == 3);
        ck_assert(s.u_low == 0 && s.v_low == 0);
    }
    const rampwise_coeffs_f32 never_made = {0}, loose = made_f32((rampwise_system){1, 1, 0}, 0.1, 0);
    const rampwise_coeffs_f32 soft = made_f32((rampwise_system){1, 1, 1e-30}, 0.1, 0);
    const rampwise_state_f32 before = s;
    ck_assert_int_eq(rampwise_start_settled_f32(NULL, &s, 0), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_start_settled_f32(&never_made, &s, 0), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_start_settled_f32(&loose, &s, NAN), RAMPWISE_ERROR_SAMPLE);
    ck_assert_int_eq(rampwise_start_settled_f32(&loose, &s, 1), RAMPWISE_ERROR_NO_REST);
    ck_assert_int_eq(rampwise_start_settled_f32(&soft, &s, FLT_MAX), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_mem_eq(&s, &before, sizeof s);
}
END_TEST

/* As in double, of the same state: each answer is a few roundings of sizes up to the terms'. */
START_TEST(motion_as_in_double)
{
    gsl_rng *const r = random_make("motion_as_in_double");
    for (int i = 0; i < 20000; ++i) {
        const double dt = random_log(r, 1e-3, 1e1);
        rampwise_system sys = regime_system(i % REGIMES, random_log(r, 1e-3, 3), dt);
        const int kind = i / REGIMES % KINDS;
        if (!kind_allowed(&sys, kind))
            continue;
        const rampwise_coeffs d = made(sys, dt, kind);
        const rampwise_coeffs_f32 c = made_f32(sys, dt, kind);
        rampwise_state_f32 s;
        rampwise_start_f32(&s, (float)random_between(r, -1, 1), (float)random_between(r, -1, 1),
                           (float)random_between(r, -1, 1));
        s.p_before = (float)random_between(r, -1, 1);
        const rampwise_state same = {s.u, s.v, s.p, s.p_before};
        const double k = fabs(sys.stiffness), damper = fabs(sys.damper);
        const double slope = fabs(same.p - same.p_before) / dt;
        const double terms = (k * fabs(same.u) + damper * fabs(same.v)) / sys.mass +
                             (k / sys.mass + 1 / sys.mass + 1) * fabs(same.p) +
                             (damper / sys.mass + 1) * slope;
        const double eps = 4 * FLT_EPSILON;
        ck_assert_double_le(fabs(rampwise_acceleration_f32(&c, &s) - rampwise_acceleration(&d, &same)),
                            eps * terms);
        ck_assert_double_le(
            fabs(rampwise_total_acceleration_f32(&c, &s) - rampwise_total_acceleration(&d, &same)),
            eps * terms);
        ck_assert_double_le(
            fabs(rampwise_relative_displacement_f32(&c, &s) - rampwise_relative_displacement(&d, &same)),
            eps * 2);
        ck_assert_double_le(
            fabs(rampwise_relative_velocity_f32(&c, &s) - rampwise_relative_velocity(&d, &same)),
            eps * (1 + slope));
        ck_assert_double_le(fabs(rampwise_spring_force_f32(&c, &s) - rampwise_spring_force(&d, &same)),
                            eps * k * 2);
        ck_assert_double_le(fabs(rampwise_damper_force_f32(&c, &s) - rampwise_damper_force(&d, &same)),
                            eps * damper * (1 + slope));
    }
    gsl_rng_free(r);
}
END_TEST

/* The decimal literals of the header are the powers of two they stand for. */
START_TEST(silence_limits)
{
    const rampwise_coeffs_f32 c = made_f32((rampwise_system){1, 0, 0}, 1, 0);
    const float spent = 0x1p-100f, silent = 0x1p-90f;
    for (int sign = -1; sign <= 1; sign += 2) {
        const float signum = (float)sign;
        rampwise_state_f32 s = {.u = signum * spent, .v_low = 0x1p-140f};
        rampwise_step_f32(&c, &s, 0);
        ck_assert(s.u == signum * spent + 0x1p-140f && s.v == 0 && s.v_low == 0);
        s = (rampwise_state_f32){.u = signum * nextafterf(spent, 0), .v = -0.0f, .u_low = 0x1p-126f};
        s.u = signum * 0x1.fp-101f;
        rampwise_step_f32(&c, &s, -0.0f);
        ck_assert(s.u == 0 && !signbit(s.u) && s.v == 0 && !signbit(s.v) && s.u_low == 0);
        s = (rampwise_state_f32){.u = signum * nextafterf(spent, 0)};
        rampwise_step_f32(&c, &s, 0);
        ck_assert(s.u == 0 && !signbit(s.u));
        s = (rampwise_state_f32){.p = signum * silent};
        rampwise_step_f32(&c, &s, 0);
        ck_assert(s.u == signum * c.C * silent);
        s = (rampwise_state_f32){.v = signum * 0x1p-110f};
        rampwise_step_f32(&c, &s, signum * silent);
        ck_assert(s.v == signum * (c.Dp * silent + 0x1p-110f));
    }
}
END_TEST

/* A damped oscillator left alone comes to exact rest: 10 Hz, 5 %, exp(-zeta omega t) = 2^-100 after 22 s. */
START_TEST(comes_to_rest)
{
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_hertz(&sys, 10, 0.05), RAMPWISE_OK);
    const rampwise_coeffs_f32 c = made_f32(sys, 1e-3, 0);
    rampwise_state_f32 s;
    long steps = 0;
    rampwise_start_f32(&s, 1, 0, 0);
    for (; (s.u != 0 || s.v != 0) && steps < 100000; ++steps)
        rampwise_step_f32(&c, &s, 0);
    ck_assert_int_gt(steps, 20000);
    ck_assert_int_lt(steps, 26000);
    ck_assert(s.u_low == 0 && s.v_low == 0);
}
END_TEST

START_TEST(beyond_the_range)
{
    rampwise_coeffs_f32 c, before;
    const rampwise_system heavy = {1e40, 0, 1e40}, light = {1e-40, 0, 1e-40}, good = {1, 0, 1};
    memset(&before, 0x55, sizeof before);
    c = before;
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &heavy, 1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &light, 1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &good, 1e-40, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &good, -1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_INTERVAL);
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, &good, 1, RAMPWISE_RAMP, RAMPWISE_FORCE),
                     RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(rampwise_coeffs_make_f32(NULL, &good, 1, RAMPWISE_FORCE, RAMPWISE_RAMP),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_mem_eq(&c, &before, sizeof c);
}
END_TEST

/* The increments of step.h in double, with the coefficients in q. */
static void double_step(const double *q, double *u, double *v, double p, double p1)
{
    const double du = fma(q[8], *u, fma(q[1], *v, fma(q[2], p, q[3] * p1)));
    const double dv = fma(q[4], *u, fma(q[9], *v, fma(q[6], p, q[7] * p1)));
    *u += du;
    *v += dv;
}

/* The largest errors over n samples in units of the peak, against exact coefficients and the rounded ones. */
static void errors(gsl_rng *r, double theta, double zeta, int sine, long n, double *exact, double *rounded)
{
    const rampwise_system sys = {1, 2 * zeta * theta, theta * theta};
    const rampwise_coeffs d = made(sys, 1, 2);
    const rampwise_coeffs_f32 c = made_f32(sys, 1, 2);
    double q[10], u = 0, v = 0, u_rounded = 0, v_rounded = 0, peak = 0, phase = 0;
    rampwise_state_f32 s = {0};
    for (int i = 0; i < 10; ++i)
        q[i] = (&c.A)[i];
    *exact = *rounded = 0;
    for (long i = 0; i < n; ++i) {
        phase = fmod(phase + theta, 8 * atan(1));
        const float p1 = sine ? sinf((float)phase) : (float)random_between(r, -1, 1);
        double_step(&d.A, &u, &v, s.p, p1);
        double_step(q, &u_rounded, &v_rounded, s.p, p1);
        rampwise_step_f32(&c, &s, p1);
        peak = fmax(peak, fabs(u));
        *exact = fmax(*exact, fabs(s.u - u));
        *rounded = fmax(*rounded, fabs(s.u - u_rounded));
    }
    *exact /= peak;
    *rounded /= peak;
}

/* The promise of step.h. Double is exact beside these bounds (its own error is below 1e-13). Above zeta = 5 %
   the roundings of single steps count more than the coefficients, and the limit for 5 % stays.
   RAMPWISE_SAMPLES in the environment sets how many samples; the promise is for 2,000,000. */
START_TEST(error_after_many_samples)
{
    static const double zetas[] = {0.005, 0.01, 0.02, 0.05, 0.2, 1};
    static const double thetas[] = {1e-6, 1e-5, 1e-4, 1e-3, 1e-2, 0.1, 0.3, 1, 2, 3};
    gsl_rng *const r = random_make("error_after_many_samples");
    const char *const given = getenv("RAMPWISE_SAMPLES");
    const long n = given != NULL ? atol(given) : 30000;
    for (size_t i = 0; i < sizeof zetas / sizeof *zetas; ++i)
        for (size_t j = 0; j < sizeof thetas / sizeof *thetas; ++j)
            for (int sine = 0; sine < 2; ++sine) {
                double exact, rounded;
                errors(r, thetas[j], zetas[i], sine, n, &exact, &rounded);
                if (given != NULL)
                    printf("zeta %g theta %g %s: %.2e, with rounded coefficients %.2e\n", zetas[i], thetas[j],
                           sine ? "sine" : "random", exact, rounded);
                ck_assert_double_le(exact, 1e-7 / fmin(zetas[i], 0.05));
                ck_assert_double_le(rounded, sine ? 2e-6 : 1e-6);
            }
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, run_and_solve);
    tcase_add_test(tests, banks);
    tcase_add_test(tests, bank_overflow);
    tcase_add_test(tests, bank_refusals);
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, settled);
    tcase_add_test(tests, motion_as_in_double);
    tcase_add_test(tests, silence_limits);
    tcase_add_test(tests, comes_to_rest);
    tcase_add_test(tests, beyond_the_range);
    tcase_add_test(tests, error_after_many_samples);
}

int main(void)
{
    return suite_run("single precision", add_tests);
}
