"""The shared vectors: bits from MPFR that C, Python and Octave must meet (tests/vectors/make_vectors.c)."""

import json
import os
import pathlib

import numpy as np
import pytest
from bits import HISTORIES, same_bits

import rampwise

VECTORS = pathlib.Path(os.environ.get("RAMPWISE_VECTORS", pathlib.Path(__file__).parents[3] / "tests" / "vectors"))
NAMES = ("A", "B", "C", "D", "Ap", "Bp", "Cp", "Dp", "A_minus_1", "Bp_minus_1")


def number(value):
    return np.array([float.fromhex(x) for x in value]) if isinstance(value, list) else float.fromhex(value)


def words(name):
    return name.replace("RAMPWISE_", "").replace("_", " ").lower()


def load(name, least):
    objects = json.loads((VECTORS / f"{name}.json").read_text())
    assert len(objects) >= least
    return objects


def arguments(entry):
    system = rampwise.System(*(number(entry[name]) for name in ("mass", "damper", "stiffness")))
    return system, {"input": words(entry["input"]), "between": words(entry["between"])}


def test_systems():
    for entry in load("systems", 50):
        natural = {entry["way"]: number(entry["given"])}
        system = rampwise.System.natural(damping=number(entry["damping"]), allow_strong_damping=True, **natural)
        same_bits([system.mass, system.damper, system.stiffness], number(entry["system"]))


def test_coefficients():
    for entry in load("coefficients", 150):
        system, kinds = arguments(entry)
        made = rampwise.coefficients(system, number(entry["dt"]), **kinds)
        same_bits([made[name] for name in NAMES], number(entry["coefficients"]))
        for row in ("acceleration", "total"):
            same_bits(made[row], number(entry[row]))


def initial(entry):
    return {"displacement": number(entry["u0"]), "velocity": number(entry["v0"])}


@pytest.mark.parametrize("name, least", [("steps", 15), ("times", 5)])
def test_responses(name, least):
    for entry in load(name, least):
        system, kinds = arguments(entry)
        when = {"time": number(entry["t"])} if "t" in entry else {"dt": number(entry["dt"])}
        response = rampwise.respond(number(entry["p"]), system=system, **when, **kinds, **initial(entry))
        for key, history in zip(("u", "v", "a", "total"), HISTORIES):
            same_bits(getattr(response, history), number(entry[key]))


def test_banks_take_the_same_steps():
    for entry in load("steps", 15):
        system, kinds = arguments(entry)
        bank = rampwise.Bank(rampwise.System([system.mass] * 3, system.damper, system.stiffness), number(entry["dt"]),
                             **kinds)  # fmt: skip
        samples = number(entry["p"])
        states = bank.state
        states["u"], states["v"] = number(entry["u0"]), number(entry["v0"])
        states["p"] = states["p_before"] = samples[0]
        bank.state = states
        first, second = bank.run(samples[1:7], histories=[1]), bank.run(samples[7:], histories=[1])
        for i, key in enumerate(("u", "v", "a", "total")):
            same_bits(np.concatenate((first[i][0], second[i][0])), number(entry[key])[1:])
