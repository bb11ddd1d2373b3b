/* Percentiles over the direction: against brute force over 0.1 degree, closed forms of a line and a circle, the
   largest hypot, dense exact scans between the samples; the object in chunks, with few directions; refusals. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

static const double pi = 3.141592653589793;

enum { ANGLES = 1800, PERCENTS = 7, N = 700 };
static const double percent[PERCENTS] = {0, 5, 50, 84, 99.5, 100, 16};

static int ascending(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* S at the middles of 0.1 degree, sorted; answers the largest hypot. */
static double brute_force(size_t n, const double *x, const double *y, double *sorted)
{
    double largest = 0;
    for (size_t i = 0; i < n; ++i)
        largest = fmax(largest, hypot(x[i], y[i]));
    for (int k = 0; k < ANGLES; ++k) {
        const double c = cos(pi * (k + 0.5) / ANGLES), s = sin(pi * (k + 0.5) / ANGLES);
        sorted[k] = 0;
        for (size_t i = 0; i < n; ++i)
            sorted[k] = fmax(sorted[k], fabs(x[i] * c + y[i] * s));
    }
    qsort(sorted, ANGLES, sizeof *sorted, ascending);
    return largest;
}

/* |dS/dphi| is the distance of a corner at most, so that S is within largest pi/3600 of its value at the middle, and
   its percentiles of those of the steps at the middles. The largest is exact: a handful of roundings. */
static void check_against_brute_force(size_t n, const double *x, const double *y, const double *value)
{
    static double sorted[ANGLES];
    const double largest = brute_force(n, x, y, sorted), apart = largest * (pi / 2 / ANGLES + 1e-14);
    for (int i = 0; i < PERCENTS; ++i) {
        const double rank = percent[i] / 100 * ANGLES;
        const int low = (int)fmax(ceil(rank) - 1, 0), high = (int)fmin(floor(rank), ANGLES - 1);
        ck_assert_msg(value[i] >= sorted[low] - apart && value[i] <= sorted[high] + apart,
                      "percentile %g of %zu points: %.17g, not %.17g to %.17g", percent[i], n, value[i],
                      sorted[low], sorted[high]);
        if (percent[i] == 100)
            ck_assert_double_le(fabs(value[i] - largest), 4 * DBL_EPSILON * largest);
    }
}

static void of_histories(size_t n, const double *x, const double *y, double *value)
{
    ck_assert_int_eq(rampwise_percentiles_over_angle(n, x, y, PERCENTS, percent, value, NULL), RAMPWISE_OK);
}

/* Clouds, needles of every width and angle, spirals, few points. */
static void make_points(gsl_rng *r, int kind, size_t n, double *x, double *y)
{
    const double turned = random_between(r, 0, pi), width = random_log(r, 1e-18, 1),
                 scale = random_log(r, 1e-9, 1e9);
    for (size_t i = 0; i < n; ++i) {
        double a = random_between(r, -1, 1), b = random_between(r, -1, 1);
        if (kind == 1) {
            const double angle = 0.05 * (double)i, size = (double)(i + 1) / (double)n;
            a = size * cos(angle);
            b = size * sin(angle);
        } else if (kind == 2) {
            b *= width;
        } else if (kind == 3) {
            b = 0.7 * a;
        }
        x[i] = scale * (a * cos(turned) - b * sin(turned));
        y[i] = scale * (a * sin(turned) + b * cos(turned));
    }
}

START_TEST(histories)
{
    gsl_rng *const r = random_make("histories");
    for (int i = 0; i < 80; ++i) {
        double x[300], y[300], value[PERCENTS];
        const size_t n = i < 50 ? 1 + gsl_rng_uniform_int(r, 8) : 1 + gsl_rng_uniform_int(r, 300);
        make_points(r, i % 4, n, x, y);
        of_histories(n, x, y, value);
        check_against_brute_force(n, x, y, value);
    }
    gsl_rng_free(r);
}
END_TEST

