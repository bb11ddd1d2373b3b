/* What the machine can do at best, for each set of instructions, by loops that do nothing else:

   fused  independent fused multiply-adds in registers;
   mix    the operations of a step with the largest |u| gathered: 6 fused multiply-adds, 2 products, 2 sums, an
          absolute value and a maximum, in registers, on data that wait for nothing;
   chain  one step after the other, scalar, with all that can be prepared prepared: what a single oscillator
          waits for, whatever else the machine can do;
   read   the sum of a large array, for the rate at which memory can be read.

   Each in several arrangements, of which the best counts: no compiler or processor likes every one. */
#ifndef MACHINE_LIMITS_H
#define MACHINE_LIMITS_H

#include "task.h"

typedef struct limit_loop {
    void (*run)(size_t turns);
    int vectors; /* in one turn; steps of the chain */
} limit_loop;

enum { LIMIT_LOOPS = 5 };

typedef struct limit_set {
    int instructions, lanes;
    const char *name;
    limit_loop fused[LIMIT_LOOPS], mix[LIMIT_LOOPS];
    double (*read)(const double *x, size_t n); /* n a multiple of 64 */
} limit_set;

extern const limit_loop limits_chain[LIMIT_LOOPS];
extern const limit_set limits_scalar, limits_avx2, limits_avx512, limits_neon;

/* Those of this processor, with scalar fused multiply-add first; NULL ends the list. */
enum { LIMIT_SETS = 4 };
void limits_here(const limit_set *set[LIMIT_SETS]);

void limits_tasks(task_list *list);

/* Operations or steps a second of the best arrangement of "fused" or "mix" on the set of this name, or of "chain"
   on "scalar"; 0 where there is none. */
double limits_rate(const task_list *list, const char *what, const char *set_name);

/* Bytes of the array that is read. */
size_t limits_array(void);

#endif
