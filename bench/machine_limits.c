#define _GNU_SOURCE /* sysconf's sizes of caches */
#include "machine_limits.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>

typedef struct loop {
    void (*run)(size_t turns);
    size_t turns;
} loop;

typedef struct reading {
    double (*read)(const double *x, size_t n);
    const double *x;
    size_t n;
    volatile double sink;
} reading;

static void run_loop(void *self)
{
    const loop *const l = self;
    l->run(l->turns);
}

static void run_reading(void *self)
{
    reading *const r = self;
    r->sink = r->read(r->x, r->n);
}

void limits_here(const limit_set *set[LIMIT_SETS])
{
    size_t count = 0;
    memset(set, 0, LIMIT_SETS * sizeof *set);
#ifdef __x86_64__
    if (rampwise_instructions(RAMPWISE_AVX2) == RAMPWISE_AVX2) {
        set[count++] = &limits_scalar;
        set[count++] = &limits_avx2;
    }
    if (rampwise_instructions(RAMPWISE_AVX512) == RAMPWISE_AVX512)
        set[count++] = &limits_avx512;
#else
    set[count++] = &limits_scalar;
    if (rampwise_instructions(RAMPWISE_NEON) == RAMPWISE_NEON)
        set[count++] = &limits_neon;
#endif
}

/* "mix_AVX2_3" and so on. */
enum { NAME_SIZE = 32 };
static void name_loop(char name[NAME_SIZE], const char *what, const char *set_name, size_t arrangement)
{
    snprintf(name, NAME_SIZE, "%s_%s_%zu", what, set_name, arrangement);
}

static void add_loop(task_list *list, const char *id, void (*run)(size_t turns), size_t turns, double units)
{
    loop *const l = case_memory(sizeof *l);
    *l = (loop){run, turns};
    task_add(list, (task){.kind = TASK_LIMIT, .id = id, .units = units, .self = l, .once = run_loop});
}

static void add_loops(task_list *list, const char *what, const limit_set *set, const limit_loop *loops,
                      size_t vectors)
{
    for (size_t i = 0; i < LIMIT_LOOPS; ++i) {
        const size_t turns = vectors / (size_t)loops[i].vectors;
        char *const id = case_memory(NAME_SIZE);
        name_loop(id, what, set->name, i);
        add_loop(list, id, loops[i].run, turns, (double)turns * loops[i].vectors * set->lanes);
    }
}

/* Twice the last cache, from 64 to 512 MiB, but no more than an eighth of the memory. */
size_t limits_array(void)
{
    const size_t MiB = 1024 * 1024;
    size_t bytes = 64 * MiB;
#ifdef _SC_LEVEL3_CACHE_SIZE
    const long cache = sysconf(_SC_LEVEL3_CACHE_SIZE);
    const double memory = (double)sysconf(_SC_PHYS_PAGES) * (double)sysconf(_SC_PAGESIZE);
    while (bytes < 512 * MiB && cache > 0 && bytes < 2 * (size_t)cache && (double)bytes < memory / 16)
        bytes *= 2;
#endif
    return bytes;
}

static void add_reading(task_list *list, const limit_set *set)
{
    const size_t n = limits_array() / sizeof(double);
    double *const x = case_memory(n * sizeof *x);
    reading *const r = case_memory(sizeof *r);
    for (size_t i = 0; i < n; ++i) /* so that the memory is there */
        x[i] = 1;
    r->read = set->read;
    r->x = x;
    r->n = n;
    task_add(list, (task){.kind = TASK_LIMIT,
                          .id = "read",
                          .units = (double)(n * sizeof *x),
                          .self = r,
                          .once = run_reading,
                          .slow = 1});
}

void limits_tasks(task_list *list)
{
    const limit_set *set[LIMIT_SETS];
    limits_here(set);
    for (size_t i = 0; i < LIMIT_SETS && set[i] != NULL; ++i) {
        add_loops(list, "fused", set[i], set[i]->fused, 120000);
        add_loops(list, "mix", set[i], set[i]->mix, 20000);
        if (i == 0)
            add_loops(list, "chain", set[i], limits_chain, 5000);
        if (i + 1 == LIMIT_SETS || set[i + 1] == NULL)
            add_reading(list, set[i]);
    }
}

double limits_rate(const task_list *list, const char *what, const char *set_name)
{
    double rate = 0;
    for (size_t i = 0; i < LIMIT_LOOPS; ++i) {
        char id[NAME_SIZE];
        name_loop(id, what, set_name, i);
        const task *const t = task_find(list, id);
        if (t != NULL && 1 / t->best > rate)
            rate = 1 / t->best;
    }
    return rate;
}
