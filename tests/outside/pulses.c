/* Largest responses to pulses, and residual spectra. "recomputed": closed forms worked out with 30 digits and
   more by the method of Harris and Piersol, Shock and Vibration Handbook, chapter 8; a listed value may be off by
   half a unit of its last digit. The period is 1 throughout, r is the length of the pulse. */
#include <complex.h>
#include <float.h>
#include <gsl/gsl_math.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include "../support/random.h"
#include "../support/suite.h"
#include "rampwise.h"

#define ROUNDING (0.5 * DBL_EPSILON) /* largest relative error of one rounding */
#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Of u k/p0 = 2 at most, over records of up to 600 samples: a step rounds u and v (as a displacement, v/omega)
   by some 4 times ROUNDING in each, 600 * 2 * 2 * 4 * ROUNDING = 1.1e-12 if all were of one sign; as they come,
   the sum grows with the square root and stays 20 times below. The times dt and 2 pi come rounded: 2 pi r
   ROUNDING = 7e-15 for r <= 10. */
static const double pulse_tolerance = 1e-12;

enum { MOST = 6000 };
static const long double turn = 6.283185307179586476925286766559005768L;

static rampwise_peak peak_of(size_t n, double dt, const double *p, int input, double omega, double zeta,
                             int quantity, unsigned flags)
{
    rampwise_peak peak;
    ck_assert_int_eq(rampwise_spectrum(n, dt, p, input, 1, &omega, &zeta, quantity, flags, &peak, NULL),
                     RAMPWISE_OK);
    return peak;
}

static double load_factor(size_t n, double dt, const double *p, unsigned flags)
{
    rampwise_system sys;
    ck_assert_int_eq(rampwise_system_natural(&sys, 2 * M_PI, 0), RAMPWISE_OK);
    const rampwise_peak peak = peak_of(n, dt, p, RAMPWISE_FORCE, 2 * M_PI, 0, RAMPWISE_DISPLACEMENT, flags);
    return rampwise_dynamic_load_factor(&sys, &peak, 1);
}

static double acceleration_factor(size_t n, double dt, const double *p, double zeta, unsigned flags)
{
    const rampwise_peak peak =
        peak_of(n, dt, p, RAMPWISE_BASE_ACCELERATION, 2 * M_PI, zeta, RAMPWISE_TOTAL_ACCELERATION, flags);
    return fabs(rampwise_peak_larger(&peak)->value);
}

static void check_near(double ours, double want, double tolerance)
{
    ck_assert_msg(fabs(ours - want) <= tolerance, "%.17g, not %.17g within %g", ours, want, tolerance);
}

static void check_listed(const char *what, double ours, const char *listed, double slack)
{
    const size_t decimals = strlen(strchr(listed, '.') + 1);
    const double value = strtod(listed, NULL), half_unit = 0.5 * pow(10, -(double)decimals);
    ck_assert_msg(fabs(ours - value) <= half_unit + slack, "%s: %.17g, listed %s", what, ours, listed);
}

/* A load of straight lines: level `at_once` at time 0, slopes from corner to corner; nothing after the last. */
typedef struct load {
    double at_once, slope[2], corner[3];
    int pieces;
} load;

static load rectangle(double r)
{
    return (load){1, {0}, {0, r}, 1};
}

static load symmetric_triangle(double r)
{
    return (load){0, {2 / r, -2 / r}, {0, r / 2, r}, 2};
}

static load descending_triangle(double r)
{
    return (load){1, {-1 / r}, {0, r}, 1};
}

static load rising_step(double r)
{
    return (load){0, {1 / r, 0}, {0, r, r + 1.25}, 2};
}

/* The undamped response, in units of p0/k, to a level L at once and changes of slope s_j at t_j is

       L (1 - cos wt) + sum of s_j (t - t_j - sin(w (t - t_j))/w),

   for each level and each ramp have these responses from rest. Its derivative on a piece is
   S + Re(Z exp(iwt)), with S the sum of the s_j so far and Z = -i L w - sum of s_j exp(-i w t_j): zero where
   cos(wt + arg Z) = -S/|Z|. */
static long double response(const load *l, int pieces, long double t)
{
    long double u = l->at_once * (1 - cosl(turn * t)), before = 0;
    for (int j = 0; j < pieces; ++j) {
        const long double s = l->slope[j] - before, since = t - l->corner[j];
        u += s * (since - sinl(turn * since) / turn);
        before = l->slope[j];
    }
    return u;
}

static long double largest_in_piece(const load *l, int piece)
{
    const long double begin = l->corner[piece], end = l->corner[piece + 1];
    long double before = 0,
                largest = fmaxl(fabsl(response(l, piece + 1, begin)), fabsl(response(l, piece + 1, end)));
    complex long double Z = -(complex long double)I * l->at_once * turn;
    for (int j = 0; j <= piece; ++j) {
        Z -= (l->slope[j] - before) * cexpl(-(complex long double)I * turn * l->corner[j]);
        before = l->slope[j];
    }
    const long double ratio = -before / cabsl(Z);
    for (int side = -1; side <= 1 && fabsl(ratio) <= 1; side += 2) {
        const long double first = (side * acosl(ratio) - cargl(Z)) / turn;
        for (long double t = first + ceill(begin - first); t < end; ++t)
            largest = fmaxl(largest, fabsl(response(l, piece + 1, t)));
    }
    return largest;
}

static double largest_in_pulse(const load *l)
{
    long double largest = 0;
    for (int i = 0; i < l->pieces; ++i)
        largest = fmaxl(largest, largest_in_piece(l, i));
    return (double)largest;
}

