/* What the sampling has cost: the estimate against the truth, which is the response of the same oscillator to the same
   smooth load sampled 32 times finer (its own error is about 1/1024 of what is looked for). The loads are sums of
   sines with random phases, up to 0.6 of the Nyquist frequency, and rise and fall over 100 samples.

   A ramp takes sinc^2 of a sine, which falls short by x^2/12 - x^4/360 (x: radians a sample), the estimate by
   x^2/12 - x^4/144: at 0.6 of Nyquist estimate over error is 0.83. The displacement of an oscillator with 10 samples a period and
   more has little of such frequencies; velocity and total acceleration, and all under a base velocity, have more, so bounds are wider for them. Besides
   there is what is neither: the images of a sine that a ramp makes, and motion inside the step. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { N = 1500, FINER = 32, FINE = (N - 1) * FINER + 1, SINES = 40, TAPER = 100 };
static const double pi = 3.14159265358979323846, dt = 0.01;
/* estimate over error; what is left of the error */
typedef struct bound {
    double least, most, corrected;
} bound;
static const bound narrow = {0.7, 1.15, 0.2}, wide = {0.55, 1.15, 0.45};
static const int quantities[3] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY, RAMPWISE_TOTAL_ACCELERATION};

static bound bound_of(int input, int q)
{
    return q == 0 && input != RAMPWISE_BASE_VELOCITY ? narrow : wide;
}

static double taper(double i)
{
    const double from_end = i < N - 1 - i ? i : N - 1 - i;
    return from_end < TAPER ? 0.5 - 0.5 * cos(pi * from_end / TAPER) : 1;
}

static void smooth_load(gsl_rng *r, double *fine)
{
    double frequency[SINES], phase[SINES];
    for (int k = 0; k < SINES; ++k) {
        frequency[k] = random_between(r, 0.01, 0.3) / FINER; /* cycles a fine sample */
        phase[k] = random_between(r, 0, 2 * pi);
    }
    for (int i = 0; i < FINE; ++i) {
        fine[i] = 0;
        for (int k = 0; k < SINES; ++k)
            fine[i] += sin(2 * pi * frequency[k] * i + phase[k]);
        fine[i] *= taper((double)i / FINER);
    }
}

typedef struct histories {
    double p[N], d[N], u[N], v[N], total[N], error_u[N], error_v[N], error_total[N];
    double fine[FINE], true_u[FINE], true_v[FINE], true_total[FINE];
} histories;

static void solve(const rampwise_coeffs *c, int n, const double *p, double *u, double *v, double *total)
{
    const rampwise_history out = {u, v, NULL, total};
    ck_assert_int_eq(rampwise_solve(c, 0, 0, (size_t)n, p, &out, NULL), RAMPWISE_OK);
}

/* Largest errors over a history: the true one, the estimated one, the one of the corrected response. */
typedef struct errors {
    double real, estimated, corrected;
} errors;

static errors compare(const double *response, const double *error, const double *truth)
{
    errors e = {0, 0, 0};
    for (int i = 0; i < N; ++i) {
        const double real = response[i] - truth[i * FINER];
        e.real = fmax(e.real, fabs(real));
        e.estimated = fmax(e.estimated, fabs(error[i]));
        e.corrected = fmax(e.corrected, fabs(real - error[i]));
    }
    return e;
}

/* The truth between two fine samples is on a parabola to about 1e-6 of what is looked for. */
static double truth_at(const double *truth, const rampwise_instant *when)
{
    const double place = ((double)when->sample + when->fraction) * FINER;
    const int i = place < 1 ? 1 : place > FINE - 2 ? FINE - 2 : (int)(place + 0.5);
    const double x = place - i;
    return truth[i] + x / 2 * (truth[i + 1] - truth[i - 1]) +
           x * x / 2 * (truth[i + 1] - 2 * truth[i] + truth[i - 1]);
}

/* What is left of the error at a peak's instant. */
static double left_at(const rampwise_instant *at, double error, const double *truth)
{
    return fabs(at->value - error - truth_at(truth, at));
}

/* What a quantity has of the input at once: the load itself is right at the samples, and off by up to 3/2 d between. */
static double direct(const rampwise_coeffs *c, int q)
{
    const rampwise_system *const sys = &c->system;
    if (c->input == RAMPWISE_FORCE)
        return q == 2 ? 1 / sys->mass : 0;
    return c->input == RAMPWISE_BASE_ACCELERATION || q == 0 ? 0 : q == 1 ? -1 : sys->damper / sys->mass;
}

static double largest_between(const histories *h, const rampwise_coeffs *c, int q, const errors *e)
{
    double largest = 0;
    for (int i = 0; i < N; ++i)
        largest = fmax(largest, 1.5 * fabs(h->d[i] * direct(c, q)));
    return largest + e[q].real;
}

static double worst_left;

