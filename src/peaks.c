#include "rampwise/peaks.h"

#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "ends.h"
#include "lanes.h"
#include "peaks_group.h"
#include "rampwise/status.h"
#include "samples.h"
#include "saved.h"
#include "valid.h"

struct rampwise_peaks {
    const kernels *k;
    size_t n, quantity_count;
    int quantity[3];
    int started;
    unsigned looks;
    input_end end; /* where the oscillators stand */
    record_ends ends;
    peaks_group *groups;
};

_Static_assert(sizeof(peaks_group) % LANE_ALIGNMENT == 0, "groups follow each other aligned");

static const size_t header_size =
    (sizeof(struct rampwise_peaks) + LANE_ALIGNMENT - 1) / LANE_ALIGNMENT * LANE_ALIGNMENT;

size_t rampwise_peaks_size(size_t n)
{
    return lane_groups_size(n, header_size, sizeof(peaks_group));
}

size_t rampwise_peaks_alignment(void)
{
    return LANE_ALIGNMENT;
}

static int check_quantities(size_t count, const int *quantity)
{
    if (count < 1 || count > 3)
        return RAMPWISE_ERROR_COUNT;
    for (size_t i = 0; i < count; ++i) {
        if (quantity[i] < RAMPWISE_DISPLACEMENT || quantity[i] > RAMPWISE_TOTAL_ACCELERATION)
            return RAMPWISE_ERROR_QUANTITY;
        for (size_t j = 0; j < i; ++j)
            if (quantity[i] == quantity[j])
                return RAMPWISE_ERROR_QUANTITY;
    }
    return RAMPWISE_OK;
}

