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