/* The load in equal steps, `steps` of them to each corner's distance; the second piece may be longer. */
static size_t sampled(const load *l, int steps, double *p, double *dt)
{
    *dt = l->corner[1] / steps;
    size_t n = 1;
    double level = p[0] = l->at_once;
    for (int i = 0; i < l->pieces; ++i) {
        const long more = lround(ceil((l->corner[i + 1] - l->corner[i]) / *dt - 1e-6));
        const double rise = l->slope[i] * l->corner[1];
        ck_assert((size_t)more < MOST - n);
        for (long j = 1; j <= more; ++j)
            p[n++] = level + rise * (double)j / steps;
        level = p[n - 1];
    }
    return n;
}

typedef double closed_form(double r);

/* Both quantities: displacement under a force over p0/k, and, as they are the same by the equation of motion
   without a damper, the absolute acceleration over that of the base. */
static double check_pulse(load l, int steps, closed_form *residual)
{
    static double p[MOST];
    double dt;
    const size_t n = sampled(&l, steps, p, &dt);
    const double largest = largest_in_pulse(&l), left = residual(l.corner[l.pieces]);
    const double want[3] = {largest, left, fmax(largest, left)};
    const unsigned flags[3] = {0, RAMPWISE_RESIDUAL, RAMPWISE_MAXIMAX};
    double worst = 0;
    for (int i = 0; i < 3; ++i) {
        const double error = fmax(fabs(load_factor(n, dt, p, flags[i]) - want[i]),
                                  fabs(acceleration_factor(n, dt, p, 0, flags[i]) - want[i]));
        ck_assert_msg(error <= pulse_tolerance, "r %.17g, %d steps, flags %u: want %.17g, error %g",
                      l.corner[l.pieces], steps, flags[i], want[i], error);
        worst = fmax(worst, error);
    }
    return worst;
}

static double rectangle_residual(double r)
{
    return 2 * fabs(sin(M_PI * r));
}

static double triangle_residual(double r)
{
    return 4 * pow(sin(M_PI * r / 2), 2) / (M_PI * r);
}

/* From the transform of 1 - t/r: a level at once and a slope, whose phasors are 1 and (1 - exp(-2 pi i r))/(2 pi i r)
   apart. */
static double descending_residual(double r)
{
    const double a = 2 * M_PI * r;
    return hypot(1 - sin(a) / a, (1 - cos(a)) / a);
}

static void check_random_pulses(const char *name, load (*make)(double r), closed_form *residual)
{
    gsl_rng *const random = random_make(name);
    double worst = 0;
    for (int i = 0; i < 1500; ++i) {
        const int steps = 1 + (int)gsl_rng_uniform_int(random, 200);
        worst = fmax(worst, check_pulse(make(random_log(random, 0.02, 10)), steps, residual));
    }
    printf("%s: worst %.2g, tolerance %.2g\n", name, worst, pulse_tolerance);
    gsl_rng_free(random);
}

START_TEST(random_pulses)
{
    check_random_pulses("rectangle", rectangle, rectangle_residual);
    check_random_pulses("symmetric triangle", symmetric_triangle, triangle_residual);
    check_random_pulses("descending triangle", descending_triangle, descending_residual);
}
END_TEST

static double factor_of(load l, int steps, unsigned flags)
{
    static double p[MOST];
    double dt;
    const size_t n = sampled(&l, steps, p, &dt);
    return load_factor(n, dt, p, flags);
}

/* 2 sin(pi r) up to r = 1/2, then 2: the first formula of the chapter; u is largest half a period from the start
   if the pulse lasts so long, else a quarter period from its middle; one that lasts longer has equal extremes a
   period apart, of which rounding makes one the largest. A zero of the slope is off by the slope's
   rounding, some 200 * 2 * 4 * ROUNDING, over 2 pi. */
static void check_rectangle(double r, int held)
{
    const double omega = 2 * M_PI, dt = r / 200;
    double p[201];
    rampwise_coeffs c;
    rampwise_system sys;
    rampwise_peaks *peaks = NULL;
    rampwise_peak peak;
    const int quantity = RAMPWISE_DISPLACEMENT;
    for (size_t i = 0; i < COUNT(p); ++i)
        p[i] = 1;
    ck_assert_int_eq(rampwise_system_natural(&sys, omega, 0), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, RAMPWISE_FORCE, held ? RAMPWISE_HOLD : RAMPWISE_RAMP),
                     RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_create(1, &c, 1, &quantity, 0, RAMPWISE_FASTEST, &peaks), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_run(peaks, held ? 200 : 201, p, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, RAMPWISE_MAXIMAX, &peak), RAMPWISE_OK);
    const double want = r < 0.5 ? 2 * sin(M_PI * r) : 2, when = r < 0.5 ? r / 2 + 0.25 : 0.5;
    check_near(rampwise_dynamic_load_factor(&sys, &peak, 1), want, pulse_tolerance);
    const double late = ((double)peak.high.sample + peak.high.fraction) * dt - when;
    check_near(late, r < 1.5 ? 0 : round(late), 1e-12);
    rampwise_peaks_free(peaks);
}

START_TEST(rectangular)
{
    static const double r[] = {0.01, 0.1, 0.25, 0.3, 0.49, 0.51, 0.75, 1, 1.3, 2.6, 7};
    for (size_t i = 0; i < COUNT(r); ++i) {
        check_rectangle(r[i], 0);
        check_rectangle(r[i], 1);
    }
}
END_TEST

/* An extreme may lie where the step is cut in pieces, at a half, a quarter and so on of it, where the slope is zero
   or of either sign by rounding: a whole period under a constant load in one step, and the same with every number of
   half periods, the frequency an ulp or so to either side. All are 2. */
