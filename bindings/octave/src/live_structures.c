/* Whole structures by their modes under samples as they come, with light equipment. */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "gateway.h"

typedef struct kept_structure {
    rampwise_modes *modes;
    double dt;
    size_t mode_count, inputs, outputs, pieces;
    size_t *point; /* [pieces] */
    double *begin; /* [2][modes]: displacements, velocities at sample 0 */
    int peaks, started;
} kept_structure;

static void release_structure(void *object)
{
    kept_structure *const k = object;
    rampwise_modes_free(k->modes);
    free(k->point);
    free(k->begin);
    free(k);
}

static const object_kind structures = {"structure", release_structure};

/* From in: load (inputs x modes); weights of outputs on displacement, velocity and acceleration (outputs x modes) and
   on inputs (outputs x inputs); whether peaks are wanted. */
static void take_weights(rampwise_modes_plan *plan, const mxArray **in)
{
    plan->inputs = mxGetM(real_double(in[0]));
    plan->outputs = mxGetM(real_double(in[1]));
    plan->load = of_size(in[0], plan->inputs, plan->modes);
    plan->on_displacement = of_size(in[1], plan->outputs, plan->modes);
    plan->on_velocity = of_size(in[2], plan->outputs, plan->modes);
    plan->on_acceleration = of_size(in[3], plan->outputs, plan->modes);
    plan->on_input = of_size(in[4], plan->outputs, plan->inputs);
    plan->peaks = integer(in[5]) != 0;
}

/* From in: systems, and the number of the output that each stands on, from 1. */
static void take_equipment(rampwise_modes_plan *plan, const mxArray **in)
{
    plan->equipment_count = count_systems(in[0]);
    const double *const given = mxGetPr(in[0]), *const on = doubles(in[1], plan->equipment_count);
    rampwise_system *const system = mxCalloc(plan->equipment_count + 1, sizeof *system);
    size_t *const point = mxCalloc(plan->equipment_count + 1, sizeof *point);
    for (size_t i = 0; i < plan->equipment_count; ++i) {
        system[i] = (rampwise_system){given[3 * i], given[3 * i + 1], given[3 * i + 2]};
        if (!(on[i] >= 1 && on[i] <= (double)plan->outputs) || on[i] != floor(on[i]))
            refuse("equipment stands on no output");
        point[i] = (size_t)on[i] - 1;
    }
    plan->equipment = system;
    plan->point = point;
}

/* NULL where there is no memory, or the status is an error. */
static kept_structure *keep(const rampwise_modes_plan *plan, const double *u, const double *v, int *status)
{
    const size_t modes = plan->modes, pieces = plan->equipment_count;
    kept_structure *const k = calloc(1, sizeof *k);
    *status = RAMPWISE_ERROR_MEMORY;
    if (k == NULL)
        return NULL;
    k->point = calloc(pieces + 1, sizeof *k->point);
    k->begin = calloc(2 * modes + 1, sizeof *k->begin);
    if (k->point != NULL && k->begin != NULL)
        *status = rampwise_modes_create(plan, &k->modes);
    if (*status != RAMPWISE_OK) {
        release_structure(k);
        return NULL;
    }
    k->dt = plan->c->dt;
    k->mode_count = modes;
    k->inputs = plan->inputs;
    k->outputs = plan->outputs;
    k->pieces = pieces;
    k->peaks = plan->peaks;
    memcpy(k->point, plan->point, pieces * sizeof *k->point);
    memcpy(k->begin, u, modes * sizeof *u);
    memcpy(k->begin + modes, v, modes * sizeof *v);
    return k;
}

/* systems, dt, input, between; load; weights on displacement, velocity, acceleration, input; whether peaks are wanted;
   equipment, outputs it stands on; displacements and velocities of the modes at sample 0 -> object */
void structure_make(mxArray **out, const mxArray **in)
{
    rampwise_modes_plan plan;
    rampwise_modes_plan_init(&plan);
    plan.modes = count_systems(in[0]);
    take_weights(&plan, in + 4);
    take_equipment(&plan, in + 10);
    const double *const u = doubles(in[12], plan.modes), *const v = doubles(in[13], plan.modes);
    plan.c = make_coefficients(out, in);
    if (plan.c == NULL)
        return;
    int status;
    kept_structure *const k = keep(&plan, u, v, &status);
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = object_keep(&structures, k);
}

/* object: the next sample is sample 0 */
void structure_start(mxArray **out, const mxArray **in)
{
    kept_structure *const k = object_find(in[0], &structures);
    k->started = 0;
    answer(out, RAMPWISE_OK, 0);
}

static int is_finite(size_t n, const double *x, size_t *bad)
{
    for (*bad = 0; *bad < n; ++*bad)
        if (!isfinite(x[*bad]))
            return 0;
    return 1;
}

/* Sample 0, after a look at all, so that a bad one changes nothing. Equipment is at rest against its point. */
static int begin(kept_structure *k, size_t n, const double *input, double *output,
                 const rampwise_history *history, size_t *bad)
{
    const int good = is_finite(n * k->inputs, input, bad);
    *bad = good ? 0 : *bad / k->inputs;
    int status = good ? rampwise_modes_set(k->modes, k->begin, k->begin + k->mode_count, input)
                      : RAMPWISE_ERROR_SAMPLE;
    if (status == RAMPWISE_OK)
        status = rampwise_modes_read(k->modes, output);
    if (status != RAMPWISE_OK)
        return status;
    k->started = 1;
    for (size_t i = 0; history->u != NULL && i < k->pieces; ++i) {
        history->u[i] = history->v[i] = history->total[i] = 0;
        history->a[i] = -output[k->point[i]];
    }
    return RAMPWISE_OK;
}

