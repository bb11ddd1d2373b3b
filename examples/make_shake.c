/* make_shake: a synthetic shake of the ground, made from a seed, on standard output as CSV.

   Noise that swells and dies away goes through three oscillators: soft ground, which stresses the
   frequencies near its own; a building, which keeps the fast part out; and the moving mass of a
   slow pendulum, whose motion against its frame comes back to rest in place. Its acceleration is
   the shake, so the shake's own velocity and displacement end at rest as well.

   There is no function of the platform in it, only sums, products and steps of rampwise: the same
   file on every machine. */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <rampwise.h>

enum { SAMPLES = 4000 };
static const uint64_t seed = 20;
static const double dt = 0.005;    /* s */
static const double largest = 2.5; /* m/s^2 */

/* From -1 to 1. A linear congruential generator of 64 bits, of which the high ones are used. */
static double noise(uint64_t *generator)
{
    *generator = *generator * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*generator >> 33) / 1073741824.0 - 1;
}

/* 0 before from, 1 after to, smooth between. */
static double rise(double time, double from, double to)
{
    const double x = time <= from ? 0 : time >= to ? 1 : (time - from) / (to - from);
    return x * x * (3 - 2 * x);
}

static double swell(double time)
{
    const double fall = 1 - rise(time, 6, 18);
    return rise(time, 0, 3) * fall * fall;
}

/* What an oscillator with this natural frequency (Hz) and damping ratio makes of x; x is taken as
   the acceleration of its base, and out tells which of its motions replaces x. */
static int pass(double frequency, double damping_ratio, double *x, const rampwise_history *out)
{
    rampwise_system system;
    rampwise_coeffs coefficients;
    int status = rampwise_system_hertz(&system, frequency, damping_ratio);
    if (status == RAMPWISE_OK)
        status = rampwise_coeffs_make(&coefficients, &system, dt, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    if (status == RAMPWISE_OK)
        status = rampwise_solve(&coefficients, 0, 0, SAMPLES, x, out, NULL);
    return status;
}

static int make(double *x)
{
    uint64_t generator = seed;
    for (int i = 0; i < SAMPLES; ++i)
        x[i] = swell(i * dt) * noise(&generator);
    int status = pass(2.2, 0.45, x, &(rampwise_history){.total = x});
    if (status == RAMPWISE_OK)
        status = pass(9, 0.7, x, &(rampwise_history){.total = x});
    if (status == RAMPWISE_OK)
        status = pass(0.35, 0.8, x, &(rampwise_history){.a = x});
    return status;
}

static double size_of_largest(const double *x)
{
    double size = 0;
    for (int i = 0; i < SAMPLES; ++i)
        size = x[i] > size ? x[i] : -x[i] > size ? -x[i] : size;
    return size;
}

/* In whole tenths of a mm/s^2, so that no platform's way of rounding decimals counts. */
static void print(const double *x)
{
    const double tenths = largest * 10000 / size_of_largest(x);
    printf("# Synthetic: a base shake made from seed %d by examples/make_shake.c.\n"
           "# No motion that was ever measured. Every %d ms; at rest at both ends.\n"
           "time (s),acceleration (m/s^2)\n",
           (int)seed, (int)(dt * 1000 + 0.5));
    for (int i = 0; i < SAMPLES; ++i) {
        const double end = 1 - rise(i * dt, 19, (SAMPLES - 1) * dt);
        const double value = x[i] * end * tenths;
        const long whole = (long)(value < 0 ? value - 0.5 : value + 0.5);
        printf("%.3f,%.4f\n", i * dt, (double)whole / 10000);
    }
}

int main(void)
{
    static double x[SAMPLES];
    const int status = make(x);
    if (status != RAMPWISE_OK) {
        fprintf(stderr, "make_shake: %s\n", rampwise_status_text(status));
        return EXIT_FAILURE;
    }
    print(x);
    if (fflush(stdout) != 0 || ferror(stdout)) {
        perror("make_shake: standard output");
        return EXIT_FAILURE;
    }
    return EXIT_SUCCESS;
}
