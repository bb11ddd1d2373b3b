/* The extremes of a power series on a piece of a step. */
#include <math.h>
#include "modes_core.h"

/* One piece: its polynomial over [0, 1], bounds of the second and third derivative, and what must be
   exceeded. */
typedef struct curve {
    const double *a;
    double second, third, noise, floor_high, floor_low;
    uint64_t sample;
    size_t piece, pieces;
    rampwise_peak *peak;
} curve;

static double value_at(const curve *c, double x, double *slope, double *second)
{
    double value = 0, first = 0, half = 0;
    for (size_t n = MODES_TERMS; n-- > 0;) {
        half = half * x + first;
        first = first * x + value;
        value = value * x + c->a[n];
    }
    *slope = first;
    *second = 2 * half;
    return value;
}

static int is_earlier(const rampwise_instant *a, const rampwise_instant *b)
{
    return a->sample < b->sample || (a->sample == b->sample && a->fraction < b->fraction);
}

/* Steps are not looked into in their order. */
void rampwise_modes_note_(rampwise_peak *peak, double value, uint64_t sample, double fraction)
{
    const rampwise_instant at = {value, sample, fraction};
    if (value > peak->high.value || (value == peak->high.value && is_earlier(&at, &peak->high)))
        peak->high = at;
    if (value < peak->low.value || (value == peak->low.value && is_earlier(&at, &peak->low)))
        peak->low = at;
}

static void note_on(const curve *c, double value, double x)
{
    const double fraction = ((double)c->piece + x) / (double)c->pieces;
    if (fraction < 1)
        rampwise_modes_note_(c->peak, value, c->sample, fraction);
    else
        rampwise_modes_note_(c->peak, value, c->sample + 1, 0);
}

/* The extreme between low and high, where the slope has opposite signs and is monotone: Newton's steps,
   halving where one leaves the bracket. */
static void note_extreme(const curve *c, double low, double high, int rising)
{
    double x = 0.5 * (low + high), slope, second, value = value_at(c, x, &slope, &second);
    for (int i = 0; i < 100 && slope != 0; ++i) {
        if ((slope < 0) == rising)
            low = x;
        else
            high = x;
        double next = x - slope / second;
        if (!(next > low && next < high))
            next = 0.5 * (low + high);
        if (fabs(next - x) <= 0x1p-50)
            break;
        x = next;
        value = value_at(c, x, &slope, &second);
    }
    note_on(c, value, x);
}

/* All extremes between low and high that can count. */
static void search(const curve *c, double low, double high, int depth)
{
    double at_low, at_high, in_middle, second;
    const double width = high - low, middle = 0.5 * (low + high);
    const double first = value_at(c, low, &at_low, &second), last = value_at(c, high, &at_high, &second);
    const double value = value_at(c, middle, &in_middle, &second);
    if (fabs(second) > 0.5 * width * c->third) {
        if ((at_low < 0 && at_high > 0) || (at_low > 0 && at_high < 0))
            note_extreme(c, low, high, at_low < 0);
        return;
    }
    const double most = width * width / 8 * c->second;
    if (fmax(first, last) + most <= c->floor_high + c->noise &&
        fmin(first, last) - most >= c->floor_low - c->noise)
        return;
    if (depth == 0) {
        note_on(c, value, middle);
        return;
    }
    search(c, low, middle, depth - 1);
    search(c, middle, high, depth - 1);
}

void rampwise_modes_curve_(const double *a, uint64_t sample, size_t piece, size_t pieces, rampwise_peak *peak)
{
    const double high = peak->high.value, low = peak->low.value;
    curve c = {a, 0, 0, fabs(a[0]) + fabs(a[1]), high, low, sample, piece, pieces, peak};
    double end = a[0] + a[1];
    for (size_t n = 2; n < MODES_TERMS; ++n) {
        end += a[n];
        c.noise += fabs(a[n]);
        c.second += (double)(n * (n - 1)) * fabs(a[n]);
        c.third += (double)(n * (n - 1) * (n - 2)) * fabs(a[n]);
    }
    c.noise *= 0x1p-44;
    const double excess = c.second / 8 + c.noise;
    if (fmax(a[0], end) + excess <= high && fmin(a[0], end) - excess >= low)
        return;
    search(&c, 0, 1, 12);
    /* An extreme may lie on the end of a piece. */
    double slope, second;
    if (piece + 1 < pieces)
        note_on(&c, value_at(&c, 1, &slope, &second), 1);
}
