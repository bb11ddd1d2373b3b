/* rampwise/stream.h: one oscillator on live data.

   A stream takes samples as they come, one or a block at a time, in the caller's memory, and keeps what a
   live signal needs beside the step: raw integers with scale and offset, rails, time stamps that jitter,
   samples that are missing, a start by the first sample, outputs by name, watches (watch.h), saving.

   - Samples are numbered from 0, or from what rampwise_stream_start says; missing ones have numbers too. At a
     fixed rate a stream has the bits of rampwise_run on the same samples, however they are cut into blocks.
   - Stamps are whole numbers of a tick, `ticks` of which make one dt: for nanoseconds and dt = 0.005 s, ticks
     is 5,000,000. A step is as long as its two stamps say. Steps of exactly one dt have the fixed rate's
     bits; others are dt d / ticks long for stamps d apart, rounded once, and have the bits of rampwise_run_at
     where that sees the same intervals (outputs that contain p - p_before: up to the last digits).
   - A sample is missing where it is NaN or infinite, where a raw one is missing_raw, where stamps are one and
     a half dt apart or more (as many as fit, rounded), and where rampwise_stream_skip_to says so.
     RAMPWISE_GAP_BRIDGE: nothing happens until the next good sample, then one exact step over all of them
     under one straight (or held) load. A block's outputs and reads give the values of the last good sample.
     RAMPWISE_GAP_HOLD: each missing sample is a step under the last good load; outputs are that response.
     RAMPWISE_GAP_REFUSE: an error.
   - When more than `longest` in a row were missing, the next good sample either starts the stream anew
     (RAMPWISE_GAP_RESTART), or is refused with RAMPWISE_ERROR_GAP until the caller calls
     rampwise_stream_start (RAMPWISE_GAP_REFUSE). Held steps end after `longest`.
   - Flags (watch.h) follow what they touch: a clipped sample marks its own value and the next, whose step
     begins with it; a bridge marks the value at its end.

   Errors: a call that reports one has changed nothing, but for RAMPWISE_ERROR_OVERFLOW, as in record.h: the
   samples before `bad` were taken, and the state is the last finite one.

   Work a sample: at a fixed rate one step, 3 fused multiply-adds an output, the watches' work, and beside
   theirs nothing that depends on the data. An interval of another length is looked for in the last one, then
   in the caller's prepared table (one comparison an entry), and else costs one making of coefficients
   (coefficients.h). With RAMPWISE_GAP_HOLD a jump over k missing samples takes the smaller of k and `longest`
   steps. After a stream is made: no allocation, lock, system call or unbounded loop; the floating-point
   environment stays. Silence costs no more than sound (step.h).

   Threads: a stream and its watches belong to one thread at a time. All since 0.1. */
#ifndef RAMPWISE_STREAM_H
#define RAMPWISE_STREAM_H

#include "watch.h"

enum { RAMPWISE_STREAM_OUTPUTS = 8 };

/* How the first sample starts a stream: at rest under it (at once, step.h), or settled under it. */
enum { RAMPWISE_AT_REST = 61, RAMPWISE_SETTLED = 62 };

/* What is done about missing samples, and about too many in a row. */
enum {
    RAMPWISE_GAP_BRIDGE = 65,
    RAMPWISE_GAP_HOLD = 66,
    RAMPWISE_GAP_REFUSE = 67,
    RAMPWISE_GAP_RESTART = 68
};

/* Coefficients for one length of interval, prepared where making them takes too long. Filled by
   rampwise_interval_make only, here or on a host that prints it as a constant
   (tools/coefficients_as_source). */
typedef struct rampwise_interval {
    uint64_t ticks;
    rampwise_coeffs c;
} rampwise_interval;

