/* Residual peaks of structures and their equipment: against the closed form that single oscillators have, against a run
   over zeros, and the bound of what comes later against what does come. */
#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MODES = 5, OUTPUTS = 2, PIECES = 6, SAMPLES = 300, VALUES = OUTPUTS + 2 * PIECES };

/* RAMPWISE_POINTS=x asks for x/4000 of the usual number of cases. */
static int cases(int usual)
{
    const char *const given = getenv("RAMPWISE_POINTS");
    return given != NULL ? usual * atoi(given) / 4000 : usual;
}

typedef struct scene {
    rampwise_coeffs c[MODES];
    double load[MODES], weight[3][MODES * OUTPUTS], on_input[OUTPUTS], input[SAMPLES];
    rampwise_system equipment[PIECES];
    size_t point[PIECES];
    rampwise_modes_plan plan;
} scene;

/* Total acceleration and displacement under base acceleration; half of the pieces at or near the frequencies of modes.
   The last sample is zero, so that zeros that follow are what comes of themselves. */
static void make(scene *s, gsl_rng *r, const double *zeta, double dt)
{
    static const double near[PIECES] = {0, 1e-9, 0.01, 0.3, -0.5, 4};
    double omega[MODES];
    rampwise_modes_plan_init(&s->plan);
    for (int j = 0; j < MODES; ++j) {
        rampwise_system sys;
        omega[j] = random_log(r, 0.02, 1.5) / dt;
        ck_assert_int_eq(rampwise_system_natural(&sys, omega[j], zeta[0]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&s->c[j], &sys, dt, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                         RAMPWISE_OK);
        s->load[j] = random_between(r, -1, 1);
        for (int o = 0; o < OUTPUTS; ++o) {
            const double shape = random_between(r, -1, 1);
            s->weight[0][j * OUTPUTS + o] = o == 1 ? shape : 0;
            s->weight[1][j * OUTPUTS + o] = o == 1 ? 0.1 * shape / omega[j] : 0;
            s->weight[2][j * OUTPUTS + o] = o == 0 ? shape : 0;
        }
    }
    s->on_input[0] = 1;
    s->on_input[1] = 0;
    for (int i = 0; i < PIECES; ++i) {
        const double w = omega[i % MODES] * (1 + near[i]);
        ck_assert_int_eq(rampwise_system_natural(&s->equipment[i], w, zeta[1]), RAMPWISE_OK);
        s->point[i] = 0;
    }
    random_fill(r, s->input, SAMPLES);
    s->input[SAMPLES - 1] = 0;
    s->plan.modes = MODES;
    s->plan.inputs = 1;
    s->plan.outputs = OUTPUTS;
    s->plan.c = s->c;
    s->plan.load = s->load;
    s->plan.on_displacement = s->weight[0];
    s->plan.on_velocity = s->weight[1];
    s->plan.on_acceleration = s->weight[2];
    s->plan.on_input = s->on_input;
    s->plan.equipment_count = PIECES;
    s->plan.equipment = s->equipment;
    s->plan.point = s->point;
    s->plan.peaks = 1;
}

static rampwise_modes *run(const scene *s)
{
    rampwise_modes *modes = NULL;
    ck_assert_int_eq(rampwise_modes_create(&s->plan, &modes), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_run(modes, SAMPLES, s->input, NULL, NULL), RAMPWISE_OK);
    return modes;
}

static void peaks_of(const rampwise_modes *modes, rampwise_peak *peak)
{
    ck_assert_int_eq(rampwise_modes_peaks(modes, peak), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, peak + OUTPUTS), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, peak + OUTPUTS + PIECES),
                     RAMPWISE_OK);
}

static void residuals_of(rampwise_modes *modes, uint64_t samples, rampwise_peak *peak, double *later)
{
    ck_assert_int_eq(rampwise_modes_residual(modes, samples, peak, later), RAMPWISE_OK);
    for (int q = 0; q < 2; ++q) {
        const size_t at = OUTPUTS + (size_t)q * PIECES;
        ck_assert_int_eq(
            rampwise_equipment_residual(modes, q == 0 ? RAMPWISE_DISPLACEMENT : RAMPWISE_TOTAL_ACCELERATION,
                                        samples, peak + at, later + at),
            RAMPWISE_OK);
    }
}

static void check_near(double a, double b, double size)
{
    ck_assert_double_le(fabs(a - b), 1e-11 * size);
}

static double size_of(const rampwise_peak *peak)
{
    return fmax(fabs(peak->high.value), fabs(peak->low.value));
}

