/* Equipment on a structure against the matrix exponential of mode, load and equipment together in MPFR: the
   coefficients of a step, and whole records at and near tuning; a second witness takes the equipment with a mass of
   1e-24 of the structure's and all forces between the two. Then: many modes are the sum of single ones. */
#include <float.h>
#include <math.h>
#include <mpfr.h>
#include <stdlib.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { BITS = 500, SIZE = 6, SERIES = 50, SAMPLES = 200 };

typedef mpfr_t matrix[SIZE][SIZE];

static void matrix_init(matrix m)
{
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j) {
            mpfr_init2(m[i][j], BITS);
            mpfr_set_zero(m[i][j], 1);
        }
}

static void matrix_clear(matrix m)
{
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j)
            mpfr_clear(m[i][j]);
}

static void matrix_copy(matrix to, matrix from)
{
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j)
            mpfr_set(to[i][j], from[i][j], MPFR_RNDN);
}

/* to = a b */
static void matrix_product(matrix to, matrix a, matrix b)
{
    matrix c;
    mpfr_t x;
    mpfr_init2(x, BITS);
    matrix_init(c);
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j)
            for (int k = 0; k < SIZE; ++k) {
                if (mpfr_zero_p(a[i][k]) || mpfr_zero_p(b[k][j]))
                    continue;
                mpfr_mul(x, a[i][k], b[k][j], MPFR_RNDN);
                mpfr_add(c[i][j], c[i][j], x, MPFR_RNDN);
            }
    matrix_copy(to, c);
    matrix_clear(c);
    mpfr_clear(x);
}

/* e = exp(a): Taylor series of a scaled below 2^-8, then squares. */
static void matrix_exponential(matrix e, matrix a)
{
    matrix term, scaled;
    int halvings = 0;
    matrix_init(term);
    matrix_init(scaled);
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j)
            if (!mpfr_zero_p(a[i][j]) && mpfr_get_exp(a[i][j]) + 11 > halvings)
                halvings = (int)mpfr_get_exp(a[i][j]) + 11;
    for (int i = 0; i < SIZE; ++i)
        for (int j = 0; j < SIZE; ++j) {
            mpfr_mul_2si(scaled[i][j], a[i][j], -halvings, MPFR_RNDN);
            mpfr_set_si(term[i][j], i == j, MPFR_RNDN);
            mpfr_set_si(e[i][j], i == j, MPFR_RNDN);
        }
    for (int n = 1; n <= SERIES; ++n) {
        matrix_product(term, term, scaled);
        for (int i = 0; i < SIZE; ++i)
            for (int j = 0; j < SIZE; ++j) {
                mpfr_div_si(term[i][j], term[i][j], n, MPFR_RNDN);
                mpfr_add(e[i][j], e[i][j], term[i][j], MPFR_RNDN);
            }
    }
    for (; halvings > 0; --halvings)
        matrix_product(e, e, e);
    matrix_clear(term);
    matrix_clear(scaled);
}

/* x/y dt, exact but for the last bit */
static void put_rate(mpfr_t to, double x, double y, double dt)
{
    mpfr_set_d(to, x, MPFR_RNDN);
    mpfr_div_d(to, to, y, MPFR_RNDN);
    mpfr_mul_d(to, to, dt, MPFR_RNDN);
}

/* One mode under a force, the floor's acceleration on_u q + on_v q' + direct p, and the piece: rows of
   {q, q', p, slope, x, x'} times dt, p and slope in units of a sample. */
static void cascade_matrix(matrix a, const rampwise_system *mode, const rampwise_system *piece, double on_u,
                           double on_v, double direct, double dt)
{
    mpfr_set_d(a[0][1], dt, MPFR_RNDN);
    put_rate(a[1][0], -mode->stiffness, mode->mass, dt);
    put_rate(a[1][1], -mode->damper, mode->mass, dt);
    put_rate(a[1][2], 1, mode->mass, dt);
    mpfr_set_d(a[2][3], 1, MPFR_RNDN);
    mpfr_set_d(a[4][5], dt, MPFR_RNDN);
    put_rate(a[5][0], -on_u, 1, dt);
    put_rate(a[5][1], -on_v, 1, dt);
    put_rate(a[5][2], -direct, 1, dt);
    put_rate(a[5][4], -piece->stiffness, piece->mass, dt);
    put_rate(a[5][5], -piece->damper, piece->mass, dt);
}

