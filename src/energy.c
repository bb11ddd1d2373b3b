#include "rampwise/energy.h"

#include <math.h>
#include <string.h>
#include "rampwise/motion.h"
#include "rampwise/peak.h"
#include "rampwise/status.h"
#include "one_step.h"
#include "spectrum_list.h"
#include "valid.h"

/* What is added up along the way. */
typedef struct sums {
    twofold input, dissipated, base_velocity;
} sums;

/* What acts in one step. The load is first + change x, x from 0 to 1, mean in the middle; the
   base's velocity is base[0] + base[1] (x - 1/2) + base[2] (x - 1/2)^2/2 where its work is asked
   for, and base_shift its way. */
typedef struct course {
    double y, w; /* relative displacement and velocity at the beginning */
    double first, mean, change;
    double base[3], base_shift;
} course;

/* ---- coefficients ---- */

/* The integral over the step of (x - 1/2)^power/power! times the velocity in answer to an impulse, a constant
   load or a ramp (which = 0, 1, 2); G lists g, G1, G2 and so on from place 1, each the integral of the one
   before it. By parts. which = 3 is the displacement under a ramp. */
static twofold moment(const twofold *G, int which, int power)
{
    const twofold *const first = &G[which + 1];
    if (power == 0)
        return first[0];
    if (power == 1)
        return twofold_subtract(twofold_times_power(first[0], -1), first[1]);
    return twofold_add(twofold_subtract(twofold_times_power(first[0], -3), twofold_times_power(first[1], -1)),
                       first[2]);
}

/* The ramp here passes through zero in the middle of the step: its load is x - 1/2. */
static twofold centred_moment(const twofold *G, int which, int power)
{
    if (which < 2)
        return moment(G, which, power);
    return twofold_subtract(moment(G, which, power), twofold_times_power(moment(G, which - 1, power), -1));
}

/* The work of the load mean + change (x - 1/2) on the velocity, a form in its answers: the product of mean
   and change appears twice with opposite signs, and what is left of it meets the spring's force alone. */
static void work_of_load(rampwise_meter *meter, const step *s, const twofold *G)
{
    const scaled for_force = scaled_multiply(s->h, s->h_over_m);
    for (int power = 0; power < 2; ++power)
        for (int which = 0; which < 2 + power; ++which)
            meter->work[power][which] =
                rounded(which == 0 ? s->h : for_force, centred_moment(G, which, power));
}

/* The work of the base: moments of the mass's acceleration times its mass, which is the force of
   damper and spring with its sign changed. The spring's force at the beginning of the step, which
   does not change, is left out. */
static void work_of_base(rampwise_meter *meter, const step *s, const twofold *G)
{
    const scaled for_velocity = scaled_double(-meter->coeffs.system.mass),
                 for_force = scaled_double(-meter->coeffs.dt);
    for (int power = 0; power < 3; ++power)
        for (int which = 0; which < 3; ++which) {
            const twofold velocity = centred_moment(G, which, power);
            twofold displacement = moment(G, which + 1, power);
            if (which == 2)
                displacement = twofold_subtract(displacement, twofold_times_power(moment(G, 2, power), -1));
            meter->work[power][which] =
                rounded_pair(s, displacement, velocity, which == 0 ? for_velocity : for_force);
        }
}

static twofold unless_negative(twofold a)
{
    return a.hi < 0 ? (twofold){0, 0} : a;
}

/* The integral of the squared velocity, a quadratic form in velocity, force and change of load, as a sum of
   squares (the factors of Lagrange and Gauss): D1 (v + l f + m b)^2 + D2 (f + n b)^2 + D3 b^2. */