/* 5 to 60 % of critical damping, or next to none, in modes and equipment: the residual joined to the peaks of the record
   is what a run over zeros finds. All damped motions are final long before 200,000 samples. The object does not change. */
START_TEST(as_a_run_over_zeros)
{
    gsl_rng *const r = random_make("as_a_run_over_zeros");
    static const double zetas[][2] = {{0.05, 0.05}, {0.6, 0.02}, {0.01, 0.3}, {1.5, 0.05}, {0.05, 2}};
    static double zeros[512];
    for (int i = 0; i < cases(10); ++i) {
        static scene s;
        rampwise_peak before[VALUES], after[VALUES], residual[VALUES];
        double later[VALUES];
        make(&s, r, zetas[i % 5], 0.01);
        rampwise_modes *const modes = run(&s);
        const size_t bytes = rampwise_modes_saved_size(modes);
        void *const saved = malloc(bytes), *const again = malloc(bytes);
        ck_assert_int_eq(rampwise_modes_save(modes, saved, bytes), RAMPWISE_OK);
        peaks_of(modes, before);
        residuals_of(modes, 200000, residual, later);
        ck_assert_int_eq(rampwise_modes_save(modes, again, bytes), RAMPWISE_OK);
        ck_assert_mem_eq(saved, again, bytes);
        uint64_t last = 0;
        for (int k = 0; k < VALUES; ++k) {
            last = residual[k].high.sample > last ? residual[k].high.sample : last;
            last = residual[k].low.sample > last ? residual[k].low.sample : last;
        }
        for (uint64_t sample = SAMPLES; sample <= last; sample += 512)
            ck_assert_int_eq(rampwise_modes_run(modes, 512, zeros, NULL, NULL), RAMPWISE_OK);
        peaks_of(modes, after);
        for (int k = 0; k < VALUES; ++k) {
            const double size = size_of(&after[k]);
            check_near(after[k].high.value, fmax(before[k].high.value, residual[k].high.value), size);
            check_near(after[k].low.value, fmin(before[k].low.value, residual[k].low.value), size);
            ck_assert_double_le(later[k], fmax(fmin(residual[k].high.value, -residual[k].low.value),
                                               2e-11 * size_of(&residual[k])));
            ck_assert(residual[k].high.sample >= SAMPLES && residual[k].high.sample < SAMPLES + 200000);
        }
        free(saved);
        free(again);
        rampwise_modes_free(modes);
    }
    gsl_rng_free(r);
}
END_TEST

