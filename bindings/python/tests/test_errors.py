"""Refusals: the kind of exception, the argument's name, the library's text."""

import copy
import pickle

import numpy as np
import pytest
from bits import same_bits

import rampwise
from rampwise import _library

GOOD = {"record": [0.0, 1.0, 2.0], "dt": 0.1, "input": "force", "period": 1.0, "damping": 0.05}
NAN = float("nan")

RESPOND = [
    (ValueError, "record: A sample is not a finite number \\(at sample 1\\)", {"record": [0, NAN, 1]}),
    (ValueError, "record: A sample is not a finite number \\(at sample 2 of response \\[1\\]\\)",
     {"record": [[0, 1, 2], [0, 1, NAN]]}),
    (ValueError, "record: there are no samples", {"record": []}),
    (ValueError, "record: values are masked", {"record": np.ma.masked_greater([0.0, 9.0], 5)}),
    (TypeError, "record: an array of samples", {"record": 1.0}),
    (TypeError, "record: real numbers are needed, not complex128", {"record": [1j, 2]}),
    (TypeError, "record: real numbers are needed", {"record": ["a", "b"]}),
    (TypeError, "record: ", {"record": [[1, 2], [3]]}),
    (ValueError, "dt: The sample interval is not a finite number above zero", {"dt": 0.0}),
    (ValueError, "dt: The sample interval", {"dt": NAN}),
    (TypeError, "dt: one number is needed", {"dt": [0.1, 0.1]}),
    (TypeError, "exactly one of dt and time", {"dt": None}),
    (TypeError, "exactly one of dt and time", {"time": [0, 1, 2]}),
    (ValueError, "time: A time is not finite, or not later than the one before \\(at sample 2\\)",
     {"dt": None, "time": [0, 1, 1]}),
    (ValueError, "time: A time is not finite.*at sample 1", {"dt": None, "time": [0, NAN, 1]}),
    (ValueError, "time: shape \\(2,\\) for records of 3 samples", {"dt": None, "time": [0, 1]}),
    (ValueError, "record: A sample is not a finite number \\(at sample 2\\)",
     {"dt": None, "time": [0, 1, 2], "record": [0, 1, NAN]}),
    (ValueError, "input: 'push' is none of 'force'", {"input": "push"}),
    (ValueError, "between: 'line' is none of", {"between": "line"}),
    (ValueError, "between: Held base velocity", {"input": "base velocity", "between": "hold"}),
    (ValueError, "start: 'late' is none of", {"start": "late"}),
    (ValueError, "start: A load on a mass without a spring",
     {"start": "settled", "record": [1, 1], "period": None, "omega": 0.0}),
    (ValueError, "period: The frequency is negative, the period is not above zero", {"period": -1.0}),
    (ValueError, "frequency: The frequency is negative", {"period": None, "frequency": -1.0}),
    (TypeError, "exactly one of period, frequency, omega is needed by name; got period and omega", {"omega": 1.0}),
    (TypeError, "exactly one of period, frequency, omega is needed by name; got none", {"period": None}),
    (ValueError, "damping: 5 is above 2; it is the ratio to critical damping, not per cent", {"damping": 5.0}),
    (ValueError, "damping: The damper or damping ratio is not a finite number", {"damping": NAN}),
    (TypeError, "damping: the ratio to critical damping is needed", {"damping": None}),
    (ValueError, "mass: The mass is not a finite number above zero", {"mass": 0.0}),
    (ValueError, "period and damping: shapes \\(2,\\) and \\(3,\\)", {"period": [1, 2], "damping": [0.1, 0.1, 0.1]}),
    (ValueError, "record and system: shapes", {"period": [1, 2, 3], "record": np.zeros((2, 9))}),
    (ValueError, "displacement: shape \\(2,\\) for results", {"displacement": [1, 2]}),
    (ValueError, "velocity: an initial value goes with", {"velocity": 1.0, "start": "settled"}),
    (ValueError, "displacement: A state is not finite", {"displacement": NAN}),
    (ValueError, "precision: 'half' is none of", {"precision": "half"}),
    (ValueError, "precision: given times need", {"precision": "single", "dt": None, "time": [0, 1, 2]}),
    (TypeError, "system: a System is needed", {"system": 3.0, "period": None, "damping": None}),
    (TypeError, "system: period given besides it", {"system": rampwise.System(1, 0, 1), "damping": None}),
    (TypeError, "system: mass given besides it",
     {"system": rampwise.System(1, 0, 1), "damping": None, "period": None, "mass": 2.0}),
    (ValueError, "threads: 0 is not from 1", {"threads": 0}),
    (TypeError, "threads: a whole number", {"threads": 1.5}),
]  # fmt: skip


