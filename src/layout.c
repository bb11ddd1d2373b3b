/* The layout of every public struct, pinned: callers in other languages and older builds rely on it. */
#include <stddef.h>
#include "rampwise.h"

#define AT(type, member, place)                                                                              \
    _Static_assert(offsetof(type, member) == (place), #type "." #member " has moved")
#define SIZE(type, size) _Static_assert(sizeof(type) == (size), #type " has changed its size")

SIZE(double, 8);
SIZE(int, 4);

AT(rampwise_system, mass, 0);
AT(rampwise_system, damper, 8);
AT(rampwise_system, stiffness, 16);
SIZE(rampwise_system, 24);

AT(rampwise_coeffs, A, 0);
AT(rampwise_coeffs, B, 8);
AT(rampwise_coeffs, C, 16);
AT(rampwise_coeffs, D, 24);
AT(rampwise_coeffs, Ap, 32);
AT(rampwise_coeffs, Bp, 40);
AT(rampwise_coeffs, Cp, 48);
AT(rampwise_coeffs, Dp, 56);
AT(rampwise_coeffs, A_minus_1, 64);
AT(rampwise_coeffs, Bp_minus_1, 72);
AT(rampwise_coeffs, acceleration, 80);
AT(rampwise_coeffs, total, 112);
AT(rampwise_coeffs, system, 144);
AT(rampwise_coeffs, dt, 168);
AT(rampwise_coeffs, input, 176);
AT(rampwise_coeffs, between, 180);
AT(rampwise_coeffs, reserve, 184);
SIZE(rampwise_coeffs, 256);

AT(rampwise_state, u, 0);
AT(rampwise_state, v, 8);
AT(rampwise_state, p, 16);
AT(rampwise_state, p_before, 24);
SIZE(rampwise_state, 32);

AT(rampwise_history, u, 0);
AT(rampwise_history, v, sizeof(double *));
AT(rampwise_history, a, 2 * sizeof(double *));
AT(rampwise_history, total, 3 * sizeof(double *));
SIZE(rampwise_history, 4 * sizeof(double *));

AT(rampwise_bank_wanted, size, 0);
AT(rampwise_bank_wanted, largest, sizeof(size_t));
AT(rampwise_bank_wanted, chosen_count, 2 * sizeof(size_t));
AT(rampwise_bank_wanted, chosen, 3 * sizeof(size_t));
AT(rampwise_bank_wanted, history, 4 * sizeof(size_t));
AT(rampwise_bank_wanted, reserve, 8 * sizeof(size_t));
SIZE(rampwise_bank_wanted, 12 * sizeof(size_t));

AT(rampwise_modes_plan, size, 0);
AT(rampwise_modes_plan, modes, sizeof(size_t));
AT(rampwise_modes_plan, inputs, 2 * sizeof(size_t));
AT(rampwise_modes_plan, outputs, 3 * sizeof(size_t));
AT(rampwise_modes_plan, c, 4 * sizeof(size_t));
AT(rampwise_modes_plan, load, 5 * sizeof(size_t));
AT(rampwise_modes_plan, on_displacement, 6 * sizeof(size_t));
AT(rampwise_modes_plan, on_velocity, 7 * sizeof(size_t));
AT(rampwise_modes_plan, on_acceleration, 8 * sizeof(size_t));
AT(rampwise_modes_plan, on_input, 9 * sizeof(size_t));
AT(rampwise_modes_plan, peaks, 10 * sizeof(size_t));
AT(rampwise_modes_plan, instructions, 10 * sizeof(size_t) + 4);
AT(rampwise_modes_plan, equipment_count, 10 * sizeof(size_t) + 8);
AT(rampwise_modes_plan, equipment, 11 * sizeof(size_t) + 8);
AT(rampwise_modes_plan, point, 12 * sizeof(size_t) + 8);
AT(rampwise_modes_plan, reserve, 13 * sizeof(size_t) + 8);
SIZE(rampwise_modes_plan, 18 * sizeof(size_t) + 8);

AT(rampwise_roots, size, 0);
AT(rampwise_roots, bodies, sizeof(size_t));
AT(rampwise_roots, inputs, 2 * sizeof(size_t));
AT(rampwise_roots, outputs, 3 * sizeof(size_t));
AT(rampwise_roots, mass, 4 * sizeof(size_t));
AT(rampwise_roots, damper, 5 * sizeof(size_t));
AT(rampwise_roots, root, 6 * sizeof(size_t));
AT(rampwise_roots, shape, 7 * sizeof(size_t));
AT(rampwise_roots, force, 8 * sizeof(size_t));
AT(rampwise_roots, on_displacement, 9 * sizeof(size_t));
AT(rampwise_roots, on_velocity, 10 * sizeof(size_t));
AT(rampwise_roots, reserve, 11 * sizeof(size_t));
SIZE(rampwise_roots, 15 * sizeof(size_t));

AT(rampwise_instant, value, 0);
AT(rampwise_instant, sample, 8);
AT(rampwise_instant, fraction, 16);
SIZE(rampwise_instant, 24);

AT(rampwise_peak, high, 0);
AT(rampwise_peak, low, 24);
SIZE(rampwise_peak, 48);
