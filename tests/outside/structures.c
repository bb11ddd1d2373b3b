/* Whole structures: frequencies of shear buildings known in closed form, textbooks' two-storey frames, and responses
   against the matrix exponential of all equations together and GSL's adaptive driver on them, for classical
   damping (modes from GSL's symmetric generalised eigenvalue solver) and damping of any distribution (its
   nonsymmetric solver on the companion matrix), rigid-body modes, static corrections, combination rules. */
#include <float.h>
#include <gsl/gsl_blas.h>
#include <gsl/gsl_eigen.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <gsl/gsl_odeiv2.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { MOST = 30, SAMPLES = 150, ROWS = 3 * MOST };

static const double pi = 3.14159265358979323846;

/* M u'' + C u' + K u = force p */
typedef struct frame {
    size_t n;
    double M[MOST * MOST], C[MOST * MOST], K[MOST * MOST], force[MOST];
} frame;

/* A chain of n masses between springs and dampers; the first of n + 1 goes to the ground, and so does the last. */
static void chain(frame *f, size_t n, const double *mass, const double *spring, const double *damper)
{
    memset(f, 0, sizeof *f);
    f->n = n;
    for (size_t i = 0; i < n; ++i) {
        f->M[i * n + i] = mass[i];
        f->force[i] = -mass[i];
        f->K[i * n + i] = spring[i] + spring[i + 1];
        f->C[i * n + i] = damper[i] + damper[i + 1];
        if (i + 1 < n) {
            f->K[i * n + i + 1] = f->K[(i + 1) * n + i] = -spring[i + 1];
            f->C[i * n + i + 1] = f->C[(i + 1) * n + i] = -damper[i + 1];
        }
    }
}

/* Modes of K and M, of unit mass, slowest first: omega^2 and shapes [mode][n]. */
static void undamped_modes(const frame *f, double *square, double *shape)
{
    const size_t n = f->n;
    gsl_matrix *const K = gsl_matrix_alloc(n, n), *const M = gsl_matrix_alloc(n, n),
                      *const vectors = gsl_matrix_alloc(n, n);
    gsl_vector *const values = gsl_vector_alloc(n);
    gsl_eigen_gensymmv_workspace *const work = gsl_eigen_gensymmv_alloc(n);
    memcpy(K->data, f->K, n * n * sizeof *f->K);
    memcpy(M->data, f->M, n * n * sizeof *f->M);
    gsl_eigen_gensymmv(K, M, values, vectors, work);
    gsl_eigen_gensymmv_sort(values, vectors, GSL_EIGEN_SORT_VAL_ASC);
    for (size_t j = 0; j < n; ++j) {
        double modal = 0;
        for (size_t i = 0; i < n; ++i)
            for (size_t k = 0; k < n; ++k)
                modal += gsl_matrix_get(vectors, i, j) * f->M[i * n + k] * gsl_matrix_get(vectors, k, j);
        square[j] = gsl_vector_get(values, j);
        for (size_t i = 0; i < n; ++i)
            shape[j * n + i] = gsl_matrix_get(vectors, i, j) / sqrt(modal);
    }
    gsl_eigen_gensymmv_free(work);
    gsl_matrix_free(K);
    gsl_matrix_free(M);
    gsl_matrix_free(vectors);
    gsl_vector_free(values);
}

/* The frame's response from rest: u[SAMPLES][n] and v, one exponential of the matrix of all equations with p and its
   slope, [0, 1, 0, 0; -M^-1 K, -M^-1 C, M^-1 force, 0; 0, 0, 0, 1/dt; 0], and a product a sample. M is diagonal. */
static void exact_record(const frame *f, double dt, const double *p, double *u, double *v)
{
    const size_t n = f->n, all = 2 * n + 2;
    gsl_matrix *const A = gsl_matrix_calloc(all, all), *const E = gsl_matrix_alloc(all, all);
    gsl_vector *const x = gsl_vector_calloc(all), *const y = gsl_vector_alloc(all);
    for (size_t i = 0; i < n; ++i) {
        gsl_matrix_set(A, i, n + i, dt);
        for (size_t j = 0; j < n; ++j) {
            gsl_matrix_set(A, n + i, j, -dt * f->K[i * n + j] / f->M[i * n + i]);
            gsl_matrix_set(A, n + i, n + j, -dt * f->C[i * n + j] / f->M[i * n + i]);
        }
        gsl_matrix_set(A, n + i, 2 * n, dt * f->force[i] / f->M[i * n + i]);
    }
    gsl_matrix_set(A, 2 * n, 2 * n + 1, 1);
    gsl_linalg_exponential_ss(A, E, GSL_PREC_DOUBLE);
    for (size_t k = 0; k < SAMPLES; ++k) {
        gsl_vector_set(x, 2 * n, k > 0 ? p[k - 1] : 0);
        gsl_vector_set(x, 2 * n + 1, p[k] - (k > 0 ? p[k - 1] : 0));
        gsl_blas_dgemv(CblasNoTrans, 1, E, x, 0, y);
        gsl_vector_memcpy(x, y);
        for (size_t i = 0; i < n; ++i) {
            u[k * n + i] = gsl_vector_get(x, i);
            v[k * n + i] = gsl_vector_get(x, n + i);
        }
    }
    gsl_matrix_free(A);
    gsl_matrix_free(E);
    gsl_vector_free(x);
    gsl_vector_free(y);
}

