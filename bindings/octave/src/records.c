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

enum { AT_ONCE, BY_A_RAMP, SETTLED }; /* the starts of step.h */

typedef struct whole {
    size_t n, columns, systems;
    const double *p, *t; /* t is NULL for regular samples */
    const double *u0, *v0;
    int start;
    rampwise_coeffs *c;
} whole;

/* The first sample of a column, and the state there. */
static int begin(const whole *w, size_t j, rampwise_state *s)
{
    const rampwise_coeffs *const c = &w->c[w->systems > 1 ? j : 0];
    const double p0 = w->p[w->columns > 1 ? j * w->n : 0];
    if (w->start == SETTLED)
        return rampwise_start_settled(c, s, p0);
    rampwise_start(s, w->u0[j], w->v0[j], w->start == AT_ONCE ? p0 : 0);
    return RAMPWISE_OK;
}

static int respond(const whole *w, size_t j, const rampwise_history *h, size_t *bad)
{
    const rampwise_coeffs *const c = &w->c[w->systems > 1 ? j : 0];
    const double *const p = w->p + (w->columns > 1 ? j * w->n : 0);
    rampwise_state s;
    *bad = 0;
    int status = begin(w, j, &s);
    if (status != RAMPWISE_OK)
        return status;
    if (w->start == BY_A_RAMP)
        return rampwise_run(c, &s, w->n, p, h, bad);
    if (w->t == NULL)
        return rampwise_solve(c, s.u, s.v, w->n, p, h, bad);
    /* Entry 0 is the initial state; its own call refuses a sample that is not finite. */
    status = rampwise_solve(c, s.u, s.v, 1, p, h, bad);
    if (status != RAMPWISE_OK || w->n < 2)
        return status;
    double last = w->t[0];
    const rampwise_history rest = {h->u ? h->u + 1 : NULL, h->v ? h->v + 1 : NULL, h->a ? h->a + 1 : NULL,
                                   h->total ? h->total + 1 : NULL};
    status = rampwise_run_at(c, &s, &last, w->n - 1, w->t + 1, p + 1, &rest, bad);
    *bad += status != RAMPWISE_OK;
    return status;
}

/* From in: systems, dt, input, between, start, u0, v0, samples, wanted, times (empty where regular).
   One column of answers for each system or column of samples; where both are many they go in pairs. */
void response(mxArray **out, const mxArray **in)
{
    whole w = {.n = mxGetM(real_double(in[7])), .columns = mxGetN(in[7]), .systems = count_systems(in[0])};
    const size_t wide = w.systems > 1 ? w.systems : w.columns;
    if (w.n == 0 || w.systems == 0 || (w.columns > 1 ? w.columns : wide) != wide || w.columns == 0)
        refuse("systems and columns of samples must be as many, or one");
    w.start = integer(in[4]);
    w.u0 = doubles(in[5], wide);
    w.v0 = doubles(in[6], wide);
    w.p = mxGetPr(in[7]);
    w.t = mxIsEmpty(in[9]) ? NULL : doubles(in[9], w.n);
    if (w.start < AT_ONCE || w.start > SETTLED || (w.t != NULL && w.start == BY_A_RAMP))
        refuse("no such start");
    w.c = make_coefficients(out, in);
    if (w.c == NULL)
        return;
    answer(out, RAMPWISE_OK, 0);
    want_histories(out, in[8], w.n, wide);
    for (size_t j = 0; j < wide; ++j) {
        const rampwise_history h = histories(out, w.n, j);
        size_t bad;
        const int status = respond(&w, j, &h, &bad);
        if (status != RAMPWISE_OK) {
            answer(out, status, bad + 1 + (w.columns > 1 ? j * w.n : 0));
            return;
        }
    }
}

/* ---- peaks ---- */

static const int quantities[3] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY, RAMPWISE_TOTAL_ACCELERATION};

static double seconds(const rampwise_instant *at, double dt)
{
    return at->sample == UINT64_MAX ? INFINITY : ((double)at->sample + at->fraction) * dt;
}

/* larger in size, its time, high, its time, low, its time */
static void put_peak(double *six, const rampwise_peak *peak, double dt)
{
    const rampwise_instant *const larger = rampwise_peak_larger(peak);
    six[0] = larger->value;
    six[1] = seconds(larger, dt);
    six[2] = peak->high.value;
    six[3] = seconds(&peak->high, dt);
    six[4] = peak->low.value;
    six[5] = seconds(&peak->low, dt);
}

/* From in: systems, dt, input, between, samples, flags of the run, flags of the question
   -> 6 x (systems x quantities x columns of samples) */
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
    rampwise_peak *const found = mxCalloc(systems, sizeof *found);
    mxArray *const made = matrix(6, systems * 3 * columns);
    double *six = mxGetPr(made);
    size_t bad = 0;
    for (size_t j = 0; status == RAMPWISE_OK && j < columns; ++j) {
        bad = j * n;
        size_t at = 0;
        status = rampwise_peaks_start(object, NULL);
        if (status == RAMPWISE_OK)
            status = rampwise_peaks_run(object, n, mxGetPr(in[4]) + j * n, &at);
        bad += at;
        for (int q = 0; status == RAMPWISE_OK && q < 3; ++q) {
            status = rampwise_peaks_get(object, quantities[q], question, found);
            for (size_t i = 0; status == RAMPWISE_OK && i < systems; ++i, six += 6)
                put_peak(six, &found[i], dt);
        }
    }
    answer(out, status, status == RAMPWISE_OK ? 0 : bad + 1);
    if (status == RAMPWISE_OK)
        out[2] = made;
}

/* The limit of stiff oscillators. From in: dt, input, samples, flags -> 6 x (quantities x columns of samples) */
void rigid_peaks(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[2])), columns = mxGetN(in[2]);
    const double dt = scalar(in[0]), omega = INFINITY, zeta = 0;
    const int input = integer(in[1]), flags = integer(in[3]);
    mxArray *const made = matrix(6, 3 * columns);
    for (size_t j = 0; j < columns; ++j)
        for (size_t q = 0; q < 3; ++q) {
            rampwise_peak peak;
            size_t bad = 0;
            const int status = rampwise_spectrum(n, dt, mxGetPr(in[2]) + j * n, input, 1, &omega, &zeta,
                                                 quantities[q], (unsigned)flags, &peak, &bad);
            if (status != RAMPWISE_OK) {
                answer(out, status, bad + 1 + j * n);
                return;
            }
            put_peak(mxGetPr(made) + 6 * (3 * j + q), &peak, dt);
        }
    answer(out, RAMPWISE_OK, 0);
    out[2] = made;
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
