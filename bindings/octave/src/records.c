/* Whole records: systems, coefficients, responses, peaks, and lists for spectra. */
#include <math.h>
#include <string.h>
#include "gateway.h"

/* systems, dt, input, between -> A B C D A' B' C' D' A-1 B'-1, row of u'', row of total: columns of 18 */
void coefficients(mxArray **out, const mxArray **in)
{
    const size_t n = count_systems(in[0]);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    answer(out, RAMPWISE_OK, 0);
    out[2] = matrix(18, n);
    for (size_t i = 0; i < n; ++i)
        memcpy(mxGetPr(out[2]) + 18 * i, &c[i], 18 * sizeof(double));
}

/* way, values, damping ratios of the same number -> systems */
void system_from(mxArray **out, const mxArray **in)
{
    const char *const way = text(in[0]);
    int (*const make)(rampwise_system *, double, double) =
        strcmp(way, "period") == 0      ? rampwise_system_period
        : strcmp(way, "frequency") == 0 ? rampwise_system_hertz
        : strcmp(way, "omega") == 0     ? rampwise_system_natural
                                        : NULL;
    if (make == NULL)
        refuse("the way is period, frequency or omega");
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const double *const value = mxGetPr(in[1]), *const zeta = doubles(in[2], n);
    mxArray *const made = matrix(3, n);
    for (size_t i = 0; i < n; ++i) {
        rampwise_system s;
        const int status = make(&s, value[i], zeta[i]);
        if (status != RAMPWISE_OK) {
            answer(out, status, i + 1);
            return;
        }
        memcpy(mxGetPr(made) + 3 * i, (double[3]){s.mass, s.damper, s.stiffness}, 3 * sizeof(double));
    }
    answer(out, RAMPWISE_OK, 0);
    out[2] = made;
}

/* ---- whole records ---- */

/* response, response_f32: systems, dt, input, between, start, u0, v0, samples (of class double, single), wanted, times
   (empty where regular) -> u, v, u'', total, relative displacement and velocity, forces of spring and damper.
   One column of answers for each system or column of samples; where both are many they go in pairs. */
enum { AT_ONCE, BY_A_RAMP, SETTLED }; /* the starts of step.h */

/* The samples after the first; t holds the first's time too. */
static int run_rest(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *t, const double *p,
                    const rampwise_history *out, size_t *bad)
{
    if (t == NULL)
        return rampwise_run(c, s, n, p, out, bad);
    double last = t[0];
    return rampwise_run_at(c, s, &last, n, t + 1, p, out, bad);
}

/* There are no irregular times in single precision. */
static int run_rest_f32(const rampwise_coeffs_f32 *c, rampwise_state_f32 *s, size_t n, const double *t,
                        const float *p, const rampwise_history_f32 *out, size_t *bad)
{
    (void)t;
    return rampwise_run_f32(c, s, n, p, out, bad);
}

#define BODY "response_body.h"
#include "both_precisions.h"

/* ---- peaks ---- */

static const int quantities[3] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY, RAMPWISE_TOTAL_ACCELERATION};

static double seconds(const rampwise_instant *at, double dt)
{
    return at->sample == UINT64_MAX ? INFINITY : ((double)at->sample + at->fraction) * dt;
}

void put_peak(double *six, const rampwise_peak *peak, double dt)
{
    const rampwise_instant *const larger = rampwise_peak_larger(peak);
    six[0] = larger->value;
    six[1] = seconds(larger, dt);
    six[2] = peak->high.value;
    six[3] = seconds(&peak->high, dt);
    six[4] = peak->low.value;
    six[5] = seconds(&peak->low, dt);
}

/* error of high, of low, abrupt */
static void put_evidence(double *three, const rampwise_evidence *evidence)
{
    three[0] = evidence->error_high;
    three[1] = evidence->error_low;
    three[2] = evidence->abrupt;
}

/* One quantity of one column of samples; three is NULL where there is no evidence. */
static int put_peaks(const rampwise_peaks *object, size_t systems, int quantity, unsigned question, double dt,
                     double *six, double *three)
{
    rampwise_peak *const found = mxCalloc(systems, sizeof *found);
    rampwise_evidence *const evidence = mxCalloc(systems, sizeof *evidence);
    int status = rampwise_peaks_get(object, quantity, question, found);
    if (status == RAMPWISE_OK && three != NULL)
        status = rampwise_peaks_evidence(object, quantity, question, evidence);
    for (size_t i = 0; status == RAMPWISE_OK && i < systems; ++i) {
        put_peak(six + 6 * i, &found[i], dt);
        if (three != NULL)
            put_evidence(three + 3 * i, &evidence[i]);
    }
    mxFree(found);
    mxFree(evidence);
    return status;
}

