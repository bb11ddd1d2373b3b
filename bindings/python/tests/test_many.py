"""Many records, threads, banks."""

import copy
import pickle
import threading

import numpy as np
import pytest
from bits import PEAK_FIELDS, QUANTITIES, same_bits, same_response, same_spectrum
from hypothesis import given
from hypothesis import strategies as st

import rampwise

RECORD = np.random.default_rng(13).uniform(-1, 1, 500)
SKID = rampwise.System.natural(frequency=[2.0, 3.0], damping=0.05)
SYSTEM = rampwise.System.natural(period=np.linspace(0.05, 3, 70), damping=0.05)


@pytest.mark.parametrize("threads", [2, 5])
def test_threads_change_no_bits(threads, monkeypatch):
    records = np.random.default_rng(1).uniform(-1, 1, (8, 1, 300))
    options = {"input": "base acceleration", "system": SYSTEM}
    monkeypatch.setattr("rampwise.response._SAMPLES_A_TASK", 1000)
    same_response(rampwise.respond(records, 0.01, threads=threads, **options), rampwise.respond(records, 0.01, **options))
    grid = {"period": np.linspace(0.05, 3, 150), "damping": [0.02, 0.05]}
    same_spectrum(rampwise.response_spectrum(records, 0.01, threads=threads, **grid),
                  rampwise.response_spectrum(records, 0.01, **grid))  # fmt: skip


def test_other_threads_go_on_during_a_call():
    """The interpreter's lock is free: a thread counts while one call of some 0.05 s is under way."""
    record = np.tile(RECORD, 10000)
    done = threading.Event()
    counts = []

    def work():
        rampwise.respond(record, 0.01, input="force", period=1.0, damping=0.05)
        done.set()

    worker = threading.Thread(target=work)
    worker.start()
    while not done.wait(0.0005):
        counts.append(1)
    worker.join()
    assert len(counts) >= 5


def test_one_bad_record_does_not_stop_the_rest():
    records = {"north": RECORD, "torn": np.append(RECORD[:50], np.nan), "empty": [], "short": RECORD[:7]}
    for threads in (1, 3):
        outcomes = rampwise.for_each(rampwise.response_spectrum, records, 0.01, period=[0.5, 1.0], threads=threads)
        assert list(outcomes.results) == ["north", "short"] and list(outcomes.errors) == ["torn", "empty"]
        assert "at sample 50" in str(outcomes.errors["torn"])
        same_spectrum(outcomes.results["short"], rampwise.response_spectrum(RECORD[:7], 0.01, period=[0.5, 1.0]))


def test_records_have_intervals_of_their_own():
    outcomes = rampwise.for_each(rampwise.respond, [RECORD, RECORD], [0.01, 0.02], input="force", system=SYSTEM)
    same_response(outcomes.results[1], rampwise.respond(RECORD, 0.02, input="force", system=SYSTEM))
    with pytest.raises(ValueError, match="^dt: 1 intervals for 2 records"):
        rampwise.for_each(rampwise.respond, [RECORD, RECORD], [0.01], input="force", system=SYSTEM)
    with pytest.raises(ValueError, match="^dt: there is none for record 'b'"):
        rampwise.for_each(rampwise.respond, {"a": RECORD, "b": RECORD}, {"a": 0.01})


def test_progress_changes_nothing(capsys):
    outcomes = rampwise.for_each(rampwise.response_spectrum, [RECORD] * 3, 0.01, period=0.5, progress=True)
    assert len(outcomes.results) == 3
    assert capsys.readouterr().out == ""


def bank(**options):
    return rampwise.Bank(SYSTEM, 0.01, input="base acceleration", **options)


@given(st.lists(st.integers(1, 499), max_size=5))
def test_banks_are_responses(cuts):
    """From rest under the first sample, whatever the blocks."""
    expected = rampwise.respond(RECORD, 0.01, input="base acceleration", system=SYSTEM)
    oscillators = bank()
    oscillators.start(RECORD[0])
    parts = [oscillators.run(block, histories=[3, 69]) for block in np.split(RECORD[1:], sorted(cuts)) if block.size]
    for i, name in enumerate(("displacement", "velocity", "acceleration", "total_acceleration")):
        same_bits(np.concatenate([part[i] for part in parts], axis=1), getattr(expected, name)[[3, 69], 1:])
        same_bits(oscillators.read()[i], getattr(expected, name)[:, -1])
    same_bits(oscillators.largest, np.abs(expected.displacement).max(axis=1))


def test_a_pickled_bank_goes_on():
    first = bank()
    first.run(RECORD[:200])
    for second in (pickle.loads(pickle.dumps(first)), copy.deepcopy(first)):
        original = pickle.loads(pickle.dumps(first))
        original.run(RECORD[200:])
        second.run(RECORD[200:])
        same_bits(second.largest, original.largest)
        same_bits(second.state["u"], original.state["u"])
        assert second.provenance == first.provenance


def test_instructions_change_no_bits():
    expected = bank()
    expected.run(RECORD)
    for instructions in ("baseline", "avx2", "avx512", "neon"):
        try:
            other = bank(instructions=instructions)
        except ValueError as error:
            assert str(error).startswith("instructions: ")
            continue
        other.run(RECORD)
        same_bits(other.largest, expected.largest)


