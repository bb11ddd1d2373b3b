/* This library, many inputs at a time: the record on every channel. */
#include <string.h>
#include "methods.h"

enum { CHANNELS = 64 };

/* Frames: channel j under oscillator case_spread(j, CHANNELS); records: all under the middle one. */
typedef struct channels {
    const bench_case *in;
    rampwise_coeffs c[CHANNELS];
    rampwise_state s[CHANNELS];
    size_t samples;
    double *p, *u;
} channels;

static channels *make(const bench_case *in, size_t samples)
{
    channels *const k = case_memory(sizeof *k);
    k->in = in;
    k->samples = samples;
    k->p = case_memory(sizeof *k->p * CHANNELS * samples);
    k->u = case_memory(sizeof *k->u * CHANNELS * samples);
    return k;
}

static void run_frames(void *self)
{
    channels *const k = self;
    const rampwise_history out = {.u = k->u};
    (void)rampwise_run_frames(CHANNELS, k->c, k->s, k->samples, k->p, &out, NULL);
}

static void run_records(void *self)
{
    channels *const k = self;
    const rampwise_history out = {.u = k->u};
    (void)rampwise_run_records(k->c, CHANNELS, k->s, k->samples, k->p, &out, NULL);
}

static void rest(channels *k)
{
    memset(k->s, 0, sizeof k->s);
}

static int frames_same_bits(void *self, const outcome *run)
{
    channels *const k = self;
    rest(k);
    run_frames(k);
    for (size_t j = 0; j < CHANNELS; ++j) {
        const outcome *const o = &run[case_spread(j, CHANNELS)];
        if (k->s[j].u != o->u || k->s[j].v != o->v || k->u[(CASE_SAMPLES - 1) * CHANNELS + j] != o->u)
            return 0;
    }
    return 1;
}

static int records_same_bits(void *self, const outcome *run)
{
    channels *const k = self;
    const outcome *const o = &run[CASE_OSCILLATORS / 2];
    rest(k);
    run_records(k);
    for (size_t j = 0; j < CHANNELS; ++j)
        if (k->s[j].u != o->u || k->s[j].v != o->v || k->u[(j + 1) * CASE_SAMPLES - 1] != o->u)
            return 0;
    return 1;
}

static channels *make_frames(const bench_case *in, size_t samples)
{
    channels *const k = make(in, samples);
    for (size_t j = 0; j < CHANNELS; ++j) {
        k->c[j] = in->c[case_spread(j, CHANNELS)];
        for (size_t i = 0; i < samples; ++i)
            k->p[i * CHANNELS + j] = in->p[i];
    }
    return k;
}

static channels *make_records(const bench_case *in, size_t samples)
{
    channels *const k = make(in, samples);
    k->c[0] = in->c[CASE_OSCILLATORS / 2];
    for (size_t j = 0; j < CHANNELS; ++j)
        memcpy(k->p + j * samples, in->p, samples * sizeof *in->p);
    return k;
}

static void add(task_list *list, const char *id, const char *name, channels *k, void (*run)(void *self),
                int (*same_bits)(void *self, const outcome *run))
{
    const int whole = k->samples == CASE_SAMPLES;
    task_add(list, (task){.kind = whole ? TASK_METHOD : TASK_PART,
                          .id = id,
                          .name = name,
                          .gives = "u",
                          .units = (double)CHANNELS * (double)k->samples,
                          .self = k,
                          .once = run,
                          .same_bits = whole ? same_bits : NULL});
}

void ours_channel_tasks(task_list *list, const bench_case *in)
{
    add(list, "run_frames", "rampwise_run_frames, 64 channels", make_frames(in, CASE_SAMPLES), run_frames,
        frames_same_bits);
    add(list, "run_records", "rampwise_run_records, 64 records", make_records(in, CASE_SAMPLES), run_records,
        records_same_bits);
    add(list, "run_frames_n200", "", make_frames(in, 200), run_frames, NULL);
    add(list, "run_records_n200", "", make_records(in, 200), run_records, NULL);
}
