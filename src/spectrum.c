#include "rampwise/spectrum.h"

#include <math.h>
#include <stddef.h>
#include "ends.h"
#include "lanes.h"
#include "peaks_group.h"
#include "rampwise/status.h"
#include "samples.h"
#include "spectrum_list.h"
#include "valid.h"

typedef struct record {
    record_kind kind;
    const double *p;
    unsigned looks, when; /* flags of rampwise_peaks_init and of rampwise_peaks_get */
    uint32_t abrupt;
} record;

static int has_evidence(const record *r)
{
    return (r->looks & RAMPWISE_EVIDENCE) != 0;
}

/* One group through the whole record, or with evidence up to its last sample but one. */
static void respond(const record *r, peaks_group *g, input_end *end)
{
    const kernels *const k = rampwise_kernels_(RAMPWISE_FASTEST);
    const size_t behind = has_evidence(r) && r->kind.n > 1;
    *end = (input_end){.p = r->p[0], .p_before = r->p[0]};
    rampwise_group_start_(g, NULL, r->p[0]);
    for (size_t done = 1, part = 0; done + behind < r->kind.n; done += part) {
        segment along;
        part = r->kind.n - behind - done < SEGMENT ? r->kind.n - behind - done : SEGMENT;
        rampwise_segment_make_(&along, end, part, r->p + done, r->looks);
        rampwise_group_run_(k, g, &along);
        rampwise_segment_end_(&along, end);
    }
    end->is_behind = behind > 0;
    end->next = r->p[r->kind.n - 1];
}

/* A stiff oscillator without limit: no relative motion, and the mass goes with its base, from rest and to
   rest. The base's velocity alone does not tell its acceleration's error. */
static findings follow_base(const record *r)
{
    const int moves = r->kind.quantity == RAMPWISE_TOTAL_ACCELERATION && r->when != RAMPWISE_RESIDUAL;
    const rampwise_instant nothing = {0, r->when == RAMPWISE_RESIDUAL ? r->kind.n - 1 : 0, 0};
    const double error = moves && r->kind.input == RAMPWISE_BASE_VELOCITY ? NAN : 0;
    findings found = {{nothing, nothing}, {error, error, 0, 0}};
    for (size_t i = 0; moves && i < r->kind.n; ++i) {
        if (r->kind.input == RAMPWISE_BASE_ACCELERATION)
            note_value(&found.peak, r->p[i], i, 0);
        else if (r->kind.input == RAMPWISE_BASE_VELOCITY && i > 0)
            note_value(&found.peak, (r->p[i] - r->p[i - 1]) / r->kind.dt, i - 1, 0);
    }
    return found;
}

static int check_record(const record *r, size_t *bad)
{
    const int status = rampwise_record_kind_check_(&r->kind);
    if (status != RAMPWISE_OK)
        return status;
    if (r->when != 0 && r->when != RAMPWISE_RESIDUAL && r->when != RAMPWISE_MAXIMAX)
        return RAMPWISE_ERROR_FLAGS;
    if (has_evidence(r) && check_estimable(r->kind.input, RAMPWISE_RAMP) != RAMPWISE_OK)
        return check_estimable(r->kind.input, RAMPWISE_RAMP);
    return check_samples(r->kind.n, r->p, bad);
}

/* Oscillators of the next group, so that the last ones are not few. */
static size_t group_share(size_t left)
{
    const size_t groups = lane_groups(left), share = (left + groups - 1) / groups;
    return (share + 7) / 8 * 8;
}

/* The next oscillators until a group's share of them are not stiff; returns how many that took. */
static size_t respond_next(const record *r, size_t left, const double *omega, const double *zeta,
                           findings *found)
{
    rampwise_coeffs c[LANES];
    size_t which[LANES], count = 0, taken = 0;
    const size_t share = group_share(left);
    for (; taken < left && taken < LANES && count < share; ++taken) {
        if (rampwise_record_is_stiff_(&r->kind, omega[taken])) {
            found[taken] = follow_base(r);
            continue;
        }
        (void)rampwise_record_oscillator_(&r->kind, omega[taken], zeta[taken], &c[count]);
        which[count++] = taken;
    }
    peaks_group g;
    input_end end;
    rampwise_group_make_(&g, count, c, 1, &r->kind.quantity, r->looks);
    respond(r, &g, &end);
    for (size_t j = 0; j < count; ++j)
        found[which[j]] =
            rampwise_group_findings_(rampwise_kernels_(RAMPWISE_FASTEST), &g, j, 0, r->when, &end);
    return taken;
}

static void find_abrupt_ends(record *r)
{
    record_ends ends = {0};
    for (size_t i = 1; i + 1 < r->kind.n; ++i) {
        const double d = second_difference(r->p[i - 1], r->p[i], r->p[i + 1]);
        rampwise_ends_take_(&ends, 1, &d);
    }
    r->abrupt = rampwise_ends_abrupt_(&ends);
}

/* evidence is NULL where it is not wanted. */
static int solve(record *r, size_t n_osc, const double *omega, const double *zeta, rampwise_peak *peak,
                 rampwise_evidence *evidence, size_t *bad)
{
    if (r->p == NULL || (n_osc > 0 && (omega == NULL || zeta == NULL || peak == NULL)))
        return RAMPWISE_ERROR_MISSING;
    int status = check_record(r, bad);
    if (status == RAMPWISE_OK)
        status = rampwise_record_list_check_(&r->kind, n_osc, omega, zeta, bad);
    if (status != RAMPWISE_OK)
        return status;
    if (has_evidence(r))
        find_abrupt_ends(r);
    for (size_t done = 0, taken; done < n_osc; done += taken) {
        findings found[LANES];
        taken = respond_next(r, n_osc - done, omega + done, zeta + done, found);
        for (size_t i = 0; i < taken; ++i) {
            peak[done + i] = found[i].peak;
            found[i].evidence.abrupt = r->abrupt;
            if (evidence != NULL)
                evidence[done + i] = found[i].evidence;
        }
    }
    return RAMPWISE_OK;
}

int rampwise_spectrum(size_t n, double dt, const double *p, int input, size_t n_osc, const double *omega,
                      const double *zeta, int quantity, unsigned flags, rampwise_peak *peak, size_t *bad)
{
    const unsigned looks = flags & (unsigned)RAMPWISE_AT_SAMPLES;
    record r = {{n, dt, input, quantity}, p, looks, flags - looks, 0};
    return solve(&r, n_osc, omega, zeta, peak, NULL, bad);
}

int rampwise_spectrum_evidence(size_t n, double dt, const double *p, int input, size_t n_osc,
                               const double *omega, const double *zeta, int quantity, unsigned flags,
                               rampwise_peak *peak, rampwise_evidence *evidence, size_t *bad)
{
    const unsigned looks = flags & (unsigned)RAMPWISE_AT_SAMPLES;
    record r = {{n, dt, input, quantity}, p, looks | RAMPWISE_EVIDENCE, flags - looks, 0};
    if (n_osc > 0 && evidence == NULL)
        return RAMPWISE_ERROR_MISSING;
    return solve(&r, n_osc, omega, zeta, peak, evidence, bad);
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
