/* Energies: closed forms of simple motions, the two frames, chunks, spectra, overflow, refusals. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "../support/oscillators.h"
#include "../support/suite.h"

enum { N = 400 };

static const int frames[2] = {RAMPWISE_RELATIVE, RAMPWISE_ABSOLUTE};

static void solve(const rampwise_coeffs *c, int frame, int n, const double *p, rampwise_energy *e)
{
    ck_assert_int_eq(rampwise_energy_solve(c, frame, 0, 0, (size_t)n, p, e, NULL), RAMPWISE_OK);
}

static void assert_near(double value, double want, double tolerance)
{
    ck_assert_msg(fabs(value - want) <= tolerance, "%a, not %a: %g of %g", value, want, fabs(value - want),
                  tolerance);
}

static void fill(double *p, int n, double value)
{
    for (int i = 0; i < n; ++i)
        p[i] = value;
}

/* A constant force on an undamped oscillator from rest: u = (p/k)(1 - cos wt), all that is put in is p u, and the
   most, at u = 2 p/k, is 2 p^2/k. Tolerance: 4 eps a step of it, and that of the cosine's argument. */
START_TEST(force_step)
{
    const double omega = 3, dt = 0.02, mass = 2, k = mass * omega * omega, force = 5;
    double p[N];
    rampwise_energy e[N];
    fill(p, N, force);
    for (int kind = 0; kind < 2; ++kind) {
        const rampwise_coeffs c = made((rampwise_system){mass, 0, k}, dt, kind);
        solve(&c, RAMPWISE_RELATIVE, N, p, e);
        for (int i = 0; i < N; ++i) {
            const double u = force / k * (1 - cos(omega * dt * i)),
                         v = force / k * omega * sin(omega * dt * i);
            const double tolerance = 4 * DBL_EPSILON * (i + 1) * 2 * force * force / k;
            assert_near(e[i].input, force * u, tolerance);
            assert_near(e[i].strain, k * u * u / 2, tolerance);
            assert_near(e[i].kinetic, mass * v * v / 2, tolerance);
            ck_assert_double_eq(e[i].dissipated, 0);
        }
    }
}
END_TEST

/* A constant force on a free mass: p^2 t^2/(2 m), all kinetic. */
START_TEST(free_mass)
{
    const double dt = 0.25, mass = 3, force = 7;
    double p[N];
    rampwise_energy e[N];
    fill(p, N, force);
    const rampwise_coeffs c = made((rampwise_system){mass, 0, 0}, dt, 0);
    solve(&c, RAMPWISE_ABSOLUTE, N, p, e);
    for (int i = 0; i < N; ++i) {
        const double want = force * force * (dt * i) * (dt * i) / (2 * mass);
        assert_near(e[i].input, want, 4 * DBL_EPSILON * i * want);
        assert_near(e[i].kinetic, want, 4 * DBL_EPSILON * i * want);
        ck_assert_double_eq(e[i].strain, 0);
        ck_assert_double_eq(e[i].dissipated, 0);
    }
}
END_TEST

/* A free decay gives the damper all it had: k u0^2/2. */
START_TEST(free_decay)
{
    const double k = 11, u0 = 0.3;
    double p[N];
    rampwise_energy e[N];
    fill(p, N, 0);
    const rampwise_coeffs c = made((rampwise_system){1, 2, k}, 0.5, 0);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, u0, 0, N, p, e, NULL), RAMPWISE_OK);
    assert_near(e[N - 1].dissipated, k * u0 * u0 / 2, 16 * DBL_EPSILON * k * u0 * u0 / 2);
    ck_assert_double_eq(e[N - 1].input, 0);
    ck_assert_double_le(e[N - 1].kinetic + e[N - 1].strain, 1e-80);
}
END_TEST

/* Steady harmonic motion of amplitude u0 at the frequency w: pi c w u0^2 are put in and dissipated in each cycle
   (A. K. Chopra, Dynamics of Structures, section 3.8; from memory). Samples of a sine joined by straight lines have
   the amplitude 1 - (w dt)^2/12 of it, and their overtones, 1/k^2 for k beyond the samples of a cycle, add less:
   to (w dt)^2/4 in the squares. */
