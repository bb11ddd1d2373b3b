/* Streams: the bits of rampwise_run for any cutting into blocks and of rampwise_run_at over irregular or
   missing samples; policies, rails, raw integers, stamps, numbers, retuning, saving, refusals. */
#include <fenv.h>
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/seal.h"
#include "../support/suite.h"

enum { N = 400, OUTPUTS = 4 };

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

static rampwise_stream stream_of(const rampwise_coeffs *c, const rampwise_stream_options *o)
{
    rampwise_stream stream;
    ck_assert_int_eq(rampwise_stream_init(&stream, c, o), RAMPWISE_OK);
    return stream;
}

static void check_state(const rampwise_stream *stream, const rampwise_state *want, uint64_t number)
{
    rampwise_state got;
    uint64_t at;
    ck_assert_int_eq(rampwise_stream_state(stream, &got, &at), RAMPWISE_OK);
    ck_assert_mem_eq(&got, want, sizeof got);
    ck_assert_uint_eq(at, number);
}

static rampwise_coeffs regime_coeffs(int regime, int kind, double theta, double dt)
{
    rampwise_system sys = regime_system(regime, theta, dt);
    if (!kind_allowed(&sys, kind))
        sys.damper = 0;
    return made(sys, dt, kind);
}

static const rampwise_coeffs *plain(void)
{
    static rampwise_coeffs c;
    c = regime_coeffs(1, 2, 0.3, 0.01);
    return &c;
}

START_TEST(any_blocks)
{
    gsl_rng *const r = random_make("any_blocks");
    double p[N], out[N][OUTPUTS], u[N], v[N], a[N], total[N];
    for (int i = 0; i < KINDS * REGIMES; ++i) {
        const rampwise_coeffs c = regime_coeffs(i / KINDS, i % KINDS, random_log(r, 1e-3, 2), 0.01);
        const rampwise_stream_options o = options_of_four();
        rampwise_stream stream = stream_of(&c, &o);
        const rampwise_history want = {u, v, a, total};
        random_record(r, p, N);
        ck_assert_int_eq(rampwise_solve(&c, 0, 0, N, p, &want, NULL), RAMPWISE_OK);
        for (int done = 0; done < N;) {
            int part = (int)gsl_rng_uniform_int(r, 60);
            part = part > N - done ? N - done : part;
            ck_assert_int_eq(rampwise_stream_put(&stream, (size_t)part, p + done, out[done], NULL, NULL),
                             RAMPWISE_OK);
            done += part;
        }
        for (int k = 0; k < N; ++k)
            ck_assert(out[k][0] == u[k] && out[k][1] == v[k] && out[k][2] == a[k] && out[k][3] == total[k]);
        check_state(&stream, &(rampwise_state){u[N - 1], v[N - 1], p[N - 1], p[N - 2]}, N - 1);
    }
    gsl_rng_free(r);
}
END_TEST

/* dt = 2^-10 s, so that times in seconds and their differences are exact, and rampwise_run_at sees the same. */
static const double dt = 0x1p-10;

/* In which way a missing sample is told. */
enum { AS_NAN, AS_NUMBER, AS_STAMP, AS_STAMPED_NAN, AS_RAW, WAYS };

static void put_missing(rampwise_stream *stream, int way, int i)
{
    const double nothing = i % 2 == 0 ? NAN : INFINITY;
    const int64_t t = (int64_t)i * 5000;
    const int32_t raw = INT32_MIN;
    if (way == AS_NAN)
        ck_assert_int_eq(rampwise_stream_put(stream, 1, &nothing, NULL, NULL, NULL), RAMPWISE_OK);
    if (way == AS_NUMBER)
        ck_assert_int_eq(rampwise_stream_skip_to(stream, (uint64_t)i + 1), RAMPWISE_OK);
    if (way == AS_STAMPED_NAN)
        ck_assert_int_eq(rampwise_stream_put_at(stream, 1, &t, &nothing, NULL, NULL, NULL), RAMPWISE_OK);
    if (way == AS_RAW)
        ck_assert_int_eq(rampwise_stream_put_raw(stream, 1, &raw, NULL, NULL, NULL), RAMPWISE_OK);
}

static void put_good(rampwise_stream *stream, int way, int i, double p, double *out, uint8_t *flags)
{
    const int64_t t = (int64_t)i * 5000;
    const int32_t raw = (int32_t)(p * 1024);
    if (way == AS_STAMP || way == AS_STAMPED_NAN)
        ck_assert_int_eq(rampwise_stream_put_at(stream, 1, &t, &p, out, flags, NULL), RAMPWISE_OK);
    else if (way == AS_RAW)
        ck_assert_int_eq(rampwise_stream_put_raw(stream, 1, &raw, out, flags, NULL), RAMPWISE_OK);
    else
        ck_assert_int_eq(rampwise_stream_put(stream, 1, &p, out, flags, NULL), RAMPWISE_OK);
}