static rampwise_modes *single(const rampwise_coeffs *c, double load, double on_u, double on_v, double direct,
                              const rampwise_system *piece, int peaks)
{
    static const size_t point = 0;
    rampwise_modes_plan plan;
    rampwise_modes *modes = NULL;
    rampwise_modes_plan_init(&plan);
    plan.modes = plan.inputs = plan.outputs = plan.equipment_count = 1;
    plan.c = c;
    plan.load = &load;
    plan.on_displacement = &on_u;
    plan.on_velocity = &on_v;
    plan.on_input = &direct;
    plan.equipment = piece;
    plan.point = &point;
    plan.peaks = peaks;
    ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
    return modes;
}

/* The rows of a step, one by one: with a state or a sample of 1 and all else 0, every sum of the step has one term. */
static void library_rows(const rampwise_coeffs *c, const rampwise_system *piece, double on_u, double on_v,
                         double rows[2][4])
{
    rampwise_modes *const modes = single(c, 1, on_u, on_v, 0, piece, 0);
    for (int i = 0; i < 4; ++i) {
        const double u = i == 0, v = i == 1, now = i == 2, next = i == 3;
        ck_assert_int_eq(rampwise_modes_set(modes, &u, &v, &now), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_modes_run(modes, 1, &next, NULL, NULL), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_equipment_get(modes, &rows[0][i], &rows[1][i]), RAMPWISE_OK);
    }
    rampwise_modes_free(modes);
}

/* Every coefficient to 0.6 ulp of itself, but for 1e-25 of the size that its column has in a step of one radian: what has
   died away further than that keeps no more digits. */
