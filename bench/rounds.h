/* Timing. All tasks take turns, round after round, so that whatever else the machine does meets them alike.
   In its turn a task repeats for some milliseconds and its shortest repetition counts; of the rounds the best
   is reported, and the median to show how far they spread. */
#ifndef ROUNDS_H
#define ROUNDS_H

#include "task.h"

/* Stays on one processor core from here on; its number, or -1 where the system cannot. */
int rounds_pin(void);

double rounds_clock(void); /* seconds from some fixed instant */

/* Rounds for about this many seconds, `least` of them at any rate; how many they were. */
size_t rounds_run(task_list *list, double seconds, size_t least);

#endif
