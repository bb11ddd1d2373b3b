/* Peaks and spectra: on every instruction set that runs here and however a record is cut, the same bits; at the
   samples, the extremes of rampwise_run; starts, ties, overflow, refusals, lists. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

#define ROUNDING (0.5 * DBL_EPSILON) /* largest relative error of one rounding */

/* N is more than one of the segments in which records are gone through. */
enum { MOST = 70, N = 530 };
static const int all[3] = {RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY};
static const unsigned times[3] = {0, RAMPWISE_RESIDUAL, RAMPWISE_MAXIMAX};

/* n oscillators of all regimes that stay finite, and of all lengths of period, under one kind of input. */
static void make_oscillators(rampwise_coeffs *c, int n, int kind)
{
    for (int i = 0; i < n; ++i) {
        rampwise_system sys = regime_system(i % 7, 1e-4 * pow(1.17, i * 7 % 60), 0.01);
        if (kind == KINDS - 1)
            sys.damper = 0;
        c[i] = made(sys, 0.01, kind);
    }
}

static rampwise_peaks *make_peaks(int n, const rampwise_coeffs *c, int count, const int *quantity,
                                  unsigned flags, int set)
{
    rampwise_peaks *peaks = NULL;
    ck_assert_int_eq(rampwise_peaks_create((size_t)n, c, (size_t)count, quantity, flags, set, &peaks),
                     RAMPWISE_OK);
    return peaks;
}

static void run(rampwise_peaks *peaks, int n, const double *p)
{
    ck_assert_int_eq(rampwise_peaks_run(peaks, (size_t)n, p, NULL), RAMPWISE_OK);
}

static void get(const rampwise_peaks *peaks, int quantity, unsigned flags, rampwise_peak *peak)
{
    ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, flags, peak), RAMPWISE_OK);
}

/* One oscillator, one quantity, the whole record in one call. */
static void alone(const rampwise_coeffs *c, int n, const double *p, int quantity, unsigned flags,
                  rampwise_peak *at)
{
    rampwise_peaks *const peaks = make_peaks(1, c, 1, &quantity, flags, RAMPWISE_BASELINE);
    run(peaks, n, p);
    for (int i = 0; i < 3; ++i)
        get(peaks, quantity, times[i], &at[i]);
    rampwise_peaks_free(peaks);
}

/* Looks now and then: that changes nothing. */
static void run_in_chunks(gsl_rng *r, rampwise_peaks *peaks, int n, const double *p)
{
    rampwise_peak ignored[MOST];
    for (int done = 0; done < n;) {
        int part = (int)gsl_rng_uniform_int(r, gsl_rng_uniform_int(r, 4) == 0 ? 600 : 70);
        part = part > n - done ? n - done : part;
        run(peaks, part, p + done);
        done += part;
        if (done > 0 && gsl_rng_uniform_int(r, 8) == 0)
            get(peaks, all[part % 3], times[part % 2], ignored);
    }
}

static void check_bits(const rampwise_peaks *peaks, int n, rampwise_peak (*want)[3][3])
{
    rampwise_peak got[MOST];
    for (int q = 0; q < 3; ++q)
        for (int t = 0; t < 3; ++t) {
            get(peaks, all[q], times[t], got);
            for (int j = 0; j < n; ++j)
                if (memcmp(&got[j], &want[j][q][t], sizeof *got) != 0)
                    ck_abort_msg(
                        "oscillator %d of %d, quantity %d, flags %u: high %a at %llu + %a, low %a at %llu"
                        " + %a; alone %a at %llu + %a, %a at %llu + %a",
                        j, n, all[q], times[t], got[j].high.value, (unsigned long long)got[j].high.sample,
                        got[j].high.fraction, got[j].low.value, (unsigned long long)got[j].low.sample,
                        got[j].low.fraction, want[j][q][t].high.value,
                        (unsigned long long)want[j][q][t].high.sample, want[j][q][t].high.fraction,
                        want[j][q][t].low.value, (unsigned long long)want[j][q][t].low.sample,
                        want[j][q][t].low.fraction);
        }
}

/* In every set, for every number of lanes in the last group, cut anyhow, all quantities at once: the bits of one
   oscillator, one quantity, one call. Half the numbers where RAMPWISE_POINTS asks for other than the usual cases. */
static void check_every_set(gsl_rng *r, int kind, unsigned flags)
{
    static rampwise_peak want[MOST][3][3];
    rampwise_coeffs c[MOST];
    double p[N];
    const int apart = getenv("RAMPWISE_POINTS") != NULL ? 26 : 13;
    random_record(r, p, N);
    make_oscillators(c, MOST, kind);
    for (int j = 0; j < MOST; ++j)
        for (int q = 0; q < 3; ++q)
            alone(&c[j], N, p, all[q], flags, want[j][q]);
    for (int i = 0; i < SETS; ++i)
        for (int n = 1 + (i * KINDS + kind) % apart; n <= MOST && runs_here(sets[i]); n += apart) {
            rampwise_peaks *const peaks = make_peaks(n, c, 3, all, flags, sets[i]);
            run_in_chunks(r, peaks, N, p);
            check_bits(peaks, n, want);
            if (n <= KINDS) { /* anew */
                ck_assert_int_eq(rampwise_peaks_start(peaks, NULL), RAMPWISE_OK);
                run_in_chunks(r, peaks, N, p);
                check_bits(peaks, n, want);
            }
            rampwise_peaks_free(peaks);
        }
}

START_TEST(every_set_tail_and_chunk)
{
    gsl_rng *const r = random_make("every_set_tail_and_chunk");
    for (int kind = 0; kind < KINDS; ++kind) {
        check_every_set(r, kind, 0);
        check_every_set(r, kind, RAMPWISE_AT_SAMPLES);
    }
    gsl_rng_free(r);
}
END_TEST

static void note(rampwise_peak *peak, double value, size_t sample)
{
    if (value > peak->high.value)
        peak->high = (rampwise_instant){value, sample, 0};
    if (value < peak->low.value)
        peak->low = (rampwise_instant){value, sample, 0};
}