/* A quarter more than over a history is allowed, whose largest error is known at the samples only. */
static void check_peaks(const histories *h, const rampwise_coeffs *c, const errors *e)
{
    const double *const truths[3] = {h->true_u, h->true_v, h->true_total};
    rampwise_peaks *peaks = NULL;
    ck_assert_int_eq(rampwise_peaks_create(1, c, 3, quantities, RAMPWISE_EVIDENCE, RAMPWISE_FASTEST, &peaks),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_run(peaks, N, h->p, NULL), RAMPWISE_OK);
    for (int q = 0; q < 3; ++q) {
        rampwise_peak peak;
        rampwise_evidence evidence;
        ck_assert_int_eq(rampwise_peaks_get(peaks, quantities[q], 0, &peak), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_evidence(peaks, quantities[q], 0, &evidence), RAMPWISE_OK);
        ck_assert_uint_eq(evidence.abrupt, 0);
        const double left = fmax(left_at(&peak.high, evidence.error_high, truths[q]),
                                 left_at(&peak.low, evidence.error_low, truths[q])) /
                            largest_between(h, c, q, e);
        worst_left = fmax(worst_left, left);
        ck_assert_msg(left < 1.25 * bound_of(c->input, q).corrected,
                      "quantity %d: a corrected peak is off by %g of the largest error", quantities[q], left);
    }
    rampwise_peaks_free(peaks);
}

static double least_ratio, most_ratio, worst_corrected;

static void check_oscillator(histories *h, const rampwise_system *sys, int input, double samples_a_period)
{
    rampwise_coeffs coarse, fine;
    ck_assert_int_eq(rampwise_coeffs_make(&coarse, sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&fine, sys, dt / FINER, input, RAMPWISE_RAMP), RAMPWISE_OK);
    solve(&coarse, N, h->p, h->u, h->v, h->total);
    solve(&coarse, N, h->d, h->error_u, h->error_v, h->error_total);
    solve(&fine, FINE, h->fine, h->true_u, h->true_v, h->true_total);
    for (int i = 0; i < N; ++i) {
        h->error_v[i] -= h->d[i] * direct(&coarse, 1);
        h->error_total[i] -= h->d[i] * direct(&coarse, 2);
    }
    const errors e[3] = {compare(h->u, h->error_u, h->true_u), compare(h->v, h->error_v, h->true_v),
                         compare(h->total, h->error_total, h->true_total)};
    for (int q = 0; q < 3; ++q) {
        const bound b = bound_of(input, q);
        const double ratio = e[q].estimated / e[q].real, left = e[q].corrected / e[q].real;
        least_ratio = fmin(least_ratio, ratio);
        most_ratio = fmax(most_ratio, ratio);
        ck_assert_msg(ratio > b.least && ratio < b.most, "T = %g dt, quantity %d: estimate over error %g",
                      samples_a_period, quantities[q], ratio);
        if (samples_a_period < 10)
            continue;
        worst_corrected = fmax(worst_corrected, left);
        ck_assert_msg(left < b.corrected, "T = %g dt, quantity %d: corrected over uncorrected error %g",
                      samples_a_period, quantities[q], left);
    }
    if (samples_a_period >= 10)
        check_peaks(h, &coarse, e);
}

START_TEST(tapered_and_band_limited)
{
    static const double periods[] = {6, 8, 10, 14, 25, 50, 100, 200}, dampings[] = {0.02, 0.05, 0.2};
    static histories h;
    gsl_rng *const r = random_make("tapered_and_band_limited");
    least_ratio = INFINITY;
    most_ratio = worst_corrected = worst_left = 0;
    for (int record = 0; record < 3; ++record) {
        smooth_load(r, h.fine);
        for (int i = 0; i < N; ++i)
            h.p[i] = h.fine[i * FINER];
        ck_assert_int_eq(rampwise_evidence_input(N, h.p, h.d, NULL), RAMPWISE_OK);
        for (size_t k = 0; k < sizeof periods / sizeof *periods; ++k) {
            rampwise_system sys;
            ck_assert_int_eq(rampwise_system_period(&sys, periods[k] * dt, dampings[(size_t)record]),
                             RAMPWISE_OK);
            check_oscillator(&h, &sys, RAMPWISE_BASE_ACCELERATION, periods[k]);
            check_oscillator(&h, &sys, RAMPWISE_FORCE, periods[k]);
            check_oscillator(&h, &sys, RAMPWISE_BASE_VELOCITY, periods[k]);
        }
    }
    printf("tapered_and_band_limited: estimate over error %.2f to %.2f, corrected over uncorrected %.2f at "
           "most; at "
           "peaks %.2f\n",
           least_ratio, most_ratio, worst_corrected, worst_left);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, tapered_and_band_limited);
}

int main(void)
{
    return suite_run("sampling_error", add_tests);
}
