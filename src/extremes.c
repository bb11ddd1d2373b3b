#include "extremes.h"

#include <float.h>
#include <math.h>
#include <stdint.h>
#include "rampwise/motion.h"
#include "rampwise/status.h"
#include "relative.h"
#include "series.h"

/* Where a piece lies: begin and length in steps of the oscillator, counted from sample. */
typedef struct place {
    uint64_t sample;
    double begin, length;
} place;

static void piece_series(series *s, const extremes *x, relative r, double length)
{
    const derivatives d = derivatives_of(x, r);
    series_make(s, d.z, d.z1, d.z2, d.z3, x->damping, x->stiffness, length);
}

static void note_at(rampwise_peak *peak, double value, const place *where, double x)
{
    const double steps = where->begin + x * where->length, whole = floor(steps);
    note_value(peak, value, where->sample + (uint64_t)whole, steps - whole);
}

static void between(const series *s, double low, double high, const place *where, rampwise_peak *peak)
{
    double second;
    const double begin = series_slope(s, low, &second), end = series_slope(s, high, &second);
    if (!opposite(begin, end))
        return;
    const double x = slope_zero(s, low, high, begin, end);
    note_at(peak, series_value(s, x), where, x);
}

/* A piece so short that z'' has one zero in it at most. */
static void in_piece(const extremes *x, relative r, double length, const place *where, rampwise_peak *peak)
{
    series s;
    double begin, end;
    piece_series(&s, x, r, length);
    (void)series_slope(&s, 0, &begin);
    (void)series_slope(&s, 1, &end);
    if (opposite(begin, end)) {
        const double turn = turning_point(&s);
        between(&s, 0, turn, where, peak);
        between(&s, turn, 1, where, peak);
    } else {
        between(&s, 0, 1, where, peak);
    }
}

/* A short piece is passed by where the slope z' keeps its sign: it does not turn, or turns where it is too
   large to come to zero (z'' is nowhere twice its larger end). And where it changes its sign once, if z then
   rises over its ends, or falls below them, by too little: less than a triangle of twice the height. */
static int passed_by(derivatives begin, derivatives end, double length, const rampwise_peak *peak)
{
    const double a = fabs(begin.z1), b = fabs(end.z1);
    if (!opposite(begin.z1, end.z1))
        return !opposite(begin.z2, end.z2) || fmin(a, b) > 2 * length * fmax(fabs(begin.z2), fabs(end.z2));
    if (opposite(begin.z2, end.z2))
        return 0;
    const double most = length * a * (b / (a + b));
    return begin.z1 > 0 ? fmax(begin.z, end.z) + most <= peak->high.value
                        : fmin(begin.z, end.z) - most >= peak->low.value;
}

/* An extreme on the end of a piece, or within rounding of it, is the value there. */
static void walk(const extremes *x, relative r, size_t count, place where, rampwise_peak *peak)
{
    const double begin = where.begin;
    for (size_t i = 0; i < count; ++i) {
        const relative next = later(&x->piece, r);
        const derivatives end = derivatives_of(x, next);
        where.begin = begin + (double)i * where.length;
        if (!passed_by(derivatives_of(x, r), end, x->piece.dt, peak))
            in_piece(x, r, x->piece.dt, &where, peak);
        if (i + 1 < count)
            note_at(peak, end.z, &where, 1);
        r = next;
    }
}

static int sign_of(double x, double noise)
{
    return x > noise ? 1 : x < -noise ? -1 : 0;
}

/* Where the roots are real, z'' has one zero at most in all: a part in which neither z' nor z'' changes its
   sign is passed by. What is lost in rounding has no sign; a part that begins and ends so has died away.
   `depth` halvings are left until a piece is short. */
