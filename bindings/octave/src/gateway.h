/* What the parts of the gateway share.

   Thin: a command is one call of the library, or one for each column, between checked arrays. Commands that can fail
   answer the library's status first and then the index of what was at fault, from 1, or 0; the other answers are empty
   then. Wrong arguments of the gateway itself are errors "rampwise:gateway".

   Systems are a matrix of a column {mass; damper; stiffness} each. Samples are columns. Coefficients travel with
   dt, input and between, and are made where they are used.

   Errors leave by a jump. So memory is mxMalloc's, which Octave frees then, or belongs to the table of objects. */
#ifndef GATEWAY_H
#define GATEWAY_H

#include <stddef.h>
#include <stdint.h>
#include <mex.h>
#include <rampwise.h>

enum { ANSWERS = 10, HISTORIES = 4, MOTIONS = 8 };

/* ---- what comes in; all refuse what is not as they need it (arguments.c) ---- */

void refuse(const char *what);
const mxArray *of_class(const mxArray *a, mxClassID class); /* a matrix of real numbers */
const mxArray *real_double(const mxArray *a);
double scalar(const mxArray *a);
int integer(const mxArray *a);
size_t whole_number(const mxArray *a);                 /* 0 to 2^31 - 1 */
uint64_t sample_number(const mxArray *a);              /* 0 to 2^53 */
const double *doubles(const mxArray *a, size_t count); /* a vector or matrix of so many elements */
const double *of_size(const mxArray *a, size_t rows, size_t columns);
const char *text(const mxArray *a); /* valid until the call ends */
size_t count_systems(const mxArray *a);

/* Aligned, and freed when the call ends. */
void *memory(size_t bytes, size_t alignment);

/* One set a system, from in[0..3]: systems, dt, input, between. NULL, with the answer given, where it fails. */
rampwise_coeffs *make_coefficients(mxArray **out, const mxArray **in);
rampwise_coeffs_f32 *make_coefficients_f32(mxArray **out, const mxArray **in);

/* ---- what goes out ---- */

mxArray *zeros(mxClassID class, size_t rows, size_t columns);
mxArray *matrix(size_t rows, size_t columns); /* of doubles, zeros */
mxArray *number(double x);
mxArray *empty(void);

/* The status, and where; all other answers empty. Returns the status. */
int answer(mxArray **out, int status, size_t fault);

/* Room from out[2] on for those wanted of `most` histories, the first four u, v, u'' and total; the others stay empty.
   And column j of these four. */
void want_histories(mxArray **out, const mxArray *wanted, int most, mxClassID class, size_t n,
                    size_t columns);
double *column(const mxArray *a, size_t n, size_t j); /* of n elements; NULL where a is empty */
float *column_f32(const mxArray *a, size_t n, size_t j);
rampwise_history histories(mxArray **out, size_t n, size_t j);
rampwise_history_f32 histories_f32(mxArray **out, size_t n, size_t j);

/* larger in size, its time, high, its time, low, its time (records.c) */
void put_peak(double *six, const rampwise_peak *peak, double dt);

/* ---- objects that stay (objects.c) ---- */

typedef struct object_kind {
    const char *name;
    void (*release)(void *object);
} object_kind;

/* The table takes the object, which it releases where it cannot. */
mxArray *object_keep(const object_kind *kind, void *object);

/* Refuses a number that is not, or no more, one of this kind. */
void *object_find(const mxArray *a, const object_kind *kind);

void objects_clear(void);

/* ---- commands ---- */

typedef void command_call(mxArray **out, const mxArray **in);
command_call coefficients, system_from, response, response_f32, peaks, rigid_peaks, list_log, list_octaves;
command_call energies, energy_spectrum, directions, percentiles_over_angle;
command_call roots_to_modes, static_correction, mass_share, combine;
command_call structure_make, structure_start, structure_run, structure_read, structure_save, structure_resume;
command_call object_free, objects;
command_call bank_make, bank_start, bank_run, bank_read, bank_set, bank_retune, bank_count;
command_call bank_make_f32, bank_start_f32, bank_run_f32, bank_read_f32, bank_set_f32, bank_retune_f32,
    bank_count_f32;
command_call stream_make, stream_put, stream_read, stream_retune, stream_start, stream_skip, stream_watch,
    stream_save, stream_resume, watch_read, watch_events, watch_reset, watch_release;
command_call stream_make_f32, stream_put_f32, stream_read_f32, stream_retune_f32, stream_start_f32,
    stream_skip_f32, stream_watch_f32, stream_save_f32, stream_resume_f32, watch_read_f32, watch_events_f32,
    watch_reset_f32, watch_release_f32;

#endif