START_TEST(extremes_at_even_parts_of_a_step)
{
    static const double p[2] = {1, 1};
    for (int halves = 1; halves <= 64; ++halves)
        for (int off = -20; off <= 20; ++off) {
            const double omega = M_PI * halves * (1 + off * DBL_EPSILON);
            const rampwise_peak peak = peak_of(2, 1, p, RAMPWISE_FORCE, omega, 0, RAMPWISE_DISPLACEMENT, 0);
            const double ours = omega * omega * peak.high.value;
            ck_assert_msg(fabs(ours - 2) <= pulse_tolerance, "omega %a: %.17g, not 2", omega, ours);
        }
}
END_TEST

/* Critical damping, omega = 2, from u = 0 and v = 3 without a load: u = 3 t exp(-2t), largest at t = 1/2, which is
   half, a quarter and so on of one step. 1e-13 as in overdamped_residuals. */
START_TEST(critical_extremes_at_even_parts_of_a_step)
{
    const rampwise_system sys = {1, 4, 4};
    const rampwise_state s = {0, 3, 0, 0};
    const int quantity = RAMPWISE_DISPLACEMENT;
    const double zero = 0;
    for (double dt = 1; dt <= 64; dt *= 2) {
        rampwise_coeffs c;
        rampwise_peaks *peaks = NULL;
        rampwise_peak peak;
        ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_create(1, &c, 1, &quantity, 0, RAMPWISE_FASTEST, &peaks),
                         RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_start(peaks, &s), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(peaks, 1, &zero, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, 0, &peak), RAMPWISE_OK);
        check_near(peak.high.value, 1.5 / M_E, 1e-13);
        check_near(peak.high.fraction * dt, 0.5, 1e-12);
        rampwise_peaks_free(peaks);
    }
}
END_TEST

/* Recomputed; and 1 + |sin(pi r)|/(pi r). */
START_TEST(step_with_rise_time)
{
    gsl_rng *const random = random_make("step_with_rise_time");
    double worst = 0;
    check_listed("0.5", factor_of(rising_step(0.5), 100, 0), "1.636619772", pulse_tolerance);
    check_listed("1", factor_of(rising_step(1), 100, 0), "1.000000000000", pulse_tolerance);
    check_listed("1.5", factor_of(rising_step(1.5), 100, 0), "1.212206591", pulse_tolerance);
    for (int i = 0; i < 2000; ++i) {
        const double r = random_log(random, 0.1, 8);
        const int steps = 1 + (int)gsl_rng_uniform_int(random, 40);
        const double error = fabs(factor_of(rising_step(r), steps, 0) - 1 - fabs(sin(M_PI * r)) / (M_PI * r));
        ck_assert_double_le(error, pulse_tolerance);
        worst = fmax(worst, error);
    }
    printf("step_with_rise_time: worst %.2g, tolerance %.2g\n", worst, pulse_tolerance);
    gsl_rng_free(random);
}
END_TEST

typedef struct listed {
    double r;
    const char *value;
} listed;

/* Recomputed. */
START_TEST(triangles)
{
    static const listed symmetric[] = {{.25, "0.745846457"}, {.5, "1.273239545"}, {.75, "1.489061489"},
                                       {.9, "1.517155688"},  {1, "1.508489764"},  {1.5, "1.287858005"},
                                       {2, "1.000000000000"}};
    static const listed descending[] = {{.25, "0.733027915"},
                                        {.5, "1.196186524"},
                                        {1, "1.550239228"},
                                        {2, "1.762638515"},
                                        {5, "1.902025740"}};
    for (size_t i = 0; i < COUNT(symmetric); ++i)
        check_listed("symmetric", factor_of(symmetric_triangle(symmetric[i].r), 100, RAMPWISE_MAXIMAX),
                     symmetric[i].value, pulse_tolerance);
    for (size_t i = 0; i < COUNT(descending); ++i)
        check_listed("descending", factor_of(descending_triangle(descending[i].r), 100, RAMPWISE_MAXIMAX),
                     descending[i].value, pulse_tolerance);
}
END_TEST

static double half_sine_once(double r, int steps, unsigned flags)
{
    static double p[MOST];
    for (int i = 0; i <= steps; ++i)
        p[i] = sin(M_PI * i / steps);
    p[steps] = 0;
    return load_factor((size_t)steps + 1, r / steps, p, flags);
}

/* Straight lines under a sine of N steps err in powers of 1/N^2 (Euler and Maclaurin), of which 1000, 2000 and
   4000 steps let two be removed. A largest value between two samples has more: the last piece, cut at f, has
   (B4(f) - B4(0))/24 <= 0.0026 of (omega r)^2 pi^2/N^4 in its error, which depends on f and stays. The sum
   (64 c - 20 b + a)/45 has 2e-13 of it for r = 2 and less before. Rounding: as the pulses', 7 times as many steps
   as they come one by one, their sum sqrt(7) times theirs, 1e-13, weighted by 1.9. */
static double half_sine(double r, unsigned flags)
{
    const double a = half_sine_once(r, 1000, flags), b = half_sine_once(r, 2000, flags);
    const double c = half_sine_once(r, 4000, flags), bc = c + (c - b) / 3, ab = b + (b - a) / 3;
    return bc + (bc - ab) / 15;
}

static const double half_sine_slack = 1e-12;