/* One component zero: S = a |cos phi|, the median a/sqrt 2, percentile p a cos(90 degrees (1 - p/100)). Two in
   proportion: the same along their line. */
static void check_line(const double *value, double a, double tolerance)
{
    for (int i = 0; i < PERCENTS; ++i)
        ck_assert_double_le(fabs(value[i] - a * cos(pi / 2 * (1 - percent[i] / 100))), tolerance * a);
    ck_assert_double_le(fabs(value[2] - a / sqrt(2)), tolerance * a);
}

START_TEST(line)
{
    gsl_rng *const r = random_make("line");
    double x[N], y[N], value[PERCENTS];
    static const double zero[N];
    for (int i = 0; i < 40; ++i) {
        const double share = random_between(r, -2, 2);
        double most = 0;
        random_fill(r, x, N);
        for (int j = 0; j < N; ++j) {
            y[j] = share * x[j];
            most = fmax(most, fabs(x[j]));
        }
        of_histories(N, x, zero, value);
        check_line(value, most, 16 * DBL_EPSILON);
        of_histories(N, zero, x, value);
        check_line(value, most, 16 * DBL_EPSILON);
        of_histories(N, x, y, value); /* points off the line by rounding, and the promised 1e-14 */
        check_line(value, most * hypot(1, share), 1e-14);
    }
    gsl_rng_free(r);
}
END_TEST

/* N points evenly on a circle, a regular polygon with N corners: from cos(pi/N) to 1, percentile p cos(pi/N (1 -
   p/100)). */
START_TEST(circle)
{
    enum { CORNERS = 1000 };
    double x[CORNERS], y[CORNERS], value[PERCENTS];
    for (int i = 0; i < CORNERS; ++i) {
        x[i] = 3 * cos(2 * pi * i / CORNERS);
        y[i] = 3 * sin(2 * pi * i / CORNERS);
    }
    of_histories(CORNERS, x, y, value);
    for (int i = 0; i < PERCENTS; ++i)
        ck_assert_double_le(fabs(value[i] - 3 * cos(pi / CORNERS * (1 - percent[i] / 100))), 3e-14);
}
END_TEST

enum { MOST = 70 };

static void make_list(gsl_rng *r, double dt, double *omega, double *zeta)
{
    for (int j = 0; j < MOST; ++j) {
        omega[j] = j % 9 == 4 ? 0 : random_log(r, 1e-2, 3) / dt;
        zeta[j] = j % 7 == 0 ? random_between(r, 0.9, 5) : random_between(r, 0, 0.3);
    }
}

/* The quantity at all samples, by rampwise_solve and motion.h; where it jumps, the values before and after too. */
static size_t history_of(double omega, double zeta, double dt, int input, int quantity, size_t n,
                         const double *p, double *z)
{
    rampwise_system sys;
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_system_natural(&sys, omega, zeta), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
    rampwise_state s;
    rampwise_start(&s, 0, 0, p[0]);
    size_t count = 0;
    for (size_t i = 0; i < n; ++i) {
        if (i > 0)
            rampwise_step(&c, &s, p[i]);
        for (int after = 0; after < (i + 1 < n ? 2 : 1); ++after) {
            rampwise_state at = s;
            if (after)
                at.p_before = s.p - (p[i + 1] - s.p);
            z[count++] = quantity == RAMPWISE_DISPLACEMENT ? rampwise_relative_displacement(&c, &at)
                         : quantity == RAMPWISE_VELOCITY   ? rampwise_relative_velocity(&c, &at)
                                                           : rampwise_total_acceleration(&c, &at);
        }
    }
    return count;
}

/* The everyday form against the histories: the same points up to the order of sums (1e-13 of terms that may be larger
   than the result: the largest term of a total acceleration under base velocity or displacement is its change over
   dt), and brute force. */
