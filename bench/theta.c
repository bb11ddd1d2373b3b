#include "theta.h"

#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../tests/support/exact.h"
#include "case.h"
#include "printed.h"
#include "rampwise.h"
#include "rounds.h"

const char *const theta_makers[THETA_MAKERS] = {"rampwise", "printed, double", "printed, single"};

enum { COEFFICIENTS = 8, SETS_A_TURN = 64 };

static const double dt = CASE_DT, zeta = CASE_ZETA;

/* Of 64 bits, of which the high ones are used; from 0 to 1. */
static double random_share(void)
{
    static uint64_t generator = CASE_SEED;
    generator = generator * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(generator >> 33) / 2147483648.0;
}

static double random_theta(double middle)
{
    return middle * pow(10, (random_share() - 0.5) / 6);
}

static rampwise_system system_of(double theta)
{
    const double w = theta / dt;
    return (rampwise_system){1, 2 * zeta * w, w * w};
}

/* All NAN where there are no such coefficients. */
static void make_ours_at(const rampwise_system *sys, double h, double *value)
{
    rampwise_coeffs c;
    const int good = rampwise_coeffs_make(&c, sys, h, RAMPWISE_FORCE, RAMPWISE_RAMP) == RAMPWISE_OK;
    for (int i = 0; i < COEFFICIENTS; ++i)
        value[i] = NAN;
    if (good)
        memcpy(value, (double[COEFFICIENTS]){c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp},
               COEFFICIENTS * sizeof *value);
}

static void make_ours(double theta, double *value)
{
    const rampwise_system sys = system_of(theta);
    make_ours_at(&sys, dt, value);
}

static void make_double(double theta, double *value)
{
    printed_double c;
    printed_double_make(&c, theta / dt, zeta, dt);
    const double all[COEFFICIENTS] = {c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp};
    memcpy(value, all, sizeof all);
}

static void make_single(double theta, double *value)
{
    printed_single c;
    printed_single_make(&c, (float)(theta / dt), (float)zeta, (float)dt);
    const float all[COEFFICIENTS] = {c.A, c.B, c.C, c.D, c.Ap, c.Bp, c.Cp, c.Dp};
    for (int i = 0; i < COEFFICIENTS; ++i)
        value[i] = (double)all[i];
}

static void (*const make[THETA_MAKERS])(double theta, double *value) = {make_ours, make_double, make_single};

/* Largest |F| over steps of length 0 to h, of which the first swings are enough. */
static void largest_values(double theta, const exact_step *e, double *scale)
{
    enum { PARTS = 200 };
    const rampwise_system sys = system_of(theta);
    for (int i = 0; i < COEFFICIENTS; ++i)
        scale[i] = fabs(mpfr_get_d(e->value[i], MPFR_RNDN));
    scale[0] = scale[5] = 1; /* A and B' of no step at all */
    if (theta < 1)
        return; /* the others grow from 0 so far */
    for (int part = 1; part <= PARTS; ++part) {
        double inside[COEFFICIENTS];
        make_ours_at(&sys, dt * fmin(theta, 40) * part / PARTS / theta, inside);
        for (int i = 0; i < COEFFICIENTS; ++i)
            scale[i] = fmax(scale[i], fabs(inside[i]));
    }
}

static double error_of(const double *value, const exact_step *e, const double *scale)
{
    mpfr_t off;
    double worst = 0;
    mpfr_init2(off, mpfr_get_prec(e->value[0]));
    for (int i = 0; i < COEFFICIENTS; ++i) {
        double error = INFINITY;
        if (isfinite(value[i])) {
            mpfr_sub_d(off, e->value[i], value[i], MPFR_RNDN);
            error = fabs(mpfr_get_d(off, MPFR_RNDN)) / scale[i];
        }
        worst = fmax(worst, error);
    }
    mpfr_clear(off);
    return worst;
}

static void measure_errors(theta_point *point, size_t sets)
{
    for (size_t k = 0; k < sets; ++k) {
        const double theta = random_theta(point->theta);
        const rampwise_system sys = system_of(theta);
        double value[COEFFICIENTS], scale[COEFFICIENTS];
        exact_step e;
        exact_init(&e, &sys, dt);
        exact_free_motion(&e, dt, 1);
        exact_input(&e, RAMPWISE_FORCE, RAMPWISE_RAMP);
        largest_values(theta, &e, scale);
        for (int m = 0; m < THETA_MAKERS; ++m) {
            make[m](theta, value);
            point->error[m] = fmax(point->error[m], error_of(value, &e, scale));
        }
        exact_clear(&e);
    }
}

static double seconds_a_set(int maker, const double *theta)
{
    static volatile double sink;
    double value[COEFFICIENTS] = {0};
    const double start = rounds_clock();
    for (int k = 0; k < SETS_A_TURN; ++k) {
        make[maker](theta[k], value);
        sink = value[k % COEFFICIENTS];
    }
    (void)sink;
    return (rounds_clock() - start) / SETS_A_TURN;
}

static void measure_costs(theta_point *point, size_t rounds)
{
    double theta[SETS_A_TURN];
    for (size_t round = 0; round < rounds; ++round)
        for (size_t i = 0; i < THETA_POINTS; ++i) {
            for (int k = 0; k < SETS_A_TURN; ++k)
                theta[k] = random_theta(point[i].theta);
            for (int m = 0; m < THETA_MAKERS; ++m)
                point[i].cost[m] = fmin(point[i].cost[m], 1e9 * seconds_a_set(m, theta));
        }
}

void theta_run(theta_point *point, size_t sets, size_t rounds)
{
    for (int i = 0; i < THETA_POINTS; ++i) {
        point[i].theta = pow(10, -9 + i / 6.0);
        for (int m = 0; m < THETA_MAKERS; ++m) {
            point[i].error[m] = 0;
            point[i].cost[m] = INFINITY;
        }
        measure_errors(&point[i], sets);
    }
    measure_costs(point, rounds);
    mpfr_free_cache();
}