/* Recomputed; largest over all time. */
START_TEST(half_sines)
{
    static const listed largest[] = {
        {.125, "0.492735750673"}, {.25, "0.942809041582"}, {.5, "1.570796326795"},
        {.75, "1.76335575688"},   {.8, "1.76832708864"},   {1, "1.732050807569"},
        {1.5, "1.500000000000"},  {2, "1.26807535506"},    {.809936785851, "1.76845765399"}};
    static const listed residual[] = {{.8, "1.65952203974"},
                                      {1, "1.333333333333"},
                                      {1.5, "0.000000000000"},
                                      {2.5, "0.000000000000"},
                                      {.683621818, "1.71550870929"}};
    for (size_t i = 0; i < COUNT(largest); ++i)
        check_listed("largest", half_sine(largest[i].r, RAMPWISE_MAXIMAX), largest[i].value, half_sine_slack);
    for (size_t i = 0; i < COUNT(residual); ++i)
        check_listed("residual", half_sine(residual[i].r, RAMPWISE_RESIDUAL), residual[i].value,
                     half_sine_slack);
}
END_TEST

/* The ratio of errors differs from 4 by 4 times the fourth-power term over the second-power one: (h/2)^2 of order
   one times (1 + (r omega/pi)^2)/20 with h = pi/100, below 0.01; rounding, 1e-14 of an error of 2e-5, adds nothing. */
START_TEST(half_sine_converges)
{
    static const double r[] = {.125, .25, .75, .8, 1, 1.5, 2};
    for (size_t i = 0; i < COUNT(r); ++i) {
        const double exact = half_sine(r[i], RAMPWISE_MAXIMAX);
        const double coarse = half_sine_once(r[i], 100, RAMPWISE_MAXIMAX) - exact;
        const double middle = half_sine_once(r[i], 200, RAMPWISE_MAXIMAX) - exact;
        const double fine = half_sine_once(r[i], 400, RAMPWISE_MAXIMAX) - exact;
        printf("half_sine_converges: r %g: %.3g %.3g %.3g, ratios %.6f %.6f\n", r[i], coarse, middle, fine,
               coarse / middle, middle / fine);
        check_near(coarse / middle, 4, 0.01);
        check_near(middle / fine, 4, 0.01);
    }
}
END_TEST

/* |2b/(1 - b^2) cos(pi r)|, b = 1/(2r) (from memory of the same chapter). */
START_TEST(half_sine_residual)
{
    gsl_rng *const random = random_make("half_sine_residual");
    double worst = 0;
    for (int i = 0; i < 500; ++i) {
        const double r = random_between(random, 0.55, 3), b = 1 / (2 * r);
        const double error =
            fabs(half_sine(r, RAMPWISE_RESIDUAL) - fabs(2 * b / (1 - b * b) * cos(M_PI * r)));
        ck_assert_double_le(error, half_sine_slack);
        worst = fmax(worst, error);
    }
    printf("half_sine_residual: worst %.2g, tolerance %.2g\n", worst, half_sine_slack);
    gsl_rng_free(random);
}
END_TEST

/* Recomputed, 5 % damped, acceleration against a fixed frame. 2000 steps leave (pi/2000)^2/12 = 2e-7. */
START_TEST(damped_half_sine)
{
    static const listed want[] = {{.5, "1.462645"}, {.8, "1.650994"}, {1, "1.623791"}};
    double p[2001];
    for (int i = 0; i <= 2000; ++i)
        p[i] = sin(M_PI * i / 2000);
    for (size_t i = 0; i < COUNT(want); ++i)
        check_listed("5 %", acceleration_factor(COUNT(p), want[i].r / 2000, p, 0.05, RAMPWISE_MAXIMAX),
                     want[i].value, 4e-7);
}
END_TEST

typedef double factor_at(double r);

/* The top of the parabola through three points d = 1e-4 apart: off by rounding, 2e-12 d over the second difference
   (curvature 2 and more times d^2), 1e-8, and by d^2 times the ratio of the third derivative to the second, below
   20 here, over 6: 3.4e-8. Far above both is a list of six digits only. */
static void check_greatest(factor_at *f, const char *value, const char *r)
{
    const double at = strtod(r, NULL), d = 1e-4, low = f(at - d), high = f(at + d), middle = f(at);
    check_listed("greatest", middle, value, half_sine_slack);
    ck_assert(low < middle && high < middle);
    check_listed("where", at + d / 2 * (low - high) / (low - 2 * middle + high), r, 5e-8);
}

static double sine_largest(double r)
{
    return half_sine(r, RAMPWISE_MAXIMAX);
}

static double sine_residual(double r)
{
    return half_sine(r, RAMPWISE_RESIDUAL);
}

static double triangle_largest(double r)
{
    return factor_of(symmetric_triangle(r), 100, RAMPWISE_MAXIMAX);
}

static double triangle_left(double r)
{
    return factor_of(symmetric_triangle(r), 100, RAMPWISE_RESIDUAL);
}

START_TEST(greatest_of_all)
{
    check_greatest(sine_largest, "1.76845765399", "0.809936785851");
    check_greatest(sine_residual, "1.71550870929", "0.683621818");
    check_greatest(triangle_largest, "1.517177528", "0.904593");
    check_greatest(triangle_left, "1.449222708", "0.742019");
}
END_TEST

/* Recomputed; after half a damped period. */
START_TEST(overshoot)
{
    static const struct {
        double zeta;
        const char *value;
    } want[] = {{0.05, "1.854467893"}, {0.1, "1.729247614"}};
    double p[131];
    for (size_t i = 0; i < COUNT(p); ++i)
        p[i] = 1;
    for (size_t i = 0; i < COUNT(want); ++i) {
        const double z = want[i].zeta, root = sqrt(1 - z * z), omega = 2 * M_PI;
        const rampwise_peak peak =
            peak_of(COUNT(p), 0.01, p, RAMPWISE_FORCE, omega, z, RAMPWISE_DISPLACEMENT, 0);
        const double factor = omega * omega * peak.high.value;
        check_listed("overshoot", factor, want[i].value, pulse_tolerance);
        check_near(factor, 1 + exp(-M_PI * z / root), pulse_tolerance);
        check_near(((double)peak.high.sample + peak.high.fraction) * 0.01, 0.5 / root, 1e-12);
        ck_assert(peak.low.value == 0 && peak.low.sample == 0 && peak.low.fraction == 0);
    }
}
END_TEST