static void check_at_samples(gsl_rng *r, int input, int quantity, int kind)
{
    static double p1[N], p2[N], z1[2 * N], z2[2 * N], value[MOST][PERCENTS];
    const double dt = random_log(r, 1e-3, 1);
    double omega[MOST], zeta[MOST], want[PERCENTS];
    make_list(r, dt, omega, zeta);
    random_record(r, p1, N);
    random_record(r, p2, N);
    for (int i = 0; kind == 1 && i < N; ++i)
        p2[i] = 0.7 * p1[i];
    for (int i = 0; kind == 2 && i < N; ++i)
        p2[i] = 0.7 * p1[i] + 0.01 * p2[i];
    ck_assert_int_eq(rampwise_spectrum_directions(N, dt, p1, p2, input, MOST, omega, zeta, quantity,
                                                  RAMPWISE_AT_SAMPLES, PERCENTS, percent, value[0], NULL),
                     RAMPWISE_OK);
    for (int j = 0; j < MOST; ++j) {
        const size_t n = history_of(omega[j], zeta[j], dt, input, quantity, N, p1, z1);
        (void)history_of(omega[j], zeta[j], dt, input, quantity, N, p2, z2);
        of_histories(n, z1, z2, want);
        for (int i = 0; i < PERCENTS; ++i)
            ck_assert_msg(fabs(value[j][i] - want[i]) <= 1e-12 * want[5],
                          "input %d quantity %d omega dt %g zeta %g percentile %g: %.17g, not %.17g", input,
                          quantity, omega[j] * dt, zeta[j], percent[i], value[j][i], want[i]);
        if (j % 35 == 0)
            check_against_brute_force(n, z1, z2, value[j]);
    }
}

START_TEST(at_samples)
{
    gsl_rng *const r = random_make("at_samples");
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_DISPLACEMENT; ++input)
        for (int q = RAMPWISE_DISPLACEMENT; q <= RAMPWISE_TOTAL_ACCELERATION; ++q)
            check_at_samples(r, input, q, (input + q) % 3);
    gsl_rng_free(r);
}
END_TEST

/* A record so long that more is put aside than there is room for: growing noise, whose every cycle may be outermost, and
   two components that grow to be one line. Between the samples S can fall short of S at the samples by no more than 1e-6
   of the largest. */
START_TEST(long_records)
{
    enum { LONG = 12000 };
    static double p1[LONG], p2[LONG], z1[2 * LONG], z2[2 * LONG];
    static const double omega[] = {0.01, 0.1, 0.6, 2};
    gsl_rng *const r = random_make("long_records");
    for (int kind = 0; kind < 2; ++kind) {
        for (int i = 0; i < LONG; ++i) {
            const double size = 1e-3 + (double)i / LONG;
            p1[i] = size * random_between(r, -1, 1);
            p2[i] =
                kind == 0 ? size * random_between(r, -1, 1) : 0.7 * p1[i] + random_between(r, -1e-6, 1e-6);
        }
        for (size_t j = 0; j < sizeof omega / sizeof *omega; ++j) {
            double at[PERCENTS], between[PERCENTS], want[PERCENTS];
            const double zeta = 0.02;
            for (unsigned flags = 0; flags < 2; ++flags)
                ck_assert_int_eq(rampwise_spectrum_directions(LONG, 1, p1, p2, RAMPWISE_BASE_ACCELERATION, 1,
                                                              &omega[j], &zeta, RAMPWISE_DISPLACEMENT,
                                                              flags ? RAMPWISE_AT_SAMPLES : 0, PERCENTS,
                                                              percent, flags ? at : between, NULL),
                                 RAMPWISE_OK);
            const size_t n = history_of(omega[j], zeta, 1, RAMPWISE_BASE_ACCELERATION, RAMPWISE_DISPLACEMENT,
                                        LONG, p1, z1);
            (void)history_of(omega[j], zeta, 1, RAMPWISE_BASE_ACCELERATION, RAMPWISE_DISPLACEMENT, LONG, p2,
                             z2);
            of_histories(n, z1, z2, want);
            for (int i = 0; i < PERCENTS; ++i) {
                ck_assert_msg(fabs(at[i] - want[i]) <= 1e-12 * want[5],
                              "omega %g percentile %g: %.17g, not %.17g", omega[j], percent[i], at[i],
                              want[i]);
                ck_assert_double_ge(between[i], at[i] - 1e-6 * want[5]);
            }
        }
    }
    gsl_rng_free(r);
}
END_TEST

