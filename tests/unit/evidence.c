/* The evidence of what the sampling has cost: the estimate of a peak is that of the history at its instant, in every set and
   however a record is cut; peaks are the same with and without it; ends, verdicts, refusals. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MOST = 37, N = 600 };
static const int all[3] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY, RAMPWISE_TOTAL_ACCELERATION};
static const unsigned times[3] = {0, RAMPWISE_RESIDUAL, RAMPWISE_MAXIMAX};
static const double dt = 0.01;

static void make_oscillators(rampwise_coeffs *c, int n, int input)
{
    for (int i = 0; i < n; ++i) {
        const rampwise_system sys = regime_system(i % 7, 1e-3 * pow(1.17, i * 7 % 60), dt);
        ck_assert_int_eq(rampwise_coeffs_make(&c[i], &sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
    }
}

static rampwise_peaks *make_peaks(int n, const rampwise_coeffs *c, unsigned flags, int set)
{
    rampwise_peaks *peaks = NULL;
    ck_assert_int_eq(rampwise_peaks_create((size_t)n, c, 3, all, flags, set, &peaks), RAMPWISE_OK);
    return peaks;
}

static void run_in_chunks(gsl_rng *r, rampwise_peaks *peaks, int n, const double *p)
{
    rampwise_evidence ignored[MOST];
    for (int done = 0; done < n;) {
        int part = (int)gsl_rng_uniform_int(r, gsl_rng_uniform_int(r, 4) == 0 ? 600 : 40);
        part = part > n - done ? n - done : part;
        ck_assert_int_eq(rampwise_peaks_run(peaks, (size_t)part, p + done, NULL), RAMPWISE_OK);
        done += part;
        if (done > 0 && gsl_rng_uniform_int(r, 20) == 0)
            ck_assert_int_eq(rampwise_peaks_evidence(peaks, all[part % 3], times[part % 2], ignored),
                             RAMPWISE_OK);
    }
}

static void get(const rampwise_peaks *peaks, int q, int t, rampwise_peak *peak, rampwise_evidence *evidence)
{
    ck_assert_int_eq(rampwise_peaks_get(peaks, all[q], times[t], peak), RAMPWISE_OK);
    if (evidence != NULL)
        ck_assert_int_eq(rampwise_peaks_evidence(peaks, all[q], times[t], evidence), RAMPWISE_OK);
}

/* Peaks with evidence have the bits of those without; evidence has the same bits from every set, cut anyhow, and in an
   object that begins anew. */
static void check_bits(gsl_rng *r, const rampwise_coeffs *c, int n, unsigned flags, const double *p,
                       int turns)
{
    static rampwise_evidence want[3][3][MOST], evidence[MOST];
    static rampwise_peak plain[3][3][MOST], peak[MOST];
    rampwise_peaks *const whole = make_peaks(n, c, flags, RAMPWISE_BASELINE);
    rampwise_peaks *const with = make_peaks(n, c, flags | RAMPWISE_EVIDENCE, RAMPWISE_BASELINE);
    ck_assert_int_eq(rampwise_peaks_run(whole, N, p, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_run(with, N, p, NULL), RAMPWISE_OK);
    for (int k = 0; k < 9; k += 4) /* each quantity, each time */ {
        get(whole, k / 3, k % 3, plain[k / 3][k % 3], NULL);
        get(with, k / 3, k % 3, peak, want[k / 3][k % 3]);
        ck_assert_mem_eq(peak, plain[k / 3][k % 3], (size_t)n * sizeof *peak);
    }
    rampwise_peaks_free(whole);
    for (int i = 0; i < SETS; ++i) {
        rampwise_peaks *const peaks =
            runs_here(sets[i]) ? make_peaks(n, c, flags | RAMPWISE_EVIDENCE, sets[i]) : with;
        if (peaks == with)
            continue;
        for (int turn = 0; turn < turns; ++turn) {
            ck_assert_int_eq(rampwise_peaks_start(peaks, NULL), RAMPWISE_OK);
            run_in_chunks(r, peaks, N, p);
            for (int k = 0; k < 9; k += 4) /* each quantity, each time */ {
                get(peaks, k / 3, k % 3, peak, evidence);
                ck_assert_mem_eq(peak, plain[k / 3][k % 3], (size_t)n * sizeof *peak);
                ck_assert_mem_eq(evidence, want[k / 3][k % 3], (size_t)n * sizeof *evidence);
            }
        }
        rampwise_peaks_free(peaks);
    }
    rampwise_peaks_free(with);
}

START_TEST(every_set_and_chunk)
{
    rampwise_coeffs c[MOST];
    double p[N];
    gsl_rng *const r = random_make("every_set_and_chunk");
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_VELOCITY; ++input) {
        random_record(r, p, N);
        make_oscillators(c, MOST, input);
        check_bits(r, c, MOST, 0, p, input == RAMPWISE_FORCE ? 2 : 1); /* beginning anew knows no input */
        check_bits(r, c, 3, RAMPWISE_AT_SAMPLES, p, 2);
    }
    gsl_rng_free(r);
}
END_TEST

