#include <math.h>
#include <stdio.h>
#include <string.h>
#include "machine_limits.h"
#include "rampwise.h"
#include "report.h"

static void put_number(FILE *f, double x)
{
    if (isfinite(x))
        fprintf(f, "%.6g", x);
    else
        fprintf(f, "null");
}

static void put_text(FILE *f, const char *text)
{
    fputc('"', f);
    for (; *text != '\0'; ++text) {
        if (*text == '"' || *text == '\\')
            fputc('\\', f);
        fputc(*text, f);
    }
    fputc('"', f);
}

static void text_member(FILE *f, const char *name, const char *text)
{
    fprintf(f, "\"%s\": ", name);
    put_text(f, text);
    fprintf(f, ", ");
}

static void number_member(FILE *f, const char *name, double x)
{
    fprintf(f, "\"%s\": ", name);
    put_number(f, x);
    fprintf(f, ", ");
}

static void put_machine(FILE *f, const report *r)
{
    fprintf(f, "  \"library\": {");
    text_member(f, "version", rampwise_version());
    text_member(f, "instructions", r->machine.best_set);
    fprintf(f, "\"arithmetic_edition\": %d},\n  \"build\": {", rampwise_arithmetic_edition());
    text_member(f, "compiler", BENCH_COMPILER);
    fprintf(f, "\"flags\": ");
    put_text(f, BENCH_FLAGS);
    fprintf(f, "},\n  \"machine\": {");
    text_member(f, "processor", r->machine.processor);
    text_member(f, "instruction_sets", r->machine.sets);
    text_member(f, "scipy", r->scipy);
    fprintf(f, "\"virtual\": %s, \"processors\": %d},\n", r->machine.is_virtual ? "true" : "false",
            r->machine.processors);
}

static void put_case(FILE *f, const report *r)
{
    fprintf(f,
            "  \"case\": {\"samples\": %d, \"interval_s\": %g, \"seed\": %d, "
            "\"oscillators\": %d, "
            "\"shortest_period_s\": %g, \"longest_period_s\": %g, "
            "\"damping_ratio\": %g, \"few\": %d, "
            "\"stretch\": %zu, \"rounds\": %zu},\n",
            CASE_SAMPLES, CASE_DT, CASE_SEED, CASE_OSCILLATORS, CASE_SHORTEST, CASE_LONGEST, CASE_ZETA,
            CASE_FEW, r->stretch, r->rounds);
}

static void put_method(FILE *f, const task *t, double base)
{
    fprintf(f, "    {");
    text_member(f, "id", t->id);
    text_member(f, "name", t->name);
    text_member(f, "gives", t->gives);
    number_member(f, "ns", 1e9 * t->best);
    number_member(f, "median_ns", 1e9 * t->median);
    number_member(f, "error", t->error_known ? t->error : NAN);
    fprintf(f, "\"bits_of_rampwise_run\": %s, \"times_bank\": ", t->bits_of_run ? "true" : "false");
    put_number(f, t->best / base);
    fprintf(f, "}");
}

static void put_methods(FILE *f, const report *r)
{
    const double base = task_find(&r->tasks, REPORT_BASE)->best;
    const char *between = "";
    fprintf(f, "  \"methods\": [\n");
    for (size_t i = 0; i < r->tasks.count; ++i) {
        if (r->tasks.task[i].kind != TASK_METHOD)
            continue;
        fprintf(f, "%s", between);
        put_method(f, &r->tasks.task[i], base);
        between = ",\n";
    }
    fprintf(f, "\n  ],\n");
}

static void put_limits(FILE *f, const report *r)
{
    const limit_set *set[LIMIT_SETS];
    const double chain = limits_rate(&r->tasks, "chain", "scalar");
    const task *const read = task_find(&r->tasks, "read");
    limits_here(set);
    fprintf(f, "  \"limits\": {");
    for (size_t i = 0; i < LIMIT_SETS && set[i] != NULL; ++i) {
        fprintf(f, "\"%s\": {", set[i]->name);
        number_member(f, "fused_per_s", limits_rate(&r->tasks, "fused", set[i]->name));
        fprintf(f, "\"steps_per_s\": ");
        put_number(f, limits_rate(&r->tasks, "mix", set[i]->name));
        fprintf(f, "}, ");
    }
    number_member(f, "chain_ns", chain > 0 ? 1e9 / chain : NAN);
    fprintf(f, "\"memory_read_bytes_per_s\": ");
    put_number(f, read != NULL ? 1 / read->best : NAN);
    fprintf(f, "},\n");
}