static int check_peaks(size_t n, const rampwise_coeffs *c, size_t quantity_count, const int *quantity,
                       unsigned flags, int instructions)
{
    if (c == NULL || quantity == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (rampwise_peaks_size(n) == 0)
        return RAMPWISE_ERROR_COUNT;
    const int status = check_alike(n, c);
    if (status != RAMPWISE_OK)
        return status;
    if (check_quantities(quantity_count, quantity) != RAMPWISE_OK)
        return check_quantities(quantity_count, quantity);
    if ((flags & ~(unsigned)(RAMPWISE_AT_SAMPLES | RAMPWISE_EVIDENCE)) != 0)
        return RAMPWISE_ERROR_FLAGS;
    if ((flags & RAMPWISE_EVIDENCE) != 0) {
        const int estimable = check_estimable(c->input, c->between);
        if (estimable != RAMPWISE_OK)
            return estimable;
    }
    return rampwise_kernels_(instructions) != NULL ? RAMPWISE_OK : RAMPWISE_ERROR_INSTRUCTIONS;
}

int rampwise_peaks_init(void *memory, size_t bytes, size_t n, const rampwise_coeffs *c, size_t quantity_count,
                        const int *quantity, unsigned flags, int instructions, rampwise_peaks **peaks)
{
    if (memory == NULL || peaks == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_peaks(n, c, quantity_count, quantity, flags, instructions);
    if (status != RAMPWISE_OK)
        return status;
    if (bytes < rampwise_peaks_size(n) || (uintptr_t)memory % LANE_ALIGNMENT != 0)
        return RAMPWISE_ERROR_MEMORY;
    rampwise_peaks *const made = memory;
    memset(made, 0, header_size);
    made->k = rampwise_kernels_(instructions);
    made->n = n;
    made->quantity_count = quantity_count;
    made->looks = flags;
    memcpy(made->quantity, quantity, quantity_count * sizeof *quantity);
    made->groups = (peaks_group *)((char *)memory + header_size);
    for (size_t g = 0; g < lane_groups(n); ++g) {
        const size_t left = n - g * LANES;
        rampwise_group_make_(&made->groups[g], left < LANES ? left : LANES, c + g * LANES, quantity_count,
                             quantity, flags);
    }
    *peaks = made;
    return RAMPWISE_OK;
}

int rampwise_peaks_create(size_t n, const rampwise_coeffs *c, size_t quantity_count, const int *quantity,
                          unsigned flags, int instructions, rampwise_peaks **peaks)
{
    if (peaks == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_peaks(n, c, quantity_count, quantity, flags, instructions);
    if (status != RAMPWISE_OK)
        return status;
    void *const memory = aligned_alloc(LANE_ALIGNMENT, rampwise_peaks_size(n));
    if (memory == NULL)
        return RAMPWISE_ERROR_MEMORY;
    return rampwise_peaks_init(memory, rampwise_peaks_size(n), n, c, quantity_count, quantity, flags,
                               instructions, peaks);
}

void rampwise_peaks_free(rampwise_peaks *peaks)
{
    free(peaks);
}

/* All begin with the states s, or at rest under p0 where s is NULL. */
static void begin(rampwise_peaks *peaks, const rampwise_state *s, double p0)
{
    memset(&peaks->end, 0, sizeof peaks->end);
    memset(&peaks->ends, 0, sizeof peaks->ends);
    peaks->end.p = s != NULL ? s[0].p : p0;
    peaks->end.p_before = s != NULL ? s[0].p_before : p0;
    peaks->started = 1;
    for (size_t g = 0; g < lane_groups(peaks->n); ++g)
        rampwise_group_start_(&peaks->groups[g], s != NULL ? s + g * LANES : NULL, peaks->end.p);
}

int rampwise_peaks_start(rampwise_peaks *peaks, const rampwise_state *s)
{
    if (peaks == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (s == NULL) {
        peaks->started = 0;
        return RAMPWISE_OK;
    }
    const int status = check_shared_input(peaks->n, s);
    if (status == RAMPWISE_OK)
        begin(peaks, s, 0);
    return status;
}

static int has_evidence(const rampwise_peaks *peaks)
{
    return (peaks->looks & RAMPWISE_EVIDENCE) != 0;
}

/* All over the next n samples; p[n] is there too with evidence. */
static void run(rampwise_peaks *peaks, size_t n, const double *p)
{
    for (size_t done = 0, part = 0; done < n; done += part) {
        segment along;
        part = n - done < SEGMENT ? n - done : SEGMENT;
        rampwise_segment_make_(&along, &peaks->end, part, p + done, peaks->looks);
        for (size_t g = 0; g < lane_groups(peaks->n); ++g)
            rampwise_group_run_(peaks->k, &peaks->groups[g], &along);
        rampwise_segment_end_(&along, &peaks->end);
        if (along.with_evidence)
            rampwise_ends_take_(&peaks->ends, part, along.d);
    }
}

/* The last sample waits: its second difference is not known yet. */
static void run_behind(rampwise_peaks *peaks, size_t n, const double *p)
{
    const double waited[2] = {peaks->end.next, p[0]};
    run(peaks, (size_t)peaks->end.is_behind, waited);
    run(peaks, n - 1, p);
    peaks->end.is_behind = 1;
    peaks->end.next = p[n - 1];
}

int rampwise_peaks_run(rampwise_peaks *peaks, size_t n, const double *p, size_t *bad)
{
    if (peaks == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    const int status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    size_t done = 0;
    if (!peaks->started) {
        begin(peaks, NULL, p[0]);
        done = 1;
    }
    if (!has_evidence(peaks))
        run(peaks, n - done, p + done);
    else if (done < n)
        run_behind(peaks, n - done, p + done);
    return RAMPWISE_OK;
}

/* What was found of one of the object's quantities, into what is wanted of the two; NULL is not. */
static int get(const rampwise_peaks *peaks, int quantity, unsigned flags, rampwise_peak *peak,
               rampwise_evidence *evidence)
{
    if (flags != 0 && flags != RAMPWISE_RESIDUAL && flags != RAMPWISE_MAXIMAX)
        return RAMPWISE_ERROR_FLAGS;
    size_t q = 0;
    while (q < peaks->quantity_count && peaks->quantity[q] != quantity)
        ++q;
    if (q == peaks->quantity_count)
        return RAMPWISE_ERROR_QUANTITY;
    if (!peaks->started)
        return RAMPWISE_ERROR_COUNT;
    const uint32_t abrupt = rampwise_ends_abrupt_(&peaks->ends);
    for (size_t i = 0; i < peaks->n; ++i) {
        findings found =
            rampwise_group_findings_(peaks->k, &peaks->groups[i / LANES], i % LANES, q, flags, &peaks->end);
        found.evidence.abrupt = abrupt;
        if (peak != NULL)
            peak[i] = found.peak;
        if (evidence != NULL)
            evidence[i] = found.evidence;
    }
    return RAMPWISE_OK;
}

int rampwise_peaks_get(const rampwise_peaks *peaks, int quantity, unsigned flags, rampwise_peak *peak)
{
    if (peaks == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    return get(peaks, quantity, flags, peak, NULL);
}

int rampwise_peaks_evidence(const rampwise_peaks *peaks, int quantity, unsigned flags,
                            rampwise_evidence *evidence)
{
    if (peaks == NULL || evidence == NULL)
        return RAMPWISE_ERROR_MISSING;
    return has_evidence(peaks) ? get(peaks, quantity, flags, NULL, evidence) : RAMPWISE_ERROR_FLAGS;
}

/* ---- saving ---- */

/* What the oscillators share, as it is saved. */
typedef struct shared {
    int32_t quantity_count, quantity[3], looks, started;
    input_end end;
    record_ends ends;
} shared;

static shared shared_of(const rampwise_peaks *peaks)
{
    shared x = {.quantity_count = (int32_t)peaks->quantity_count,
                .looks = (int32_t)peaks->looks,
                .started = peaks->started,
                .end = peaks->end,
                .ends = peaks->ends};
    memcpy(x.quantity, peaks->quantity, sizeof x.quantity);
    return x;
}

static void pass_shared(saved *s, shared *x)
{
    double *const numbers[] = {&x->end.p_before, &x->end.p,        &x->end.d,
                               &x->end.next,     &x->ends.largest, &x->ends.at_start};
    saved_int(s, &x->quantity_count);
    for (int q = 0; q < 3; ++q)
        saved_int(s, &x->quantity[q]);
    saved_int(s, &x->looks);
    saved_int(s, &x->started);
    saved_int(s, &x->end.is_behind);
    rampwise_saved_uint64_(s, &x->end.sample);
    rampwise_saved_uint64_(s, &x->ends.n);
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        rampwise_saved_double_(s, numbers[i]);
    saved_doubles(s, x->ends.recent, END_SAMPLES);
}

static void pass_candidate(saved *s, candidate *x)
{
    double *const numbers[] = {&x->best, &x->most, &x->u, &x->v, &x->error_u, &x->error_v};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        rampwise_saved_double_(s, numbers[i]);
    rampwise_saved_uint64_(s, &x->sample);
    saved_size(s, &x->n);
    saved_int(s, &x->ends_record);
    saved_doubles(s, x->p, STRETCH + 3);
}

static void pass_lane(saved *s, group_lane *x)
{
    saved_coeffs(s, &x->c);
    rampwise_saved_double_(s, &x->u);
    rampwise_saved_double_(s, &x->v);
    rampwise_saved_double_(s, &x->error_u);
    rampwise_saved_double_(s, &x->error_v);
    saved_int(s, &x->stopped);
    for (int q = 0; q < 3; ++q) {
        saved_peak(s, &x->found[q].peak);
        rampwise_saved_double_(s, &x->found[q].evidence.error_high);
        rampwise_saved_double_(s, &x->found[q].evidence.error_low);
        pass_candidate(s, &x->high[q]);
        pass_candidate(s, &x->low[q]);
    }
}

static void pass_peaks(saved *s, void *object)
{
    const rampwise_peaks *const peaks = object;
    shared all = shared_of(peaks);
    pass_shared(s, &all);
    for (size_t i = 0; i < peaks->n; ++i) {
        group_lane x;
        rampwise_group_get_(&peaks->groups[i / LANES], i % LANES, &x);
        pass_lane(s, &x);
    }
}

static const saved_kind kind = {SAVED_PEAKS, 1, pass_peaks};

size_t rampwise_peaks_saved_size(const rampwise_peaks *peaks)
{
    return rampwise_saved_size_(&kind, peaks);
}

int rampwise_peaks_save(const rampwise_peaks *peaks, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, peaks, bytes, count);
}

static int candidate_is_right(const candidate *x)
{
    return x->n <= STRETCH;
}

/* Whether what was saved could have come of n oscillators for these quantities. */
static int check_saved(saved s, const rampwise_peaks *peaks)
{
    const shared mine = shared_of(peaks);
    shared all = mine;
    rampwise_coeffs pair[2];
    group_lane x;
    memset(&x, 0, sizeof x);
    pass_shared(&s, &all);
    if (all.quantity_count != mine.quantity_count || all.looks != mine.looks ||
        memcmp(all.quantity, mine.quantity, sizeof all.quantity) != 0)
        return RAMPWISE_ERROR_DIFFERENT;
    for (size_t i = 0; i < peaks->n; ++i) {
        pass_lane(&s, &x);
        pair[0] = i == 0 ? x.c : pair[0];
        pair[1] = x.c;
        if (check_alike(2, pair) != RAMPWISE_OK)
            return RAMPWISE_ERROR_DAMAGED;
        for (int q = 0; q < 3; ++q)
            if (!candidate_is_right(&x.high[q]) || !candidate_is_right(&x.low[q]))
                return RAMPWISE_ERROR_DAMAGED;
    }
    return RAMPWISE_OK;
}

/* One group from *s on, which comes to stand behind it. */
static void read_group(saved *s, const rampwise_peaks *peaks, peaks_group *g)
{
    rampwise_coeffs c[LANES];
    group_lane x;
    saved again = *s;
    const size_t count = g->count;
    memset(c, 0, sizeof c);
    memset(&x, 0, sizeof x);
    for (size_t j = 0; j < count; ++j) {
        pass_lane(&again, &x);
        c[j] = x.c;
    }
    rampwise_group_make_(g, count, c, peaks->quantity_count, peaks->quantity, peaks->looks);
    for (size_t j = 0; j < count; ++j) {
        pass_lane(s, &x);
        rampwise_group_put_(g, j, &x);
    }
}

int rampwise_peaks_resume(rampwise_peaks *peaks, const void *bytes, size_t count)
{
    saved s;
    int status = rampwise_saved_open_(&kind, peaks, bytes, count, &s);
    if (status == RAMPWISE_OK)
        status = check_saved(s, peaks);
    if (status != RAMPWISE_OK)
        return status;
    shared all = shared_of(peaks);
    pass_shared(&s, &all);
    peaks->started = all.started;
    peaks->end = all.end;
    peaks->ends = all.ends;
    for (size_t g = 0; g < lane_groups(peaks->n); ++g)
        read_group(&s, peaks, &peaks->groups[g]);
    return RAMPWISE_OK;
}
