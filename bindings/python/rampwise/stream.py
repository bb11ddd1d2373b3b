"""One oscillator on live data, and watches that trip."""

from __future__ import annotations

import dataclasses
from typing import Any, Callable, Dict, Iterable, Iterator, List, Literal, NamedTuple, Optional, Sequence, Tuple, Union

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._output import Output, output_struct
from ._precision import Precision, arithmetic
from ._provenance import provenance
from .peaks import Peaks
from .system import Between, Input, System, choice, coefficients

Span = Literal["since start", "since reset", "in window"]

_STARTS = ("at rest", "settled")
_MISSING = {"bridge": "GAP_BRIDGE", "hold": "GAP_HOLD", "refuse": "GAP_REFUSE"}
_BEYOND = {"restart": "GAP_RESTART", "refuse": "GAP_REFUSE"}
_SPANS = ("since start", "since reset", "in window")
_EVENT_LEVEL = _library.constant("EVENT_LEVEL")

STARTED = _library.constant("STARTED")
CLIPPED = _library.constant("CLIPPED")
BRIDGED = _library.constant("BRIDGED")
WAITING = _library.constant("WAITING")


class Level(NamedTuple):
    """A level of a watch.

    Attributes
    ----------
    value : float
        Rising, the response is beyond it from the instant that it comes up to it until it falls below
        ``value - hysteresis``; falling, the other way round.
    hysteresis : float
        0 or more.
    direction : {1, -1}
        Rising or falling.
    latch : bool
        Once passed, tripped until released; otherwise tripped while beyond.
    """

    value: float
    hysteresis: float = 0.0
    direction: int = 1
    latch: bool = False


class LevelReport(NamedTuple):
    """How a level stands: how often it was passed, and how often the response came back as well."""

    beyond: bool
    tripped: bool
    passed: int
    cycles: int


@dataclasses.dataclass(frozen=True)
class Event:
    """A level that was passed, or a watch that a step too long has reset.

    Attributes
    ----------
    time : float
        (sample + fraction) dt after sample 0.
    sample, fraction : int, float
        The exact instant.
    value : float
        Of the watched output then.
    direction : int
        1 rising, -1 falling, 0 for a reset.
    level : int
        Number of the level; -1 for a reset.
    trips : bool
        Whether the response goes beyond the level.
    flags : int
        Of the step: `STARTED`, `CLIPPED`, `BRIDGED`.
    output : str
        Name of what is watched.
    """

    time: float
    sample: int
    fraction: float
    value: float
    direction: int
    level: int
    trips: bool
    flags: int
    output: str


class Block(NamedTuple):
    """What samples gave.

    Attributes
    ----------
    values : ndarray, shape (n, outputs)
        The outputs at each sample; NaN before the first good one.
    flags : ndarray of uint8, shape (n,)
        Sums of `STARTED`, `CLIPPED`, `BRIDGED`, `WAITING`.
    events : list of Event
        Levels passed, watch by watch in the order of time.
    """

    values: NDArray[Any]
    flags: NDArray[np.uint8]
    events: List[Event]


def _option(value: str, names: Dict[str, str], name: str) -> int:
    if value not in names:
        raise ValueError(f"{name}: {value!r} is none of {', '.join(map(repr, names))}")
    return _library.constant(names[value])