/* By motion.h: the value it gives at a sample; with HOLD it is the one after a jump, else the one before. */
static double value_at(const rampwise_coeffs *c, const rampwise_state *s, int quantity)
{
    return quantity == RAMPWISE_DISPLACEMENT ? rampwise_relative_displacement(c, s)
           : quantity == RAMPWISE_VELOCITY   ? rampwise_relative_velocity(c, s)
                                             : rampwise_total_acceleration(c, s);
}

static double value_before(const rampwise_coeffs *c, const rampwise_state *s, int quantity)
{
    rampwise_state before = *s;
    if (c->between == RAMPWISE_HOLD)
        before.p = s->p_before;
    return value_at(c, &before, quantity);
}

static double value_after(const rampwise_coeffs *c, const rampwise_state *s, double p_next, int quantity)
{
    rampwise_state after = *s;
    if (c->between == RAMPWISE_RAMP)
        after.p_before = s->p - (p_next - s->p);
    return value_at(c, &after, quantity);
}

/* "Both values count" (peaks.h) where the input enters the quantity itself and jumps, or, for base displacement,
   where its slope does. */
static int jumps(const rampwise_coeffs *c, int quantity)
{
    if (c->input == RAMPWISE_BASE_DISPLACEMENT)
        return c->between == RAMPWISE_HOLD ? quantity != RAMPWISE_VELOCITY
                                           : quantity != RAMPWISE_DISPLACEMENT;
    return c->input == RAMPWISE_FORCE && c->between == RAMPWISE_HOLD &&
           quantity == RAMPWISE_TOTAL_ACCELERATION;
}

/* From the state s, the samples p[0] to p[n - 1] following it, one more dt with HOLD; *scale becomes the largest
   sum of the sizes of the terms that a value consists of. */
static rampwise_peak extremes_of_run(const rampwise_coeffs *c, rampwise_state s, int n, const double *p,
                                     int quantity, double *scale)
{
    const double first = value_at(c, &s, quantity);
    rampwise_peak peak = {{first, 0, 0}, {first, 0, 0}};
    *scale = 0;
    for (int i = 0; i < n + (c->between == RAMPWISE_HOLD); ++i) {
        const double next = i < n ? p[i] : s.p;
        if (jumps(c, quantity))
            note(&peak, value_after(c, &s, next, quantity), (size_t)i);
        ck_assert_int_eq(rampwise_run(c, &s, 1, &next, NULL, NULL), RAMPWISE_OK);
        if (jumps(c, quantity))
            note(&peak, value_before(c, &s, quantity), (size_t)i + 1);
        note(&peak, value_at(c, &s, quantity), (size_t)i + 1);
        const double rate = fabs(s.v) + 4 / c->dt, size = fabs(s.u) + 1;
        *scale =
            fmax(*scale, quantity == RAMPWISE_DISPLACEMENT ? size
                         : quantity == RAMPWISE_VELOCITY
                             ? rate
                             : (c->system.stiffness * size + c->system.damper * rate + 1) / c->system.mass);
    }
    return peak;
}

static void check_instant(const rampwise_instant *got, const rampwise_instant *want, double tolerance)
{
    ck_assert_msg(fabs(got->value - want->value) <= tolerance, "%.17g, not %.17g", got->value, want->value);
    ck_assert_msg(got->sample == want->sample && got->fraction == 0, "at %llu + %g, not %llu",
                  (unsigned long long)got->sample, got->fraction, (unsigned long long)want->sample);
}

/* Continuous quantities come exactly. A jumping one has on one side another order of operations: 8 roundings of the
   terms' sum (a difference, a slope, products with rounded quotients by the mass), twice for the two ways. Random
   samples leave no two extremes so near each other. */
static void check_at_samples(const rampwise_coeffs *c, const rampwise_state *s, int n, const double *p,
                             int quantity, const rampwise_peak *got)
{
    double scale;
    const rampwise_peak want = extremes_of_run(c, *s, n, p, quantity, &scale);
    const double tolerance = jumps(c, quantity) ? 16 * ROUNDING * scale : 0;
    check_instant(&got->high, &want.high, tolerance);
    check_instant(&got->low, &want.low, tolerance);
}

static rampwise_state at_rest_under(double p0)
{
    rampwise_state s;
    rampwise_start(&s, 0, 0, p0);
    return s;
}

START_TEST(at_samples)
{
    gsl_rng *const r = random_make("at_samples");
    for (int i = 0; i < 6 * KINDS; ++i) {
        rampwise_coeffs c[MOST];
        rampwise_peak got[MOST];
        double p[N];
        const int n = i == 0 ? 2 : 1 + (int)gsl_rng_uniform_int(r, N);
        random_fill(r, p, N);
        make_oscillators(c, MOST, i % KINDS);
        rampwise_peaks *const peaks = make_peaks(MOST, c, 3, all, RAMPWISE_AT_SAMPLES, RAMPWISE_FASTEST);
        run_in_chunks(r, peaks, n, p);
        const rampwise_state s = at_rest_under(p[0]);
        for (int q = 0; q < 3; ++q) {
            get(peaks, all[q], 0, got);
            for (int j = 0; j < MOST; ++j)
                check_at_samples(&c[j], &s, n - 1, p + 1, all[q], &got[j]);
        }
        rampwise_peaks_free(peaks);
    }
    gsl_rng_free(r);
}
END_TEST

