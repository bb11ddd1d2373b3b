/* What a careful reader of a textbook programs: the printed coefficients in a loop, in double and in single
   precision, and the method of constant average acceleration. */
#include <math.h>
#include "methods.h"
#include "newmark.h"
#include "printed.h"

typedef struct textbook {
    const bench_case *in;
    size_t next;
    double u[CASE_SAMPLES];
    float p_single[CASE_SAMPLES], u_single[CASE_SAMPLES];
    printed_double of_double[CASE_OSCILLATORS];
    printed_single of_single[CASE_OSCILLATORS];
    newmark average[CASE_OSCILLATORS];
} textbook;

static size_t in_turn(textbook *t)
{
    const size_t j = t->next;
    t->next = (j + 1) % CASE_OSCILLATORS;
    return j;
}

static void double_once(void *self)
{
    textbook *const t = self;
    printed_double_run(&t->of_double[in_turn(t)], CASE_SAMPLES, t->in->p, t->u);
}

static void single_once(void *self)
{
    textbook *const t = self;
    printed_single_run(&t->of_single[in_turn(t)], CASE_SAMPLES, t->p_single, t->u_single);
}

static void newmark_once(void *self)
{
    textbook *const t = self;
    newmark_run(&t->average[in_turn(t)], CASE_SAMPLES, t->in->p, t->u);
}

static size_t double_history(void *self, size_t j, double *u)
{
    const textbook *const t = self;
    printed_double_run(&t->of_double[j], CASE_SAMPLES, t->in->p, u);
    return CASE_SAMPLES;
}

static size_t single_history(void *self, size_t j, double *u)
{
    textbook *const t = self;
    printed_single_run(&t->of_single[j], CASE_SAMPLES, t->p_single, t->u_single);
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        u[i] = (double)t->u_single[i];
    return CASE_SAMPLES;
}

static size_t newmark_history(void *self, size_t j, double *u)
{
    const textbook *const t = self;
    newmark_run(&t->average[j], CASE_SAMPLES, t->in->p, u);
    return CASE_SAMPLES;
}

static textbook *make(const bench_case *in)
{
    textbook *const t = case_memory(sizeof *t);
    t->in = in;
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j) {
        const double w = sqrt(in->sys[j].stiffness);
        printed_double_make(&t->of_double[j], w, CASE_ZETA, CASE_DT);
        printed_single_make(&t->of_single[j], (float)w, (float)CASE_ZETA, (float)CASE_DT);
        newmark_make(&t->average[j], &in->sys[j], CASE_DT);
    }
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        t->p_single[i] = (float)in->p[i];
    return t;
}

void textbook_tasks(task_list *list, const bench_case *in)
{
    textbook *const t = make(in);
    static const struct {
        const char *id, *name;
        void (*once)(void *self);
        size_t (*history)(void *self, size_t j, double *u);
    } kinds[] = {
        {"printed_double", "printed formulas, double", double_once, double_history},
        {"printed_single", "printed formulas, single", single_once, single_history},
        {"newmark", "Newmark, average acceleration", newmark_once, newmark_history},
    };
    for (size_t i = 0; i < sizeof kinds / sizeof *kinds; ++i)
        task_add(list, (task){.kind = TASK_METHOD,
                              .id = kinds[i].id,
                              .name = kinds[i].name,
                              .gives = "u",
                              .units = CASE_SAMPLES,
                              .self = t,
                              .once = kinds[i].once,
                              .history = kinds[i].history});
}