/* By parts, twice: the integral of p exp(-iwt) over a record of straight lines of slope s_j from t_j to t_(j+1) is

       (p_0 - p_N exp(-iwT))/(iw) + sum of s_j (exp(-iwt_j) - exp(-iwt_(j+1)))/(iw)^2. */
static double transform(size_t n, double dt, const double *p, double omega)
{
    const complex long double iw = (complex long double)I * omega, one = 1;
    complex long double sum = 0, before = 1;
    for (size_t j = 0; j + 1 < n; ++j) {
        const complex long double after = cexpl(-iw * ((long double)(j + 1) * dt));
        sum += ((long double)p[j + 1] - p[j]) / dt * (before - after);
        before = after;
    }
    return (double)cabsl(((long double)p[0] * one - p[n - 1] * before) / iw + sum / (iw * iw));
}

/* D. E. Hudson, Bull. Seism. Soc. Am. 52, 417-430, 1962 (from memory): without damping the residual velocity
   amplitude is the modulus of the transform. V, the integral of |p|, bounds v and omega u. A step rounds twice
   three fused operations of numbers up to 4 V, 24 ROUNDING V, and its coefficients (0.6 ulp each, 1.2 ROUNDING,
   sums of at most 6 V in the two lines) 8 more: 32 a step. omega^2 is rounded, which turns the phase by
   ROUNDING omega T/2. */
START_TEST(fourier_identity)
{
    gsl_rng *const random = random_make("fourier_identity");
    double p[80], worst = 0, relative = 0;
    for (int i = 0; i < 5000; ++i) {
        const size_t n = 2 + gsl_rng_uniform_int(random, 78);
        const double dt = random_log(random, 1e-3, 1e3), theta = random_log(random, 1e-2, 3),
                     omega = theta / dt;
        double V = 0;
        random_fill(random, p, n);
        for (size_t j = 0; j + 1 < n; ++j)
            V += dt * fmax(fabs(p[j]), fabs(p[j + 1]));
        const rampwise_peak peak = peak_of(n, dt, p, i % 2 ? RAMPWISE_FORCE : RAMPWISE_BASE_ACCELERATION,
                                           omega, 0, RAMPWISE_VELOCITY, RAMPWISE_RESIDUAL);
        const double want = transform(n, dt, p, omega), steps = (double)n;
        const double tolerance = ROUNDING * V * (32 * steps + theta * steps);
        const double error = fmax(fabs(peak.high.value - want), fabs(peak.low.value + want));
        ck_assert_double_le(error, tolerance);
        worst = fmax(worst, error / tolerance);
        relative = fmax(relative, error / V);
    }
    printf("fourier_identity: worst %.3f of its tolerance, %.2g of the integral\n", worst, relative);
    gsl_rng_free(random);
}
END_TEST

/* omega = 0 under a constant force: u = t^2/2, v = t exactly (dt is a power of two), then an even drift. With
   omega T = 1e-6 the period is long: u = (1 - cos(omega t))/omega^2 is (omega T)^2/12 = 8e-14 lower, and the
   rounding of 100 steps, which each add numbers of one sign, is 100 * 3 ROUNDING = 3e-14. */
START_TEST(free_mass)
{
    double p[101];
    const double dt = 0x1p-4, T = 100 * dt, omega[2] = {0, 1e-6 / T};
    for (size_t i = 0; i < COUNT(p); ++i)
        p[i] = 1;
    for (int i = 0; i < 2; ++i) {
        const rampwise_peak u = peak_of(101, dt, p, RAMPWISE_FORCE, omega[i], 0, RAMPWISE_DISPLACEMENT, 0);
        const rampwise_peak v = peak_of(101, dt, p, RAMPWISE_FORCE, omega[i], 0, RAMPWISE_VELOCITY, 0);
        check_near(u.high.value, T * T / 2, i * 1.2e-13 * T * T / 2);
        check_near(v.high.value, T, i * 6e-13 * T); /* (omega T)^2/6, and rounding as above */
        ck_assert(u.high.sample == 100 && v.high.sample == 100 && u.low.value == 0 && u.low.sample == 0);
    }
    rampwise_peak drift = peak_of(101, dt, p, RAMPWISE_FORCE, 0, 0, RAMPWISE_DISPLACEMENT, RAMPWISE_RESIDUAL);
    ck_assert(isinf(drift.high.value) && drift.high.value > 0 && drift.high.sample == UINT64_MAX);
    ck_assert(drift.low.value == T * T / 2 && drift.low.sample == 100 && drift.low.fraction == 0);
    drift = peak_of(101, dt, p, RAMPWISE_FORCE, 0, 0, RAMPWISE_DISPLACEMENT, RAMPWISE_MAXIMAX);
    ck_assert(isinf(drift.high.value) && drift.low.value == 0 && drift.low.sample == 0);
    drift = peak_of(101, dt, p, RAMPWISE_FORCE, 0, 0, RAMPWISE_VELOCITY, RAMPWISE_RESIDUAL);
    ck_assert(drift.high.value == T && drift.low.value == T && drift.high.sample == 100);
    drift = peak_of(101, dt, p, RAMPWISE_FORCE, 0, 0, RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_RESIDUAL);
    ck_assert(drift.high.value == 0 && drift.low.value == 0 && drift.high.sample == 100);
}
END_TEST

