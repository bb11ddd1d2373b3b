/* Watches against quad precision (tests/support/quad_response.c): the greatest and least value of each window, within
   1e-12 of the largest value of the record; the instant of each crossing, within 1e-9 of a step; and that no crossing is
   missing. RAMPWISE_POINTS in the environment sets the number of cases. */
#include <float.h>
#include <math.h>
#include <stdio.h>
#include "../support/oscillators.h"
#include "../support/quad_response.h"
#include "../support/suite.h"

enum { N = 44, W = 5, EVENTS = 1000, SCAN = 5 };

typedef struct worst {
    double peak, instant;
    long peaks, crossings;
} worst;

static double size_of(quad a)
{
    return (double)(a < 0 ? -a : a);
}

/* Kinds and quantities that do not jump at a sample: there the reference has one value. */
static const int even[][2] = {
    {0, RAMPWISE_DISPLACEMENT}, {0, RAMPWISE_VELOCITY},           {0, RAMPWISE_TOTAL_ACCELERATION},
    {1, RAMPWISE_DISPLACEMENT}, {1, RAMPWISE_VELOCITY},           {2, RAMPWISE_DISPLACEMENT},
    {2, RAMPWISE_VELOCITY},     {2, RAMPWISE_TOTAL_ACCELERATION}, {3, RAMPWISE_DISPLACEMENT},
    {3, RAMPWISE_VELOCITY},     {3, RAMPWISE_TOTAL_ACCELERATION}, {4, RAMPWISE_DISPLACEMENT},
    {4, RAMPWISE_VELOCITY},     {5, RAMPWISE_DISPLACEMENT}};
enum { EVEN = sizeof even / sizeof *even };

/* The last W steps up to sample k, from the state where they begin. */
static void check_window(const rampwise_coeffs *c, const rampwise_watch *watch, const rampwise_state *s,
                         const double *p, size_t k, int quantity, double scale, worst *w)
{
    const size_t begin = k > W ? k - W : 0;
    rampwise_peak got;
    quad_peaks want;
    quad_response(c, s[begin].u, s[begin].v, k - begin + 1, p + begin, quantity, &want);
    ck_assert_int_eq(rampwise_watch_peak(watch, RAMPWISE_IN_WINDOW, &got), RAMPWISE_OK);
    const double high = size_of((quad)got.high.value - want.high.value) / scale;
    const double low = size_of((quad)got.low.value - want.low.value) / scale;
    w->peak = fmax(w->peak, fmax(high, low));
    w->peaks += 2;
    if (!(high <= 1e-12 && low <= 1e-12))
        ck_abort_msg("input %d between %d quantity %d, sample %zu: %.17g %.17g, not %.17g %.17g", c->input,
                     c->between, quantity, k, got.low.value, got.high.value, (double)want.low.value,
                     (double)want.high.value);
    ck_assert(got.high.sample >= begin && got.high.sample <= k && got.high.fraction < 1);
}

/* The reference's value a little before and after the told instant is on either side of the edge, unless the response only
   touches it: the slope there times 1e-9 of a step is lost in the rounding of the values. */
static void check_crossing(const rampwise_coeffs *c, const rampwise_state *s, const double *p,
                           const rampwise_event *event, int quantity, double scale, worst *w)
{
    const size_t first =
        event->sample > 0 && event->fraction == 0 ? (size_t)event->sample - 1 : (size_t)event->sample;
    const quad time = (quad)event->sample + (quad)event->fraction - (quad)first, part = (quad)1e-6;
    const size_t steps = first + 2 < N ? 3 : 2;
    quad z[3];
    for (int i = 0; i < 3; ++i)
        z[i] = quad_value(c, s[first].u, s[first].v, steps, p + first, quantity, time + (i - 1) * part);
    const quad slope = (z[2] - z[0]) / (2 * part);
    const double off = size_of(z[1] - (quad)event->value), steep = size_of(slope);
    ck_assert(event->fraction >= 0 && event->fraction < 1);
    ck_assert(off <= 1e-12 * scale + 1e-9 * steep);
    if (steep < 1e-3 * scale)
        return;
    w->instant = fmax(w->instant, off / steep);
    ++w->crossings;
    ck_assert(off / steep <= 1e-9);
    ck_assert((slope > 0) == (event->direction > 0));
}

/* Crossings of a level without hysteresis by a scan at SCAN points a step and the extremes between them: told crossings must
   alternate at the same samples, and their number over each step must have the parity of the ends. */
