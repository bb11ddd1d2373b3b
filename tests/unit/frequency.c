/* Frequency response: against the run itself, against the sum of images of the continuous response, against exact
   facts of the equation of motion; no delay under a ramp; refusals. */
#include <complex.h>
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

static const double pi = 3.14159265358979323846;

static double complex polar(rampwise_response r)
{
    return r.gain * cexp(CMPLX(0, r.phase));
}

static rampwise_output named(int quantity)
{
    return (rampwise_output){{0, 0, 0, 0}, quantity, 0};
}

static rampwise_coeffs oscillator(int kind, double theta, double zeta)
{
    const double dt = 0.01, omega = theta / dt, mass = 2.5;
    const double damping = kind == KINDS - 1 ? 0 : zeta;
    return made((rampwise_system){mass, 2 * damping * omega * mass, omega * omega * mass}, dt, kind);
}

static const int quantities[] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY,     RAMPWISE_TOTAL_ACCELERATION,
                                 RAMPWISE_ACCELERATION, RAMPWISE_SPRING_FORCE, RAMPWISE_DAMPER_FORCE,
                                 RAMPWISE_LOAD};
enum { QUANTITIES = sizeof quantities / sizeof *quantities };

/* A tone for so long that the start has died by exp(-50): cosine and sine through two streams are the parts of
   one complex answer. Rounding leaves some 1e-16 of the load at every sample, which comes out at resonance, at most 1/(2 zeta)
   = 17 times the static answer, where the tone's own may be a hundredth of it or less: 1e-11 leaves room. */
