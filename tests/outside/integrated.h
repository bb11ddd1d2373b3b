/* The equation of motion integrated by GSL's adaptive driver, with a bound of the error that it
   allows itself: what the library's closed forms are compared with.

   The right-hand side is written from the forces on the mass, never from coefficients of a step:

       force p:               m u'' + c u'         + k u       = p
       base acceleration p:   m u'' + c u'         + k u       = -m p    (u relative)
       base velocity p:       m u'' + c u'         + k u       = -m p'   (u relative)
       base displacement p:   m u'' + c (u' - p')  + k (u - p) = 0       (u absolute)

   The bound. The driver accepts a step of its own when its estimates of the errors in u and v are
   no more than 10 percent above D = 1e-12 (scale + |y|) of each (GSL's manual, "Adaptive Step-size
   Control"). What it makes of them later is a free motion, which two norms bound:

   - With the roots r1, r2 of m r^2 + c r + k = 0, an error (du, dv) is the sum of two motions of
     the sizes (dv + |r2| du)/|r1 - r2| and (dv + |r1| du)/|r1 - r2| in u, |r1| and |r2| times as
     much in v, which grow as exp(Re r t).
   - Where the roots are close together that is large, where they are equal infinite. In the norm
     |(w u, v)| an error grows as exp(mu t) at most, mu being the logarithmic norm of the equation,
     the larger eigenvalue of the symmetric part of [[0, w], [-k/(m w), -S]], S = c/m:
     mu = (-S + sqrt(S^2 + (w - k/(m w))^2))/2. With w = sqrt(|k|/m) it is 0 for all stable systems
     with a spring; for a free mass w = 1/duration takes the whole way that a wrong velocity leads.

   The smaller bound counts. Rounding, on either side some 1e-15 of the same sizes a step, is lost
   in D.

   The method is rk8pd, the Runge-Kutta pair of orders 8 and 7 of Prince and Dormand, which goes on
   with the result of order 8. Its steps are kept below 1/|r|: there, for a decay and for a free
   vibration alike, that result is nearer to the truth than a seventh of the estimate (measured; at
   6/|r|, which the estimate alone would allow, it is as wrong as the estimate, and nothing decays).
   GSL's methods for stiff equations need fewer steps where the damping is strong, but their errors
   do not move as free motions do: in a multistep method they go through the steps before, and the
   implicit Gauss method does not damp the fast root. */
#ifndef INTEGRATED_H
#define INTEGRATED_H

#include <check.h>
#include <float.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_odeiv2.h>
#include <math.h>
#include "rampwise.h"

#define INTEGRATED_TOLERANCE 1e-12

/* What is compared. The first four are the outputs of a history. */
enum {
    MOTION_U,
    MOTION_V,
    MOTION_A,
    MOTION_TOTAL,
    MOTION_RELATIVE_U,
    MOTION_RELATIVE_V,
    MOTION_SPRING,
    MOTION_DAMPER,
    MOTIONS
};

/* One of them, how far it may be off, and the sum of the sizes of the terms it is made of. */
typedef struct integrated_value {
    double value, tolerance, size;
} integrated_value;

typedef struct integrated {
    rampwise_system sys;
    int input;
    double p, slope;           /* the present line of the input: p + slope t */
    double size_p, size_slope; /* of the samples these are made of */
    double t, y[2];            /* time on this line, displacement and velocity */
    double scale[2];           /* sizes of u and v that one interval of input makes */
    double w, growth, error;   /* the norm, mu, and the bound in it */
    double size_r[2], growth_r[2], distance_r, error_r[2]; /* the roots, and the bound in them */
    unsigned long steps;
    gsl_odeiv2_system equation;
    gsl_odeiv2_driver *driver;
} integrated;

/* u'' with the input and its slope as they are at time t of the present line. */
static inline double integrated_acceleration(const integrated *e, double t, double u, double v)
{
    const double m = e->sys.mass, c = e->sys.damper, k = e->sys.stiffness;
    const double p = e->p + e->slope * t;
    switch (e->input) {
    case RAMPWISE_FORCE:
        return (p - c * v - k * u) / m;
    case RAMPWISE_BASE_ACCELERATION:
        return -(c * v + k * u) / m - p;
    case RAMPWISE_BASE_VELOCITY:
        return -(c * v + k * u) / m - e->slope;
    default:
        return -(c * (v - e->slope) + k * (u - p)) / m;
    }
}

static inline int integrated_derivative(double t, const double y[], double dydt[], void *context)
{
    dydt[0] = y[1];
    dydt[1] = integrated_acceleration(context, t, y[0], y[1]);
    return GSL_SUCCESS;
}