enum { SHORT = 40, FINE = 512, FEW = 6 };

/* The record on its lines FINE times as fine: at its samples, an exact scan. A point of the response is within (omega
   dt/FINE)^2/8 of a chord between two of them, times the largest z''/omega^2, which is no more than a few times the
   largest z: 4.7e-7/8 times 10 at most here at omega dt = 0.35. */
static void make_fine(const double *p, double *fine)
{
    for (int i = 0; i + 1 < SHORT; ++i)
        for (int k = 0; k < FINE; ++k)
            fine[i * FINE + k] = p[i] + (p[i + 1] - p[i]) * k / FINE;
    fine[(SHORT - 1) * FINE] = p[SHORT - 1];
}

static double check_between(gsl_rng *r, int input, int quantity)
{
    static double fine1[SHORT * FINE], fine2[SHORT * FINE];
    double p1[SHORT], p2[SHORT], omega[FEW], zeta[FEW], value[FEW][PERCENTS], want[FEW][PERCENTS], worst = 0;
    const size_t n = (SHORT - 1) * FINE + 1;
    random_fill(r, p1, SHORT);
    random_fill(r, p2, SHORT);
    make_fine(p1, fine1);
    make_fine(p2, fine2);
    for (int j = 0; j < FEW; ++j) {
        omega[j] = j == 0 ? 0 : random_log(r, 0.01, 0.35);
        zeta[j] = j % 3 == 0 ? random_between(r, 0.5, 2) : random_between(r, 0, 0.1);
    }
    ck_assert_int_eq(rampwise_spectrum_directions(SHORT, 1, p1, p2, input, FEW, omega, zeta, quantity, 0,
                                                  PERCENTS, percent, value[0], NULL),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_spectrum_directions(n, 1.0 / FINE, fine1, fine2, input, FEW, omega, zeta,
                                                  quantity, RAMPWISE_AT_SAMPLES, PERCENTS, percent, want[0],
                                                  NULL),
                     RAMPWISE_OK);
    for (int j = 0; j < FEW; ++j)
        for (int i = 0; i < PERCENTS; ++i) {
            const double apart = want[j][i] - value[j][i], short_by = apart != 0 ? apart / want[j][5] : 0;
            worst = fmax(worst, short_by);
            ck_assert_msg(short_by <= 1e-6 && short_by >= -1e-6,
                          "input %d quantity %d omega %g zeta %g percentile %g: %.17g, not %.17g: %g", input,
                          quantity, omega[j], zeta[j], percent[i], value[j][i], want[j][i], short_by);
        }
    return worst;
}

START_TEST(between)
{
    gsl_rng *const r = random_make("between");
    double worst = 0;
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_DISPLACEMENT; ++input)
        for (int q = RAMPWISE_DISPLACEMENT; q <= RAMPWISE_TOTAL_ACCELERATION; ++q)
            worst = fmax(worst, check_between(r, input, q));
    printf("between: short by %.2g of the largest at most\n", worst);
    gsl_rng_free(r);
}
END_TEST