/* u, v and u'' of every mass as outputs: the exact ones of a state under p. */
static void rows_of(const frame *f, const double *u, const double *v, double p, double *row)
{
    const size_t n = f->n;
    for (size_t i = 0; i < n; ++i) {
        double sum = f->force[i] * p;
        for (size_t j = 0; j < n; ++j)
            sum -= f->K[i * n + j] * u[j] + f->C[i * n + j] * v[j];
        row[i] = u[i];
        row[n + i] = v[i];
        row[2 * n + i] = sum / f->M[i * n + i];
    }
}

static rampwise_coeffs coeffs_of(rampwise_system sys, double dt, int input)
{
    rampwise_coeffs c;
    ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
    return c;
}

/* Largest error of output[SAMPLES][3 n] in units of the peak of the same kind of row. */
static double worst_error(const frame *f, const double *p, const double *u, const double *v,
                          const double *output)
{
    const size_t n = f->n;
    double peak[3] = {0, 0, 0}, error[3] = {0, 0, 0}, row[ROWS];
    for (size_t k = 0; k < SAMPLES; ++k) {
        rows_of(f, u + k * n, v + k * n, p[k], row);
        for (size_t i = 0; i < 3 * n; ++i) {
            peak[i / n] = fmax(peak[i / n], fabs(row[i]));
            error[i / n] = fmax(error[i / n], fabs(row[i] - output[k * 3 * n + i]));
        }
    }
    return fmax(error[0] / peak[0], fmax(error[1] / peak[1], error[2] / peak[2]));
}

static void run_plan(const rampwise_modes_plan *plan, const double *p, double *output)
{
    rampwise_modes *modes = NULL;
    ck_assert_int_eq(rampwise_modes_create(plan, &modes), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_modes_run(modes, SAMPLES, p, output, NULL), RAMPWISE_OK);
    rampwise_modes_free(modes);
}

/* Classical: damping a M + b K. One direction of base acceleration by participation factors, or the same forces. */
static void run_classical(const frame *f, double a, double b, size_t modes, int input, double dt,
                          const double *p, double *output)
{
    const size_t n = f->n;
    static double square[MOST], shape[MOST * MOST], weight[3][MOST * ROWS];
    rampwise_coeffs c[MOST];
    double load[MOST];
    rampwise_modes_plan plan;
    undamped_modes(f, square, shape);
    memset(weight, 0, sizeof weight);
    for (size_t j = 0; j < modes; ++j) {
        c[j] = coeffs_of((rampwise_system){1, a + b * square[j], square[j]}, dt, input);
        load[j] = 0;
        for (size_t i = 0; i < n; ++i) {
            load[j] += shape[j * n + i] * f->force[i];
            for (size_t k = 0; k < 3; ++k)
                weight[k][j * 3 * n + k * n + i] = shape[j * n + i];
        }
        if (input == RAMPWISE_BASE_ACCELERATION)
            load[j] = -load[j];
    }
    rampwise_modes_plan_init(&plan);
    plan.modes = modes;
    plan.inputs = 1;
    plan.outputs = 3 * n;
    plan.c = c;
    plan.load = load;
    plan.on_displacement = weight[0];
    plan.on_velocity = weight[1];
    plan.on_acceleration = weight[2];
    run_plan(&plan, p, output);
}

