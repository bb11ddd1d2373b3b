/* This library in single precision: one oscillator at a time, and banks of 1,000 on each set of instructions. */
#include <stdio.h>
#include "methods.h"

/* The case, its load rounded to floats; repetitions of a walk go through all oscillators in turn. */
typedef struct single_case {
    float p[CASE_SAMPLES], u[CASE_SAMPLES], largest[CASE_OSCILLATORS];
    rampwise_coeffs_f32 c[CASE_OSCILLATORS];
} single_case;

typedef struct walked {
    single_case *in;
    void (*walk)(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p, float *u);
    size_t next;
} walked;

typedef struct banked {
    single_case *in;
    rampwise_bank_f32 *bank;
    int gathering;
} banked;

static single_case *make_case(const bench_case *in)
{
    single_case *const made = case_memory(sizeof *made);
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        made->p[i] = (float)in->p[i];
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j)
        if (rampwise_coeffs_make_f32(&made->c[j], &in->sys[j], CASE_DT, RAMPWISE_FORCE, RAMPWISE_RAMP) !=
            RAMPWISE_OK)
            fprintf(stderr, "bench: no coefficients in single precision\n");
    return made;
}

static void run_to_history(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p,
                           float *u)
{
    const rampwise_history_f32 out = {.u = u};
    (void)rampwise_run_f32(c, s, n, p, &out, NULL);
}

static void walk(const walked *w, size_t j)
{
    rampwise_state_f32 s;
    rampwise_start_f32(&s, 0, 0, 0);
    w->walk(&w->in->c[j], &s, CASE_SAMPLES, w->in->p, w->in->u);
}

static void walk_once(void *self)
{
    walked *const w = self;
    walk(w, w->next);
    w->next = (w->next + 1) % CASE_OSCILLATORS;
}

static size_t walked_history(void *self, size_t j, double *u)
{
    const walked *const w = self;
    walk(w, j);
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        u[i] = w->in->u[i];
    return CASE_SAMPLES;
}

static void bank_once(void *self)
{
    const banked *const b = self;
    rampwise_bank_wanted_f32 wanted;
    rampwise_bank_wanted_init_f32(&wanted);
    wanted.largest = b->gathering ? b->in->largest : NULL;
    (void)rampwise_bank_run_f32(b->bank, CASE_SAMPLES, b->in->p, &wanted, NULL);
}

/* The histories of one oscillator, from rest. */
static size_t bank_history(void *self, size_t j, double *u)
{
    const banked *const b = self;
    rampwise_bank_wanted_f32 wanted;
    rampwise_bank_wanted_init_f32(&wanted);
    wanted.chosen_count = 1;
    wanted.chosen = &j;
    wanted.history.u = b->in->u;
    if (rampwise_bank_start_f32(b->bank, 0) != RAMPWISE_OK ||
        rampwise_bank_run_f32(b->bank, CASE_SAMPLES, b->in->p, &wanted, NULL) != RAMPWISE_OK)
        return 0;
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        u[i] = b->in->u[i];
    return CASE_SAMPLES;
}

static void add_walks(task_list *list, single_case *in)
{
    static const struct {
        const char *id, *name;
        void (*walk)(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p, float *u);
    } kinds[] = {
        {"inline_step_f32_fused", "rampwise_step_f32 inline, hw. fma", inline_step_f32_fused},
        {"inline_step_f32_plain", "rampwise_step_f32 inline, plain", inline_step_f32_plain},
        {"run_f32_history", "rampwise_run_f32", run_to_history},
    };
    for (size_t i = 0; i < sizeof kinds / sizeof *kinds; ++i) {
        walked *const w = case_memory(sizeof *w);
        *w = (walked){in, kinds[i].walk, 0};
        task_add(list, (task){.kind = TASK_METHOD,
                              .id = kinds[i].id,
                              .name = kinds[i].name,
                              .gives = "u",
                              .units = CASE_SAMPLES,
                              .self = w,
                              .once = walk_once,
                              .history = walked_history});
    }
}

static void add_bank(task_list *list, single_case *in, const char *id, const char *name, int set,
                     int gathering)
{
    banked *const b = case_memory(sizeof *b);
    *b = (banked){in, NULL, gathering};
    if (rampwise_bank_create_f32(CASE_OSCILLATORS, in->c, set, &b->bank) != RAMPWISE_OK)
        fprintf(stderr, "bench: no bank in single precision\n");
    task_add(list, (task){.kind = TASK_METHOD,
                          .id = id,
                          .name = name,
                          .gives = gathering ? "largest |u|" : "last state",
                          .units = (double)CASE_OSCILLATORS * CASE_SAMPLES,
                          .self = b,
                          .once = bank_once,
                          .slow = set == RAMPWISE_BASELINE,
                          .history = set == RAMPWISE_FASTEST && gathering ? bank_history : NULL});
}

static void add_banks(task_list *list, single_case *in)
{
    static const struct {
        int set;
        const char *name, *id, *id_largest;
    } sets[] = {
        {RAMPWISE_BASELINE, "bank_f32, baseline", "bank_f32_baseline", "bank_f32_baseline_largest"},
        {RAMPWISE_AVX2, "bank_f32, AVX2", "bank_f32_avx2", "bank_f32_avx2_largest"},
        {RAMPWISE_AVX512, "bank_f32, AVX-512", "bank_f32_avx512", "bank_f32_avx512_largest"},
        {RAMPWISE_NEON, "bank_f32, NEON", "bank_f32_neon", "bank_f32_neon_largest"},
    };
    for (size_t i = 0; i < sizeof sets / sizeof *sets; ++i) {
        if (rampwise_instructions(sets[i].set) != sets[i].set)
            continue;
        add_bank(list, in, sets[i].id, sets[i].name, sets[i].set, 0);
        add_bank(list, in, sets[i].id_largest, sets[i].name, sets[i].set, 1);
    }
}

void ours_f32_tasks(task_list *list, const bench_case *in)
{
    single_case *const single = make_case(in);
    add_walks(list, single);
    add_bank(list, single, "bank_f32", "bank of 1,000, single precision", RAMPWISE_FASTEST, 1);
    add_banks(list, single);
}
