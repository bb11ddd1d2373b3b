#include <math.h>
#include <stdio.h>
#include "machine_limits.h"
#include "rampwise.h"
#include "report.h"

static void print_machine(const report *r)
{
    const machine *const m = &r->machine;
    printf("rampwise %s, arithmetic edition %d, %s; %s, %s\n", rampwise_version(),
           rampwise_arithmetic_edition(), m->best_set, BENCH_COMPILER, BENCH_FLAGS);
    printf("%s%s, %d processors (%s), one of them used%s; %s\n", m->processor,
           m->is_virtual ? " (virtual machine)" : "", m->processors, m->sets,
           m->core >= 0 ? " throughout" : "", r->scipy[0] != '\0' ? r->scipy : "no SciPy");
    printf("Absolute times are those of this machine at this hour; the ratios are the result.\n\n");
}

static void print_error(const task *t)
{
    if (t->error_known)
        printf(" %9.1e%s", t->error, t->bits_of_run ? " =" : "  ");
    else
        printf(" %9s  ", "-");
}

static void print_row(const task *t, double base)
{
    printf("%-36s %-11s %9.3f %+6.0f %%", t->name, t->gives, 1e9 * t->best, 100 * (t->median / t->best - 1));
    print_error(t);
    printf(" %9.2f\n", t->best / base);
}

static void print_methods(const report *r)
{
    const double base = task_find(&r->tasks, REPORT_BASE)->best;
    printf("%-36s %-11s %9s %8s %9s %11s\n", "", "", "ns a step", "median", "largest", "times");
    printf("%-36s %-11s %9s %8s %9s %11s\n", "method", "gives", "at best", "beside", "error", "the bank's");
    for (size_t i = 0; i < r->tasks.count; ++i)
        if (r->tasks.task[i].kind == TASK_METHOD)
            print_row(&r->tasks.task[i], base);
}

static void print_notes(const report *r)
{
    printf("\n%d samples, h = %g s, of a synthetic record (seed %d); %d oscillators, T = %g to %g s\n",
           CASE_SAMPLES, CASE_DT, CASE_SEED, CASE_OSCILLATORS, CASE_SHORTEST, CASE_LONGEST);
    printf("(T/h = %.0f to %.0f), %g %% damped. A step: one oscillator over one sample.\n",
           CASE_SHORTEST / CASE_DT, CASE_LONGEST / CASE_DT, 100 * CASE_ZETA);
    printf("The bank: of 1,000, largest |u|, %s.\n", r->machine.best_set);
    printf("Error: of u at any sample of %s, in units of its peak, against numbers of 113 bits.\n",
           r->quick ? "a few oscillators" : "any oscillator");
    printf("=: the bits of rampwise_run, compared in this run.\n");
    printf("few: %d oscillators over the whole range of T/h, the first %zu samples.\n", CASE_FEW, r->stretch);
    printf("GSL stops at every sample; its tolerances are absolute and relative, in units of the peak.\n");
    if (r->scipy[0] == '\0')
        printf("SciPy rows are left out: Debian's python3 has no SciPy.\n");
    printf("Best and median of %zu rounds (an eighth of them for the slowest), in which all take turns.\n",
           r->rounds);
}

static void print_limits(const report *r)
{
    const limit_set *set[LIMIT_SETS];
    limits_here(set);
    printf("\nLimits of the machine, measured in the same rounds\n");
    printf("%-10s %26s %38s\n", "", "fused operations, 1e9/s", "operations of a step, 1e9 steps/s");
    for (size_t i = 0; i < LIMIT_SETS && set[i] != NULL; ++i)
        printf("%-10s %26.2f %38.3f\n", set[i]->name, 1e-9 * limits_rate(&r->tasks, "fused", set[i]->name),
               1e-9 * limits_rate(&r->tasks, "mix", set[i]->name));
    const double chain = limits_rate(&r->tasks, "chain", "scalar");
    const task *const read = task_find(&r->tasks, "read");
    if (chain > 0)
        printf("bare chain of a step, scalar: %.3f ns\n", 1e9 / chain);
    if (read != NULL)
        printf("memory read rate: %.1f GB/s, from %zu MiB\n", 1e-9 / read->best, limits_array() >> 20);
    printf("A step's operations: 6 fused multiply-adds, 2 products, 2 sums, absolute value, maximum;\n"
           "independent, in registers. The chain: from one step's u and v to the next, all else prepared.\n");
}

static void print_readings(const report *r)
{
    printf("\n%-62s %10s  %s\n", "ratio of times, or of rates", "measured", "aim");
    for (size_t i = 0; i < r->reading_count; ++i) {
        const reading *const x = &r->reading[i];
        printf("%-62s %10.4g", x->text, x->value);
        if (!isnan(x->target))
            printf("  %s %-6g %s", x->at_least ? ">=" : "<=", x->target, reading_met(x) ? "met" : "NOT met");
        printf("\n");
    }
}

static void print_theta(const report *r)
{
    printf("\nA coefficient set, 5 %% damped: largest error of eight in units of each one's largest value, "
           "and ns\n");
    printf("%-10s", "theta");
    for (int m = 0; m < THETA_MAKERS; ++m)
        printf(" %26s", theta_makers[m]);
    printf("\n");
    for (int i = 0; i < THETA_POINTS; i += 6) {
        printf("%-10.0e", r->theta[i].theta);
        for (int m = 0; m < THETA_MAKERS; ++m)
            printf(" %15.1e %7.0f ns", r->theta[i].error[m], r->theta[i].cost[m]);
        printf("\n");
    }
    printf("Each the worst of %zu sets around that theta.\n", r->sets);
}

static void print_spread(const latency_spread *s)
{
    printf(" %8.0f %8.0f %9.0f", 1e9 * s->median, 1e9 * s->most, 1e9 * s->worst);
}

static void print_latency(const latency *l)
{
    printf("\nLatency of one live sample, ns; what else the machine does is in it\n");
    printf("%-36s %27s", "", "flat out");
    if (l->paced > 0)
        printf(" %27s", "1,000 a second");
    printf("\n%-36s %8s %8s %9s", "", "median", "99.9 %", "worst");
    if (l->paced > 0)
        printf(" %8s %8s %9s", "median", "99.9 %", "worst");
    printf("\n");
    for (size_t i = 0; i < LATENCY_ROWS; ++i) {
        printf("%-36s", l->row[i].name);
        print_spread(&l->row[i].flat);
        if (l->paced > 0)
            print_spread(&l->row[i].paced);
        printf("\n");
    }
    printf("Of %zu samples each flat out", l->flat);
    if (l->paced > 0)
        printf(", and %zu at 1 kHz, between which the processor sleeps", l->paced);
    printf(".\n");
}

void report_print(const report *r)
{
    print_machine(r);
    if (r->quick)
        printf("A QUICK RUN: it shows that all works; its figures mean little.\n\n");
    print_methods(r);
    print_notes(r);
    print_limits(r);
    print_readings(r);
    print_theta(r);
    print_latency(&r->latency);
}
