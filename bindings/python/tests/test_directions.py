"""Two components: percentiles over the direction against spectra of turned records."""

import json

import numpy as np
import pytest
from bits import same_bits

import rampwise

NORTH, EAST = np.random.default_rng(31).uniform(-1, 1, (2, 150))
GRID = {"period": [0.2, 1.0], "damping": [0.02, 0.05]}


def turned(angle):
    return NORTH * np.cos(angle) + EAST * np.sin(angle)


@pytest.mark.parametrize("quantity, name", [("displacement", "SD"), ("velocity", "SV"), ("total_acceleration", "SA")])
def test_percentiles_of_turned_records(quantity, name):
    """S is 1-Lipschitz in the angle times its largest value: 720 turns of half of half a degree find the largest to
    pi/720 of itself at worst (in fact its square), and the median as closely; values between samples fall short by
    1e-6."""
    both = rampwise.directional_spectrum(NORTH, EAST, 0.02, quantity=quantity, percent=[0, 50, 100], threads=2, **GRID)
    assert both.value.shape == (3, 2, 2)
    angles = (np.arange(720) + 0.5) * np.pi / 720
    turns = getattr(rampwise.response_spectrum(np.array([turned(a) for a in angles]), 0.02, **GRID), name)
    largest = turns.max(axis=0)
    bound = largest * np.pi / 720 + 1e-6 * largest
    for i, expected in enumerate((turns.min(axis=0), np.median(turns, axis=0), largest)):
        assert np.all(np.abs(both.value[i] - expected) <= bound)
    assert np.all(both.value[2] >= largest * (1 - 2e-6))
    if quantity == "displacement":
        same_bits(both.PSA, both.omega * (both.omega * both.value))
    plain = json.loads(json.dumps(both.to_dict()))
    same_bits(plain["value"], both.value)


def test_histories_over_angle():
    """Hypotenuses have their largest at any angle; a square's outline has the median at 22.5 degrees."""
    x, y = np.array([1.0, -1.0, 1.0]), np.array([1.0, 1.0, -1.0])
    values = rampwise.percentiles_over_angle(x, y, [0, 50, 100])
    np.testing.assert_allclose(values, np.sqrt(2) * np.cos(np.pi / np.array([4, 8, np.inf])), rtol=1e-12)
    assert rampwise.percentiles_over_angle(x, y, 100).shape == ()


def test_refusals():
    with pytest.raises(ValueError, match="^first and second: shapes"):
        rampwise.directional_spectrum(NORTH, EAST[:9], 0.02, period=1.0)
    with pytest.raises(ValueError, match="^first or second: A sample is not a finite number \\(number 1\\)"):
        rampwise.directional_spectrum([0, np.nan], [0, 1], 0.02, period=1.0)
    with pytest.raises(ValueError, match="^percent: "):
        rampwise.percentiles_over_angle(NORTH, EAST, 101)
    with pytest.raises(ValueError, match="^quantity: 'PGA' is none of"):
        rampwise.directional_spectrum(NORTH, EAST, 0.02, period=1.0, quantity="PGA")
    with pytest.raises(ValueError, match="^damping: "):
        rampwise.directional_spectrum(NORTH, EAST, 0.02, period=1.0, damping=-0.1)
    both = rampwise.directional_spectrum(NORTH, EAST, 0.02, period=1.0, quantity="velocity")
    with pytest.raises(ValueError, match="^quantity: pseudo"):
        both.PSA
