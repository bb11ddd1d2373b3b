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

/* Which peaks: part is 0 (from sample 0 to the present), RAMPWISE_RESIDUAL or RAMPWISE_MAXIMAX; samples is how many of the
   free motion are looked at, at most. */
typedef struct peaks_question {
    int part;
    uint64_t samples;
} peaks_question;

static peaks_question question_from(const mxArray **in)
{
    const peaks_question question = {integer(in[0]), sample_number(in[1])};
    if (question.part != 0 && question.part != RAMPWISE_RESIDUAL && question.part != RAMPWISE_MAXIMAX)
        refuse("there is no such part of the time");
    return question;
}

enum { OF_OUTPUTS = 0 }; /* beside the quantities of equipment */

static int peaks_before(const kept_structure *k, int quantity, rampwise_peak *peak)
{
    return quantity == OF_OUTPUTS ? rampwise_modes_peaks(k->modes, peak)
                                  : rampwise_equipment_peaks(k->modes, quantity, peak);
}

static int peaks_after(const kept_structure *k, int quantity, uint64_t samples, rampwise_peak *peak,
                       double *later)
{
    return quantity == OF_OUTPUTS ? rampwise_modes_residual(k->modes, samples, peak, later)
                                  : rampwise_equipment_residual(k->modes, quantity, samples, peak, later);
}

static rampwise_peak of_both_times(const rampwise_peak *before, const rampwise_peak *after)
{
    return (rampwise_peak){after->high.value > before->high.value ? after->high : before->high,
                           after->low.value < before->low.value ? after->low : before->low};
}

/* A column for each of n outputs or pieces: six of put_peak and, but for part 0, what no value after the samples that
   were looked at exceeds in size. */
static int read_peaks(const kept_structure *k, int quantity, size_t n, const peaks_question *question,
                      mxArray **out)
{
    const int part = question->part;
    const size_t rows = part == 0 ? 6 : 7;
    rampwise_peak *const before = mxCalloc(n, sizeof *before), *const after = mxCalloc(n, sizeof *after);
    double *const later = mxCalloc(n, sizeof *later);
    int status = part == RAMPWISE_RESIDUAL ? RAMPWISE_OK : peaks_before(k, quantity, before);
    if (status == RAMPWISE_OK && part != 0)
        status = peaks_after(k, quantity, question->samples, after, later);
    *out = matrix(rows, n);
    for (size_t i = 0; i < n; ++i) {
        double *const to = mxGetPr(*out) + rows * i;
        const rampwise_peak both = of_both_times(&before[i], &after[i]);
        put_peak(to, part == 0 ? &before[i] : part == RAMPWISE_RESIDUAL ? &after[i] : &both, k->dt);
        if (part != 0)
            to[6] = later[i];
    }
    return status;
}

/* out[5] to out[7] */
static int read_all_peaks(const kept_structure *k, const peaks_question *question, mxArray **out)
{
    static const int quantities[2] = {RAMPWISE_DISPLACEMENT, RAMPWISE_TOTAL_ACCELERATION};
    int status = read_peaks(k, OF_OUTPUTS, k->outputs, question, &out[5]);
    for (int i = 0; status == RAMPWISE_OK && k->pieces > 0 && i < 2; ++i)
        status = read_peaks(k, quantities[i], k->pieces, question, &out[6 + i]);
    return status;
}

/* object, part of the time, samples of free motion -> outputs at the present sample, u and v of equipment, peaks (6 or 7
   x outputs), those of the displacement and of the total acceleration of equipment (6 or 7 x pieces), empty where there
   are none. RAMPWISE_ERROR_NOT_MADE before sample 0 */
void structure_read(mxArray **out, const mxArray **in)
{
    const kept_structure *const k = object_find(in[0], &structures);
    const peaks_question question = question_from(in + 1);
    if (answer(out, k->started ? RAMPWISE_OK : RAMPWISE_ERROR_NOT_MADE, 0) != RAMPWISE_OK)
        return;
    for (int i = 2; i < 5; ++i)
        out[i] = matrix(i == 2 ? k->outputs : k->pieces, 1);
    if (rampwise_modes_read(k->modes, mxGetPr(out[2])) != RAMPWISE_OK ||
        rampwise_equipment_get(k->modes, mxGetPr(out[3]), mxGetPr(out[4])) != RAMPWISE_OK ||
        (k->peaks && read_all_peaks(k, &question, out) != RAMPWISE_OK))
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
