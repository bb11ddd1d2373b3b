/* Modes: on every set of instructions and for any cutting into calls the bits of rampwise_run and of the sums as
   modes.h writes them; starts, overflow, saved bytes, refusals. */
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MODES = 70, INPUTS = 3, OUTPUTS = 18, N = 300 };

/* A plan with memory of its own. */
typedef struct structure {
    rampwise_modes_plan plan;
    rampwise_coeffs c[MODES];
    double load[MODES * INPUTS], on_input[INPUTS * OUTPUTS], weight[3][MODES * OUTPUTS];
    rampwise_system equipment[2];
    size_t point[2];
} structure;

static void structure_make(structure *s, gsl_rng *r, int modes, int inputs, int outputs, int kind)
{
    rampwise_modes_plan_init(&s->plan);
    for (int j = 0; j < modes; ++j)
        s->c[j] = made(regime_system(j % REGIMES, 1e-3 * pow(1.1, j), 0.01), 0.01, kind);
    random_fill(r, s->load, MODES * INPUTS);
    random_fill(r, s->on_input, INPUTS * OUTPUTS);
    for (int i = 0; i < 3; ++i)
        random_fill(r, s->weight[i], MODES * OUTPUTS);
    s->plan.modes = (size_t)modes;
    s->plan.inputs = (size_t)inputs;
    s->plan.outputs = (size_t)outputs;
    s->plan.c = s->c;
    s->plan.load = s->load;
    s->plan.on_displacement = s->weight[0];
    s->plan.on_velocity = s->weight[1];
    s->plan.on_acceleration = s->weight[2];
    s->plan.on_input = s->on_input;
    for (int i = 0; i < 2; ++i) {
        s->equipment[i] = regime_system(1 + i, 0.3, 0.01);
        s->point[i] = (size_t)i % s->plan.outputs;
    }
    s->plan.equipment = s->equipment;
    s->plan.point = s->point;
}

static rampwise_modes *create(const structure *s)
{
    rampwise_modes *modes = NULL;
    ck_assert_int_eq(rampwise_modes_create(&s->plan, &modes), RAMPWISE_OK);
    ck_assert_uint_eq(rampwise_modes_count(modes), s->plan.modes);
    return modes;
}

static void run_in_chunks(gsl_rng *r, rampwise_modes *modes, const structure *s, size_t n,
                          const double *input, double *output)
{
    for (size_t done = 0; done < n;) {
        size_t part = gsl_rng_uniform_int(r, 200);
        part = part > n - done ? n - done : part;
        ck_assert_int_eq(rampwise_modes_run(modes, part, input + done * s->plan.inputs,
                                            output != NULL ? output + done * s->plan.outputs : NULL, NULL),
                         RAMPWISE_OK);
        done += part;
    }
}

/* The weight on the input is a twofold sum: here by long double, which may round the other way once. */
static double direct_of(const structure *s, size_t i, size_t o)
{
    long double sum = s->on_input[i * s->plan.outputs + o];
    for (size_t j = 0; j < s->plan.modes; ++j)
        sum += (long double)s->c[j].acceleration[2] * s->load[j * s->plan.inputs + i] *
               s->weight[2][j * s->plan.outputs + o];
    return (double)sum;
}

/* Outputs without their direct terms, as modes.h orders them. */
static double sum_of(const structure *s, size_t o, double direct, const rampwise_state *at)
{
    double y = direct;
    for (size_t g = 0; g < s->plan.modes; g += 32)
        for (int moving = 0; moving < 2; ++moving)
            for (size_t j = g; j < g + 32 && j < s->plan.modes; ++j) {
                const size_t place = j * s->plan.outputs + o;
                const double weight =
                    RAMPWISE_FMA(s->weight[2][place], s->c[j].acceleration[moving], s->weight[moving][place]);
                y = RAMPWISE_FMA(moving ? at[j].v : at[j].u, weight, y);
            }
    return y;
}

static double load_of(const structure *s, size_t j, const double *input)
{
    double p = 0;
    for (size_t i = 0; i < s->plan.inputs; ++i)
        p = RAMPWISE_FMA(input[i], s->load[j * s->plan.inputs + i], p);
    return p;
}