static void dissipation(rampwise_meter *meter, const step *s, const response *r, const integrals *more)
{
    const twofold vf = twofold_times_power(twofold_multiply(r->g, r->g), -1);
    const twofold fb = twofold_times_power(twofold_multiply(r->G1, r->G1), -1);
    const twofold vb = twofold_subtract(twofold_multiply(r->g, r->G1), more->constant);
    const twofold l = twofold_divide(vf, more->impulse), m = twofold_divide(vb, more->impulse);
    const twofold D2 = unless_negative(twofold_subtract(more->constant, twofold_multiply(l, vf)));
    const twofold n = D2.hi > 0 ? twofold_divide(twofold_subtract(fb, twofold_multiply(l, vb)), D2) : D2;
    const twofold of_others =
        twofold_add(twofold_multiply(m, vb), twofold_multiply(twofold_multiply(n, n), D2));
    const twofold D3 = unless_negative(twofold_subtract(more->ramp, of_others));
    const scaled for_velocity = scaled_multiply(scaled_double(meter->coeffs.system.damper), s->h);
    const scaled for_force = scaled_multiply(for_velocity, scaled_multiply(s->h_over_m, s->h_over_m));
    meter->into_velocity[0] = rounded(s->h_over_m, l);
    meter->into_velocity[1] = rounded(s->h_over_m, m);
    meter->into_force = n.hi;
    meter->squares[0] = rounded(for_velocity, more->impulse);
    meter->squares[1] = rounded(for_force, D2);
    meter->squares[2] = rounded(for_force, D3);
}

static int base_works(const rampwise_meter *meter)
{
    return meter->frame == RAMPWISE_ABSOLUTE && meter->coeffs.input != RAMPWISE_FORCE;
}

static int coefficients_are_finite(const rampwise_meter *meter)
{
    int finite =
        isfinite(meter->into_velocity[0]) && isfinite(meter->into_velocity[1]) && isfinite(meter->into_force);
    for (int i = 0; i < 3; ++i)
        finite = finite && isfinite(meter->squares[i]) && isfinite(meter->work[i][0]) &&
                 isfinite(meter->work[i][1]) && isfinite(meter->work[i][2]);
    return finite;
}

static int check_frame(int frame, int input)
{
    if (frame != RAMPWISE_RELATIVE && frame != RAMPWISE_ABSOLUTE)
        return RAMPWISE_ERROR_FRAME;
    if (frame == RAMPWISE_RELATIVE && input == RAMPWISE_BASE_DISPLACEMENT)
        return RAMPWISE_ERROR_IMPULSES;
    return RAMPWISE_OK;
}

static int make_meter(rampwise_meter *meter, const rampwise_coeffs *c, int frame)
{
    step s;
    response r;
    integrals more;
    int status = check_frame(frame, c->input);
    if (status == RAMPWISE_OK)
        status = rampwise_step_scale_(&s, &c->system, c->dt);
    if (status == RAMPWISE_OK)
        status = rampwise_step_response_(&r, &more, &s);
    if (status != RAMPWISE_OK)
        return status;
    const twofold G[7] = {{0, 0}, r.g, r.G1, r.G2, more.G3, more.G4, more.G5};
    memset(meter, 0, sizeof *meter);
    meter->coeffs = *c;
    meter->frame = frame;
    if (base_works(meter))
        work_of_base(meter, &s, G);
    else
        work_of_load(meter, &s, G);
    dissipation(meter, &s, &r, &more);
    return coefficients_are_finite(meter) ? RAMPWISE_OK : RAMPWISE_ERROR_COEFFICIENT;
}

/* ---- one step ---- */

static void load_acts(course *along, double factor, double first, double next)
{
    along->first = factor * first;
    along->change = factor * (next - first);
    along->mean = factor * (0.5 * first + 0.5 * next);
}

/* The base's velocity from a line of acceleration, and its gain carried in two doubles. */
static void base_accelerates(course *along, twofold *velocity, double h, double first, double next)
{
    const twofold sum = twofold_sum(first, next);
    const double gain = 0.5 * h * sum.hi;
    const double rest = RAMPWISE_FMA(0.5 * h, sum.hi, -gain) + 0.5 * h * sum.lo;
    along->base[1] = gain;
    along->base[2] = h * (next - first);
    along->base[0] = RAMPWISE_FMA(0.5, gain, RAMPWISE_FMA(-0.125, along->base[2], velocity->hi));
    *velocity = twofold_add(*velocity, twofold_ordered_sum(gain, rest));
}