START_TEST(coefficients)
{
    gsl_rng *const r = random_make("coefficients");
    const char *const points = getenv("RAMPWISE_POINTS");
    const int cases = points != NULL ? atoi(points) / 50 : 150;
    double worst = 0;
    matrix a, e;
    mpfr_t expected, difference;
    mpfr_inits2(BITS, expected, difference, (mpfr_ptr)NULL);
    matrix_init(a);
    matrix_init(e);
    for (int i = 0; i < cases; ++i) {
        const double dt = random_log(r, 1e-4, 1e2);
        const rampwise_system mode = regime_system(i % REGIMES, random_log(r, 1e-6, i % 2 ? 3 : 300), dt);
        rampwise_system piece = regime_system((int)gsl_rng_uniform_int(r, 6), random_log(r, 1e-6, 3), dt);
        if (mode.stiffness < 0 && mode.stiffness * dt * dt / mode.mass < -400)
            continue;
        if (i % 3 == 0) { /* tuned, or a little off */
            piece = mode;
            piece.stiffness *= 1 + (i % 2) * random_log(r, 1e-15, 1e-2);
        }
        const double on_u = random_between(r, -1, 1) / (dt * dt), on_v = random_between(r, -1, 1) / dt;
        double rows[2][4];
        rampwise_coeffs c;
        ck_assert_int_eq(rampwise_coeffs_make(&c, &mode, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
        library_rows(&c, &piece, on_u, on_v, rows);
        cascade_matrix(a, &mode, &piece, on_u, on_v, 0, dt);
        matrix_exponential(e, a);
        for (int row = 0; row < 2; ++row)
            for (int column = 0; column < 4; ++column) {
                /* p0 rises to p1: p0 (column of p - column of slope) + p1 (column of slope) */
                mpfr_set(expected, e[4 + row][column], MPFR_RNDN);
                if (column == 2)
                    mpfr_sub(expected, expected, e[4 + row][3], MPFR_RNDN);
                mpfr_sub_d(difference, expected, rows[row][column], MPFR_RNDN);
                const double exact = fabs(mpfr_get_d(expected, MPFR_RNDN));
                const double ulp = nextafter(exact, INFINITY) - exact;
                const double unit = row == 0 ? 1 : 1 / dt, column_unit = column == 0   ? 1
                                                                         : column == 1 ? dt
                                                                                       : dt * dt / mode.mass;
                const double error = fabs(mpfr_get_d(difference, MPFR_RNDN));
                const double in_ulp = (error - 1e-25 * unit * column_unit) / ulp;
                worst = fmax(worst, in_ulp);
                ck_assert_double_le(in_ulp, 0.6);
            }
    }
    printf("coefficients of equipment: largest error %.3f ulp\n", worst);
    matrix_clear(a);
    matrix_clear(e);
    mpfr_clears(expected, difference, (mpfr_ptr)NULL);
    mpfr_free_cache();
    gsl_rng_free(r);
}
END_TEST

/* x at every sample, from rest, by one product a sample. */
static void exact_record(matrix e, const double *p, double *x)
{
    mpfr_t at[SIZE], next[SIZE], term;
    mpfr_init2(term, BITS);
    for (int i = 0; i < SIZE; ++i) {
        mpfr_init2(at[i], BITS);
        mpfr_init2(next[i], BITS);
        mpfr_set_zero(at[i], 1);
    }
    for (int k = 0; k < SAMPLES; ++k) {
        mpfr_set_d(at[2], k > 0 ? p[k - 1] : 0, MPFR_RNDN);
        mpfr_set_d(at[3], p[k], MPFR_RNDN);
        mpfr_sub_d(at[3], at[3], k > 0 ? p[k - 1] : 0, MPFR_RNDN);
        for (int i = 0; i < SIZE; ++i) {
            mpfr_set_zero(next[i], 1);
            for (int j = 0; j < SIZE; ++j) {
                mpfr_mul(term, e[i][j], at[j], MPFR_RNDN);
                mpfr_add(next[i], next[i], term, MPFR_RNDN);
            }
        }
        for (int i = 0; i < SIZE; ++i)
            mpfr_set(at[i], next[i], MPFR_RNDN);
        x[k] = mpfr_get_d(at[4], MPFR_RNDN);
    }
    for (int i = 0; i < SIZE; ++i)
        mpfr_clears(at[i], next[i], (mpfr_ptr)NULL);
    mpfr_clear(term);
}

/* Structure and piece with the forces between them, under base acceleration p, x against the structure: with
   E = (c_e x' + k_e x)/m_e and the ratio of masses: q'' = -k q - c q' + ratio E - p, x'' = -(1 + ratio) E + c q' + k q. */
static void coupled_matrix(matrix a, const rampwise_system *mode, const rampwise_system *piece, double ratio,
                           double dt)
{
    mpfr_set_d(a[0][1], dt, MPFR_RNDN);
    put_rate(a[1][0], -mode->stiffness, mode->mass, dt);
    put_rate(a[1][1], -mode->damper, mode->mass, dt);
    mpfr_set_d(a[1][2], -dt, MPFR_RNDN);
    put_rate(a[1][4], piece->stiffness, piece->mass, dt * ratio);
    put_rate(a[1][5], piece->damper, piece->mass, dt * ratio);
    mpfr_set_d(a[2][3], 1, MPFR_RNDN);
    mpfr_set_d(a[4][5], dt, MPFR_RNDN);
    put_rate(a[5][0], mode->stiffness, mode->mass, dt);
    put_rate(a[5][1], mode->damper, mode->mass, dt);
    for (int j = 4; j < 6; ++j) {
        put_rate(a[5][j], j == 4 ? -piece->stiffness : -piece->damper, piece->mass, dt);
        mpfr_sub(a[5][j], a[5][j], a[1][j], MPFR_RNDN);
    }
}

/* The error of a record is the steps' roundings, 1e-16 of the sizes of q, x and what one does to the other. */
static double record_error(const double *exact, const double *got)
{
    double peak = 0, error = 0;
    for (int k = 0; k < SAMPLES; ++k) {
        peak = fmax(peak, fabs(exact[k]));
        error = fmax(error, fabs(exact[k] - got[k]));
    }
    return error / peak;
}

START_TEST(tuned_records)
{
    gsl_rng *const r = random_make("tuned_records");
    static const double detuning[] = {0, 1e-15, 1e-12, 1e-9, 1e-6, 1e-3, 0.1, 1};
    static const double dampings[] = {0, 0.005, 0.05, 1};
    double worst = 0, worst_coupled = 0;
    for (int i = 0; i < 32; ++i) {
        const double dt = 0.01, omega = random_log(r, 1, 100), zeta = dampings[i / 8];
        double p[SAMPLES], exact[SAMPLES], coupled[SAMPLES], got[SAMPLES];
        rampwise_system mode, piece;
        rampwise_coeffs c;
        matrix a, b, e;
        matrix_init(a);
        matrix_init(b);
        matrix_init(e);
        ck_assert_int_eq(rampwise_system_natural(&mode, omega, zeta), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_system_natural(&piece, omega * (1 + detuning[i % 8]), zeta), RAMPWISE_OK);
        random_fill(r, p, SAMPLES);
        /* total acceleration of the structure: -k q - c q' for unit mass; the load is -a_g */
        ck_assert_int_eq(rampwise_coeffs_make(&c, &mode, dt, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP),
                         RAMPWISE_OK);
        rampwise_modes *const modes = single(&c, 1, -mode.stiffness, -mode.damper, 0, &piece, 0);
        const rampwise_history out = {got, NULL, NULL, NULL};
        ck_assert_int_eq(rampwise_equipment_run(modes, SAMPLES, p, NULL, &out, NULL), RAMPWISE_OK);
        rampwise_modes_free(modes);
        cascade_matrix(a, &mode, &piece, -mode.stiffness, -mode.damper, 0, dt);
        mpfr_neg(a[1][2], a[1][2], MPFR_RNDN);
        matrix_exponential(e, a);
        exact_record(e, p, exact);
        coupled_matrix(b, &mode, &piece, 1e-24, dt);
        matrix_exponential(e, b);
        exact_record(e, p, coupled);
        worst = fmax(worst, record_error(exact, got));
        worst_coupled = fmax(worst_coupled, record_error(coupled, got));
        matrix_clear(a);
        matrix_clear(b);
        matrix_clear(e);
    }
    printf("tuned records: largest error %.1e of the peak, against the coupled pair %.1e\n", worst,
           worst_coupled);
    ck_assert_double_le(worst, 1e-12);
    ck_assert_double_le(worst_coupled, 1e-12);
    mpfr_free_cache();
    gsl_rng_free(r);
}
END_TEST

/* Undamped and tuned: the amplitude of x grows as long as the mode swings, (omega/2) (amplitude of the floor's
   displacement) a second: finite in every record. x'' + w^2 x = w^2 cos w t has x = (w t/2) sin w t. */
START_TEST(undamped_and_tuned)
{
    const double omega = 3, dt = 0.02, u = 1, v = 0;
    enum { N = 20000 };
    static double p[N], x[N];
    rampwise_system mode;
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_system_natural(&mode, omega, 0), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_coeffs_make(&c, &mode, dt, RAMPWISE_FORCE, RAMPWISE_RAMP), RAMPWISE_OK);
    rampwise_modes *const modes = single(&c, 1, -mode.stiffness, 0, 0, &mode, 1);
    ck_assert_int_eq(rampwise_modes_set(modes, &u, &v, NULL), RAMPWISE_OK);
    const rampwise_history out = {x, NULL, NULL, NULL};
    ck_assert_int_eq(rampwise_equipment_run(modes, N, p, NULL, &out, NULL), RAMPWISE_OK);
    for (int k = 0; k < N; ++k) {
        const double t = omega * dt * (k + 1);
        ck_assert_double_le(fabs(x[k] - t / 2 * sin(t)), 1e-10 * t);
    }
    rampwise_peak peak;
    ck_assert_int_eq(rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, &peak), RAMPWISE_OK);
    ck_assert(peak.high.value > 590 && peak.high.value < 600.1 && peak.low.value < -590);
    rampwise_modes_free(modes);
}
END_TEST