/* Without direct terms (their weights are made zero), bit for bit. */
START_TEST(the_sums_of_single_runs)
{
    gsl_rng *const r = random_make("the_sums_of_single_runs");
    static const int sizes[][3] = {{1, 1, 1}, {32, 1, 8}, {33, 2, 9}, {70, 3, 18}, {5, 3, 17}};
    static double input[N * INPUTS], output[N * OUTPUTS];
    structure s;
    for (int set = 0; set < SETS; ++set)
        for (int i = 0; runs_here(sets[set]) && i < 5; ++i) {
            structure_make(&s, r, sizes[i][0], sizes[i][1], sizes[i][2], i % 4);
            memset(s.on_input, 0, sizeof s.on_input);
            memset(s.weight[2], 0, sizeof s.weight[2]);
            s.plan.instructions = sets[set];
            s.plan.peaks = i % 2;
            rampwise_modes *const modes = create(&s);
            rampwise_state at[MODES] = {{0, 0, 0, 0}};
            random_record(r, input, N * sizes[i][1]);
            run_in_chunks(r, modes, &s, N, input, output);
            for (size_t k = 0; k < N; ++k) {
                for (size_t j = 0; j < s.plan.modes; ++j)
                    rampwise_step(&s.c[j], &at[j], load_of(&s, j, input + k * s.plan.inputs));
                for (size_t o = 0; o < s.plan.outputs; ++o)
                    ck_assert(output[k * s.plan.outputs + o] == sum_of(&s, o, 0, at));
            }
            double u[MODES], v[MODES], now[OUTPUTS];
            ck_assert_int_eq(rampwise_modes_get(modes, u, v), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_modes_read(modes, now), RAMPWISE_OK);
            for (size_t j = 0; j < s.plan.modes; ++j)
                ck_assert(u[j] == at[j].u && v[j] == at[j].v);
            ck_assert_mem_eq(now, output + (N - 1) * s.plan.outputs, s.plan.outputs * sizeof *now);
            rampwise_modes_free(modes);
        }
    gsl_rng_free(r);
}
END_TEST

/* With accelerations and direct terms: q'' of motion.h, to the rounding of some 3 MODES terms. */
START_TEST(accelerations_and_direct_terms)
{
    gsl_rng *const r = random_make("accelerations_and_direct_terms");
    static double input[N * INPUTS], output[N * OUTPUTS];
    structure s;
    for (int kind = 0; kind < 4; ++kind) {
        structure_make(&s, r, MODES, INPUTS, OUTPUTS, kind);
        rampwise_modes *const modes = create(&s);
        rampwise_state at[MODES] = {{0, 0, 0, 0}};
        random_record(r, input, N * INPUTS);
        run_in_chunks(r, modes, &s, N, input, output);
        for (size_t k = 0; k < N; ++k) {
            for (size_t j = 0; j < MODES; ++j)
                rampwise_step(&s.c[j], &at[j], load_of(&s, j, input + k * INPUTS));
            for (size_t o = 0; o < OUTPUTS; ++o) {
                double expected = 0, size = 0;
                for (size_t i = 0; i < INPUTS; ++i) {
                    expected += s.on_input[i * OUTPUTS + o] * input[k * INPUTS + i];
                    size += fabs(direct_of(&s, i, o) * input[k * INPUTS + i]);
                }
                for (size_t j = 0; j < MODES; ++j) {
                    const size_t place = j * OUTPUTS + o;
                    const double *const row = s.c[j].acceleration;
                    expected += s.weight[0][place] * at[j].u + s.weight[1][place] * at[j].v +
                                s.weight[2][place] * rampwise_acceleration(&s.c[j], &at[j]);
                    size += fabs(s.weight[0][place] * at[j].u) + fabs(s.weight[1][place] * at[j].v) +
                            fabs(s.weight[2][place]) *
                                (fabs(row[0] * at[j].u) + fabs(row[1] * at[j].v) + fabs(row[2] * at[j].p));
                }
                ck_assert_double_le(fabs(output[k * OUTPUTS + o] - expected), 3 * MODES * DBL_EPSILON * size);
            }
        }
        rampwise_modes_free(modes);
    }
    gsl_rng_free(r);
}
END_TEST

