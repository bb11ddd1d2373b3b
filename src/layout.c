/* The layout of every public struct, pinned: callers in other languages and older builds rely on it. */
#include <stddef.h>
#include <stdint.h>
#include "rampwise.h"

#define AT(type, member, place)                                                                              \
    _Static_assert(offsetof(type, member) == (place), #type "." #member " has moved")
#define SIZE(type, size) _Static_assert(sizeof(type) == (size), #type " has changed its size")

SIZE(float, 4);
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

AT(rampwise_coeffs_f32, A, 0);
AT(rampwise_coeffs_f32, B, 4);
AT(rampwise_coeffs_f32, C, 8);
AT(rampwise_coeffs_f32, D, 12);
AT(rampwise_coeffs_f32, Ap, 16);
AT(rampwise_coeffs_f32, Bp, 20);
AT(rampwise_coeffs_f32, Cp, 24);
AT(rampwise_coeffs_f32, Dp, 28);
AT(rampwise_coeffs_f32, A_minus_1, 32);
AT(rampwise_coeffs_f32, Bp_minus_1, 36);
AT(rampwise_coeffs_f32, acceleration, 40);
AT(rampwise_coeffs_f32, total, 56);
AT(rampwise_coeffs_f32, mass, 72);
AT(rampwise_coeffs_f32, damper, 76);
AT(rampwise_coeffs_f32, stiffness, 80);
AT(rampwise_coeffs_f32, rate, 84);
AT(rampwise_coeffs_f32, dt, 88);
AT(rampwise_coeffs_f32, input, 96);
AT(rampwise_coeffs_f32, between, 100);
AT(rampwise_coeffs_f32, reserve, 104);
SIZE(rampwise_coeffs_f32, 128);

AT(rampwise_state_f32, u, 0);
AT(rampwise_state_f32, v, 4);
AT(rampwise_state_f32, p, 8);
AT(rampwise_state_f32, p_before, 12);
AT(rampwise_state_f32, u_low, 16);
AT(rampwise_state_f32, v_low, 20);
SIZE(rampwise_state_f32, 24);

AT(rampwise_history_f32, u, 0);
AT(rampwise_history_f32, v, sizeof(float *));
AT(rampwise_history_f32, a, 2 * sizeof(float *));
AT(rampwise_history_f32, total, 3 * sizeof(float *));
SIZE(rampwise_history_f32, 4 * sizeof(float *));

AT(rampwise_bank_wanted_f32, size, 0);
AT(rampwise_bank_wanted_f32, largest, sizeof(size_t));
AT(rampwise_bank_wanted_f32, chosen_count, 2 * sizeof(size_t));
AT(rampwise_bank_wanted_f32, chosen, 3 * sizeof(size_t));
AT(rampwise_bank_wanted_f32, history, 4 * sizeof(size_t));
AT(rampwise_bank_wanted_f32, reserve, 8 * sizeof(size_t));
SIZE(rampwise_bank_wanted_f32, 12 * sizeof(size_t));
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

AT(rampwise_evidence, error_high, 0);
AT(rampwise_evidence, error_low, 8);
AT(rampwise_evidence, abrupt, 16);
AT(rampwise_evidence, reserve, 20);
SIZE(rampwise_evidence, 24);
AT(rampwise_output, row, 0);
AT(rampwise_output, quantity, 32);
SIZE(rampwise_output, 40);

AT(rampwise_response, gain, 0);
AT(rampwise_response, phase, 8);
SIZE(rampwise_response, 16);

AT(rampwise_event, sample, 0);
AT(rampwise_event, fraction, 8);
AT(rampwise_event, value, 16);
AT(rampwise_event, kind, 24);
AT(rampwise_event, direction, 28);
AT(rampwise_event, output, 32);
AT(rampwise_event, level, 36);
AT(rampwise_event, flags, 40);
SIZE(rampwise_event, 48);

AT(rampwise_level, value, 0);
AT(rampwise_level, hysteresis, 8);
AT(rampwise_level, direction, 16);
AT(rampwise_level, latch, 20);
SIZE(rampwise_level, 24);

AT(rampwise_level_report, beyond, 0);
AT(rampwise_level_report, tripped, 4);
AT(rampwise_level_report, passed, 8);
AT(rampwise_level_report, cycles, 16);
SIZE(rampwise_level_report, 24);

AT(rampwise_watched, at, 0);
AT(rampwise_watched, begin, 24);
SIZE(rampwise_watched, 32);

AT(rampwise_instant_f32, sample, 0);
AT(rampwise_instant_f32, value, 8);
AT(rampwise_instant_f32, fraction, 12);
SIZE(rampwise_instant_f32, 16);

AT(rampwise_peak_f32, high, 0);
AT(rampwise_peak_f32, low, 16);
SIZE(rampwise_peak_f32, 32);

AT(rampwise_watched_f32, at, 0);
AT(rampwise_watched_f32, begin, 16);
SIZE(rampwise_watched_f32, 24);

AT(rampwise_interval_f32, ticks, 0);
AT(rampwise_interval_f32, c, 8);
SIZE(rampwise_interval_f32, 136);

AT(rampwise_interval, ticks, 0);
AT(rampwise_interval, c, 8);
SIZE(rampwise_interval, 264);

AT(rampwise_stream_counts, next, 0);
AT(rampwise_stream_counts, good, 8);
AT(rampwise_stream_counts, missing, 16);
AT(rampwise_stream_counts, clipped, 24);
AT(rampwise_stream_counts, bridges, 32);
AT(rampwise_stream_counts, starts, 40);
AT(rampwise_stream_counts, longest, 48);
AT(rampwise_stream_counts, last_missing, 56);
AT(rampwise_stream_counts, last_clipped, 64);
SIZE(rampwise_stream_counts, 72);

#if UINTPTR_MAX == UINT64_MAX
AT(rampwise_watch_options, output, 8);
AT(rampwise_watch_options, level, 48);
AT(rampwise_watch_options, level_count, 144);
AT(rampwise_watch_options, number, 148);
AT(rampwise_watch_options, window, 152);
AT(rampwise_watch_options, window_steps, 160);
AT(rampwise_watch_options, events, 168);
AT(rampwise_watch_options, event_capacity, 176);
AT(rampwise_watch_options, reserve, 184);
SIZE(rampwise_watch_options, 216);

AT(rampwise_stream_options, start, 8);
AT(rampwise_stream_options, missing, 12);
AT(rampwise_stream_options, beyond, 16);
AT(rampwise_stream_options, missing_raw, 20);
AT(rampwise_stream_options, longest, 24);
AT(rampwise_stream_options, ticks, 32);
AT(rampwise_stream_options, scale, 40);
AT(rampwise_stream_options, offset, 48);
AT(rampwise_stream_options, rail_low, 56);
AT(rampwise_stream_options, rail_high, 64);
AT(rampwise_stream_options, output_count, 72);
AT(rampwise_stream_options, output, 80);
AT(rampwise_stream_options, intervals, 400);
AT(rampwise_stream_options, interval_count, 408);
AT(rampwise_stream_options, reserve, 416);
SIZE(rampwise_stream_options, 448);

SIZE(rampwise_stream, 1368);
SIZE(rampwise_watch, 872);
SIZE(rampwise_stream_f32, 960);
SIZE(rampwise_watch_f32, 640);
#endif
AT(rampwise_energy, input, 0);
AT(rampwise_energy, kinetic, 8);
AT(rampwise_energy, strain, 16);
AT(rampwise_energy, dissipated, 24);
SIZE(rampwise_energy, 32);

AT(rampwise_meter, coeffs, 0);
AT(rampwise_meter, work, 256);
AT(rampwise_meter, into_velocity, 328);
AT(rampwise_meter, into_force, 344);
AT(rampwise_meter, squares, 352);
AT(rampwise_meter, input, 376);
AT(rampwise_meter, dissipated, 392);
AT(rampwise_meter, base_velocity, 408);
AT(rampwise_meter, frame, 424);
AT(rampwise_meter, zero, 428);
AT(rampwise_meter, reserve, 432);
SIZE(rampwise_meter, 512);
