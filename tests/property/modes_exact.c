/* Peaks of sums of modes, and of equipment on them, against a dense evaluation in quad precision: every step is cut
   into pieces of less than a quarter radian, each piece is a Taylor series of all modes and equipment together, and
   every change of sign of a slope between eight points of it that could matter is
   looked into. */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

typedef __float128 quad;

enum { MODES = 5, INPUTS = 2, OUTPUTS = 3, PIECES = 3, SAMPLES = 40, POWERS = 20, GRID = 8 };

typedef struct scene {
    rampwise_modes_plan plan;
    rampwise_coeffs c[MODES];
    double load[MODES * INPUTS], weight[3][MODES * OUTPUTS], on_input[INPUTS * OUTPUTS];
    rampwise_system equipment[PIECES];
    size_t point[PIECES];
    double input[SAMPLES * INPUTS];
} scene;

/* Values in the order: outputs, equipment's displacements, their total accelerations. */
enum { VALUES = OUTPUTS + 2 * PIECES };

typedef struct dense {
    quad high[VALUES], low[VALUES];
} dense;

static quad value_at(const quad *a, quad x, quad *slope)
{
    quad value = 0;
    *slope = 0;
    for (int n = POWERS - 1; n >= 0; --n) {
        *slope = *slope * x + value;
        value = value * x + a[n];
    }
    return value;
}

static void note(dense *d, int i, quad value)
{
    if (value > d->high[i])
        d->high[i] = value;
    if (value < d->low[i])
        d->low[i] = value;
}

static quad size_of(quad a)
{
    return a < 0 ? -a : a;
}

static void scan(dense *d, int i, const quad *a)
{
    quad before, slope;
    note(d, i, value_at(a, 0, &before));
    for (int k = 1; k <= GRID; ++k) {
        quad low = (quad)(k - 1) / GRID, high = (quad)k / GRID;
        const quad value = value_at(a, high, &slope),
                   steeper = size_of(before) > size_of(slope) ? before : slope;
        note(d, i, value);
        const quad reach = 4 * size_of(steeper) / GRID;
        const int rising = before<0, matters = value + reach> d->high[i] || value - reach < d->low[i];
        const int turns = (before < 0) != (slope < 0) && matters;
        before = slope;
        for (int j = 0; turns && j < 30; ++j) {
            const quad middle = (low + high) / 2;
            note(d, i, value_at(a, middle, &slope));
            if ((slope < 0) == rising)
                low = middle;
            else
                high = middle;
        }
    }
}

/* (n + 1)(n + 2) a[n + 2] = f[n] - S (n + 1) a[n + 1] - K a[n] over a piece of length 1 */
static void series_of(quad *a, const rampwise_system *sys, quad h, const quad *f)
{
    const quad S = (quad)sys->damper / sys->mass * h, K = (quad)sys->stiffness / sys->mass * h * h;
    for (int n = 0; n + 2 < POWERS; ++n)
        a[n + 2] = (f[n] - S * (n + 1) * a[n + 1] - K * a[n]) / ((n + 1) * (n + 2));
}

static quad end_of(const quad *a, quad *slope)
{
    return value_at(a, 1, slope);
}

