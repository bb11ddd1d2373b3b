/* Whole structures: shear buildings of 10 to 10,000 masses by their modes, 50 outputs, beside Newmark's average
   acceleration on the full matrices with GSL's factorisation, the interval of a sample in as many parts as its error
   needs. */
#include <gsl/gsl_blas.h>
#include <gsl/gsl_linalg.h>
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "methods.h"

enum { OUTPUTS = 50, MOST = 10000, PIECES = 100 };
static const double pi = 3.14159265358979323846;

/* Masses of 1 on springs k, fixed at the foot, the slowest period 1 s; all modes damped 5 %. Closed forms:
   omega_j = 2 sqrt(k) sin(a_j), shape_j(i) = 2/sqrt(2 n + 1) sin(2 (i + 1) a_j), a_j = (2 j + 1) pi/(2 (2 n + 1)). */
typedef struct building {
    size_t n, outputs;
    rampwise_modes *modes;
    const double *p;
    double *output; /* [CASE_SAMPLES][outputs] */
} building;

/* What is asked of it: outputs are displacements or total accelerations; equipment stands on all of these in turn. */
typedef struct wish {
    size_t n, outputs;
    int peaks, accelerations, pieces;
} wish;

static double angle(size_t j, size_t n)
{
    return (double)(2 * j + 1) * pi / (double)(2 * (2 * n + 1));
}

static double shape(size_t j, size_t i, size_t n)
{
    return 2 / sqrt((double)(2 * n + 1)) * sin((double)(2 * (i + 1)) * angle(j, n));
}

static double spring(size_t n)
{
    return pow(pi / sin(angle(0, n)), 2);
}