/* The motion's error at an instant from its whole history, which goes on under nothing after the record. */
static rampwise_state error_state(const rampwise_coeffs *c, const double *d, const rampwise_instant *when)
{
    rampwise_state e;
    uint64_t i = 0;
    rampwise_start(&e, 0, 0, 0);
    while (i < when->sample) {
        ++i;
        rampwise_step(c, &e, i < N ? d[i] : 0);
    }
    ck_assert_int_eq(rampwise_inside(c, &e, i + 1 < N ? d[i + 1] : 0, when->fraction, &e), RAMPWISE_OK);
    return e;
}

static double size_of(const rampwise_coeffs *c, const double *d, int q)
{
    double u[N], v[N], total[N], largest = 0;
    const rampwise_history out = {u, v, NULL, total};
    ck_assert_int_eq(rampwise_solve(c, 0, 0, N, d, &out, NULL), RAMPWISE_OK);
    const double *const z = q == 0 ? u : q == 1 ? v : total;
    for (int i = 0; i < N; ++i)
        largest = fmax(largest, fabs(z[i]));
    return largest;
}

/* Inside the record the same steps are taken, so the bits agree; after it, one leap against many steps, each of which
   may round by an ulp of the largest error. */
static void check_instant(const rampwise_coeffs *c, const double *d, const rampwise_instant *at, double error,
                          int q)
{
    if (at->sample > 20 * N) {
        ck_assert(at->sample != UINT64_MAX || error == 0 || c->system.stiffness == 0);
        return;
    }
    const rampwise_state e = error_state(c, d, at);
    const double want = q == 0 ? e.u : q == 1 ? e.v : rampwise_total_acceleration(c, &e);
    if (at->sample < N - 1)
        ck_assert_double_eq(error, want);
    else
        ck_assert_double_eq_tol(error, want,
                                1e-300 + 4 * DBL_EPSILON * (double)at->sample * size_of(c, d, q));
}

START_TEST(as_the_history)
{
    rampwise_coeffs c[MOST];
    rampwise_peak peak[MOST];
    rampwise_evidence evidence[MOST];
    double p[N], d[N];
    gsl_rng *const r = random_make("as_the_history");
    random_record(r, p, N);
    ck_assert_int_eq(rampwise_evidence_input(N, p, d, NULL), RAMPWISE_OK);
    make_oscillators(c, MOST, RAMPWISE_BASE_ACCELERATION);
    rampwise_peaks *const peaks = make_peaks(MOST, c, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST);
    run_in_chunks(r, peaks, N, p);
    for (int k = 0; k < 9; ++k) {
        get(peaks, k / 3, k % 3, peak, evidence);
        for (int j = 0; j < MOST; ++j) {
            check_instant(&c[j], d, &peak[j].high, evidence[j].error_high, k / 3);
            check_instant(&c[j], d, &peak[j].low, evidence[j].error_low, k / 3);
        }
    }
    rampwise_peaks_free(peaks);
    gsl_rng_free(r);
}
END_TEST