static void put_readings(FILE *f, const report *r)
{
    fprintf(f, "  \"ratios\": [");
    for (size_t i = 0; i < r->reading_count; ++i) {
        const reading *const x = &r->reading[i];
        fprintf(f, "%s\n    {", i > 0 ? "," : "");
        text_member(f, "id", x->id);
        text_member(f, "text", x->text);
        number_member(f, "value", x->value);
        number_member(f, x->at_least ? "at_least" : "at_most", x->target);
        fprintf(f, "\"met\": %s}", isnan(x->target) ? "null" : reading_met(x) ? "true" : "false");
    }
    fprintf(f, "\n  ],\n");
}

static void put_theta(FILE *f, const report *r)
{
    fprintf(f, "  \"coefficients\": [");
    for (int i = 0; i < THETA_POINTS; ++i) {
        fprintf(f, "%s\n    {\"theta\": %.6g", i > 0 ? "," : "", r->theta[i].theta);
        for (int m = 0; m < THETA_MAKERS; ++m) {
            fprintf(f, ", \"%s\": {", theta_makers[m]);
            number_member(f, "error", r->theta[i].error[m]);
            fprintf(f, "\"ns\": ");
            put_number(f, r->theta[i].cost[m]);
            fprintf(f, "}");
        }
        fprintf(f, "}");
    }
    fprintf(f, "\n  ],\n");
}

static void put_spread(FILE *f, const latency_spread *s)
{
    fprintf(f, "{");
    number_member(f, "median", 1e9 * s->median);
    number_member(f, "of_999_in_1000", 1e9 * s->most);
    fprintf(f, "\"worst\": ");
    put_number(f, 1e9 * s->worst);
    fprintf(f, "}");
}

static void put_latency(FILE *f, const latency *l)
{
    fprintf(f, "  \"latency_ns\": {\"flat_samples\": %zu, \"paced_samples\": %zu, \"rows\": [", l->flat,
            l->paced);
    for (size_t i = 0; i < LATENCY_ROWS; ++i) {
        fprintf(f, "%s\n    {", i > 0 ? "," : "");
        text_member(f, "id", l->row[i].id);
        text_member(f, "name", l->row[i].name);
        fprintf(f, "\"flat\": ");
        put_spread(f, &l->row[i].flat);
        if (l->paced > 0) {
            fprintf(f, ", \"at_1_kHz\": ");
            put_spread(f, &l->row[i].paced);
        }
        fprintf(f, "}");
    }
    fprintf(f, "\n  ]}\n");
}

static int closed(FILE *f)
{
    const int wrong = ferror(f);
    return fclose(f) == 0 && !wrong;
}

int report_json(const report *r, const char *path)
{
    FILE *const f = fopen(path, "w");
    if (f == NULL)
        return 0;
    fprintf(f, "{\n  \"quick\": %s,\n", r->quick ? "true" : "false");
    put_machine(f, r);
    put_case(f, r);
    put_methods(f, r);
    put_limits(f, r);
    put_readings(f, r);
    put_theta(f, r);
    put_latency(f, &r->latency);
    fprintf(f, "}\n");
    return closed(f);
}

int report_cost(const report *r, const char *path)
{
    FILE *const f = fopen(path, "w");
    if (f == NULL)
        return 0;
    fprintf(f, "id,name,ns,error\n");
    for (size_t i = 0; i < r->tasks.count; ++i) {
        const task *const t = &r->tasks.task[i];
        if (t->kind == TASK_METHOD && t->error_known)
            fprintf(f, "%s,\"%s\",%.6g,%.6g\n", t->id, t->name, 1e9 * t->best, t->error);
    }
    return closed(f);
}

int report_theta(const report *r, const char *path)
{
    FILE *const f = fopen(path, "w");
    if (f == NULL)
        return 0;
    fprintf(f, "theta");
    for (int m = 0; m < THETA_MAKERS; ++m)
        fprintf(f, ",\"error, %s\",\"ns, %s\"", theta_makers[m], theta_makers[m]);
    fprintf(f, "\n");
    for (int i = 0; i < THETA_POINTS; ++i) {
        fprintf(f, "%.6g", r->theta[i].theta);
        for (int m = 0; m < THETA_MAKERS; ++m)
            fprintf(f, ",%.6g,%.6g", r->theta[i].error[m], r->theta[i].cost[m]);
        fprintf(f, "\n");
    }
    return closed(f);
}