static void halve(const extremes *x, relative r, double length, place where, int depth, rampwise_peak *peak)
{
    rampwise_coeffs whole, half;
    const rampwise_system *const system = &x->c->system;
    if (rampwise_coeffs_make(&whole, system, length, RAMPWISE_FORCE, RAMPWISE_RAMP) != RAMPWISE_OK)
        return;
    const derivatives begin = derivatives_of(x, r), end = derivatives_of(x, later(&whole, r));
    if (sign_of(begin.z1, begin.z1_noise) == sign_of(end.z1, end.z1_noise) &&
        sign_of(begin.z2, begin.z2_noise) == sign_of(end.z2, end.z2_noise))
        return;
    if (depth <= 0) {
        in_piece(x, r, length, &where, peak);
        return;
    }
    if (rampwise_coeffs_make(&half, system, length / 2, RAMPWISE_FORCE, RAMPWISE_RAMP) != RAMPWISE_OK)
        return;
    const relative middle = later(&half, r);
    where.length /= 2;
    halve(x, r, length / 2, where, depth - 1, peak);
    note_at(peak, derivatives_of(x, middle).z, &where, 1);
    where.begin += where.length;
    halve(x, middle, length / 2, where, depth - 1, peak);
}

/* Halvings until a step of this length is short; negative where it could be longer. */
static int halvings_for(const extremes *x, double length)
{
    int for_S, for_K;
    const double S = fabs(x->damping) * length, K = fabs(x->stiffness) * length * length;
    (void)frexp(S, &for_S);
    (void)frexp(K, &for_K);
    for_S = S > 0 ? for_S : -1000;
    for_K = K > 0 ? (for_K + (for_K > 0)) / 2 : -1000;
    return for_S > for_K ? for_S : for_K;
}

/* Pieces of `length` until two extremes of each sign must have passed, or the motion has died to 1e-40. */
static double pieces_until_decided(const extremes *x, double length)
{
    const double sigma = fabs(x->damping) / 2, square = x->stiffness - sigma * sigma;
    const double turns = 9.5 / (sqrt(square) * length), dies = 92 / (sigma * length);
    return (turns < dies ? turns : dies) + 2;
}

/* Has the quantity no kinks where the input has them? */
static int is_smooth_at_samples(const rampwise_coeffs *c, int quantity)
{
    return c->input == RAMPWISE_BASE_ACCELERATION || quantity == RAMPWISE_DISPLACEMENT ||
           (c->input == RAMPWISE_FORCE && quantity == RAMPWISE_VELOCITY);
}

void rampwise_extremes_bound_steps_(extremes *x, size_t steps)
{
    const rampwise_coeffs *const c = x->c;
    const double dt = c->dt, h = dt * (double)steps, S = fabs(x->damping) * h, K = fabs(x->stiffness) * h * h;
    const double rest = 1 - S - K / 8, unit = rest > 0.25 ? h * h / 8 / rest : 0;
    const double per_load = c->input == RAMPWISE_FORCE ? 1 / c->system.mass : 1;
    const int ramp = c->between == RAMPWISE_RAMP, loaded = c->input <= RAMPWISE_BASE_ACCELERATION;
    x->constant =
        rest > 0.25 && x->sampled && (steps == 1 || is_smooth_at_samples(c, x->quantity)) ? 0 : INFINITY;
    x->from_p = x->from_change = 0;
    x->from_size = unit * fabs(x->stiffness);
    /* z'' + damping z' + stiffness z = F inside the step */
    if (x->quantity == RAMPWISE_DISPLACEMENT) {
        x->from_p = loaded ? unit * per_load : 0;
        x->from_change = c->input == RAMPWISE_BASE_VELOCITY ? unit / dt : 0;
    } else if (x->quantity == RAMPWISE_VELOCITY) {
        x->from_change = loaded && ramp ? unit * per_load / dt : 0;
    } else if (c->input == RAMPWISE_BASE_ACCELERATION) {
        x->from_p = unit * fabs(x->stiffness);
        x->from_change = ramp ? unit * fabs(x->damping) / dt : 0;
    } else if (c->input == RAMPWISE_BASE_VELOCITY) {
        x->from_change = unit * fabs(x->stiffness) / dt;
    }
}

/* Does the quantity jump where the input, or its slope, does? */
static int jumps_at_samples(const rampwise_coeffs *c, int quantity)
{
    const int held = c->between == RAMPWISE_HOLD;
    if (c->input == RAMPWISE_BASE_DISPLACEMENT)
        return held ? quantity != RAMPWISE_VELOCITY
                    : quantity == RAMPWISE_VELOCITY ||
                          (quantity == RAMPWISE_TOTAL_ACCELERATION && c->system.damper != 0);
    return held && c->input == RAMPWISE_FORCE && quantity == RAMPWISE_TOTAL_ACCELERATION;
}