/* One piece from the state on; direct[i], direct[INPUTS + i]: input i at its beginning and its change. */
static void piece(const scene *s, quad h, const quad *input, quad (*q)[2], quad (*x)[2], dense *d)
{
    static quad mode[MODES][POWERS], y[OUTPUTS][POWERS];
    memset(y, 0, sizeof y);
    for (size_t j = 0; j < s->plan.modes; ++j) {
        quad f[POWERS] = {0};
        const quad unit = s->c[j].input == RAMPWISE_FORCE ? h * h / s->c[j].system.mass : -h * h;
        for (size_t i = 0; i < s->plan.inputs; ++i)
            for (int n = 0; n < 2; ++n)
                f[n] += unit * s->load[j * s->plan.inputs + i] * input[(size_t)n * INPUTS + i];
        mode[j][0] = q[j][0];
        mode[j][1] = q[j][1] * h;
        series_of(mode[j], &s->c[j].system, h, f);
        q[j][0] = end_of(mode[j], &q[j][1]);
        q[j][1] /= h;
        for (size_t o = 0; o < s->plan.outputs; ++o)
            for (int n = 0; n + 2 < POWERS; ++n) {
                const size_t at = j * s->plan.outputs + o;
                y[o][n] += s->weight[0][at] * mode[j][n] + s->weight[1][at] * (n + 1) * mode[j][n + 1] / h +
                           s->weight[2][at] * (n + 1) * (n + 2) * mode[j][n + 2] / (h * h);
            }
    }
    for (size_t o = 0; o < s->plan.outputs; ++o) {
        for (size_t i = 0; i < s->plan.inputs; ++i)
            for (int n = 0; n < 2; ++n)
                y[o][n] += s->on_input[i * s->plan.outputs + o] * input[(size_t)n * INPUTS + i];
        scan(d, (int)o, y[o]);
    }
    for (size_t e = 0; e < s->plan.equipment_count; ++e) {
        quad a[POWERS], z[POWERS] = {0}, f[POWERS];
        const rampwise_system *const sys = &s->equipment[e];
        for (int n = 0; n < POWERS; ++n)
            f[n] = -h * h * y[s->point[e]][n];
        a[0] = x[e][0];
        a[1] = x[e][1] * h;
        series_of(a, sys, h, f);
        x[e][0] = end_of(a, &x[e][1]);
        x[e][1] /= h;
        for (int n = 0; n + 1 < POWERS; ++n)
            z[n] = -((quad)sys->stiffness * a[n] + (quad)sys->damper * (n + 1) * a[n + 1] / h) / sys->mass;
        scan(d, OUTPUTS + (int)e, a);
        scan(d, OUTPUTS + PIECES + (int)e, z);
    }
}

static void run_dense(const scene *s, dense *d)
{
    const quad dt = s->c[0].dt;
    quad q[MODES][2] = {{0}}, x[PIECES][2] = {{0}};
    double fastest = 0;
    memset(d, 0, sizeof *d);
    for (size_t j = 0; j < s->plan.modes; ++j)
        fastest = fmax(fastest, fmax(sqrt(fabs(s->c[j].acceleration[0])), fabs(s->c[j].acceleration[1])));
    for (size_t e = 0; e < s->plan.equipment_count; ++e)
        fastest = fmax(fastest, fmax(sqrt(fabs(s->equipment[e].stiffness / s->equipment[e].mass)),
                                     fabs(s->equipment[e].damper / s->equipment[e].mass)));
    const int pieces = 1 + (int)(4 * fastest * s->c[0].dt), ramp = s->c[0].between == RAMPWISE_RAMP;
    for (size_t k = 0; k < SAMPLES; ++k)
        for (int part = 0; part < pieces; ++part) {
            quad input[2 * INPUTS] = {0};
            for (size_t i = 0; i < s->plan.inputs; ++i) {
                const quad now = k > 0 ? s->input[(k - 1) * s->plan.inputs + i] : 0;
                const quad change = ramp ? s->input[k * s->plan.inputs + i] - now : 0;
                input[i] = now + change * part / pieces;
                input[INPUTS + i] = change / pieces;
            }
            piece(s, dt / pieces, input, q, x, d);
        }
    /* Held inputs: the outputs jump at the last sample too. */
    for (size_t o = 0; !ramp && o < s->plan.outputs; ++o) {
        quad y = 0;
        for (size_t i = 0; i < s->plan.inputs; ++i)
            y += (quad)s->on_input[i * s->plan.outputs + o] * s->input[(SAMPLES - 1) * s->plan.inputs + i];
        for (size_t j = 0; j < s->plan.modes; ++j) {
            const size_t at = j * s->plan.outputs + o;
            const rampwise_system *const sys = &s->c[j].system;
            quad load = 0;
            for (size_t i = 0; i < s->plan.inputs; ++i)
                load += (quad)s->load[j * s->plan.inputs + i] * s->input[(SAMPLES - 1) * s->plan.inputs + i];
            load = s->c[j].input == RAMPWISE_FORCE ? load / sys->mass : -load;
            y += s->weight[0][at] * q[j][0] + s->weight[1][at] * q[j][1] +
                 s->weight[2][at] * (load - (quad)sys->stiffness / sys->mass * q[j][0] -
                                     (quad)sys->damper / sys->mass * q[j][1]);
        }
        note(d, (int)o, y);
    }
}