/* From states of one's own: sample 0 is theirs. A settled one under a constant input never moves. */
START_TEST(given_states)
{
    gsl_rng *const r = random_make("given_states");
    for (int i = 0; i < 3 * KINDS; ++i) {
        rampwise_coeffs c[MOST];
        rampwise_state s[MOST];
        rampwise_peak got[MOST];
        double p[N];
        const int n = (int)gsl_rng_uniform_int(r, N);
        random_fill(r, p, N);
        make_oscillators(c, MOST, i % KINDS);
        for (int j = 0; j < MOST; ++j)
            s[j] = (rampwise_state){random_between(r, -1, 1), random_between(r, -1, 1), 0.3, -0.2};
        rampwise_peaks *const peaks = make_peaks(MOST, c, 3, all, RAMPWISE_AT_SAMPLES, RAMPWISE_FASTEST);
        run(peaks, 20, p);
        ck_assert_int_eq(rampwise_peaks_start(peaks, s), RAMPWISE_OK);
        run_in_chunks(r, peaks, n, p);
        for (int q = 0; q < 3; ++q) {
            get(peaks, all[q], 0, got);
            for (int j = 0; j < MOST; ++j)
                check_at_samples(&c[j], &s[j], n, p, all[q], &got[j]);
        }
        rampwise_peaks_free(peaks);
    }
    gsl_rng_free(r);
}
END_TEST

START_TEST(settled)
{
    const rampwise_system sys = {1, 0.5, 4}; /* u = 3/4, and nothing is rounded */
    const rampwise_coeffs c = made(sys, 0.25, 0);
    rampwise_state s;
    rampwise_peak got;
    double p[100];
    for (int i = 0; i < 100; ++i)
        p[i] = 3;
    ck_assert_int_eq(rampwise_start_settled(&c, &s, 3), RAMPWISE_OK);
    rampwise_peaks *const peaks = make_peaks(1, &c, 1, &all[1], RAMPWISE_AT_SAMPLES, RAMPWISE_FASTEST);
    ck_assert_int_eq(rampwise_peaks_start(peaks, &s), RAMPWISE_OK);
    run(peaks, 100, p);
    get(peaks, all[1], 0, &got);
    /* A step's coefficients are rounded: 100 steps of 4 terms below 1. */
    ck_assert_double_le(fabs(got.high.value - 0.75), 400 * ROUNDING);
    ck_assert_double_le(fabs(got.low.value - 0.75), 400 * ROUNDING);
    rampwise_peaks_free(peaks);
}
END_TEST

/* The bits of the object, in order, with and without samples only, over more oscillators than one group. */
static void check_spectrum(gsl_rng *r, int n, int input, int quantity, unsigned flags)
{
    double p[N], omega[MOST], zeta[MOST];
    rampwise_peak got[MOST], want[MOST];
    rampwise_coeffs c[MOST];
    random_fill(r, p, N);
    for (int j = 0; j < MOST; ++j) {
        rampwise_system sys;
        omega[j] = j % 9 == 4 ? 0 : random_log(r, 1e-2, 500);
        zeta[j] = j % 7 == 0 ? random_between(r, 0.9, 5) : random_between(r, 0, 0.9);
        ck_assert_int_eq(rampwise_system_natural(&sys, omega[j], zeta[j]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&c[j], &sys, 0.01, input, RAMPWISE_RAMP), RAMPWISE_OK);
    }
    rampwise_peaks *const peaks =
        make_peaks(MOST, c, 1, &quantity, flags & RAMPWISE_AT_SAMPLES, RAMPWISE_FASTEST);
    run(peaks, n, p);
    get(peaks, quantity, flags & ~(unsigned)RAMPWISE_AT_SAMPLES, want);
    ck_assert_int_eq(
        rampwise_spectrum((size_t)n, 0.01, p, input, MOST, omega, zeta, quantity, flags, got, NULL),
        RAMPWISE_OK);
    ck_assert_mem_eq(got, want, sizeof got);
    /* Rigid ones in between change none of the others. */
    omega[3] = omega[40] = INFINITY;
    if (input != RAMPWISE_BASE_DISPLACEMENT) {
        ck_assert_int_eq(
            rampwise_spectrum((size_t)n, 0.01, p, input, MOST, omega, zeta, quantity, flags, got, NULL),
            RAMPWISE_OK);
        want[3] = got[3];
        want[40] = got[40];
        ck_assert_mem_eq(got, want, sizeof got);
    }
    rampwise_peaks_free(peaks);
}

START_TEST(spectrum_is_the_object)
{
    gsl_rng *const r = random_make("spectrum_is_the_object");
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_DISPLACEMENT; ++input)
        for (int q = 0; q < 3; ++q)
            for (unsigned i = 0; i < 6; ++i)
                check_spectrum(r, i % 4 == 0 ? N : 1 + (int)gsl_rng_uniform_int(r, 40), input, all[q],
                               times[i % 3] + (i < 3 ? 0 : RAMPWISE_AT_SAMPLES));
    gsl_rng_free(r);
}
END_TEST

START_TEST(one_sample)
{
    const double p = 3, omega = 2, zeta = 0.1;
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_DISPLACEMENT; ++input)
        for (int q = 0; q < 3; ++q) {
            rampwise_peak got;
            double want = all[q] == RAMPWISE_TOTAL_ACCELERATION && input == RAMPWISE_FORCE ? p : 0;
            if (input == RAMPWISE_BASE_DISPLACEMENT) /* the base jumps at once: u - x = -3, u'' = 4 * 3 */
                want = all[q] == RAMPWISE_DISPLACEMENT ? -p : all[q] == RAMPWISE_VELOCITY ? 0 : 4 * p;
            ck_assert_int_eq(rampwise_spectrum(1, 1, &p, input, 1, &omega, &zeta, all[q], 0, &got, NULL),
                             RAMPWISE_OK);
            ck_assert_double_le(fabs(rampwise_peak_larger(&got)->value - want), 0);
            ck_assert(got.high.sample == 0 && got.low.sample == 0 && got.high.fraction == 0);
        }
}
END_TEST

static void check_nothing(const rampwise_peak *peak, uint64_t sample)
{
    ck_assert(peak->high.value == 0 && peak->high.sample == sample && peak->high.fraction == 0);
    ck_assert(peak->low.value == 0 && peak->low.sample == sample && peak->low.fraction == 0);
}