/* A very stiff oscillator follows its base but for transients: each change of the slope by D leaves
   D exp(-zeta w t)/wd (1 + zeta/sqrt(1 - zeta^2) at most, with its cosine part), so with dt = 1 and |D| <= 4 all of
   them 4.3/wd (1 + 1/expm1(zeta w)). 32 roundings as the sum of k u/m and c v/m, each of a few times the input. */
static void check_stiff(size_t n, const double *p, const rampwise_peak *limit)
{
    for (double omega = 1e3; omega < 1e10; omega *= 10) {
        const double zeta = 0.05, wd = omega * sqrt(1 - zeta * zeta);
        const double tolerance = 4.3 / wd * (1 + 1 / expm1(zeta * omega)) + 64 * ROUNDING;
        const rampwise_peak near =
            peak_of(n, 1, p, RAMPWISE_BASE_ACCELERATION, omega, zeta, RAMPWISE_TOTAL_ACCELERATION, 0);
        const rampwise_peak u =
            peak_of(n, 1, p, RAMPWISE_BASE_ACCELERATION, omega, zeta, RAMPWISE_DISPLACEMENT, 0);
        check_near(near.high.value, limit->high.value, tolerance);
        check_near(near.low.value, limit->low.value, tolerance);
        ck_assert_double_le(rampwise_pseudo_acceleration(omega, &u), 1.5); /* u ~ a/omega^2, |a| < 1 */
        ck_assert_double_le(fabs(rampwise_peak_larger(&u)->value), 1.5 / (omega * omega));
    }
}

START_TEST(rigid)
{
    gsl_rng *const random = random_make("rigid");
    double p[200];
    random_fill(random, p, COUNT(p));
    p[0] = 0;
    const rampwise_peak total =
        peak_of(COUNT(p), 1, p, RAMPWISE_BASE_ACCELERATION, INFINITY, 0.05, RAMPWISE_TOTAL_ACCELERATION, 0);
    size_t high = 0, low = 0;
    for (size_t i = 1; i < COUNT(p); ++i) {
        high = p[i] > p[high] ? i : high;
        low = p[i] < p[low] ? i : low;
    }
    ck_assert(total.high.value == p[high] && total.high.sample == high && total.high.fraction == 0);
    ck_assert(total.low.value == p[low] && total.low.sample == low && total.low.fraction == 0);
    check_stiff(COUNT(p), p, &total);
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_VELOCITY; ++input)
        for (int quantity = RAMPWISE_DISPLACEMENT; quantity <= RAMPWISE_TOTAL_ACCELERATION; ++quantity) {
            const rampwise_peak still = peak_of(COUNT(p), 1, p, input, INFINITY, 0, quantity, 0);
            const int moves = quantity == RAMPWISE_TOTAL_ACCELERATION && input != RAMPWISE_FORCE;
            ck_assert(moves ? still.high.value > 0 && still.low.value < 0
                            : still.high.value == 0 && still.low.value == 0 && still.high.sample == 0);
        }
    gsl_rng_free(random);
}
END_TEST

/* Base velocities 0 1 3 2 2 a second apart: accelerations 1 2 -1 0. */
START_TEST(rigid_on_base_of_known_velocity)
{
    static const double p[5] = {0, 1, 3, 2, 2};
    const rampwise_peak total =
        peak_of(5, 0.5, p, RAMPWISE_BASE_VELOCITY, INFINITY, 0, RAMPWISE_TOTAL_ACCELERATION, 0);
    ck_assert(total.high.value == 4 && total.high.sample == 1 && total.high.fraction == 0);
    ck_assert(total.low.value == -2 && total.low.sample == 2 && total.low.fraction == 0);
}
END_TEST

/* From rest high >= 0 >= low (peak.h), and maximax is both times, after the record included: the base is at
   once without acceleration there. A record of one sign must not hide that. */
START_TEST(rigid_under_one_sign)
{
    static const double p[3] = {2, 1, 3};
    const rampwise_peak first =
        peak_of(3, 1, p, RAMPWISE_BASE_ACCELERATION, INFINITY, 0, RAMPWISE_TOTAL_ACCELERATION, 0);
    const rampwise_peak left = peak_of(3, 1, p, RAMPWISE_BASE_ACCELERATION, INFINITY, 0,
                                       RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_RESIDUAL);
    const rampwise_peak both = peak_of(3, 1, p, RAMPWISE_BASE_ACCELERATION, INFINITY, 0,
                                       RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_MAXIMAX);
    ck_assert(first.high.value == 3 && first.high.sample == 2);
    ck_assert(left.high.value == 0 && left.low.value == 0 && left.high.sample == 2);
    ck_assert(both.high.value == 3 && both.high.sample == 2);
    ck_assert_msg(both.low.value == fmin(first.low.value, left.low.value),
                  "maximax low %g, primary %g, residual %g", both.low.value, first.low.value, left.low.value);
}
END_TEST

/* The free motion of an oscillator that swings: exp(-zeta w t) (u cos(wd t) + (v + zeta w u)/wd sin(wd t)), and
   what follows from it. */
static long double swinging(const rampwise_system *sys, long double u, long double v, int quantity,
                            long double t)
{
    const long double k = sys->stiffness, c = sys->damper, decay = c / 2, wd = sqrtl(k - decay * decay);
    const long double E = expl(-decay * t), C = cosl(wd * t), S = sinl(wd * t);
    const long double y = E * (u * C + (v + decay * u) / wd * S);
    const long double w = E * (v * C - (k * u + decay * v) / wd * S);
    return quantity == RAMPWISE_DISPLACEMENT ? y : quantity == RAMPWISE_VELOCITY ? w : -k * y - c * w;
}