/* The largest acceleration that inputs up to `size` give, changing over intervals of h and more. */
static inline double integrated_felt(const rampwise_system *sys, int input, double size, double h)
{
    switch (input) {
    case RAMPWISE_FORCE:
        return size / sys->mass;
    case RAMPWISE_BASE_ACCELERATION:
        return size;
    case RAMPWISE_BASE_VELOCITY:
        return 2 * size / h;
    default:
        return (fabs(sys->stiffness) + 2 * fabs(sys->damper) / h) * size / sys->mass;
    }
}

/* |r|, Re r and |r1 - r2|; the smaller root from the product of both, which keeps its digits. */
static inline void integrated_roots(integrated *e)
{
    const double S = e->sys.damper / e->sys.mass, square = e->sys.stiffness / e->sys.mass;
    const double quarter = 0.25 * S * S - square;
    e->distance_r = 2 * sqrt(fabs(quarter));
    if (quarter > 0) {
        e->growth_r[0] = -(0.5 * S + copysign(sqrt(quarter), S));
        e->growth_r[1] = square / e->growth_r[0];
        e->size_r[0] = fabs(e->growth_r[0]);
        e->size_r[1] = fabs(e->growth_r[1]);
    } else {
        e->growth_r[0] = e->growth_r[1] = -0.5 * S;
        e->size_r[0] = e->size_r[1] = sqrt(square);
    }
}

/* For inputs up to `size` in intervals of about h, over `duration`. *e must stay where it is. */
static inline void integrated_init(integrated *e, const rampwise_system *sys, int input, double size,
                                   double h, double duration)
{
    const double S = sys->damper / sys->mass, omega = sqrt(fabs(sys->stiffness) / sys->mass);
    const double felt = integrated_felt(sys, input, size, h);
    const double reach = fmin(h, 1 / omega), brake = fmin(reach, 1 / fabs(S));
    gsl_set_error_handler_off();
    e->sys = *sys;
    e->input = input;
    e->w = omega > 0 ? omega : 1 / duration;
    e->growth = 0.5 * (-S + hypot(S, e->w - sys->stiffness / sys->mass / e->w));
    integrated_roots(e);
    e->scale[1] = felt > 0 ? felt * brake : size / reach;
    e->scale[0] = e->scale[1] * reach;
    e->steps = 0;
    e->equation = (gsl_odeiv2_system){integrated_derivative, NULL, 2, e};
    e->driver =
        gsl_odeiv2_driver_alloc_scaled_new(&e->equation, gsl_odeiv2_step_rk8pd, reach / 16,
                                           INTEGRATED_TOLERANCE, INTEGRATED_TOLERANCE, 1, 0, e->scale);
    ck_assert_ptr_nonnull(e->driver);
}

static inline void integrated_clear(integrated *e)
{
    gsl_odeiv2_driver_free(e->driver);
}

/* From here on the input is the line from p0 to p1 in a time of h: a corner, so the driver starts
   afresh. */
static inline void integrated_ramp(integrated *e, double p0, double p1, double h)
{
    e->p = p0;
    e->slope = (p1 - p0) / h;
    e->size_p = fabs(p0) + fabs(p1);
    e->size_slope = e->size_p / h;
    e->t = 0;
    ck_assert_int_eq(gsl_odeiv2_driver_reset(e->driver), GSL_SUCCESS);
}

/* From here on the input is p. */
static inline void integrated_hold(integrated *e, double p)
{
    integrated_ramp(e, p, p, INFINITY);
}

static inline void integrated_start(integrated *e, double u0, double v0, double p0)
{
    e->y[0] = u0;
    e->y[1] = v0;
    e->error = e->error_r[0] = e->error_r[1] = 0;
    integrated_hold(e, p0);
}

/* The bound after one more step of the driver, from time `from` to e->t. */
static inline void integrated_allow(integrated *e, double from)
{
    const double du = 1.1 * INTEGRATED_TOLERANCE * (e->scale[0] + fabs(e->y[0]));
    const double dv = 1.1 * INTEGRATED_TOLERANCE * (e->scale[1] + fabs(e->y[1]));
    const double time = e->t - from;
    e->error = e->error * exp(e->growth * time) + hypot(e->w * du, dv);
    for (int i = 0; i < 2; ++i)
        e->error_r[i] =
            e->error_r[i] * exp(e->growth_r[i] * time) + (dv + e->size_r[1 - i] * du) / e->distance_r;
}

static inline double integrated_error_u(const integrated *e)
{
    return fmin(e->error / e->w, e->error_r[0] + e->error_r[1]);
}