START_TEST(harmonic_cycle)
{
    enum { CYCLE = 500, CYCLES = 40 };
    static double p[CYCLE * CYCLES + 1];
    static rampwise_energy e[CYCLE * CYCLES + 1];
    const double omega = 2, zeta = 0.1, w = 1.7, dt = 8 * atan(1) / w / CYCLE;
    for (int i = 0; i <= CYCLE * CYCLES; ++i)
        p[i] = sin(w * dt * i);
    const rampwise_coeffs c = made((rampwise_system){1, 2 * zeta * omega, omega * omega}, dt, 0);
    solve(&c, RAMPWISE_RELATIVE, CYCLE * CYCLES + 1, p, e);
    const double amplitude_squared = 1 / (pow(omega * omega - w * w, 2) + pow(2 * zeta * omega * w, 2));
    const double want = 4 * atan(1) * 2 * zeta * omega * w * amplitude_squared;
    const int last = CYCLE * CYCLES, before = last - CYCLE;
    assert_near(e[last].dissipated - e[before].dissipated, want, want * pow(w * dt, 2) / 4);
    assert_near(e[last].input - e[before].input, want, want * pow(w * dt, 2) / 4);
}
END_TEST

/* E_absolute - E_relative = m v_g^2/2 + m y' v_g (Uang & Bertero 1990), v_g summed here as the record's trapezoids;
   kinetic energies differ by the same. And from rest both start from nothing. */
START_TEST(two_frames)
{
    gsl_rng *const r = random_make("two_frames");
    double p[N], v[N];
    rampwise_energy relative[N], absolute[N];
    for (int regime = 0; regime < 7; ++regime) {
        const double dt = 0.01;
        const rampwise_coeffs c = made(regime_system(regime, 0.05, dt), dt, 2);
        random_record(r, p, N);
        solve(&c, RAMPWISE_RELATIVE, N, p, relative);
        solve(&c, RAMPWISE_ABSOLUTE, N, p, absolute);
        ck_assert_int_eq(rampwise_solve(&c, 0, 0, N, p, &(rampwise_history){.v = v}, NULL), RAMPWISE_OK);
        double base = 0, moved = 0, m = c.system.mass;
        for (int i = 1; i < N; ++i) {
            base += dt * (p[i - 1] + p[i]) / 2;
            moved += fabs(relative[i].input - relative[i - 1].input) + m * base * base + m * v[i] * v[i];
            const double difference = m * base * base / 2 + m * v[i] * base;
            const double tolerance = 4 * DBL_EPSILON * i * moved;
            assert_near(absolute[i].input - relative[i].input, difference, tolerance);
            assert_near(absolute[i].kinetic - relative[i].kinetic, difference, tolerance);
            ck_assert(memcmp(&relative[i].strain, &absolute[i].strain, sizeof(double)) == 0);
            ck_assert(memcmp(&relative[i].dissipated, &absolute[i].dissipated, sizeof(double)) == 0);
        }
    }
    gsl_rng_free(r);
}
END_TEST

/* The same paper's limits, per unit mass: a very long period takes v_g^2/2 relative and nothing absolute, a very
   short one v_g^2/2 absolute and nothing relative. |a_g| <= 1. A soft oscillator's mass feels (2 zeta w |v_g| +
   w^2 |x_g|), which gives it a velocity, and with v_g its input, below this times the time. A stiff one's relative
   motion is at most 2/w^2 in size for each change of a_g, and decays at once: so is its work, and its last velocity
   is the slope of a_g over w^2. What rounding adds is 4 eps a step of the way of v_g^2. */