/* With one component zero the outline is a line to the true peak, in steps of any length. */
START_TEST(between_on_a_line)
{
    gsl_rng *const r = random_make("between_on_a_line");
    enum { LINE = 150 };
    static const double zero[LINE];
    double p[LINE], omega[MOST], zeta[MOST], value[MOST][PERCENTS];
    rampwise_peak peak[MOST];
    random_record(r, p, LINE);
    for (int j = 0; j < MOST; ++j) {
        omega[j] = random_log(r, 0.1, 300);
        zeta[j] = j % 4 == 0 ? random_log(r, 0.5, 50) : random_log(r, 1e-3, 0.5);
    }
    for (int q = RAMPWISE_DISPLACEMENT; q <= RAMPWISE_TOTAL_ACCELERATION; ++q) {
        ck_assert_int_eq(
            rampwise_spectrum(LINE, 1, p, RAMPWISE_BASE_ACCELERATION, MOST, omega, zeta, q, 0, peak, NULL),
            RAMPWISE_OK);
        ck_assert_int_eq(rampwise_spectrum_directions(LINE, 1, p, zero, RAMPWISE_BASE_ACCELERATION, MOST,
                                                      omega, zeta, q, 0, PERCENTS, percent, value[0], NULL),
                         RAMPWISE_OK);
        for (int j = 0; j < MOST; ++j)
            check_line(value[j], fabs(rampwise_peak_larger(&peak[j])->value), 1e-6);
    }
    gsl_rng_free(r);
}
END_TEST

static rampwise_directions *make_object(size_t n, const rampwise_coeffs *c, size_t directions, unsigned flags,
                                        int set)
{
    rampwise_directions *d = NULL;
    ck_assert_int_eq(rampwise_directions_create(n, c, RAMPWISE_DISPLACEMENT, directions, flags, set, &d),
                     RAMPWISE_OK);
    return d;
}

static void run_in_chunks(gsl_rng *r, rampwise_directions *d, const double *p1, const double *p2)
{
    for (size_t done = 0; done < N;) {
        size_t part = gsl_rng_uniform_int(r, 90);
        part = part > N - done ? N - done : part;
        ck_assert_int_eq(rampwise_directions_run(d, part, p1 + done, p2 + done, NULL), RAMPWISE_OK);
        done += part;
    }
}

/* With many directions all is as in the everyday form. With few, the true percentile is between value and value/(1 -
   shortfall), which for the largest is 1 - cos(pi/2M) at most; 1e-12 is for rounding, 1e-6 between samples. */
