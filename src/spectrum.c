#include "rampwise/spectrum.h"

#include <math.h>
#include <stddef.h>
#include "peaks_group.h"
#include "rampwise/status.h"
#include "spectrum_list.h"
#include "valid.h"

typedef struct record {
    record_kind kind;
    const double *p;
    unsigned flags;
} record;

/* One group through the whole record. */
static void respond(const record *r, peaks_group *g)
{
    const kernels *const k = rampwise_kernels_(RAMPWISE_FASTEST);
    rampwise_group_start_(g, NULL, r->p[0]);
    for (size_t done = 1, part = 0; done < r->kind.n; done += part) {
        segment along;
        part = r->kind.n - done < SEGMENT ? r->kind.n - done : SEGMENT;
        rampwise_segment_make_(&along, done - 1, r->p[done > 1 ? done - 2 : 0], r->p[done - 1], part,
                               r->p + done);
        rampwise_group_run_(k, g, &along);
    }
}

/* A stiff oscillator without limit: no relative motion, and the mass goes with its base, from rest and to rest. */
static void follow_base(const record *r, rampwise_peak *peak)
{
    const int moves = r->kind.quantity == RAMPWISE_TOTAL_ACCELERATION && r->flags != RAMPWISE_RESIDUAL;
    const rampwise_instant nothing = {0, r->flags == RAMPWISE_RESIDUAL ? r->kind.n - 1 : 0, 0};
    *peak = (rampwise_peak){nothing, nothing};
    for (size_t i = 0; moves && i < r->kind.n; ++i) {
        if (r->kind.input == RAMPWISE_BASE_ACCELERATION)
            note_value(peak, r->p[i], i, 0);
        else if (r->kind.input == RAMPWISE_BASE_VELOCITY && i > 0)
            note_value(peak, (r->p[i] - r->p[i - 1]) / r->kind.dt, i - 1, 0);
    }
}

int rampwise_record_kind_check_(const record_kind *r)
{
    if (r->n == 0)
        return RAMPWISE_ERROR_COUNT;
    if (!isfinite(r->dt) || r->dt <= 0)
        return RAMPWISE_ERROR_INTERVAL;
    if (r->input < RAMPWISE_FORCE || r->input > RAMPWISE_BASE_DISPLACEMENT)
        return RAMPWISE_ERROR_INPUT;
    if (r->quantity < RAMPWISE_DISPLACEMENT || r->quantity > RAMPWISE_TOTAL_ACCELERATION)
        return RAMPWISE_ERROR_QUANTITY;
    return RAMPWISE_OK;
}

int rampwise_record_is_stiff_(const record_kind *r, double omega)
{
    return isinf(omega) && omega > 0 && r->input != RAMPWISE_BASE_DISPLACEMENT;
}

int rampwise_record_oscillator_(const record_kind *r, double omega, double zeta, rampwise_coeffs *c)
{
    rampwise_system system;
    const int status = rampwise_system_natural(&system, omega, zeta);
    return status == RAMPWISE_OK ? rampwise_coeffs_make(c, &system, r->dt, r->input, RAMPWISE_RAMP) : status;
}

int rampwise_record_list_check_(const record_kind *r, size_t n_osc, const double *omega, const double *zeta,
                                size_t *bad)
{
    for (size_t i = 0; i < n_osc; ++i) {
        rampwise_coeffs c;
        const int stiff = rampwise_record_is_stiff_(r, omega[i]);
        const int status = !stiff              ? rampwise_record_oscillator_(r, omega[i], zeta[i], &c)
                           : isfinite(zeta[i]) ? RAMPWISE_OK
                                               : RAMPWISE_ERROR_DAMPER;
        if (status != RAMPWISE_OK)
            return blame(status, i, bad);
    }
    return RAMPWISE_OK;
}

static int check_record(const record *r, size_t *bad)
{
    const int status = rampwise_record_kind_check_(&r->kind);
    if (status != RAMPWISE_OK)
        return status;
    const unsigned when = r->flags & ~(unsigned)RAMPWISE_AT_SAMPLES;
    if (when != 0 && when != RAMPWISE_RESIDUAL && when != RAMPWISE_MAXIMAX)
        return RAMPWISE_ERROR_FLAGS;
    return check_samples(r->kind.n, r->p, bad);
}

