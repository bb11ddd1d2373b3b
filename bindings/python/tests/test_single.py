"""Single precision, and evidence of what the sampling has cost."""

import pickle

import numpy as np
import pytest
from bits import HISTORIES, same_spectrum

import rampwise

RECORD = np.random.default_rng(19).uniform(-1, 1, 3000)
SINGLE = RECORD.astype(np.float32)


def equal(first, second):
    assert first.dtype == second.dtype == np.float32
    np.testing.assert_array_equal(first.view(np.uint32), second.view(np.uint32))


@pytest.mark.parametrize("start", ["at once", "ramp", "settled"])
@pytest.mark.parametrize("kind", ["force", "base acceleration", "base velocity", "base displacement"])
def test_responses_are_close_to_double(kind, start):
    """step.h promises 1e-7/zeta of the largest value for displacement, at zeta of 5 %; twice that here, since the
    record and the velocity are rounded too."""
    options = {"input": kind, "period": 0.5, "damping": 0.05, "start": start}
    single, double = rampwise.respond(SINGLE, 0.01, **options), rampwise.respond(RECORD, 0.01, **options)
    for name in HISTORIES[:2]:
        exact = getattr(double, name)
        assert getattr(single, name).dtype == np.float32
        np.testing.assert_allclose(getattr(single, name), exact, rtol=0, atol=4e-6 * np.abs(exact).max())
    assert single.spring_force.dtype == single.relative_velocity.dtype == np.float32
    assert np.shares_memory(single.record, SINGLE)
    equal(rampwise.respond(RECORD, 0.01, precision="single", **options).displacement, single.displacement)


def test_banks_are_responses():
    system = rampwise.System.natural(period=np.linspace(0.1, 2, 37), damping=0.02)
    bank = rampwise.Bank(system, 0.01, input="force", precision="single")
    bank.start(SINGLE[0])
    first = bank.run(SINGLE[1:900], histories=[36])
    bank = pickle.loads(pickle.dumps(bank))
    second = bank.run(SINGLE[900:], histories=[36])
    expected = rampwise.respond(SINGLE, 0.01, input="force", system=system)
    for i, name in enumerate(HISTORIES):
        equal(np.concatenate((first[i][0], second[i][0])), getattr(expected, name)[36, 1:])
        equal(bank.read()[i], getattr(expected, name)[:, -1])
    equal(bank.largest, np.abs(expected.displacement).max(axis=1))


def test_spectra_are_double():
    same_spectrum(rampwise.response_spectrum(SINGLE, 0.01, period=[0.3, 1.0]),
                  rampwise.response_spectrum(SINGLE.astype(float), 0.01, period=[0.3, 1.0]))  # fmt: skip


def smooth_record(step):
    """Some sines under a taper that is flat to the third derivative at both ends."""
    t = np.arange(0, 20 + step / 2, step)
    load = sum(np.sin(2 * np.pi * f * t + f) for f in (0.4, 1.1, 2.3))
    return load * np.sin(np.pi * t / 20) ** 4


def test_evidence_is_close_to_the_error():
    """The record sampled 16 times as densely has 256 times less error, and stands for the smooth load. For displacement
    the header promises estimate over error from 0.7 to 1.15, for smooth loads."""
    options = {"period": [0.3, 0.5, 1.0], "damping": 0.05, "evidence": True}
    coarse = rampwise.response_spectrum(smooth_record(0.02), 0.02, **options)
    fine = rampwise.response_spectrum(smooth_record(0.02 / 16), 0.02 / 16, **options)
    assert not coarse.abrupt_start and not coarse.abrupt_end
    np.testing.assert_array_equal(coarse.displacement.sign, fine.displacement.sign)
    error = coarse.displacement.value - fine.displacement.value
    ratio = coarse.displacement.error / error
    assert np.all((ratio > 0.7) & (ratio < 1.15))
    np.testing.assert_allclose(coarse.displacement.share, np.abs(coarse.displacement.error / coarse.displacement.value))


def test_evidence_is_a_response():
    """At samples the estimate is the response to the second differences over 12; both are some hundred roundings."""
    spectrum = rampwise.response_spectrum(RECORD[:200], 0.01, period=0.4, at_samples=True, evidence=True)
    differences = np.zeros(200)
    differences[1:-1] = np.diff(RECORD[:200], 2) / 12
    error = rampwise.respond(differences, 0.01, input="base acceleration", period=0.4, damping=0.05).displacement
    at = int(np.round(spectrum.displacement.time / 0.01))
    np.testing.assert_allclose(spectrum.displacement.error, error[at], rtol=1e-12, atol=1e-13 * np.abs(error).max())


def test_verdict_on_a_spectrum():
    period = rampwise.equal_ratios(40, 0.05, 4)
    spectrum = rampwise.response_spectrum(smooth_record(0.05), 0.05, period=period[::-1], damping=[0.02, 0.1],
                                          evidence=True)  # fmt: skip
    for quantity in ("displacement", "total_acceleration"):
        shares = getattr(spectrum, quantity).share
        shortest = spectrum.shortest_period(0.02, quantity)
        assert shortest.shape == (2,)
        for i in range(2):
            good = spectrum.period >= shortest[i]
            assert np.all(shares[i][good] <= 0.02) and 0 < good.sum() < 40
            assert shares[i][~good][-1] > 0.02 or shares[i][~good][0] > 0.02
    assert np.all(np.isinf(spectrum.shortest_period(0.0)))
    with pytest.raises(ValueError, match="^share: "):
        rampwise.response_spectrum(RECORD, 0.05, period=period).shortest_period(0.1)


def test_evidence_of_abrupt_and_many_records():
    records = np.stack((smooth_record(0.02), np.roll(smooth_record(0.02), 300)))
    spectrum = rampwise.response_spectrum(records, 0.02, period=[0.0, 0.5], evidence=True)
    assert spectrum.abrupt_start.tolist() == [False, True]
    assert spectrum.displacement.error.shape == (2, 2) and spectrum.displacement.error[0, 0] == 0
    for text, options in (("input: ", {"input": "base displacement"}), ("between: ", {"between": "hold"})):
        with pytest.raises(ValueError, match="^" + text):
            rampwise.response_spectrum(records, 0.02, period=0.5, evidence=True, **options)