void rampwise_extremes_bound_(extremes *x, const rampwise_coeffs *c, int quantity)
{
    const rampwise_system *const system = &c->system;
    x->c = c;
    x->quantity = quantity;
    x->damping = system->damper / system->mass;
    x->stiffness = system->stiffness / system->mass;
    x->oscillates = x->damping * x->damping / 4 < x->stiffness;
    x->jumps = jumps_at_samples(c, quantity);
    /* Relative motion over a moving base is not what the kernels see. */
    x->sampled = !x->jumps && c->input != RAMPWISE_BASE_DISPLACEMENT;
    x->halvings = halvings_for(x, c->dt);
    x->halvings = x->halvings > 0 ? x->halvings : 0;
    x->pieces = 1;
    rampwise_extremes_bound_steps_(x, 1);
}

int rampwise_extremes_make_(extremes *x, const rampwise_coeffs *c, int quantity)
{
    rampwise_extremes_bound_(x, c, quantity);
    if (x->halvings == 0 || !x->oscillates)
        return RAMPWISE_OK;
    const double all = ldexp(1, x->halvings), piece = ldexp(c->dt, -x->halvings);
    const double decided = pieces_until_decided(x, piece);
    x->pieces = (size_t)(2 * decided >= all ? all : decided);
    const int status = rampwise_coeffs_make(&x->piece, &c->system, piece, RAMPWISE_FORCE, RAMPWISE_RAMP);
    if (status != RAMPWISE_OK || (double)x->pieces >= all)
        return status;
    return rampwise_coeffs_make(&x->leap, &c->system, c->dt - (double)x->pieces * piece, RAMPWISE_FORCE,
                                RAMPWISE_RAMP);
}

double rampwise_extremes_value_(const extremes *x, const rampwise_state *s)
{
    if (x->quantity == RAMPWISE_DISPLACEMENT)
        return rampwise_relative_displacement(x->c, s);
    if (x->quantity == RAMPWISE_VELOCITY)
        return rampwise_relative_velocity(x->c, s);
    return rampwise_total_acceleration(x->c, s);
}

double rampwise_extremes_begin_(const extremes *x, const rampwise_state *s, double p_next)
{
    return derivatives_of(x, relative_to_base(x->c, s, p_next)).z;
}

double rampwise_extremes_end_(const extremes *x, const rampwise_state *s)
{
    rampwise_state before = *s;
    if (x->c->between == RAMPWISE_HOLD)
        before.p = s->p_before;
    return rampwise_extremes_value_(x, &before);
}

void rampwise_extremes_inside_(const extremes *x, const rampwise_state *s, const rampwise_state *next,
                               uint64_t sample, rampwise_peak *peak)
{
    const relative r = relative_to_base(x->c, s, next->p);
    const double h = x->c->dt;
    place where = {sample, 0, 1};
    if (x->halvings == 0) {
        const relative end = relative_at_end(x->c, &r, s, next);
        if (!passed_by(derivatives_of(x, r), derivatives_of(x, end), h, peak))
            in_piece(x, r, h, &where, peak);
        return;
    }
    if (!x->oscillates) {
        halve(x, r, h, where, x->halvings, peak);
        return;
    }
    where.length = ldexp(1, -x->halvings);
    walk(x, r, x->pieces, where, peak);
    if ((double)x->pieces * where.length < 1) {
        where.begin = 1 - (double)x->pieces * where.length;
        walk(x, later(&x->leap, r), x->pieces, where, peak);
    }
}

static void note_never_reached(rampwise_peak *peak, double value)
{
    note_value(peak, value, UINT64_MAX, 0);
}

/* A free motion that grows: to both sides where it oscillates, else to the side of its growing part. */
static void note_growth(const extremes *x, relative r, rampwise_peak *peak)
{
    if (x->oscillates) {
        note_never_reached(peak, INFINITY);
        note_never_reached(peak, -INFINITY);
        return;
    }
    const double sigma = x->damping / 2, root = sqrt(sigma * sigma - x->stiffness);
    const double growing = -sigma + root, other = -sigma - root;
    double part = r.w - other * r.y; /* times a positive number: the growing part of y, z = y or z'' */
    if (x->quantity == RAMPWISE_VELOCITY)
        part *= growing;
    if (part != 0 && !(x->quantity == RAMPWISE_TOTAL_ACCELERATION && growing == 0))
        note_never_reached(peak, part > 0 ? INFINITY : -INFINITY);
}