/* The next oscillators until LANES of them are not stiff; returns how many that took. */
static size_t respond_next(const record *r, size_t left, const double *omega, const double *zeta,
                           int at_samples, rampwise_peak *peak)
{
    rampwise_coeffs c[LANES];
    size_t which[LANES], count = 0, taken = 0;
    for (; taken < left && count < LANES; ++taken) {
        if (rampwise_record_is_stiff_(&r->kind, omega[taken])) {
            follow_base(r, &peak[taken]);
            continue;
        }
        (void)rampwise_record_oscillator_(&r->kind, omega[taken], zeta[taken], &c[count]);
        which[count++] = taken;
    }
    peaks_group g;
    rampwise_group_make_(&g, count, c, 1, &r->kind.quantity, at_samples ? RAMPWISE_AT_SAMPLES : 0);
    respond(r, &g);
    for (size_t j = 0; j < count; ++j)
        peak[which[j]] =
            rampwise_group_peak_(rampwise_kernels_(RAMPWISE_FASTEST), &g, j, 0, r->flags,
                                 r->p[r->kind.n > 1 ? r->kind.n - 2 : 0], r->p[r->kind.n - 1], r->kind.n - 1);
    return taken;
}

int rampwise_spectrum(size_t n, double dt, const double *p, int input, size_t n_osc, const double *omega,
                      const double *zeta, int quantity, unsigned flags, rampwise_peak *peak, size_t *bad)
{
    const record r = {{n, dt, input, quantity}, p, flags & ~(unsigned)RAMPWISE_AT_SAMPLES};
    if (p == NULL || (n_osc > 0 && (omega == NULL || zeta == NULL || peak == NULL)))
        return RAMPWISE_ERROR_MISSING;
    int status = check_record(&r, bad);
    if (status == RAMPWISE_OK)
        status = rampwise_record_list_check_(&r.kind, n_osc, omega, zeta, bad);
    for (size_t done = 0; status == RAMPWISE_OK && done < n_osc;)
        done += respond_next(&r, n_osc - done, omega + done, zeta + done, (flags & RAMPWISE_AT_SAMPLES) != 0,
                             peak + done);
    return status;
}

double rampwise_pseudo_velocity(double omega, const rampwise_peak *displacement)
{
    return omega * fabs(rampwise_peak_larger(displacement)->value);
}

double rampwise_pseudo_acceleration(double omega, const rampwise_peak *displacement)
{
    return omega * rampwise_pseudo_velocity(omega, displacement);
}

double rampwise_dynamic_load_factor(const rampwise_system *sys, const rampwise_peak *displacement, double p0)
{
    return sys->stiffness * fabs(rampwise_peak_larger(displacement)->value) / fabs(p0);
}

static int is_positive(double x)
{
    return isfinite(x) && x > 0;
}

/* first at 0, last at 1, exactly; neither overflows on the way. */
static double between(double first, double last, double fraction)
{
    if (fraction == 0 || fraction == 1)
        return fraction == 0 ? first : last;
    return pow(first, 1 - fraction) * pow(last, fraction);
}

int rampwise_list_log(size_t n, double first, double last, double *list)
{
    if (list == NULL && n > 0)
        return RAMPWISE_ERROR_MISSING;
    if (!is_positive(first) || !is_positive(last))
        return RAMPWISE_ERROR_FREQUENCY;
    for (size_t i = 0; i < n; ++i)
        list[i] = between(first, last, n > 1 ? (double)i / (double)(n - 1) : 0);
    return RAMPWISE_OK;
}

int rampwise_list_octaves(double first, double last, size_t per_octave, size_t capacity, double *list,
                          size_t *n)
{
    if (n == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!is_positive(first) || !is_positive(last) || last < first)
        return RAMPWISE_ERROR_FREQUENCY;
    if (per_octave == 0)
        return RAMPWISE_ERROR_COUNT;
    const size_t count = (size_t)floor((log2(last) - log2(first) + 1e-9) * (double)per_octave) + 1;
    if (list != NULL && count > capacity)
        return RAMPWISE_ERROR_COUNT;
    *n = count;
    for (size_t i = 0; list != NULL && i < count; ++i)
        list[i] = first * exp2((double)i / (double)per_octave);
    return RAMPWISE_OK;
}