/* Samples that are whole multiples of 2^-10, a third of them missing. */
static void leaky_record(gsl_rng *r, double *p, int *missing)
{
    int run = 0;
    for (int i = 0; i < N; ++i) {
        p[i] = floor(random_between(r, -1000, 1000)) / 1024;
        missing[i] = i > 0 && run < 7 && gsl_rng_uniform_int(r, 3) == 0;
        run = missing[i] ? run + 1 : 0;
    }
}

START_TEST(bridges_are_exact)
{
    gsl_rng *const r = random_make("bridges_are_exact");
    double p[N], out[OUTPUTS];
    int missing[N];
    for (int i = 0; i < KINDS * WAYS * 2; ++i) {
        const int kind = i % KINDS, way = i / KINDS % WAYS;
        const rampwise_coeffs c = regime_coeffs(i % 6, kind, random_log(r, 1e-2, 2), dt);
        rampwise_stream_options o = options_of_four();
        o.longest = 7;
        o.ticks = 5000;
        o.scale = 0x1p-10;
        rampwise_stream stream = stream_of(&c, &o);
        rampwise_state s;
        double t_last = 0;
        uint8_t flags;
        leaky_record(r, p, missing);
        put_good(&stream, way, 0, p[0], out, &flags);
        ck_assert_uint_eq(flags, RAMPWISE_STARTED);
        rampwise_start(&s, 0, 0, p[0]);
        for (int k = 1; k < N; ++k) {
            if (missing[k]) {
                put_missing(&stream, way, k);
                continue;
            }
            const double t = k * dt;
            const int bridged = missing[k - 1];
            double total;
            const rampwise_history want = {NULL, NULL, NULL, &total};
            ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 1, &t, &p[k], &want, NULL), RAMPWISE_OK);
            put_good(&stream, way, k, p[k], out, &flags);
            check_state(&stream, &s, (uint64_t)k);
            ck_assert_uint_eq(flags, bridged ? RAMPWISE_BRIDGED : 0);
            ck_assert(out[0] == s.u && out[1] == s.v);
            /* The change over a longer step goes through one division more: 4 ulp of its terms. */
            const double terms = fabs(c.total[0] * s.u) + fabs(c.total[1] * s.v) + fabs(c.total[2] * s.p) +
                                 fabs(c.total[3] * (s.p - s.p_before)) + fabs(c.total[3] * s.p);
            ck_assert(bridged ? fabs(out[3] - total) <= 8 * DBL_EPSILON * terms : out[3] == total);
        }
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(held_load)
{
    gsl_rng *const r = random_make("held_load");
    double p[N];
    int missing[N];
    for (int i = 0; i < KINDS * WAYS; ++i) {
        const int way = i / KINDS;
        const rampwise_coeffs c = regime_coeffs(i % 6, i % KINDS, 0.3, dt);
        rampwise_stream_options o = options_of_four();
        o.missing = RAMPWISE_GAP_HOLD;
        o.longest = 7;
        o.ticks = 5000;
        o.scale = 0x1p-10;
        rampwise_stream stream = stream_of(&c, &o);
        rampwise_state s;
        leaky_record(r, p, missing);
        put_good(&stream, way, 0, p[0], NULL, NULL);
        rampwise_start(&s, 0, 0, p[0]);
        for (int k = 1; k < N; ++k) {
            rampwise_step(&c, &s, missing[k] ? s.p : p[k]);
            if (missing[k])
                put_missing(&stream, way, k);
            else
                put_good(&stream, way, k, p[k], NULL, NULL);
            if (way != AS_STAMP || !missing[k])
                check_state(&stream, &s, (uint64_t)k);
            if (way != AS_STAMP && missing[k]) {
                double out[OUTPUTS];
                uint8_t flags;
                ck_assert_int_eq(rampwise_stream_read(&stream, out, &flags), RAMPWISE_OK);
                ck_assert(out[0] == s.u && flags == RAMPWISE_BRIDGED);
            }
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* Jitter of a quarter of dt, in units of 2^-20 s: rampwise_run_at sees the same lengths. */
START_TEST(stamps)
{
    gsl_rng *const r = random_make("stamps");
    static const int64_t origins[] = {0, -77777, INT64_MAX - 1024 * (N + 1), INT64_MIN};
    for (int i = 0; i < KINDS * 4; ++i) {
        const rampwise_coeffs c = regime_coeffs(i % 6, i % KINDS, random_log(r, 1e-2, 2), dt);
        const int64_t origin = origins[i / KINDS % 4];
        const int jitter = i % 3;
        rampwise_interval prepared[20];
        rampwise_stream_options o = options_of_four();
        o.ticks = 1024;
        rampwise_stream stream = stream_of(&c, &o), other;
        for (int k = 0; k < 20; ++k)
            ck_assert_int_eq(rampwise_interval_make(&prepared[k], &c, 1024, (uint64_t)(1014 + k)),
                             RAMPWISE_OK);
        o.intervals = prepared;
        o.interval_count = 20;
        other = stream_of(&c, &o);
        rampwise_state s = {0};
        double t_last = 0;
        for (int k = 0; k < N; ++k) {
            const int64_t shift = jitter == 0 ? 0 : (int64_t)gsl_rng_uniform_int(r, jitter == 1 ? 20 : 500);
            const int64_t t = origin + 1024 * k + shift;
            const double p = random_between(r, -1, 1), seconds = ldexp((double)(t - origin), -20);
            if (k == 0)
                rampwise_start(&s, 0, 0, p);
            else
                ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 1, &seconds, &p, NULL, NULL), RAMPWISE_OK);
            t_last = seconds;
            ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, &t, &p, NULL, NULL, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_put_at(&other, 1, &t, &p, NULL, NULL, NULL), RAMPWISE_OK);
            check_state(&stream, &s, (uint64_t)k);
            check_state(&other, &s, (uint64_t)k);
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* Numbered samples: jitter of up to 0.45 dt either way, samples lost and skipped to by their numbers, and nothing else
   is missing; each step is as long as the stamps say, as rampwise_run_at has it. */
START_TEST(numbered)
{
    gsl_rng *const r = random_make("numbered");
    for (int i = 0; i < 8; ++i) {
        const rampwise_coeffs c = regime_coeffs(i % 6, 0, random_log(r, 1e-2, 2), dt);
        rampwise_stream_options o = options_of_four();
        rampwise_stream_counts counts;
        o.ticks = 1024;
        o.longest = 6;
        o.numbered = 1;
        rampwise_stream stream = stream_of(&c, &o);
        rampwise_state s = {0};
        double t_last = 0;
        uint64_t lost = 0;
        for (int k = 0, in_a_row = 0; k < N; ++k) {
            if (k > 0 && in_a_row < 6 && gsl_rng_uniform_int(r, 5) == 0) {
                ++lost;
                ++in_a_row;
                continue;
            }
            in_a_row = 0;
            const int64_t t = 1024 * k + (int64_t)gsl_rng_uniform_int(r, 920) - 460;
            const double p = random_between(r, -1, 1), seconds = ldexp((double)t, -20);
            if (k == 0)
                rampwise_start(&s, 0, 0, p);
            else
                ck_assert_int_eq(rampwise_run_at(&c, &s, &t_last, 1, &seconds, &p, NULL, NULL), RAMPWISE_OK);
            t_last = seconds;
            if (k > 0)
                ck_assert_int_eq(rampwise_stream_skip_to(&stream, (uint64_t)k), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, &t, &p, NULL, NULL, NULL), RAMPWISE_OK);
            check_state(&stream, &s, (uint64_t)k);
        }
        ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
        ck_assert_uint_le(counts.missing, lost);
        ck_assert_uint_ge(counts.missing + 6, lost); /* those at the very end are not known of */
        ck_assert_uint_eq(counts.starts, 1);
        /* A stamp beyond the longest gap is one all the same. */
        const int64_t far = 1024 * (N + 20);
        const double p = 1;
        ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, &far, &p, NULL, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
        ck_assert_uint_eq(counts.starts, 2);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(stamps_at_a_fixed_rate)
{
    rampwise_stream_options o = options_of_four();
    o.ticks = 10000000; /* nanoseconds in 0.01 s, which no double is */
    rampwise_stream stamped = stream_of(plain(), &o), even = stream_of(plain(), &o);
    gsl_rng *const r = random_make("stamps_at_a_fixed_rate");
    for (int k = 0; k < N; ++k) {
        const double p = random_between(r, -1, 1);
        const int64_t t = INT64_C(1785000000000000000) + (int64_t)k * 10000000;
        double a[OUTPUTS], b[OUTPUTS];
        ck_assert_int_eq(rampwise_stream_put_at(&stamped, 1, &t, &p, a, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_put(&even, 1, &p, b, NULL, NULL), RAMPWISE_OK);
        ck_assert_mem_eq(a, b, sizeof a);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(stamps_that_stand_or_run_back)
{
    static const int64_t wrong[][3] = {
        {5, 5, 6}, {5, 4, 6}, {INT64_MAX, INT64_MIN, 0}, {7, 8, 8}, {7, 8, INT64_MIN}};
    static const size_t at[] = {1, 1, 1, 2, 2};
    const double p[3] = {1, 2, 3};
    const rampwise_stream_options o = options_of_four();
    for (int i = 0; i < 5; ++i) {
        rampwise_stream stream = stream_of(plain(), &o);
        const rampwise_stream before = stream;
        size_t bad = 77;
        ck_assert_int_eq(rampwise_stream_put_at(&stream, 3, wrong[i], p, NULL, NULL, &bad),
                         RAMPWISE_ERROR_TIME);
        ck_assert_uint_eq(bad, at[i]);
        ck_assert_mem_eq(&stream, &before, sizeof stream);
        ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, wrong[i], p, NULL, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, wrong[i], p, NULL, NULL, NULL),
                         RAMPWISE_ERROR_TIME);
    }
    /* From the first to the last stamp there is: a gap like any other. */
    rampwise_stream stream = stream_of(plain(), &o);
    const int64_t ends[2] = {INT64_MIN, INT64_MAX};
    uint8_t flags[2];
    ck_assert_int_eq(rampwise_stream_put_at(&stream, 2, ends, p, NULL, flags, NULL), RAMPWISE_OK);
    ck_assert_uint_eq(flags[1], RAMPWISE_STARTED);
    rampwise_stream_counts counts;
    ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
    ck_assert_uint_eq(counts.missing, UINT64_MAX - 1);
}
END_TEST

START_TEST(raw_and_rails)
{
    rampwise_stream_options o = options_of_four();
    o.scale = 0.1;
    o.offset = -0.3;
    o.rail_low = -8;
    o.rail_high = 7;
    rampwise_stream stream = stream_of(plain(), &o);
    static const int32_t raw[8] = {1, -8, 0, 3, 6, 7, 100, 2};
    static const uint8_t want[8] = {RAMPWISE_STARTED, RAMPWISE_CLIPPED, RAMPWISE_CLIPPED, 0, 0,
                                    RAMPWISE_CLIPPED, RAMPWISE_CLIPPED, RAMPWISE_CLIPPED};
    uint8_t flags[8];
    rampwise_state s;
    rampwise_stream_counts counts;
    ck_assert_int_eq(rampwise_stream_put_raw(&stream, 8, raw, NULL, flags, NULL), RAMPWISE_OK);
    ck_assert_mem_eq(flags, want, sizeof flags);
    rampwise_start(&s, 0, 0, fma(0.1, 1, -0.3));
    for (int i = 1; i < 8; ++i)
        rampwise_step(plain(), &s, fma(0.1, raw[i], -0.3));
    check_state(&stream, &s, 7);
    ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
    ck_assert_uint_eq(counts.clipped, 3);
    ck_assert_uint_eq(counts.last_clipped, 6);
    ck_assert_uint_eq(counts.good, 8);
    ck_assert_uint_eq(counts.last_missing, UINT64_MAX);
    ck_assert_int_eq(rampwise_stream_read(&stream, NULL, flags), RAMPWISE_OK);
    ck_assert_uint_eq(flags[0], RAMPWISE_CLIPPED);
}
END_TEST

START_TEST(beyond_the_longest_gap)
{
    rampwise_stream_options o = options_of_four();
    o.longest = 3;
    o.start = RAMPWISE_SETTLED;
    const double p[6] = {1, NAN, NAN, NAN, NAN, 2};
    double out[6][OUTPUTS];
    uint8_t flags[6];
    rampwise_state s;
    rampwise_stream_counts counts;
    rampwise_stream stream = stream_of(plain(), &o);
    ck_assert_int_eq(rampwise_stream_put(&stream, 6, p, out[0], flags, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_start_settled(plain(), &s, 1), RAMPWISE_OK);
    for (int i = 0; i < 5; ++i)
        ck_assert(out[i][0] == s.u && flags[i] == (i == 0 ? RAMPWISE_STARTED : RAMPWISE_WAITING));
    ck_assert_int_eq(rampwise_start_settled(plain(), &s, 2), RAMPWISE_OK);
    ck_assert(out[5][0] == s.u && flags[5] == RAMPWISE_STARTED);
    check_state(&stream, &s, 5);
    ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
    ck_assert_uint_eq(counts.starts, 2);
    ck_assert_uint_eq(counts.bridges, 0);
    ck_assert_uint_eq(counts.longest, 4);

    o.beyond = RAMPWISE_GAP_REFUSE;
    stream = stream_of(plain(), &o);
    const rampwise_stream before = stream;
    size_t bad = 77;
    ck_assert_int_eq(rampwise_stream_put(&stream, 6, p, out[0], flags, &bad), RAMPWISE_ERROR_GAP);
    ck_assert_uint_eq(bad, 5);
    ck_assert_mem_eq(&stream, &before, sizeof stream);
    ck_assert_int_eq(rampwise_stream_put(&stream, 5, p, out[0], flags, &bad), RAMPWISE_OK);
    for (int i = 0; i < 3; ++i)
        ck_assert_int_eq(rampwise_stream_put(&stream, 1, p + 5, NULL, NULL, NULL), RAMPWISE_ERROR_GAP);
    ck_assert_int_eq(rampwise_stream_start(&stream, NULL, 5), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_put(&stream, 1, p + 5, NULL, NULL, NULL), RAMPWISE_OK);
    check_state(&stream, &s, 5);
}
END_TEST

/* Held steps end after the longest gap, and the values wait. */
START_TEST(held_no_longer)
{
    rampwise_stream_options o = options_of_four();
    o.missing = RAMPWISE_GAP_HOLD;
    o.longest = 3;
    const double p[6] = {1, NAN, NAN, NAN, NAN, NAN};
    double out[6][OUTPUTS];
    uint8_t flags[6];
    rampwise_state s;
    rampwise_stream stream = stream_of(plain(), &o);
    ck_assert_int_eq(rampwise_stream_put(&stream, 6, p, out[0], flags, NULL), RAMPWISE_OK);
    rampwise_start(&s, 0, 0, 1);
    for (int i = 1; i < 6; ++i) {
        if (i <= 3)
            rampwise_step(plain(), &s, 1);
        ck_assert(out[i][0] == s.u && flags[i] == (i <= 3 ? RAMPWISE_BRIDGED : RAMPWISE_WAITING));
    }
    check_state(&stream, &s, 3);
}
END_TEST

/* Stamps count as a gap from one and a half dt on. */
START_TEST(how_many_fit)
{
    static const int64_t apart[] = {1, 1023, 1024, 1535, 1536, 2048, 2559, 2560};
    static const uint64_t missing[] = {0, 0, 0, 0, 1, 1, 1, 2};
    rampwise_stream_options o = options_of_four();
    o.ticks = 1024;
    for (int i = 0; i < 8; ++i) {
        rampwise_stream stream = stream_of(plain(), &o);
        const int64_t t[2] = {5, 5 + apart[i]};
        const double p[2] = {1, 2};
        rampwise_stream_counts counts;
        ck_assert_int_eq(rampwise_stream_put_at(&stream, 2, t, p, NULL, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
        ck_assert_uint_eq(counts.missing, missing[i]);
        ck_assert_uint_eq(counts.bridges, missing[i] > 0);
        ck_assert_uint_eq(counts.next, 2 + missing[i]);
    }
}
END_TEST

START_TEST(refused_gaps)
{
    rampwise_stream_options o = options_of_four();
    o.missing = RAMPWISE_GAP_REFUSE;
    const double p[3] = {1, 2, NAN};
    const int64_t t[3] = {10, 11, 14};
    size_t bad = 77;
    rampwise_stream stream = stream_of(plain(), &o);
    const rampwise_stream before = stream;
    ck_assert_int_eq(rampwise_stream_put(&stream, 3, p, NULL, NULL, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert_mem_eq(&stream, &before, sizeof stream);
    ck_assert_int_eq(rampwise_stream_put_at(&stream, 2, t, p, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_put_at(&stream, 1, t + 2, p, NULL, NULL, &bad), RAMPWISE_ERROR_GAP);
    ck_assert_uint_eq(bad, 0);
    ck_assert_int_eq(rampwise_stream_skip_to(&stream, 2), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_skip_to(&stream, 3), RAMPWISE_ERROR_GAP);
    ck_assert_int_eq(rampwise_stream_skip_to(&stream, 1), RAMPWISE_ERROR_TIME);
}
END_TEST

START_TEST(a_million_missing)
{
    static double p[1000];
    const rampwise_stream_options o = options_of_four();
    rampwise_stream stream = stream_of(plain(), &o);
    rampwise_stream_counts counts;
    rampwise_state s;
    const double one = 1;
    for (int i = 0; i < 1000; ++i)
        p[i] = NAN;
    ck_assert_int_eq(rampwise_stream_state(&stream, &s, NULL), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_stream_put(&stream, 1, &one, NULL, NULL, NULL), RAMPWISE_OK);
    for (int i = 0; i < 1000; ++i)
        ck_assert_int_eq(rampwise_stream_put(&stream, 1000, p, NULL, NULL, NULL), RAMPWISE_OK);
    rampwise_start(&s, 0, 0, 1);
    check_state(&stream, &s, 0);
    ck_assert_int_eq(rampwise_stream_put(&stream, 1, &one, NULL, NULL, NULL), RAMPWISE_OK);
    check_state(&stream, &s, 1000001);
    ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
    ck_assert_uint_eq(counts.missing, 1000000);
    ck_assert_uint_eq(counts.longest, 1000000);
    ck_assert_int_eq(rampwise_stream_skip_to(&stream, UINT64_MAX), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
    ck_assert_uint_eq(counts.next, UINT64_MAX);
}
END_TEST

START_TEST(large_numbers)
{
    static const uint64_t numbers[] = {UINT64_C(4294967286), UINT64_C(1) << 53, UINT64_MAX - 100};
    const rampwise_stream_options o = options_of_four();
    for (int i = 0; i < 3; ++i) {
        rampwise_stream stream = stream_of(plain(), &o);
        rampwise_watch watch;
        rampwise_watch_options w;
        rampwise_event event[40];
        rampwise_level_report report;
        rampwise_watch_options_init(&w);
        w.output.quantity = RAMPWISE_LOAD;
        w.level[0] = (rampwise_level){0.5, 0, 1, 0};
        w.level_count = 1;
        w.events = event;
        w.event_capacity = 40;
        ck_assert_int_eq(rampwise_watch_init(&watch, plain(), &w), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_attach(&stream, &watch), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_start(&stream, NULL, numbers[i]), RAMPWISE_OK);
        for (int k = 0; k < 40; ++k) {
            const double p = k % 2;
            ck_assert_int_eq(rampwise_stream_put(&stream, 1, &p, NULL, NULL, NULL), RAMPWISE_OK);
        }
        rampwise_event got[40];
        ck_assert_int_eq(rampwise_watch_level(&watch, 0, &report), RAMPWISE_OK);
        ck_assert_uint_eq(report.passed, 20);
        ck_assert_uint_eq(rampwise_watch_events(&watch, 40, got), 39);
        for (int k = 0; k < 39; ++k) {
            ck_assert_uint_eq(got[k].sample, numbers[i] + (uint64_t)k);
            ck_assert(got[k].fraction == 0.5 && got[k].direction == (k % 2 == 0 ? 1 : -1));
        }
    }
}
END_TEST

START_TEST(retuning)
{
    const rampwise_coeffs other = regime_coeffs(2, 2, 1.1, 0.01);
    rampwise_stream_options o = options_of_four();
    rampwise_stream stream = stream_of(plain(), &o);
    gsl_rng *const r = random_make("retuning");
    rampwise_state s = {0};
    double out[OUTPUTS];
    for (int k = 0; k < N; ++k) {
        const double p = random_between(r, -1, 1);
        const rampwise_coeffs *const now = k / 10 % 2 == 0 ? plain() : &other;
        ck_assert_int_eq(rampwise_stream_retune(&stream, now, NULL, 0), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_stream_put(&stream, 1, &p, out, NULL, NULL), RAMPWISE_OK);
        if (k == 0)
            rampwise_start(&s, 0, 0, p);
        else
            rampwise_step(now, &s, p);
        check_state(&stream, &s, (uint64_t)k);
        ck_assert(out[3] == rampwise_total_acceleration(now, &s));
    }
    const rampwise_stream before = stream;
    const rampwise_coeffs longer = regime_coeffs(2, 2, 1.1, 0.02), force = regime_coeffs(2, 0, 1.1, 0.01);
    rampwise_interval prepared;
    ck_assert_int_eq(rampwise_interval_make(&prepared, &other, 1, 2), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_retune(&stream, &longer, NULL, 0), RAMPWISE_ERROR_DIFFERENT);
    ck_assert_int_eq(rampwise_stream_retune(&stream, &force, NULL, 0), RAMPWISE_ERROR_DIFFERENT);
    ck_assert_int_eq(rampwise_stream_retune(&stream, plain(), &prepared, 1), RAMPWISE_ERROR_DIFFERENT);
    ck_assert_int_eq(rampwise_stream_retune(&stream, NULL, NULL, 0), RAMPWISE_ERROR_MISSING);
    ck_assert_mem_eq(&stream, &before, sizeof stream);
    gsl_rng_free(r);
}
END_TEST

/* Each named output is what motion.h says: to 4 ulp of its terms. */
START_TEST(named_outputs)
{
    gsl_rng *const r = random_make("named_outputs");
    for (int i = 0; i < KINDS * 6; ++i) {
        const rampwise_coeffs c = regime_coeffs(i / KINDS, i % KINDS, 0.5, 0.01);
        rampwise_stream_options o;
        rampwise_stream_options_init(&o);
        o.output_count = 7;
        for (int q = 0; q < 7; ++q)
            o.output[q].quantity = RAMPWISE_DISPLACEMENT + q;
        rampwise_stream stream = stream_of(&c, &o);
        for (int k = 0; k < 20; ++k) {
            const double p = random_between(r, -1, 1);
            double out[7];
            rampwise_state s;
            ck_assert_int_eq(rampwise_stream_put(&stream, 1, &p, out, NULL, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_state(&stream, &s, NULL), RAMPWISE_OK);
            const double want[7] = {rampwise_relative_displacement(&c, &s),
                                    rampwise_relative_velocity(&c, &s),
                                    rampwise_total_acceleration(&c, &s),
                                    rampwise_acceleration(&c, &s),
                                    rampwise_spring_force(&c, &s),
                                    rampwise_damper_force(&c, &s),
                                    p};
            const double u = fabs(s.u) + fabs(s.p), v = fabs(s.v) + fabs(s.p - s.p_before) / c.dt;
            const double terms[7] = {0, v, 0, 0, c.system.stiffness * u, c.system.damper * v, 0};
            for (int q = 0; q < 7; ++q)
                ck_assert(fabs(out[q] - want[q]) <= 4 * DBL_EPSILON * terms[q]);
        }
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(overflow)
{
    const rampwise_coeffs c = regime_coeffs(8, 0, 0.5, 0.01);
    const rampwise_stream_options o = options_of_four();
    rampwise_stream stream = stream_of(&c, &o);
    const rampwise_state s = {1e308, 1e308, 0, 0};
    const double p[4] = {0, NAN, 1e308, 1e308};
    size_t bad = 77;
    ck_assert_int_eq(rampwise_stream_start(&stream, &s, 3), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_stream_put(&stream, 4, p, NULL, NULL, &bad), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, 0);
    check_state(&stream, &s, 3);
}
END_TEST

/* Rounding and, on x86-64, masks and flushing of subnormal numbers. */
static unsigned control(void)
{
#if defined(__x86_64__)
    return (__builtin_ia32_stmxcsr() & ~0x3fu) + (unsigned)fegetround();
#else
    return (unsigned)fegetround();
#endif
}

START_TEST(floating_point_environment)
{
    const rampwise_stream_options o = options_of_four();
    const double p[4] = {1, NAN, 1e-310, 2};
    const int64_t t[4] = {1, 2, 5, 900};
    const unsigned before = control();
    rampwise_stream stream = stream_of(plain(), &o);
    ck_assert_int_eq(rampwise_stream_put_at(&stream, 4, t, p, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_uint_eq(control(), before);
}
END_TEST

START_TEST(refused_options)
{
    rampwise_stream stream;
    rampwise_stream_options o = options_of_four();
    rampwise_coeffs none;
    memset(&none, 0, sizeof none);
    memset(&stream, 0x5a, sizeof stream);
    const rampwise_stream before = stream;
    ck_assert_int_eq(rampwise_stream_init(NULL, plain(), &o), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_stream_init(&stream, NULL, &o), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_stream_init(&stream, plain(), NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_stream_init(&stream, &none, &o), RAMPWISE_ERROR_NOT_MADE);
#define REFUSED(change, status)                                                                              \
    do {                                                                                                     \
        o = options_of_four();                                                                               \
        change;                                                                                              \
        ck_assert_int_eq(rampwise_stream_init(&stream, plain(), &o), status);                                \
    } while (0)
    REFUSED(o.size = 1, RAMPWISE_ERROR_COUNT);
    REFUSED(o.output_count = 9, RAMPWISE_ERROR_COUNT);
    REFUSED(o.output_count = -1, RAMPWISE_ERROR_COUNT);
    REFUSED(o.ticks = 0, RAMPWISE_ERROR_COUNT);
    REFUSED(o.ticks = UINT64_MAX, RAMPWISE_ERROR_COUNT);
    REFUSED(o.longest = UINT64_MAX, RAMPWISE_ERROR_COUNT);
    REFUSED((o.longest = UINT64_C(1) << 40, o.ticks = UINT64_C(1) << 20), RAMPWISE_ERROR_COUNT);
    REFUSED(o.start = RAMPWISE_GAP_HOLD, RAMPWISE_ERROR_FLAGS);
    REFUSED(o.missing = RAMPWISE_GAP_RESTART, RAMPWISE_ERROR_FLAGS);
    REFUSED(o.beyond = RAMPWISE_GAP_BRIDGE, RAMPWISE_ERROR_FLAGS);
    REFUSED(o.scale = NAN, RAMPWISE_ERROR_SAMPLE);
    REFUSED(o.offset = INFINITY, RAMPWISE_ERROR_SAMPLE);
    REFUSED(o.rail_low = NAN, RAMPWISE_ERROR_SAMPLE);
    REFUSED(o.output[1].quantity = 99, RAMPWISE_ERROR_QUANTITY);
    REFUSED(o.output[1].row[2] = NAN, RAMPWISE_ERROR_COEFFICIENT);
    REFUSED(o.interval_count = 1, RAMPWISE_ERROR_MISSING);
#undef REFUSED
    const rampwise_coeffs loose = regime_coeffs(5, 0, 0.5, 0.01);
    o = options_of_four();
    o.start = RAMPWISE_SETTLED;
    ck_assert_int_eq(rampwise_stream_init(&stream, &loose, &o), RAMPWISE_ERROR_NO_REST);
    ck_assert_mem_eq(&stream, &before, sizeof stream);
}
END_TEST

enum { BYTES = 4096 };
#define SAVED_CHECKSUM 1686775829u

START_TEST(saved_and_resumed)
{
    gsl_rng *const r = random_make("saved_and_resumed");
    double p[N];
    int missing[N];
    for (int i = 0; i < KINDS * 4; ++i) {
        const rampwise_coeffs c = regime_coeffs(i % 6, i % KINDS, 0.4, dt);
        rampwise_stream_options o = options_of_four();
        o.missing = i % 2 == 0 ? RAMPWISE_GAP_BRIDGE : RAMPWISE_GAP_HOLD;
        o.longest = 7;
        rampwise_stream stream = stream_of(&c, &o);
        rampwise_stream_options_init(&o);
        leaky_record(r, p, missing);
        for (int k = 0; k < N; ++k) {
            unsigned char bytes[BYTES];
            const size_t size = rampwise_stream_saved_size(&stream);
            rampwise_stream resumed = stream_of(plain(), &o);
            double a[OUTPUTS], b[OUTPUTS];
            uint8_t flags[2];
            ck_assert(size < BYTES);
            ck_assert_int_eq(rampwise_stream_save(&stream, bytes, size), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_resume(&resumed, bytes, size), RAMPWISE_OK);
            const double now = missing[k] ? NAN : p[k];
            ck_assert_int_eq(rampwise_stream_put(&stream, 1, &now, a, flags, NULL), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_stream_put(&resumed, 1, &now, b, flags + 1, NULL), RAMPWISE_OK);
            ck_assert_mem_eq(a, b, sizeof a);
            ck_assert_uint_eq(flags[0], flags[1]);
            stream = resumed;
        }
        rampwise_stream_counts counts;
        ck_assert_int_eq(rampwise_stream_count(&stream, &counts), RAMPWISE_OK);
        ck_assert_uint_eq(counts.next, N);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(damaged_bytes)
{
    const rampwise_stream_options o = options_of_four();
    rampwise_stream stream = stream_of(plain(), &o);
    unsigned char bytes[BYTES], copy[BYTES];
    const double p[3] = {1, 2, NAN};
    ck_assert_uint_eq(checksum((const unsigned char *)"123456789", 9), 0xcbf43926u);
    ck_assert_int_eq(rampwise_stream_put(&stream, 3, p, NULL, NULL, NULL), RAMPWISE_OK);
    const size_t size = rampwise_stream_saved_size(&stream);
    ck_assert_int_eq(rampwise_stream_save(&stream, bytes, size - 1), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(rampwise_stream_save(&stream, bytes, size), RAMPWISE_OK);
    /* A head in a fixed order of bytes, and the standard's checksum. */
    const unsigned char head[24] = {
        'R', 'A', 'M', 'P', 'W', 'I', 'S', 'E', 1, 0, 0, 0, 1, 0, 0, 0, RAMPWISE_ARITHMETIC_EDITION};
    ck_assert_mem_eq(bytes, head, sizeof head);
    ck_assert_uint_eq(bytes[24] + 256u * bytes[25], size);
    memcpy(copy, bytes, size);
    seal(copy, size);
    ck_assert_mem_eq(copy, bytes, size);

    /* The same bytes on every machine: their checksum, as this edition of the arithmetic writes them. */
    ck_assert_uint_eq(checksum(bytes, size - 4), SAVED_CHECKSUM);

    rampwise_stream other = stream_of(plain(), &o);
    const rampwise_stream before = other;
    for (size_t i = 0; i < size; ++i) {
        memcpy(copy, bytes, size);
        copy[i] ^= (unsigned char)(1 << i % 8);
        ck_assert_int_eq(rampwise_stream_resume(&other, copy, size), RAMPWISE_ERROR_DAMAGED);
    }
    for (size_t count = 0; count < size; ++count)
        ck_assert_int_eq(rampwise_stream_resume(&other, bytes, count), RAMPWISE_ERROR_DAMAGED);
    static const struct {
        size_t place;
        int status;
    } forged[] = {{8, RAMPWISE_ERROR_KIND},
                  {12, RAMPWISE_ERROR_EDITION},
                  {16, RAMPWISE_ERROR_EDITION},
                  {24, RAMPWISE_ERROR_DAMAGED}};
    for (int i = 0; i < 4; ++i) {
        memcpy(copy, bytes, size);
        ++copy[forged[i].place];
        seal(copy, size);
        ck_assert_int_eq(rampwise_stream_resume(&other, copy, size), forged[i].status);
    }
    ck_assert_int_eq(rampwise_stream_resume(&other, NULL, size), RAMPWISE_ERROR_MISSING);
    ck_assert_mem_eq(&other, &before, sizeof other);
    ck_assert_int_eq(rampwise_stream_resume(&other, bytes, size), RAMPWISE_OK);
    ck_assert_mem_eq(&other, &stream, sizeof other);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, any_blocks);
    tcase_add_test(tests, bridges_are_exact);
    tcase_add_test(tests, held_load);
    tcase_add_test(tests, stamps);
    tcase_add_test(tests, numbered);
    tcase_add_test(tests, stamps_at_a_fixed_rate);
    tcase_add_test(tests, stamps_that_stand_or_run_back);
    tcase_add_test(tests, raw_and_rails);
    tcase_add_test(tests, beyond_the_longest_gap);
    tcase_add_test(tests, held_no_longer);
    tcase_add_test(tests, how_many_fit);
    tcase_add_test(tests, refused_gaps);
    tcase_add_test(tests, a_million_missing);
    tcase_add_test(tests, large_numbers);
    tcase_add_test(tests, retuning);
    tcase_add_test(tests, named_outputs);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, floating_point_environment);
    tcase_add_test(tests, refused_options);
    tcase_add_test(tests, saved_and_resumed);
    tcase_add_test(tests, damaged_bytes);
}

int main(void)
{
    return suite_run("streams", add_tests);
}
