#include "rampwise/record.h"

#include <math.h>
#include <string.h>
#include "rampwise/status.h"
#include "entry.h"
#include "kernels/kernels.h"
#include "samples.h"
#include "valid.h"

/* Coefficients for the intervals met last, on the caller's stack. */
enum { REMEMBERED = 8 };

typedef struct intervals {
    const rampwise_coeffs *like; /* system, input and between */
    rampwise_coeffs kept[REMEMBERED];
    int count, oldest, latest;
} intervals;

static int same_bits(double a, double b)
{
    return memcmp(&a, &b, sizeof a) == 0;
}

/* Leaves the coefficients for an interval in kept[latest]. */
static int find_interval(intervals *known, double dt)
{
    for (int i = 0; i < known->count; ++i) {
        const int place = (known->latest + i) % known->count;
        if (same_bits(known->kept[place].dt, dt)) {
            known->latest = place;
            return RAMPWISE_OK;
        }
    }
    rampwise_coeffs made;
    const rampwise_coeffs *const like = known->like;
    const int status = rampwise_coeffs_make(&made, &like->system, dt, like->input, like->between);
    if (status != RAMPWISE_OK)
        return status;
    const int place = known->count < REMEMBERED ? known->count++ : known->oldest;
    known->oldest = (place + 1) % REMEMBERED;
    known->kept[place] = made;
    known->latest = place;
    return RAMPWISE_OK;
}

/* Times must rise, and the longest and shortest interval must have coefficients. These are made
   here, before anything is changed, and remembered. */
static int check_times(intervals *known, double t_last, size_t n, const double *t, size_t *bad)
{
    size_t longest = 0, shortest = 0;
    double long_dt = 0, short_dt = INFINITY;
    for (size_t i = 0; i < n; ++i) {
        const double dt = t[i] - (i > 0 ? t[i - 1] : t_last);
        if (!isfinite(t[i]) || !isfinite(dt) || !(dt > 0))
            return blame(RAMPWISE_ERROR_TIME, i, bad);
        if (dt > long_dt) {
            long_dt = dt;
            longest = i;
        }
        if (dt < short_dt) {
            short_dt = dt;
            shortest = i;
        }
    }
    int status = find_interval(known, long_dt);
    if (status != RAMPWISE_OK)
        return blame(status, longest, bad);
    status = find_interval(known, short_dt);
    return status != RAMPWISE_OK ? blame(status, shortest, bad) : RAMPWISE_OK;
}

/* p_before of the state belongs to dt of the caller's coefficients, whatever the last interval was. */
static double one_interval_before(const rampwise_coeffs *c, const rampwise_coeffs *last, double p_last,
                                  double p)
{
    if (same_bits(c->dt, last->dt))
        return p_last;
    return p - (p - p_last) * (c->dt / last->dt);
}

/* Sample by sample; returns the first at fault, or n. A state beyond the range of a double counts
   as overflow, and so do coefficients of interval that neither the longest nor the shortest
   foretold. */
static size_t advance_at(intervals *known, rampwise_state *s, double *t_last, size_t n, const double *t,
                         const double *p, const rampwise_history *out)
{
    const kernels *const k = rampwise_kernels_(RAMPWISE_FASTEST);
    for (size_t i = 0; i < n; ++i) {
        if (find_interval(known, t[i] - *t_last) != RAMPWISE_OK)
            return i;
        const rampwise_coeffs *const part = &known->kept[known->latest];
        const double p_before = one_interval_before(known->like, part, s->p, p[i]);
        if (!isfinite(p_before) || k->advance(part, s, i, i + 1, 1, p, out) == i)
            return i;
        s->p_before = p_before;
        *t_last = t[i];
    }
    return n;
}

int rampwise_run_at(const rampwise_coeffs *c, rampwise_state *s, double *t_last, size_t n, const double *t,
                    const double *p, const rampwise_history *out, size_t *bad)
{
    if (c == NULL || s == NULL || t_last == NULL || ((t == NULL || p == NULL) && n > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = check_pair(c, s);
    if (status == RAMPWISE_OK && !isfinite(*t_last))
        return blame(RAMPWISE_ERROR_TIME, 0, bad);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    intervals known = {.like = c, .kept = {*c}, .count = 1, .oldest = 0, .latest = 0};
    status = check_times(&known, *t_last, n, t, bad);
    if (status != RAMPWISE_OK)
        return status;
    const rampwise_history wanted = wanted_from(out, 0);
    const size_t reached = advance_at(&known, s, t_last, n, t, p, &wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}
