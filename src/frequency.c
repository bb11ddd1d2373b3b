#include "rampwise/frequency.h"

#include <math.h>
#include <stddef.h>
#include "complex_number.h"
#include "rampwise/status.h"

static complex_number quotient(complex_number a, complex_number b)
{
    const double size = hypot(b.re, b.im);
    const complex_number unit = {b.re / size, -b.im / size};
    return scaled(1 / size, product_of(a, unit));
}

/* The row over {u, v, 1, p - p_before}. */
static complex_number output_of(const double row[4], complex_number u, complex_number v,
                                complex_number change)
{
    const complex_number moved = sum_of(scaled(row[0], u), scaled(row[1], v));
    return sum_of(moved, sum_of((complex_number){row[2], 0}, scaled(row[3], change)));
}

/* z - 1 by the half angle, so that a slow tone keeps its digits beside A - 1 and B' - 1. */
static complex_number at_samples(const rampwise_coeffs *c, const double row[4], double angle)
{
    const double half_sine = sin(angle / 2), half_cosine = cos(angle / 2);
    const complex_number z_1 = {-2 * half_sine * half_sine, 2 * half_sine * half_cosine};
    const complex_number z = {1 + z_1.re, z_1.im};
    const complex_number z_A = {z_1.re - c->A_minus_1, z_1.im}, z_Bp = {z_1.re - c->Bp_minus_1, z_1.im};
    const complex_number load_u = sum_of((complex_number){c->C, 0}, scaled(c->D, z));
    const complex_number load_v = sum_of((complex_number){c->Cp, 0}, scaled(c->Dp, z));
    const complex_number determinant = sum_of(product_of(z_A, z_Bp), (complex_number){-c->B * c->Ap, 0});
    const complex_number u = quotient(sum_of(product_of(z_Bp, load_u), scaled(c->B, load_v)), determinant);
    const complex_number v = quotient(sum_of(product_of(z_A, load_v), scaled(c->Ap, load_u)), determinant);
    return output_of(row, u, v, quotient(z_1, z));
}

/* (k - m omega^2 + i c omega) u = load */
static complex_number continuous_of(const rampwise_coeffs *c, const double row[4], double omega)
{
    const rampwise_system *const s = &c->system;
    const complex_number stiffness = {s->stiffness - s->mass * omega * omega, s->damper * omega};
    complex_number load = {1, 0};
    if (c->input == RAMPWISE_BASE_ACCELERATION)
        load.re = -s->mass;
    else if (c->input == RAMPWISE_BASE_VELOCITY)
        load = (complex_number){0, -s->mass * omega};
    else if (c->input == RAMPWISE_BASE_DISPLACEMENT)
        load = (complex_number){s->stiffness, s->damper * omega};
    const complex_number u = quotient(load, stiffness), v = product_of((complex_number){0, omega}, u);
    return output_of(row, u, v, (complex_number){0, omega * c->dt});
}

/* 0 where it is not finite. */
static int put(complex_number a, rampwise_response *to)
{
    const rampwise_response made = {hypot(a.re, a.im), atan2(a.im, a.re)};
    if (!isfinite(made.gain))
        return 0;
    *to = made;
    return 1;
}

int rampwise_frequency_response(const rampwise_coeffs *c, const rampwise_output *output, double omega,
                                rampwise_response *sampled, rampwise_response *continuous)
{
    double row[4];
    rampwise_response both[2] = {{0, 0}, {0, 0}};
    const int status = rampwise_output_row(c, output, row);
    if (status != RAMPWISE_OK)
        return status;
    if (!isfinite(omega) || omega < 0)
        return RAMPWISE_ERROR_FREQUENCY;
    if (sampled != NULL && !put(at_samples(c, row, omega * c->dt), &both[0]))
        return RAMPWISE_ERROR_OVERFLOW;
    if (continuous != NULL && !put(continuous_of(c, row, omega), &both[1]))
        return RAMPWISE_ERROR_OVERFLOW;
    if (sampled != NULL)
        *sampled = both[0];
    if (continuous != NULL)
        *continuous = both[1];
    return RAMPWISE_OK;
}