/* Does a free motion from here stay bounded? Not a free mass that moves, nor what grows. */
static int stays(const extremes *x, relative r)
{
    if (r.y == 0 && r.w == 0)
        return 1;
    if (x->stiffness == 0 && x->damping >= 0)
        return x->damping > 0 || r.w == 0 || x->quantity != RAMPWISE_DISPLACEMENT;
    return x->stiffness >= 0 && x->damping >= 0;
}

/* What a motion that stays comes to, where it never gets there. */
static double comes_to(const extremes *x, relative r)
{
    return x->stiffness == 0 && x->damping > 0 && x->quantity == RAMPWISE_DISPLACEMENT
               ? r.y + r.w / x->damping
               : 0;
}

/* Real roots: intervals of doubling length, until z' and z'' have come to their last signs or the motion has
   died. */
static void spread(const extremes *x, relative r, double length, place where, rampwise_peak *peak)
{
    for (int i = 0; i < 200 && (r.y != 0 || r.w != 0); ++i) {
        rampwise_coeffs c;
        if (rampwise_coeffs_make(&c, &x->c->system, length, RAMPWISE_FORCE, RAMPWISE_RAMP) != RAMPWISE_OK)
            return;
        halve(x, r, length, where, halvings_for(x, length), peak);
        r = later(&c, r);
        note_at(peak, derivatives_of(x, r).z, &where, 1);
        where.begin += where.length;
        if (i > 0) {
            length *= 2;
            where.length *= 2;
        }
    }
}

/* One whole turn of a free motion that does not grow: it has the greatest and the least value there is. What
   exceeds an earlier value by rounding only is the same amplitude come again. */
static void first_turn(const extremes *x, relative r, place where, rampwise_peak *peak)
{
    const double sigma = x->damping / 2, turn = 6.283185307179586 / sqrt(x->stiffness - sigma * sigma);
    const double dies = sigma > 0 ? 92 / sigma : INFINITY, until = (turn < dies ? turn : dies) / x->piece.dt;
    for (double i = 0; i < until; ++i) {
        rampwise_peak with = *peak;
        const relative next = later(&x->piece, r);
        walk(x, r, 1, where, &with);
        note_at(&with, derivatives_of(x, next).z, &where, 1);
        if (with.high.value > peak->high.value + RELATIVE_ROUNDING * fabs(peak->high.value))
            peak->high = with.high;
        if (with.low.value < peak->low.value - RELATIVE_ROUNDING * fabs(peak->low.value))
            peak->low = with.low;
        r = next;
        where.begin += where.length;
    }
}

static relative left_alone(const extremes *x, const rampwise_state *s)
{
    const int moved = x->c->input == RAMPWISE_BASE_DISPLACEMENT;
    return (relative){moved ? s->u - s->p : s->u, s->v, 0, 0, DBL_EPSILON * fabs(s->u),
                      DBL_EPSILON * fabs(s->v)};
}

double rampwise_extremes_after_begin_(const extremes *x, const rampwise_state *s)
{
    return derivatives_of(x, left_alone(x, s)).z;
}

double rampwise_extremes_limit_(const extremes *x, const rampwise_state *s)
{
    return comes_to(x, left_alone(x, s));
}

void rampwise_extremes_after_(const extremes *x, const rampwise_state *s, uint64_t sample,
                              rampwise_peak *peak)
{
    const relative r = left_alone(x, s);
    const int halvings = halvings_for(x, x->c->dt);
    const double length = ldexp(x->c->dt, -halvings);
    place where = {sample, 0, ldexp(1, -halvings)};
    extremes free = *x;
    free.piece.dt = length;
    note_value(peak, derivatives_of(x, r).z, sample, 0);
    if (!stays(x, r))
        note_growth(x, r, peak);
    else if (x->damping > 0)
        note_never_reached(peak, comes_to(x, r));
    if (halvings < -900 || !isfinite(length))
        return; /* no spring and no damper: the motion is even */
    if (!x->oscillates) {
        spread(x, r, length, where, peak);
        return;
    }
    if (stays(x, r) && rampwise_coeffs_make(&free.piece, &x->c->system, length, RAMPWISE_FORCE,
                                            RAMPWISE_RAMP) == RAMPWISE_OK)
        first_turn(&free, r, where, peak);
}
