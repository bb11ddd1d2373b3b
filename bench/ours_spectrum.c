/* Response spectra: 200 periods from 0.05 to 10 s, 5 % damped, largest displacements at the samples, between
   them, and with evidence of what the sampling has cost; and their percentiles over the direction of two components. */
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

static void make(spectrum *s, const bench_case *in, unsigned flags)
{
    double period[PERIODS];
    s->in = in;
    s->flags = flags;
    (void)rampwise_list_log(PERIODS, 0.05, 10, period);
    for (size_t i = 0; i < PERIODS; ++i) {
        s->omega[i] = two_pi / period[i];
        s->zeta[i] = 0.05;
    }
}

static void add(task_list *list, const bench_case *in, const char *id, unsigned flags, int with_evidence)
{
    spectrum *const s = case_memory(sizeof *s);
    make(s, in, flags);
    s->with_evidence = with_evidence;
    task_add(list, (task){.kind = TASK_PART,
                          .id = id,
                          .name = "spectrum of 200 periods",
                          .gives = "peaks",
                          .units = (double)PERIODS * CASE_SAMPLES,
                          .self = s,
                          .once = once});
}

/* Two components, the second the first one backwards: median and largest over the direction. */
typedef struct directions {
    spectrum one;
    double second[CASE_SAMPLES], value[PERIODS][2];
} directions;

static void once_directions(void *self)
{
    static const double percent[2] = {50, 100};
    directions *const d = self;
    if (rampwise_spectrum_directions(
            CASE_SAMPLES, CASE_DT, d->one.in->p, d->second, RAMPWISE_BASE_ACCELERATION, PERIODS, d->one.omega,
            d->one.zeta, RAMPWISE_DISPLACEMENT, d->one.flags, 2, percent, d->value[0], NULL) != RAMPWISE_OK)
        fprintf(stderr, "bench: no directions\n");
}

static void add_directions(task_list *list, const bench_case *in, const char *id, unsigned flags)
{
    directions *const d = case_memory(sizeof *d);
    make(&d->one, in, flags);
    for (size_t i = 0; i < CASE_SAMPLES; ++i)
        d->second[i] = in->p[CASE_SAMPLES - 1 - i];
    task_add(list, (task){.kind = TASK_PART,
                          .id = id,
                          .name = "two components, 200 periods",
                          .gives = "percentiles",
                          .units = (double)PERIODS * CASE_SAMPLES,
                          .self = d,
                          .once = once_directions});
}

void ours_spectrum_tasks(task_list *list, const bench_case *in)
{
    add(list, in, "spectrum_samples", RAMPWISE_AT_SAMPLES, 0);
    add(list, in, "spectrum_between", 0, 0);
    add(list, in, "spectrum_evidence", 0, 1);
    add_directions(list, in, "directions_samples", RAMPWISE_AT_SAMPLES);
    add_directions(list, in, "directions_between", 0);
}