static void equal_peaks(const rampwise_peak *a, const rampwise_peak *b, size_t n)
{
    for (size_t i = 0; i < n; ++i) {
        ck_assert(a[i].high.value == b[i].high.value && a[i].high.sample == b[i].high.sample);
        ck_assert(a[i].low.value == b[i].low.value && a[i].low.sample == b[i].low.sample);
        ck_assert(a[i].high.fraction == b[i].high.fraction && a[i].low.fraction == b[i].low.fraction);
    }
}

/* Peaks and outputs do not depend on how a record is cut, nor on an interruption through saved bytes. */
START_TEST(cut_and_saved)
{
    gsl_rng *const r = random_make("cut_and_saved");
    static double input[N * INPUTS], one[N * OUTPUTS], other[N * OUTPUTS];
    static unsigned char bytes[1 << 16];
    structure s;
    for (int kind = 0; kind < 4; ++kind) {
        rampwise_peak peaks[2][OUTPUTS];
        structure_make(&s, r, 40, 2, 5, kind);
        s.plan.peaks = 1;
        s.plan.equipment_count = 2;
        rampwise_modes *const a = create(&s), *const b = create(&s), *const c = create(&s);
        random_record(r, input, N * 2);
        ck_assert_int_eq(rampwise_modes_run(a, N, input, one, NULL), RAMPWISE_OK);
        run_in_chunks(r, b, &s, N / 3, input, other);
        const size_t size = rampwise_modes_saved_size(b);
        ck_assert_uint_le(size, sizeof bytes);
        ck_assert_int_eq(rampwise_modes_save(b, bytes, size - 1), RAMPWISE_ERROR_MEMORY);
        ck_assert_int_eq(rampwise_modes_save(b, bytes, size), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_resume(c, bytes, size), RAMPWISE_OK);
        run_in_chunks(r, c, &s, N - N / 3, input + N / 3 * 2, other + N / 3 * 5);
        ck_assert_mem_eq(one, other, N * 5 * sizeof *one);
        ck_assert_int_eq(rampwise_modes_peaks(a, peaks[0]), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_peaks(c, peaks[1]), RAMPWISE_OK);
        equal_peaks(peaks[0], peaks[1], 5);
        double x[2][4];
        for (int q = RAMPWISE_DISPLACEMENT; q <= RAMPWISE_TOTAL_ACCELERATION; q += 2) {
            ck_assert_int_eq(rampwise_equipment_peaks(a, q, peaks[0]), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_equipment_peaks(c, q, peaks[1]), RAMPWISE_OK);
            equal_peaks(peaks[0], peaks[1], 2);
            ck_assert_double_gt(peaks[0][1].high.value, 0);
        }
        ck_assert_int_eq(rampwise_equipment_peaks(a, RAMPWISE_VELOCITY, peaks[0]), RAMPWISE_ERROR_QUANTITY);
        ck_assert_int_eq(rampwise_equipment_get(a, x[0], x[0] + 2), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_equipment_get(c, x[1], x[1] + 2), RAMPWISE_OK);
        ck_assert_mem_eq(x[0], x[1], sizeof x[0]);
        ck_assert(x[0][0] != 0);
        /* Every damaged byte is noticed, and another plan. */
        for (size_t i = 0; i < size; i += 37) {
            bytes[i] ^= 0x10;
            ck_assert_int_eq(rampwise_modes_resume(c, bytes, size), RAMPWISE_ERROR_DAMAGED);
            bytes[i] ^= 0x10;
        }
        s.load[1] *= 1.5;
        rampwise_modes *const another = create(&s);
        ck_assert_int_eq(rampwise_modes_resume(another, bytes, size), RAMPWISE_ERROR_DIFFERENT);
        rampwise_modes_free(a);
        rampwise_modes_free(b);
        rampwise_modes_free(c);
        rampwise_modes_free(another);
    }
    gsl_rng_free(r);
}
END_TEST

