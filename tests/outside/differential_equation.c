/* The library against a general solver of differential equations: GSL's adaptive drivers, started
   afresh at every sample, on random inputs in every damping regime, for every input and kind. The
   right-hand sides and the derivation of every tolerance are in integrated.h. */
#include <stdio.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"
#include "integrated.h"

enum { SAMPLES = 60, REPEATS = 24 };

/* One more regime: damped 10 to 1000 times critically, where a fast decay and a slow one meet. */
enum { STRONG = REGIMES };

/* How the comparison went: the largest error in units of its tolerance, and the largest tolerance
   in units of the largest size of what it belongs to. */
typedef struct tally {
    double worst[MOTIONS], loosest;
    unsigned long values, steps;
} tally;

/* One oscillator under one record. */
typedef struct scene {
    rampwise_system sys;
    int kind;
    double dt, p[SAMPLES], u0, v0;
    double size[MOTIONS], widest[MOTIONS];
    integrated exact;
    tally *tally;
} scene;

static const char *const names[MOTIONS] = {"u",          "v",          "u''",    "total",
                                           "relative u", "relative v", "spring", "damper"};

static int is_ramp(const scene *s)
{
    return kinds[s->kind][1] == RAMPWISE_RAMP;
}

/* Radians a step, from 300 samples a cycle to three cycles a sample; what grows is kept within e^6
   over the record (negative stiffness) and e^2.4 (a negative damper, 0.02 of critical). */
static double random_theta(gsl_rng *r, int regime)
{
    const rampwise_system like = regime_system(regime, 1, 1);
    return random_log(r, 0.02, like.stiffness < 0 ? 0.1 : like.damper < 0 ? 2 : 20);
}

static rampwise_system random_system(gsl_rng *r, int regime, double dt)
{
    const double mass = random_log(r, 1e-3, 1e3);
    if (regime == STRONG) {
        const double S = random_log(r, 10, 400) / dt, zeta = random_log(r, 10, 1000);
        const double omega = 0.5 * S / zeta;
        return (rampwise_system){mass, S * mass, omega * omega * mass};
    }
    const rampwise_system sys = regime_system(regime, random_theta(r, regime), dt);
    return (rampwise_system){mass, sys.damper * mass / sys.mass, sys.stiffness * mass / sys.mass};
}

/* Any units: mass, interval and size of the input are spread over six decades. */
static void begin(scene *s, gsl_rng *r, int regime, int kind, tally *t)
{
    const double size = random_log(r, 1e-3, 1e3);
    memset(s, 0, sizeof *s);
    s->dt = random_log(r, 1e-3, 1e3);
    s->sys = random_system(r, regime, s->dt);
    s->kind = kind;
    s->tally = t;
    random_fill(r, s->p, SAMPLES);
    for (int i = 0; i < SAMPLES; ++i)
        s->p[i] *= size;
    integrated_init(&s->exact, &s->sys, kinds[kind][0], size, s->dt, SAMPLES * s->dt);
    s->u0 = s->exact.scale[0] * random_between(r, -1, 1);
    s->v0 = s->exact.scale[1] * random_between(r, -1, 1);
    integrated_start(&s->exact, s->u0, s->v0, s->p[0]);
}

static void compare_one(scene *s, int i, double ours, const integrated_value *exact)
{
    const double error = fabs(ours - exact->value);
    ++s->tally->values;
    if (error > 0)
        s->tally->worst[i] = fmax(s->tally->worst[i], error / exact->tolerance);
    if (!(error <= exact->tolerance))
        ck_abort_msg("%s: %.17g, GSL %.17g, error %g, tolerance %g; m %a c %a k %a dt %a, input "
                     "%d, between %d",
                     names[i], ours, exact->value, error, exact->tolerance, s->sys.mass, s->sys.damper,
                     s->sys.stiffness, s->dt, kinds[s->kind][0], kinds[s->kind][1]);
}

/* The first `count` of the library's values where the integration is. */
static void compare(scene *s, const double ours[], int count)
{
    integrated_value exact[MOTIONS];
    integrated_motion(&s->exact, exact);
    for (int i = 0; i < MOTIONS; ++i) {
        s->size[i] = fmax(s->size[i], exact[i].size);
        s->widest[i] = fmax(s->widest[i], exact[i].tolerance);
        if (i < count)
            compare_one(s, i, ours[i], &exact[i]);
    }
}

/* A tolerance that had grown to a part of the values themselves would check nothing. Each step of
   the driver's is allowed 1.1e-12 of the size, and twice that in u where an error of v leads to one.
   Where nothing grows, the fastest root here makes 400 of them a sample, and 60 samples 5e-8; where
   errors grow by e^6, two a sample do, and 60 samples come to 1e-7. */
static void end(scene *s)
{
    for (int i = 0; i < MOTIONS; ++i) {
        ck_assert_double_le(s->widest[i], 1e-7 * s->size[i]);
        if (s->size[i] > 0)
            s->tally->loosest = fmax(s->tally->loosest, s->widest[i] / s->size[i]);
    }
    s->tally->steps += s->exact.steps;
    integrated_clear(&s->exact);
}

/* The input from sample i - 1 to sample i, a time h later. */
static void begin_line(scene *s, int i, double h)
{
    if (is_ramp(s))
        integrated_ramp(&s->exact, s->p[i - 1], s->p[i], h);
    else
        integrated_hold(&s->exact, s->p[i - 1]);
}

static void integrate_step(scene *s, int i, double h)
{
    begin_line(s, i, h);
    integrated_to(&s->exact, h);
}

/* A ramp at its end is the side of a sample on which motion.h gives accelerations; a held input
   takes its new value first. */