def test_stopped_oscillators_leave_the_others():
    system = rampwise.System(1.0, 0.0, [-1.0, 1.0])
    oscillators = rampwise.Bank(system, 1.0, input="force")
    histories = oscillators.run(np.ones(800), histories=[0, 1])
    assert oscillators.stopped == 1
    assert np.isnan(histories.displacement[0, -1]) and np.isfinite(histories.displacement[1]).all()
    assert np.isnan(oscillators.read().acceleration[0])
    again = pickle.loads(pickle.dumps(oscillators))
    oscillators.run(np.ones(10))
    again.run(np.ones(10))
    assert again.stopped == 1
    same_bits(again.read().displacement, oscillators.read().displacement)
    same_bits(again.largest, oscillators.largest)


@pytest.mark.parametrize("precision", ["double", "single"])
def test_saved_banks(precision):
    first, second = bank(precision=precision), bank(precision=precision)
    first.run(RECORD[:200])
    second.resume(first.save())
    first.run(RECORD[200:])
    second.run(RECORD[200:])
    np.testing.assert_array_equal(first.state, second.state)
    with pytest.raises(ValueError, match="^saved: "):
        rampwise.Bank(SKID, 0.01, input="base acceleration").resume(first.save())


@given(st.lists(st.integers(1, 499), max_size=4), st.sampled_from(["primary", "residual", "maximax"]))
def test_peaks_in_blocks_are_spectra(cuts, part):
    """Through a copy by pickle after every block."""
    expected = rampwise.response_spectrum(RECORD, 0.01, frequency=[2.0, 3.0], part=part, evidence=True)
    seen = rampwise.PeakBank(SKID, 0.01, input="base acceleration", quantities=QUANTITIES, evidence=True)
    for block in np.split(RECORD, sorted(set(cuts))):
        seen.put(block)
        seen = pickle.loads(pickle.dumps(seen))
    for quantity in QUANTITIES:
        for field in PEAK_FIELDS + ("high_error", "low_error"):
            same_bits(getattr(seen.peaks(quantity, part), field), getattr(getattr(expected, quantity), field))


def test_peaks_from_states():
    """What a bank has reached is sample 0 of the peaks; and a start is a start."""
    oscillators = rampwise.Bank(SKID, 0.01, input="base acceleration")
    oscillators.run(RECORD[:100])
    seen = rampwise.PeakBank(SKID, 0.01, input="base acceleration", at_samples=True)
    seen.start(oscillators.state)
    first = np.abs(oscillators.state["u"])
    seen.put(RECORD[100:])
    histories = oscillators.run(RECORD[100:], histories=[0, 1])
    same_bits(seen.peaks("displacement").size, np.maximum(first, np.abs(histories.displacement).max(axis=1)))
    seen.start()
    seen.put(RECORD)
    expected = rampwise.response_spectrum(RECORD, 0.01, frequency=[2.0, 3.0], at_samples=True)
    same_bits(seen.peaks("total_acceleration").value, expected.total_acceleration.value)
    for kind, text, call in (
        (ValueError, "quantity: ", lambda: seen.peaks("velocity")),
        (ValueError, "part: ", lambda: seen.peaks("displacement", "late")),
        (ValueError, "quantities: ", lambda: rampwise.PeakBank(SKID, 0.1, input="force", quantities=("speed",))),
        (ValueError, "samples: .* \\(at sample 1 of this block\\)", lambda: seen.put([0.0, np.nan])),
        (TypeError, "state: ", lambda: seen.start(np.zeros(2))),
        (ValueError, "samples: ", lambda: rampwise.PeakBank(SKID, 0.1, input="force").peaks("displacement")),
    ):
        with pytest.raises(kind, match="^" + text):
            call()


def test_bank_refusals():
    oscillators = bank()
    before = oscillators.state
    for samples, text in (([1, np.nan], "samples: A sample is not a finite number \\(at sample 1\\)"),
                          ([[1.0], [2.0]], "samples: shape"), ([], "samples: there are no samples")):  # fmt: skip
        with pytest.raises(ValueError, match="^" + text):
            oscillators.run(samples)
    for numbers in ([70], [-1], [1, 1]):
        with pytest.raises(ValueError, match="^histories: "):
            oscillators.run([1.0], histories=numbers)
    with pytest.raises(TypeError, match="^histories: "):
        oscillators.run([1.0], histories=[0.5])
    with pytest.raises(TypeError, match="^state: "):
        oscillators.state = np.zeros(70)
    with pytest.raises(ValueError, match="^sample: "):
        oscillators.start(np.inf)
    with pytest.raises(ValueError, match="^number: "):
        oscillators.retune(70, rampwise.System(1, 0, 1))
    np.testing.assert_array_equal(oscillators.state, before)


def test_retuned_oscillators():
    oscillators = bank()
    oscillators.run(RECORD[:100])
    stiff = rampwise.System.natural(period=0.2, damping=0.5)
    oscillators.retune(4, stiff)
    alone = rampwise.Bank(stiff, 0.01, input="base acceleration")
    alone.state = oscillators.state[4:5].reshape(())
    oscillators.run(RECORD[100:])
    alone.run(RECORD[100:])
    same_bits(oscillators.state["u"][4], alone.state["u"])