static int run(kept_structure *k, size_t n, const double *input, double *output,
               const rampwise_history *history, size_t *bad)
{
    const size_t first = n > 0 && !k->started;
    if (first) {
        const int status = begin(k, n, input, output, history, bad);
        if (status != RAMPWISE_OK)
            return status;
    }
    rampwise_history rest = *history;
    if (history->u != NULL && first)
        rest = (rampwise_history){history->u + k->pieces, history->v + k->pieces, history->a + k->pieces,
                                  history->total + k->pieces};
    const int status = rampwise_equipment_run(k->modes, n - first, input + first * k->inputs,
                                              output + first * k->outputs, &rest, bad);
    *bad += first;
    return status;
}

/* So many columns of numbers, none of them given yet. */
static mxArray *unknown(size_t rows, size_t columns)
{
    mxArray *const a = matrix(rows, columns);
    for (size_t i = 0; i < rows * columns; ++i)
        mxGetPr(a)[i] = NAN;
    return a;
}

/* object, samples (inputs x samples), whether equipment's histories are wanted -> outputs (outputs x samples),
   u, v, u'', total of equipment (pieces x samples); an overflow is a status beside answers, whose rest is NaN */
void structure_run(mxArray **out, const mxArray **in)
{
    kept_structure *const k = object_find(in[0], &structures);
    const size_t n = mxGetN(real_double(in[1]));
    const double *const input = of_size(in[1], k->inputs, n);
    const int wanted = integer(in[2]) != 0 && n > 0 && k->pieces > 0;
    answer(out, RAMPWISE_OK, 0);
    out[2] = unknown(k->outputs, n);
    for (int i = 3; i < 7; ++i)
        out[i] = unknown(k->pieces, wanted ? n : 0);
    rampwise_history history = {NULL, NULL, NULL, NULL};
    if (wanted)
        history = (rampwise_history){mxGetPr(out[3]), mxGetPr(out[4]), mxGetPr(out[5]), mxGetPr(out[6])};
    size_t bad = 0;
    const int status = run(k, n, input, mxGetPr(out[2]), &history, &bad);
    mxGetPr(out[0])[0] = status;
    mxGetPr(out[1])[0] = status == RAMPWISE_OK ? 0 : (double)bad + 1;
}

static mxArray *peaks_of(const rampwise_peak *peak, size_t n, double dt)
{
    mxArray *const a = matrix(6, n);
    for (size_t i = 0; i < n; ++i)
        put_peak(mxGetPr(a) + 6 * i, &peak[i], dt);
    return a;
}

/* out[5] to out[7] */
static int read_peaks(const kept_structure *k, mxArray **out)
{
    static const int quantities[2] = {RAMPWISE_DISPLACEMENT, RAMPWISE_TOTAL_ACCELERATION};
    rampwise_peak *const peak = mxCalloc(k->outputs + k->pieces, sizeof *peak);
    int status = rampwise_modes_peaks(k->modes, peak);
    if (status == RAMPWISE_OK)
        out[5] = peaks_of(peak, k->outputs, k->dt);
    for (int i = 0; status == RAMPWISE_OK && k->pieces > 0 && i < 2; ++i) {
        status = rampwise_equipment_peaks(k->modes, quantities[i], peak);
        out[6 + i] = peaks_of(peak, k->pieces, k->dt);
    }
    return status;
}

/* object -> outputs at the present sample, u and v of equipment, peaks (6 x outputs), those of the displacement and of
   the total acceleration of equipment (6 x pieces), empty where there are none. RAMPWISE_ERROR_NOT_MADE before sample 0 */
void structure_read(mxArray **out, const mxArray **in)
{
    const kept_structure *const k = object_find(in[0], &structures);
    if (answer(out, k->started ? RAMPWISE_OK : RAMPWISE_ERROR_NOT_MADE, 0) != RAMPWISE_OK)
        return;
    for (int i = 2; i < 5; ++i)
        out[i] = matrix(i == 2 ? k->outputs : k->pieces, 1);
    if (rampwise_modes_read(k->modes, mxGetPr(out[2])) != RAMPWISE_OK ||
        rampwise_equipment_get(k->modes, mxGetPr(out[3]), mxGetPr(out[4])) != RAMPWISE_OK ||
        (k->peaks && read_peaks(k, out) != RAMPWISE_OK))
        refuse("a structure cannot be read");
}

/* object -> uint8 column; RAMPWISE_ERROR_NOT_MADE before sample 0 */
void structure_save(mxArray **out, const mxArray **in)
{
    const kept_structure *const k = object_find(in[0], &structures);
    const size_t size = rampwise_modes_saved_size(k->modes);
    mxArray *const saved = zeros(mxUINT8_CLASS, size, 1);
    const int status =
        k->started ? rampwise_modes_save(k->modes, mxGetData(saved), size) : RAMPWISE_ERROR_NOT_MADE;
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = saved;
}

/* object, uint8 vector */
void structure_resume(mxArray **out, const mxArray **in)
{
    kept_structure *const k = object_find(in[0], &structures);
    if (!mxIsUint8(in[1]))
        refuse("saved bytes are of class uint8");
    const size_t size = mxGetNumberOfElements(in[1]);
    const int status =
        size > 0 ? rampwise_modes_resume(k->modes, mxGetData(in[1]), size) : RAMPWISE_ERROR_DAMAGED;
    k->started |= status == RAMPWISE_OK;
    answer(out, status, 0);
}