static void arrive(scene *s, int i)
{
    if (!is_ramp(s))
        integrated_hold(&s->exact, s->p[i]);
}

/* At times t, or every dt where t is NULL. */
static void compare_histories(scene *s, double ours[4][SAMPLES], const double *t)
{
    for (int i = 0; i < SAMPLES; ++i) {
        const double at[4] = {ours[0][i], ours[1][i], ours[2][i], ours[3][i]};
        if (i > 0) {
            integrate_step(s, i, t != NULL ? t[i] - t[i - 1] : s->dt);
            arrive(s, i);
        }
        compare(s, at, 4);
    }
}

static void motion_of(const rampwise_coeffs *c, const rampwise_state *s, double value[MOTIONS])
{
    value[MOTION_U] = s->u;
    value[MOTION_V] = s->v;
    value[MOTION_A] = rampwise_acceleration(c, s);
    value[MOTION_TOTAL] = rampwise_total_acceleration(c, s);
    value[MOTION_RELATIVE_U] = rampwise_relative_displacement(c, s);
    value[MOTION_RELATIVE_V] = rampwise_relative_velocity(c, s);
    value[MOTION_SPRING] = rampwise_spring_force(c, s);
    value[MOTION_DAMPER] = rampwise_damper_force(c, s);
}

static void whole_record(scene *s, gsl_rng *r)
{
    const rampwise_coeffs c = made(s->sys, s->dt, s->kind);
    double ours[4][SAMPLES];
    const rampwise_history out = {ours[0], ours[1], ours[2], ours[3]};
    (void)r;
    ck_assert_int_eq(rampwise_solve(&c, s->u0, s->v0, SAMPLES, s->p, &out, NULL), RAMPWISE_OK);
    compare_histories(s, ours, NULL);
}

/* At a random fraction of every step, and at its end, everything that motion.h reads. */
static void inside_steps(scene *s, gsl_rng *r)
{
    const rampwise_coeffs c = made(s->sys, s->dt, s->kind);
    rampwise_state state, inside;
    double ours[MOTIONS];
    rampwise_start(&state, s->u0, s->v0, s->p[0]);
    for (int i = 1; i < SAMPLES; ++i) {
        const double fraction = gsl_rng_uniform_pos(r);
        ck_assert_int_eq(rampwise_inside(&c, &state, s->p[i], fraction, &inside), RAMPWISE_OK);
        rampwise_step(&c, &state, s->p[i]);
        begin_line(s, i, s->dt);
        integrated_to(&s->exact, fraction * s->dt);
        motion_of(&c, &inside, ours);
        compare(s, ours, MOTIONS);
        integrated_to(&s->exact, s->dt);
        arrive(s, i);
        motion_of(&c, &state, ours);
        compare(s, ours, MOTIONS);
    }
}

/* Intervals from a tenth to three times dt; every fourth is dt, or misses it by a rounding of the
   times. In the end the state must be one of the caller's own coefficients again. */
static void irregular_times(scene *s, gsl_rng *r)
{
    const rampwise_coeffs c = made(s->sys, s->dt, s->kind);
    double ours[4][SAMPLES], t[SAMPLES] = {0}, t_last = 0, edge[MOTIONS];
    const rampwise_history out = {ours[0] + 1, ours[1] + 1, ours[2] + 1, ours[3] + 1};
    rampwise_state state;
    for (int i = 1; i < SAMPLES; ++i)
        t[i] = t[i - 1] + s->dt * (i % 4 == 0 ? 1 : random_log(r, 0.1, 3));
    rampwise_start(&state, s->u0, s->v0, s->p[0]);
    motion_of(&c, &state, edge);
    for (int j = 0; j < 4; ++j)
        ours[j][0] = edge[j];
    ck_assert_int_eq(rampwise_run_at(&c, &state, &t_last, SAMPLES - 1, t + 1, s->p + 1, &out, NULL),
                     RAMPWISE_OK);
    ck_assert_double_eq(t_last, t[SAMPLES - 1]);
    compare_histories(s, ours, t);
    motion_of(&c, &state, edge);
    compare(s, edge, MOTIONS);
}

static void report(const char *test, const tally *t)
{
    printf("%s: %lu values, %lu steps of GSL's, largest tolerance %.1e of the size; largest error "
           "in tolerances:",
           test, t->values, t->steps, t->loosest);
    for (int i = 0; i < MOTIONS; ++i)
        printf(" %s %.3f", names[i], t->worst[i]);
    printf("\n");
}

static void in_all_regimes(const char *test, void (*check)(scene *, gsl_rng *))
{
    gsl_rng *const r = random_make(test);
    tally t = {0};
    scene s;
    for (int i = 0; i < REPEATS * (STRONG + 1) * KINDS; ++i) {
        const int kind = i % KINDS, regime = i / KINDS % (STRONG + 1);
        begin(&s, r, regime, kind, &t);
        if (kind_allowed(&s.sys, kind)) {
            check(&s, r);
            end(&s);
        } else {
            integrated_clear(&s.exact);
        }
    }
    report(test, &t);
    gsl_rng_free(r);
}

START_TEST(at_samples)
{
    in_all_regimes("at_samples", whole_record);
}
END_TEST

START_TEST(inside_a_step)
{
    in_all_regimes("inside_a_step", inside_steps);
}
END_TEST

START_TEST(at_irregular_times)
{
    in_all_regimes("at_irregular_times", irregular_times);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, at_samples);
    tcase_add_test(tests, inside_a_step);
    tcase_add_test(tests, at_irregular_times);
}

int main(void)
{
    return suite_run("against GSL's differential equation drivers", add_tests);
}
