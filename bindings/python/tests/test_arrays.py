"""Types, shapes, layouts: everything that NumPy users hand over gives the bits of plain doubles."""

import numpy as np
import pytest
from bits import same_bits, same_response, same_spectrum
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra import numpy as hnp

import rampwise

OSCILLATOR = {"input": "base acceleration", "period": 0.7, "damping": 0.05}
RECORD = np.random.default_rng(7).uniform(-5, 5, 240)

DTYPES = ["f8", ">f8", "f4", "f2", "g", "i1", "u2", ">i4", "i8", "?"]


@pytest.mark.parametrize("dtype", DTYPES)
def test_any_real_type(dtype):
    given_record = RECORD.astype(dtype)
    expected = rampwise.respond(given_record.astype(float), 0.01, **OSCILLATOR)
    same_response(rampwise.respond(given_record, 0.01, precision="double", **OSCILLATOR), expected)
    same_response(rampwise.respond(given_record.tolist(), 0.01, **OSCILLATOR), expected)
    taken = rampwise.respond(given_record, 0.01, **OSCILLATOR)
    assert taken.displacement.dtype == (np.float32 if dtype == "f4" else np.float64)


def layouts(plain):
    """The same values, laid out in other ways."""
    spread = np.zeros(plain.shape[:-1] + (2 * plain.shape[-1],))
    spread[..., ::2] = plain
    odd = np.frombuffer(b"x" + plain.tobytes(), np.uint8)[1:].view(plain.dtype).reshape(plain.shape)
    read_only = plain.copy()
    read_only.flags.writeable = False
    backwards = plain[..., ::-1].copy()[..., ::-1]
    return {"spread": spread[..., ::2], "odd": odd, "read-only": read_only, "backwards": backwards,
            "Fortran": np.asfortranarray(plain)}  # fmt: skip


@given(hnp.arrays(np.float64, hnp.array_shapes(min_dims=1, max_dims=3, max_side=7), elements=st.floats(-1e3, 1e3)))
def test_any_layout(record):
    expected = rampwise.respond(record, 0.01, **OSCILLATOR)
    assert expected.displacement.shape == record.shape
    for name, other in layouts(record).items():
        np.testing.assert_array_equal(other, record, name)
        assert rampwise.respond(other, 0.01, **OSCILLATOR).record.flags.aligned
        same_response(rampwise.respond(other, 0.01, **OSCILLATOR), expected)


@given(
    hnp.mutually_broadcastable_shapes(num_shapes=3, max_dims=3, max_side=4),
    st.sampled_from(["force", "base acceleration", "base velocity", "base displacement"]),
    st.sampled_from(["at once", "ramp", "settled"]),
)
def test_shapes_are_broadcast(shapes, kind, start):
    periods, ratios, leading = shapes.input_shapes
    rng = np.random.default_rng(3)
    period, damping = rng.uniform(0.1, 2, periods), rng.uniform(0, 1, ratios)
    record = rng.uniform(-1, 1, leading + (9,))
    response = rampwise.respond(record, 0.02, input=kind, period=period, damping=damping, start=start)
    assert response.displacement.shape == shapes.result_shape + (9,)
    for index in np.ndindex(shapes.result_shape):
        one = rampwise.respond(np.broadcast_to(record, shapes.result_shape + (9,))[index], 0.02, input=kind,
                               period=np.broadcast_to(period, shapes.result_shape)[index],
                               damping=np.broadcast_to(damping, shapes.result_shape)[index], start=start)  # fmt: skip
        same_bits(response.displacement[index], one.displacement)
        same_bits(response.total_acceleration[index], one.total_acceleration)


@pytest.mark.parametrize("start", ["at once", "ramp", "settled"])
@pytest.mark.parametrize("kind", ["force", "base displacement"])
def test_frames_are_channels(start, kind):
    frames = np.random.default_rng(5).uniform(-1, 1, (50, 12))
    period = np.linspace(0.2, 3, 12)
    options = {"input": kind, "damping": 0.1, "start": start}
    together = rampwise.respond(frames.T, 0.05, period=period, **options)
    assert np.shares_memory(together.record, frames)
    assert together.displacement.T.flags.c_contiguous
    apart = rampwise.respond(np.ascontiguousarray(frames.T), 0.05, period=period, **options)
    same_response(together, apart)
    shared = rampwise.respond(frames.T, 0.05, period=1.0, **options)
    same_bits(shared.velocity[4], rampwise.respond(frames[:, 4], 0.05, period=1.0, **options).velocity)


def test_plain_records_are_not_copied():
    many = np.zeros((3, 5, 40))
    for record in (many, many[0], many[:, 2], many[::2, 1:, 7:], np.broadcast_to(many[0, 0], (6, 40))):
        assert np.shares_memory(rampwise.respond(record, 0.01, **OSCILLATOR).record, many)