/* An unstable mode runs out of range: outputs before are valid, the object stands at the sample before. */
START_TEST(overflow)
{
    rampwise_system sys[2] = {{1, 0.1, 1}, {1, 0, -1e4}};
    rampwise_coeffs c[2];
    const double load[2] = {1, 1}, weight[2] = {1, 1};
    rampwise_modes_plan plan;
    rampwise_modes_plan_init(&plan);
    for (int j = 0; j < 2; ++j)
        ck_assert_int_eq(rampwise_coeffs_make(&c[j], &sys[j], 0.02, RAMPWISE_FORCE, RAMPWISE_RAMP),
                         RAMPWISE_OK);
    plan.modes = 2;
    plan.inputs = plan.outputs = 1;
    plan.c = c;
    plan.load = load;
    plan.on_displacement = weight;
    for (int peaks = 0; peaks < 2; ++peaks) {
        double input[1000], output[1000];
        double u[2], now;
        size_t bad = 0;
        rampwise_modes *modes = NULL;
        plan.peaks = peaks;
        ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
        for (int i = 0; i < 1000; ++i) {
            input[i] = 1;
            output[i] = -7;
        }
        ck_assert_int_eq(rampwise_modes_run(modes, 1000, input, output, &bad), RAMPWISE_ERROR_OVERFLOW);
        ck_assert_uint_gt(bad, 300); /* 2 e-foldings a step from 1e-4 to 1e308: 709 + 9 over 2 */
        ck_assert_uint_lt(bad, 400);
        ck_assert(isfinite(output[bad - 1]) && output[bad - 1] > 1e300 && output[bad] == -7);
        ck_assert_int_eq(rampwise_modes_get(modes, u, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_read(modes, &now), RAMPWISE_OK);
        ck_assert(now == output[bad - 1] && isfinite(u[1]));
        ck_assert_int_eq(rampwise_modes_run(modes, 1, input, output, &bad), RAMPWISE_ERROR_OVERFLOW);
        ck_assert_int_eq(rampwise_modes_start(modes, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_run(modes, 5, input, output, &bad), RAMPWISE_OK);
        rampwise_modes_free(modes);
    }
}
END_TEST

START_TEST(starts)
{
    gsl_rng *const r = random_make("starts");
    structure s;
    double u[MODES], v[MODES], input[INPUTS] = {1, -2, 0.5}, got[2][MODES], now[OUTPUTS];
    structure_make(&s, r, MODES, INPUTS, OUTPUTS, 0);
    memset(s.weight[2], 0, sizeof s.weight[2]);
    memset(s.on_input, 0, sizeof s.on_input);
    rampwise_modes *const modes = create(&s);
    random_fill(r, u, MODES);
    random_fill(r, v, MODES);
    ck_assert_int_eq(rampwise_modes_set(modes, u, v, input), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_get(modes, got[0], got[1]), RAMPWISE_OK);
    ck_assert_mem_eq(got[0], u, sizeof u);
    ck_assert_mem_eq(got[1], v, sizeof v);
    rampwise_state at[MODES];
    for (size_t j = 0; j < MODES; ++j)
        rampwise_start(&at[j], u[j], v[j], load_of(&s, j, input));
    ck_assert_int_eq(rampwise_modes_read(modes, now), RAMPWISE_OK);
    for (size_t o = 0; o < OUTPUTS; ++o)
        ck_assert(now[o] == sum_of(&s, o, 0, at));
    const double next[INPUTS] = {0.25, 3, -1};
    ck_assert_int_eq(rampwise_modes_run(modes, 1, next, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_get(modes, got[0], NULL), RAMPWISE_OK);
    for (size_t j = 0; j < MODES; ++j) {
        rampwise_step(&s.c[j], &at[j], load_of(&s, j, next));
        ck_assert(got[0][j] == at[j].u);
    }
    u[3] = NAN;
    ck_assert_int_eq(rampwise_modes_set(modes, u, v, input), RAMPWISE_ERROR_STATE);
    input[1] = INFINITY;
    ck_assert_int_eq(rampwise_modes_start(modes, input), RAMPWISE_ERROR_SAMPLE);
    size_t bad = 0;
    const double frames[2 * INPUTS] = {0, 0, 0, 0, NAN, 0};
    ck_assert_int_eq(rampwise_modes_run(modes, 2, frames, NULL, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 1);
    ck_assert_int_eq(rampwise_modes_get(modes, got[1], NULL), RAMPWISE_OK);
    ck_assert_mem_eq(got[0], got[1], sizeof got[0]);
    rampwise_modes_free(modes);
    gsl_rng_free(r);
}
END_TEST

static void refused(const structure *s, int status)
{
    rampwise_modes *modes = NULL;
    ck_assert_int_eq(rampwise_modes_create(&s->plan, &modes), status);
    ck_assert_ptr_null(modes);
    ck_assert_uint_eq(rampwise_modes_size(&s->plan), 0);
}

START_TEST(refusals)
{
    gsl_rng *const r = random_make("refusals");
    structure good, s;
    rampwise_modes *modes = NULL;
    structure_make(&good, r, 4, 2, 3, 0);
#define BAD(change, status)                                                                                  \
    structure_make(&s, r, 4, 2, 3, 0);                                                                       \
    change;                                                                                                  \
    refused(&s, status)
    BAD(s.plan.c = NULL, RAMPWISE_ERROR_MISSING);
    BAD(s.plan.load = NULL, RAMPWISE_ERROR_MISSING);
    BAD(s.plan.size = 8, RAMPWISE_ERROR_COUNT);
    BAD(s.plan.modes = 0, RAMPWISE_ERROR_COUNT);
    BAD(s.plan.inputs = 0, RAMPWISE_ERROR_COUNT);
    BAD(s.plan.outputs = SIZE_MAX / 64, RAMPWISE_ERROR_COUNT);
    BAD(s.plan.modes = s.plan.outputs = SIZE_MAX / 5000, RAMPWISE_ERROR_COUNT);
    BAD(memset(&s.c[1], 0, sizeof s.c[1]), RAMPWISE_ERROR_NOT_MADE);
    BAD(s.c[1] = made(s.c[1].system, 0.02, 0), RAMPWISE_ERROR_DIFFERENT);
    BAD(s.load[3] = NAN, RAMPWISE_ERROR_WEIGHT);
    BAD(s.weight[2][11] = INFINITY, RAMPWISE_ERROR_WEIGHT);
    BAD((s.plan.equipment_count = 2, s.plan.point = NULL), RAMPWISE_ERROR_MISSING);
    BAD((s.plan.equipment_count = 2, s.point[1] = 3), RAMPWISE_ERROR_COUNT);
    BAD((s.plan.equipment_count = 2, s.equipment[1].mass = 0), RAMPWISE_ERROR_MASS);
    BAD((s.plan.equipment_count = 2, s.equipment[1].stiffness = 1e300), RAMPWISE_ERROR_STEP_LENGTH);
    BAD(s.plan.instructions = 7, RAMPWISE_ERROR_INSTRUCTIONS);
    BAD(for (int j = 0; j < 4; ++j) s.c[j] = made(s.c[j].system, 0.01, 4), RAMPWISE_ERROR_INPUT);
    BAD((s.plan.peaks = 1, s.c[2] = made(regime_system(1, 2000, 0.01), 0.01, 0)), RAMPWISE_ERROR_STEP_LENGTH);
#undef BAD
    _Alignas(64) static unsigned char memory[1 << 20];
    const size_t size = rampwise_modes_size(&good.plan);
    ck_assert_uint_eq(rampwise_modes_alignment(), 64);
    ck_assert_uint_lt(size, sizeof memory - 8);
    ck_assert_int_eq(rampwise_modes_init(memory, size - 1, &good.plan, &modes), RAMPWISE_ERROR_MEMORY);
    ck_assert_int_eq(rampwise_modes_init(memory + 8, size, &good.plan, &modes), RAMPWISE_ERROR_MEMORY);
    memory[size] = 77;
    ck_assert_int_eq(rampwise_modes_init(memory, size, &good.plan, &modes), RAMPWISE_OK);
    ck_assert_uint_eq(memory[size], 77);
    rampwise_peak peak[3];
    ck_assert_int_eq(rampwise_modes_peaks(modes, peak), RAMPWISE_ERROR_QUANTITY);
    ck_assert_int_eq(rampwise_modes_run(NULL, 0, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_modes_run(modes, 0, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_run(modes, 1, NULL, NULL, NULL), RAMPWISE_ERROR_MISSING);
    rampwise_modes_free(NULL);
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, the_sums_of_single_runs);
    tcase_add_test(tests, accelerations_and_direct_terms);
    tcase_add_test(tests, cut_and_saved);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, starts);
    tcase_add_test(tests, refusals);
}

int main(void)
{
    return suite_run("modes", add_tests);
}
