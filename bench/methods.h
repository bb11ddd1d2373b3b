/* The methods, one file a kind. Each adds its tasks to the list; what it needs lives on. */
#ifndef METHODS_H
#define METHODS_H

#include "task.h"

/* The outcomes of rampwise_run for all oscillators, for comparisons bit by bit. */
void ours_outcomes(const bench_case *in, outcome *run);

void ours_single_tasks(task_list *list, const bench_case *in);
void ours_bank_tasks(task_list *list, const bench_case *in);
void ours_f32_tasks(task_list *list, const bench_case *in);
void ours_channel_tasks(task_list *list, const bench_case *in);
void ours_spectrum_tasks(task_list *list, const bench_case *in);
void ours_modes_tasks(task_list *list, const bench_case *in);
void textbook_tasks(task_list *list, const bench_case *in);
void gsl_tasks(task_list *list, const bench_case *in);

/* Whether this python has SciPy. version gets its name and number. */
int scipy_tasks(task_list *list, const bench_case *in, const char *python, const char *script, char *version,
                size_t version_size);

/* The inline step in a plain loop, built for processors with fused multiply-add in hardware and for all; u[n]
   gets the displacements. */
void inline_step_fused(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u);
void inline_step_plain(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p, double *u);
void inline_step_f32_fused(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p,
                           float *u);
void inline_step_f32_plain(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const float *p,
                           float *u);

#endif
