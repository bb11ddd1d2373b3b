/* One thing that is timed: a method, or a limit of the machine. */
#ifndef TASK_H
#define TASK_H

#include "case.h"

/* What rampwise_run made of an oscillator: the state after the record, and the largest |u| on the way. */
typedef struct outcome {
    double u, v, largest;
} outcome;

/* A part of a method's work is timed for a comparison, and is no row of the table. */
enum { TASK_METHOD, TASK_LIMIT, TASK_PART };

typedef struct task {
    int kind;
    const char *id, *name, *gives;
    double units; /* oscillator-steps, operations or bytes in one repetition */
    void *self;

    /* One repetition; or the same by a clock of its own, which answers in seconds. */
    void (*once)(void *self);
    double (*clocked)(void *self);
    int slow; /* not in every round */

    /* How the error is found. Either: the displacements of oscillator j at the first samples, and how many; 0
       where j is not among the method's oscillators. Or: whether what it gives has the bits of rampwise_run,
       run[j] for oscillator j. */
    size_t (*history)(void *self, size_t j, double *u);
    int (*same_bits)(void *self, const outcome *run);

    /* The measured figures: seconds a unit, the best and the median round; error in units of the peak. */
    double best, median;
    double error;
    int error_known, bits_of_run;
} task;

enum { TASK_MOST = 96 };

typedef struct task_list {
    size_t count;
    task task[TASK_MOST];
} task_list;

void task_add(task_list *list, task t);

/* NULL where there is none of that name. */
const task *task_find(const task_list *list, const char *id);

#endif