/* What acts between the state and the next sample; the base's velocity goes on to that sample. */
static course course_of(const rampwise_coeffs *c, const rampwise_state *s, double p_next,
                        twofold *base_velocity)
{
    const double held = c->between == RAMPWISE_HOLD ? s->p : p_next;
    const double rate = (held - s->p) / c->dt;
    course along = {s->u, s->v, 0, 0, 0, {0, 0, 0}, 0};
    switch (c->input) {
    case RAMPWISE_FORCE:
        load_acts(&along, 1, s->p, held);
        break;
    case RAMPWISE_BASE_ACCELERATION:
        load_acts(&along, -c->system.mass, s->p, held);
        base_accelerates(&along, base_velocity, c->dt, s->p, held);
        break;
    case RAMPWISE_BASE_VELOCITY:
        load_acts(&along, -c->system.mass, rate, rate);
        along.base[0] = 0.5 * s->p + 0.5 * held;
        along.base[1] = held - s->p;
        break;
    default:
        along.y = s->u - s->p;
        along.w = s->v - rate;
        along.base[0] = rate;
    }
    along.base_shift = c->dt * RAMPWISE_FMA(along.base[2], 1.0 / 24, along.base[0]);
    return along;
}

static double form(const double row[3], double velocity, double force, double change)
{
    return RAMPWISE_FMA(row[0], velocity, RAMPWISE_FMA(row[1], force, row[2] * change));
}

static double work_done(const rampwise_meter *meter, const course *along)
{
    const double(*const row)[3] = meter->work;
    const double stiffness = meter->coeffs.system.stiffness, spring = -stiffness * along->y;
    const double force = RAMPWISE_FMA(-stiffness, along->y, along->mean);
    const double first = form(row[0], along->w, force, along->change);
    if (!base_works(meter))
        return RAMPWISE_FMA(along->mean, first,
                            along->change * form(row[1], along->w, spring, along->change));
    const double second = form(row[1], along->w, force, along->change);
    const double third = form(row[2], along->w, force, along->change);
    const double turning = RAMPWISE_FMA(along->base[1], second, along->base[2] * third);
    return RAMPWISE_FMA(spring, along->base_shift, RAMPWISE_FMA(along->base[0], first, turning));
}

/* Of a held base displacement, on the spring. */
static double work_of_jump(const rampwise_coeffs *c, double u, double p, double p_next)
{
    if (c->input != RAMPWISE_BASE_DISPLACEMENT || c->between != RAMPWISE_HOLD)
        return 0;
    return 0.5 * c->system.stiffness * (p - p_next) * ((u - p) + (u - p_next));
}

static double energy_lost(const rampwise_meter *meter, const course *along)
{
    const double *const d = meter->squares;
    const double force = RAMPWISE_FMA(-meter->coeffs.system.stiffness, along->y, along->first);
    const double velocity = RAMPWISE_FMA(meter->into_velocity[0], force,
                                         RAMPWISE_FMA(meter->into_velocity[1], along->change, along->w));
    const double rest = RAMPWISE_FMA(meter->into_force, along->change, force);
    return RAMPWISE_FMA(d[0] * velocity, velocity,
                        RAMPWISE_FMA(d[1] * rest, rest, d[2] * along->change * along->change));
}

static twofold base_velocity_at(const rampwise_meter *meter, const rampwise_state *s, const sums *so_far)
{
    if (base_works(meter) && meter->coeffs.input == RAMPWISE_BASE_ACCELERATION)
        return so_far->base_velocity;
    return (twofold){base_works(meter) && meter->coeffs.input == RAMPWISE_BASE_VELOCITY ? s->p : 0, 0};
}

static rampwise_energy energies(const rampwise_meter *meter, const rampwise_state *s, const sums *so_far)
{
    const rampwise_system *const sys = &meter->coeffs.system;
    const twofold base = base_velocity_at(meter, s, so_far);
    const double velocity = (s->v + base.hi) + base.lo;
    const double stretch = rampwise_relative_displacement(&meter->coeffs, s);
    return (rampwise_energy){so_far->input.hi, 0.5 * sys->mass * velocity * velocity,
                             0.5 * sys->stiffness * stretch * stretch, so_far->dissipated.hi};
}