START_TEST(zeros)
{
    static const double p[N];
    for (int kind = 0; kind < KINDS; ++kind) {
        rampwise_coeffs c[MOST];
        rampwise_peak got[MOST];
        const uint64_t last = N - 1 + (kinds[kind][1] == RAMPWISE_HOLD);
        make_oscillators(c, MOST, kind);
        rampwise_peaks *const peaks = make_peaks(MOST, c, 3, all, 0, RAMPWISE_FASTEST);
        run(peaks, N, p);
        for (int q = 0; q < 3; ++q)
            for (int t = 0; t < 3; ++t) {
                get(peaks, all[q], times[t], got);
                for (int j = 0; j < MOST; ++j)
                    check_nothing(&got[j], times[t] == RAMPWISE_RESIDUAL ? last : 0);
            }
        rampwise_peaks_free(peaks);
    }
}
END_TEST

/* From rest high >= 0 >= low (peak.h), whatever the quantity: a load that comes at once jumps from nothing. */
START_TEST(from_rest_both_signs)
{
    for (int kind = 0; kind < 6; ++kind)
        for (int q = 2; q >= 0; --q) {
            rampwise_peak got[3];
            const double p[3] = {2, 1.9, 2};
            const rampwise_coeffs c = made(regime_system(1, 0.1, 0.01), 0.01, kind);
            alone(&c, 3, p, all[q], 0, got);
            ck_assert_msg(got->high.value >= 0 && got->low.value <= 0,
                          "kind %d, quantity %d: high %g, low %g", kind, all[q], got->high.value,
                          got->low.value);
        }
}
END_TEST

/* A free mass under whole numbers a second apart has exact velocities: up, back, down and back again, over and
   over, with a zero load at each turn, so that the extremes lie at samples and every one comes again. */
static int make_waves(gsl_rng *r, double *p)
{
    const int length = 1 + (int)gsl_rng_uniform_int(r, 80);
    double up[80];
    for (int i = 0; i < length; ++i)
        up[i] = (double)(1 + gsl_rng_uniform_int(r, 9));
    for (int i = 0; i < N; ++i) {
        const int wave = i / (length + 1) % 4, at = i % (length + 1);
        const double sign = wave == 0 || wave == 3 ? 1 : -1;
        p[i] = at == 0 ? 0 : sign * up[at - 1];
    }
    return length + 1;
}

START_TEST(ties)
{
    gsl_rng *const r = random_make("ties");
    for (int i = 0; i < 400; ++i) {
        const int set = sets[i % SETS], flags = i % 8 < 4 ? 0 : RAMPWISE_AT_SAMPLES;
        const rampwise_coeffs c = made((rampwise_system){1, 0, 0}, 1, 0);
        rampwise_peak got;
        double p[N], high;
        if (!runs_here(set))
            continue;
        const int turn = make_waves(r, p);
        high = 0;
        for (int j = 0; j < turn; ++j)
            high += (p[j] + p[j + 1]) / 2;
        rampwise_peaks *const peaks = make_peaks(1, &c, 1, &all[2], (unsigned)flags, set);
        run_in_chunks(r, peaks, 0, p);
        for (int done = 0, part; done < N; done += part) {
            part = 1 + (int)gsl_rng_uniform_int(r, 300);
            part = part > N - done ? N - done : part;
            run(peaks, part, p + done);
        }
        get(peaks, all[2], 0, &got);
        ck_assert_msg(got.high.value == high && got.high.sample == (uint64_t)turn && got.high.fraction == 0,
                      "%g at %llu + %g, not %g at %d", got.high.value, (unsigned long long)got.high.sample,
                      got.high.fraction, high, turn);
        ck_assert(got.low.value == -high && got.low.sample == 3 * (uint64_t)turn && got.low.fraction == 0);
        rampwise_peaks_free(peaks);
    }
    gsl_rng_free(r);
}
END_TEST

/* Two oscillators that run away, as rampwise_run says where and to which side. */
static void check_lost(const rampwise_coeffs *c, const double *p, int quantity, const rampwise_peak *got)
{
    size_t bad = 0;
    double scale;
    rampwise_state s = at_rest_under(p[0]);
    ck_assert_int_eq(rampwise_run(c, &s, N - 1, p + 1, NULL, &bad), RAMPWISE_ERROR_OVERFLOW);
    const rampwise_state rest = at_rest_under(p[0]);
    rampwise_peak before = extremes_of_run(c, rest, (int)bad, p + 1, quantity, &scale);
    note(&before, 0, 0); /* rest */
    const int up = value_at(c, &s, quantity) > 0;
    const rampwise_instant *const far = up ? &got->high : &got->low, *const near =
                                                                         up ? &got->low : &got->high;
    ck_assert(isinf(far->value) && (far->value > 0) == up && far->fraction == 0);
    ck_assert(quantity == RAMPWISE_TOTAL_ACCELERATION ? far->sample <= bad + 1 : far->sample == bad + 1);
    check_instant(near, up ? &before.low : &before.high, 0);
}

START_TEST(overflow)
{
    gsl_rng *const r = random_make("overflow");
    double p[2 * N];
    random_record(r, p, 2 * N);
    for (int i = 0; i < SETS; ++i) {
        static rampwise_peak want[40][3][3];
        rampwise_coeffs c[40];
        rampwise_peak got[40];
        if (!runs_here(sets[i]))
            continue;
        make_oscillators(c, 40, 0);
        c[5] = made((rampwise_system){1, 0, -9e4}, 0.01, 0);
        c[36] = made((rampwise_system){1, 0, -25e4}, 0.01, 0);
        rampwise_peaks *const peaks = make_peaks(40, c, 3, all, RAMPWISE_AT_SAMPLES, sets[i]);
        run_in_chunks(r, peaks, 2 * N, p);
        for (int q = 0; q < 3; ++q) {
            get(peaks, all[q], 0, got);
            check_lost(&c[5], p, all[q], &got[5]);
            check_lost(&c[36], p, all[q], &got[36]);
            for (int j = 0; j < 40; ++j) {
                if (j == 5 || j == 36)
                    continue;
                alone(&c[j], 2 * N, p, all[q], RAMPWISE_AT_SAMPLES, want[j][q]);
                ck_assert_mem_eq(&got[j], &want[j][q][0], sizeof *got);
            }
        }
        /* It may begin anew. */
        ck_assert_int_eq(rampwise_peaks_start(peaks, NULL), RAMPWISE_OK);
        run(peaks, 3, p);
        get(peaks, all[1], 0, got);
        ck_assert(isfinite(got[5].high.value) && isfinite(got[36].low.value));
        rampwise_peaks_free(peaks);
    }
    gsl_rng_free(r);
}
END_TEST

