/* Streams and watches in single precision: the bits of rampwise_run_f32, bridges by coefficients made for
   them, saving; a watch beside the same one in double. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { N = 300, OUTPUTS = 4 };

static const double dt = 0x1p-10;

/* Mass, damper and stiffness are floats, so that single precision keeps the oscillator as it is. */
static rampwise_system system_of(int regime, int kind, double theta)
{
    rampwise_system s = regime_system(regime, theta, dt);
    s.mass = (float)s.mass;
    s.damper = kind == KINDS - 1 ? 0 : (double)(float)s.damper;
    s.stiffness = (float)s.stiffness;
    return s;
}

static rampwise_coeffs_f32 coeffs_of(const rampwise_system *s, double length, int kind)
{
    rampwise_coeffs_f32 c;
    ck_assert_int_eq(rampwise_coeffs_make_f32(&c, s, length, kinds[kind][0], kinds[kind][1]), RAMPWISE_OK);
    return c;
}

static rampwise_stream_options options_of_four(void)
{
    rampwise_stream_options o;
    rampwise_stream_options_init(&o);
    o.output_count = OUTPUTS;
    o.output[0] = (rampwise_output){{1, 0, 0, 0}, RAMPWISE_WEIGHTED, 0};
    o.output[1] = (rampwise_output){{0, 1, 0, 0}, RAMPWISE_WEIGHTED, 0};
    o.output[2].quantity = RAMPWISE_ACCELERATION;
    o.output[3].quantity = RAMPWISE_TOTAL_ACCELERATION;
    return o;
}

