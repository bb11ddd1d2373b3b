/* This library, one oscillator at a time: the inline step and rampwise_run. */
#include <math.h>
#include "methods.h"

/* Repetitions go through all oscillators in turn. */
typedef struct single {
    const bench_case *in;
    void (*walk)(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u);
    double u[CASE_SAMPLES];
    size_t next;
} single;

static void run_to_state(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u)
{
    (void)u;
    (void)rampwise_run(c, s, n, p, NULL, NULL);
}

static void run_to_history(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u)
{
    const rampwise_history out = {.u = u};
    (void)rampwise_run(c, s, n, p, &out, NULL);
}

static void walk(const single *s, size_t j, double *u, rampwise_state *state)
{
    rampwise_start(state, 0, 0, 0);
    s->walk(&s->in->c[j], state, CASE_SAMPLES, s->in->p, u);
}

static void once(void *self)
{
    single *const s = self;
    rampwise_state state;
    walk(s, s->next, s->u, &state);
    s->next = (s->next + 1) % CASE_OSCILLATORS;
}

static size_t history(void *self, size_t j, double *u)
{
    rampwise_state state;
    walk(self, j, u, &state);
    return CASE_SAMPLES;
}

static int same_bits(void *self, const outcome *run)
{
    single *const s = self;
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j) {
        rampwise_state state;
        walk(s, j, s->u, &state);
        if (state.u != run[j].u || state.v != run[j].v)
            return 0;
    }
    return 1;
}

void ours_outcomes(const bench_case *in, outcome *run)
{
    single *const s = case_memory(sizeof *s);
    s->in = in;
    s->walk = run_to_history;
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j) {
        rampwise_state state;
        walk(s, j, s->u, &state);
        run[j] = (outcome){state.u, state.v, 0};
        for (size_t i = 0; i < CASE_SAMPLES; ++i)
            run[j].largest = fmax(run[j].largest, fabs(s->u[i]));
    }
}

void ours_single_tasks(task_list *list, const bench_case *in)
{
    static const struct {
        const char *id, *name;
        void (*walk)(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u);
    } kinds[] = {
        {"inline_step_fused", "rampwise_step inline, hardware fma", inline_step_fused},
        {"inline_step_plain", "rampwise_step inline, plain target", inline_step_plain},
        {"run", "rampwise_run", run_to_state},
        {"run_history", "rampwise_run", run_to_history},
    };
    for (size_t i = 0; i < sizeof kinds / sizeof *kinds; ++i) {
        single *const s = case_memory(sizeof *s);
        const int silent = kinds[i].walk == run_to_state;
        s->in = in;
        s->walk = kinds[i].walk;
        task_add(list, (task){.kind = TASK_METHOD,
                              .id = kinds[i].id,
                              .name = kinds[i].name,
                              .gives = silent ? "last state" : "u",
                              .units = CASE_SAMPLES,
                              .self = s,
                              .once = once,
                              .history = silent ? NULL : history,
                              .same_bits = silent ? same_bits : NULL});
    }
}