class Stream:
    """One oscillator on live data: samples as they come, one or a block at a time.

    At a fixed rate it has the bits of `respond` on the same samples, however they are cut into blocks. A sample is
    missing where it is NaN or infinite, where a raw one is `missing_raw`, and where stamps are further apart than one
    and a half dt.

    Parameters
    ----------
    system : System
        One system.
    dt : float
        Interval between samples.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are.
    between : {'ramp', 'hold'}
        What the input does between samples.
    outputs : sequence
        Up to 8 of displacement, velocity, acceleration, total_acceleration, spring_force, damper_force, load, or four
        weights over u, v, p and p - p_before.
    start : {'at rest', 'settled'}
        How the first sample starts it.
    missing : {'bridge', 'hold', 'refuse'}
        Samples that are missing: nothing happens until the next good one, then one exact step over all of them under
        one straight load; or each is a step under the last good load; or a ValueError.
    beyond : {'restart', 'refuse'}
        When more than `longest` in a row were missing: start anew, or refuse until `start` is called.
    longest : int
        So many samples in a row may be missing.
    ticks : int
        Ticks of the stamps in one dt.
    scale, offset : float
        A raw integer is offset + scale raw.
    rails : (float, float)
        Samples at or beyond them are flagged as clipped.
    missing_raw : int, optional
        The raw integer that is no sample.
    precision : {'double', 'single'}
        Of steps and outputs.

    Notes
    -----
    A stream belongs to one thread at a time. It can be pickled with its watches, and goes on with the same bits;
    callbacks are left behind.

    Examples
    --------
    >>> import numpy, rampwise
    >>> skid = rampwise.System.natural(frequency=2.4, damping=0.05)
    >>> stream = rampwise.Stream(skid, dt=0.01, input="base acceleration")
    >>> trip = stream.watch("displacement", [rampwise.Level(0.02, latch=True)])
    >>> ground = 3 * numpy.sin(2 * numpy.pi * 2.4 * numpy.arange(100) / 100)
    >>> for block in stream.follow(numpy.split(ground, 10)):
    ...     for event in block.events:
    ...         if event.trips:
    ...             print(f"{event.time:.4f} s: {event.value:.4f}")
    ...             break
    0.3468 s: 0.0200
    0.7473 s: 0.0200
    >>> trip.tripped
    True
    """

    def __init__(
        self,
        system: System,
        dt: float,
        *,
        input: Input,
        between: Between = "ramp",
        outputs: Sequence[Output] = ("displacement",),
        start: str = "at rest",
        missing: str = "bridge",
        beyond: str = "restart",
        longest: int = 10,
        ticks: int = 1,
        scale: float = 1.0,
        offset: float = 0.0,
        rails: Tuple[float, float] = (-np.inf, np.inf),
        missing_raw: Optional[int] = None,
        precision: Precision = "double",
    ) -> None:
        made = coefficients(system, dt, input=input, between=between, precision=precision)
        if made.size != 1:
            raise ValueError(f"system: one is needed, not shape {made.shape}")
        if isinstance(outputs, str):
            raise TypeError(f"outputs: a sequence is needed, such as [{outputs!r}]")
        wanted = [output_struct(output) for output in outputs]
        if len(wanted) > _library.constant("STREAM_OUTPUTS"):
            raise ValueError(f"outputs: {_library.constant('STREAM_OUTPUTS')} at most, not {len(wanted)}")
        options = np.zeros(1, _library.STREAM_OPTIONS)
        _library.call("stream_options_init", _library.address(options))
        options["start"] = choice(start, _STARTS, "start")
        options["missing"] = _option(missing, _MISSING, "missing")
        options["beyond"] = _option(beyond, _BEYOND, "beyond")
        for name, value, least in (("longest", longest, 0), ("ticks", ticks, 1)):
            options[name] = _arrays.whole(value, name, least)
        for name, number in (("scale", scale), ("offset", offset), ("rail_low", rails[0]), ("rail_high", rails[1])):
            options[name] = _arrays.double(number, name)
        if missing_raw is not None:
            options["missing_raw"] = _arrays.whole(missing_raw, "missing_raw", -(2**31))
        options["output_count"] = len(wanted)
        for i, (_, struct) in enumerate(wanted):
            options["output"][0, i] = struct
        kept = {"dt": float(dt), "input": input, "between": between, "outputs": [name for name, _ in wanted],
                "start": start, "missing": missing, "beyond": beyond, "longest": int(longest), "ticks": int(ticks),
                "precision": precision}  # fmt: skip
        self._make(made.reshape(1), options, kept)

    def _make(self, made: NDArray[np.void], options: NDArray[np.void], kept: Dict[str, Any]) -> None:
        self._numbers = arithmetic(kept["precision"])
        self._coeffs, self._options, self._kept = made, options, kept
        self._memory = _arrays.aligned(_library.struct_size("rampwise_stream" + self._numbers.suffix), 16)
        self._at = _library.address(self._memory)
        self._watches: List[Watch] = []
        status = self._numbers.call("stream_init", self._at, _library.address(made), _library.address(options))
        _library.check(status, sample="scale, offset or rails", count="longest or ticks")

    @property
    def outputs(self) -> List[str]:
        """Names of the outputs."""
        return list(self._kept["outputs"])

    @property
    def provenance(self) -> Dict[str, Any]:
        """Version, edition of the arithmetic, options."""
        return provenance(**self._kept)

    @property
    def counts(self) -> Dict[str, int]:
        """Numbers of samples so far.

        next (the number expected), good, missing, clipped, bridges, starts, longest (run of missing ones), last_missing
        and last_clipped (2**64 - 1 for none).
        """
        counts = np.zeros((), _library.STREAM_COUNTS)
        _library.check(self._numbers.call("stream_count", self._at, _library.address(counts)))
        return {name: int(counts[name]) for name in _library.STREAM_COUNTS.names or ()}

    @property
    def state(self) -> NDArray[np.void]:
        """State at the last good sample: u, v, p and p_before, and in single precision u_low and v_low."""
        return self._state()[0]

    @property
    def sample(self) -> int:
        """Number of the last good sample."""
        return self._state()[1]

    def _state(self) -> Tuple[NDArray[np.void], int]:
        state, number = np.zeros((), self._numbers.state), np.zeros(1, np.uint64)
        status = self._numbers.call("stream_state", self._at, _library.address(state), _library.address(number))
        _library.check(status, count="state")
        return state, int(number[0])

    def start(self, state: Optional[NDArray[np.void]] = None, number: int = 0) -> None:
        """Begins anew: with the next sample, as its `number`; or at a state that belongs to that number."""
        if state is not None and (getattr(state, "dtype", None) != self._numbers.state or state.size != 1):
            raise TypeError("state: one state of the stream's own type is needed")
        place = None if state is None else _library.address(np.ascontiguousarray(state))
        status = self._numbers.call("stream_start", self._at, place, _arrays.whole(number, "number", 0))
        _library.check(status)

    def put(self, samples: ArrayLike, times: Optional[ArrayLike] = None) -> Block:
        """The next samples.

        Parameters
        ----------
        samples : array_like, shape (n,) or ()
            NaN for a missing one.
        times : array_like of int, shape (n,), optional
            Stamps in ticks, rising.

        Returns
        -------
        Block
            Outputs and flags of each sample, and the events of the watches. Callbacks have been called.

        Raises
        ------
        ValueError
            A sample is missing and `missing` is 'refuse', more than `longest` were and `beyond` is, a stamp does not
            rise, or the response overflows: then the samples before it were taken.
        """
        block = _arrays.in_order(np.atleast_1d(_arrays.reals(samples, "samples", self._numbers.real)))
        return self._put("stream_put", block, times)

    def put_raw(self, samples: ArrayLike, times: Optional[ArrayLike] = None) -> Block:
        """The next samples as raw integers, which `scale` and `offset` turn into the input."""
        return self._put("stream_put_raw", _arrays.integers(np.atleast_1d(np.asarray(samples)), "samples", np.int32),
                         times)  # fmt: skip

    def _put(self, name: str, block: NDArray[Any], times: Optional[ArrayLike]) -> Block:
        if block.ndim != 1:
            raise ValueError(f"samples: shape {block.shape}, where one axis is needed")
        stamps = None if times is None else _arrays.integers(np.atleast_1d(np.asarray(times)), "times", np.int64)
        if stamps is not None and stamps.shape != block.shape:
            raise ValueError(f"times: shape {stamps.shape} for {block.size} samples")
        values = np.full((block.size, len(self._kept["outputs"])), np.nan, self._numbers.real)
        flags, bad = np.zeros(block.size, np.uint8), np.zeros(1, np.uintp)
        ends = [_library.address(array) for array in (block, values, flags, bad)]
        if stamps is None:
            status = self._numbers.call(name, self._at, block.size, *ends)
        else:
            status = self._numbers.call(name + "_at", self._at, block.size, _library.address(stamps), *ends)
        events = [event for watch in self._watches for event in watch._take()]
        _library.check(status, f"at sample {bad[0]} of this block", sample="samples", gap="samples", time="times",
                       overflow="samples")  # fmt: skip
        return Block(values, flags, events)

    def follow(self, source: Iterable[ArrayLike]) -> Iterator[Block]:
        """A block of results for each sample or block that a generator yields."""
        for samples in source:
            yield self.put(samples)

    def skip_to(self, number: int) -> None:
        """The samples before `number` are missing: a gap in the sender's sequence."""
        status = self._numbers.call("stream_skip_to", self._at, _arrays.whole(number, "number", 0))
        _library.check(status, time="number", gap="number")

    def read(self) -> NDArray[Any]:
        """The outputs as they stand."""
        values = np.zeros(len(self._kept["outputs"]), self._numbers.real)
        _library.check(self._numbers.call("stream_read", self._at, _library.address(values), None), count="outputs")
        return values

    def retune(self, system: System) -> None:
        """Another system from the next step on; displacement and velocity stay."""
        options = {key: self._kept[key] for key in ("input", "between", "precision")}
        made = coefficients(system, self._kept["dt"], **options)
        if made.size != 1:
            raise ValueError(f"system: one is needed, not shape {made.shape}")
        _library.check(self._numbers.call("stream_retune", self._at, _library.address(made), None, 0))
        self._coeffs = made.reshape(1)

    def watch(
        self,
        output: Output = "displacement",
        levels: Sequence[Union[Level, float]] = (),
        *,
        on_trip: Optional[Callable[[Event], None]] = None,
        window: int = 0,
        capacity: int = 1024,
    ) -> "Watch":
        """Watches an output between the samples too, from here on.

        Parameters
        ----------
        output : str or four weights
            As in `outputs`.
        levels : sequence of Level or float
            Up to 4; a number is a rising level without hysteresis or latch.
        on_trip : callable, optional
            Called with the `Event` when a level is passed, before `put` returns.
        window : int
            Steps of the span 'in window'; 0 for none.
        capacity : int
            Events of one block that are kept; more are counted as lost.

        Returns
        -------
        Watch
        """
        name, struct = output_struct(output)
        plain = [level if isinstance(level, Level) else Level(_arrays.double(level, "levels")) for level in levels]
        watch = Watch(self, name, struct, plain, on_trip, _arrays.whole(window, "window", 0),
                      _arrays.whole(capacity, "capacity", 1))  # fmt: skip
        _library.check(self._numbers.call("stream_attach", self._at, watch._at))
        self._watches.append(watch)
        return watch

    @property
    def watches(self) -> List["Watch"]:
        """The watches, in the order in which they were made."""
        return list(self._watches)

    def save(self) -> bytes:
        """All of the stream but its watches as bytes of the library's own form, which C reads too."""
        return _library.saved("stream", self._at, self._numbers.suffix)

    def resume(self, saved: bytes) -> None:
        """Goes on where `save` was called on a stream of the same kind."""
        _library.resume("stream", self._at, saved, self._numbers.suffix)

    def __getstate__(self) -> Dict[str, Any]:
        return {"coeffs": self._coeffs, "options": self._options, "kept": self._kept, "saved": self.save(),
                "watches": [watch._kept() for watch in self._watches]}  # fmt: skip

    def __setstate__(self, held: Dict[str, Any]) -> None:
        self._make(held["coeffs"], held["options"], held["kept"])
        for name, struct, levels, window, capacity, saved in held["watches"]:
            watch = Watch(self, name, struct, levels, None, window, capacity)
            _library.check(self._numbers.call("stream_attach", self._at, watch._at))
            watch.resume(saved)
            self._watches.append(watch)
        self.resume(held["saved"])


