#include "rampwise/record.h"

#include <math.h>
#include <stdint.h>
#include <string.h>
#include "rampwise/status.h"
#include "row.h"
#include "valid.h"

static const rampwise_history nothing_wanted = {NULL, NULL, NULL, NULL};

/* The state at a sample into entry i of the outputs; 0 and nothing written where it overflows. */
static inline int put_state(const rampwise_coeffs *c, const rampwise_state *s,
                            const rampwise_history *out, size_t i)
{
    const double a = out->a != NULL ? row_value(c->acceleration, s) : 0;
    const double total = out->total != NULL ? row_value(c->total, s) : 0;
    if (!isfinite(s->u) || !isfinite(s->v) || !isfinite(a) || !isfinite(total))
        return 0;
    if (out->u != NULL)
        out->u[i] = s->u;
    if (out->v != NULL)
        out->v[i] = s->v;
    if (out->a != NULL)
        out->a[i] = a;
    if (out->total != NULL)
        out->total[i] = total;
    return 1;
}

/* rampwise_step with a branch on silence, which loud steps do not wait for. */
static inline rampwise_state stepped(const rampwise_coeffs *c, rampwise_state s, double p_next)
{
    double u = rampwise_next_u_(c, s.u, s.v, s.p, p_next);
    double v = rampwise_next_v_(c, s.u, s.v, s.p, p_next);
    if (rampwise_silent_(s.p, p_next)) {
        u = rampwise_unless_spent_(u);
        v = rampwise_unless_spent_(v);
    }
    return (rampwise_state){u, v, p_next, s.p};
}

/* Entries first, first + stride, ... below end: returns the entry that overflows, or end. */
static size_t advance(const rampwise_coeffs *c, rampwise_state *s, size_t first, size_t end,
                      size_t stride, const double *p, const rampwise_history *out)
{
    rampwise_state now = *s;
    size_t i = first;
    for (; i < end; i += stride) {
        const rampwise_state next = stepped(c, now, p[i]);
        if (!put_state(c, &next, out, i))
            break;
        now = next;
    }
    *s = now;
    return i < end ? i : end;
}

static int blame(int status, size_t index, size_t *bad)
{
    if (bad != NULL)
        *bad = index;
    return status;
}

static size_t first_not_finite(size_t n, const double *x)
{
    size_t i = 0;
    while (i < n && isfinite(x[i]))
        ++i;
    return i;
}

static int check_samples(size_t n, const double *p, size_t *bad)
{
    const size_t wrong = first_not_finite(n, p);
    return wrong < n ? blame(RAMPWISE_ERROR_SAMPLE, wrong, bad) : RAMPWISE_OK;
}

static int check_pair(const rampwise_coeffs *c, const rampwise_state *s)
{
    if (!coeffs_are_made(c))
        return RAMPWISE_ERROR_NOT_MADE;
    return state_is_finite(s) ? RAMPWISE_OK : RAMPWISE_ERROR_STATE;
}

int rampwise_run(const rampwise_coeffs *c, rampwise_state *s, size_t n, const double *p,
                 const rampwise_history *out, size_t *bad)
{
    if (c == NULL || s == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = check_pair(c, s);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    const size_t reached = advance(c, s, 0, n, 1, p, out != NULL ? out : &nothing_wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}

int rampwise_solve(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p,
                   const rampwise_history *out, size_t *bad)
{
    rampwise_state s;
    if (c == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    rampwise_start(&s, u0, v0, 0);
    int status = check_pair(c, &s);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    const rampwise_history *wanted = out != NULL ? out : &nothing_wanted;
    rampwise_start(&s, u0, v0, p[0]);
    if (!put_state(c, &s, wanted, 0))
        return blame(RAMPWISE_ERROR_OVERFLOW, 0, bad);
    const size_t reached = advance(c, &s, 1, n, 1, p, wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}

int rampwise_run_frames(size_t channels, const rampwise_coeffs *c, rampwise_state *s, size_t n,
                        const double *p, const rampwise_history *out, size_t *bad)
{
    const size_t count = channels * n;
    if ((channels > 0 && (c == NULL || s == NULL)) || (p == NULL && count > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = RAMPWISE_OK;
    for (size_t j = 0; j < channels && status == RAMPWISE_OK; ++j) {
        status = check_pair(&c[j], &s[j]);
        if (status == RAMPWISE_OK && c[j].dt != c[0].dt)
            status = RAMPWISE_ERROR_DIFFERENT;
    }
    if (status == RAMPWISE_OK)
        status = check_samples(count, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    size_t earliest = count;
    for (size_t j = 0; j < channels; ++j) {
        const size_t reached =
            advance(&c[j], &s[j], j, count, channels, p, out != NULL ? out : &nothing_wanted);
        earliest = reached < earliest ? reached : earliest;
    }
    return earliest < count ? blame(RAMPWISE_ERROR_OVERFLOW, earliest, bad) : RAMPWISE_OK;
}

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

/* p_before of the state belongs to dt of the caller's coefficients, whatever the last interval was.
 */
static double one_interval_before(const rampwise_coeffs *c, const rampwise_coeffs *last,
                                  const rampwise_state *s)
{
    if (same_bits(c->dt, last->dt))
        return s->p_before;
    return s->p - (s->p - s->p_before) * (c->dt / last->dt);
}

/* As `advance`; a state beyond the range of a double counts as overflow, and so do coefficients of
   interval that neither the longest nor the shortest foretold. */
static size_t advance_at(intervals *known, rampwise_state *s, double *t_last, size_t n,
                         const double *t, const double *p, const rampwise_history *out)
{
    for (size_t i = 0; i < n; ++i) {
        if (find_interval(known, t[i] - *t_last) != RAMPWISE_OK)
            return i;
        const rampwise_coeffs *const part = &known->kept[known->latest];
        rampwise_state next = stepped(part, *s, p[i]);
        const double p_before = one_interval_before(known->like, part, &next);
        if (!isfinite(p_before) || !put_state(part, &next, out, i))
            return i;
        next.p_before = p_before;
        *s = next;
        *t_last = t[i];
    }
    return n;
}

int rampwise_run_at(const rampwise_coeffs *c, rampwise_state *s, double *t_last, size_t n,
                    const double *t, const double *p, const rampwise_history *out, size_t *bad)
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
    const size_t reached =
        advance_at(&known, s, t_last, n, t, p, out != NULL ? out : &nothing_wanted);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}
