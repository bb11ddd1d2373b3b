"""Values between the samples, frequency responses, and evidence for whole histories."""

import numpy as np
import pytest
import scipy.signal
from bits import HISTORIES, same_bits

import rampwise

RECORD = np.random.default_rng(31).uniform(-1, 1, 40)
SYSTEM = rampwise.System.natural(frequency=[2.0, 11.0], damping=0.05)
KINDS = ("force", "base acceleration", "base velocity", "base displacement")


@pytest.mark.parametrize("between", ["ramp", "hold"])
@pytest.mark.parametrize("kind", KINDS)
def test_between_samples(kind, between):
    """A record cut eight times finer is the same load. 1e-12: eight steps' roundings for one, over all samples. Where
    the base's velocity jumps, and at the start of a slope, the finer record's accelerations are those of its own."""
    if between == "hold" and kind in ("base velocity", "base displacement"):
        return
    options = {"input": kind, "between": between, "system": SYSTEM}
    response = rampwise.respond(RECORD, 0.05, **options)
    steps = np.arange(39 * 8 + 1)
    fine = np.interp(steps / 8, np.arange(40), RECORD) if between == "ramp" else RECORD[steps // 8]
    expected = rampwise.respond(fine, 0.05 / 8, **options)
    found = response.at(np.minimum(steps * (0.05 / 8), response.time[-1]))
    for name in HISTORIES:
        theirs = getattr(expected, name)
        atol = 1e-12 * np.abs(theirs).max()
        np.testing.assert_allclose(getattr(found, name)[:, 1:], theirs[:, 1:], rtol=0, atol=atol)
    at_samples = response.at(response.time)
    for name in HISTORIES:  # a ramp's accelerations are those before a sample, of which the first has none
        same_bits(getattr(at_samples, name)[:, 1:], getattr(response, name)[:, 1:])


def test_between_stamped_samples():
    time = np.cumsum(np.random.default_rng(3).uniform(0.01, 0.2, 40))
    response = rampwise.respond(RECORD, time=time, input="force", system=SYSTEM)
    middle = (time[:-1] + time[1:]) / 2
    both = np.sort(np.concatenate((time, middle)))
    expected = rampwise.respond(np.interp(both, time, RECORD), time=both, input="force", system=SYSTEM)
    np.testing.assert_allclose(response.at(middle).velocity, expected.velocity[:, 1::2], rtol=0,
                               atol=1e-12 * np.abs(expected.velocity).max())  # fmt: skip
    for text, instants in (("time: ", time[0] - 1e-9), ("time: ", [time[5], time[-1] + 1]), ("time: ", np.nan)):
        with pytest.raises(ValueError, match="^" + text):
            response.at(instants)
    with pytest.raises(ValueError, match="^precision: "):
        rampwise.respond(RECORD.astype(np.float32), 0.05, input="force", system=SYSTEM).at(0.1)


def transfer(system, variable):
    """C (z - A)^-1 B + D at values of z or s."""
    a, b, c, d = system[:4]
    return np.array([(c @ np.linalg.solve(z * np.eye(2) - a, b) + d)[0, 0] for z in variable])


@pytest.mark.parametrize("between, method", [("ramp", "foh"), ("hold", "zoh")])
def test_frequency_responses(between, method):
    """SciPy's discrete system, and the continuous one, under a force; 1e-11 for its exponentials near a resonance of 5 %."""
    system = rampwise.System.natural(omega=7.0, damping=0.05)
    tones = np.array([0.0, 0.5, 6.0, 7.0, 9.0, 25.0])
    for row, name in (([[1, 0]], "displacement"), ([[0, 1]], "velocity")):
        found = rampwise.frequency_response(system, 0.1, input="force", output=name, omega=tones, between=between)
        continuous = tuple(map(np.array, ([[0, 1], [-49, -0.7]], [[0], [1]], row, [[0]])))
        discrete = scipy.signal.cont2discrete(continuous, 0.1, method)
        sampled, smooth = transfer(discrete, np.exp(0.1j * tones)), transfer(continuous, 1j * tones)
        for gain, phase, theirs in ((found.gain, found.phase, sampled),
                                    (found.continuous_gain, found.continuous_phase, smooth)):  # fmt: skip
            np.testing.assert_allclose(gain * np.exp(1j * phase), theirs, rtol=0, atol=1e-11 * np.abs(theirs).max())
    shapes = rampwise.frequency_response(SYSTEM, 0.01, input="base acceleration", frequency=[[1.0, 2.0, 3.0]],
                                         output="total_acceleration")  # fmt: skip
    assert shapes.gain.shape == (2, 1, 3) and shapes.omega.shape == (1, 3)
    weighted = rampwise.frequency_response(SYSTEM, 0.01, input="force", output=[1.0, 0, 0, 0], frequency=2.0)
    same_bits(weighted.gain, rampwise.frequency_response(SYSTEM, 0.01, input="force", frequency=2.0).gain)
    for text, options in (("output: 'speed'", {"output": "speed"}), ("frequency: ", {"frequency": -1.0}),
                          ("frequency: ", {"system": rampwise.System(1, 0, 0), "frequency": 0.0})):  # fmt: skip
        with pytest.raises(ValueError, match="^" + text):
            rampwise.frequency_response(**{"system": SYSTEM, "dt": 0.01, "input": "force", "frequency": 1.0, **options})


def test_evidence_of_histories():
    """Second differences over 12; and the response to them, at the instant of a peak, is that peak's evidence."""
    time = np.arange(500) * 0.05
    record = np.sin(np.pi * time / time[-1]) ** 4 * np.sin(9 * time)
    differences = rampwise.evidence_input(np.stack((record, 2 * record)))
    np.testing.assert_allclose(differences[1, 1:-1], 2 * np.diff(record, 2) / 12, rtol=0, atol=1e-16)
    assert np.all(differences[:, [0, -1]] == 0)
    error = rampwise.respond(differences[0], 0.05, input="base acceleration", frequency=2.0, damping=0.05)
    peak = rampwise.response_spectrum(record, 0.05, frequency=2.0, damping=0.05, evidence=True).displacement
    np.testing.assert_allclose(error.at(peak.time).displacement, peak.error, rtol=1e-9)
    with pytest.raises(ValueError, match="^record: .* \\(at sample 1 of record \\[1\\]\\)"):
        rampwise.evidence_input([[1.0, 2.0], [1.0, np.nan]])