/* The value is attained where it is told, and none is larger in the first period and a bit. The motion's size
   (amplitude for zeta up to 0.9 at most 1/sqrt(1 - zeta^2) = 2.3 of the hypot) is rounded some 100 times in the
   pieces that a period is cut into; a told instant of 1e-15 n steps moves the value by its square only, but for the
   first instant, which is exact. */
static void check_attained(const rampwise_system *sys, double dt, size_t n, const double *p, int quantity,
                           double *worst)
{
    const double omega = sqrt(sys->stiffness), zeta = sys->damper / (2 * omega);
    const double unit = quantity == RAMPWISE_DISPLACEMENT ? 1
                        : quantity == RAMPWISE_VELOCITY   ? omega
                                                          : omega * omega;
    double u[50], v[50];
    const rampwise_history out = {u, v, NULL, NULL};
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_coeffs_make(&c, sys, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_solve(&c, 0, 0, n, p, &out, NULL), RAMPWISE_OK);
    const rampwise_peak left = peak_of(n, dt, p, RAMPWISE_FORCE, omega, zeta, quantity, RAMPWISE_RESIDUAL);
    const double size = unit * hypot(u[n - 1], v[n - 1] / omega), tolerance = 500 * ROUNDING * size;
    const rampwise_instant *const side[2] = {&left.high, &left.low};
    for (int i = 0; i < 2; ++i) {
        ck_assert(side[i]->sample >= n - 1 && side[i]->sample != UINT64_MAX);
        const long double t = ((long double)(side[i]->sample - (n - 1)) + side[i]->fraction) * dt;
        const double at = (double)swinging(sys, u[n - 1], v[n - 1], quantity, t);
        *worst = fmax(*worst, fabs(at - side[i]->value) / tolerance);
        ck_assert_double_le(fabs(at - side[i]->value), tolerance);
    }
    /* Without a damper both are attained in the first period; a later one is no earlier of equal ones. */
    for (int i = 0; i < 2 && zeta == 0; ++i)
        ck_assert_msg(((double)(side[i]->sample - (n - 1)) + side[i]->fraction) * dt * omega <=
                          2 * M_PI + 1e-9,
                      "n %zu, quantity %d: %.17g of a period after the last sample", n, quantity,
                      ((double)(side[i]->sample - (n - 1)) + side[i]->fraction) * dt * omega / (2 * M_PI));
    for (int i = 0; i < 1000; ++i) {
        const long double t = i * turn * 1.2L / 1000 / omega / sqrtl(1 - (long double)zeta * zeta);
        const double at = (double)swinging(sys, u[n - 1], v[n - 1], quantity, t);
        ck_assert(at <= left.high.value + tolerance && at >= left.low.value - tolerance);
    }
}

static void check_maximax(const rampwise_system *sys, double dt, size_t n, const double *p, int quantity)
{
    const double omega = sqrt(sys->stiffness), zeta = sys->damper / (2 * omega);
    const rampwise_peak first = peak_of(n, dt, p, RAMPWISE_FORCE, omega, zeta, quantity, 0);
    const rampwise_peak left = peak_of(n, dt, p, RAMPWISE_FORCE, omega, zeta, quantity, RAMPWISE_RESIDUAL);
    const rampwise_peak both = peak_of(n, dt, p, RAMPWISE_FORCE, omega, zeta, quantity, RAMPWISE_MAXIMAX);
    const rampwise_instant *const high = left.high.value > first.high.value ? &left.high : &first.high;
    const rampwise_instant *const low = left.low.value < first.low.value ? &left.low : &first.low;
    ck_assert(both.high.value == high->value && both.high.sample == high->sample);
    ck_assert(both.low.value == low->value && both.low.sample == low->sample);
    ck_assert(both.high.fraction == high->fraction && both.low.fraction == low->fraction);
}

START_TEST(residual_instants)
{
    gsl_rng *const random = random_make("residual_instants");
    double p[50], worst = 0;
    for (int i = 0; i < 2000; ++i) {
        const size_t n = 2 + gsl_rng_uniform_int(random, 48);
        /* omega a power of two: the square, and its root, are exact, so that both calls see one oscillator. */
        const double omega = ldexp(1, (int)gsl_rng_uniform_int(random, 5));
        const double dt = random_log(random, 1e-2, 3) / omega,
                     zeta = i % 5 == 0 ? 0 : random_log(random, 1e-3, 0.9);
        const rampwise_system sys = {1, 2 * zeta * omega, omega * omega};
        random_fill(random, p, n);
        check_attained(&sys, dt, n, p, RAMPWISE_DISPLACEMENT + i % 3, &worst);
        check_maximax(&sys, dt, n, p, RAMPWISE_DISPLACEMENT + i % 3);
    }
    printf("residual_instants: worst %.3f of its tolerance\n", worst);
    gsl_rng_free(random);
}
END_TEST

/* Free motion from u and v under no load, a tenth of a second a step. */
static rampwise_peak left_from(rampwise_system sys, double u, double v, int quantity)
{
    rampwise_coeffs c;
    rampwise_peaks *peaks = NULL;
    rampwise_peak peak;
    const rampwise_state s = {u, v, 0, 0};
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, 0.125, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_create(1, &c, 1, &quantity, 0, RAMPWISE_FASTEST, &peaks), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_start(peaks, &s), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, RAMPWISE_RESIDUAL, &peak), RAMPWISE_OK);
    rampwise_peaks_free(peaks);
    return peak;
}

static void check_instant(const rampwise_instant *got, double value, double time)
{
    if (isinf(time)) {
        ck_assert(got->sample == UINT64_MAX && got->fraction == 0);
    } else {
        ck_assert(got->sample != UINT64_MAX);
        check_near(((double)got->sample + got->fraction) * 0.125, time, 1e-12 * time);
    }
    if (isinf(value) || value == 0)
        ck_assert_msg(got->value == value, "%.17g, not %.17g", got->value, value);
    else
        check_near(got->value, value, 1e-13 * fabs(value));
}