/* Roots and shapes of the companion matrix. */
static void damped_roots(const frame *f, double *root, double *shape)
{
    const size_t n = f->n;
    gsl_matrix *const A = gsl_matrix_calloc(2 * n, 2 * n);
    gsl_matrix_complex *const vectors = gsl_matrix_complex_alloc(2 * n, 2 * n);
    gsl_vector_complex *const values = gsl_vector_complex_alloc(2 * n);
    gsl_eigen_nonsymmv_workspace *const work = gsl_eigen_nonsymmv_alloc(2 * n);
    for (size_t i = 0; i < n; ++i) {
        gsl_matrix_set(A, i, n + i, 1);
        for (size_t j = 0; j < n; ++j) {
            gsl_matrix_set(A, n + i, j, -f->K[i * n + j] / f->M[i * n + i]);
            gsl_matrix_set(A, n + i, n + j, -f->C[i * n + j] / f->M[i * n + i]);
        }
    }
    gsl_eigen_nonsymmv(A, values, vectors, work);
    for (size_t k = 0; k < 2 * n; ++k) {
        root[2 * k] = GSL_REAL(gsl_vector_complex_get(values, k));
        root[2 * k + 1] = GSL_IMAG(gsl_vector_complex_get(values, k));
        for (size_t i = 0; i < n; ++i) {
            shape[2 * (k * n + i)] = GSL_REAL(gsl_matrix_complex_get(vectors, i, k));
            shape[2 * (k * n + i) + 1] = GSL_IMAG(gsl_matrix_complex_get(vectors, i, k));
        }
    }
    gsl_eigen_nonsymmv_free(work);
    gsl_matrix_free(A);
    gsl_matrix_complex_free(vectors);
    gsl_vector_complex_free(values);
}

/* The rows of rows_of as weights on displacements and velocities; on_input gets the rest. */
static void row_weights(const frame *f, double *on_u, double *on_v, double *on_input)
{
    const size_t n = f->n;
    memset(on_u, 0, 3 * n * n * sizeof *on_u);
    memset(on_v, 0, 3 * n * n * sizeof *on_v);
    memset(on_input, 0, 3 * n * sizeof *on_input);
    for (size_t i = 0; i < n; ++i) {
        on_u[i * n + i] = 1;
        on_v[(n + i) * n + i] = 1;
        on_input[2 * n + i] = f->force[i] / f->M[i * n + i];
        for (size_t j = 0; j < n; ++j) {
            on_u[(2 * n + i) * n + j] = -f->K[i * n + j] / f->M[i * n + i];
            on_v[(2 * n + i) * n + j] = -f->C[i * n + j] / f->M[i * n + i];
        }
    }
}

typedef struct converted {
    double root[4 * MOST], shape[4 * MOST * MOST], on_u[ROWS * MOST], on_v[ROWS * MOST], on_input[2 * ROWS];
    rampwise_system sys[2 * MOST];
    double load[4 * MOST], weight[2][2 * MOST * ROWS];
    rampwise_coeffs c[2 * MOST];
    rampwise_roots roots;
} converted;

/* inputs is 1, or 2 for the same force given as two halves of it that differ. */
static int convert(converted *x, const frame *f, size_t inputs, const double *force)
{
    damped_roots(f, x->root, x->shape);
    row_weights(f, x->on_u, x->on_v, x->on_input);
    rampwise_roots_init(&x->roots);
    x->roots.bodies = f->n;
    x->roots.inputs = inputs;
    x->roots.outputs = 3 * f->n;
    x->roots.mass = f->M;
    x->roots.damper = f->C;
    x->roots.root = x->root;
    x->roots.shape = x->shape;
    x->roots.force = force;
    x->roots.on_displacement = x->on_u;
    x->roots.on_velocity = x->on_v;
    return rampwise_roots_to_modes(&x->roots, x->sys, x->load, x->weight[0], x->weight[1]);
}

static void run_converted(converted *x, double dt, const double *p, double *output)
{
    rampwise_modes_plan plan;
    rampwise_modes_plan_init(&plan);
    plan.modes = rampwise_roots_modes(&x->roots);
    for (size_t j = 0; j < plan.modes; ++j)
        x->c[j] = coeffs_of(x->sys[j], dt, RAMPWISE_FORCE);
    plan.inputs = x->roots.inputs;
    plan.outputs = x->roots.outputs;
    plan.c = x->c;
    plan.load = x->load;
    plan.on_displacement = x->weight[0];
    plan.on_velocity = x->weight[1];
    plan.on_input = x->on_input;
    run_plan(&plan, p, output);
}

/* Random masses, springs and dampers; open ends where asked. */
static void random_chain(gsl_rng *r, frame *f, size_t n, double zeta)
{
    double mass[MOST], spring[MOST + 1], damper[MOST + 1];
    for (size_t i = 0; i <= n; ++i) {
        if (i < n)
            mass[i] = random_log(r, 0.5, 2);
        spring[i] = random_log(r, 100, 400);
        damper[i] = zeta * random_log(r, 1, 100);
    }
    spring[n] = damper[n] = 0;
    chain(f, n, mass, spring, damper);
}

