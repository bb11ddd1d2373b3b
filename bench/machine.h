/* What the figures were measured with. */
#ifndef MACHINE_H
#define MACHINE_H

enum { MACHINE_TEXT = 256 };

typedef struct machine {
    char processor[MACHINE_TEXT]; /* from /proc/cpuinfo, as are the next two */
    char sets[MACHINE_TEXT];      /* those of its vector instruction sets that matter here */
    int is_virtual;
    int processors;       /* that the system shows */
    int core;             /* the one used, or -1 */
    const char *best_set; /* that the library takes */
} machine;

/* The name of the set of instructions that RAMPWISE_FASTEST is here. */
const char *machine_best_set(void);

void machine_describe(machine *m, int core);

#endif
