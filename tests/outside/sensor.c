/* A real sensor signal (tests/data/heart.txt) streamed as raw integers, 5 % of its samples lost at random and its stamps
   jittered by up to a fifth of dt: the bits of rampwise_run_at over what is left of it, for its whole length, and for a
   part of it GSL's adaptive driver on the straight lines between the samples that came. Time is counted in 1/1024 s a
   sample, so that stamps are doubles without rounding. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/random.h"
#include "../support/suite.h"
#include "integrated.h"

enum { N = 108000, TICKS = 1024, INTEGRATED = 4000 };
static const double dt = 0x1p-10;

typedef struct sensor {
    int32_t raw[N];
    int64_t t[N];
    int lost[N];
} sensor;

static sensor record;

static void read_sensor(void)
{
    FILE *const file = fopen(TEST_DATA "/heart.i16", "rb");
    static unsigned char bytes[2 * N];
    ck_assert_msg(file != NULL, "%s is missing", TEST_DATA "/heart.i16");
    ck_assert_uint_eq(fread(bytes, 1, sizeof bytes, file), sizeof bytes);
    ck_assert_int_eq(fgetc(file), EOF);
    (void)fclose(file);
    for (int i = 0; i < N; ++i)
        record.raw[i] = bytes[2 * i] | bytes[2 * i + 1] << 8;
}

static void disturb(gsl_rng *r)
{
    for (int i = 0; i < N; ++i) {
        record.t[i] = (int64_t)TICKS * i + (int64_t)gsl_rng_uniform_int(r, 2 * TICKS / 5) - TICKS / 5;
        record.lost[i] = i > 0 && gsl_rng_uniform_int(r, 20) == 0;
    }
}

static double millivolts(int32_t raw)
{
    return fma(1.0 / 200, raw, -1024.0 / 200);
}

static double seconds(int64_t t)
{
    return ldexp((double)t, -20);
}

static rampwise_stream stream_of(const rampwise_coeffs *c)
{
    rampwise_stream stream;
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.ticks = TICKS;
    o.scale = 1.0 / 200;
    o.offset = -1024.0 / 200;
    o.rail_low = 0;
    o.rail_high = 2047; /* of eleven bits */
    ck_assert_int_eq(rampwise_stream_init(&stream, c, &o), RAMPWISE_OK);
    return stream;
}

/* A lost sample in two is told by the integer that is none, with its stamp; the others just do not come. */
static void put(rampwise_stream *stream, int i)
{
    const int32_t none = INT32_MIN;
    if (!record.lost[i] || i % 2 == 0)
        ck_assert_int_eq(rampwise_stream_put_raw_at(stream, 1, &record.t[i],
                                                    record.lost[i] ? &none : &record.raw[i], NULL, NULL,
                                                    NULL),
                         RAMPWISE_OK);
}

static rampwise_coeffs coeffs_of(double hertz, double zeta)
{
    rampwise_system sys;
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_system_hertz(&sys, hertz, zeta), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    return c;
}

static const double oscillators[][2] = {{0.4, 0.05}, {20, 0.01}, {170, 0.7}, {600, 0.05}, {3, 4}};
enum { OSCILLATORS = sizeof oscillators / sizeof *oscillators };

START_TEST(bits_of_irregular_times)
{
    gsl_rng *const r = random_make("bits_of_irregular_times");
    read_sensor();
    disturb(r);
    for (int k = 0; k < OSCILLATORS; ++k) {
        const rampwise_coeffs c = coeffs_of(oscillators[k][0], oscillators[k][1]);
        rampwise_stream stream = stream_of(&c);
        rampwise_stream_counts counts;
        rampwise_state s = {0}, got;
        uint64_t number, lost = 0;
        double t_last = 0;
        for (int i = 0; i < N; ++i) {
            put(&stream, i);
            lost += (uint64_t)record.lost[i];
            if (record.lost[i])
                continue;
            const double p = millivolts(record.raw[i]), t = seconds(record.t[i]);
            if (i == 0)
                rampwise_start(&s, 0, 0, p);
            else
                ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 1, &t, &p, NULL, NULL), RAMPWISE_OK);
            t_last = t;
            ck_assert_int_eq(rampwise_stream_state(&stream, &got, &number), RAMPWISE_OK);
            ck_assert_uint_eq(number, (uint64_t)i);
            ck_assert_mem_eq(&got, &s, sizeof s);
        }
        ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
        ck_assert_uint_eq(counts.good + lost, N);
        ck_assert_uint_le(counts.missing, lost);
        ck_assert_uint_ge(counts.missing + 10, lost); /* nothing comes after the last ones */
        ck_assert_uint_eq(counts.clipped, 0);
        ck_assert_uint_eq(counts.starts, 1);
    }
    gsl_rng_free(r);
}
END_TEST

/* The driver's bound of its own error is the tolerance (integrated.h). */
START_TEST(adaptive_driver)
{
    gsl_rng *const r = random_make("adaptive_driver");
    double worst = 0;
    read_sensor();
    disturb(r);
    for (int k = 0; k < OSCILLATORS; ++k) {
        const rampwise_coeffs c = coeffs_of(oscillators[k][0], oscillators[k][1]);
        rampwise_stream stream = stream_of(&c);
        integrated e;
        int last = 0;
        integrated_init(&e, &c.system, RAMPWISE_FORCE, 5, dt, INTEGRATED * dt);
        integrated_start(&e, 0, 0, millivolts(record.raw[0]));
        put(&stream, 0);
        for (int i = 1; i < INTEGRATED; ++i) {
            rampwise_state got;
            integrated_value exact[MOTIONS];
            put(&stream, i);
            if (record.lost[i])
                continue;
            const double h = seconds(record.t[i] - record.t[last]);
            integrated_ramp(&e, millivolts(record.raw[last]), millivolts(record.raw[i]), h);
            integrated_to(&e, h);
            integrated_motion(&e, exact);
            last = i;
            ck_assert_int_eq(rampwise_stream_state(&stream, &got, NULL), RAMPWISE_OK);
            const double off_u = fabs(got.u - exact[MOTION_U].value) / exact[MOTION_U].tolerance;
            const double off_v = fabs(got.v - exact[MOTION_V].value) / exact[MOTION_V].tolerance;
            ck_assert_msg(off_u <= 1 && off_v <= 1,
                          "%g Hz, sample %d: off by %g and %g of the driver's bound", oscillators[k][0], i,
                          off_u, off_v);
            worst = fmax(worst, fmax(off_u, off_v));
        }
        integrated_clear(&e);
    }
    printf("adaptive_driver: off by %.2g of the driver's bound at most\n", worst);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, bits_of_irregular_times);
    tcase_add_test(tests, adaptive_driver);
}

int main(void)
{
    return suite_run("sensor", add_tests);
}