/* Uniform shear building of n storeys, fixed at its foot: omega_j = 2 sqrt(k/m) sin((2 j - 1) pi/(2 (2 n + 1))); free at
   both ends: 2 sqrt(k/m) sin(j pi/(2 n)), j = 0 a rigid body (R. D. Blevins, Formulas for Natural Frequency and Mode
   Shape, spring-mass chains; from memory, and any textbook of vibration). Solver and sines to n^2 roundings. */
START_TEST(shear_buildings)
{
    static frame f;
    double mass[MOST], spring[MOST + 1], none[MOST + 1] = {0}, square[MOST];
    static double shape[MOST * MOST];
    for (size_t n = 2; n <= MOST; ++n)
        for (int free = 0; free < 2; ++free) {
            const double m = 1.7, k = 330, top = 4 * k / m;
            for (size_t i = 0; i < n; ++i) {
                mass[i] = m;
                spring[i] = k;
            }
            spring[n] = 0;
            if (free)
                spring[0] = 0;
            chain(&f, n, mass, spring, none);
            undamped_modes(&f, square, shape);
            for (size_t j = 0; j < n; ++j) {
                const double angle = free ? (double)j * pi / (2 * (double)n)
                                          : (2 * (double)j + 1) * pi / (2 * (2 * (double)n + 1));
                ck_assert_double_le(fabs(square[j] - top * sin(angle) * sin(angle)),
                                    (double)(n * n) * DBL_EPSILON * top);
            }
        }
}
END_TEST

/* m1 = 2 m, m2 = m, k1 = 2 k, k2 = k: omega^2 = k/(2 m) and 2 k/m, shapes (1/2, 1) and (-1, 1), effective masses
   8/3 m and 1/3 m of 3 m (A. K. Chopra, Dynamics of Structures, Examples 10.4 and 13.2; from memory). */
START_TEST(two_storeys)
{
    static frame f;
    const double m = 3, k = 200, mass[2] = {2 * m, m}, spring[3] = {2 * k, k, 0}, none[3] = {0};
    double square[2], shape[4], load[2], share;
    rampwise_coeffs c[2];
    rampwise_modes_plan plan;
    chain(&f, 2, mass, spring, none);
    undamped_modes(&f, square, shape);
    ck_assert_double_eq_tol(square[0], k / (2 * m), 1e-12);
    ck_assert_double_eq_tol(square[1], 2 * k / m, 1e-12);
    ck_assert_double_eq_tol(shape[0] / shape[1], 0.5, 1e-14);
    ck_assert_double_eq_tol(shape[2] / shape[3], -1, 1e-14);
    const double whole = 3 * m, expected[2] = {8.0 / 9, 1};
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_ACCELERATION; ++input)
        for (size_t modes = 1; modes <= 2; ++modes) {
            for (size_t j = 0; j < modes; ++j) {
                /* of any mass: shapes twice as large have a quarter of the factor's square, four times the mass */
                c[j] = coeffs_of((rampwise_system){4, 0, 4 * square[j]}, 0.01, input);
                load[j] = 2 * (shape[2 * j] * mass[0] + shape[2 * j + 1] * mass[1]);
                if (input == RAMPWISE_BASE_ACCELERATION)
                    load[j] /= 4;
            }
            rampwise_modes_plan_init(&plan);
            plan.modes = modes;
            plan.inputs = plan.outputs = 1;
            plan.c = c;
            plan.load = load;
            ck_assert_int_eq(rampwise_mass_share(&plan, &whole, &share), RAMPWISE_OK);
            ck_assert_double_eq_tol(share, expected[modes - 1], 1e-14);
        }
}
END_TEST

/* All modes: the solver's roundings, some n eps of the largest root, act over SAMPLES steps: 1e-10 leaves room. */
START_TEST(classical_records)
{
    gsl_rng *const r = random_make("classical_records");
    static const size_t sizes[] = {2, 3, 10, MOST};
    static frame f;
    static double p[SAMPLES], u[SAMPLES * MOST], v[SAMPLES * MOST], output[SAMPLES * ROWS];
    double worst = 0;
    for (int i = 0; i < 16; ++i) {
        const double a = random_log(r, 1e-3, 1), b = random_log(r, 1e-5, 1e-2), dt = random_log(r, 1e-3, 0.2);
        random_chain(r, &f, sizes[i % 4], 0);
        for (size_t j = 0; j < f.n * f.n; ++j)
            f.C[j] = a * f.M[j] + b * f.K[j];
        random_fill(r, p, SAMPLES);
        exact_record(&f, dt, p, u, v);
        run_classical(&f, a, b, f.n, i % 2 ? RAMPWISE_FORCE : RAMPWISE_BASE_ACCELERATION, dt, p, output);
        worst = fmax(worst, worst_error(&f, p, u, v, output));
    }
    printf("classical records: largest error %.1e of the peak\n", worst);
    ck_assert_double_le(worst, 1e-10);
    gsl_rng_free(r);
}
END_TEST

