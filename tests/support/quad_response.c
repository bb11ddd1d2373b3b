#include "quad_response.h"

#include <math.h>
#include <string.h>

enum { TERMS = 32 }; /* of a quarter radian: the rest is below 1e-50 */

/* Relative motion y'' + damping y' + stiffness y = f + f_slope t inside a step; the base's acceleration is
   -f - f_slope t for a moving base. */
typedef struct motion {
    quad damping, stiffness, y, w, f, f_slope;
} motion;

/* Powers of x = t/length in [0, 1] */
typedef struct series {
    quad y[TERMS], z[TERMS];
} series;

static quad size_of(quad a)
{
    return a < 0 ? -a : a;
}

static quad value_at(const quad *power, quad x)
{
    quad sum = 0;
    for (int n = TERMS - 1; n >= 0; --n)
        sum = sum * x + power[n];
    return sum;
}

/* Its last term is zero. */
static void derive(const quad *power, quad *derivative)
{
    for (int n = 0; n + 1 < TERMS; ++n)
        derivative[n] = (n + 1) * power[n + 1];
    derivative[TERMS - 1] = 0;
}

static quad slope_at_end(const quad *power)
{
    quad slope[TERMS];
    derive(power, slope);
    return value_at(slope, 1);
}

static void series_of(const rampwise_coeffs *c, int quantity, const motion *m, quad length, series *s)
{
    const quad S = m->damping * length, K = m->stiffness * length * length;
    s->y[0] = m->y;
    s->y[1] = m->w * length;
    for (int n = 0; n + 2 < TERMS; ++n) {
        quad right = -S * (n + 1) * s->y[n + 1] - K * s->y[n];
        right += n == 0 ? m->f * length * length : n == 1 ? m->f_slope * length * length * length : 0;
        s->y[n + 2] = right / ((n + 1) * (n + 2));
    }
    for (int n = 0; n < TERMS; ++n) {
        const quad w = n + 1 < TERMS ? (n + 1) * s->y[n + 1] / length : 0;
        const quad a = n + 2 < TERMS ? (n + 1) * (n + 2) * s->y[n + 2] / (length * length) : 0;
        const quad load = n == 0 ? m->f : n == 1 ? m->f_slope * length : 0;
        if (quantity == RAMPWISE_DISPLACEMENT)
            s->z[n] = s->y[n];
        else if (quantity == RAMPWISE_VELOCITY)
            s->z[n] = w;
        else
            s->z[n] = c->input == RAMPWISE_FORCE ? a : a - load;
    }
}

static void note(quad_peaks *peaks, quad value, quad time, quad sharp)
{
    if (value > peaks->high.value) {
        if (size_of(time - peaks->high.time) > (quad)1e-3 && peaks->high.value > peaks->next_high)
            peaks->next_high = peaks->high.value;
        peaks->high = (quad_extreme){value, time, sharp};
    } else if (size_of(time - peaks->high.time) > (quad)1e-3 && value > peaks->next_high) {
        peaks->next_high = value;
    }
    if (value < peaks->low.value) {
        if (size_of(time - peaks->low.time) > (quad)1e-3 && peaks->low.value < peaks->next_low)
            peaks->next_low = peaks->low.value;
        peaks->low = (quad_extreme){value, time, sharp};
    } else if (size_of(time - peaks->low.time) > (quad)1e-3 && value < peaks->next_low) {
        peaks->next_low = value;
    }
}

/* Bisection to a hundred bits: slow and certain. */
static quad zero_between(const quad *power, quad low, quad high)
{
    const int rising = value_at(power, low) < 0;
    for (int i = 0; i < 104; ++i) {
        const quad middle = (low + high) / 2;
        if ((value_at(power, middle) < 0) == rising)
            low = middle;
        else
            high = middle;
    }
    return (low + high) / 2;
}

/* A quantity inside a piece, its first and its second derivative */
typedef struct shape {
    quad z[TERMS], slope[TERMS], bend[TERMS];
} shape;

static void scan_part(const shape *s, quad low, quad high, quad begin, quad length, quad_peaks *peaks)
{
    const quad a = value_at(s->slope, low), b = value_at(s->slope, high);
    if ((a < 0 && b > 0) || (a > 0 && b < 0)) {
        const quad x = zero_between(s->slope, low, high);
        note(peaks, value_at(s->z, x), begin + x * length, size_of(value_at(s->bend, x)) / (length * length));
    }
}

static void scan_piece(const quad *z, quad begin, quad length, quad_peaks *peaks)
{
    shape s;
    memcpy(s.z, z, sizeof s.z);
    derive(s.z, s.slope);
    derive(s.slope, s.bend);
    const quad a = value_at(s.bend, 0), b = value_at(s.bend, 1);
    if ((a < 0 && b > 0) || (a > 0 && b < 0)) {
        const quad turn = zero_between(s.bend, 0, 1);
        scan_part(&s, 0, turn, begin, length, peaks);
        scan_part(&s, turn, 1, begin, length, peaks);
    } else {
        scan_part(&s, 0, 1, begin, length, peaks);
    }
}