/* From in: systems, dt, input, between, samples, flags of the run, flags of the question
   -> 6 x (systems x quantities x columns of samples), 3 x the same where the run has evidence */
void peaks(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[4])), columns = mxGetN(in[4]), systems = count_systems(in[0]);
    const unsigned run = (unsigned)integer(in[5]), question = (unsigned)integer(in[6]);
    const double dt = scalar(in[1]);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    rampwise_peaks *object;
    const size_t bytes = rampwise_peaks_size(systems);
    int status = rampwise_peaks_init(memory(bytes, rampwise_peaks_alignment()), bytes, systems, c, 3,
                                     quantities, run, RAMPWISE_FASTEST, &object);
    const int with_evidence = (run & RAMPWISE_EVIDENCE) != 0;
    mxArray *const made = matrix(6, systems * 3 * columns);
    mxArray *const evidence = with_evidence ? matrix(3, systems * 3 * columns) : empty();
    size_t bad = 0;
    for (size_t j = 0; status == RAMPWISE_OK && j < columns; ++j) {
        bad = j * n;
        size_t at = 0;
        status = rampwise_peaks_start(object, NULL);
        if (status == RAMPWISE_OK)
            status = rampwise_peaks_run(object, n, mxGetPr(in[4]) + j * n, &at);
        bad += at;
        for (size_t q = 0; status == RAMPWISE_OK && q < 3; ++q) {
            const size_t first = (3 * j + q) * systems;
            status = put_peaks(object, systems, quantities[q], question, dt, mxGetPr(made) + 6 * first,
                               with_evidence ? mxGetPr(evidence) + 3 * first : NULL);
        }
    }
    if (answer(out, status, status == RAMPWISE_OK ? 0 : bad + 1) != RAMPWISE_OK)
        return;
    out[2] = made;
    out[3] = evidence;
}

/* The limit of stiff oscillators. From in: dt, input, samples, flags, whether with evidence
   -> 6 x (quantities x columns of samples), 3 x the same with evidence */
void rigid_peaks(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[2])), columns = mxGetN(in[2]);
    const double dt = scalar(in[0]), omega = INFINITY, zeta = 0;
    const int input = integer(in[1]), with_evidence = integer(in[4]);
    const unsigned flags = (unsigned)integer(in[3]);
    mxArray *const made = matrix(6, 3 * columns);
    mxArray *const evidence = with_evidence ? matrix(3, 3 * columns) : empty();
    for (size_t j = 0; j < columns; ++j)
        for (size_t q = 0; q < 3; ++q) {
            rampwise_peak peak;
            size_t bad = 0;
            rampwise_evidence of_it;
            const double *const p = mxGetPr(in[2]) + j * n;
            const int status =
                with_evidence
                    ? rampwise_spectrum_evidence(n, dt, p, input, 1, &omega, &zeta, quantities[q], flags,
                                                 &peak, &of_it, &bad)
                    : rampwise_spectrum(n, dt, p, input, 1, &omega, &zeta, quantities[q], flags, &peak, &bad);
            if (status != RAMPWISE_OK) {
                answer(out, status, bad + 1 + j * n);
                return;
            }
            put_peak(mxGetPr(made) + 6 * (3 * j + q), &peak, dt);
            if (with_evidence)
                put_evidence(mxGetPr(evidence) + 3 * (3 * j + q), &of_it);
        }
    answer(out, RAMPWISE_OK, 0);
    out[2] = made;
    out[3] = evidence;
}

enum { LONGEST_LIST = 100000000 };

/* A refusal, or the list. */
static void put_list(mxArray **out, int status, mxArray *list)
{
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = list;
}

static mxArray *list_of(size_t n)
{
    if (n > LONGEST_LIST)
        refuse("a list is too long");
    return matrix(n, 1);
}

/* first, last, how many -> a column */
void list_log(mxArray **out, const mxArray **in)
{
    const size_t n = whole_number(in[2]);
    mxArray *const list = list_of(n);
    put_list(out, rampwise_list_log(n, scalar(in[0]), scalar(in[1]), mxGetPr(list)), list);
}

/* first, last, how many an octave -> a column */
void list_octaves(mxArray **out, const mxArray **in)
{
    const double first = scalar(in[0]), last = scalar(in[1]);
    const size_t per_octave = whole_number(in[2]);
    size_t n = 0;
    int status = rampwise_list_octaves(first, last, per_octave, 0, NULL, &n);
    mxArray *const list = list_of(n);
    if (status == RAMPWISE_OK)
        status = rampwise_list_octaves(first, last, per_octave, n, mxGetPr(list), &n);
    put_list(out, status, list);
}