/* Stopped early, undamped motions among them: what comes later stays within the bound, which is seldom far above it. */
START_TEST(what_comes_later)
{
    gsl_rng *const r = random_make("what_comes_later");
    static const double zetas[][2] = {{0, 0}, {0, 0.02}, {0.02, 0}, {0.01, 0.01}, {1, 1}, {1.2, 0.7}};
    static double zeros[2000], output[2000 * OUTPUTS];
    int bounded = 0;
    for (int i = 0; i < cases(12); ++i) {
        static scene s;
        rampwise_peak first[VALUES], all[VALUES];
        double later[VALUES], still_later[VALUES];
        make(&s, r, zetas[i % 6], 0.01);
        rampwise_modes *const modes = run(&s);
        const uint64_t samples = 1 + gsl_rng_uniform_int(r, 2000);
        residuals_of(modes, samples, first, later);
        residuals_of(modes, 3000, all, still_later);
        for (int k = 0; k < VALUES; ++k) {
            const int tuned =
                zetas[i % 6][0] == 0 && zetas[i % 6][1] == 0 && k >= OUTPUTS && (k - OUTPUTS) % PIECES == 0;
            const double rounding = 1e-11 * size_of(&all[k]);
            if (tuned) {
                ck_assert(all[k].high.value == INFINITY && all[k].low.value == -INFINITY);
                ck_assert(first[k].high.sample == UINT64_MAX && later[k] == INFINITY);
                continue;
            }
            ck_assert_double_le(all[k].high.value, fmax(first[k].high.value, later[k]) + rounding);
            ck_assert_double_le(-all[k].low.value, fmax(-first[k].low.value, later[k]) + rounding);
            bounded += later[k] < 3 * size_of(&all[k]);
        }
        /* and the samples of outputs, seen by a run */
        ck_assert_int_eq(rampwise_modes_run(modes, samples, zeros, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_run(modes, 2000, zeros, output, NULL), RAMPWISE_OK);
        for (int k = 0; k < 2000; ++k)
            for (int o = 0; o < OUTPUTS; ++o)
                ck_assert_double_le(fabs(output[k * OUTPUTS + o]),
                                    fmax(later[o], size_of(&first[o])) + 1e-11 * size_of(&all[o]));
        rampwise_modes_free(modes);
    }
    ck_assert_int_gt(bounded, cases(12) * VALUES / 3);
    gsl_rng_free(r);
}
END_TEST

/* Rigid bodies, masses on dampers, motions that grow: a bound or none, but always an answer, that later motion keeps. */
START_TEST(every_regime)
{
    gsl_rng *const r = random_make("every_regime");
    static const double zeta[2] = {0.02, 0.02};
    int bounded = 0, endless = 0;
    for (int i = 0; i < cases(24); ++i) {
        static scene s;
        rampwise_peak first[VALUES], all[VALUES];
        double later[VALUES], still_later[VALUES];
        make(&s, r, zeta, 0.01);
        for (int j = 0; j < MODES; ++j) {
            const rampwise_system sys = regime_system((int)gsl_rng_uniform_int(r, i % 3 == 0 ? REGIMES : 5),
                                                      random_log(r, 0.02, 0.5), 0.01);
            ck_assert_int_eq(
                rampwise_coeffs_make(&s.c[j], &sys, 0.01, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                RAMPWISE_OK);
        }
        for (int j = 0; j < PIECES; ++j)
            s.equipment[j] =
                j < 2 ? s.c[j].system
                      : regime_system((int)gsl_rng_uniform_int(r, REGIMES), random_log(r, 0.02, 0.5), 0.01);
        rampwise_modes *const modes = run(&s);
        residuals_of(modes, 300, first, later);
        residuals_of(modes, 1000, all, still_later);
        for (int k = 0; k < VALUES; ++k) {
            const double rounding = 1e-11 * size_of(&all[k]);
            ck_assert(!isnan(later[k]) && !isnan(still_later[k]));
            ck_assert(all[k].high.value <= fmax(first[k].high.value, later[k]) + rounding);
            ck_assert(-all[k].low.value <= fmax(-first[k].low.value, later[k]) + rounding);
            bounded += later[k] < INFINITY;
            endless += later[k] == INFINITY;
        }
        rampwise_modes_free(modes);
    }
    ck_assert(bounded > 0 && endless > 0);
    gsl_rng_free(r);
}
END_TEST

/* One mode: the closed form of peaks.h, instants too; equipment on ground that does not move is an oscillator in free
   motion as well. Undamped ones are final at once. */
START_TEST(closed_form)
{
    gsl_rng *const r = random_make("closed_form");
    const int quantity = RAMPWISE_DISPLACEMENT;
    for (int i = 0; i < cases(200); ++i) {
        const double dt = 0.01, zeta = i % 4 == 0 ? 0 : random_between(r, 0.01, 0.7), load = 1, on_u = 1;
        const int input = i % 2 ? RAMPWISE_FORCE : RAMPWISE_BASE_ACCELERATION;
        double p[50], later;
        rampwise_system sys;
        rampwise_coeffs c;
        rampwise_peak expected, got;
        rampwise_peaks *peaks = NULL;
        rampwise_modes *modes = NULL;
        rampwise_modes_plan plan;
        ck_assert_int_eq(rampwise_system_natural(&sys, random_log(r, 0.01, 3) / dt, zeta), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
        random_fill(r, p, 50);
        ck_assert_int_eq(rampwise_peaks_create(1, &c, 1, &quantity, 0, RAMPWISE_FASTEST, &peaks),
                         RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_run(peaks, 50, p, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_peaks_get(peaks, quantity, RAMPWISE_RESIDUAL, &expected), RAMPWISE_OK);
        rampwise_peaks_free(peaks);
        rampwise_modes_plan_init(&plan);
        plan.modes = plan.inputs = plan.outputs = 1;
        plan.c = &c;
        plan.load = &load;
        plan.on_displacement = &on_u;
        plan.peaks = 1;
        ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_start(modes, p), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_run(modes, 49, p + 1, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_residual(modes, 1000000, &got, &later), RAMPWISE_OK);
        rampwise_modes_free(modes);
        const double size = size_of(&expected);
        check_near(got.high.value, expected.high.value, size);
        check_near(got.low.value, expected.low.value, size);
        ck_assert_double_le(later, fmin(got.high.value, -got.low.value) + 2e-11 * size);
        if (zeta > 0 &&
            expected.high.value > 1e-3 * size) { /* one period's extremes of an undamped one are equal */
            const double at = (double)got.high.sample + got.high.fraction;
            ck_assert_double_le(fabs(at - ((double)expected.high.sample + expected.high.fraction)),
                                1e-5 / sqrt(sys.stiffness) / dt);
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* Undamped and a little off tune, x'' + w^2 x = v^2 cos v t from rest: x = v^2 (cos v t - cos w t)/(w^2 - v^2) comes
   near twice v^2/(w^2 - v^2) once a beat. */
START_TEST(beats)
{
    const double dt = 0.05, v = 3, u = 1, still = 0, on_acceleration = 1, load = 1;
    static const double detuning[] = {1e-2, 1e-3, 1e-4};
    static const size_t point = 0;
    for (int i = 0; i < 3; ++i) {
        const double w = v * (1 + detuning[i]), most = 2 * v * v / (w * w - v * v);
        rampwise_system mode, piece;
        rampwise_coeffs c;
        rampwise_modes_plan plan;
        rampwise_modes *modes = NULL;
        rampwise_peak peak;
        double later;
        ck_assert_int_eq(rampwise_system_natural(&mode, v, 0), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_system_natural(&piece, w, 0), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_coeffs_make(&c, &mode, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
        rampwise_modes_plan_init(&plan);
        plan.modes = plan.inputs = plan.outputs = plan.equipment_count = 1;
        plan.c = &c;
        plan.load = &load;
        plan.on_acceleration = &on_acceleration;
        plan.equipment = &piece;
        plan.point = &point;
        plan.peaks = 1;
        ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_set(modes, &u, &still, NULL), RAMPWISE_OK);
        const uint64_t beat = (uint64_t)(2 * 3.2 / (v * detuning[i]) / dt);
        ck_assert_int_eq(rampwise_equipment_residual(modes, RAMPWISE_DISPLACEMENT, beat, &peak, &later),
                         RAMPWISE_OK);
        /* k/m of v (1 + d) squared is off by eps/d of the difference at most */
        ck_assert_double_le(fabs(later - most), 4 * DBL_EPSILON / detuning[i] * most + 1e-12 * most);
        /* the two cosines are opposite within v dt detuning of the beat, and the fast one within a cycle */
        ck_assert(peak.high.value > 0.98 * most && peak.high.value <= later * (1 + 1e-11));
        ck_assert(peak.low.value < -0.98 * most);
        rampwise_modes_free(modes);
    }
}
END_TEST

START_TEST(refusals)
{
    gsl_rng *const r = random_make("refusals");
    static const double zeta[2] = {0.05, 0.05};
    static scene s;
    rampwise_peak peak[VALUES];
    make(&s, r, zeta, 0.01);
    rampwise_modes *modes = run(&s);
    ck_assert_int_eq(rampwise_modes_residual(NULL, 1, peak, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_modes_residual(modes, 1, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_equipment_residual(NULL, RAMPWISE_DISPLACEMENT, 1, peak, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_equipment_residual(modes, RAMPWISE_VELOCITY, 1, peak, NULL),
                     RAMPWISE_ERROR_QUANTITY);
    /* no step at all: what is there now */
    double u[PIECES];
    ck_assert_int_eq(rampwise_equipment_residual(modes, RAMPWISE_DISPLACEMENT, 0, peak, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_equipment_get(modes, u, NULL), RAMPWISE_OK);
    for (int i = 0; i < PIECES; ++i)
        ck_assert(peak[i].high.value == u[i] && peak[i].low.value == u[i] && peak[i].high.sample == SAMPLES);
    rampwise_modes_free(modes);
    s.plan.peaks = 0;
    modes = run(&s);
    ck_assert_int_eq(rampwise_modes_residual(modes, 1, peak, NULL), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_equipment_residual(modes, RAMPWISE_DISPLACEMENT, 1, peak, NULL),
                     RAMPWISE_ERROR_QUANTITY);
    rampwise_modes_free(modes);
    s.plan.peaks = 1;
    s.plan.equipment_count = 0;
    modes = run(&s);
    ck_assert_int_eq(rampwise_equipment_residual(modes, RAMPWISE_DISPLACEMENT, 1, peak, NULL),
                     RAMPWISE_ERROR_QUANTITY);
    rampwise_modes_free(modes);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, as_a_run_over_zeros);
    tcase_add_test(tests, what_comes_later);
    tcase_add_test(tests, every_regime);
    tcase_add_test(tests, closed_form);
    tcase_add_test(tests, beats);
    tcase_add_test(tests, refusals);
}

int main(void)
{
    return suite_run("residual_exact", add_tests);
}