/* Weights that bring displacement, velocity and acceleration to like sizes; floors for equipment. */
static void make(scene *s, gsl_rng *r, int i)
{
    static const int between[2] = {RAMPWISE_RAMP, RAMPWISE_HOLD};
    const double dt = random_log(r, 1e-3, 10);
    rampwise_modes_plan_init(&s->plan);
    s->plan.modes = 1 + gsl_rng_uniform_int(r, MODES);
    s->plan.inputs = 1 + gsl_rng_uniform_int(r, INPUTS);
    s->plan.outputs = OUTPUTS;
    s->plan.equipment_count = PIECES;
    random_fill(r, s->load, MODES * INPUTS);
    random_fill(r, s->on_input, INPUTS * OUTPUTS);
    random_record(r, s->input, SAMPLES * INPUTS);
    for (size_t j = 0; j < s->plan.modes; ++j) {
        const int regime = (int)gsl_rng_uniform_int(r, 7);
        const double theta = random_log(r, 0.02, regime == 4 ? 0.8 : 4); /* damped four times critically */
        const rampwise_system sys = regime_system(regime, theta, dt);
        ck_assert_int_eq(rampwise_coeffs_make(&s->c[j], &sys, dt, RAMPWISE_FORCE + i % 2, between[i / 2 % 2]),
                         RAMPWISE_OK);
        for (size_t o = 0; o < OUTPUTS; ++o)
            for (int k = 0; k < 3; ++k)
                s->weight[k][j * OUTPUTS + o] = random_between(r, -1, 1) * pow(dt / theta, k);
    }
    for (size_t e = 0; e < PIECES; ++e) {
        s->equipment[e] = regime_system((int)gsl_rng_uniform_int(r, 4), random_log(r, 0.02, 3), dt);
        s->point[e] = gsl_rng_uniform_int(r, OUTPUTS);
    }
    if (s->c[0].acceleration[0] != 0)
        s->equipment[0] = s->c[0].system; /* tuned */
    s->plan.c = s->c;
    s->plan.load = s->load;
    s->plan.on_displacement = s->weight[0];
    s->plan.on_velocity = s->weight[1];
    s->plan.on_acceleration = s->weight[2];
    s->plan.on_input = s->on_input;
    s->plan.equipment = s->equipment;
    s->plan.point = s->point;
    s->plan.peaks = 1;
}

/* 1e-9 of the peak is what is promised; the difference is rounding. */
START_TEST(peaks)
{
    gsl_rng *const r = random_make("peaks");
    const char *const points = getenv("RAMPWISE_POINTS");
    const int cases = points != NULL ? atoi(points) / 500 : 16;
    double worst = 0;
    int inside = 0, all = 0;
    for (int i = 0; i < cases; ++i) {
        static scene s;
        dense d;
        rampwise_modes *modes = NULL;
        rampwise_peak peak[VALUES];
        make(&s, r, i);
        run_dense(&s, &d);
        ck_assert_int_eq(rampwise_modes_create(&s.plan, &modes), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_run(modes, SAMPLES, s.input, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_peaks(modes, peak), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, peak + OUTPUTS), RAMPWISE_OK);
        ck_assert_int_eq(
            rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, peak + OUTPUTS + PIECES),
            RAMPWISE_OK);
        for (int k = 0; k < VALUES; ++k) {
            const double size = fmax(fabs((double)d.high[k]), fabs((double)d.low[k]));
            const double high = fabs((double)(d.high[k] - peak[k].high.value)) / size;
            const double low = fabs((double)(d.low[k] - peak[k].low.value)) / size;
            if (size == 0)
                continue;
            ck_assert_double_le(high, 1e-11);
            ck_assert_double_le(low, 1e-11);
            worst = fmax(worst, fmax(high, low));
            all += 2;
            inside += (peak[k].high.fraction > 0) + (peak[k].low.fraction > 0);
        }
        rampwise_modes_free(modes);
    }
    printf("peaks: %d, %d between samples, largest error %.1e of the peak\n", all, inside, worst);
    ck_assert_int_gt(inside, all / 4);
    gsl_rng_free(r);
}
END_TEST

/* The same straight or held inputs, given at 16 times as many samples: the same motion, but in steps
   of at most two radians, where other bounds decide. The difference is rounding, of 16 times as many steps. */
