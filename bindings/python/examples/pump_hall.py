"""The invented pump hall's files, for the examples."""

import pathlib

import numpy as np

FILES = pathlib.Path(__file__).resolve().parents[3] / "examples"
UNITS = {"length": "m", "time": "s", "force": "N"}


def shake():
    """The synthetic base shake: interval in s, and accelerations in m/s^2."""
    table = np.loadtxt(FILES / "pump_hall_shake.csv", delimiter=",", skiprows=3)
    return 0.005, table[:, 1]


def gear():
    """Names, and masses (kg), natural frequencies (Hz) and damping ratios as arrays."""
    table = np.genfromtxt(FILES / "pump_hall_gear.csv", delimiter=",", skip_header=2, dtype=None, encoding="utf-8")
    names, mass, frequency, damping = (np.array([row[i] for row in table]) for i in range(4))
    return list(names), mass, frequency, damping