static int energy_is_finite(const rampwise_energy *energy)
{
    return isfinite(energy->input) && isfinite(energy->kinetic) && isfinite(energy->strain) &&
           isfinite(energy->dissipated);
}

/* One step of state and sums, and the energies after it; 0 and nothing changed where something overflows. */
static int take_step(const rampwise_meter *meter, rampwise_state *s, sums *so_far, double p_next,
                     rampwise_energy *energy)
{
    sums next = *so_far;
    rampwise_state after = *s;
    const course along = course_of(&meter->coeffs, s, p_next, &next.base_velocity);
    rampwise_step(&meter->coeffs, &after, p_next);
    const double work = work_done(meter, &along) + work_of_jump(&meter->coeffs, after.u, s->p, p_next);
    next.input = twofold_add(next.input, (twofold){work, 0});
    next.dissipated = twofold_add(next.dissipated, (twofold){energy_lost(meter, &along), 0});
    const rampwise_energy reached = energies(meter, &after, &next);
    if (!state_is_finite(&after) || !energy_is_finite(&reached))
        return 0;
    *so_far = next;
    *s = after;
    *energy = reached;
    return 1;
}

/* ---- meters ---- */

static sums sums_of(const rampwise_meter *meter)
{
    return (sums){{meter->input[0], meter->input[1]},
                  {meter->dissipated[0], meter->dissipated[1]},
                  {meter->base_velocity[0], meter->base_velocity[1]}};
}

static void keep_sums(rampwise_meter *meter, const sums *so_far)
{
    meter->input[0] = so_far->input.hi;
    meter->input[1] = so_far->input.lo;
    meter->dissipated[0] = so_far->dissipated.hi;
    meter->dissipated[1] = so_far->dissipated.lo;
    meter->base_velocity[0] = so_far->base_velocity.hi;
    meter->base_velocity[1] = so_far->base_velocity.lo;
}

static int meter_is_made(const rampwise_meter *meter)
{
    return coeffs_are_made(&meter->coeffs) && check_frame(meter->frame, meter->coeffs.input) == RAMPWISE_OK;
}