enum { MANY = 12, LONG = 300, FINER = 16 };

static void make_long(rampwise_modes_plan *plan, rampwise_coeffs *c, const rampwise_system *sys, double dt,
                      int between)
{
    for (int j = 0; j < MANY; ++j)
        ck_assert_int_eq(rampwise_coeffs_make(&c[j], &sys[j], dt, RAMPWISE_BASE_ACCELERATION, between),
                         RAMPWISE_OK);
    plan->c = c;
}

static void peaks_of(const rampwise_modes_plan *plan, size_t n, const double *input, rampwise_peak *peak)
{
    rampwise_modes *modes = NULL;
    ck_assert_int_eq(rampwise_modes_create(plan, &modes), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_run(modes, n, input, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_peaks(modes, peak), RAMPWISE_OK);
    peak += plan->outputs;
    ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, peak), RAMPWISE_OK);
    peak += plan->equipment_count;
    ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, peak), RAMPWISE_OK);
    rampwise_modes_free(modes);
}

START_TEST(finer_samples)
{
    gsl_rng *const r = random_make("finer_samples");
    const char *const points = getenv("RAMPWISE_POINTS");
    const int cases = points != NULL ? atoi(points) / 500 : 4;
    double worst = 0;
    for (int i = 0; i < cases; ++i) {
        static double input[LONG], finer[LONG * FINER], load[MANY], weight[2][MANY * OUTPUTS];
        const double dt = 0.01, on_input[OUTPUTS] = {1, 1, 0};
        const int between = i % 4 == 3 ? RAMPWISE_HOLD : RAMPWISE_RAMP;
        rampwise_system sys[MANY], equipment[MANY];
        rampwise_coeffs c[2][MANY];
        size_t point[MANY];
        rampwise_modes_plan plan;
        rampwise_peak peak[2][OUTPUTS + 2 * MANY];
        rampwise_modes_plan_init(&plan);
        random_fill(r, load, MANY);
        random_fill(r, weight[0], MANY * OUTPUTS);
        random_fill(r, weight[1], MANY * OUTPUTS);
        random_fill(r, input, LONG);
        for (int k = LONG / 2; i % 2 && k < LONG; ++k) /* dies away */
            input[k] *= exp((LONG / 2 - k) / 20.0);
        for (int k = 0; k < LONG; ++k)
            for (int part = 0; part < FINER; ++part) {
                const double before = k > 0 ? input[k - 1] : 0, now = input[k];
                const double share =
                    between == RAMPWISE_HOLD ? part + 1 == FINER : (part + 1) / (double)FINER;
                finer[k * FINER + part] = before + share * (now - before);
            }
        for (int j = 0; j < MANY; ++j) {
            ck_assert_int_eq(
                rampwise_system_natural(&sys[j], random_log(r, 0.05, 30) / dt, random_log(r, 1e-3, 0.5)),
                RAMPWISE_OK);
            ck_assert_int_eq(rampwise_system_natural(&equipment[j], random_log(r, 0.5, 30) / dt,
                                                     j % 4 ? random_log(r, 1e-3, 3) : 0),
                             RAMPWISE_OK);
            if (j % 3 == 0)
                equipment[j].stiffness = sys[j].stiffness * (1 + (j % 2) * 0.03);
            for (int o = 0; o < OUTPUTS; ++o)
                weight[0][j * OUTPUTS + o] *= o == 2 ? sys[j].stiffness / sys[j].mass : 0;
            point[j] = (size_t)(j % OUTPUTS);
        }
        plan.modes = MANY;
        plan.inputs = 1;
        plan.outputs = OUTPUTS;
        plan.load = load;
        plan.on_displacement = weight[0];
        plan.on_acceleration = weight[1];
        plan.on_input = on_input;
        plan.equipment_count = MANY;
        plan.equipment = equipment;
        plan.point = point;
        plan.peaks = 1;
        make_long(&plan, c[0], sys, dt, between);
        peaks_of(&plan, LONG, input, peak[0]);
        make_long(&plan, c[1], sys, dt / FINER, between);
        peaks_of(&plan, LONG * FINER, finer, peak[1]);
        for (int k = 0; k < OUTPUTS + 2 * MANY; ++k) {
            const double size = fmax(peak[1][k].high.value, -peak[1][k].low.value);
            const double high = fabs(peak[0][k].high.value - peak[1][k].high.value) / size;
            const double low = fabs(peak[0][k].low.value - peak[1][k].low.value) / size;
            ck_assert_double_le(high, 1e-10);
            ck_assert_double_le(low, 1e-10);
            worst = fmax(worst, fmax(high, low));
        }
    }
    printf("finer samples: largest difference %.1e of the peak\n", worst);
    gsl_rng_free(r);
}
END_TEST

