#include "rampwise/peaks.h"

#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "lanes.h"
#include "peaks_group.h"
#include "rampwise/status.h"
#include "saved.h"
#include "valid.h"

struct rampwise_peaks {
    const kernels *k;
    size_t n, quantity_count;
    int quantity[3];
    int started;
    double p, p_before;
    uint64_t sample; /* of p */
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
    if ((flags & ~(unsigned)RAMPWISE_AT_SAMPLES) != 0)
        return RAMPWISE_ERROR_FLAGS;
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
    peaks->p = s != NULL ? s[0].p : p0;
    peaks->p_before = s != NULL ? s[0].p_before : p0;
    peaks->sample = 0;
    peaks->started = 1;
    for (size_t g = 0; g < lane_groups(peaks->n); ++g)
        rampwise_group_start_(&peaks->groups[g], s != NULL ? s + g * LANES : NULL, peaks->p);
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
    while (done < n) {
        const size_t part = n - done < SEGMENT ? n - done : SEGMENT;
        segment along;
        rampwise_segment_make_(&along, peaks->sample, peaks->p_before, peaks->p, part, p + done);
        for (size_t g = 0; g < lane_groups(peaks->n); ++g)
            rampwise_group_run_(peaks->k, &peaks->groups[g], &along);
        peaks->p_before = part > 1 ? p[done + part - 2] : peaks->p;
        peaks->p = p[done + part - 1];
        peaks->sample += part;
        done += part;
    }
    return RAMPWISE_OK;
}

int rampwise_peaks_get(const rampwise_peaks *peaks, int quantity, unsigned flags, rampwise_peak *peak)
{
    if (peaks == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (flags != 0 && flags != RAMPWISE_RESIDUAL && flags != RAMPWISE_MAXIMAX)
        return RAMPWISE_ERROR_FLAGS;
    size_t q = 0;
    while (q < peaks->quantity_count && peaks->quantity[q] != quantity)
        ++q;
    if (q == peaks->quantity_count)
        return RAMPWISE_ERROR_QUANTITY;
    if (!peaks->started)
        return RAMPWISE_ERROR_COUNT;
    for (size_t i = 0; i < peaks->n; ++i)
        peak[i] = rampwise_group_peak_(peaks->k, &peaks->groups[i / LANES], i % LANES, q, flags,
                                       peaks->p_before, peaks->p, peaks->sample);
    return RAMPWISE_OK;
}

/* ---- saving ---- */

/* What the oscillators share, as it is saved. */
typedef struct shared {
    int32_t quantity_count, quantity[3], flags, started;
    double p, p_before;
    uint64_t sample;
} shared;

static shared shared_of(const rampwise_peaks *peaks)
{
    const int flags = peaks->groups[0].at_samples ? RAMPWISE_AT_SAMPLES : 0;
    shared x = {.quantity_count = (int32_t)peaks->quantity_count,
                .flags = flags,
                .started = peaks->started,
                .p = peaks->p,
                .p_before = peaks->p_before,
                .sample = peaks->sample};
    memcpy(x.quantity, peaks->quantity, sizeof x.quantity);
    return x;
}

static void pass_shared(saved *s, shared *x)
{
    saved_int(s, &x->quantity_count);
    for (int q = 0; q < 3; ++q)
        saved_int(s, &x->quantity[q]);
    saved_int(s, &x->flags);
    saved_int(s, &x->started);
    rampwise_saved_double_(s, &x->p);
    rampwise_saved_double_(s, &x->p_before);
    rampwise_saved_uint64_(s, &x->sample);
}

static void pass_instant(saved *s, rampwise_instant *x)
{
    rampwise_saved_double_(s, &x->value);
    rampwise_saved_uint64_(s, &x->sample);
    rampwise_saved_double_(s, &x->fraction);
}

static void pass_candidate(saved *s, candidate *x)
{
    double *const numbers[] = {&x->best, &x->most, &x->u, &x->v};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        rampwise_saved_double_(s, numbers[i]);
    rampwise_saved_uint64_(s, &x->sample);
    saved_size(s, &x->n);
    saved_doubles(s, x->p, STRETCH + 2);
}

static void pass_lane(saved *s, group_lane *x)
{
    saved_coeffs(s, &x->c);
    rampwise_saved_double_(s, &x->u);
    rampwise_saved_double_(s, &x->v);
    saved_int(s, &x->stopped);
    for (int q = 0; q < 3; ++q) {
        pass_instant(s, &x->peak[q].high);
        pass_instant(s, &x->peak[q].low);
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
    return peaks != NULL ? rampwise_saved_size_(&kind, peaks) : 0;
}

int rampwise_peaks_save(const rampwise_peaks *peaks, void *bytes, size_t count)
{
    return peaks != NULL && bytes != NULL ? rampwise_saved_write_(&kind, peaks, bytes, count)
                                          : RAMPWISE_ERROR_MISSING;
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
    if (all.quantity_count != mine.quantity_count || all.flags != mine.flags ||
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
    const unsigned flags = g->at_samples ? RAMPWISE_AT_SAMPLES : 0;
    const size_t count = g->count;
    memset(c, 0, sizeof c);
    memset(&x, 0, sizeof x);
    for (size_t j = 0; j < count; ++j) {
        pass_lane(&again, &x);
        c[j] = x.c;
    }
    rampwise_group_make_(g, count, c, peaks->quantity_count, peaks->quantity, flags);
    for (size_t j = 0; j < count; ++j) {
        pass_lane(s, &x);
        rampwise_group_put_(g, j, &x);
    }
}

int rampwise_peaks_resume(rampwise_peaks *peaks, const void *bytes, size_t count)
{
    saved s;
    if (peaks == NULL || bytes == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = rampwise_saved_open_(&kind, peaks, bytes, count, &s);
    if (status == RAMPWISE_OK)
        status = check_saved(s, peaks);
    if (status != RAMPWISE_OK)
        return status;
    shared all = shared_of(peaks);
    pass_shared(&s, &all);
    peaks->started = all.started;
    peaks->p = all.p;
    peaks->p_before = all.p_before;
    peaks->sample = all.sample;
    for (size_t g = 0; g < lane_groups(peaks->n); ++g)
        read_group(&s, peaks, &peaks->groups[g]);
    return RAMPWISE_OK;
}
