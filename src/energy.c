#include "rampwise/energy.h"

#include <math.h>
#include <string.h>
#include "rampwise/motion.h"
#include "rampwise/peak.h"
#include "rampwise/status.h"
#include "energy_steps.h"
#include "one_step.h"
#include "samples.h"
#include "spectrum_list.h"
#include "valid.h"

enum { BLOCK = 64 }; /* samples whose energies are at hand at once */

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

/* ---- meters ---- */

static energy_sums sums_of(const rampwise_meter *meter)
{
    return (energy_sums){{meter->input[0], meter->input[1]},
                         {meter->dissipated[0], meter->dissipated[1]},
                         {meter->base_velocity[0], meter->base_velocity[1]}};
}

static void keep_sums(rampwise_meter *meter, const energy_sums *so_far)
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
    const energy_sums so_far = sums_of(meter);
    const rampwise_energy now = energies_at(meter, s, &so_far);
    if (!energy_is_finite(&now))
        return RAMPWISE_ERROR_OVERFLOW;
    *energy = now;
    return RAMPWISE_OK;
}

/* n samples in blocks, their energies into energy[n] where it is not NULL; how many went by before one
   overflows. */
static size_t advance(const rampwise_meter *meter, rampwise_state *s, energy_sums *so_far, size_t n,
                      const double *p, rampwise_energy *energy)
{
    rampwise_energy unseen[BLOCK];
    for (size_t done = 0, part; done < n; done += part) {
        part = n - done < BLOCK ? n - done : BLOCK;
        rampwise_energy *const to = energy != NULL ? energy + done : unseen;
        const size_t went =
            rampwise_kernels_(RAMPWISE_FASTEST)->energies(meter, s, so_far, part, p + done, to);
        if (went < part)
            return done + went;
    }
    return n;
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
    energy_sums so_far = sums_of(meter);
    const size_t reached = advance(meter, s, &so_far, n, p, energy);
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
    energy_sums so_far = sums_of(&meter);
    *last = energies_at(&meter, &s, &so_far);
    *greatest = 0;
    for (size_t done = 1, part; done < r->kind.n; done += part) {
        rampwise_energy energy[BLOCK];
        part = r->kind.n - done < BLOCK ? r->kind.n - done : BLOCK;
        if (advance(&meter, &s, &so_far, part, r->p + done, energy) < part) {
            *last = (rampwise_energy){INFINITY, INFINITY, INFINITY, INFINITY};
            *greatest = INFINITY;
            return;
        }
        for (size_t i = 0; i < part; ++i)
            *greatest = energy[i].input > *greatest ? energy[i].input : *greatest;
        *last = energy[part - 1];
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
