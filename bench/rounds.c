#define _GNU_SOURCE
#include "rounds.h"

#include <math.h>
#include <sched.h>
#include <stdlib.h>
#include <time.h>

enum { MOST_ROUNDS = 4000, SLOW_EVERY = 8 };
static const double turn = 2e-3; /* seconds */

int rounds_pin(void)
{
#ifdef __linux__
    cpu_set_t allowed, one;
    if (sched_getaffinity(0, sizeof allowed, &allowed) != 0)
        return -1;
    for (size_t core = CPU_SETSIZE; core-- > 0;) {
        if (!CPU_ISSET(core, &allowed))
            continue;
        CPU_ZERO(&one);
        CPU_SET(core, &one);
        return sched_setaffinity(0, sizeof one, &one) == 0 ? (int)core : -1;
    }
#endif
    return -1;
}

double rounds_clock(void)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static double seconds_of_one(const task *t)
{
    if (t->clocked != NULL)
        return t->clocked(t->self);
    const double start = rounds_clock();
    t->once(t->self);
    return rounds_clock() - start;
}

/* The first repetition finds the caches full of other tasks' data. */
static double seconds_of_turn(const task *t)
{
    const double start = rounds_clock();
    double best = INFINITY;
    for (int i = 0; i < (t->slow ? 1 : 3) || rounds_clock() - start < turn; ++i)
        best = fmin(best, seconds_of_one(t));
    return best;
}

static int ascending(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Sorts x. */
static double median(double *x, size_t n)
{
    qsort(x, n, sizeof *x, ascending);
    return 0.5 * (x[(n - 1) / 2] + x[n / 2]);
}

static void settle(task *t, double *seconds, size_t rounds)
{
    t->median = median(seconds, rounds) / t->units;
    t->best = seconds[0] / t->units;
}

size_t rounds_run(task_list *list, double seconds, size_t least)
{
    double(*const taken)[MOST_ROUNDS] = case_memory(list->count * sizeof *taken);
    size_t *const count = case_memory(list->count * sizeof *count), round = 0;
    const double end = rounds_clock() + seconds;
    for (; round < MOST_ROUNDS && (round < least || rounds_clock() < end); ++round)
        for (size_t i = 0; i < list->count; ++i)
            if (!list->task[i].slow || round % SLOW_EVERY == 0)
                taken[i][count[i]++] = seconds_of_turn(&list->task[i]);
    for (size_t i = 0; i < list->count; ++i)
        settle(&list->task[i], taken[i], count[i]);
    free(taken);
    free(count);
    return round;
}