/* Damping of any distribution, light to over-damped; one input, and the same load split over two. */
START_TEST(nonclassical_records)
{
    gsl_rng *const r = random_make("nonclassical_records");
    static const size_t sizes[] = {1, 2, 5, MOST};
    static frame f;
    static converted x;
    static double p[SAMPLES], two[2 * SAMPLES], u[SAMPLES * MOST], v[SAMPLES * MOST], output[SAMPLES * ROWS];
    double worst = 0;
    int real = 0, complex = 0;
    for (int i = 0; i < 24; ++i) {
        const double dt = random_log(r, 3e-3, 0.1);
        random_chain(r, &f, sizes[i % 4], random_log(r, 1e-2, 2));
        random_fill(r, p, SAMPLES);
        exact_record(&f, dt, p, u, v);
        ck_assert_int_eq(convert(&x, &f, 1, f.force), RAMPWISE_OK);
        run_converted(&x, dt, p, output);
        worst = fmax(worst, worst_error(&f, p, u, v, output));
        for (size_t k = 0; k < 2 * f.n; ++k)
            x.root[2 * k + 1] != 0 ? ++complex : ++real;
        double split[2 * MOST];
        for (size_t j = 0; j < f.n; ++j) {
            split[j] = f.force[j] * random_between(r, -1, 2);
            split[f.n + j] = f.force[j] - split[j];
        }
        for (size_t k = 0; k < SAMPLES; ++k)
            two[2 * k] = two[2 * k + 1] = p[k];
        ck_assert_int_eq(convert(&x, &f, 2, split), RAMPWISE_OK);
        for (size_t o = 0; o < 3 * f.n; ++o)
            x.on_input[3 * f.n + o] = 0;
        run_converted(&x, dt, two, output);
        worst = fmax(worst, worst_error(&f, p, u, v, output));
    }
    printf("nonclassical records: %d real roots, %d complex, largest error %.1e of the peak\n", real, complex,
           worst);
    ck_assert_int_gt(real, 40);
    ck_assert_int_gt(complex, 200);
    ck_assert_double_le(worst, 1e-10);
    gsl_rng_free(r);
}
END_TEST