/* The caller's memory: garbage in it, exactly as large as asked, nothing written beyond it. */
START_TEST(callers_memory)
{
    gsl_rng *const r = random_make("callers_memory");
    const size_t alignment = rampwise_peaks_alignment();
    static rampwise_peak want[MOST][3][3];
    rampwise_coeffs c[MOST];
    double p[N];
    make_oscillators(c, MOST, 2);
    random_record(r, p, N);
    for (int j = 0; j < MOST; ++j)
        for (int q = 0; q < 3; ++q)
            alone(&c[j], N, p, all[q], 0, want[j][q]);
    for (int n = 1; n <= MOST; n += 23) {
        const size_t size = rampwise_peaks_size((size_t)n);
        unsigned char *const whole = malloc(size + 3 * alignment);
        unsigned char *const memory = whole + 2 * alignment - (uintptr_t)whole % alignment;
        for (int i = 0; i < SETS; ++i) {
            rampwise_peaks *peaks = NULL;
            if (!runs_here(sets[i]))
                continue;
            memset(whole, 0xff, size + 3 * alignment);
            ck_assert_int_eq(rampwise_peaks_init(memory, size, (size_t)n, c, 3, all, 0, sets[i], &peaks),
                             RAMPWISE_OK);
            ck_assert_ptr_eq(peaks, memory);
            run(peaks, N, p);
            check_bits(peaks, n, want);
            for (size_t j = 0; j < alignment; ++j)
                ck_assert(memory[size + j] == 0xff && memory[-1 - (ptrdiff_t)j] == 0xff);
        }
        free(whole);
    }
    gsl_rng_free(r);
}
END_TEST

/* Not a number at every place of a chunk, as the first chunk and as a later one: told, and nothing has changed. Samples
   are judged before oscillators are met, so that a few of these are enough, and more than a group now and then. */
START_TEST(bad_samples_change_nothing)
{
    enum { CHUNK = 75 };
    gsl_rng *const r = random_make("bad_samples_change_nothing");
    static rampwise_peak want[40][3][3];
    rampwise_coeffs c[40];
    rampwise_peak ignored[40];
    double p[N], chunk[CHUNK];
    random_record(r, p, N);
    make_oscillators(c, 40, 0);
    for (int j = 0; j < 40; ++j)
        for (int q = 0; q < 3; ++q)
            alone(&c[j], 2 * CHUNK, p, all[q], 0, want[j][q]);
    for (size_t i = 0; i < CHUNK; ++i) {
        const int n = i % 16 == 0 ? 40 : 3;
        size_t bad = 0;
        rampwise_peaks *const peaks = make_peaks(n, c, 3, all, 0, RAMPWISE_FASTEST);
        memcpy(chunk, p + CHUNK, sizeof chunk);
        chunk[i] = i % 3 == 0 ? NAN : i % 3 == 1 ? INFINITY : -INFINITY;
        ck_assert_int_eq(rampwise_peaks_run(peaks, CHUNK, chunk, &bad), RAMPWISE_ERROR_SAMPLE);
        ck_assert_uint_eq(bad, i);
        ck_assert_int_eq(rampwise_peaks_get(peaks, all[0], 0, ignored), RAMPWISE_ERROR_COUNT);
        run(peaks, CHUNK, p);
        ck_assert_int_eq(rampwise_peaks_run(peaks, CHUNK, chunk, &bad), RAMPWISE_ERROR_SAMPLE);
        ck_assert_int_eq(rampwise_peaks_run(peaks, CHUNK, chunk, NULL), RAMPWISE_ERROR_SAMPLE);
        run(peaks, CHUNK, p + CHUNK);
        check_bits(peaks, n, want);
        rampwise_peaks_free(peaks);
    }
    gsl_rng_free(r);
}
END_TEST

static int init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c, size_t count,
                const int *quantity, unsigned flags, int set)
{
    rampwise_peaks *peaks = NULL;
    const int status = rampwise_peaks_init(memory, bytes, n, c, count, quantity, flags, set, &peaks);
    ck_assert((status == RAMPWISE_OK) == (peaks != NULL));
    return status;
}

