/* rampwise/bank.h: many oscillators under one input.

   Functions in _f32 are the same in single precision.

   N oscillators, any mix of systems, with one dt, input and between, one a lane of the processor's
   vectors. Every result has the bits of N separate rampwise_run calls, whatever the instruction set
   and however a record is cut into calls. Oscillators are numbered 0 to N - 1 in the order given.

   Overflow does not stop a bank. An oscillator whose displacement or velocity is larger than a
   double can hold is stopped: it keeps its last finite u and v until it is started, set or tuned
   anew, and the others go on.

   Threads: a bank belongs to one thread at a time; different banks are independent. After a bank is
   made, no call allocates. Work: N n steps for n samples, at the speed of the machine's fused
   multiply-adds from some 64 oscillators on; memory about 350 bytes an oscillator, whatever n. All
   since 0.1. */
#ifndef RAMPWISE_BANK_H
#define RAMPWISE_BANK_H

#include <stddef.h>
#include "instructions.h"
#include "record.h"

typedef struct rampwise_bank rampwise_bank;

RAMPWISE_BEGIN

/* Bytes of memory for a bank of n oscillators, 1 or more, and the alignment that its first byte
   needs; 0 where n is 0 or too large for this machine. The same for every instruction set. */
RAMPWISE_API size_t rampwise_bank_size(size_t n);
RAMPWISE_API size_t rampwise_bank_alignment(void);

/* A bank of n oscillators c[0] to c[n - 1], copied, in the caller's memory, at rest under zero
   input; *bank points into memory, which must live as long and is given back by its owner.
   `instructions` is RAMPWISE_FASTEST, or forces a set. RAMPWISE_ERROR_MISSING; _MEMORY (fewer bytes
   than rampwise_bank_size, or not aligned); _COUNT (n is 0 or too large); _NOT_MADE; _DIFFERENT
   (dt, input and between are not the same in all); _INSTRUCTIONS (not a set, not built, or not this
   processor's). */
RAMPWISE_API int rampwise_bank_init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c,
                                    int instructions, rampwise_bank **bank);

/* The same in memory from malloc; RAMPWISE_ERROR_MEMORY where there is none. */
RAMPWISE_API int rampwise_bank_create(size_t n, const rampwise_coeffs *c, int instructions,
                                      rampwise_bank **bank);

/* Frees a bank of rampwise_bank_create; NULL is allowed. */
RAMPWISE_API void rampwise_bank_free(rampwise_bank *bank);

/* How many oscillators, and which set of instructions it uses. */
RAMPWISE_API size_t rampwise_bank_count(const rampwise_bank *bank);
RAMPWISE_API int rampwise_bank_instructions(const rampwise_bank *bank);

/* Starts all oscillators at rest under the input p0 (the start "at once" of step.h).
   RAMPWISE_ERROR_MISSING, _SAMPLE. */
RAMPWISE_API int rampwise_bank_start(rampwise_bank *bank, double p0);

/* Sets and gets the states of all: s[n]. One input means that p is the same in all of them, and
   p_before too (RAMPWISE_ERROR_DIFFERENT). RAMPWISE_ERROR_MISSING, _STATE. */
RAMPWISE_API int rampwise_bank_set(rampwise_bank *bank, const rampwise_state *s);
RAMPWISE_API int rampwise_bank_get(const rampwise_bank *bank, rampwise_state *s);

/* Gives oscillator i other coefficients, of the same dt, input and between; its displacement and
   velocity stay. RAMPWISE_ERROR_MISSING, _COUNT (i), _NOT_MADE, _DIFFERENT. */
RAMPWISE_API int rampwise_bank_retune(rampwise_bank *bank, size_t i, const rampwise_coeffs *c);

/* What is wanted of a chunk beyond the states, zeroed where nothing is. Begin with
   rampwise_bank_wanted_init. */
typedef struct rampwise_bank_wanted {
    size_t size; /* of this struct */
    /* largest[N]: each is raised to the largest |u| of its oscillator at the chunk's samples. */
    double *largest;
    /* Full histories of oscillators chosen[0] to chosen[chosen_count - 1], all different:
       [chosen_count][n]. None may overlap p. A history ends before a sample where one of its values
       overflows, and is not written for an oscillator that is stopped already. */
    size_t chosen_count;
    const size_t *chosen;
    rampwise_history history;
    size_t reserve[4];
} rampwise_bank_wanted;

RAMPWISE_API void rampwise_bank_wanted_init(rampwise_bank_wanted *wanted);

