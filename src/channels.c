#include "rampwise/channels.h"

#include "entry.h"
#include "lanes.h"
#include "rampwise/status.h"
#include "samples.h"
#include "valid.h"

/* Channel j under c[j c_step], everything checked; returns the smallest index at fault, or channels n. */
static size_t run_channels(size_t channels, const rampwise_coeffs *c, size_t c_step, rampwise_state *s,
                           size_t n, const double *p, layout at, const rampwise_history *out)
{
    const kernels *const k = rampwise_kernels_(RAMPWISE_FASTEST);
    size_t smallest = channels * n;
    for (size_t first = 0; first < channels; first += LANES) {
        const size_t count = channels - first < LANES ? channels - first : LANES;
        const rampwise_coeffs *those[LANES];
        size_t reached[LANES];
        for (size_t j = 0; j < count; ++j)
            those[j] = &c[(first + j) * c_step];
        const rampwise_history there = wanted_from(out, first * at.lane);
        rampwise_lanes_run_(k, count, those, s + first, n, p + first * at.lane, at, &there, at, reached);
        for (size_t j = 0; j < count; ++j) {
            const size_t index = (first + j) * at.lane + reached[j] * at.sample;
            if (reached[j] < n && index < smallest)
                smallest = index;
        }
    }
    return smallest;
}

static int check_channels(size_t channels, const rampwise_coeffs *c, size_t c_step, const rampwise_state *s)
{
    for (size_t j = 0; j < channels; ++j) {
        const int status = check_pair(&c[j * c_step], &s[j]);
        if (status != RAMPWISE_OK)
            return status;
        if (c[j * c_step].dt != c[0].dt)
            return RAMPWISE_ERROR_DIFFERENT;
    }
    return RAMPWISE_OK;
}

static int check_and_run(size_t channels, const rampwise_coeffs *c, size_t c_step, rampwise_state *s,
                         size_t n, const double *p, layout at, const rampwise_history *out, size_t *bad)
{
    const size_t count = channels * n;
    if ((channels > 0 && (c == NULL || s == NULL)) || (count > 0 && p == NULL))
        return RAMPWISE_ERROR_MISSING;
    int status = check_channels(channels, c, c_step, s);
    if (status == RAMPWISE_OK)
        status = check_samples(count, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    const size_t reached = run_channels(channels, c, c_step, s, n, p, at, out);
    return reached < count ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}

int rampwise_run_frames(size_t channels, const rampwise_coeffs *c, rampwise_state *s, size_t n,
                        const double *p, const rampwise_history *out, size_t *bad)
{
    return check_and_run(channels, c, 1, s, n, p, (layout){1, channels}, out, bad);
}

int rampwise_run_records(const rampwise_coeffs *c, size_t records, rampwise_state *s, size_t n,
                         const double *p, const rampwise_history *out, size_t *bad)
{
    return check_and_run(records, c, 0, s, n, p, (layout){n, 1}, out, bad);
}