/* A piece at rest on a mode that swings: in its first steps nothing but what the mode does to it is to be found. */
START_TEST(first_steps)
{
    gsl_rng *const r = random_make("first_steps");
    enum { STEPS = 3, PARTS = 64 };
    static const size_t point = 0;
    const double dt = 0.01, load = 1;
    double worst = 0;
    for (int i = 0; i < 400; ++i) {
        double input[1 + STEPS], finer[STEPS * PARTS];
        rampwise_peak peak[2][3];
        rampwise_system mode, piece;
        ck_assert_int_eq(rampwise_system_natural(&mode, random_log(r, 0.1, 30) / dt, random_log(r, 1e-4, 2)),
                         RAMPWISE_OK);
        ck_assert_int_eq(rampwise_system_natural(&piece, random_log(r, 1, 30) / dt, random_log(r, 1e-4, 2)),
                         RAMPWISE_OK);
        if (i % 3 == 0)
            piece.stiffness = mode.stiffness * (1 + (i % 2) * 0.02);
        const double u = random_between(r, -1, 1), v = random_between(r, -1, 1) * sqrt(mode.stiffness);
        const double on_u = i % 2 ? mode.stiffness : 0, on_v = i % 2 ? 0 : sqrt(mode.stiffness);
        const double push = i % 5 == 0 ? mode.stiffness : 0;
        for (int k = 0; k <= STEPS; ++k)
            input[k] = push * random_between(r, -1, 1);
        for (int k = 0; k < STEPS * PARTS; ++k)
            finer[k] = input[k / PARTS] +
                       (input[k / PARTS + 1] - input[k / PARTS]) * ((k % PARTS + 1) / (double)PARTS);
        for (int fine = 0; fine < 2; ++fine) {
            rampwise_coeffs c;
            rampwise_modes *modes = NULL;
            rampwise_modes_plan plan;
            rampwise_modes_plan_init(&plan);
            ck_assert_int_eq(
                rampwise_coeffs_make(&c, &mode, fine ? dt / PARTS : dt, RAMPWISE_FORCE, RAMPWISE_RAMP),
                RAMPWISE_OK);
            plan.modes = plan.inputs = plan.outputs = plan.equipment_count = 1;
            plan.c = &c;
            plan.load = &load;
            plan.on_displacement = &on_u;
            plan.on_velocity = &on_v;
            plan.equipment = &piece;
            plan.point = &point;
            plan.peaks = 1;
            ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_modes_set(modes, &u, &v, input), RAMPWISE_OK);
            ck_assert_int_eq(
                rampwise_modes_run(modes, fine ? STEPS * PARTS : STEPS, fine ? finer : input + 1, NULL, NULL),
                RAMPWISE_OK);
            ck_assert_int_eq(rampwise_modes_peaks(modes, peak[fine]), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, peak[fine] + 1),
                             RAMPWISE_OK);
            ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, peak[fine] + 2),
                             RAMPWISE_OK);
            rampwise_modes_free(modes);
        }
        for (int k = 0; k < 3; ++k) {
            const double size = fmax(peak[1][k].high.value, -peak[1][k].low.value);
            const double high = fabs(peak[0][k].high.value - peak[1][k].high.value) / size;
            const double low = fabs(peak[0][k].low.value - peak[1][k].low.value) / size;
            ck_assert_double_le(high, 1e-10);
            ck_assert_double_le(low, 1e-10);
            worst = fmax(worst, fmax(high, low));
        }
    }
    printf("first steps: largest difference %.1e of the peak\n", worst);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, peaks);
    tcase_add_test(tests, finer_samples);
    tcase_add_test(tests, first_steps);
}

int main(void)
{
    return suite_run("modes_exact", add_tests);
}