/* What the step from p to p_next does to relative coordinates, after the line before it had `slope`. */
static void enter_step(const rampwise_coeffs *c, motion *m, quad p, quad p_next, quad *slope)
{
    const quad h = c->dt, next = c->between == RAMPWISE_RAMP ? (p_next - p) / h : 0;
    m->f = m->f_slope = 0;
    if (c->input == RAMPWISE_FORCE) {
        m->f = p / (quad)c->system.mass;
        m->f_slope = next / (quad)c->system.mass;
    } else if (c->input == RAMPWISE_BASE_ACCELERATION) {
        m->f = -p;
        m->f_slope = -next;
    } else if (c->input == RAMPWISE_BASE_VELOCITY) {
        m->f = -next;
    } else {
        m->w += *slope - next;
    }
    *slope = next;
}

static int pieces_for(const rampwise_coeffs *c)
{
    const double S = fabs(c->system.damper) / c->system.mass * c->dt;
    const double theta = sqrt(fabs(c->system.stiffness) / c->system.mass) * c->dt;
    return 1 + (int)(4 * fmax(S, theta));
}

static motion at_start(const rampwise_coeffs *c, double u0, double v0, double p0)
{
    motion m = {(quad)c->system.damper / (quad)c->system.mass,
                (quad)c->system.stiffness / (quad)c->system.mass,
                u0,
                v0,
                0,
                0};
    if (c->input == RAMPWISE_BASE_DISPLACEMENT)
        m.y -= (quad)p0;
    return m;
}

/* The quantity at sample 0, where a line of slope zero ends. */
static quad first_value(const rampwise_coeffs *c, const motion *m, double p0, int quantity)
{
    const quad total = -m->damping * m->w - m->stiffness * m->y;
    if (quantity == RAMPWISE_DISPLACEMENT)
        return m->y;
    if (quantity == RAMPWISE_VELOCITY)
        return m->w;
    return c->input == RAMPWISE_FORCE ? total + (quad)p0 / (quad)c->system.mass : total;
}

/* To p[n - 1] where peaks are wanted, else to `time`, whose value is returned. */
static quad go(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p, int quantity,
               quad time, quad_peaks *peaks)
{
    const int pieces = pieces_for(c);
    const quad length = (quad)1 / pieces;
    motion m = at_start(c, u0, v0, p[0]);
    quad slope = 0, value = first_value(c, &m, p[0], quantity);
    series s;
    if (peaks != NULL) {
        peaks->high = peaks->low = (quad_extreme){value, 0, 0};
        peaks->next_high = -INFINITY;
        peaks->next_low = INFINITY;
    }
    for (size_t i = 0; i + 1 < n; ++i) {
        enter_step(c, &m, p[i], p[i + 1], &slope);
        for (int k = 0; k < pieces; ++k) {
            const quad begin = (quad)i + k * length;
            series_of(c, quantity, &m, length * (quad)c->dt, &s);
            if (peaks != NULL) {
                note(peaks, s.z[0], begin, 0);
                scan_piece(s.z, begin, length, peaks);
                note(peaks, value_at(s.z, 1), begin + length, 0);
            } else if (time < begin + length || (i + 2 == n && k + 1 == pieces)) {
                return value_at(s.z, (time - begin) / length);
            }
            m.y = value_at(s.y, 1);
            m.w = slope_at_end(s.y) / (length * (quad)c->dt);
            m.f += m.f_slope * length * (quad)c->dt;
        }
        if (c->input == RAMPWISE_BASE_DISPLACEMENT && c->between == RAMPWISE_HOLD)
            m.y -= (quad)p[i + 1] - (quad)p[i];
    }
    return value;
}

void quad_response(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p, int quantity,
                   quad_peaks *peaks)
{
    (void)go(c, u0, v0, n, p, quantity, 0, peaks);
}

quad quad_value(const rampwise_coeffs *c, double u0, double v0, size_t n, const double *p, int quantity,
                quad time)
{
    return go(c, u0, v0, n, p, quantity, time, NULL);
}

enum { FACTORS = 26 }; /* of a quarter radian: the rest is below 1e-40 */

/* Integral over x from 0 to 1 of the product of two polynomials */
static quad integral_of_product(const quad *a, int a_count, const quad *b, int b_count)
{
    quad sum = 0;
    for (int i = 0; i < a_count; ++i)
        for (int j = 0; j < b_count; ++j)
            sum += a[i] * b[j] / (i + j + 1);
    return sum;
}