/* Begin with rampwise_stream_options_init; its values stand behind each member. */
typedef struct rampwise_stream_options {
    size_t size;         /* of this struct */
    int32_t start;       /* RAMPWISE_AT_REST or RAMPWISE_SETTLED: at rest */
    int32_t missing;     /* RAMPWISE_GAP_BRIDGE, _HOLD or _REFUSE: bridge */
    int32_t beyond;      /* RAMPWISE_GAP_RESTART or _REFUSE: restart */
    int32_t missing_raw; /* the raw integer that is no sample: INT32_MIN */
    uint64_t longest;    /* samples in a row that may be missing: 10 */
    uint64_t ticks;      /* ticks in one dt: 1 */
    /* A raw integer is offset + scale raw, rounded once (both are rounded to single precision first there,
       and raw integers above 2^24 too): 1 and 0. */
    double scale, offset;
    /* A sample at or beyond a rail, as it is put in (raw ones before scale and offset), is clipped: -INFINITY
       and INFINITY. */
    double rail_low, rail_high;
    int32_t output_count; /* 0 to 8: 1 */
    /* 1: which samples are missing is told by their numbers (rampwise_stream_skip_to), and stamps of up to
       longest + 1 dt later mean one longer step, however they jitter; 0: by stamps too. 0. */
    int32_t numbered;
    rampwise_output output[RAMPWISE_STREAM_OUTPUTS]; /* displacement */
    /* Prepared intervals, rampwise_interval[interval_count] (_f32 in single precision), of the stream's
       system, input and between; used, not copied: NULL and 0. */
    const void *intervals;
    size_t interval_count;
    size_t reserve[4];
} rampwise_stream_options;

/* What has come in so far. Numbers of samples; last_... are those of the last such sample, UINT64_MAX for
   none. */
typedef struct rampwise_stream_counts {
    uint64_t next; /* number of the sample that is expected next */
    uint64_t good, missing, clipped;
    uint64_t bridges, starts;
    uint64_t longest; /* run of missing samples */
    uint64_t last_missing, last_clipped;
} rampwise_stream_counts;

/* In the caller's memory, of fixed size (static arrays are arrays of it); all members are private. */
typedef struct rampwise_stream {
    rampwise_coeffs c_, other_; /* of one dt; of the interval met last that was neither that nor prepared */
    rampwise_state s_;
    double row_[RAMPWISE_STREAM_OUTPUTS][4];
    double scale_, offset_, rail_low_, rail_high_;
    rampwise_output output_[RAMPWISE_STREAM_OUTPUTS];
    const rampwise_interval *intervals_;
    size_t interval_count_;
    rampwise_watch *watches_;
    uint64_t other_ticks_, ticks_, longest_;
    uint64_t time_;    /* the last stamp */
    uint64_t pending_; /* ticks from the state to the last stamp */
    uint64_t sample_;  /* the state's number */
    uint64_t run_;     /* samples missing after it */
    rampwise_stream_counts counts_;
    int32_t start_, missing_, beyond_, missing_raw_, output_count_;
    int32_t started_, timed_, touched_; /* flags that the next step inherits */
    int32_t flags_, numbered_;          /* flags_: of the last sample */
    uint64_t reserve_[3];
} rampwise_stream;

/* In single precision; options and counts are the same. Intervals that are not prepared are made, in double
   arithmetic, of the oscillator as its coefficients keep it, in single precision; rampwise_interval_make_f32
   does so too. */
typedef struct rampwise_interval_f32 {
    uint64_t ticks;
    rampwise_coeffs_f32 c;
} rampwise_interval_f32;

typedef struct rampwise_stream_f32 {
    rampwise_coeffs_f32 c_, other_;
    rampwise_state_f32 s_;
    float row_[RAMPWISE_STREAM_OUTPUTS][4];
    float scale_, offset_, rail_low_, rail_high_;
    rampwise_output output_[RAMPWISE_STREAM_OUTPUTS];
    const rampwise_interval_f32 *intervals_;
    size_t interval_count_;
    rampwise_watch_f32 *watches_;
    uint64_t other_ticks_, ticks_, longest_;
    uint64_t time_;
    uint64_t pending_;
    uint64_t sample_;
    uint64_t run_;
    rampwise_stream_counts counts_;
    int32_t start_, missing_, beyond_, missing_raw_, output_count_;
    int32_t started_, timed_, touched_;
    int32_t flags_, numbered_;
    uint64_t reserve_[3];
} rampwise_stream_f32;

/* The same in bytes, for memory that is not declared with the type; aligned as doubles and pointers are. */
#define RAMPWISE_STREAM_BYTES (sizeof(rampwise_stream))
#define RAMPWISE_STREAM_BYTES_F32 (sizeof(rampwise_stream_f32))

RAMPWISE_BEGIN

RAMPWISE_API void rampwise_stream_options_init(rampwise_stream_options *options);

