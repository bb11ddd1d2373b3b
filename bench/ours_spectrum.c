/* Response spectra: 200 periods from 0.05 to 10 s, 5 % damped, largest displacements at the samples and
   between, and with evidence of what the sampling has cost. */
#include <stdio.h>
#include "methods.h"

enum { PERIODS = 200 };
static const double two_pi = 6.283185307179586;

typedef struct spectrum {
    const bench_case *in;
    unsigned flags;
    int with_evidence;
    double omega[PERIODS], zeta[PERIODS];
    rampwise_peak peak[PERIODS];
    rampwise_evidence evidence[PERIODS];
} spectrum;

static int solve(spectrum *s)
{
    const bench_case *const in = s->in;
    if (s->with_evidence)
        return rampwise_spectrum_evidence(CASE_SAMPLES, CASE_DT, in->p, RAMPWISE_BASE_ACCELERATION, PERIODS,
                                          s->omega, s->zeta, RAMPWISE_DISPLACEMENT, s->flags, s->peak,
                                          s->evidence, NULL);
    return rampwise_spectrum(CASE_SAMPLES, CASE_DT, in->p, RAMPWISE_BASE_ACCELERATION, PERIODS, s->omega,
                             s->zeta, RAMPWISE_DISPLACEMENT, s->flags, s->peak, NULL);
}

static void once(void *self)
{
    if (solve(self) != RAMPWISE_OK)
        fprintf(stderr, "bench: no spectrum\n");
}

static void add(task_list *list, const bench_case *in, const char *id, unsigned flags, int with_evidence)
{
    spectrum *const s = case_memory(sizeof *s);
    double period[PERIODS];
    s->in = in;
    s->flags = flags;
    s->with_evidence = with_evidence;
    (void)rampwise_list_log(PERIODS, 0.05, 10, period);
    for (size_t i = 0; i < PERIODS; ++i) {
        s->omega[i] = two_pi / period[i];
        s->zeta[i] = 0.05;
    }
    task_add(list, (task){.kind = TASK_PART,
                          .id = id,
                          .name = "spectrum of 200 periods",
                          .gives = "peaks",
                          .units = (double)PERIODS * CASE_SAMPLES,
                          .self = s,
                          .once = once});
}

void ours_spectrum_tasks(task_list *list, const bench_case *in)
{
    add(list, in, "spectrum_samples", RAMPWISE_AT_SAMPLES, 0);
    add(list, in, "spectrum_between", 0, 0);
    add(list, in, "spectrum_evidence", 0, 1);
}
