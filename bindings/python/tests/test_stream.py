"""Streams and watches: the bits of whole records, gaps, rails, trips, saving."""

import copy
import pickle

import numpy as np
import pytest
from bits import HISTORIES, same_bits
from hypothesis import given
from hypothesis import strategies as st

import rampwise

RECORD = np.random.default_rng(23).uniform(-1, 1, 400)
SKID = rampwise.System.natural(frequency=2.4, damping=0.05)
OPTIONS = {"input": "base acceleration"}
RESPONSE = rampwise.respond(RECORD, 0.01, system=SKID, **OPTIONS)


def stream(**options):
    return rampwise.Stream(SKID, 0.01, **{**OPTIONS, "outputs": HISTORIES, **options})


@given(st.lists(st.integers(1, 399), max_size=6), st.sampled_from(["put", "one by one", "stamped"]))
def test_blocks_are_responses(cuts, way):
    live = stream(ticks=5)
    blocks = np.split(RECORD, sorted(set(cuts)))
    times = np.split(np.arange(400) * 5, sorted(set(cuts)))
    if way == "put":
        values = [block.values for block in live.follow(iter(blocks))]
    elif way == "stamped":
        values = [live.put(block, stamps).values for block, stamps in zip(blocks, times)]
    else:
        values = [block.values for block in live.follow(float(sample) for sample in RECORD)]
    whole = np.concatenate(values)
    for i, name in enumerate(HISTORIES):
        same_bits(whole[:, i], getattr(RESPONSE, name))
    same_bits(live.read(), whole[-1])
    assert live.sample == 399 and live.counts["good"] == 400


def test_settled_starts():
    live = stream(start="settled")
    expected = rampwise.respond(RECORD, 0.01, system=SKID, start="settled", **OPTIONS)
    same_bits(live.put(RECORD).values[:, 0], expected.displacement)


def test_single_precision():
    record = RECORD.astype(np.float32)
    values = stream(precision="single").put(record).values
    assert values.dtype == np.float32
    expected = rampwise.respond(record, 0.01, system=SKID, **OPTIONS)
    np.testing.assert_array_equal(values[:, 0], expected.displacement)


def test_gaps_are_bridged_by_straight_lines():
    """A bridge is one exact step, as respond takes it at the times of the good samples; its length is 4 dt rounded
    once, there a difference of two times: 1e-13 of the motion leaves room."""
    torn = RECORD.copy()
    torn[[50, 51, 52, 200]] = np.nan
    live = stream()
    block = live.put(torn)
    good = np.isfinite(torn)
    expected = rampwise.respond(RECORD[good], time=np.flatnonzero(good) * 0.01, system=SKID, **OPTIONS)
    np.testing.assert_allclose(block.values[good, 0], expected.displacement, rtol=0,
                               atol=1e-13 * np.abs(expected.displacement).max())  # fmt: skip
    assert block.flags[0] == rampwise.STARTED and np.all(block.flags[50:53] == rampwise.WAITING)
    assert block.flags[53] == rampwise.BRIDGED and live.counts["missing"] == 4 and live.counts["bridges"] == 2
    refusing = stream(missing="refuse")
    with pytest.raises(ValueError, match="^samples: A sample is not a finite number \\(at sample 50 of this block\\)"):
        refusing.put(torn)


def test_raw_integers_and_rails():
    raw = np.round(RECORD * 1000).astype(np.int16)
    live = stream(scale=0.001, offset=0.5, rails=(-900, 900))
    block = live.put_raw(raw)
    # offset + scale raw is rounded once: the nearest double of the exact sum
    exact = np.array([float(np.longdouble(0.5) + np.longdouble(0.001) * np.longdouble(int(r))) for r in raw])
    np.testing.assert_allclose(block.values[:, 0], rampwise.respond(exact, 0.01, system=SKID, **OPTIONS).displacement,
                               rtol=0, atol=1e-15)  # fmt: skip
    clipped = np.abs(raw) >= 900
    assert np.all((block.flags[1:] & rampwise.CLIPPED != 0) == (clipped[1:] | clipped[:-1]))
    assert live.counts["clipped"] == clipped.sum()


def test_watches_see_true_peaks():
    live = stream()
    watch = live.watch("displacement", window=50)
    live.put(RECORD)
    expected = rampwise.response_spectrum(RECORD, 0.01, frequency=2.4, damping=0.05).displacement
    peak = watch.peak()
    for field in ("high", "low"):
        np.testing.assert_allclose(getattr(peak, field), getattr(expected, field), rtol=1e-12)
        np.testing.assert_allclose(getattr(peak, field + "_time"), getattr(expected, field + "_time"), atol=1e-9)
    assert watch.peak("in window").high <= peak.high
    watch.reset()
    same_bits(watch.peak("since reset").high, RESPONSE.displacement[-1])