START_TEST(input_of_evidence)
{
    double p[5] = {1, 2, 5, 3, 3}, d[7] = {7, 7, 7, 7, 7, 7, 7};
    ck_assert_int_eq(rampwise_evidence_input(5, p, d + 1, NULL), RAMPWISE_OK);
    const double want[7] = {7, 0, 2.0 / 12, -5.0 / 12, 2.0 / 12, 0, 7};
    ck_assert_mem_eq(d, want, sizeof d);
    ck_assert_int_eq(rampwise_evidence_input(5, p, p, NULL), RAMPWISE_OK); /* in place */
    ck_assert_mem_eq(p, want + 1, sizeof p);
    for (size_t n = 0; n <= 2; ++n) {
        double few[3] = {3, 4, 5};
        ck_assert_int_eq(rampwise_evidence_input(n, few, few, NULL), RAMPWISE_OK);
        for (size_t i = 0; i < 3; ++i)
            ck_assert_double_eq(few[i], i < n ? 0 : 3 + (double)i);
    }
    size_t bad = 9;
    p[3] = NAN;
    d[0] = 7;
    ck_assert_int_eq(rampwise_evidence_input(5, p, d, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 3);
    ck_assert_double_eq(d[0], 7);
    ck_assert_int_eq(rampwise_evidence_input(5, NULL, d, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_evidence_input(5, p, NULL, NULL), RAMPWISE_ERROR_MISSING);
}
END_TEST

/* A record with one sample out of line near an end, in the middle of a line, has an abrupt end only there. */
START_TEST(abrupt_ends)
{
    rampwise_coeffs c;
    rampwise_peak peak;
    rampwise_evidence evidence, everyday;
    const double omega = 30, zeta = 0.05;
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_natural(&sys, omega, zeta), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                     RAMPWISE_OK);
    for (int from_end = 0; from_end < 16; ++from_end)
        for (int side = 0; side < 2; ++side) {
            double p[60];
            for (int i = 0; i < 60; ++i)
                p[i] = i == 30;
            const double step = from_end % 2 ? 0.11 : 0.09; /* against a twentieth of the peak's -2 */
            p[side ? 59 - from_end / 2 : from_end / 2] = step;
            rampwise_peaks *const peaks = make_peaks(1, &c, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST);
            ck_assert_int_eq(rampwise_peaks_run(peaks, 60, p, NULL), RAMPWISE_OK);
            get(peaks, 0, 0, &peak, &evidence);
            /* 2 step at the sample, step at its neighbours, of which the ends themselves do not count */
            const int at = from_end / 2;
            const double near = at == 0 || at == 5 ? step : at <= 4 ? 2 * step : 0;
            const uint32_t want = near > 0.1 ? (side ? RAMPWISE_ABRUPT_END : RAMPWISE_ABRUPT_START) : 0;
            ck_assert_msg(evidence.abrupt == want, "%g at %d from %s: %u", step, at, side ? "end" : "start",
                          evidence.abrupt);
            ck_assert_int_eq(rampwise_spectrum_evidence(60, dt, p, RAMPWISE_BASE_ACCELERATION, 1, &omega,
                                                        &zeta, RAMPWISE_DISPLACEMENT, 0, &peak, &everyday,
                                                        NULL),
                             RAMPWISE_OK);
            ck_assert_mem_eq(&everyday, &evidence, sizeof everyday);
            rampwise_peaks_free(peaks);
        }
}
END_TEST

/* Records of one to four samples, and the everyday form against the object. */
START_TEST(everyday)
{
    double omega[MOST], zeta[MOST], p[N];
    rampwise_coeffs c[MOST];
    rampwise_peak peak[MOST], object[MOST];
    rampwise_evidence evidence[MOST], of_object[MOST];
    gsl_rng *const r = random_make("everyday");
    random_fill(r, p, N);
    for (int j = 0; j < MOST; ++j) {
        rampwise_system sys;
        omega[j] = random_log(r, 0.1, 500);
        zeta[j] = random_between(r, 0, 1.5);
        ck_assert_int_eq(rampwise_system_natural(&sys, omega[j], zeta[j]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&c[j], &sys, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    }
    static const size_t lengths[] = {1, 2, 3, 34, 514, N};
    for (size_t i = 0; i < sizeof lengths / sizeof *lengths; ++i)
        for (int k = 0; k < 9; k += 4) {
            const unsigned flags = i % 2 ? RAMPWISE_AT_SAMPLES : 0;
            rampwise_peaks *const peaks = make_peaks(MOST, c, flags | RAMPWISE_EVIDENCE, RAMPWISE_FASTEST);
            ck_assert_int_eq(rampwise_peaks_run(peaks, lengths[i], p, NULL), RAMPWISE_OK);
            get(peaks, k / 3, k % 3, object, of_object);
            ck_assert_int_eq(rampwise_spectrum_evidence(lengths[i], dt, p, RAMPWISE_FORCE, MOST, omega, zeta,
                                                        all[k / 3], flags | times[k % 3], peak, evidence,
                                                        NULL),
                             RAMPWISE_OK);
            ck_assert_mem_eq(peak, object, sizeof peak);
            ck_assert_mem_eq(evidence, of_object, sizeof evidence);
            rampwise_peaks_free(peaks);
        }
    gsl_rng_free(r);
}
END_TEST

/* A stiff oscillator goes with its base, which is right at its samples. */
START_TEST(stiff)
{
    const double omega = INFINITY, zeta = 0.05, p[6] = {0, 0, 0, 0, 4, 0};
    rampwise_peak peak;
    rampwise_evidence evidence = {7, 7, 7, 7};
    const rampwise_evidence want = {0, 0, RAMPWISE_ABRUPT_END | RAMPWISE_ABRUPT_START, 0};
    ck_assert_int_eq(rampwise_spectrum_evidence(6, dt, p, RAMPWISE_BASE_ACCELERATION, 1, &omega, &zeta,
                                                RAMPWISE_TOTAL_ACCELERATION, 0, &peak, &evidence, NULL),
                     RAMPWISE_OK);
    ck_assert_double_eq(peak.high.value, 4);
    ck_assert_mem_eq(&evidence, &want, sizeof want);
    ck_assert_int_eq(rampwise_spectrum_evidence(6, dt, p, RAMPWISE_BASE_VELOCITY, 1, &omega, &zeta,
                                                RAMPWISE_TOTAL_ACCELERATION, 0, &peak, &evidence, NULL),
                     RAMPWISE_OK);
    ck_assert(isnan(evidence.error_high) && isnan(evidence.error_low));
}
END_TEST

/* A system that grows beyond the range has an infinite peak and no estimate of it; one lane alone. */
START_TEST(overflow)
{
    const rampwise_system grows = {1, -40, 100}, stays = {1, 1, 100};
    rampwise_coeffs c[2];
    rampwise_peak peak[2];
    rampwise_evidence evidence[2];
    double p[4000];
    for (int i = 0; i < 4000; ++i)
        p[i] = i > 20 ? sin(0.3 * i) : 0;
    ck_assert_int_eq(rampwise_coeffs_make(&c[0], &grows, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c[1], &stays, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    size_t first = 0;
    rampwise_state s;
    rampwise_start(&s, 0, 0, p[0]);
    ck_assert_int_eq(rampwise_run(&c[0], &s, 3999, p + 1, NULL, &first), RAMPWISE_ERROR_OVERFLOW);
    /* in the midst, and at the very last sample, which waits */
    for (size_t n = first + 2; n <= first + 40; n += 38) {
        rampwise_peaks *const peaks = make_peaks(2, c, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST);
        ck_assert_int_eq(rampwise_peaks_run(peaks, n, p, NULL), RAMPWISE_OK);
        get(peaks, 0, 0, peak, evidence);
        const int up = isinf(peak[0].high.value);
        ck_assert(up != isinf(peak[0].low.value));
        ck_assert_uint_eq(up ? peak[0].high.sample : peak[0].low.sample, first + 1);
        ck_assert(isnan(up ? evidence[0].error_high : evidence[0].error_low));
        ck_assert(isfinite(evidence[1].error_high) && evidence[1].error_high != 0);
        rampwise_peaks_free(peaks);
    }
}
END_TEST

START_TEST(verdict)
{
    const double omega[4] = {30, 10, 20, 40};
    rampwise_peak peak[4];
    rampwise_evidence evidence[4] = {{0.03, 9, 0, 0}, {0.001, 9, 0, 0}, {0.005, 9, 0, 0}, {0.004, 9, 0, 0}};
    double period = 7;
    for (int i = 0; i < 4; ++i)
        peak[i] = (rampwise_peak){{1, 0, 0}, {-0.5, 0, 0}};
    ck_assert_double_eq(rampwise_evidence_share(&peak[0], &evidence[0]), 0.03);
    peak[2].low.value = -2; /* the larger: its error counts */
    evidence[2].error_low = -0.01;
    ck_assert_double_eq(rampwise_evidence_share(&peak[2], &evidence[2]), 0.005);
    static const struct {
        double share, omega;
    } cases[] = {{0.03, 40}, {0.029, 20}, {0.005, 20}, {0.0049, 10}, {0.001, 10}};
    for (size_t i = 0; i < sizeof cases / sizeof *cases; ++i) {
        ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, cases[i].share, &period),
                         RAMPWISE_OK);
        ck_assert_double_eq_tol(period, 2 * 3.14159265358979323846 / cases[i].omega, 4 * DBL_EPSILON);
    }
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, 0.0009, &period), RAMPWISE_OK);
    ck_assert(isinf(period));
    evidence[1].error_high = NAN;
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, 1, &period), RAMPWISE_OK);
    ck_assert(isinf(period));
    const rampwise_peak nothing = {{0, 0, 0}, {0, 0, 0}};
    const rampwise_evidence no_error = {0, 0, 0, 0};
    ck_assert_double_eq(rampwise_evidence_share(&nothing, &no_error), 0);
    period = 7;
    ck_assert_int_eq(rampwise_shortest_period(0, omega, peak, evidence, 1, &period), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, -1, &period),
                     RAMPWISE_ERROR_FRACTION);
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, NAN, &period),
                     RAMPWISE_ERROR_FRACTION);
    ck_assert_int_eq(rampwise_shortest_period(4, NULL, peak, evidence, 1, &period), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_shortest_period(4, omega, NULL, evidence, 1, &period), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, NULL, 1, &period), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_shortest_period(4, omega, peak, evidence, 1, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_double_eq(period, 7);
}
END_TEST