START_TEST(limits_of_period)
{
    gsl_rng *const r = random_make("limits_of_period");
    const double dt = 0.01, soft = 1e-5 / dt, stiff = 1e5 / dt, omega[2] = {soft, stiff},
                 zeta[2] = {0.05, 0.05};
    double p[N], base = 0, most = 0;
    rampwise_energy e[2][2];
    random_fill(r, p, N);
    for (int i = 1; i < N; ++i) {
        base += dt * (p[i - 1] + p[i]) / 2;
        most = fmax(most, fabs(base));
    }
    for (int f = 0; f < 2; ++f)
        ck_assert_int_eq(rampwise_energy_spectrum(N, dt, p, RAMPWISE_BASE_ACCELERATION, frames[f], 2, omega,
                                                  zeta, e[f], NULL, NULL),
                         RAMPWISE_OK);
    const double whole = base * base / 2, t = N * dt;
    const double for_soft = t * (2 * zeta[0] * soft + soft * soft * t) * most * most;
    const double for_stiff = 2 * N / (stiff * stiff) + fabs(base) * 2 / dt / (stiff * stiff);
    const double rounding = 4 * DBL_EPSILON * N * (t * most + most * most);
    assert_near(e[0][0].input, whole, 2 * for_soft + rounding);
    assert_near(e[1][0].input, 0, for_soft + rounding);
    assert_near(e[0][1].input, 0, for_stiff + rounding);
    assert_near(e[1][1].input, whole, for_stiff + rounding);
    gsl_rng_free(r);
}
END_TEST

static int frame_allowed(int frame, int kind)
{
    return frame == RAMPWISE_ABSOLUTE || kinds[kind][0] != RAMPWISE_BASE_DISPLACEMENT;
}

/* Any chunks give the bits of one call, and the states are those of rampwise_run. */
static void check_chunks(gsl_rng *r, const rampwise_coeffs *c, int frame)
{
    double p[N];
    rampwise_energy whole[N], part[N + 2], now;
    rampwise_meter meter;
    rampwise_state s, alone;
    random_record(r, p, N);
    solve(c, frame, N, p, whole);
    rampwise_start(&s, 0, 0, p[0]);
    alone = s;
    memset(part, 0x55, sizeof part);
    const rampwise_energy guard = part[N + 1];
    ck_assert_int_eq(rampwise_meter_start(&meter, c, &s, frame), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_meter_read(&meter, &s, &part[1]), RAMPWISE_OK);
    for (int done = 1, n; done < N; done += n) {
        n = (int)gsl_rng_uniform_int(r, 40);
        n = n > N - done ? N - done : n;
        ck_assert_int_eq(rampwise_meter_run(&meter, &s, (size_t)n, p + done, &part[1 + done], NULL),
                         RAMPWISE_OK);
        ck_assert_int_eq(rampwise_meter_read(&meter, &s, &now), RAMPWISE_OK);
        ck_assert_mem_eq(&now, &whole[done + n - 1], sizeof now);
    }
    ck_assert_mem_eq(part + 1, whole, sizeof whole);
    ck_assert_mem_eq(&part[0], &guard, sizeof guard);
    ck_assert_mem_eq(&part[N + 1], &guard, sizeof guard);
    ck_assert_int_eq(rampwise_run(c, &alone, N - 1, p + 1, NULL, NULL), RAMPWISE_OK);
    ck_assert_mem_eq(&s, &alone, sizeof s);
}

START_TEST(chunks)
{
    gsl_rng *const r = random_make("chunks");
    for (int kind = 0; kind < KINDS; ++kind)
        for (int regime = 0; regime < REGIMES; ++regime)
            for (int f = 0; f < 2; ++f) {
                rampwise_system sys = regime_system(regime, 0.05, 0.01);
                if (!kind_allowed(&sys, kind))
                    sys.damper = 0;
                const rampwise_coeffs c = made(sys, 0.01, kind);
                if (frame_allowed(frames[f], kind))
                    check_chunks(r, &c, frames[f]);
            }
    gsl_rng_free(r);
}
END_TEST