/* Prepares coefficients for `interval_ticks` under those of one dt, c, of `ticks` ticks.
   RAMPWISE_ERROR_MISSING, _NOT_MADE, _COUNT (either is 0, or above 2^53), or one of rampwise_coeffs_make. */
RAMPWISE_API int rampwise_interval_make(rampwise_interval *interval, const rampwise_coeffs *c, uint64_t ticks,
                                        uint64_t interval_ticks);

/* A stream under coefficients c, copied, that waits for its first sample, number 0.
   RAMPWISE_ERROR_MISSING, _NOT_MADE; _COUNT (options not begun with their init, output_count, or ticks 0 or
   (longest + 1) ticks above 2^52); _FLAGS (start, missing, beyond or numbered); _QUANTITY, _COEFFICIENT
   (output.h); _SAMPLE (scale, offset or a rail is NaN, or infinite where it must not be); _NO_REST (settled,
   and there is no rest); _DIFFERENT (a prepared interval of another oscillator); or one of
   rampwise_coeffs_make for the longest bridge, 2 (longest + 1) dt. */
RAMPWISE_API int rampwise_stream_init(rampwise_stream *stream, const rampwise_coeffs *c,
                                      const rampwise_stream_options *options);

/* Begins anew; counts go on. With s NULL the next sample, number `number`, starts it. Else the state is s at
   sample `number`, and the next sample comes one dt later. RAMPWISE_ERROR_MISSING, _STATE. */
RAMPWISE_API int rampwise_stream_start(rampwise_stream *stream, const rampwise_state *s, uint64_t number);

/* The next n samples, one dt apart. out (or NULL) gets frames of the outputs, [n][output_count]; flags (or
   NULL) one number each, of RAMPWISE_STARTED and so on. Before the first good sample outputs are NaN. bad may
   be NULL. Nothing may overlap. RAMPWISE_ERROR_MISSING; _SAMPLE (missing under RAMPWISE_GAP_REFUSE); _GAP;
   _OVERFLOW. */
RAMPWISE_API int rampwise_stream_put(rampwise_stream *stream, size_t n, const double *p, double *out,
                                     uint8_t *flags, size_t *bad);

/* The same of raw integers. */
RAMPWISE_API int rampwise_stream_put_raw(rampwise_stream *stream, size_t n, const int32_t *raw, double *out,
                                         uint8_t *flags, size_t *bad);

/* The same with stamps t[n], in ticks, each later than the one before; missing samples have stamps too, or
   none. rampwise_stream_put counts one dt on from the last stamp, or from 0 at the first sample.
   RAMPWISE_ERROR_TIME where a stamp stands still or runs back. */
RAMPWISE_API int rampwise_stream_put_at(rampwise_stream *stream, size_t n, const int64_t *t, const double *p,
                                        double *out, uint8_t *flags, size_t *bad);
RAMPWISE_API int rampwise_stream_put_raw_at(rampwise_stream *stream, size_t n, const int64_t *t,
                                            const int32_t *raw, double *out, uint8_t *flags, size_t *bad);

/* The samples before `number` are missing: a gap in the sender's sequence, or a flag on one sample.
   RAMPWISE_ERROR_MISSING; _TIME (it lies before the expected one); _GAP (RAMPWISE_GAP_REFUSE); _OVERFLOW. */
RAMPWISE_API int rampwise_stream_skip_to(rampwise_stream *stream, uint64_t number);

/* The outputs as they stand, out[output_count], and their flags: either may be NULL. While
   samples are missing those of the last good one, or the held load's. RAMPWISE_ERROR_MISSING;
   _COUNT (no good sample yet). */
RAMPWISE_API int rampwise_stream_read(const rampwise_stream *stream, double *out, uint8_t *flags);

/* The state and its sample's number (either may be NULL). RAMPWISE_ERROR_MISSING, _COUNT. */
RAMPWISE_API int rampwise_stream_state(const rampwise_stream *stream, rampwise_state *s, uint64_t *number);

RAMPWISE_API int rampwise_stream_count(const rampwise_stream *stream, rampwise_stream_counts *counts);

/* Other coefficients of the same dt, input and between, from the next step on: displacement and
   velocity stay, named outputs follow, and so do the watches. intervals and interval_count replace
   the prepared ones. RAMPWISE_ERROR_MISSING, _NOT_MADE, _DIFFERENT, or others of
   rampwise_stream_init and rampwise_watch_init. */