START_TEST(refusals_of_making)
{
    rampwise_coeffs c[3];
    rampwise_peaks *peaks = NULL;
    const size_t size = rampwise_peaks_size(3), alignment = rampwise_peaks_alignment();
    unsigned char *const memory = aligned_alloc(alignment, (size / alignment + 2) * alignment);
    static const int none[1] = {30}, beyond[2] = {31, 34}, twice[3] = {31, 32, 31};
    const int any = RAMPWISE_FASTEST;
    make_oscillators(c, 3, 0);
    rampwise_coeffs odd[3] = {c[0], c[1], c[2]};
    ck_assert_uint_eq(rampwise_peaks_size(0), 0);
    ck_assert_uint_eq(rampwise_peaks_size(SIZE_MAX), 0);
    ck_assert_uint_eq(rampwise_peaks_size(SIZE_MAX / 300), 0);
    ck_assert_int_eq(init(memory, size, 3, c, 3, all, 0, any), RAMPWISE_OK);
    ck_assert_int_eq(init(NULL, size, 3, c, 3, all, 0, any), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(init(memory, size, 3, NULL, 3, all, 0, any), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(init(memory, size, 3, c, 3, NULL, 0, any), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_init(memory, size, 3, c, 3, all, 0, any, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(init(memory, size - 1, 3, c, 3, all, 0, any), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(init(memory + 8, size, 3, c, 3, all, 0, any), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(init(memory, size, 0, c, 3, all, 0, any), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(init(memory, size, 3, c, 0, all, 0, any), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(init(memory, size, 3, c, 4, all, 0, any), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(init(memory, size, 3, c, 1, none, 0, any), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(init(memory, size, 3, c, 2, beyond, 0, any), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(init(memory, size, 3, c, 3, twice, 0, any), RAMPWISE_ERROR_QUANTITY);
    for (unsigned flags = 2; flags < 64; ++flags) {
        const unsigned known = RAMPWISE_AT_SAMPLES | RAMPWISE_EVIDENCE;
        if ((flags & ~known) != 0)
            ck_assert_int_eq(init(memory, size, 3, c, 3, all, flags, any), RAMPWISE_ERROR_FLAGS);
    }
    ck_assert_int_eq(init(memory, size, 3, c, 3, all, 0, 40), RAMPWISE_ERROR_INSTRUCTIONS);
    odd[2].dt = 0.02;
    ck_assert_int_eq(init(memory, size, 3, odd, 3, all, 0, any), RAMPWISE_ERROR_DIFFERENT);
    odd[2] = made(c[2].system, 0.01, 1);
    ck_assert_int_eq(init(memory, size, 3, odd, 3, all, 0, any), RAMPWISE_ERROR_DIFFERENT);
    odd[2] = made(c[2].system, 0.01, 2);
    ck_assert_int_eq(init(memory, size, 3, odd, 3, all, 0, any), RAMPWISE_ERROR_DIFFERENT);
    memset(&odd[1], 0, sizeof odd[1]);
    ck_assert_int_eq(init(memory, size, 3, odd, 3, all, 0, any), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_peaks_create(0, c, 3, all, 0, any, &peaks), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_peaks_create(3, NULL, 3, all, 0, any, &peaks), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_create(3, c, 3, all, 0, any, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_create(3, c, 3, all, 16, any, &peaks), RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(rampwise_peaks_create(3, odd, 3, all, 0, any, &peaks), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_ptr_null(peaks);
    rampwise_peaks_free(NULL);
    free(memory);
}
END_TEST

START_TEST(refusals_of_an_object)
{
    rampwise_coeffs c[3];
    rampwise_peak before[3], after[3];
    const double p[4] = {1, 2, -1, 4};
    static const int two[2] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY};
    make_oscillators(c, 3, 0);
    rampwise_peaks *const peaks = make_peaks(3, c, 2, two, 0, RAMPWISE_FASTEST);
    rampwise_state s[3] = {{1, 2, 3, 4}, {5, 6, 3, 4}, {7, 8, 3, 4}};
    ck_assert_int_eq(rampwise_peaks_get(peaks, two[0], 0, after), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_peaks_start(peaks, s), RAMPWISE_OK);
    run(peaks, 4, p);
    get(peaks, two[0], RAMPWISE_MAXIMAX, before);
    ck_assert_int_eq(rampwise_peaks_run(NULL, 4, p, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_run(peaks, 4, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_run(peaks, 0, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_start(NULL, s), RAMPWISE_ERROR_MISSING);
    s[2].p = 9;
    ck_assert_int_eq(rampwise_peaks_start(peaks, s), RAMPWISE_ERROR_DIFFERENT);
    s[2].p = 3;
    s[1].p_before = 9;
    ck_assert_int_eq(rampwise_peaks_start(peaks, s), RAMPWISE_ERROR_DIFFERENT);
    for (int i = 0; i < 4; ++i) {
        s[1] = (rampwise_state){5, 6, 3, 4};
        (&s[1].u)[i] = i % 2 == 0 ? NAN : INFINITY;
        ck_assert_int_eq(rampwise_peaks_start(peaks, s), RAMPWISE_ERROR_STATE);
    }
    ck_assert_int_eq(rampwise_peaks_get(NULL, two[0], 0, after), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_get(peaks, two[0], 0, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_get(peaks, all[0], 0, after), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_peaks_get(peaks, 0, 0, after), RAMPWISE_ERROR_QUANTITY);
    static const unsigned wrong[] = {1, 3, 5, 6, 7, 8, 1u << 31};
    for (size_t i = 0; i < sizeof wrong / sizeof *wrong; ++i)
        ck_assert_int_eq(rampwise_peaks_get(peaks, two[0], wrong[i], after), RAMPWISE_ERROR_FLAGS);
    get(peaks, two[0], RAMPWISE_MAXIMAX, after);
    ck_assert_mem_eq(before, after, sizeof before);
    rampwise_peaks_free(peaks);
}
END_TEST

typedef struct asked {
    size_t n, n_osc;
    double dt;
    const double *p, *omega, *zeta;
    int input, quantity;
    unsigned flags;
} asked;

/* Refused with a status and, where one is told, an index; of the peaks none but the first `written` change. */
static void check_refused(asked a, int status, size_t index, size_t written)
{
    size_t bad = 77;
    rampwise_peak peak[MOST], garbage;
    memset(peak, 0xff, sizeof peak);
    memset(&garbage, 0xff, sizeof garbage);
    ck_assert_int_eq(
        rampwise_spectrum(a.n, a.dt, a.p, a.input, a.n_osc, a.omega, a.zeta, a.quantity, a.flags, peak, &bad),
        status);
    ck_assert_uint_eq(bad, index);
    for (size_t i = 0; i < MOST; ++i)
        ck_assert_msg((memcmp(&peak[i], &garbage, sizeof garbage) != 0) == (i < written), "peak %zu", i);
    ck_assert_int_eq(
        rampwise_spectrum(a.n, a.dt, a.p, a.input, a.n_osc, a.omega, a.zeta, a.quantity, a.flags, peak, NULL),
        status);
}

START_TEST(refusals_of_a_spectrum)
{
    double p[5] = {1, 2, 3, 4, 5}, omega[MOST], zeta[MOST];
    rampwise_peak peak;
    for (int i = 0; i < MOST; ++i) {
        omega[i] = 1 + i;
        zeta[i] = 0.05;
    }
    const asked good = {5, MOST, 0.1, p, omega, zeta, RAMPWISE_FORCE, RAMPWISE_DISPLACEMENT, 0};
    asked a = good;
    check_refused(a, RAMPWISE_OK, 77, MOST);
    a.n_osc = 0;
    check_refused(a, RAMPWISE_OK, 77, 0);
    a = good;
    a.n = 0;
    check_refused(a, RAMPWISE_ERROR_COUNT, 77, 0);
    static const double intervals[] = {0, -1, INFINITY, NAN};
    for (a = good; a.flags < 4; ++a.flags) {
        asked b = good;
        b.dt = intervals[a.flags];
        check_refused(b, RAMPWISE_ERROR_INTERVAL, 77, 0);
    }
    a = good;
    for (int i = 0; i < 60; ++i)
        if (i < RAMPWISE_FORCE || i > RAMPWISE_BASE_DISPLACEMENT) {
            a.input = i;
            check_refused(a, RAMPWISE_ERROR_INPUT, 77, 0);
        }
    a = good;
    for (int i = 0; i < 60; ++i)
        if (i < RAMPWISE_DISPLACEMENT || i > RAMPWISE_TOTAL_ACCELERATION) {
            a.quantity = i;
            check_refused(a, RAMPWISE_ERROR_QUANTITY, 77, 0);
        }
    a = good;
    for (a.flags = 6; a.flags < 64; ++a.flags)
        check_refused(a, RAMPWISE_ERROR_FLAGS, 77, 0);
    static const struct {
        double omega, zeta;
        int status;
    } wrong[] = {{-1, 0.1, RAMPWISE_ERROR_FREQUENCY},      {NAN, 0.1, RAMPWISE_ERROR_FREQUENCY},
                 {-INFINITY, 0, RAMPWISE_ERROR_FREQUENCY}, {1e200, 0.1, RAMPWISE_ERROR_FREQUENCY},
                 {1, NAN, RAMPWISE_ERROR_DAMPER},          {1, INFINITY, RAMPWISE_ERROR_DAMPER},
                 {1e40, 0.1, RAMPWISE_ERROR_STEP_LENGTH},  {1e10, -1, RAMPWISE_ERROR_COEFFICIENT}};
    for (size_t i = 0; i < sizeof wrong / sizeof *wrong; ++i)
        for (int j = 0; j < MOST; j += 23) {
            omega[j] = wrong[i].omega;
            zeta[j] = wrong[i].zeta;
            check_refused(good, wrong[i].status, (size_t)j, 0);
            omega[j] = 1 + j;
            zeta[j] = 0.05;
        }
    a = good;
    a.input = RAMPWISE_BASE_DISPLACEMENT;
    omega[9] = INFINITY;
    check_refused(a, RAMPWISE_ERROR_FREQUENCY, 9, 0);
    omega[9] = 10;
    for (size_t i = 0; i < 5; ++i) {
        const double kept = p[i];
        p[i] = i % 2 == 0 ? NAN : INFINITY;
        check_refused(good, RAMPWISE_ERROR_SAMPLE, i, 0);
        p[i] = kept;
    }
    ck_assert_int_eq(rampwise_spectrum(5, 1, NULL, 11, 1, omega, zeta, 31, 0, &peak, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_spectrum(5, 1, p, 11, 1, NULL, zeta, 31, 0, &peak, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_spectrum(5, 1, p, 11, 1, omega, NULL, 31, 0, &peak, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_spectrum(5, 1, p, 11, 1, omega, zeta, 31, 0, NULL, NULL),
                     RAMPWISE_ERROR_MISSING);
}
END_TEST

/* A damping ratio that is none is refused at every frequency, the infinite one included (spectrum.h). */
START_TEST(rigid_with_a_wrong_damper)
{
    const double p[2] = {1, 2}, omega = INFINITY, zeta = NAN;
    rampwise_peak peak;
    ck_assert_int_eq(
        rampwise_spectrum(2, 1, p, RAMPWISE_FORCE, 1, &omega, &zeta, RAMPWISE_DISPLACEMENT, 0, &peak, NULL),
        RAMPWISE_ERROR_DAMPER);
}
END_TEST

START_TEST(larger)
{
    static const struct {
        rampwise_peak peak;
        int high;
    } cases[] = {{{{2, 9, 0}, {-1, 3, 0}}, 1},
                 {{{1, 3, 0}, {-2, 9, 0}}, 0},
                 {{{2, 9, 0}, {-2, 3, 0}}, 0},
                 {{{2, 3, 0}, {-2, 9, 0}}, 1},
                 {{{2, 3, 0.6}, {-2, 3, 0.5}}, 0},
                 {{{2, 3, 0.5}, {-2, 3, 0.6}}, 1},
                 {{{INFINITY, UINT64_MAX, 0}, {-2, 3, 0.6}}, 1},
                 {{{-1, 3, 0}, {-5, 2, 0}}, 0}};
    for (size_t i = 0; i < sizeof cases / sizeof *cases; ++i)
        ck_assert_ptr_eq(rampwise_peak_larger(&cases[i].peak),
                         cases[i].high ? &cases[i].peak.high : &cases[i].peak.low);
    /* Small whole numbers: exact. */
    const rampwise_system sys = {1, 0, 8};
    ck_assert_double_eq(rampwise_pseudo_velocity(3, &cases[1].peak), 6);
    ck_assert_double_eq(rampwise_pseudo_acceleration(3, &cases[1].peak), 18);
    ck_assert_double_eq(rampwise_dynamic_load_factor(&sys, &cases[1].peak, -4), 4);
}
END_TEST

/* first^(1 - f) last^f, in whatever form: f and 1 - f are off by a ROUNDING or two, which the logarithms of the ends
   weigh; two powers of an ulp (two ROUNDING) each and a product or quotient or two add up to 8. */
static double list_tolerance(double first, double last)
{
    return ROUNDING * (8 + 2 * (fabs(log(first)) + fabs(log(last))));
}

START_TEST(list_log)
{
    gsl_rng *const r = random_make("list_log");
    double list[60];
    for (int i = 0; i < 2000; ++i) {
        const size_t n = 2 + gsl_rng_uniform_int(r, 59);
        const double first = random_log(r, 1e-6, 1e6), last = random_log(r, 1e-6, 1e6);
        ck_assert_int_eq(rampwise_list_log(n, first, last, list), RAMPWISE_OK);
        ck_assert(list[0] == first && list[n - 1] == last);
        for (size_t j = 0; j < n; ++j) {
            const long double want =
                first * powl((long double)last / first, (long double)j / (long double)(n - 1));
            const double tolerance = list_tolerance(first, last) * (double)want;
            ck_assert_double_le(fabs((double)(list[j] - want)), tolerance);
        }
    }
    ck_assert_int_eq(rampwise_list_log(1, 5, 7, list), RAMPWISE_OK);
    ck_assert_double_eq(list[0], 5);
    ck_assert_int_eq(rampwise_list_log(0, 5, 7, NULL), RAMPWISE_OK);
    list[0] = 11;
    ck_assert_int_eq(rampwise_list_log(2, 5, 7, NULL), RAMPWISE_ERROR_MISSING);
    static const double wrong[] = {0, -1, INFINITY, NAN};
    for (int i = 0; i < 4; ++i) {
        ck_assert_int_eq(rampwise_list_log(2, wrong[i], 7, list), RAMPWISE_ERROR_FREQUENCY);
        ck_assert_int_eq(rampwise_list_log(2, 7, wrong[i], list), RAMPWISE_ERROR_FREQUENCY);
    }
    ck_assert_double_eq(list[0], 11);
    gsl_rng_free(r);
}
END_TEST

static size_t octaves(double first, double last, size_t per_octave)
{
    size_t n = 77;
    ck_assert_int_eq(rampwise_list_octaves(first, last, per_octave, 0, NULL, &n), RAMPWISE_OK);
    return n;
}

START_TEST(list_octaves)
{
    double list[40] = {11};
    size_t n = 77;
    ck_assert_uint_eq(octaves(1, 8, 3), 10);
    ck_assert_uint_eq(octaves(1, 8 * (1 - 5e-10), 3), 10); /* 7.2e-10 of an octave short of it */
    ck_assert_uint_eq(octaves(1, 8 * (1 - 1e-9), 3), 9);   /* 1.4e-9 */
    ck_assert_uint_eq(octaves(5, 5, 12), 1);
    ck_assert_uint_eq(octaves(0.1, 0.1 * 1024, 6), 61);
    ck_assert_int_eq(rampwise_list_octaves(3, 3 * 32, 3, 16, list, &n), RAMPWISE_OK);
    ck_assert_uint_eq(n, 16);
    for (size_t i = 0; i < n; ++i) /* exp2 (an ulp), its argument's rounding times ln 2 i/3, the product */
        ck_assert_double_le(fabs(list[i] / (3 * pow(2, (double)i / 3)) - 1), 16 * ROUNDING);
    for (size_t i = 0; i < n; i += 3)
        ck_assert_double_eq(list[i], 3 * (double)(1 << i / 3));
    list[0] = 11;
    n = 77;
    ck_assert_int_eq(rampwise_list_octaves(3, 3 * 32, 3, 15, list, &n), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_list_octaves(3, 3 * 32, 0, 40, list, &n), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_list_octaves(3, 3 * 32, 3, 40, list, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_list_octaves(0, 32, 3, 40, list, &n), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_int_eq(rampwise_list_octaves(3, INFINITY, 3, 40, list, &n), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_int_eq(rampwise_list_octaves(NAN, 3, 3, 40, list, &n), RAMPWISE_ERROR_FREQUENCY);
    ck_assert(n == 77 && list[0] == 11);
}
END_TEST

/* Ends further apart than a double's range: 1e600 is 1993.16 octaves. */
START_TEST(wide_lists)
{
    double list[3];
    ck_assert_int_eq(rampwise_list_log(3, 1e-300, 1e300, list), RAMPWISE_OK);
    ck_assert_msg(fabs(list[1] - 1) <= list_tolerance(1e-300, 1e300), "between 1e-300 and 1e300: %g",
                  list[1]);
    ck_assert_int_eq(rampwise_list_log(3, 1e300, 1e-300, list), RAMPWISE_OK);
    ck_assert_msg(fabs(list[1] - 1) <= list_tolerance(1e-300, 1e300), "between 1e300 and 1e-300: %g",
                  list[1]);
}
END_TEST

START_TEST(wide_octaves)
{
    ck_assert_uint_eq(octaves(1e-300, 1e300, 1), 1994);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, every_set_tail_and_chunk);
    tcase_add_test(tests, at_samples);
    tcase_add_test(tests, given_states);
    tcase_add_test(tests, settled);
    tcase_add_test(tests, spectrum_is_the_object);
    tcase_add_test(tests, one_sample);
    tcase_add_test(tests, zeros);
    tcase_add_test(tests, from_rest_both_signs);
    tcase_add_test(tests, ties);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, callers_memory);
    tcase_add_test(tests, bad_samples_change_nothing);
    tcase_add_test(tests, refusals_of_making);
    tcase_add_test(tests, refusals_of_an_object);
    tcase_add_test(tests, refusals_of_a_spectrum);
    tcase_add_test(tests, rigid_with_a_wrong_damper);
    tcase_add_test(tests, larger);
    tcase_add_test(tests, list_log);
    tcase_add_test(tests, list_octaves);
    tcase_add_test(tests, wide_lists);
    tcase_add_test(tests, wide_octaves);
}

int main(void)
{
    return suite_run("peaks", add_tests);
}