/* Many modes, inputs and pieces: what the single modes do, summed; for every kind, in chunks, on every set. */
START_TEST(sums_of_single_modes)
{
    gsl_rng *const r = random_make("sums_of_single_modes");
    enum { MODES = 35, INPUTS = 2, OUTPUTS = 2, PIECES = 9, N = 100 };
    static double input[N * INPUTS], whole[4][N * PIECES], again[4][N * PIECES];
    for (int i = 0; i < 8; ++i) {
        const int kind = i % 4;
        rampwise_coeffs c[MODES];
        rampwise_system pieces[PIECES];
        double load[MODES * INPUTS], weight[3][MODES * OUTPUTS], on_input[INPUTS * OUTPUTS];
        double sum[N * PIECES] = {0}, size[N * PIECES] = {0};
        size_t point[PIECES];
        for (int j = 0; j < MODES; ++j)
            c[j] = made(regime_system(j % 7, random_log(r, 1e-2, 2), 0.01), 0.01, kind);
        for (int j = 0; j < PIECES; ++j) {
            pieces[j] = regime_system(j % 6, random_log(r, 1e-2, 2), 0.01);
            point[j] = (size_t)j % OUTPUTS;
        }
        random_fill(r, load, MODES * INPUTS);
        random_fill(r, on_input, INPUTS * OUTPUTS);
        random_record(r, input, N * INPUTS);
        for (int k = 0; k < 3; ++k)
            random_fill(r, weight[k], MODES * OUTPUTS);
        rampwise_modes_plan plan;
        rampwise_modes_plan_init(&plan);
        plan.modes = MODES;
        plan.inputs = INPUTS;
        plan.outputs = OUTPUTS;
        plan.c = c;
        plan.load = load;
        plan.on_displacement = weight[0];
        plan.on_velocity = weight[1];
        plan.on_acceleration = weight[2];
        plan.on_input = on_input;
        plan.equipment = pieces;
        plan.equipment_count = PIECES;
        plan.point = point;
        const rampwise_history out = {whole[0], whole[1], whole[2], whole[3]};
        double output[N * OUTPUTS];
        rampwise_modes *modes = NULL;
        ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
        ck_assert_int_eq(rampwise_equipment_run(modes, N, input, output, &out, NULL), RAMPWISE_OK);
        rampwise_modes_free(modes);
        for (int set = 0; set < SETS; ++set) {
            if (!runs_here(sets[set]))
                continue;
            plan.instructions = sets[set];
            plan.peaks = set % 2;
            ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
            for (size_t done = 0, part; done < N; done += part) {
                part = gsl_rng_uniform_int(r, 40) + 1;
                part = part < N - done ? part : N - done;
                const size_t at = done * PIECES;
                const rampwise_history next = {again[0] + at, again[1] + at, again[2] + at, again[3] + at};
                ck_assert_int_eq(
                    rampwise_equipment_run(modes, part, input + done * INPUTS, NULL, &next, NULL),
                    RAMPWISE_OK);
            }
            ck_assert_mem_eq(whole, again, sizeof whole);
            rampwise_modes_free(modes);
        }
        /* single modes, the direct terms with the first; x'' + total = 0 less the floor, to rounding */
        plan.instructions = RAMPWISE_FASTEST;
        plan.peaks = 0;
        plan.modes = 1;
        for (size_t j = 0; j < MODES; ++j) {
            double one[N * PIECES];
            const rampwise_history x = {one, NULL, NULL, NULL};
            plan.c = &c[j];
            plan.load = load + j * INPUTS;
            plan.on_displacement = weight[0] + j * OUTPUTS;
            plan.on_velocity = weight[1] + j * OUTPUTS;
            plan.on_acceleration = weight[2] + j * OUTPUTS;
            plan.on_input = j == 0 ? on_input : NULL;
            ck_assert_int_eq(rampwise_modes_create(&plan, &modes), RAMPWISE_OK);
            ck_assert_int_eq(rampwise_equipment_run(modes, N, input, NULL, &x, NULL), RAMPWISE_OK);
            rampwise_modes_free(modes);
            for (int k = 0; k < N * PIECES; ++k) {
                sum[k] += one[k];
                size[k % PIECES] = fmax(size[k % PIECES], fabs(one[k]));
            }
        }
        for (int k = 0; k < N * PIECES; ++k) {
            const int piece = k % PIECES;
            const double floor = output[k / PIECES * OUTPUTS + (int)point[piece]];
            ck_assert_double_le(fabs(whole[0][k] - sum[k]), 1e-13 * MODES * size[piece]);
            const rampwise_system *const sys = &pieces[piece];
            const double total = -(sys->stiffness * whole[0][k] + sys->damper * whole[1][k]) / sys->mass;
            const double terms = fabs(sys->stiffness * whole[0][k]) + fabs(sys->damper * whole[1][k]);
            ck_assert_double_le(fabs(whole[3][k] - total), 4 * DBL_EPSILON * terms / sys->mass);
            ck_assert(whole[2][k] == whole[3][k] - floor);
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* A point that moves as the base does is the base: the bits may differ, the motion does not. */
START_TEST(on_the_ground)
{
    gsl_rng *const r = random_make("on_the_ground");
    enum { N = 300 };
    double p[N], x[N], u[N];
    for (int i = 0; i < 40; ++i) {
        const rampwise_system sys = regime_system(i % 6, random_log(r, 1e-3, 10), 0.01);
        const rampwise_coeffs c = made(sys, 0.01, 2 + i % 2);
        random_record(r, p, N);
        rampwise_modes *const modes = single(&c, 1, 0, 0, 1, &sys, 0);
        const rampwise_history out = {x, NULL, NULL, NULL}, expected = {u, NULL, NULL, NULL};
        ck_assert_int_eq(rampwise_equipment_run(modes, N, p, NULL, &out, NULL), RAMPWISE_OK);
        rampwise_modes_free(modes);
        rampwise_state s;
        rampwise_start(&s, 0, 0, 0);
        ck_assert_int_eq(rampwise_run(&c, &s, N, p, &expected, NULL), RAMPWISE_OK);
        double peak = 0;
        for (int k = 0; k < N; ++k)
            peak = fmax(peak, fabs(u[k]));
        for (int k = 0; k < N; ++k)
            ck_assert_double_le(fabs(x[k] - u[k]), 1e-12 * peak);
    }
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, coefficients);
    tcase_add_test(tests, tuned_records);
    tcase_add_test(tests, undamped_and_tuned);
    tcase_add_test(tests, sums_of_single_modes);
    tcase_add_test(tests, on_the_ground);
}

int main(void)
{
    return suite_run("equipment_exact", add_tests);
}