/* Two bodies on dampers alone, side by side, and a body on a spring: two zero roots, each with its damper's. */
START_TEST(zero_roots)
{
    static frame f;
    static converted x;
    static double p[SAMPLES], u[SAMPLES * MOST], v[SAMPLES * MOST], output[SAMPLES * ROWS];
    gsl_rng *const r = random_make("zero_roots");
    f.n = 3;
    memset(f.K, 0, sizeof f.K);
    memset(f.C, 0, sizeof f.C);
    memset(f.M, 0, sizeof f.M);
    const double mass[3] = {1, 2, 1.5}, damper[3] = {3, 4, 0.5};
    for (size_t i = 0; i < 3; ++i) {
        f.M[i * 3 + i] = mass[i];
        f.C[i * 3 + i] = damper[i];
        f.force[i] = 1 + (double)i;
    }
    f.K[8] = 60;
    random_fill(r, p, SAMPLES);
    exact_record(&f, 0.05, p, u, v);
    ck_assert_int_eq(convert(&x, &f, 1, f.force), RAMPWISE_OK);
    int found = 0;
    for (size_t j = 0; j < 3; ++j)
        for (size_t i = 0; i < 2; ++i)
            if (fabs(x.sys[j].stiffness) < 1e-12 && fabs(x.sys[j].damper - damper[i] / mass[i]) < 1e-12)
                ++found;
    ck_assert_int_eq(found, 2);
    run_converted(&x, 0.05, p, output);
    ck_assert_double_le(worst_error(&f, p, u, v, output), 1e-12);
    /* Critical damping, a double root with one shape; and an undamped rigid body: a double zero root. */
    frame one;
    const double m = 1, k[2] = {4, 0}, c[2] = {4, 0}, none[2] = {0, 0};
    chain(&one, 1, &m, k, c);
    ck_assert_int_eq(convert(&x, &one, 1, one.force), RAMPWISE_ERROR_DEFECTIVE);
    chain(&one, 1, &m, none, none);
    ck_assert_int_eq(convert(&x, &one, 1, one.force), RAMPWISE_ERROR_DEFECTIVE);
    chain(&one, 1, &m, k, none);
    ck_assert_int_eq(convert(&x, &one, 1, one.force), RAMPWISE_OK);
    x.root[1] = 17;
    ck_assert_int_eq(rampwise_roots_to_modes(&x.roots, x.sys, x.load, x.weight[0], x.weight[1]),
                     RAMPWISE_ERROR_ROOTS);
    x.root[1] = NAN;
    ck_assert_int_eq(rampwise_roots_to_modes(&x.roots, x.sys, x.load, x.weight[0], x.weight[1]),
                     RAMPWISE_ERROR_ROOTS);
    x.root[1] = -x.root[3];
    x.on_u[0] = INFINITY;
    ck_assert_int_eq(rampwise_roots_to_modes(&x.roots, x.sys, x.load, x.weight[0], x.weight[1]),
                     RAMPWISE_ERROR_WEIGHT);
    x.roots.bodies = 0;
    ck_assert_int_eq(rampwise_roots_to_modes(&x.roots, x.sys, x.load, x.weight[0], x.weight[1]),
                     RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(rampwise_roots_to_modes(&x.roots, NULL, x.load, x.weight[0], x.weight[1]),
                     RAMPWISE_ERROR_MISSING);
    gsl_rng_free(r);
}
END_TEST

/* A free chain: the rigid-body mode is kept, omega = 0. The exact drift and the solver's omega^2 of 1e-14 part as
   omega^2 t^2. */
START_TEST(rigid_body)
{
    gsl_rng *const r = random_make("rigid_body");
    static frame f;
    static double p[SAMPLES], u[SAMPLES * MOST], v[SAMPLES * MOST], output[SAMPLES * ROWS];
    double mass[MOST], spring[MOST + 1], none[MOST + 1] = {0};
    for (size_t i = 0; i < 6; ++i) {
        mass[i] = random_log(r, 0.5, 2);
        spring[i] = i > 0 ? random_log(r, 100, 400) : 0;
    }
    spring[6] = 0;
    chain(&f, 6, mass, spring, none);
    for (size_t i = 0; i < 6; ++i)
        f.force[i] = random_between(r, -1, 2);
    random_fill(r, p, SAMPLES);
    exact_record(&f, 0.03, p, u, v);
    run_classical(&f, 0, 0, 6, RAMPWISE_FORCE, 0.03, p, output);
    ck_assert_double_le(worst_error(&f, p, u, v, output), 1e-11);
    gsl_rng_free(r);
}
END_TEST

/* All equations as GSL's driver sees them: input on a line p + slope t. */
typedef struct line {
    const frame *f;
    double p, slope;
} line;

static int right_hand_side(double t, const double *y, double *dy, void *of)
{
    const line *const l = of;
    double row[ROWS];
    rows_of(l->f, y, y + l->f->n, l->p + l->slope * t, row);
    memcpy(dy, y + l->f->n, l->f->n * sizeof *dy);
    memcpy(dy + l->f->n, row + 2 * l->f->n, l->f->n * sizeof *dy);
    return GSL_SUCCESS;
}

/* GSL's rk8pd, stopped at every sample. It accepts errors of 1e-13 of the sizes of u and v a step (10 per cent
   more); each is a free motion of a stable structure from then on, of no more than twice its energy's size in these
   chains, whose masses and springs differ by a factor of four: u0 + v0/omega_1, v0 + omega_n u0. */
START_TEST(adaptive_driver)
{
    gsl_rng *const r = random_make("adaptive_driver");
    static const size_t sizes[] = {2, 5, 12, MOST};
    static frame f;
    static converted x;
    static double p[SAMPLES], u[SAMPLES * MOST], v[SAMPLES * MOST], output[SAMPLES * ROWS], square[MOST],
        shape[MOST * MOST];
    double worst = 0;
    for (int i = 0; i < 8; ++i) {
        const int classical = i % 2;
        const double a = 0.3, b = 1e-3, dt = 0.05;
        const size_t n = sizes[i / 2];
        random_chain(r, &f, n, classical ? 0 : 0.1);
        for (size_t j = 0; classical && j < n * n; ++j)
            f.C[j] = a * f.M[j] + b * f.K[j];
        random_fill(r, p, SAMPLES);
        if (classical) {
            run_classical(&f, a, b, n, RAMPWISE_FORCE, dt, p, output);
        } else {
            ck_assert_int_eq(convert(&x, &f, 1, f.force), RAMPWISE_OK);
            run_converted(&x, dt, p, output);
        }
        double peak[2] = {0, 0}, y[2 * MOST] = {0};
        for (size_t k = 0; k < SAMPLES; ++k)
            for (size_t j = 0; j < 2 * n; ++j)
                peak[j / n] = fmax(peak[j / n], fabs(output[k * 3 * n + j]));
        undamped_modes(&f, square, shape);
        line l = {&f, 0, 0};
        gsl_odeiv2_system equations = {right_hand_side, NULL, 2 * n, &l};
        const double smaller = fmin(peak[0], peak[1]);
        gsl_odeiv2_driver *const driver =
            gsl_odeiv2_driver_alloc_y_new(&equations, gsl_odeiv2_step_rk8pd, dt / 10, 1e-13 * smaller, 0);
        for (size_t k = 0; k < SAMPLES; ++k) {
            double t = 0;
            l.p = k > 0 ? p[k - 1] : 0;
            l.slope = (p[k] - l.p) / dt;
            gsl_odeiv2_driver_reset(driver);
            ck_assert_int_eq(gsl_odeiv2_driver_apply(driver, &t, dt, y), GSL_SUCCESS);
            memcpy(u + k * n, y, n * sizeof *u);
            memcpy(v + k * n, y + n, n * sizeof *v);
        }
        const double each = 1.1e-13 * smaller * (double)driver->n * SAMPLES;
        const double bound_u = 2 * each * (1 + 1 / sqrt(square[0])),
                     bound_v = 2 * each * (1 + sqrt(square[n - 1]));
        for (size_t k = 0; k < SAMPLES; ++k)
            for (size_t j = 0; j < n; ++j) {
                const double error_u = fabs(u[k * n + j] - output[k * 3 * n + j]);
                const double error_v = fabs(v[k * n + j] - output[k * 3 * n + n + j]);
                ck_assert_double_le(error_u, bound_u);
                ck_assert_double_le(error_v, bound_v);
                worst = fmax(worst, fmax(error_u / peak[0], error_v / peak[1]));
            }
        gsl_odeiv2_driver_free(driver);
    }
    printf("adaptive driver: largest difference %.1e of the peak\n", worst);
    gsl_rng_free(r);
}
END_TEST

/* Two modes of ten under a slow load: with the static correction the outputs settle with the whole structure. */
START_TEST(static_correction)
{
    gsl_rng *const r = random_make("static_correction");
    enum { BODIES = 10, KEPT = 2 };
    static frame f;
    double square[MOST], settled[BODIES], on_input[BODIES], output[SAMPLES * BODIES], p[SAMPLES];
    static double shape[MOST * MOST];
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_ACCELERATION; ++input) {
        rampwise_coeffs c[KEPT];
        double load[KEPT];
        rampwise_modes_plan plan;
        random_chain(r, &f, BODIES, 0);
        undamped_modes(&f, square, shape);
        gsl_matrix_view K = gsl_matrix_view_array(f.K, BODIES, BODIES);
        gsl_vector_view force = gsl_vector_view_array(f.force, BODIES),
                        u = gsl_vector_view_array(settled, BODIES);
        gsl_matrix *const factor = gsl_matrix_alloc(BODIES, BODIES);
        gsl_matrix_memcpy(factor, &K.matrix);
        gsl_linalg_cholesky_decomp1(factor);
        gsl_linalg_cholesky_solve(factor, &force.vector, &u.vector);
        gsl_matrix_free(factor);
        for (size_t j = 0; j < KEPT; ++j) {
            /* strongly damped, so that what is not static has gone */
            c[j] = coeffs_of((rampwise_system){1, sqrt(square[j]), square[j]}, 10, input);
            load[j] = 0;
            for (size_t i = 0; i < BODIES; ++i)
                load[j] += (input == RAMPWISE_FORCE ? 1 : -1) * shape[j * BODIES + i] * f.force[i];
        }
        rampwise_modes_plan_init(&plan);
        plan.modes = KEPT;
        plan.inputs = 1;
        plan.outputs = BODIES;
        plan.c = c;
        plan.load = load;
        plan.on_displacement = shape;
        ck_assert_int_eq(rampwise_static_correction(&plan, settled, on_input), RAMPWISE_OK);
        plan.on_input = on_input;
        for (size_t k = 0; k < SAMPLES; ++k)
            p[k] = 1;
        run_plan(&plan, p, output);
        double largest = 0, without = 0;
        for (size_t i = 0; i < BODIES; ++i) {
            ck_assert_double_le(fabs(output[(SAMPLES - 1) * BODIES + i] - settled[i]), 1e-14 * BODIES);
            largest = fmax(largest, fabs(settled[i]));
            without = fmax(without, fabs(on_input[i]));
        }
        ck_assert_double_gt(without, 1e-3 * largest); /* there was something to correct */
        settled[3] = NAN;
        ck_assert_int_eq(rampwise_static_correction(&plan, settled, on_input), RAMPWISE_ERROR_WEIGHT);
    }
    gsl_rng_free(r);
}
END_TEST