static void make_plan(const building *b, rampwise_modes_plan *plan, rampwise_coeffs *c, double *load,
                      double *weight)
{
    const double root_k = sqrt(spring(b->n));
    rampwise_modes_plan_init(plan);
    for (size_t j = 0; j < b->n; ++j) {
        rampwise_system sys;
        (void)rampwise_system_natural(&sys, 2 * root_k * sin(angle(j, b->n)), CASE_ZETA);
        (void)rampwise_coeffs_make(&c[j], &sys, CASE_DT, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
        for (size_t i = 0; i < b->n; ++i)
            load[j] += shape(j, i, b->n);
        /* the top first */
        for (size_t o = 0; o < b->outputs; ++o)
            weight[j * b->outputs + o] = shape(j, b->n - 1 - o % b->n, b->n);
    }
    plan->modes = b->n;
    plan->inputs = 1;
    plan->outputs = b->outputs;
    plan->c = c;
    plan->load = load;
    plan->on_displacement = weight;
}

/* Total accelerations instead of displacements. */
static void ask_accelerations(rampwise_modes_plan *plan)
{
    double *const on_input = case_memory(plan->outputs * sizeof *on_input);
    for (size_t o = 0; o < plan->outputs; ++o)
        on_input[o] = 1;
    plan->on_acceleration = plan->on_displacement;
    plan->on_displacement = NULL;
    plan->on_input = on_input;
}

/* Equipment of every period from the building's fastest to ten times its slowest. */
static void add_pieces(const building *b, rampwise_modes_plan *plan, size_t pieces)
{
    rampwise_system *const system = case_memory(pieces * sizeof *system);
    size_t *const point = case_memory(pieces * sizeof *point);
    const double fastest = pi / sqrt(spring(b->n)), slowest = 10;
    for (size_t i = 0; i < pieces; ++i) {
        const double period = fastest * pow(slowest / fastest, (double)i / (double)(pieces - 1));
        (void)rampwise_system_period(&system[i], period, CASE_ZETA);
        point[i] = i % plan->outputs;
    }
    plan->equipment_count = pieces;
    plan->equipment = system;
    plan->point = point;
}

static building *make(const double *p, const wish *w)
{
    building *const b = case_memory(sizeof *b);
    const size_t n = w->n, outputs = w->outputs;
    rampwise_modes_plan plan;
    b->n = n;
    b->outputs = outputs;
    b->p = p;
    b->output = case_memory(CASE_SAMPLES * outputs * sizeof *b->output);
    make_plan(b, &plan, case_memory(n * sizeof(rampwise_coeffs)), case_memory(n * sizeof(double)),
              case_memory(n * outputs * sizeof(double)));
    if (w->accelerations)
        ask_accelerations(&plan);
    if (w->pieces > 0)
        add_pieces(b, &plan, (size_t)w->pieces);
    plan.peaks = w->peaks;
    if (rampwise_modes_create(&plan, &b->modes) != RAMPWISE_OK)
        fprintf(stderr, "bench: no modes\n");
    return b;
}

static void once(void *self)
{
    building *const b = self;
    (void)rampwise_modes_start(b->modes, NULL);
    (void)rampwise_modes_run(b->modes, CASE_SAMPLES, b->p, b->output, NULL);
}

/* Newmark's average acceleration on the full matrices, C from all modes' damping; u of the top. */
typedef struct direct {
    const bench_case *in;
    size_t n, parts; /* parts of a sample's interval */
    double h;
    gsl_matrix *K, *C, *factor;
    gsl_vector *u, *v, *a, *right;
    double *top;
} direct;

static void fill_matrices(direct *d)
{
    const size_t n = d->n;
    const double k = spring(n), root_k = sqrt(k);
    for (size_t i = 0; i < n; ++i) {
        gsl_matrix_set(d->K, i, i, i + 1 < n ? 2 * k : k);
        if (i > 0) {
            gsl_matrix_set(d->K, i, i - 1, -k);
            gsl_matrix_set(d->K, i - 1, i, -k);
        }
        for (size_t l = 0; l < n; ++l) {
            double sum = 0;
            for (size_t j = 0; j < n; ++j)
                sum += shape(j, i, n) * 4 * CASE_ZETA * root_k * sin(angle(j, n)) * shape(j, l, n);
            gsl_matrix_set(d->C, i, l, sum);
        }
    }
}

/* M + h/2 C + h^2/4 K */
static void refine(direct *d, size_t parts)
{
    d->parts = parts;
    d->h = CASE_DT / (double)parts;
    for (size_t i = 0; i < d->n; ++i)
        for (size_t l = 0; l < d->n; ++l)
            gsl_matrix_set(d->factor, i, l,
                           (i == l) + d->h / 2 * gsl_matrix_get(d->C, i, l) +
                               d->h * d->h / 4 * gsl_matrix_get(d->K, i, l));
    gsl_linalg_cholesky_decomp1(d->factor);
}

/* u and v without the new acceleration, which then comes from M a = -p - C v - K u. */
static void newmark_step(direct *d, double p)
{
    gsl_blas_daxpy(d->h, d->v, d->u);
    gsl_blas_daxpy(d->h * d->h / 4, d->a, d->u);
    gsl_blas_daxpy(d->h / 2, d->a, d->v);
    gsl_vector_set_all(d->right, -p);
    gsl_blas_dsymv(CblasLower, -1, d->C, d->v, 1, d->right);
    gsl_blas_dsymv(CblasLower, -1, d->K, d->u, 1, d->right);
    gsl_linalg_cholesky_solve(d->factor, d->right, d->a);
    gsl_blas_daxpy(d->h * d->h / 4, d->a, d->u);
    gsl_blas_daxpy(d->h / 2, d->a, d->v);
}

static void direct_once(void *self)
{
    direct *const d = self;
    gsl_vector_set_zero(d->u);
    gsl_vector_set_zero(d->v);
    gsl_vector_set_zero(d->a);
    for (size_t i = 0; i < d->in->stretch; ++i) {
        const double before = i > 0 ? d->in->p[i - 1] : 0, change = d->in->p[i] - before;
        for (size_t part = 1; part <= d->parts; ++part)
            newmark_step(d, before + change * (double)part / (double)d->parts);
        d->top[i] = gsl_vector_get(d->u, d->n - 1);
    }
}

static double error_of(direct *d, const building *b)
{
    double peak = 0, error = 0;
    direct_once(d);
    for (size_t i = 0; i < d->in->stretch; ++i) {
        const double exact = b->output[i * b->outputs];
        peak = fmax(peak, fabs(exact));
        error = fmax(error, fabs(exact - d->top[i]));
    }
    return error / peak;
}

/* The fewest parts, to some percent, that bring the error to the target; it falls with their square. */
static double refine_to(direct *d, const building *b, double target)
{
    size_t parts = 1;
    for (;;) {
        refine(d, parts);
        const double error = error_of(d, b);
        if (error <= target || parts > 512)
            return error;
        const size_t next = (size_t)(0.98 * (double)parts * sqrt(error / target));
        parts = next > parts ? next : parts + 1;
    }
}

static void add_direct(task_list *list, const bench_case *in, building *b, double target, const char *id,
                       const char *name)
{
    direct *const d = case_memory(sizeof *d);
    const size_t n = b->n;
    d->in = in;
    d->n = n;
    d->K = gsl_matrix_calloc(n, n);
    d->C = gsl_matrix_calloc(n, n);
    d->factor = gsl_matrix_calloc(n, n);
    d->u = gsl_vector_calloc(n);
    d->v = gsl_vector_calloc(n);
    d->a = gsl_vector_calloc(n);
    d->right = gsl_vector_calloc(n);
    d->top = case_memory(CASE_SAMPLES * sizeof *d->top);
    fill_matrices(d);
    once(b);
    const double error = refine_to(d, b, target);
    task_add(list, (task){.kind = TASK_PART,
                          .id = id,
                          .name = name,
                          .gives = "u of the top",
                          .units = (double)n * (double)in->stretch,
                          .self = d,
                          .once = direct_once,
                          .slow = 1,
                          .error = error,
                          .error_known = 1});
}

static building *add(task_list *list, const double *p, const char *id, const char *name, wish w)
{
    building *const b = make(p, &w);
    task_add(list, (task){.kind = TASK_PART,
                          .id = id,
                          .name = name,
                          .gives = w.pieces > 0 ? "outputs, equipment" : "outputs",
                          .units = (double)w.n * CASE_SAMPLES,
                          .self = b,
                          .once = once,
                          .slow = w.n >= 1000});
    return b;
}

/* Peaks where they are dear: total accelerations, and equipment, under the case's record and under white noise. */
static void add_dear(task_list *list, const double *p, const double *white)
{
    (void)add(list, p, "modes_100_total", "100 modes, 50 total accelerations", (wish){100, OUTPUTS, 0, 1, 0});
    (void)add(list, p, "modes_100_total_peaks", "the same and peaks", (wish){100, OUTPUTS, 1, 1, 0});
    (void)add(list, white, "modes_100_total_white", "the same and peaks, white noise",
              (wish){100, OUTPUTS, 1, 1, 0});
    (void)add(list, p, "equipment_100", "100 modes, 10 floors, 100 pieces", (wish){100, 10, 0, 1, PIECES});
    (void)add(list, p, "equipment_100_peaks", "the same and peaks", (wish){100, 10, 1, 1, PIECES});
    (void)add(list, white, "equipment_100_white", "the same and peaks, white noise",
              (wish){100, 10, 1, 1, PIECES});
}

void ours_modes_tasks(task_list *list, const bench_case *in)
{
    double *const white = case_memory(CASE_SAMPLES * sizeof *white);
    case_white(white);
    building *const ten = add(list, in->p, "modes_10", "10 modes, 50 outputs", (wish){10, OUTPUTS, 0, 0, 0});
    building *const hundred =
        add(list, in->p, "modes_100", "100 modes, 50 outputs", (wish){100, OUTPUTS, 0, 0, 0});
    (void)add(list, in->p, "modes_1000", "1,000 modes, 50 outputs", (wish){1000, OUTPUTS, 0, 0, 0});
    (void)add(list, in->p, "modes_10000", "10,000 modes, 50 outputs", (wish){MOST, OUTPUTS, 0, 0, 0});
    (void)add(list, in->p, "modes_1000_one", "1,000 modes, 1 output", (wish){1000, 1, 0, 0, 0});
    (void)add(list, in->p, "modes_100_peaks", "100 modes, 50 outputs and peaks",
              (wish){100, OUTPUTS, 1, 0, 0});
    add_dear(list, in->p, white);
    add_direct(list, in, ten, 1e-3, "newmark_10", "Newmark on full matrices, 10 masses, error 1e-3");
    add_direct(list, in, ten, 1e-4, "newmark_10_fine", "Newmark on full matrices, 10 masses, error 1e-4");
    add_direct(list, in, hundred, 1e-3, "newmark_100", "Newmark on full matrices, 100 masses, error 1e-3");
    add_direct(list, in, hundred, 1e-4, "newmark_100_fine",
               "Newmark on full matrices, 100 masses, error 1e-4");
}