def test_regular_times_are_regular_steps():
    times = np.arange(64) * 0.25
    record = RECORD[:64]
    same_response(rampwise.respond(record, time=times, **OSCILLATOR), rampwise.respond(record, 0.25, **OSCILLATOR))


def test_a_gap_is_a_straight_line():
    """A record with samples left out on straight lines has the same response: steps of two lengths round apart, some
    1e-16 of the motion each."""
    times = np.arange(101) * 0.125
    record = np.interp(times, times[::5], RECORD[:21])
    full = rampwise.respond(record, 0.125, **OSCILLATOR)
    kept = np.sort(np.append(np.arange(0, 101, 5), [3, 17, 18, 64]))
    thin = rampwise.respond(record[kept], time=times[kept], **OSCILLATOR)
    np.testing.assert_allclose(thin.displacement, full.displacement[kept], rtol=0,
                               atol=1e-13 * np.abs(full.displacement).max())  # fmt: skip


@pytest.mark.parametrize("records", [(), (3,), (2, 2)])
@pytest.mark.parametrize("ratios", [(), (2,)])
@pytest.mark.parametrize("periods", [(), (5,)])
def test_spectra_are_grids(records, ratios, periods):
    rng = np.random.default_rng(11)
    record = rng.uniform(-1, 1, records + (80,))
    period, damping = rng.uniform(0.05, 2, periods), rng.uniform(0, 0.3, ratios)
    spectrum = rampwise.response_spectrum(record, 0.01, period=period, damping=damping)
    assert spectrum.SA.shape == records + ratios + periods
    for r in np.ndindex(records):
        for d in np.ndindex(ratios):
            for p in np.ndindex(periods):
                one = rampwise.response_spectrum(record[r], 0.01, period=period[p], damping=damping[d])
                for name in ("SD", "SV", "SA", "PSV", "PSA"):
                    same_bits(getattr(spectrum, name)[r + d + p], getattr(one, name))


@pytest.mark.parametrize("kind", ["force", "base acceleration", "base velocity", "base displacement"])
def test_spectra_at_samples_are_responses(kind):
    options = {"input": kind, "period": [0.1, 0.9], "damping": 0.05}
    spectrum = rampwise.response_spectrum(RECORD, 0.01, at_samples=True, **options)
    response = rampwise.respond(RECORD, 0.01, **options)
    same_bits(spectrum.SD, np.abs(response.relative_displacement).max(axis=-1))
    velocity, total = (np.abs(h).max(axis=-1) for h in (response.relative_velocity, response.total_acceleration))
    if kind != "base displacement":
        same_bits(spectrum.SV, velocity)
        same_bits(spectrum.SA, total)
    else:  # both jump at the samples there, and both values count
        assert np.all(spectrum.SV >= velocity) and np.all(spectrum.SA >= total)
    between = rampwise.response_spectrum(RECORD, 0.01, **options)
    assert np.all(between.SD >= spectrum.SD)
    assert kind == "base displacement" or np.all(between.SD > spectrum.SD)  # there, corners of the base are peaks


def test_parts_of_time():
    options = {"period": [0.3, 5.0], "damping": 0.02}
    parts = {p: rampwise.response_spectrum(RECORD, 0.01, part=p, **options) for p in ("primary", "residual", "maximax")}
    larger = np.maximum(parts["primary"].SD, parts["residual"].SD)
    same_bits(parts["maximax"].SD, larger)
    assert np.all(parts["residual"].displacement.time >= 2.39)
    assert np.all(parts["primary"].displacement.time <= 2.39)


def test_one_way_of_frequency_is_another():
    """2 pi / T in double against twofold digits: some eps of omega, which the peaks of a short record feel as little."""
    period = np.array([0.2, 1.0, 3.0])
    by_period = rampwise.response_spectrum(RECORD, 0.01, period=period)
    for other in ({"frequency": 1 / period}, {"omega": 2 * np.pi / period}):
        spectrum = rampwise.response_spectrum(RECORD, 0.01, **other)
        np.testing.assert_allclose(spectrum.SA, by_period.SA, rtol=1e-13)
        np.testing.assert_allclose(spectrum.period, period, rtol=1e-15)


def test_lists_of_periods():
    periods = rampwise.equal_ratios(5, 0.1, 10)
    assert periods[0] == 0.1 and periods[-1] == 10 and np.allclose(np.diff(np.log10(periods)), 0.5)
    assert rampwise.octaves(1, 8, 3).size == 10
    same_spectrum(rampwise.response_spectrum(RECORD, 0.01, period=list(periods)),
                  rampwise.response_spectrum(RECORD, 0.01, period=periods))  # fmt: skip