/* The next n samples, one step each, for all; n = 1 is a live step. wanted may be NULL.
   RAMPWISE_ERROR_MISSING, _SAMPLE (with the index in bad), _COUNT (a chosen number is N or more, or wanted
   was not begun with its init): nothing has changed. RAMPWISE_ERROR_OVERFLOW: an oscillator was stopped or a
   history ended during this call, the earliest at sample bad; all others are complete. bad may be NULL. */
RAMPWISE_API int rampwise_bank_run(rampwise_bank *bank, size_t n, const double *p,
                                   const rampwise_bank_wanted *wanted, size_t *bad);

/* How many oscillators are stopped; *first (may be NULL) is the first of them, where there is one. */
RAMPWISE_API size_t rampwise_bank_stopped(const rampwise_bank *bank, size_t *first);

/* u, v, u'' and the acceleration against a fixed frame of all at the present sample: arrays of N
   where wanted. Accelerations of a stopped oscillator are NaN. RAMPWISE_ERROR_MISSING. */
RAMPWISE_API int rampwise_bank_read(const rampwise_bank *bank, const rampwise_history *now);

/* All of a bank as bytes, coefficients and states; resumed, it goes on with the same bits, on any machine and
   set of instructions. Resumed into a bank of as many oscillators, of any kind: everything is replaced. The
   bytes and the errors are those of rampwise_stream_save and rampwise_stream_resume (stream.h). */
RAMPWISE_API size_t rampwise_bank_saved_size(const rampwise_bank *bank);
RAMPWISE_API int rampwise_bank_save(const rampwise_bank *bank, void *bytes, size_t count);
RAMPWISE_API int rampwise_bank_resume(rampwise_bank *bank, const void *bytes, size_t count);

/* All of it in single precision: twice the lanes, a little more work a step (step_f32), about 180 bytes an
   oscillator. What is said above holds with float for double. Since 0.1. */
typedef struct rampwise_bank_f32 rampwise_bank_f32;

typedef struct rampwise_bank_wanted_f32 {
    size_t size; /* of this struct */
    float *largest;
    size_t chosen_count;
    const size_t *chosen;
    rampwise_history_f32 history;
    size_t reserve[4];
} rampwise_bank_wanted_f32;

RAMPWISE_API void rampwise_bank_wanted_init_f32(rampwise_bank_wanted_f32 *wanted);
RAMPWISE_API size_t rampwise_bank_size_f32(size_t n);
RAMPWISE_API size_t rampwise_bank_alignment_f32(void);
RAMPWISE_API int rampwise_bank_init_f32(void *memory, size_t bytes, size_t n, const rampwise_coeffs_f32 *c,
                                        int instructions, rampwise_bank_f32 **bank);
RAMPWISE_API int rampwise_bank_create_f32(size_t n, const rampwise_coeffs_f32 *c, int instructions,
                                          rampwise_bank_f32 **bank);
RAMPWISE_API void rampwise_bank_free_f32(rampwise_bank_f32 *bank);
RAMPWISE_API size_t rampwise_bank_count_f32(const rampwise_bank_f32 *bank);
RAMPWISE_API int rampwise_bank_instructions_f32(const rampwise_bank_f32 *bank);
RAMPWISE_API int rampwise_bank_start_f32(rampwise_bank_f32 *bank, float p0);
RAMPWISE_API int rampwise_bank_set_f32(rampwise_bank_f32 *bank, const rampwise_state_f32 *s);
RAMPWISE_API int rampwise_bank_get_f32(const rampwise_bank_f32 *bank, rampwise_state_f32 *s);
RAMPWISE_API int rampwise_bank_retune_f32(rampwise_bank_f32 *bank, size_t i, const rampwise_coeffs_f32 *c);
RAMPWISE_API int rampwise_bank_run_f32(rampwise_bank_f32 *bank, size_t n, const float *p,
                                       const rampwise_bank_wanted_f32 *wanted, size_t *bad);
RAMPWISE_API size_t rampwise_bank_stopped_f32(const rampwise_bank_f32 *bank, size_t *first);
RAMPWISE_API int rampwise_bank_read_f32(const rampwise_bank_f32 *bank, const rampwise_history_f32 *now);
RAMPWISE_API size_t rampwise_bank_saved_size_f32(const rampwise_bank_f32 *bank);
RAMPWISE_API int rampwise_bank_save_f32(const rampwise_bank_f32 *bank, void *bytes, size_t count);
RAMPWISE_API int rampwise_bank_resume_f32(rampwise_bank_f32 *bank, const void *bytes, size_t count);

RAMPWISE_END

#endif