def test_trips_have_exact_instants():
    """Under a load that stays, u = p/k (1 - cos t) of an undamped system comes up to half its peak at t = pi/2."""
    live = rampwise.Stream(rampwise.System(1, 0, 1), 0.3, input="force")
    heard = []
    watch = live.watch("displacement", [rampwise.Level(1.0, latch=True), 3.0, rampwise.Level(-0.1, direction=-1)],
                       on_trip=heard.append)  # fmt: skip
    blocks = list(live.follow([np.ones(5), np.ones(15)]))
    trips = [event for block in blocks for event in block.events if event.trips]
    assert trips == heard and len(heard) == 1 and len(blocks[1].events) == 2
    np.testing.assert_allclose(heard[0].time, np.pi / 2, atol=1e-12)
    np.testing.assert_allclose(blocks[1].events[1].time, 3 * np.pi / 2, atol=1e-12)
    assert heard[0].direction == 1 and heard[0].level == 0 and heard[0].output == "displacement"
    assert watch.tripped and watch.level(0) == rampwise.LevelReport(False, True, 1, 1)
    watch.release(0)
    assert not watch.tripped and watch.lost == 0


@pytest.mark.parametrize("again", [lambda live: pickle.loads(pickle.dumps(live)), copy.deepcopy])
@pytest.mark.parametrize("precision", ["double", "single"])
def test_pickled_streams_go_on(again, precision):
    live = stream(precision=precision)
    live.watch("total_acceleration", [rampwise.Level(0.2, 0.05)], window=20)
    live.put(RECORD[:170])
    other = again(live)
    first, second = live.put(RECORD[170:]), other.put(RECORD[170:])
    np.testing.assert_array_equal(first.values, second.values)
    assert first.events == second.events and len(first.events) >= 4
    for span in ("since start", "since reset", "in window"):
        same_bits(live.watches[0].peak(span).high, other.watches[0].peak(span).high)
    assert live.counts == other.counts and live.provenance == other.provenance


def test_saved_bytes():
    live = stream()
    live.put(RECORD[:100])
    other = stream()
    other.resume(live.save())
    same_bits(other.put(RECORD[100:]).values, live.put(RECORD[100:]).values)
    damaged = bytearray(live.save())
    damaged[60] ^= 1
    with pytest.raises(ValueError, match="^saved: "):
        other.resume(bytes(damaged))


def test_retuned_and_restarted_streams():
    live, bank = stream(), rampwise.Bank(SKID, 0.01, **OPTIONS)
    stiff = rampwise.System.natural(frequency=5.0, damping=0.1)
    live.put(RECORD[:100])
    live.retune(stiff)
    bank.start(RECORD[0])
    bank.run(RECORD[1:100])
    bank.retune(0, stiff)
    bank.run(RECORD[100:])
    live.put(RECORD[100:])
    same_bits(live.state["u"], bank.state["u"])
    live.start()
    same_bits(live.put(RECORD).values[-1, 0], rampwise.respond(RECORD, 0.01, system=stiff, **OPTIONS).displacement[-1])


REFUSALS = [
    (ValueError, "outputs: 'speed' is none of", {"outputs": ["speed"]}),
    (TypeError, "outputs: a sequence", {"outputs": "displacement"}),
    (ValueError, "outputs: 8 at most", {"outputs": ["load"] * 9}),
    (ValueError, "outputs: four weights", {"outputs": [[1, 2]]}),
    (ValueError, "missing: 'drop' is none of 'bridge'", {"missing": "drop"}),
    (ValueError, "start: ", {"start": "late"}),
    (ValueError, "ticks: 0 is not from 1", {"ticks": 0}),
    (TypeError, "longest: a whole number", {"longest": 1.5}),
    (ValueError, "scale, offset or rails: ", {"scale": float("nan")}),
]


@pytest.mark.parametrize("kind, text, options", REFUSALS)
def test_refusals(kind, text, options):
    with pytest.raises(kind, match="^" + text):
        stream(**options)


def test_refused_samples():
    live = stream()
    for kind, text, samples, times in (
        (ValueError, "samples: shape", [[1.0]], None),
        (ValueError, "times: shape", [1.0], [1, 2]),
        (TypeError, "times: whole numbers", [1.0], [0.5]),
        (ValueError, "times: A time is not finite, or not later than the one before \\(at sample 1", [1.0, 2.0], [3, 3]),
    ):
        with pytest.raises(kind, match="^" + text):
            live.put(samples, times)
    with pytest.raises(TypeError, match="^samples: whole numbers"):
        live.put_raw([0.5])
    with pytest.raises(ValueError, match="^samples: a number is beyond"):
        live.put_raw([2**40])
    with pytest.raises(ValueError, match="^levels: 4 at most"):
        live.watch("displacement", [1, 2, 3, 4, 5])
    with pytest.raises(ValueError, match="^span: "):
        live.watch().peak("in window")
    assert live.counts["good"] == 0