static void check_count(const rampwise_state *s, const rampwise_coeffs *c, const double *p, double level,
                        int quantity, const rampwise_event *event, size_t told, double scale)
{
    size_t next = 0;
    int beyond = 0;
    for (size_t k = 0; k + 1 < N; ++k)
        for (int i = 0; i < SCAN; ++i) {
            const quad at = (quad)i / SCAN;
            const quad z = quad_value(c, s[k].u, s[k].v, 2, p + k, quantity, at);
            while (next < told && (event[next].sample < k ||
                                   (event[next].sample == k && (quad)event[next].fraction <= at))) {
                beyond = event[next].direction > 0;
                ++next;
            }
            if (size_of(z - (quad)level) > 1e-10 * scale)
                ck_assert_msg(beyond == (z > (quad)level),
                              "step %zu, point %d of %d: %d, %.17g against %.17g", k, i, SCAN, beyond,
                              (double)z, level);
        }
    for (size_t k = 1; k < told; ++k)
        ck_assert_int_eq(event[k].direction, -event[k - 1].direction);
}

static void check_case(gsl_rng *r, const rampwise_coeffs *c, int quantity, worst *w)
{
    double p[N], z[N];
    rampwise_state s[N];
    rampwise_watched place[2 * W];
    static rampwise_event event[EVENTS], got[EVENTS];
    rampwise_watch watch;
    rampwise_watch_options o;
    random_fill(r, p, N);
    rampwise_start(&s[0], random_between(r, -1, 1) * c->D, random_between(r, -1, 1) * c->Dp, p[0]);
    rampwise_output output = {{0, 0, 0, 0}, quantity, 0};
    double row[4], scale = 0;
    ck_assert_int_eq(rampwise_output_row(c, &output, row), RAMPWISE_OK);
    for (size_t k = 0; k < N; ++k) {
        if (k > 0) {
            s[k] = s[k - 1];
            rampwise_step(c, &s[k], p[k]);
        }
        z[k] = row[0] * s[k].u + row[1] * s[k].v + row[2] * s[k].p;
        scale = fmax(scale, fabs(z[k]));
    }
    rampwise_watch_options_init(&o);
    o.output.quantity = quantity;
    o.level[0] = (rampwise_level){scale * random_between(r, -1, 1), 0, 1, 0};
    o.level[1] = (rampwise_level){scale * random_between(r, -1, 1), scale * random_between(r, 0, 0.5), -1, 0};
    o.level_count = 2;
    o.window = place;
    o.window_steps = W;
    o.events = event;
    o.event_capacity = EVENTS;
    ck_assert_int_eq(rampwise_watch_init(&watch, c, &o), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_watch_start(&watch, &s[0], 0), RAMPWISE_OK);
    for (size_t k = 1; k < N; ++k) {
        rampwise_watch_step(&watch, c, &s[k - 1], &s[k], k - 1, 1, 0);
        if (k % 4 == 0)
            check_window(c, &watch, s, p, k, quantity, scale, w);
    }
    const size_t all = rampwise_watch_events(&watch, EVENTS, got);
    size_t told = 0;
    for (size_t k = 0; k < all; ++k) {
        if (got[k].sample > 0 || got[k].fraction > 0)
            check_crossing(c, s, p, &got[k], quantity, scale, w);
        if (got[k].level == 0)
            event[told++] = got[k];
    }
    check_count(s, c, p, o.level[0].value, quantity, event, told, scale);
}

static void random_cases(const char *name, long count, double low, double high)
{
    gsl_rng *const r = random_make(name);
    worst w = {0, 0, 0, 0};
    for (long i = 0; i < count; ++i) {
        const double dt = random_log(r, 1e-3, 10), theta = random_log(r, low, high), omega = theta / dt;
        const double zeta = i % 5 == 0 ? random_between(r, 0, 2) : random_log(r, 1e-3, 1), mass = 2.5;
        const rampwise_system sys = {mass, 2 * zeta * omega * mass, omega * omega * mass};
        const rampwise_coeffs c = made(sys, dt, even[i % EVEN][0]);
        check_case(r, &c, even[i % EVEN][1], &w);
    }
    printf("%s: %ld peaks of windows, worst %.2g of the largest; %ld crossings, worst %.2g of a step\n", name,
           w.peaks, w.peak, w.crossings, w.instant);
    ck_assert_int_gt(w.crossings, count);
    gsl_rng_free(r);
}

static long cases(void)
{
    const char *const given = getenv("RAMPWISE_POINTS");
    return given != NULL ? atol(given) / 400 : EVEN;
}

START_TEST(short_steps)
{
    random_cases("short_steps", cases(), 0.05, 1);
}
END_TEST

START_TEST(long_steps)
{
    random_cases("long_steps", cases(), 1, 12);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, short_steps);
    tcase_add_test(tests, long_steps);
}

int main(void)
{
    return suite_run("watches against quad precision", add_tests);
}