class Watch:
    """The greatest and least value of an output, and levels with exact instants; made by `Stream.watch`."""

    def __init__(
        self,
        stream: Stream,
        name: str,
        struct: NDArray[np.void],
        levels: Sequence[Level],
        on_trip: Optional[Callable[[Event], None]],
        window: int,
        capacity: int,
    ) -> None:
        self.output = name
        self.levels = tuple(levels)
        self.on_trip = on_trip
        self._stream, self._numbers, self._struct = stream, stream._numbers, struct
        self._dt: float = stream._kept["dt"]
        place = _library.WATCHED if self._numbers.suffix == "" else _library.WATCHED_F32
        self._window, self._window_steps = np.zeros(2 * window, place), window
        self._events = np.zeros(capacity, _library.EVENT)
        self._taken = np.zeros(capacity, _library.EVENT)
        self._memory = _arrays.aligned(_library.struct_size("rampwise_watch" + self._numbers.suffix), 16)
        self._at = _library.address(self._memory)
        self._init(stream._coeffs)

    def _init(self, made: NDArray[np.void]) -> None:
        options = np.zeros(1, _library.WATCH_OPTIONS)
        _library.call("watch_options_init", _library.address(options))
        options["output"] = self._struct
        if len(self.levels) > _library.constant("WATCH_LEVELS"):
            raise ValueError(f"levels: {_library.constant('WATCH_LEVELS')} at most, not {len(self.levels)}")
        options["level_count"] = len(self.levels)
        for i, level in enumerate(self.levels):
            options["level"][0, i] = (level.value, level.hysteresis, level.direction, bool(level.latch))
        if self._window_steps > 0:
            options["window"] = _library.address(self._window)
            options["window_steps"] = self._window_steps
        options["events"] = _library.address(self._events)
        options["event_capacity"] = self._events.size
        status = self._numbers.call("watch_init", self._at, _library.address(made), _library.address(options))
        _library.check(status, state="levels", count="levels")

    def peak(self, span: Span = "since start") -> Peaks:
        """Greatest and least value since the start, since the last `reset`, or over the window's last whole steps."""
        found = np.zeros((), _library.PEAK)
        status = self._numbers.call("watch_peak", self._at, choice(span, _SPANS, "span"), _library.address(found))
        _library.check(status, quantity="span", count="span")
        return Peaks._read(found, self._dt, None)

    def reset(self) -> None:
        """'since reset' begins anew with the present value."""
        _library.check(self._numbers.call("watch_reset", self._at))

    def level(self, number: int = 0) -> LevelReport:
        """How a level stands."""
        report = np.zeros((), _library.LEVEL_REPORT)
        where = _arrays.whole(number, "number", 0)
        _library.check(self._numbers.call("watch_level", self._at, where, _library.address(report)), count="number")
        return LevelReport(bool(report["beyond"]), bool(report["tripped"]), int(report["passed"]),
                           int(report["cycles"]))  # fmt: skip

    @property
    def tripped(self) -> bool:
        """Whether any level is tripped."""
        return any(self.level(i).tripped for i in range(len(self.levels)))

    def release(self, number: int = 0) -> None:
        """Lets go of a latch; while the response is beyond the level it stays tripped."""
        status = self._numbers.call("watch_release", self._at, _arrays.whole(number, "number", 0))
        _library.check(status, count="number")

    @property
    def lost(self) -> int:
        """Events that found the queue full."""
        counts = np.zeros(2, np.uint64)
        first = _library.address(counts)
        _library.check(self._numbers.call("watch_counts", self._at, first, first + counts.itemsize))
        return int(counts[0])

    def save(self) -> bytes:
        """All of the watch as bytes of the library's own form."""
        return _library.saved("watch", self._at, self._numbers.suffix)

    def resume(self, saved: bytes) -> None:
        """Goes on where `save` was called on a watch of the same levels, window and capacity."""
        _library.resume("watch", self._at, saved, self._numbers.suffix)

    def _kept(self) -> Tuple[Any, ...]:
        return self.output, self._struct, self.levels, self._window_steps, self._events.size, self.save()

    def _take(self) -> List[Event]:
        count = self._numbers.call("watch_events", self._at, self._taken.size, _library.address(self._taken))
        events = [self._event(raw) for raw in self._taken[:count]]
        for event in events:
            if event.trips and self.on_trip is not None:
                self.on_trip(event)
        return events

    def _event(self, raw: Any) -> Event:
        level, direction = int(raw["level"]), int(raw["direction"])
        trips = bool(raw["kind"] == _EVENT_LEVEL) and direction == self.levels[level].direction
        sample, fraction = int(raw["sample"]), float(raw["fraction"])
        return Event((sample + fraction) * self._dt, sample, fraction, float(raw["value"]), direction, level, trips,
                     int(raw["flags"]), self.output)  # fmt: skip
