/* GSL's adaptive drivers for differential equations, stopped at every sample, where the load has its corners.
   Displacement and velocity are in units of the largest displacement, and of that times w, so that one
   tolerance, absolute and relative, suits every oscillator.

   The multistep method starts afresh at every sample: its memory reaches across the corners, and without that
   it is ten times further off at the looser tolerance, for two thirds of the cost. The one-step methods go on,
   which is quicker and no less accurate: u'' is continuous at the samples. */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_odeiv2.h>
#include <math.h>
#include "methods.h"

typedef struct scene {
    double w, twice_zeta, unit; /* unit: the largest displacement */
    double load, slope;         /* p/(k unit) at the start of the present interval, and its rate */
} scene;

typedef struct solver {
    const bench_case *in;
    int afresh;
    size_t first, end; /* of the few oscillators */
    scene scene[CASE_FEW];
    gsl_odeiv2_system equation[CASE_FEW];
    gsl_odeiv2_driver *driver[CASE_FEW];
    double u[CASE_SAMPLES];
} solver;

static int derivative(double t, const double y[], double dydt[], void *context)
{
    const scene *const s = context;
    dydt[0] = s->w * y[1];
    dydt[1] = s->w * (s->load + s->slope * t - y[0] - s->twice_zeta * y[1]);
    return GSL_SUCCESS;
}

static void walk(solver *s, size_t k, double *u)
{
    scene *const sc = &s->scene[k];
    const double scale = 1 / (sc->w * sc->w * sc->unit);
    double y[2] = {0, 0}, before = 0;
    gsl_odeiv2_driver_reset_hstart(s->driver[k], CASE_DT);
    for (size_t i = 0; i < s->in->stretch; ++i) {
        const double now = s->in->p[i] * scale;
        double t = 0;
        sc->load = before;
        sc->slope = (now - before) / CASE_DT;
        if (s->afresh)
            gsl_odeiv2_driver_reset(s->driver[k]);
        if (gsl_odeiv2_driver_apply(s->driver[k], &t, CASE_DT, y) != GSL_SUCCESS)
            y[0] = NAN;
        u[i] = y[0] * sc->unit;
        before = now;
    }
}

static void once(void *self)
{
    solver *const s = self;
    for (size_t k = s->first; k < s->end; ++k)
        walk(s, k, s->u);
}

static size_t history(void *self, size_t j, double *u)
{
    for (size_t k = 0; k < CASE_FEW; ++k)
        if (case_spread(k, CASE_FEW) == j) {
            walk(self, k, u);
            return ((solver *)self)->in->stretch;
        }
    return 0;
}

static double largest_displacement(const bench_case *in, size_t j, double *u)
{
    rampwise_state s;
    double largest = 0;
    rampwise_start(&s, 0, 0, 0);
    (void)rampwise_run(&in->c[j], &s, in->stretch, in->p, &(rampwise_history){.u = u}, NULL);
    for (size_t i = 0; i < in->stretch; ++i)
        largest = fmax(largest, fabs(u[i]));
    return largest;
}

static solver *make(const bench_case *in, const gsl_odeiv2_step_type *type, double tolerance, size_t first,
                    size_t end)
{
    solver *const s = case_memory(sizeof *s);
    s->in = in;
    s->afresh = type == gsl_odeiv2_step_msadams;
    s->first = first;
    s->end = end;
    for (size_t k = 0; k < CASE_FEW; ++k) {
        const size_t j = case_spread(k, CASE_FEW);
        const double w = sqrt(in->sys[j].stiffness);
        s->scene[k] = (scene){.w = w, .twice_zeta = in->sys[j].damper / w};
        s->scene[k].unit = largest_displacement(in, j, s->u);
        s->equation[k] = (gsl_odeiv2_system){derivative, NULL, 2, &s->scene[k]};
        s->driver[k] = gsl_odeiv2_driver_alloc_y_new(&s->equation[k], type, CASE_DT, tolerance, tolerance);
    }
    return s;
}

static void add(task_list *list, const bench_case *in, const char *id, const char *name,
                const gsl_odeiv2_step_type *type, double tolerance, size_t first, size_t end)
{
    const int all = end - first == CASE_FEW;
    task_add(list, (task){.kind = all ? TASK_METHOD : TASK_PART,
                          .id = id,
                          .name = name,
                          .gives = "u, few",
                          .units = (double)(end - first) * (double)in->stretch,
                          .self = make(in, type, tolerance, first, end),
                          .once = once,
                          .slow = type == gsl_odeiv2_step_msadams,
                          .history = all ? history : NULL});
}

void gsl_tasks(task_list *list, const bench_case *in)
{
    const gsl_odeiv2_step_type *const rkf45 = gsl_odeiv2_step_rkf45, *const rk8pd = gsl_odeiv2_step_rk8pd,
                                      *const msadams = gsl_odeiv2_step_msadams;
    gsl_set_error_handler_off();
    add(list, in, "gsl_rkf45_6", "GSL rkf45, tolerance 1e-6", rkf45, 1e-6, 0, CASE_FEW);
    add(list, in, "gsl_rkf45_10", "GSL rkf45, tolerance 1e-10", rkf45, 1e-10, 0, CASE_FEW);
    add(list, in, "gsl_rk8pd_6", "GSL rk8pd, tolerance 1e-6", rk8pd, 1e-6, 0, CASE_FEW);
    add(list, in, "gsl_rk8pd_10", "GSL rk8pd, tolerance 1e-10", rk8pd, 1e-10, 0, CASE_FEW);
    add(list, in, "gsl_msadams_6", "GSL msadams, tolerance 1e-6", msadams, 1e-6, 0, CASE_FEW);
    add(list, in, "gsl_msadams_10", "GSL msadams, tolerance 1e-10", msadams, 1e-10, 0, CASE_FEW);
    add(list, in, "gsl_rk8pd_10_shortest", "", rk8pd, 1e-10, 0, 1);
    add(list, in, "gsl_rk8pd_10_longest", "", rk8pd, 1e-10, CASE_FEW - 1, CASE_FEW);
}