static int with_evidence(int input, int between)
{
    const rampwise_system sys = {1, 0, 100};
    rampwise_coeffs c;
    rampwise_peaks *peaks = NULL;
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, between), RAMPWISE_OK);
    const int status = rampwise_peaks_create(1, &c, 3, all, RAMPWISE_EVIDENCE | RAMPWISE_AT_SAMPLES,
                                             RAMPWISE_FASTEST, &peaks);
    rampwise_peaks_free(peaks);
    return status;
}

START_TEST(refusals)
{
    rampwise_coeffs c;
    rampwise_peak peak = {{7, 7, 7}, {7, 7, 7}};
    rampwise_evidence evidence = {7, 7, 7, 7};
    const double omega = 3, zeta = 0.1, p[3] = {0, 1, 0};
    ck_assert_int_eq(with_evidence(RAMPWISE_FORCE, RAMPWISE_HOLD), RAMPWISE_ERROR_BETWEEN);
    ck_assert_int_eq(with_evidence(RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP), RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(with_evidence(RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP), RAMPWISE_OK);
    make_oscillators(&c, 1, RAMPWISE_FORCE);
    rampwise_peaks *const plain = make_peaks(1, &c, 0, RAMPWISE_FASTEST);
    rampwise_peaks *const with = make_peaks(1, &c, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST);
    ck_assert_int_eq(rampwise_peaks_evidence(with, all[0], 0, &evidence), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_peaks_run(plain, 3, p, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_run(with, 3, p, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_evidence(plain, all[0], 0, &evidence), RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(rampwise_peaks_evidence(with, all[0], 8, &evidence), RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(rampwise_peaks_evidence(with, 30, 0, &evidence), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_peaks_evidence(with, all[0], 0, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_peaks_evidence(NULL, all[0], 0, &evidence), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_spectrum_evidence(3, dt, p, RAMPWISE_BASE_DISPLACEMENT, 1, &omega, &zeta,
                                                all[0], 0, &peak, &evidence, NULL),
                     RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(rampwise_spectrum_evidence(3, dt, p, RAMPWISE_FORCE, 1, &omega, &zeta, all[0], 8, &peak,
                                                &evidence, NULL),
                     RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(
        rampwise_spectrum_evidence(3, dt, p, RAMPWISE_FORCE, 1, &omega, &zeta, all[0], 0, &peak, NULL, NULL),
        RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(
        rampwise_spectrum(3, dt, p, RAMPWISE_FORCE, 1, &omega, &zeta, all[0], RAMPWISE_EVIDENCE, &peak, NULL),
        RAMPWISE_ERROR_FLAGS);
    ck_assert_double_eq(peak.high.value, 7);
    ck_assert_double_eq(evidence.error_high, 7);
    rampwise_peaks_free(plain);
    rampwise_peaks_free(with);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, every_set_and_chunk);
    tcase_add_test(tests, as_the_history);
    tcase_add_test(tests, input_of_evidence);
    tcase_add_test(tests, abrupt_ends);
    tcase_add_test(tests, everyday);
    tcase_add_test(tests, stiff);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, verdict);
    tcase_add_test(tests, refusals);
}

int main(void)
{
    return suite_run("evidence", add_tests);
}