/* Roots -1 and -8 (m = 1, c = 9, k = 8): from u = 0, v = 7, u = exp(-t) - exp(-8t), largest at t = ln 8/7. Values:
   ten steps of less than 20 roundings, 1e-13; instants the slope's rounding over the curvature, 1e-12. */
START_TEST(overdamped_residuals)
{
    const rampwise_system sys = {1, 9, 8}, critical = {1, 4, 4};
    const double t = log(8) / 7, top = exp(-t) - exp(-8 * t);
    rampwise_peak got = left_from(sys, 0, 7, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, top, t);
    check_instant(&got.low, 0, 0);
    got = left_from(sys, 0, -7, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, 0, 0);
    check_instant(&got.low, -top, t);
    got = left_from(sys, 1, 0, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, 1, 0);
    check_instant(&got.low, 0, INFINITY);
    /* v = -exp(-t) + 8 exp(-8t): least where exp(-7t) = 1/64. */
    got = left_from(sys, 0, 7, RAMPWISE_VELOCITY);
    check_instant(&got.high, 7, 0);
    check_instant(&got.low, -exp(-2 * t) + 8 * exp(-16 * t), 2 * t);
    /* u'' = exp(-t) - 64 exp(-8t): greatest where exp(-7t) = 1/512. */
    got = left_from(sys, 0, 7, RAMPWISE_TOTAL_ACCELERATION);
    check_instant(&got.high, exp(-3 * t) - 64 * exp(-24 * t), 3 * t);
    check_instant(&got.low, -63, 0);
    /* Critical, omega = 2: u = 3 t exp(-2t). */
    got = left_from(critical, 0, 3, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, 1.5 / M_E, 0.5);
    check_instant(&got.low, 0, 0);
}
END_TEST

START_TEST(residuals_of_free_masses)
{
    const rampwise_system on_damper = {2, 4, 0}, loose = {2, 0, 0};
    rampwise_peak got = left_from(on_damper, 1, 3, RAMPWISE_DISPLACEMENT); /* comes to 1 + 3 m/c */
    check_instant(&got.high, 2.5, INFINITY);
    check_instant(&got.low, 1, 0);
    got = left_from(on_damper, 1, 3, RAMPWISE_VELOCITY);
    check_instant(&got.high, 3, 0);
    check_instant(&got.low, 0, INFINITY);
    got = left_from(loose, 1, 3, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, INFINITY, INFINITY);
    check_instant(&got.low, 1, 0);
    got = left_from(loose, 1, -3, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, 1, 0);
    check_instant(&got.low, -INFINITY, INFINITY);
    got = left_from(loose, 1, 0, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, 1, 0);
    check_instant(&got.low, 1, 0);
    got = left_from(loose, 1, 3, RAMPWISE_VELOCITY);
    check_instant(&got.high, 3, 0);
    check_instant(&got.low, 3, 0);
}
END_TEST

START_TEST(residuals_that_grow)
{
    const rampwise_system growing = {1, -0.1, 4}, falling = {1, 0, -4}, rushing = {1, -3, 0};
    for (int quantity = RAMPWISE_DISPLACEMENT; quantity <= RAMPWISE_TOTAL_ACCELERATION; ++quantity) {
        rampwise_peak got = left_from(growing, 1, 0, quantity);
        check_instant(&got.high, INFINITY, INFINITY);
        check_instant(&got.low, -INFINITY, INFINITY);
        got = left_from(growing, 0, 0, quantity);
        check_instant(&got.high, 0, 0);
        check_instant(&got.low, 0, 0);
        got = left_from(falling, -1, 1, quantity); /* the growing part is u + v/2 = -1/2 */
        check_instant(&got.low, -INFINITY, INFINITY);
        ck_assert(isfinite(got.high.value));
        got = left_from(falling, 1, 1, quantity);
        check_instant(&got.high, INFINITY, INFINITY);
        got = left_from(rushing, 5, -1, quantity);
        check_instant(&got.low, -INFINITY, INFINITY);
    }
    /* u = -exp(2t)/4 - 3/4 exp(-2t): least in size where exp(4t) = 3, -sqrt 3/2. */
    const rampwise_peak got = left_from(falling, -1, 1, RAMPWISE_DISPLACEMENT);
    check_instant(&got.high, -sqrt(0.75), log(3) / 4);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, random_pulses);
    tcase_add_test(tests, rectangular);
    tcase_add_test(tests, extremes_at_even_parts_of_a_step);
    tcase_add_test(tests, critical_extremes_at_even_parts_of_a_step);
    tcase_add_test(tests, step_with_rise_time);
    tcase_add_test(tests, triangles);
    tcase_add_test(tests, half_sines);
    tcase_add_test(tests, half_sine_converges);
    tcase_add_test(tests, half_sine_residual);
    tcase_add_test(tests, damped_half_sine);
    tcase_add_test(tests, greatest_of_all);
    tcase_add_test(tests, overshoot);
    tcase_add_test(tests, fourier_identity);
    tcase_add_test(tests, free_mass);
    tcase_add_test(tests, rigid);
    tcase_add_test(tests, rigid_on_base_of_known_velocity);
    tcase_add_test(tests, rigid_under_one_sign);
    tcase_add_test(tests, residual_instants);
    tcase_add_test(tests, overdamped_residuals);
    tcase_add_test(tests, residuals_of_free_masses);
    tcase_add_test(tests, residuals_that_grow);
}

int main(void)
{
    return suite_run("pulses", add_tests);
}