RAMPWISE_API int rampwise_stream_retune(rampwise_stream *stream, const rampwise_coeffs *c,
                                        const rampwise_interval *intervals, size_t interval_count);

/* The watch is told every step from here on; it begins at the present state, or with the first sample.
   It must have been made for the same dt, input and between (RAMPWISE_ERROR_DIFFERENT, or others of
   rampwise_watch_init), and not be attached to another stream. NULL detaches all.
   RAMPWISE_ERROR_MISSING (stream). */
RAMPWISE_API int rampwise_stream_attach(rampwise_stream *stream, rampwise_watch *watch);

/* All of a stream as bytes; it goes on with the same bits where they are resumed, on any machine. Watches are
   saved by themselves. Bytes are little-endian, begin with a head that names object, version and edition of
   the arithmetic, and end with a CRC-32 (ISO 3309).

   saved_size   the bytes it takes, always the same for a stream.
   save         RAMPWISE_ERROR_MISSING; _MEMORY (count is less than that).
   resume       into a stream that was made by rampwise_stream_init: everything is replaced, but its prepared
                intervals and watches stay. count is exactly the size. RAMPWISE_ERROR_MISSING; _DAMAGED; _KIND
                (bytes of another kind of object); _EDITION (of a version with other bits); _DIFFERENT (the
                prepared intervals are another oscillator's). */
RAMPWISE_API size_t rampwise_stream_saved_size(const rampwise_stream *stream);
RAMPWISE_API int rampwise_stream_save(const rampwise_stream *stream, void *bytes, size_t count);
RAMPWISE_API int rampwise_stream_resume(rampwise_stream *stream, const void *bytes, size_t count);

/* The same in single precision. */
RAMPWISE_API int rampwise_interval_make_f32(rampwise_interval_f32 *interval, const rampwise_coeffs_f32 *c,
                                            uint64_t ticks, uint64_t interval_ticks);
RAMPWISE_API int rampwise_stream_init_f32(rampwise_stream_f32 *stream, const rampwise_coeffs_f32 *c,
                                          const rampwise_stream_options *options);
RAMPWISE_API int rampwise_stream_start_f32(rampwise_stream_f32 *stream, const rampwise_state_f32 *s,
                                           uint64_t number);
RAMPWISE_API int rampwise_stream_put_f32(rampwise_stream_f32 *stream, size_t n, const float *p, float *out,
                                         uint8_t *flags, size_t *bad);
RAMPWISE_API int rampwise_stream_put_raw_f32(rampwise_stream_f32 *stream, size_t n, const int32_t *raw,
                                             float *out, uint8_t *flags, size_t *bad);
RAMPWISE_API int rampwise_stream_put_at_f32(rampwise_stream_f32 *stream, size_t n, const int64_t *t,
                                            const float *p, float *out, uint8_t *flags, size_t *bad);
RAMPWISE_API int rampwise_stream_put_raw_at_f32(rampwise_stream_f32 *stream, size_t n, const int64_t *t,
                                                const int32_t *raw, float *out, uint8_t *flags, size_t *bad);
RAMPWISE_API int rampwise_stream_skip_to_f32(rampwise_stream_f32 *stream, uint64_t number);
RAMPWISE_API int rampwise_stream_read_f32(const rampwise_stream_f32 *stream, float *out, uint8_t *flags);
RAMPWISE_API int rampwise_stream_state_f32(const rampwise_stream_f32 *stream, rampwise_state_f32 *s,
                                           uint64_t *number);
RAMPWISE_API int rampwise_stream_count_f32(const rampwise_stream_f32 *stream, rampwise_stream_counts *counts);
RAMPWISE_API int rampwise_stream_retune_f32(rampwise_stream_f32 *stream, const rampwise_coeffs_f32 *c,
                                            const rampwise_interval_f32 *intervals, size_t interval_count);
RAMPWISE_API int rampwise_stream_attach_f32(rampwise_stream_f32 *stream, rampwise_watch_f32 *watch);
RAMPWISE_API size_t rampwise_stream_saved_size_f32(const rampwise_stream_f32 *stream);
RAMPWISE_API int rampwise_stream_save_f32(const rampwise_stream_f32 *stream, void *bytes, size_t count);
RAMPWISE_API int rampwise_stream_resume_f32(rampwise_stream_f32 *stream, const void *bytes, size_t count);

RAMPWISE_END

#endif
