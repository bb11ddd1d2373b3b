"""Comparison bit for bit."""

import numpy as np


def same_bits(first, second):
    first, second = (np.ascontiguousarray(array, dtype=np.float64) for array in (first, second))
    assert first.shape == second.shape
    np.testing.assert_array_equal(first.view(np.uint64), second.view(np.uint64))


HISTORIES = ("displacement", "velocity", "acceleration", "total_acceleration")


def same_response(first, second):
    for name in HISTORIES:
        same_bits(getattr(first, name), getattr(second, name))


PEAK_FIELDS = ("high", "high_time", "low", "low_time")
QUANTITIES = ("displacement", "velocity", "total_acceleration")


def same_spectrum(first, second):
    for quantity in QUANTITIES:
        for field in PEAK_FIELDS:
            same_bits(getattr(getattr(first, quantity), field), getattr(getattr(second, quantity), field))