/* The frame's base velocity, where it has one */
typedef struct frame_motion {
    int absolute;
    quad velocity;
} frame_motion;

/* Over one piece of a step: work of the frame's force and what the damper takes. */
static void add_piece(const rampwise_coeffs *c, frame_motion *frame, const motion *m, quad length, quad slope,
                      quad_energy *energy)
{
    const quad h = length * (quad)c->dt, load[2] = {m->f, m->f_slope * h};
    series s;
    quad w[FACTORS], a[FACTORS];
    series_of(c, RAMPWISE_DISPLACEMENT, m, h, &s);
    for (int n = 0; n < FACTORS; ++n) {
        w[n] = (n + 1) * s.y[n + 1] / h;
        a[n] = (n + 1) * (n + 2) * s.y[n + 2] / (h * h) - (n < 2 ? load[n] : 0);
    }
    energy->dissipated += (quad)c->system.damper * h * integral_of_product(w, FACTORS, w, FACTORS);
    if (!frame->absolute || c->input == RAMPWISE_FORCE) {
        energy->input += (quad)c->system.mass * h * integral_of_product(load, 2, w, FACTORS);
        return;
    }
    if (c->input == RAMPWISE_BASE_DISPLACEMENT)
        frame->velocity = slope;
    const quad base[3] = {frame->velocity, -load[0] * h, -load[1] * h / 2};
    energy->input += (quad)c->system.mass * h * integral_of_product(a, FACTORS, base, 3);
    frame->velocity = base[0] + base[1] + base[2];
}

static void take_changes(const quad_energy *before, const quad_energy *now, quad moved[4], quad *largest)
{
    moved[0] += size_of(now->input - before->input);
    moved[1] += size_of(now->kinetic - before->kinetic);
    moved[2] += size_of(now->strain - before->strain);
    moved[3] += size_of(now->dissipated - before->dissipated);
    *largest = 0;
    for (int i = 0; i < 4; ++i)
        *largest = moved[i] > *largest ? moved[i] : *largest;
}

/* Those of the motion that is reached. */
static void note_motion(const rampwise_coeffs *c, const frame_motion *frame, const motion *m, quad slope,
                        quad_energy *energy)
{
    const quad base = c->input == RAMPWISE_BASE_DISPLACEMENT ? slope : frame->absolute ? frame->velocity : 0;
    energy->kinetic = (quad)c->system.mass * (m->w + base) * (m->w + base) / 2;
    energy->strain = (quad)c->system.stiffness * m->y * m->y / 2;
}

/* Steps are cut into four pieces or more, so that what comes and goes inside them is seen. */
void quad_energies(const rampwise_coeffs *c, int frame_kind, double u0, double v0, size_t n, const double *p,
                   quad_energy *energy)
{
    const int pieces = pieces_for(c) < 4 ? 4 : pieces_for(c);
    const quad length = (quad)1 / pieces, h = length * (quad)c->dt;
    const quad_energy nothing = {0, 0, 0, 0, 0, 0};
    motion m = at_start(c, u0, v0, p[0]);
    frame_motion frame = {frame_kind == RAMPWISE_ABSOLUTE, c->input == RAMPWISE_BASE_VELOCITY ? p[0] : 0};
    quad slope = 0, moved[4] = {0, 0, 0, 0}, moved_inside[4] = {0, 0, 0, 0};
    energy[0] = nothing;
    note_motion(c, &frame, &m, slope, &energy[0]);
    take_changes(&nothing, &energy[0], moved, &energy[0].moved);
    take_changes(&nothing, &energy[0], moved_inside, &energy[0].moved_inside);
    for (size_t i = 0; i + 1 < n; ++i) {
        quad_energy now = energy[i];
        series s;
        enter_step(c, &m, p[i], p[i + 1], &slope);
        for (int k = 0; k < pieces; ++k) {
            const quad_energy before = now;
            add_piece(c, &frame, &m, length, slope, &now);
            series_of(c, RAMPWISE_DISPLACEMENT, &m, h, &s);
            m.y = value_at(s.y, 1);
            m.w = slope_at_end(s.y) / h;
            m.f += m.f_slope * h;
            note_motion(c, &frame, &m, slope, &now);
            take_changes(&before, &now, moved_inside, &now.moved_inside);
        }
        if (c->input == RAMPWISE_BASE_DISPLACEMENT && c->between == RAMPWISE_HOLD) {
            const quad_energy before = now;
            m.y -= (quad)p[i + 1] - (quad)p[i];
            note_motion(c, &frame, &m, slope, &now);
            now.input += now.strain - before.strain;
            take_changes(&before, &now, moved_inside, &now.moved_inside);
        }
        take_changes(&energy[i], &now, moved, &now.moved);
        energy[i + 1] = now;
    }
}
