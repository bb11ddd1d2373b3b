/* The energies of one oscillator step by step: energy.c makes the coefficients, and the kernels
   (kernels/body.h) run this with the fused multiply-add that they have. */
#ifndef RAMPWISE_ENERGY_STEPS_H
#define RAMPWISE_ENERGY_STEPS_H

#include <math.h>
#include "rampwise/energy.h"
#include "rampwise/motion.h"
#include "twofold.h"

/* What is added up along the way. */
typedef struct energy_sums {
    twofold input, dissipated, base_velocity;
} energy_sums;

/* What acts in one step. The load is first + change x, x from 0 to 1, mean in the middle; the base's velocity
   is base[0] + base[1] (x - 1/2) + base[2] (x - 1/2)^2/2 where its work is asked for, base_shift its way. */
typedef struct course {
    double y, w; /* relative displacement and velocity at the beginning */
    double first, mean, change;
    double base[3], base_shift;
} course;

static inline int base_works(const rampwise_meter *meter)
{
    return meter->frame == RAMPWISE_ABSOLUTE && meter->coeffs.input != RAMPWISE_FORCE;
}

static inline void load_acts(course *along, double factor, double first, double next)
{
    along->first = factor * first;
    along->change = factor * (next - first);
    along->mean = factor * (0.5 * first + 0.5 * next);
}

/* The base's velocity from a line of acceleration, and its gain carried in two doubles. */
static inline void base_accelerates(course *along, twofold *velocity, double h, double first, double next)
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
static inline course course_of(const rampwise_coeffs *c, const rampwise_state *s, double p_next,
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

static inline double form(const double row[3], double velocity, double force, double change)
{
    return RAMPWISE_FMA(row[0], velocity, RAMPWISE_FMA(row[1], force, row[2] * change));
}

static inline double work_done(const rampwise_meter *meter, const course *along)
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
static inline double work_of_jump(const rampwise_coeffs *c, double u, double p, double p_next)
{
    if (c->input != RAMPWISE_BASE_DISPLACEMENT || c->between != RAMPWISE_HOLD)
        return 0;
    return 0.5 * c->system.stiffness * (p - p_next) * ((u - p) + (u - p_next));
}

static inline double energy_lost(const rampwise_meter *meter, const course *along)
{
    const double *const d = meter->squares;
    const double force = RAMPWISE_FMA(-meter->coeffs.system.stiffness, along->y, along->first);
    const double velocity = RAMPWISE_FMA(meter->into_velocity[0], force,
                                         RAMPWISE_FMA(meter->into_velocity[1], along->change, along->w));
    const double rest = RAMPWISE_FMA(meter->into_force, along->change, force);
    return RAMPWISE_FMA(d[0] * velocity, velocity,
                        RAMPWISE_FMA(d[1] * rest, rest, d[2] * along->change * along->change));
}

static inline twofold base_velocity_at(const rampwise_meter *meter, const rampwise_state *s,
                                       const energy_sums *so_far)
{
    if (base_works(meter) && meter->coeffs.input == RAMPWISE_BASE_ACCELERATION)
        return so_far->base_velocity;
    return (twofold){base_works(meter) && meter->coeffs.input == RAMPWISE_BASE_VELOCITY ? s->p : 0, 0};
}

static inline rampwise_energy energies_at(const rampwise_meter *meter, const rampwise_state *s,
                                          const energy_sums *so_far)
{
    const rampwise_system *const sys = &meter->coeffs.system;
    const twofold base = base_velocity_at(meter, s, so_far);
    const double velocity = (s->v + base.hi) + base.lo;
    const double stretch = rampwise_relative_displacement(&meter->coeffs, s);
    return (rampwise_energy){so_far->input.hi, 0.5 * sys->mass * velocity * velocity,
                             0.5 * sys->stiffness * stretch * stretch, so_far->dissipated.hi};
}

static inline int energy_is_finite(const rampwise_energy *energy)
{
    return isfinite(energy->input) && isfinite(energy->kinetic) && isfinite(energy->strain) &&
           isfinite(energy->dissipated);
}

/* One step of state and sums, and the energies after it; 0 and nothing changed where something overflows. */
static inline int take_step(const rampwise_meter *meter, rampwise_state *s, energy_sums *so_far,
                            double p_next, rampwise_energy *energy)
{
    energy_sums next = *so_far;
    rampwise_state after = *s;
    const course along = course_of(&meter->coeffs, s, p_next, &next.base_velocity);
    rampwise_step(&meter->coeffs, &after, p_next);
    const double work = work_done(meter, &along) + work_of_jump(&meter->coeffs, after.u, s->p, p_next);
    next.input = twofold_add(next.input, (twofold){work, 0});
    next.dissipated = twofold_add(next.dissipated, (twofold){energy_lost(meter, &along), 0});
    const rampwise_energy reached = energies_at(meter, &after, &next);
    if (!energy_is_finite(&reached)) /* nor are they where the state is not: 0 times infinity is NaN */
        return 0;
    *so_far = next;
    *s = after;
    *energy = reached;
    return 1;
}

#endif
