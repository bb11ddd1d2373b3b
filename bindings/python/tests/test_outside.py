"""Against SciPy, and closed forms from handbooks."""

import numpy as np
import scipy.signal
from bits import same_bits
from hypothesis import given, settings
from hypothesis import strategies as st

import rampwise

ANGLES = st.floats(0.02, 2.0)  # omega dt
RATIOS = st.floats(0.0, 3.0)
SEEDS = st.integers(0, 2**32 - 1)


def state_space(system):
    k, c = float(system.stiffness), float(system.damper)
    return np.array([[0, 1], [-k, -c]]), np.array([[0], [1.0]]), np.array([[1.0, 0], [0, 1.0]]), np.zeros((2, 1))


@given(ANGLES, RATIOS, SEEDS)
def test_lsim(angle, ratio, seed):
    """lsim takes exponentials of matrices, whose norm is at most 12 here: errors of some 12 eps a step, which 200
    steps at most add up; 1e-11 leaves room for twenty times that."""
    record = np.random.default_rng(seed).uniform(-1, 1, 200)
    system = rampwise.System.natural(omega=angle, damping=ratio, allow_strong_damping=True)
    response = rampwise.respond(record, 1.0, input="force", system=system)
    _, _, state = scipy.signal.lsim(state_space(system), record, np.arange(200.0))
    for i, history in enumerate((response.displacement, response.velocity)):
        np.testing.assert_allclose(history, state[:, i], rtol=0, atol=1e-11 * np.abs(state[:, i]).max())


@given(ANGLES, RATIOS, SEEDS)
def test_hold_is_the_zero_order_hold(angle, ratio, seed):
    record = np.random.default_rng(seed).uniform(-1, 1, 200)
    system = rampwise.System.natural(omega=angle, damping=ratio, allow_strong_damping=True)
    response = rampwise.respond(record, 1.0, input="force", between="hold", system=system)
    discrete = scipy.signal.cont2discrete(state_space(system), 1.0, method="zoh")
    _, _, state = scipy.signal.dlsim(discrete, record)
    np.testing.assert_allclose(response.displacement, state[:, 0], rtol=0, atol=1e-11 * np.abs(state).max())


@given(ANGLES, RATIOS)
def test_foh_coefficients(angle, ratio):
    """SciPy's first-order hold keeps x - Gamma2 p as its state; Gamma2 holds our D and D'. exp of a 4 by 4 matrix of
    norm up to 13: 1e-13 is forty times its eps."""
    system = rampwise.System.natural(omega=angle, damping=ratio, allow_strong_damping=True)
    made = rampwise.coefficients(system, 1.0, input="force")
    transition, _, _, through, _ = scipy.signal.cont2discrete(state_space(system), 1.0, method="foh")
    ours = np.array([[made["A"], made["B"]], [made["Ap"], made["Bp"]]])
    np.testing.assert_allclose(ours, transition, rtol=0, atol=1e-13)
    np.testing.assert_allclose([made["D"], made["Dp"]], through[:, 0], rtol=0, atol=1e-13)


@settings(max_examples=15)
@given(st.floats(0.05, 1.0), st.floats(0.0, 0.5), SEEDS)
def test_spectrum_against_a_fine_scan(angle, ratio, seed):
    """lsim at 32 points a step misses a peak by at most (dt/32)^2/8 times the largest second derivative, and errs by
    1e-11 itself (above)."""
    record = np.random.default_rng(seed).uniform(-1, 1, 60)
    record[0] = 0
    spectrum = rampwise.response_spectrum(record, 1.0, omega=angle, damping=ratio, input="force")
    fine = np.interp(np.arange(59 * 32 + 1) / 32, np.arange(60.0), record)
    system = rampwise.System.natural(omega=angle, damping=ratio)
    _, _, state = scipy.signal.lsim(state_space(system), fine, np.arange(fine.size) / 32)
    scanned = np.abs(state[:, 0]).max()
    second = np.abs(np.gradient(state[:, 1], 1 / 32)).max() + 2 / 32  # of u; its slope changes by the load's, below 2
    assert scanned * (1 - 1e-11) <= spectrum.SD <= scanned * (1 + 1e-11) + second / 32**2 / 8


def test_triangle_pulse():
    """Triangular pulse of half a period: the largest dynamic load factor is 1.155 at t_d / T = 0.5 (Clough and
    Penzien, Dynamics of Structures, and Chopra's shock spectra give the curve; the value is computed here from the
    closed form u = 2 (t/t_d - sin(omega t)/(omega t_d)) up to the apex)."""
    n = 400
    record = np.concatenate((np.linspace(0, 1, n // 2 + 1), np.linspace(1, 0, n // 2 + 1)[1:]))
    response = rampwise.respond(record, 0.5 / n, input="force", period=1.0, damping=0.0)
    t = response.time[: n // 2 + 1]
    omega = 2 * np.pi
    expected = 2 * (t / 0.5 - np.sin(omega * t) / (omega * 0.5))
    factor = response.displacement[: n // 2 + 1] * omega**2
    np.testing.assert_allclose(factor, expected, rtol=0, atol=1e-13)


def test_step_load_doubles():
    """A suddenly applied load: u = p/k (1 - cos(omega t)), at most twice the static displacement, at half a period."""
    spectrum = rampwise.response_spectrum(np.ones(100), 0.01, period=0.8, damping=0.0, input="force")
    np.testing.assert_allclose(spectrum.PSA, 2.0, rtol=1e-14)
    np.testing.assert_allclose(spectrum.displacement.time, 0.4, rtol=1e-7)
    assert spectrum.displacement.sign == 1


def test_rigid_oscillators_go_with_their_base():
    record = np.array([0.0, 1.0, -3.0, 2.0])
    spectrum = rampwise.response_spectrum(record, 0.01, period=[0.0, 1.0])
    assert spectrum.SA[0] == 3 and spectrum.PSA[0] == 3 and spectrum.SD[0] == 0
    assert spectrum.total_acceleration.time[0] == 0.02 and spectrum.total_acceleration.sign[0] == -1
    by_frequency = rampwise.response_spectrum(record, 0.01, frequency=[np.inf, 1.0])
    same_bits(by_frequency.SA, spectrum.SA)


def test_forces_hold_the_mass():
    """Spring force + damper force = -mass * total acceleration for a moving base: each side is a few roundings."""
    record = np.random.default_rng(1).uniform(-1, 1, 300)
    for kind in ("base acceleration", "base velocity", "base displacement"):
        response = rampwise.respond(record, 0.02, input=kind, period=[0.3, 1.0], damping=0.1, mass=[4.0, 7.0])
        together = response.spring_force + response.damper_force
        size = np.abs(response.spring_force).max() + np.abs(response.damper_force).max()
        np.testing.assert_allclose(together, -np.array([[4.0], [7.0]]) * response.total_acceleration, rtol=0,
                                   atol=2e-14 * size)  # fmt: skip
