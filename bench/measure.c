/* measure [--quick] RESULTS PYTHON SCRIPT: measures everything, prints the table, and writes bench.json and
   the data of the pictures into the directory RESULTS. bench/run calls it. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "machine_limits.h"
#include "methods.h"
#include "reference.h"
#include "report.h"
#include "rounds.h"

typedef struct extent {
    double seconds;                                    /* of rounds */
    size_t rounds, every, stretch, sets, theta_rounds; /* every: of the oscillators, for errors */
    size_t flat, paced;                                /* samples of each latency */
} extent;

static const extent whole = {75, 24, 1, CASE_STRETCH, 100, 60, 1000000, 2000},
                    quick = {1, 1, 111, 200, 6, 2, 10000, 0};

static void find_error(task *t, const reference *exact, size_t j, double *u)
{
    if (t->history == NULL)
        return;
    const size_t n = t->history(t->self, j, u);
    if (n == 0)
        return;
    const double error = reference_error(exact, n, u);
    if (!t->error_known || !(error <= t->error))
        t->error = error;
    t->error_known = 1;
}

/* The oscillators of the slow methods are always among them. */
static int is_asked(size_t j, size_t every)
{
    for (size_t k = 0; k < CASE_FEW; ++k)
        if (case_spread(k, CASE_FEW) == j)
            return 1;
    return j % every == 0;
}

static void find_errors(task_list *list, const bench_case *in, size_t every)
{
    reference *const exact = case_memory(sizeof *exact);
    double *const u = case_memory(CASE_SAMPLES * sizeof *u);
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j) {
        if (!is_asked(j, every))
            continue;
        reference_make(exact, in, j);
        for (size_t i = 0; i < list->count; ++i)
            find_error(&list->task[i], exact, j, u);
    }
    free(exact);
    free(u);
}

/* What has the bits of rampwise_run has its error. */
static void compare_bits(task_list *list, const bench_case *in)
{
    outcome *const run = case_memory(CASE_OSCILLATORS * sizeof *run);
    const task *const known = task_find(list, "run_history");
    ours_outcomes(in, run);
    for (size_t i = 0; i < list->count; ++i) {
        task *const t = &list->task[i];
        if (t->same_bits == NULL)
            continue;
        t->bits_of_run = t->same_bits(t->self, run);
        t->error_known = t->bits_of_run && known->error_known;
        t->error = known->error;
        if (!t->bits_of_run)
            fprintf(stderr, "bench: %s has not the bits of rampwise_run\n", t->id);
    }
    free(run);
}

static int write_all(const report *r, const char *results)
{
    char path[4096];
    snprintf(path, sizeof path, "%s/bench.json", results);
    int good = report_json(r, path);
    snprintf(path, sizeof path, "%s/bench_cost.csv", results);
    good &= report_cost(r, path);
    snprintf(path, sizeof path, "%s/bench_theta.csv", results);
    return good & report_theta(r, path);
}

/* Whether the parts that are built for recent processors run here. */
static int is_recent(void)
{
#ifdef __x86_64__
    return rampwise_instructions(RAMPWISE_AVX2) == RAMPWISE_AVX2;
#else
    return 1;
#endif
}

static void measure(report *r, const extent *e, const char *python, const char *script)
{
    bench_case *const in = case_memory(sizeof *in);
    machine_describe(&r->machine, rounds_pin());
    case_make(in, e->stretch);
    ours_single_tasks(&r->tasks, in);
    ours_bank_tasks(&r->tasks, in);
    ours_f32_tasks(&r->tasks, in);
    ours_channel_tasks(&r->tasks, in);
    ours_spectrum_tasks(&r->tasks, in);
    ours_modes_tasks(&r->tasks, in);
    textbook_tasks(&r->tasks, in);
    (void)scipy_tasks(&r->tasks, in, python, script, r->scipy, sizeof r->scipy);
    gsl_tasks(&r->tasks, in);
    limits_tasks(&r->tasks);
    find_errors(&r->tasks, in, e->every);
    compare_bits(&r->tasks, in);
    r->stretch = e->stretch;
    r->sets = e->sets;
    r->rounds = rounds_run(&r->tasks, e->seconds, e->rounds);
    r->reading_count = readings_make(r->reading, &r->tasks);
    theta_run(r->theta, e->sets, e->theta_rounds);
    latency_run(&r->latency, in, e->flat, e->paced);
}

int main(int count, char **word)
{
    static report r;
    const int is_quick = count > 1 && strcmp(word[1], "--quick") == 0;
    if (count - is_quick != 4) {
        fprintf(stderr, "usage: measure [--quick] RESULTS PYTHON SCRIPT\n");
        return 2;
    }
    if (!is_recent()) {
        fprintf(stderr, "bench: this processor has no AVX2 with fused multiply-add\n");
        return 2;
    }
    char **const given = word + is_quick;
    r.quick = is_quick;
    measure(&r, is_quick ? &quick : &whole, given[2], given[3]);
    report_print(&r);
    if (!write_all(&r, given[1]) || fflush(stdout) != 0) {
        fprintf(stderr, "bench: cannot write to %s\n", given[1]);
        return EXIT_FAILURE;
    }
    return EXIT_SUCCESS;
}