static void check_object(gsl_rng *r, unsigned flags, int set, size_t directions)
{
    double p1[N], p2[N], omega[MOST], zeta[MOST], want[MOST][PERCENTS], got[MOST][PERCENTS],
        lack[MOST][PERCENTS];
    rampwise_coeffs c[MOST];
    const double slack = flags != 0 ? 1e-12 : 1e-6;
    double most_lack = 0;
    make_list(r, 0.01, omega, zeta);
    for (int i = 0; i < N; ++i) { /* turning, so that there are many corners */
        p1[i] = sin(0.05 * i) + 0.1 * random_between(r, -1, 1);
        p2[i] = cos(0.05 * i) + 0.1 * random_between(r, -1, 1);
    }
    for (int j = 0; j < MOST; ++j) {
        rampwise_system sys;
        ck_assert_int_eq(rampwise_system_natural(&sys, omega[j], zeta[j]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&c[j], &sys, 0.01, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                         RAMPWISE_OK);
    }
    ck_assert_int_eq(rampwise_spectrum_directions(N, 0.01, p1, p2, RAMPWISE_BASE_ACCELERATION, MOST, omega,
                                                  zeta, RAMPWISE_DISPLACEMENT, flags, PERCENTS, percent,
                                                  want[0], NULL),
                     RAMPWISE_OK);
    rampwise_directions *const d = make_object(MOST, c, directions, flags, set);
    for (int again = 0; again < 2; ++again) {
        ck_assert_int_eq(rampwise_directions_start(d), RAMPWISE_OK);
        run_in_chunks(r, d, p1, p2);
        ck_assert_int_eq(rampwise_directions_get(d, PERCENTS, percent, got[0], lack[0]), RAMPWISE_OK);
        for (int j = 0; j < MOST; ++j)
            for (int i = 0; i < PERCENTS; ++i) {
                const double room = slack * want[j][5], told = got[j][i] / (1 - lack[j][i]);
                ck_assert_msg(got[j][i] <= want[j][i] + room && want[j][i] <= told + room,
                              "%zu directions, percentile %g: %.17g to %.17g does not hold %.17g", directions,
                              percent[i], got[j][i], told, want[j][i]);
                ck_assert(directions < N || lack[j][i] == 0);
                if (percent[i] == 100)
                    ck_assert_double_le(lack[j][i], 1 - cos(pi / 2 / (double)directions) + 1e-14);
                most_lack = fmax(most_lack, lack[j][2]);
            }
    }
    printf("object: %zu directions, told shortfall of the median %.2g at most\n", directions, most_lack);
    rampwise_directions_free(d);
}

START_TEST(object)
{
    gsl_rng *const r = random_make("object");
    static const size_t few[] = {2, 3, 8, 50};
    check_object(r, 0, RAMPWISE_FASTEST, 100);
    for (int i = 0; i < SETS; ++i)
        if (runs_here(sets[i]))
            check_object(r, RAMPWISE_AT_SAMPLES, sets[i], N);
    for (size_t i = 0; i < sizeof few / sizeof *few; ++i) {
        check_object(r, RAMPWISE_AT_SAMPLES, RAMPWISE_FASTEST, few[i]);
    }
    gsl_rng_free(r);
}
END_TEST

/* Stiff ones go with their base; silence gives zero; an unbounded response is infinite. */
START_TEST(edges)
{
    const double p1[3] = {0, 3, -1}, p2[3] = {0, -4, 1}, zero[3] = {0}, huge[3] = {0, 1e308, 1e308};
    const double omega[2] = {INFINITY, 2}, zeta[2] = {0.1, 0.1};
    double value[2][PERCENTS];
    ck_assert_int_eq(rampwise_spectrum_directions(3, 1, p1, p2, RAMPWISE_BASE_ACCELERATION, 2, omega, zeta,
                                                  RAMPWISE_TOTAL_ACCELERATION, 0, PERCENTS, percent, value[0],
                                                  NULL),
                     RAMPWISE_OK);
    ck_assert_double_eq(value[0][5], 5);
    ck_assert_int_eq(rampwise_spectrum_directions(3, 1, zero, zero, RAMPWISE_FORCE, 2, omega, zeta,
                                                  RAMPWISE_DISPLACEMENT, 0, PERCENTS, percent, value[0],
                                                  NULL),
                     RAMPWISE_OK);
    for (int i = 0; i < PERCENTS; ++i)
        ck_assert(value[0][i] == 0 && value[1][i] == 0);
    const double slow = 1e-3, none = 0;
    ck_assert_int_eq(rampwise_spectrum_directions(3, 100, huge, zero, RAMPWISE_FORCE, 1, &slow, &none,
                                                  RAMPWISE_DISPLACEMENT, RAMPWISE_AT_SAMPLES, PERCENTS,
                                                  percent, value[0], NULL),
                     RAMPWISE_OK);
    for (int i = 0; i < PERCENTS; ++i)
        ck_assert(isinf(value[0][i]));
}
END_TEST

START_TEST(refusals)
{
    const double p[3] = {0, 1, 2}, bad_p[3] = {0, 1, NAN}, omega = 2, zeta = 0.1, below = -0.1;
    const double wrong[2] = {50, 100.5};
    double value[2] = {7, 7};
    size_t bad = 9;
#define TRY(n, dt, p1, p2, input, zeta, quantity, flags, percents)                                           \
    rampwise_spectrum_directions(n, dt, p1, p2, input, 1, &omega, zeta, quantity, flags, 2, percents, value, \
                                 &bad)
    ck_assert_int_eq(TRY(3, 1, NULL, p, 11, &zeta, 31, 0, percent), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(TRY(0, 1, p, p, 11, &zeta, 31, 0, percent), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(TRY(3, 0, p, p, 11, &zeta, 31, 0, percent), RAMPWISE_ERROR_INTERVAL);
    ck_assert_int_eq(TRY(3, 1, p, p, 31, &zeta, 31, 0, percent), RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(TRY(3, 1, p, p, 11, &zeta, 11, 0, percent), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(TRY(3, 1, p, p, 11, &zeta, 31, RAMPWISE_RESIDUAL, percent), RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(TRY(3, 1, p, p, 11, &zeta, 31, 0, wrong), RAMPWISE_ERROR_PERCENT);
    ck_assert_uint_eq(bad, 1);
    ck_assert_int_eq(TRY(3, 1, p, bad_p, 11, &zeta, 31, 0, percent), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert_int_eq(TRY(3, 1, p, p, 11, &below, 31, 0, percent), RAMPWISE_ERROR_DAMPER);
    ck_assert_uint_eq(bad, 0);
    ck_assert_int_eq(rampwise_percentiles_over_angle(0, p, p, 1, percent, value, NULL), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_percentiles_over_angle(3, p, bad_p, 1, percent, value, &bad),
                     RAMPWISE_ERROR_SAMPLE);
    ck_assert_int_eq(rampwise_percentiles_over_angle(3, p, p, 2, wrong, value, &bad), RAMPWISE_ERROR_PERCENT);
    ck_assert(value[0] == 7 && value[1] == 7);
}
END_TEST

START_TEST(object_refusals)
{
    const rampwise_coeffs c = made((rampwise_system){1, 0.1, 1}, 0.1, 0),
                          held = made((rampwise_system){1, 0.1, 1}, 0.1, 1);
    const rampwise_coeffs wild = made((rampwise_system){1, -0.1, 1}, 0.1, 0);
    const rampwise_coeffs falls = made((rampwise_system){1, 0.1, -1}, 0.1, 0);
    static _Alignas(64) char memory[64];
    const double p[2] = {1, NAN};
    double value;
    size_t bad = 9;
    rampwise_directions *d = NULL;
#define MAKE(c, quantity, directions, flags, set)                                                            \
    rampwise_directions_create(1, c, quantity, directions, flags, set, &d)
    ck_assert_int_eq(MAKE(NULL, 31, 8, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(MAKE(&c, 31, 1, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(MAKE(&c, 11, 8, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(MAKE(&c, 31, 8, RAMPWISE_MAXIMAX, RAMPWISE_FASTEST), RAMPWISE_ERROR_FLAGS);
    ck_assert_int_eq(MAKE(&c, 31, 8, 0, 12345), RAMPWISE_ERROR_INSTRUCTIONS);
    ck_assert_int_eq(MAKE(&held, 31, 8, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_BETWEEN);
    ck_assert_int_eq(MAKE(&wild, 31, 8, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_DAMPER);
    ck_assert_int_eq(MAKE(&falls, 31, 8, 0, RAMPWISE_FASTEST), RAMPWISE_ERROR_STIFFNESS);
    ck_assert_int_eq(rampwise_directions_init(memory, sizeof memory, 1, &c, 31, 8, 0, RAMPWISE_FASTEST, &d),
                     RAMPWISE_ERROR_MEMORY);
    ck_assert_ptr_null(d);
    ck_assert_uint_eq(rampwise_directions_size(0, 8), 0);
    ck_assert_uint_eq(rampwise_directions_size(1, SIZE_MAX / 8), 0);
    ck_assert_uint_eq(rampwise_directions_size(SIZE_MAX / 8, 2), 0);
    ck_assert_int_eq(MAKE(&c, 31, 8, 0, RAMPWISE_FASTEST), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_directions_get(d, 1, percent, &value, NULL), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_directions_run(d, 2, p, p, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 1);
    ck_assert_int_eq(rampwise_directions_get(d, 1, percent, &value, NULL), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_directions_run(d, 1, NULL, p, &bad), RAMPWISE_ERROR_MISSING);
    rampwise_directions_free(d);
}
END_TEST

/* Resumed half way, in another object, it goes on to the same bits; damage and other objects are refused. */
START_TEST(saved_and_resumed)
{
    gsl_rng *const r = random_make("saved_and_resumed");
    static double p1[N], p2[N];
    for (int i = 0; i < 6; ++i) {
        enum { OSCILLATORS = 3, M = 9 };
        const unsigned flags = i % 2 ? RAMPWISE_AT_SAMPLES : 0;
        const size_t half = i == 0 ? 0 : gsl_rng_uniform_int(r, N);
        rampwise_coeffs c[OSCILLATORS], other[OSCILLATORS];
        double want[2][OSCILLATORS * PERCENTS], got[2][OSCILLATORS * PERCENTS];
        random_fill(r, p1, N);
        random_fill(r, p2, N);
        for (int j = 0; j < OSCILLATORS; ++j) {
            c[j] = made(regime_system(j % 4, 0.02 * pow(5, j), 0.01), 0.01, 2);
            other[j] = made(regime_system(j % 4, 0.03 * pow(5, j), 0.01), 0.01, 2);
        }
        ck_assert_int_eq(c[0].between, RAMPWISE_RAMP);
        rampwise_directions *const whole = make_object(OSCILLATORS, c, M, flags, RAMPWISE_FASTEST);
        rampwise_directions *const resumed = make_object(OSCILLATORS, c, M, flags, RAMPWISE_BASELINE);
        rampwise_directions *const different = make_object(OSCILLATORS, other, M, flags, RAMPWISE_FASTEST);
        rampwise_directions *const looser = make_object(OSCILLATORS, c, M + 1, flags, RAMPWISE_FASTEST);
        ck_assert_int_eq(rampwise_directions_run(whole, half, p1, p2, NULL), RAMPWISE_OK);
        const size_t size = rampwise_directions_saved_size(whole);
        unsigned char *const bytes = malloc(size);
        ck_assert_int_eq(rampwise_directions_save(whole, bytes, size - 1), RAMPWISE_ERROR_MEMORY);
        ck_assert_int_eq(rampwise_directions_save(whole, bytes, size), RAMPWISE_OK);
        for (size_t k = 0; k < size; k += 37) {
            bytes[k] ^= 16;
            ck_assert_int_ne(rampwise_directions_resume(resumed, bytes, size), RAMPWISE_OK);
            bytes[k] ^= 16;
        }
        ck_assert_int_eq(rampwise_directions_resume(resumed, bytes, size - 1), RAMPWISE_ERROR_DAMAGED);
        ck_assert_int_eq(rampwise_directions_resume(different, bytes, size), RAMPWISE_ERROR_DIFFERENT);
        ck_assert_int_eq(rampwise_directions_resume(looser, bytes, size), RAMPWISE_ERROR_DIFFERENT);
        ck_assert_int_eq(rampwise_directions_resume(resumed, NULL, size), RAMPWISE_ERROR_MISSING);
        ck_assert_int_eq(rampwise_directions_resume(resumed, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_directions_run(whole, N - half, p1 + half, p2 + half, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_directions_run(resumed, N - half, p1 + half, p2 + half, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_directions_get(whole, PERCENTS, percent, want[0], want[1]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_directions_get(resumed, PERCENTS, percent, got[0], got[1]), RAMPWISE_OK);
        ck_assert_mem_eq(want, got, sizeof want);
        free(bytes);
        rampwise_directions_free(whole);
        rampwise_directions_free(resumed);
        rampwise_directions_free(different);
        rampwise_directions_free(looser);
    }
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, histories);
    tcase_add_test(tests, line);
    tcase_add_test(tests, circle);
    tcase_add_test(tests, at_samples);
    tcase_add_test(tests, long_records);
    tcase_add_test(tests, between);
    tcase_add_test(tests, between_on_a_line);
    tcase_add_test(tests, object);
    tcase_add_test(tests, edges);
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, object_refusals);
    tcase_add_test(tests, saved_and_resumed);
}

int main(void)
{
    return suite_run("percentiles over the direction", add_tests);
}