static inline double integrated_error_v(const integrated *e)
{
    return fmin(e->error, e->size_r[0] * e->error_r[0] + e->size_r[1] * e->error_r[1]);
}

/* On to time t of the present line: the driver's own loop, for the sake of the bound. */
static inline void integrated_to(integrated *e, double t)
{
    gsl_odeiv2_driver *const d = e->driver;
    while (e->t < t) {
        const double from = e->t;
        d->h = fmin(d->h, 1 / fmax(e->size_r[0], e->size_r[1]));
        ck_assert_int_eq(gsl_odeiv2_evolve_apply(d->e, d->c, d->s, d->sys, &e->t, t, &d->h, e->y),
                         GSL_SUCCESS);
        integrated_allow(e, from);
        ++e->steps;
    }
}

/* What the base's motion adds to u'' to give the acceleration against a fixed frame. */
static inline double integrated_base_acceleration(const integrated *e)
{
    if (e->input == RAMPWISE_BASE_ACCELERATION)
        return e->p + e->slope * e->t;
    return e->input == RAMPWISE_BASE_VELOCITY ? e->slope : 0;
}

/* The size of what the input adds to u'' beside the forces of spring and damper. */
static inline double integrated_size_of_input(const integrated *e)
{
    switch (e->input) {
    case RAMPWISE_FORCE:
        return e->size_p / e->sys.mass;
    case RAMPWISE_BASE_ACCELERATION:
        return e->size_p;
    case RAMPWISE_BASE_VELOCITY:
        return e->size_slope;
    default:
        return 0;
    }
}

/* The sizes of the terms, in which roundings of either side are measured. */
static inline void integrated_sizes(const integrated *e, integrated_value m[MOTIONS])
{
    const int on_base = e->input == RAMPWISE_BASE_DISPLACEMENT;
    m[MOTION_U].size = e->scale[0] + fabs(e->y[0]);
    m[MOTION_V].size = e->scale[1] + fabs(e->y[1]);
    m[MOTION_RELATIVE_U].size = m[MOTION_U].size + (on_base ? e->size_p : 0);
    m[MOTION_RELATIVE_V].size = m[MOTION_V].size + (on_base ? e->size_slope : 0);
    m[MOTION_SPRING].size = fabs(e->sys.stiffness) * m[MOTION_RELATIVE_U].size;
    m[MOTION_DAMPER].size = fabs(e->sys.damper) * m[MOTION_RELATIVE_V].size;
    m[MOTION_A].size =
        (m[MOTION_SPRING].size + m[MOTION_DAMPER].size) / e->sys.mass + integrated_size_of_input(e);
    m[MOTION_TOTAL].size = m[MOTION_A].size;
}

/* Everything that motion.h tells of a state. The tolerance is the bound of u and v, times the
   factor with which each enters, and 16 roundings of the terms. */
static inline void integrated_motion(const integrated *e, integrated_value m[MOTIONS])
{
    const double k = e->sys.stiffness, c = e->sys.damper, mass = e->sys.mass;
    const double u = e->y[0], v = e->y[1];
    const double du = integrated_error_u(e), dv = integrated_error_v(e);
    const int on_base = e->input == RAMPWISE_BASE_DISPLACEMENT;
    integrated_sizes(e, m);
    m[MOTION_U].value = u;
    m[MOTION_V].value = v;
    m[MOTION_A].value = integrated_acceleration(e, e->t, u, v);
    m[MOTION_TOTAL].value = m[MOTION_A].value + integrated_base_acceleration(e);
    m[MOTION_RELATIVE_U].value = on_base ? u - (e->p + e->slope * e->t) : u;
    m[MOTION_RELATIVE_V].value = on_base ? v - e->slope : v;
    m[MOTION_SPRING].value = k * m[MOTION_RELATIVE_U].value;
    m[MOTION_DAMPER].value = c * m[MOTION_RELATIVE_V].value;
    m[MOTION_U].tolerance = m[MOTION_RELATIVE_U].tolerance = du;
    m[MOTION_V].tolerance = m[MOTION_RELATIVE_V].tolerance = dv;
    m[MOTION_SPRING].tolerance = fabs(k) * du;
    m[MOTION_DAMPER].tolerance = fabs(c) * dv;
    m[MOTION_A].tolerance = m[MOTION_TOTAL].tolerance = (fabs(k) * du + fabs(c) * dv) / mass;
    for (int i = 0; i < MOTIONS; ++i)
        m[i].tolerance += 16 * DBL_EPSILON * m[i].size;
}

#endif
