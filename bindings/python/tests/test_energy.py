"""Energies against their definitions, with SciPy's integrals."""

import json

import numpy as np
import pytest
import scipy.integrate
import scipy.signal
from bits import same_bits

import rampwise

RECORD = np.random.default_rng(29).uniform(-1, 1, 120)
PARTS = ("input", "kinetic", "strain", "dissipated")


def test_definitions():
    """Work and dissipated energy are integrals of the velocity, here of lsim's at 64 points a step: Simpson's rule errs
    by (h/64)^4/180 = 3e-10 times a fourth derivative, some 30 times the integrand: 1e-7 is ample, and far
    below what another formula would give."""
    system = rampwise.System(2.0, 0.3, 2.5)
    energy = rampwise.energies(RECORD, 1.0, input="base acceleration", system=system)
    response = rampwise.respond(RECORD, 1.0, input="base acceleration", system=system)
    fine = np.interp(np.arange(119 * 64 + 1) / 64, np.arange(120.0), RECORD)
    space = np.array([[0, 1], [-1.25, -0.15]]), np.array([[0], [-1.0]]), np.eye(2), np.zeros((2, 1))
    _, _, state = scipy.signal.lsim(space, fine, np.arange(fine.size) / 64)
    velocity = state[:, 1]
    work = scipy.integrate.simpson(-2.0 * fine * velocity, dx=1 / 64)
    lost = scipy.integrate.simpson(0.3 * velocity**2, dx=1 / 64)
    np.testing.assert_allclose(energy.input[-1], work, rtol=1e-7)
    np.testing.assert_allclose(energy.dissipated[-1], lost, rtol=1e-7)
    np.testing.assert_allclose(energy.strain, 2.5 * response.displacement**2 / 2, rtol=1e-14)
    np.testing.assert_allclose(energy.kinetic, 2.0 * response.velocity**2 / 2, rtol=1e-14)


@pytest.mark.parametrize("frame", ["relative", "absolute"])
@pytest.mark.parametrize("kind", ["force", "base acceleration", "base velocity"])
def test_balance(kind, frame):
    """energy.h: within 4 eps n of the sum of all changes."""
    energy = rampwise.energies(RECORD, 0.05, input=kind, frame=frame, period=[0.4, 2.0], damping=0.05, mass=3.0,
                               displacement=0.01, velocity=-0.2)  # fmt: skip
    moved = max(np.abs(np.diff(getattr(energy, part))).sum() + np.abs(getattr(energy, part)[..., 0]).max() for part in PARTS)
    assert energy.imbalance.shape == (2, 120)
    assert np.abs(energy.imbalance).max() <= 4 * np.finfo(float).eps * 120 * moved
    assert np.all(np.diff(energy.dissipated) >= 0)


def test_spectra_are_histories():
    grid = {"period": [0.3, 1.0, 2.5], "damping": [0.02, 0.1]}
    spectrum = rampwise.energy_spectrum(RECORD, 0.05, threads=2, **grid)
    assert spectrum.greatest.shape == (2, 3)
    history = rampwise.energies(RECORD, 0.05, input="base acceleration", omega=spectrum.omega, damping=[[0.02], [0.1]])
    for part in PARTS:
        same_bits(getattr(spectrum.last, part), getattr(history, part)[..., -1])
    same_bits(spectrum.greatest, history.input.max(axis=-1))
    same_bits(spectrum.equivalent_velocity, np.sqrt(2 * spectrum.greatest))
    plain = json.loads(json.dumps(spectrum.to_dict()))
    same_bits(plain["last"]["strain"], spectrum.last.strain)
    assert json.loads(json.dumps(history.to_dict()))["provenance"]["options"]["frame"] == "relative"


def test_refusals():
    options = {"input": "base displacement", "period": 1.0, "damping": 0.05}
    with pytest.raises(ValueError, match="^frame: "):
        rampwise.energies(RECORD, 0.05, **options)
    with pytest.raises(ValueError, match="^frame: 'moving' is none of"):
        rampwise.energies(RECORD, 0.05, frame="moving", **options)
    with pytest.raises(ValueError, match="^record: A sample is not a finite number \\(at sample 1\\)"):
        rampwise.energies([0, np.nan], 0.05, input="force", period=1.0, damping=0.05)
    with pytest.raises(ValueError, match="^period: "):
        rampwise.energy_spectrum(RECORD, 0.05, period=[0.0, 1.0])
    with pytest.raises(ValueError, match="^record: shape"):
        rampwise.energy_spectrum([RECORD, RECORD], 0.05, period=1.0)