START_TEST(a_tone_that_was_run)
{
    gsl_rng *const r = random_make("a_tone_that_was_run");
    for (int i = 0; i < 6 * 8; ++i) {
        const double theta = random_log(r, 0.05, 2), zeta = random_log(r, 0.03, 0.8);
        const rampwise_coeffs c = oscillator(i % 6, theta, zeta);
        const int turn =
            (int)random_log(r, 16, 480); /* thousandths of a turn a sample, so that angles stay exact */
        const double omega = 2 * pi * turn / 1000 / c.dt;
        rampwise_stream_options o;
        rampwise_stream part[2];
        double out[2][QUANTITIES], p[2];
        rampwise_stream_options_init(&o);
        o.output_count = QUANTITIES;
        for (int q = 0; q < QUANTITIES; ++q)
            o.output[q] = named(quantities[q]);
        for (int k = 0; k < 2; ++k)
            ck_assert_int_eq(rampwise_stream_init(&part[k], &c, &o), RAMPWISE_OK);
        const int last = (int)(50 / (zeta * theta)) + 100;
        for (int n = 0; n <= last; ++n) {
            const double angle = 2 * pi * (double)((long)n * turn % 1000) / 1000;
            p[0] = cos(angle);
            p[1] = sin(angle);
            for (int k = 0; k < 2; ++k)
                ck_assert_int_eq(rampwise_stream_put(&part[k], 1, &p[k], out[k], NULL, NULL), RAMPWISE_OK);
        }
        for (int q = 0; q < QUANTITIES; ++q) {
            rampwise_response got, beside;
            double row[4], terms = 0;
            ck_assert_int_eq(rampwise_frequency_response(&c, &o.output[q], omega, &got, &beside),
                             RAMPWISE_OK);
            ck_assert_int_eq(rampwise_output_row(&c, &o.output[q], row), RAMPWISE_OK);
            rampwise_state s;
            ck_assert_int_eq(rampwise_stream_state(&part[0], &s, NULL), RAMPWISE_OK);
            terms = fabs(row[0]) * hypot(s.u, s.v * c.dt) + fabs(row[1]) * hypot(s.v, s.u / c.dt) +
                    fabs(row[2]) + fabs(row[3]) + got.gain;
            const double complex want = CMPLX(out[0][q], out[1][q]) / CMPLX(p[0], p[1]);
            ck_assert_msg(cabs(polar(got) - want) <= 1e-11 * terms, "kind %d quantity %d: %g of %g", i % 6,
                          quantities[q], cabs(polar(got) - want), terms);
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* Sampling theory (Poisson's sum): the ramp through the samples of a tone is the sum over its aliases w_k of
   sinc^2(w_k dt/2), the held tone that of (1 - exp(-i w_k dt))/(i w_k dt). The continuous displacement falls with 1/w^2
   for a force: 4,000 images leave less than 1e-10 (ramp) and 1e-7 (hold) of the rest. */
START_TEST(sum_of_images)
{
    gsl_rng *const r = random_make("sum_of_images");
    for (int i = 0; i < 40; ++i) {
        const int hold = i % 2;
        const rampwise_coeffs c = oscillator(i % 4, random_log(r, 0.05, 2), random_log(r, 0.03, 0.8));
        const double omega = random_log(r, 0.05, 3) / c.dt;
        const rampwise_output u = named(RAMPWISE_DISPLACEMENT);
        double complex all = 0;
        for (int k = -4000; k <= 4000; ++k) {
            const double w = omega + 2 * pi * k / c.dt, x = w * c.dt / 2;
            rampwise_response one;
            ck_assert_int_eq(rampwise_frequency_response(&c, &u, fabs(w), NULL, &one), RAMPWISE_OK);
            const double complex answer = w < 0 ? conj(polar(one)) : polar(one);
            const double sinc = sin(x) / x;
            all += answer * (hold ? sinc * cexp(CMPLX(0, -x)) : sinc * sinc);
        }
        rampwise_response got;
        ck_assert_int_eq(rampwise_frequency_response(&c, &u, omega, &got, NULL), RAMPWISE_OK);
        ck_assert(cabs(polar(got) - all) <= (hold ? 1e-7 : 1e-10) * got.gain);
    }
    gsl_rng_free(r);
}
END_TEST

/* At resonance the displacement under a force is 1/(2 zeta) static ones and a quarter turn late; at sqrt(2) times the natural
   frequency the mass on a moving base moves as much as the base, whatever the damping; a slow force finds the
   spring alone. */
START_TEST(facts)
{
    for (int i = 0; i < 20; ++i) {
        const double zeta = 0.02 + 0.05 * i;
        const rampwise_coeffs force = oscillator(0, 0.3, zeta), base = oscillator(5, 0.3, zeta);
        const rampwise_output spring = named(RAMPWISE_SPRING_FORCE), u = {{1, 0, 0, 0}, RAMPWISE_WEIGHTED, 0};
        rampwise_response got;
        ck_assert_int_eq(rampwise_frequency_response(&force, &spring, 30, NULL, &got), RAMPWISE_OK);
        ck_assert(fabs(got.gain * 2 * zeta - 1) <= 1e-12 && fabs(got.phase + pi / 2) <= 1e-12);
        ck_assert_int_eq(rampwise_frequency_response(&base, &u, 30 * sqrt(2), NULL, &got), RAMPWISE_OK);
        ck_assert(fabs(got.gain - 1) <= 1e-12);
        rampwise_response sampled;
        ck_assert_int_eq(rampwise_frequency_response(&force, &spring, 0, &sampled, &got), RAMPWISE_OK);
        ck_assert(fabs(sampled.gain - 1) <= 1e-12 && sampled.phase == 0 && got.gain == 1 && got.phase == 0);
    }
}
END_TEST

/* A held input is late by half a sample. Under a ramp only images turn the phase: the first is (x/(2 pi - x))^2 of the
   tone, x = omega dt up to 0.6, times the continuous response out there beside the one here, less than
   0.3/(2 pi - x)^2: together 1e-4, by which the phase can turn, that is 2e-4 samples. */
START_TEST(no_added_delay)
{
    const rampwise_output u = named(RAMPWISE_DISPLACEMENT);
    double worst = 0;
    for (int i = 1; i <= 60; ++i) {
        const rampwise_coeffs ramp = oscillator(0, 0.3, 0.05), hold = oscillator(1, 0.3, 0.05);
        const double x = 0.01 * i, omega = x / ramp.dt;
        rampwise_response sampled, continuous;
        ck_assert_int_eq(rampwise_frequency_response(&ramp, &u, omega, &sampled, &continuous), RAMPWISE_OK);
        worst = fmax(worst, fabs(remainder(sampled.phase - continuous.phase, 2 * pi)) / x);
        ck_assert_int_eq(rampwise_frequency_response(&hold, &u, omega, &sampled, &continuous), RAMPWISE_OK);
        ck_assert(fabs(remainder(sampled.phase - continuous.phase, 2 * pi) + x / 2) <= 0.02 * x);
    }
    printf("no_added_delay: at most %.2g samples\n", worst);
    ck_assert(worst <= 2e-4);
}
END_TEST

START_TEST(refusals)
{
    const rampwise_coeffs c = oscillator(0, 0.3, 0.05), undamped = oscillator(0, 0.3, 0);
    const rampwise_coeffs loose = made((rampwise_system){1, 0, 0}, 0.01, 0);
    const rampwise_output u = named(RAMPWISE_DISPLACEMENT), none = named(0);
    rampwise_response a = {7, 7}, b = {7, 7};
    rampwise_coeffs not_made = c;
    not_made.input = 0;
    ck_assert_int_eq(rampwise_frequency_response(NULL, &u, 1, &a, &b), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_frequency_response(&c, NULL, 1, &a, &b), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_frequency_response(&not_made, &u, 1, &a, &b), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_frequency_response(&c, &none, 1, &a, &b), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_frequency_response(&c, &u, -1, &a, &b), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_int_eq(rampwise_frequency_response(&c, &u, INFINITY, &a, &b), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_int_eq(rampwise_frequency_response(&c, &u, NAN, &a, &b), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_int_eq(rampwise_frequency_response(&loose, &u, 0, &a, &b), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_int_eq(rampwise_frequency_response(&undamped, &u, 30, &a, &b), RAMPWISE_ERROR_OVERFLOW);
    ck_assert(a.gain == 7 && b.gain == 7 && a.phase == 7 && b.phase == 7);
    ck_assert_int_eq(rampwise_frequency_response(&c, &u, 1, NULL, NULL), RAMPWISE_OK);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, a_tone_that_was_run);
    tcase_add_test(tests, sum_of_images);
    tcase_add_test(tests, facts);
    tcase_add_test(tests, no_added_delay);
    tcase_add_test(tests, refusals);
}

int main(void)
{
    return suite_run("frequency response", add_tests);
}