@pytest.mark.parametrize("kind, text, change", RESPOND)
def test_respond(kind, text, change):
    options = {**GOOD, **change}
    record, dt = options.pop("record"), options.pop("dt")
    with pytest.raises(kind, match="^" + text):
        rampwise.respond(record, dt, **options)


SPECTRUM = [
    (ValueError, "record: A sample is not a finite number \\(at sample 1 of record \\[1\\]\\)",
     {"record": [[0, 1, 2], [0, NAN, 0]]}),
    (ValueError, "part: 'all' is none of", {"part": "all"}),
    (ValueError, "between: rigid oscillators", {"between": "hold", "period": [0.0, 1.0]}),
    (ValueError, "period: The frequency is negative, the period .* \\(-1\\)", {"period": [1.0, -1.0]}),
    (ValueError, "damping: 5 is above 2", {"damping": 5}),
    (ValueError, "dt: The sample interval", {"dt": -0.1}),
]  # fmt: skip


@pytest.mark.parametrize("kind, text, change", SPECTRUM)
def test_spectrum(kind, text, change):
    options = {**GOOD, **change}
    record, dt = options.pop("record"), options.pop("dt")
    with pytest.raises(kind, match="^" + text):
        rampwise.response_spectrum(record, dt, **options)


def test_strong_damping_is_taken_when_meant():
    options = {**GOOD, "damping": 5.0, "allow_strong_damping": True}
    record, dt = options.pop("record"), options.pop("dt")
    assert rampwise.respond(record, dt, **options).displacement[-1] > 0
    assert rampwise.response_spectrum(record, dt, **options).SD > 0


def test_overflow_names_the_sample():
    falling = rampwise.System(1, 0, -1)
    with pytest.raises(ValueError, match=r"^record: The response is too large for its precision \(at sample \d+\)"):
        rampwise.respond(np.ones(1000), 1.0, input="force", system=falling)
    spectrum = rampwise.response_spectrum(np.ones(2000), 1.0, omega=1.0, damping=-0.9, input="force")
    assert np.isinf(spectrum.SD)


def test_memory():
    with pytest.raises(MemoryError):
        _library.check(_library.constant("ERROR_MEMORY"))


def test_lists():
    with pytest.raises(ValueError, match="^first and last: "):
        rampwise.equal_ratios(3, -1, 2)
    with pytest.raises(ValueError, match="^count: "):
        rampwise.equal_ratios(0, 1, 2)
    with pytest.raises(TypeError, match="^per_octave: "):
        rampwise.octaves(1, 2, 1.5)


def test_systems():
    system = rampwise.System([1.0, 2.0], 0.0, [[4.0], [9.0]])
    assert system.shape == (2, 2)
    with pytest.raises(ValueError, match="^stiffness: "):
        rampwise.System(1, 0, np.inf)
    with pytest.raises(ValueError, match="^damper: "):
        rampwise.System(1, NAN, 1)
    with pytest.raises(ValueError, match="^stiffness: shapes"):
        rampwise.System([1, 2], 0, [1, 2, 3])


def test_results_are_plain_and_pickled():
    import json

    response = rampwise.respond([0, 1, 2], 0.1, input="force", period=1, damping=0.05)
    spectrum = rampwise.response_spectrum([0, 1, 2], 0.1, period=[0.5, 1], damping=[0.02, 0.05])
    for result in (response, spectrum):
        plain = json.loads(json.dumps(result.to_dict()))
        assert plain["provenance"]["version"] == rampwise.library_version
        assert plain["provenance"]["arithmetic_edition"] == rampwise.arithmetic_edition
        assert plain["provenance"]["options"]["dt"] == 0.1
    same_bits(response.to_dict()["displacement"], response.displacement)
    same_bits(spectrum.to_dict()["PSA"], spectrum.PSA)
    for again in (pickle.loads(pickle.dumps(spectrum)), copy.deepcopy(spectrum)):
        same_bits(again.SA, spectrum.SA)
    same_bits(pickle.loads(pickle.dumps(response)).spring_force, response.spring_force)