/* A force knows no frame; a positive damper never gives anything back. */
START_TEST(force_and_damper)
{
    gsl_rng *const r = random_make("force_and_damper");
    double p[N];
    rampwise_energy relative[N], absolute[N];
    for (int regime = 1; regime < 8; ++regime) {
        const rampwise_coeffs c = made(regime_system(regime, 0.3, 0.01), 0.01, regime % 2);
        random_record(r, p, N);
        solve(&c, RAMPWISE_RELATIVE, N, p, relative);
        solve(&c, RAMPWISE_ABSOLUTE, N, p, absolute);
        ck_assert_mem_eq(relative, absolute, sizeof relative);
        for (int i = 1; i < N; ++i)
            ck_assert_double_ge(relative[i].dissipated, c.system.damper > 0 ? relative[i - 1].dissipated : 0);
    }
    gsl_rng_free(r);
}
END_TEST

/* Each oscillator of a spectrum: the last entry of the record and the largest input, bit for bit. */
START_TEST(spectrum)
{
    enum { COUNT = 5 };
    gsl_rng *const r = random_make("spectrum");
    const double omega[COUNT] = {0, 0.3, 5, 60, 4000}, zeta[COUNT] = {0, 0.02, 0, 0.7, 1.5}, dt = 0.01;
    double p[N], greatest[COUNT];
    rampwise_energy e[N], last[COUNT];
    random_record(r, p, N);
    for (int input = RAMPWISE_FORCE; input <= RAMPWISE_BASE_DISPLACEMENT; ++input)
        for (int f = input == RAMPWISE_BASE_DISPLACEMENT; f < 2; ++f) {
            ck_assert_int_eq(rampwise_energy_spectrum(N, dt, p, input, frames[f], COUNT, omega, zeta, last,
                                                      greatest, NULL),
                             RAMPWISE_OK);
            for (int j = 0; j < COUNT; ++j) {
                rampwise_system sys;
                rampwise_coeffs c;
                ck_assert_int_eq(rampwise_system_natural(&sys, omega[j], zeta[j]), RAMPWISE_OK);
                ck_assert_int_eq(rampwise_coeffs_make(&c, &sys, dt, input, RAMPWISE_RAMP), RAMPWISE_OK);
                solve(&c, frames[f], N, p, e);
                double most = 0;
                for (int i = 0; i < N; ++i)
                    most = fmax(most, e[i].input);
                ck_assert_mem_eq(&last[j], &e[N - 1], sizeof last[j]);
                ck_assert_double_eq(greatest[j], most);
            }
        }
    gsl_rng_free(r);
}
END_TEST

/* The energy overflows long before the response: entries before it stand, state and meter are the last finite. */
START_TEST(overflow)
{
    const double p[6] = {0, 0, 1e10, 1e200, 0, 0};
    rampwise_energy e[6], before[6], now;
    rampwise_meter meter;
    rampwise_state s, alone;
    size_t bad = 99;
    const rampwise_coeffs c = made((rampwise_system){1, 0.1, 1}, 0.5, 0);
    rampwise_start(&s, 0, 0, p[0]);
    alone = s;
    memset(e, 0x55, sizeof e);
    memcpy(before, e, sizeof e);
    ck_assert_int_eq(rampwise_meter_start(&meter, &c, &s, RAMPWISE_RELATIVE), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_meter_run(&meter, &s, 5, p + 1, e + 1, &bad), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, 2);
    ck_assert_mem_eq(&e[3], &before[3], 3 * sizeof *e);
    ck_assert_int_eq(rampwise_run(&c, &alone, 2, p + 1, NULL, NULL), RAMPWISE_OK);
    ck_assert_mem_eq(&s, &alone, sizeof s);
    ck_assert_int_eq(rampwise_meter_read(&meter, &s, &now), RAMPWISE_OK);
    ck_assert_mem_eq(&now, &e[2], sizeof now);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 0, 6, p, e, &bad),
                     RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, 3);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 1e200, 6, p, e, &bad),
                     RAMPWISE_ERROR_OVERFLOW);
    ck_assert_uint_eq(bad, 0);
    const double omega = 1, zeta = 0.05;
    double greatest;
    ck_assert_int_eq(rampwise_energy_spectrum(6, 0.5, p, RAMPWISE_FORCE, RAMPWISE_RELATIVE, 1, &omega, &zeta,
                                              &now, &greatest, NULL),
                     RAMPWISE_OK);
    ck_assert(isinf(now.input) && isinf(now.kinetic) && isinf(now.strain) && isinf(now.dissipated) &&
              isinf(greatest));
}
END_TEST

