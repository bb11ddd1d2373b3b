/* True peaks against a dense scan in quad precision (tests/support/quad_response.c): values within 1e-12 of the
   largest value; instants within 1e-9 of a step where the extreme is pronounced and alone, else the
   reference's value at the told instant agrees. RAMPWISE_POINTS in the environment sets the number of cases. */
#include <float.h>
#include <math.h>
#include <stdio.h>
#include "../support/oscillators.h"
#include "../support/quad_response.h"
#include "../support/suite.h"

enum { MOST = 2000 };
static double p[MOST];

typedef struct worst {
    double value, instant;
    long instants, cases;
} worst;

static double size_of(quad a)
{
    return (double)(a < 0 ? -a : a);
}

static rampwise_peaks *peaks_of(const rampwise_coeffs *c, int quantity, unsigned flags)
{
    rampwise_peaks *peaks = NULL;
    ck_assert_int_eq(rampwise_peaks_create(1, c, 1, &quantity, flags, RAMPWISE_FASTEST, &peaks), RAMPWISE_OK);
    return peaks;
}

static void check_side(const rampwise_coeffs *c, rampwise_state s, size_t n, int quantity,
                       const rampwise_instant *got, quad_extreme want, quad next, double scale, worst *w)
{
    const quad time = (quad)got->sample + (quad)got->fraction;
    const double error = size_of((quad)got->value - want.value) / scale;
    const double alone = size_of(want.value - next) / scale;
    w->value = fmax(w->value, error);
    ++w->cases;
    if (!(error <= 1e-12))
        ck_abort_msg("m %a c %a k %a dt %a input %d between %d quantity %d n %zu: %.17g, not %.17g, error %g at %.9g"
                     " not %.9g",
                     c->system.mass, c->system.damper, c->system.stiffness, c->dt, c->input, c->between, quantity, n,
                     got->value, (double)want.value, error, (double)time, (double)want.time);
    ck_assert(got->fraction >= 0 && got->fraction < 1);
    if (alone < 1e-10 || (time == 0 && want.time == 0))
        return;
    if (size_of(want.sharp) >= 1e-4 * scale) {
        const double apart = size_of(time - want.time);
        w->instant = fmax(w->instant, apart);
        ++w->instants;
        if (!(apart <= 1e-9))
            ck_abort_msg("instant %.17g, not %.17g", (double)time, (double)want.time);
    } else {
        /* At a sample, from either side. */
        const quad side = (quad)1e-20;
        const double right = size_of(quad_value(c, s.u, s.v, n, p, quantity, time + side) - want.value);
        const double left = size_of(quad_value(c, s.u, s.v, n, p, quantity, time - side) - want.value);
        if (!(fmin(right, left) <= 1e-10 * scale))
            ck_abort_msg("m %a c %a k %a dt %a input %d between %d quantity %d n %zu: at %.17g, not %.17g: %g",
                         c->system.mass, c->system.damper, c->system.stiffness, c->dt, c->input, c->between,
                         quantity, n, (double)time, (double)want.time, fmin(right, left) / scale);
    }
}

static void check_case(const rampwise_coeffs *c, rampwise_state s, size_t n, int quantity, worst *w)
{
    quad_peaks want;
    rampwise_peak got;
    rampwise_peaks *const peaks = peaks_of(c, quantity, 0);
    ck_assert_int_eq(rampwise_peaks_start(peaks, &s), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_peaks_run(peaks, n - 1, p + 1, NULL), RAMPWISE_OK);
    if (c->between == RAMPWISE_HOLD)
        p[n] = p[n - 1]; /* the last sample acts for one more dt */
    ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, 0, &got), RAMPWISE_OK);
    rampwise_peaks_free(peaks);
    n += c->between == RAMPWISE_HOLD;
    quad_response(c, s.u, s.v, n, p, quantity, &want);
    const double scale = fmax(size_of(want.high.value), size_of(want.low.value));
    check_side(c, s, n, quantity, &got.high, want.high, want.next_high, scale, w);
    check_side(c, s, n, quantity, &got.low, want.low, want.next_low, scale, w);
}

static long cases(int share)
{
    const char *const given = getenv("RAMPWISE_POINTS");
    return (given != NULL ? atol(given) / 10 : 2000) * share / 10;
}

static void random_cases(const char *name, long count, double theta_low, double theta_high, size_t longest)
{
    gsl_rng *const r = random_make(name);
    worst w = {0};
    for (long i = 0; i < count; ++i) {
        const double dt = random_log(r, 1e-3, 10), theta = random_log(r, theta_low, theta_high);
        const double omega = theta / dt, mass = random_log(r, 0.1, 10);
        double zeta = i % 4 == 0 ? random_between(r, 0, 5) : random_log(r, 1e-3, 1);
        zeta = i % 11 == 0 ? 0 : i % 11 == 5 ? 1 : zeta;
        const int kind = (int)(i % KINDS), quantity = RAMPWISE_DISPLACEMENT + (int)(i / KINDS % 3);
        if (kind == KINDS - 1)
            zeta = 0;
        const rampwise_system sys = {mass, 2 * zeta * omega * mass, omega * omega * mass};
        const rampwise_coeffs c = made(sys, dt, kind);
        const size_t n = 2 + gsl_rng_uniform_int(r, (unsigned long)(i % 50 == 0 ? longest : longest / 30));
        random_fill(r, p, n);
        rampwise_state s;
        rampwise_start(&s, 0, 0, p[0]);
        check_case(&c, s, n, quantity, &w);
    }
    printf("%s: %ld peaks, worst value %.2g of the largest; %ld instants, worst %.2g of a step\n", name, w.cases,
           w.value, w.instants, w.instant);
    gsl_rng_free(r);
}

START_TEST(short_steps)
{
    random_cases("short_steps", cases(6), 1e-4, 1, 1900);
}
END_TEST

START_TEST(long_steps)
{
    random_cases("long_steps", cases(4), 1, 50, 120);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, short_steps);
    tcase_add_test(tests, long_steps);
}

int main(void)
{
    return suite_run("peaks against quad precision", add_tests);
}