int rampwise_meter_start(rampwise_meter *meter, const rampwise_coeffs *c, const rampwise_state *s, int frame)
{
    rampwise_meter made;
    rampwise_energy energy;
    if (meter == NULL || c == NULL || s == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = check_pair(c, s);
    if (status == RAMPWISE_OK)
        status = make_meter(&made, c, frame);
    if (status == RAMPWISE_OK)
        status = rampwise_meter_read(&made, s, &energy);
    if (status == RAMPWISE_OK)
        *meter = made;
    return status;
}

int rampwise_meter_read(const rampwise_meter *meter, const rampwise_state *s, rampwise_energy *energy)
{
    if (meter == NULL || s == NULL || energy == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!meter_is_made(meter))
        return RAMPWISE_ERROR_NOT_MADE;
    const sums so_far = sums_of(meter);
    const rampwise_energy now = energies(meter, s, &so_far);
    if (!energy_is_finite(&now))
        return RAMPWISE_ERROR_OVERFLOW;
    *energy = now;
    return RAMPWISE_OK;
}

int rampwise_meter_run(rampwise_meter *meter, rampwise_state *s, size_t n, const double *p,
                       rampwise_energy *energy, size_t *bad)
{
    if (meter == NULL || s == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = meter_is_made(meter) ? check_pair(&meter->coeffs, s) : RAMPWISE_ERROR_NOT_MADE;
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    sums so_far = sums_of(meter);
    rampwise_energy now;
    size_t reached = 0;
    for (; reached < n && take_step(meter, s, &so_far, p[reached], &now); ++reached)
        if (energy != NULL)
            energy[reached] = now;
    keep_sums(meter, &so_far);
    return reached < n ? blame(RAMPWISE_ERROR_OVERFLOW, reached, bad) : RAMPWISE_OK;
}

int rampwise_energy_solve(const rampwise_coeffs *c, int frame, double u0, double v0, size_t n,
                          const double *p, rampwise_energy *energy, size_t *bad)
{
    if (c == NULL || ((p == NULL || energy == NULL) && n > 0))
        return RAMPWISE_ERROR_MISSING;
    rampwise_state s;
    rampwise_meter meter;
    size_t wrong = 0;
    rampwise_start(&s, u0, v0, 0);
    int status = check_pair(c, &s);
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    rampwise_start(&s, u0, v0, n > 0 ? p[0] : 0);
    status = rampwise_meter_start(&meter, c, &s, frame);
    if (status == RAMPWISE_ERROR_OVERFLOW)
        return blame(status, 0, bad);
    if (status != RAMPWISE_OK || n == 0)
        return status;
    (void)rampwise_meter_read(&meter, &s, &energy[0]);
    status = rampwise_meter_run(&meter, &s, n - 1, p + 1, energy + 1, &wrong);
    return status == RAMPWISE_OK ? status : blame(status, wrong + 1, bad);
}

/* ---- spectra ---- */

typedef struct record {
    record_kind kind; /* whose quantity does not matter */
    const double *p;
    int frame;
} record;

/* Oscillator and meter, at rest under the first sample. */
static int start_oscillator(const record *r, double omega, double zeta, rampwise_meter *meter,
                            rampwise_state *s)
{
    rampwise_coeffs c;
    rampwise_start(s, 0, 0, r->p[0]);
    const int status = rampwise_record_oscillator_(&r->kind, omega, zeta, &c);
    return status == RAMPWISE_OK ? rampwise_meter_start(meter, &c, s, r->frame) : status;
}

static void respond(const record *r, double omega, double zeta, rampwise_energy *last, double *greatest)
{
    rampwise_meter meter;
    rampwise_state s;
    (void)start_oscillator(r, omega, zeta, &meter, &s);
    sums so_far = sums_of(&meter);
    *last = energies(&meter, &s, &so_far);
    *greatest = 0;
    for (size_t i = 1; i < r->kind.n; ++i) {
        if (!take_step(&meter, &s, &so_far, r->p[i], last)) {
            *last = (rampwise_energy){INFINITY, INFINITY, INFINITY, INFINITY};
            *greatest = INFINITY;
            return;
        }
        *greatest = last->input > *greatest ? last->input : *greatest;
    }
}

static int check_record(const record *r, size_t *bad)
{
    int status = rampwise_record_kind_check_(&r->kind);
    if (status == RAMPWISE_OK)
        status = check_frame(r->frame, r->kind.input);
    return status == RAMPWISE_OK ? check_samples(r->kind.n, r->p, bad) : status;
}

int rampwise_energy_spectrum(size_t n, double dt, const double *p, int input, int frame, size_t n_osc,
                             const double *omega, const double *zeta, rampwise_energy *last, double *greatest,
                             size_t *bad)
{
    const record r = {{n, dt, input, RAMPWISE_DISPLACEMENT}, p, frame};
    if (p == NULL || (n_osc > 0 && (omega == NULL || zeta == NULL)))
        return RAMPWISE_ERROR_MISSING;
    int status = check_record(&r, bad);
    for (size_t i = 0; status == RAMPWISE_OK && i < n_osc; ++i) {
        rampwise_meter meter;
        rampwise_state s;
        status = start_oscillator(&r, omega[i], zeta[i], &meter, &s);
        if (status != RAMPWISE_OK)
            return blame(status, i, bad);
    }
    for (size_t i = 0; status == RAMPWISE_OK && i < n_osc; ++i) {
        rampwise_energy reached;
        double most;
        respond(&r, omega[i], zeta[i], &reached, &most);
        if (last != NULL)
            last[i] = reached;
        if (greatest != NULL)
            greatest[i] = most;
    }
    return status;
}