/* Whatever is refused leaves meter, state and outputs as they were. */
START_TEST(refusals)
{
    double p[4] = {0, 1, 2, 3};
    rampwise_energy e[4];
    rampwise_state s, s_bad;
    rampwise_meter meter, unmade, kept;
    size_t bad = 99;
    const rampwise_coeffs c = made((rampwise_system){1, 0.1, 1}, 0.5, 2), moved = made(c.system, 0.5, 5);
    const rampwise_coeffs growing = made((rampwise_system){1, -300, 1}, 1, 0);
    rampwise_coeffs nothing;
    memset(&nothing, 0, sizeof nothing);
    memset(&unmade, 0, sizeof unmade);
    memset(&meter, 0x55, sizeof meter);
    kept = meter;
    rampwise_start(&s, 0, 0, 0);
    rampwise_start(&s_bad, 0, NAN, 0);
    ck_assert_int_eq(rampwise_meter_start(NULL, &c, &s, RAMPWISE_RELATIVE), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_start(&meter, NULL, &s, RAMPWISE_RELATIVE), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_start(&meter, &c, NULL, RAMPWISE_RELATIVE), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_start(&meter, &nothing, &s, RAMPWISE_RELATIVE), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_meter_start(&meter, &c, &s_bad, RAMPWISE_RELATIVE), RAMPWISE_ERROR_STATE);
    ck_assert_int_eq(rampwise_meter_start(&meter, &c, &s, RAMPWISE_RAMP), RAMPWISE_ERROR_FRAME);
    ck_assert_int_eq(rampwise_meter_start(&meter, &moved, &s, RAMPWISE_RELATIVE), RAMPWISE_ERROR_IMPULSES);
    ck_assert_int_eq(rampwise_meter_start(&meter, &growing, &s, RAMPWISE_RELATIVE),
                     RAMPWISE_ERROR_COEFFICIENT);
    ck_assert_mem_eq(&meter, &kept, sizeof meter);

    ck_assert_int_eq(rampwise_meter_start(&meter, &c, &s, RAMPWISE_ABSOLUTE), RAMPWISE_OK);
    kept = meter;
    ck_assert_int_eq(rampwise_meter_run(NULL, &s, 4, p, e, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_run(&meter, NULL, 4, p, e, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_run(&meter, &s, 4, NULL, e, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_run(&unmade, &s, 4, p, e, NULL), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_meter_run(&meter, &s_bad, 4, p, e, NULL), RAMPWISE_ERROR_STATE);
    p[2] = INFINITY;
    ck_assert_int_eq(rampwise_meter_run(&meter, &s, 4, p, e, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 0, 4, p, e, &bad),
                     RAMPWISE_ERROR_SAMPLE);
    ck_assert_mem_eq(&meter, &kept, sizeof meter);
    ck_assert(s.u == 0 && s.v == 0 && s.p == 0);
    ck_assert_int_eq(rampwise_meter_run(&meter, &s, 0, NULL, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_meter_run(&meter, &s, 2, p, NULL, NULL), RAMPWISE_OK);
    ck_assert_int_eq(rampwise_meter_read(NULL, &s, e), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_read(&meter, NULL, e), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_read(&meter, &s, NULL), RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_meter_read(&unmade, &s, e), RAMPWISE_ERROR_NOT_MADE);
    ck_assert_int_eq(rampwise_meter_read(&meter, &s_bad, e), RAMPWISE_ERROR_OVERFLOW);
    ck_assert_int_eq(rampwise_energy_solve(NULL, RAMPWISE_RELATIVE, 0, 0, 2, p, e, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 0, 2, p, NULL, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, NAN, 0, 2, p, e, NULL),
                     RAMPWISE_ERROR_STATE);
    ck_assert_int_eq(rampwise_energy_solve(&c, 0, 0, 0, 2, p, e, NULL), RAMPWISE_ERROR_FRAME);
    ck_assert_int_eq(rampwise_energy_solve(&c, RAMPWISE_RELATIVE, 0, 0, 0, NULL, NULL, NULL), RAMPWISE_OK);
}
END_TEST

static int spectrum_status(size_t n, double dt, int input, int frame, double omega, double zeta, size_t *bad)
{
    const double p[3] = {1, 2, NAN}, omegas[2] = {1, omega}, zetas[2] = {0, zeta};
    rampwise_energy last[2] = {{7, 7, 7, 7}, {7, 7, 7, 7}};
    const int status = rampwise_energy_spectrum(n, dt, p, input, frame, 2, omegas, zetas, last, NULL, bad);
    ck_assert(status == RAMPWISE_OK || (last[0].input == 7 && last[1].input == 7));
    return status;
}

START_TEST(spectrum_refusals)
{
    enum { INPUT = RAMPWISE_BASE_ACCELERATION, FRAME = RAMPWISE_ABSOLUTE };
    const double p[2] = {1, 2};
    size_t bad = 99;
    ck_assert_int_eq(spectrum_status(2, 0.1, INPUT, FRAME, 1, 0, NULL), RAMPWISE_OK);
    ck_assert_int_eq(spectrum_status(0, 0.1, INPUT, FRAME, 1, 0, NULL), RAMPWISE_ERROR_COUNT);
    ck_assert_int_eq(spectrum_status(2, 0, INPUT, FRAME, 1, 0, NULL), RAMPWISE_ERROR_INTERVAL);
    ck_assert_int_eq(spectrum_status(2, 0.1, FRAME, INPUT, 1, 0, NULL), RAMPWISE_ERROR_INPUT);
    ck_assert_int_eq(spectrum_status(2, 0.1, INPUT, 0, 1, 0, NULL), RAMPWISE_ERROR_FRAME);
    ck_assert_int_eq(spectrum_status(2, 0.1, RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RELATIVE, 1, 0, NULL),
                     RAMPWISE_ERROR_IMPULSES);
    ck_assert_int_eq(spectrum_status(3, 0.1, INPUT, FRAME, 1, 0, &bad), RAMPWISE_ERROR_SAMPLE);
    ck_assert_uint_eq(bad, 2);
    ck_assert_int_eq(spectrum_status(2, 0.1, INPUT, FRAME, INFINITY, 0, &bad), RAMPWISE_ERROR_FREQUENCY);
    ck_assert_uint_eq(bad, 1);
    ck_assert_int_eq(spectrum_status(2, 0.1, INPUT, FRAME, 1, NAN, &bad), RAMPWISE_ERROR_DAMPER);
    ck_assert_int_eq(rampwise_energy_spectrum(2, 0.1, NULL, INPUT, FRAME, 0, NULL, NULL, NULL, NULL, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_energy_spectrum(2, 0.1, p, INPUT, FRAME, 1, p, NULL, NULL, NULL, NULL),
                     RAMPWISE_ERROR_MISSING);
    ck_assert_int_eq(rampwise_energy_spectrum(2, 0.1, p, INPUT, FRAME, 0, NULL, NULL, NULL, NULL, NULL),
                     RAMPWISE_OK);
}
END_TEST

static void add_tests(TCase *tests)
{
    tcase_add_test(tests, force_step);
    tcase_add_test(tests, free_mass);
    tcase_add_test(tests, free_decay);
    tcase_add_test(tests, harmonic_cycle);
    tcase_add_test(tests, two_frames);
    tcase_add_test(tests, limits_of_period);
    tcase_add_test(tests, chunks);
    tcase_add_test(tests, force_and_damper);
    tcase_add_test(tests, spectrum);
    tcase_add_test(tests, overflow);
    tcase_add_test(tests, refusals);
    tcase_add_test(tests, spectrum_refusals);
}

int main(void)
{
    return suite_run("energy", add_tests);
}