START_TEST(any_blocks)
{
    gsl_rng *const r = random_make("any_blocks");
    float p[N], out[N][OUTPUTS], u[N], v[N], a[N], total[N];
    for (int i = 0; i < KINDS * 7; ++i) {
        const rampwise_system system = system_of(i / KINDS, i % KINDS, random_log(r, 1e-2, 2));
        const rampwise_coeffs_f32 c = coeffs_of(&system, dt, i % KINDS);
        const rampwise_stream_options o = options_of_four();
        const rampwise_history_f32 want = {u, v, a, total};
        rampwise_stream_f32 stream;
        for (int k = 0; k < N; ++k)
            p[k] = (float)random_between(r, -1, 1);
        ck_assert_int_eq(rampwise_stream_init_f32(&stream, &c, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_solve_f32(&c, 0, 0, N, p, &want, NULL), RAMPWISE_OK);
        for (int done = 0; done < N;) {
            int part = (int)gsl_rng_uniform_int(r, 40);
            part = part > N - done ? N - done : part;
            ck_assert_int_eq(rampwise_stream_put_f32(&stream, (size_t)part, p + done, out[done], NULL, NULL),
                             RAMPWISE_OK);
            done += part;
        }
        for (int k = 0; k < N; ++k)
            ck_assert(out[k][0] == u[k] && out[k][1] == v[k] && out[k][2] == a[k] && out[k][3] == total[k]);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(bridges_and_saving)
{
    gsl_rng *const r = random_make("bridges_and_saving");
    for (int i = 0; i < KINDS * 6; ++i) {
        const int kind = i % KINDS;
        const rampwise_system system = system_of(i / KINDS, kind, random_log(r, 1e-2, 2));
        const rampwise_coeffs_f32 c = coeffs_of(&system, dt, kind);
        const rampwise_stream_options o = options_of_four();
        rampwise_stream_f32 stream, other;
        rampwise_state_f32 s, got;
        uint64_t number;
        unsigned char bytes[4096];
        ck_assert_int_eq(rampwise_stream_init_f32(&stream, &c, &o), RAMPWISE_OK);
        other = stream;
        const size_t size = rampwise_stream_saved_size_f32(&stream);
        ck_assert(size <= sizeof bytes);
        int gap = 0;
        for (uint64_t k = 0; k < N; ++k) {
            const int missing = k > 0 && gap < 9 && gsl_rng_uniform_int(r, 3) == 0;
            const float p = missing ? NAN : (float)random_between(r, -1, 1);
            ck_assert_int_eq(rampwise_stream_put_f32(&stream, 1, &p, NULL, NULL, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_save_f32(&stream, bytes, size), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_resume_f32(&other, bytes, size), RAMPWISE_OK);
            stream = other;
            if (missing) {
                ++gap;
                continue;
            }
            const rampwise_coeffs_f32 step = coeffs_of(&system, (gap + 1) * dt, kind);
            if (k == 0) {
                rampwise_start_f32(&s, 0, 0, p);
            } else {
                const float before = s.p;
                rampwise_step_f32(&step, &s, p);
                if (gap > 0)
                    s.p_before = p - (p - before) * (step.rate / c.rate);
            }
            ck_assert_int_eq(rampwise_stream_state_f32(&stream, &got, &number), RAMPWISE_OK);
            ck_assert_mem_eq(&got, &s, sizeof s);
            ck_assert_uint_eq(number, k);
            gap = 0;
        }
        bytes[40] ^= 1;
        ck_assert_int_eq(rampwise_stream_resume_f32(&stream, bytes, size), RAMPWISE_ERROR_DAMAGED);
        rampwise_stream wide;
        const rampwise_coeffs same = made(system, dt, kind);
        ck_assert_int_eq(rampwise_stream_init(&wide, &same, &o), RAMPWISE_OK);
        bytes[40] ^= 1;
        ck_assert_int_eq(rampwise_stream_resume(&wide, bytes, size), RAMPWISE_ERROR_KIND);
    }
    gsl_rng_free(r);
}
END_TEST

/* Both streams see the same floats. Single precision is off by some 1e-6 of the largest value
   (tests/unit/single.c), 2e-5 leaves room; nine crossings of ten, those that are not nearly touches, agree
   within 1e-3 of a step. Crossings are counted behind a hysteresis that both errors together cannot bridge. */
START_TEST(watch_beside_double)
{
    gsl_rng *const r = random_make("watch_beside_double");
    long crossings = 0, near = 0;
    for (int i = 0; i < 40; ++i) {
        const int kind = i % 4, quantity = RAMPWISE_DISPLACEMENT + i / 4 % 2;
        const rampwise_system system = system_of(1 + i % 3, kind, random_log(r, 0.1, 3));
        const rampwise_coeffs_f32 narrow = coeffs_of(&system, dt, kind);
        const rampwise_coeffs wide = made(system, dt, kind);
        rampwise_stream a;
        rampwise_stream_f32 b;
        rampwise_watch watch_a;
        rampwise_watch_f32 watch_b;
        rampwise_watched place_a[20];
        rampwise_watched_f32 place_b[20];
        static rampwise_event event[2][N], got[2][N];
        rampwise_stream_options o;
        rampwise_watch_options w;
        float p[N];
        double pw[N], z[N], scale = 0;
        rampwise_stream_options_init(&o);
        o.output[0].quantity = quantity;
        for (int k = 0; k < N; ++k)
            pw[k] = p[k] = (float)random_between(r, -1, 1);
        ck_assert_int_eq(rampwise_stream_init(&a, &wide, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_put(&a, N, pw, z, NULL, NULL), RAMPWISE_OK);
        for (int k = 0; k < N; ++k)
            scale = fmax(scale, fabs(z[k]));
        rampwise_watch_options_init(&w);
        w.output.quantity = quantity;
        w.level_count = 1;
        w.level[0] = (rampwise_level){(double)(float)(scale / 4), scale / 3, 1, 0};
        w.window_steps = 10;
        w.event_capacity = N;
        w.window = place_a;
        w.events = event[0];
        ck_assert_int_eq(rampwise_watch_init(&watch_a, &wide, &w), RAMPWISE_OK);
        w.window = place_b;
        w.events = event[1];
        ck_assert_int_eq(rampwise_watch_init_f32(&watch_b, &narrow, &w), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_init(&a, &wide, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_init_f32(&b, &narrow, &o), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_attach(&a, &watch_a), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_attach_f32(&b, &watch_b), RAMPWISE_OK);
        for (int k = 0; k < N; ++k) {
            rampwise_peak want, peak;
            ck_assert_int_eq(rampwise_stream_put(&a, 1, &pw[k], NULL, NULL, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_put_f32(&b, 1, &p[k], NULL, NULL, NULL), RAMPWISE_OK);
            if (k == 0)
                continue;
            for (int span = RAMPWISE_SINCE_START; span <= RAMPWISE_IN_WINDOW; ++span) {
                ck_assert_int_eq(rampwise_watch_peak(&watch_a, span, &want), RAMPWISE_OK);
                ck_assert_int_eq(rampwise_watch_peak_f32(&watch_b, span, &peak), RAMPWISE_OK);
                ck_assert(fabs(want.high.value - peak.high.value) <= 2e-5 * scale);
                ck_assert(fabs(want.low.value - peak.low.value) <= 2e-5 * scale);
            }
        }
        const size_t told = rampwise_watch_events(&watch_a, N, got[0]);
        ck_assert_uint_eq(rampwise_watch_events_f32(&watch_b, N, got[1]), told);
        for (size_t k = 0; k < told; ++k) {
            const rampwise_event *const x = &got[0][k], *const y = &got[1][k];
            ck_assert_int_eq(x->direction, y->direction);
            const double apart = fabs((double)x->sample + x->fraction - (double)y->sample - y->fraction);
            ck_assert(apart <= 0.05);
            near += apart <= 1e-3;
        }
        crossings += (long)told;
    }
    ck_assert_int_gt(crossings, 300);
    ck_assert(near >= crossings * 9 / 10);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, any_blocks);
    tcase_add_test(tests, bridges_and_saving);
    tcase_add_test(tests, watch_beside_double);
}

int main(void)
{
    return suite_run("streams in single precision", add_tests);
}