/* Coefficients at equal damping, in closed form (A. Der Kiureghian 1981):
   rho = 8 z^2 (1 + r) r^(3/2) / ((1 - r^2)^2 + 4 z^2 r (1 + r)^2); limits 1 and 0; at z = 5 % and r = 0.9 textbooks'
   tables print 0.473 (A. K. Chopra, Dynamics of Structures, fig. 13.7.1 and Wilson's tables; from memory). */
START_TEST(combination_rules)
{
    gsl_rng *const r = random_make("combination_rules");
    for (int i = 0; i < 1000; ++i) {
        const double z = random_log(r, 1e-4, 1), q = random_log(r, 0.01, 100),
                     omega = random_log(r, 1e-3, 1e3);
        const double expected =
            8 * z * z * (1 + q) * pow(q, 1.5) / (pow(1 - q * q, 2) + 4 * z * z * q * (1 + q) * (1 + q));
        ck_assert_double_eq_tol(rampwise_modal_correlation(omega, z, omega * q, z), expected,
                                1e-11 * expected);
        ck_assert_double_eq_tol(rampwise_modal_correlation(omega * q, z, omega, z), expected,
                                1e-11 * expected);
    }
    ck_assert_double_eq_tol(rampwise_modal_correlation(1, 0.05, 0.9, 0.05), 0.473, 5e-4);
    ck_assert(rampwise_modal_correlation(3, 0.05, 3, 0.05) == 1);
    ck_assert(rampwise_modal_correlation(3, 0, 3, 0) == 1);
    ck_assert(rampwise_modal_correlation(3, 0, 4, 0) == 0);
    ck_assert(rampwise_modal_correlation(0, 0.1, 4, 0.1) == 0);
    ck_assert_double_le(rampwise_modal_correlation(1, 0.05, 1e6, 0.05), 1e-10);
    const double peak[3] = {3, -4, 12}, far[3] = {1, 1e5, 1e10}, same[3] = {2, 2, 2},
                 zeta[3] = {0.02, 0.02, 0.02};
    ck_assert(rampwise_combine_absolute_sum(3, peak) == 19);
    ck_assert_double_eq_tol(rampwise_combine_root_of_squares(3, peak), 13, 1e-14);
    ck_assert_double_eq_tol(rampwise_combine_complete_quadratic(3, peak, far, zeta), 13, 1e-6);
    ck_assert_double_eq_tol(rampwise_combine_complete_quadratic(3, peak, same, zeta), 11, 1e-13);
    ck_assert_double_eq_tol(rampwise_combine_with_share(3, peak, 0.3), 12 + 0.3 * 7, 1e-14);
    ck_assert_double_eq_tol(rampwise_combine_with_share(2, peak, 0.4), 4 + 0.4 * 3, 1e-14);
    const double huge[2] = {3e300, 4e300}, none[2] = {0, 0};
    ck_assert_double_eq_tol(rampwise_combine_root_of_squares(2, huge) / 5e300, 1, 1e-14);
    ck_assert(rampwise_combine_root_of_squares(2, none) == 0 &&
              rampwise_combine_root_of_squares(0, peak) == 0);
    ck_assert(isnan(rampwise_combine_root_of_squares(2, NULL)));
    const double broken[2] = {1, NAN};
    ck_assert(isnan(rampwise_combine_root_of_squares(2, broken)));
    ck_assert(isnan(rampwise_combine_complete_quadratic(2, broken, far, zeta)));
    gsl_rng_free(r);
}
END_TEST

static void add_tests(TCase *tests)
{
    gsl_set_error_handler_off();
    tcase_add_test(tests, shear_buildings);
    tcase_add_test(tests, two_storeys);
    tcase_add_test(tests, classical_records);
    tcase_add_test(tests, nonclassical_records);
    tcase_add_test(tests, zero_roots);
    tcase_add_test(tests, rigid_body);
    tcase_add_test(tests, adaptive_driver);
    tcase_add_test(tests, static_correction);
    tcase_add_test(tests, combination_rules);
}

int main(void)
{
    return suite_run("structures", add_tests);
}
