/* Objects half way through a record, as bytes: the same from every machine, and so are those at its end where another
   machine goes on from them.

       saved first HALF           runs the first half and writes all objects
       saved second HALF WHOLE    resumes them, runs the second half, and writes them again */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "rampwise.h"

enum { N = 400, OSCILLATORS = 5, MOST_BYTES = 1 << 20 };

static void demand(int right, const char *what)
{
    if (right)
        return;
    fprintf(stderr, "saved: %s\n", what);
    exit(EXIT_FAILURE);
}

/* Eighths, the same on every machine; silence in between. */
static double sample(int i)
{
    return i > 150 && i < 170 ? 0 : (i * 37 % 65 - 32) / 8.0;
}

static rampwise_coeffs coeffs_of(int i, int kind)
{
    const rampwise_system sys = {1 + 0.25 * i, 0.5 * i, 30 * i * i};
    rampwise_coeffs c;
    demand(rampwise_coeffs_make(&c, &sys, 0x1p-6, kind, RAMPWISE_RAMP) == RAMPWISE_OK, "no coefficients");
    return c;
}

typedef struct objects {
    rampwise_bank *bank;
    rampwise_bank_f32 *bank_f32;
    rampwise_peaks *peaks;
    rampwise_stream stream;
    rampwise_stream_f32 stream_f32;
    rampwise_watch watch;
} objects;

static void make_banks(objects *o)
{
    static const int quantity[2] = {RAMPWISE_DISPLACEMENT, RAMPWISE_TOTAL_ACCELERATION};
    rampwise_coeffs c[OSCILLATORS];
    rampwise_coeffs_f32 single[OSCILLATORS];
    for (int i = 0; i < OSCILLATORS; ++i) {
        c[i] = coeffs_of(i, RAMPWISE_BASE_ACCELERATION);
        demand(rampwise_coeffs_make_f32(&single[i], &c[i].system, 0x1p-6, RAMPWISE_BASE_ACCELERATION,
                                        RAMPWISE_RAMP) == RAMPWISE_OK,
               "no coefficients");
    }
    demand(rampwise_bank_create(OSCILLATORS, c, RAMPWISE_FASTEST, &o->bank) == RAMPWISE_OK &&
               rampwise_bank_create_f32(OSCILLATORS, single, RAMPWISE_FASTEST, &o->bank_f32) == RAMPWISE_OK &&
               rampwise_peaks_create(OSCILLATORS, c, 2, quantity, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST,
                                     &o->peaks) == RAMPWISE_OK,
           "no banks");
}

static void make_streams(objects *o)
{
    const rampwise_coeffs c = coeffs_of(3, RAMPWISE_FORCE);
    rampwise_coeffs_f32 single;
    rampwise_stream_options options;
    rampwise_watch_options watched;
    rampwise_stream_options_init(&options);
    rampwise_watch_options_init(&watched);
    watched.level_count = 1;
    watched.level[0].value = 0.01;
    watched.level[0].direction = 1;
    demand(rampwise_coeffs_make_f32(&single, &c.system, 0x1p-6, RAMPWISE_FORCE, RAMPWISE_RAMP) ==
                   RAMPWISE_OK &&
               rampwise_stream_init(&o->stream, &c, &options) == RAMPWISE_OK &&
               rampwise_stream_init_f32(&o->stream_f32, &single, &options) == RAMPWISE_OK &&
               rampwise_watch_init(&o->watch, &c, &watched) == RAMPWISE_OK &&
               rampwise_stream_attach(&o->stream, &o->watch) == RAMPWISE_OK,
           "no streams");
}

static void run(objects *o, int begin, int end)
{
    for (int i = begin; i < end; ++i) {
        const double p = sample(i), streamed = i % 11 == 7 ? (double)NAN : p;
        const float single = (float)p, streamed_single = (float)streamed;
        demand(rampwise_bank_run(o->bank, 1, &p, NULL, NULL) == RAMPWISE_OK &&
                   rampwise_bank_run_f32(o->bank_f32, 1, &single, NULL, NULL) == RAMPWISE_OK &&
                   rampwise_peaks_run(o->peaks, 1, &p, NULL) == RAMPWISE_OK &&
                   rampwise_stream_put(&o->stream, 1, &streamed, NULL, NULL, NULL) == RAMPWISE_OK &&
                   rampwise_stream_put_f32(&o->stream_f32, 1, &streamed_single, NULL, NULL, NULL) ==
                       RAMPWISE_OK,
               "a sample is refused");
    }
}

/* Each object in its turn, written or resumed. */
#define EACH(DO, o)                                                                                          \
    DO(bank, , (o)->bank)                                                                                    \
    DO(bank, _f32, (o)->bank_f32)                                                                            \
    DO(peaks, , (o)->peaks)                                                                                  \
    DO(stream, , &(o)->stream) DO(stream, _f32, &(o)->stream_f32) DO(watch, , &(o)->watch)

static void write_all(const objects *o, const char *path)
{
    static unsigned char bytes[MOST_BYTES];
    size_t at = 0;
#define SAVE(kind, single, object)                                                                           \
    {                                                                                                        \
        const size_t size = rampwise_##kind##_saved_size##single(object);                                    \
        demand(size > 0 && size <= MOST_BYTES - at &&                                                        \
                   rampwise_##kind##_save##single(object, bytes + at, size) == RAMPWISE_OK,                  \
               "not saved: " #kind #single);                                                                 \
        at += size;                                                                                          \
    }
    EACH(SAVE, o)
    FILE *const file = fopen(path, "wb");
    demand(file != NULL && fwrite(bytes, 1, at, file) == at && fclose(file) == 0, "cannot write");
}

static void resume_all(objects *o, const char *path)
{
    static unsigned char bytes[MOST_BYTES];
    FILE *const file = fopen(path, "rb");
    demand(file != NULL, "cannot read");
    const size_t count = fread(bytes, 1, sizeof bytes, file);
    size_t at = 0;
    (void)fclose(file);
#define RESUME(kind, single, object)                                                                         \
    {                                                                                                        \
        const size_t size = rampwise_##kind##_saved_size##single(object);                                    \
        demand(size <= count - at &&                                                                         \
                   rampwise_##kind##_resume##single(object, bytes + at, size) == RAMPWISE_OK,                \
               "not resumed: " #kind #single);                                                               \
        at += size;                                                                                          \
    }
    EACH(RESUME, o)
    demand(at == count, "bytes are left");
}

int main(int argc, char **argv)
{
    static objects o;
    make_banks(&o);
    make_streams(&o);
    if (argc == 3 && strcmp(argv[1], "first") == 0) {
        run(&o, 0, N / 2);
        write_all(&o, argv[2]);
        return EXIT_SUCCESS;
    }
    demand(argc == 4 && strcmp(argv[1], "second") == 0, "first HALF, or second HALF WHOLE");
    resume_all(&o, argv[2]);
    run(&o, N / 2, N);
    write_all(&o, argv[3]);
    return EXIT_SUCCESS;
}
