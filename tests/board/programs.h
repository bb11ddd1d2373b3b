/* A program for a board; answers.c also for the host. */
#ifndef BOARD_PROGRAMS_H
#define BOARD_PROGRAMS_H

#include <stdint.h>

void program(void);

/* Of answers.c and costs.c, in both precisions. */
void rampwise_answers(void);
void rampwise_answers_f32(void);
void rampwise_costs(void);
void rampwise_costs_f32(void);

/* What board.c measures: the instructions that work() takes, calling it aside, and the bytes of stack it uses. */
uint64_t instructions_of(void (*work)(void));
uint64_t stack_of(void (*work)(void));

#endif
