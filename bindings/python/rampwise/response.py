"""The response to whole records."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, Literal, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._precision import Arithmetic, Precision, arithmetic
from ._provenance import Result, provenance
from ._work import spread
from .bank import Histories
from .system import Between, Input, System, coefficients

Start = Literal["at once", "ramp", "settled"]

Reals = NDArray[Any]  # of the precision of the call

_STARTS = ("at once", "ramp", "settled")
_HISTORIES = ("displacement", "velocity", "acceleration", "total_acceleration")
_SAMPLES_A_TASK = 1 << 17  # enough that handing over a task costs nothing beside it


@dataclasses.dataclass(frozen=True, eq=False)
class Response(Result):
    """The response of systems to records, one value a sample along the last axis.

    Attributes
    ----------
    time : ndarray, shape (n,)
        Times of the samples, in the systems' unit of time; sample i lies at i dt where the step is regular.
    record : ndarray, shape (..., n)
        The input, as it was given.
    displacement, velocity, acceleration : ndarray, shape (..., n)
        u, u' and u'': relative to the base for base acceleration and velocity, against a fixed frame for forces and
        base displacement.
    total_acceleration : ndarray, shape (..., n)
        Acceleration of the mass against a fixed frame.
    system : System
        The systems; their shape was broadcast with the records'.
    input : str
        What the samples are.
    between : str
        What the input does between samples.
    provenance : dict
        Version, edition of the arithmetic, options.

    Notes
    -----
    Where the input or its slope jumps at a sample, accelerations are those just before it ('ramp') or just after it
    ('hold').
    """

    time: Doubles
    record: Reals
    displacement: Reals
    velocity: Reals
    acceleration: Reals
    total_acceleration: Reals
    system: System
    input: str
    between: str
    provenance: Dict[str, Any]

    @property
    def relative_displacement(self) -> Reals:
        """Displacement of the mass against its base (or, under a force, the fixed frame)."""
        return self.displacement - self.record if self.input == "base displacement" else self.displacement

    @property
    def relative_velocity(self) -> Reals:
        """Velocity of the mass against its base; that of the base ends with the line before each sample."""
        if self.input != "base displacement" or self.between != "ramp":
            return self.velocity
        step = self.provenance["options"]["dt"]
        change = np.zeros_like(self.record)
        change[..., 1:] = np.diff(self.record)
        if self.provenance["options"]["start"] == "ramp":
            change[..., 0] = self.record[..., 0]
        if step is None:
            change[..., 1:] /= np.diff(self.time)
        elif self.record.dtype == np.float32:
            change *= np.float32(1 / step)
        else:
            change /= step
        return self.velocity - change

    @property
    def spring_force(self) -> Reals:
        """Stiffness times relative displacement; positive when stretched along +u."""
        return self._times(self.system.stiffness, self.relative_displacement)

    @property
    def damper_force(self) -> Reals:
        """Damper times relative velocity; positive when pulled apart along +u."""
        return self._times(self.system.damper, self.relative_velocity)

    def at(self, time: ArrayLike) -> Histories:
        """The exact response between the samples.

        Parameters
        ----------
        time : array_like
            Instants from the first to the last sample.

        Returns
        -------
        Histories
            Displacement, velocity and both accelerations, of the systems' and records' shape and then that of `time`.
            Double precision only.

        Examples
        --------
        A load of 1 that stays, sampled once a time unit: u = 1 - cos t in between.

        >>> import numpy, rampwise
        >>> response = rampwise.respond(numpy.ones(5), 1.0, input="force", system=rampwise.System(1.0, 0.0, 1.0))
        >>> round(float(response.at(numpy.pi).displacement), 12)
        2.0
        """
        instants = _arrays.doubles(time, "time")
        if self.displacement.dtype != np.float64:
            raise ValueError("precision: values between the samples need 'double'")
        if self.time.size < 2 or not np.all((instants >= self.time[0]) & (instants <= self.time[-1])):
            raise ValueError("time: an instant is not between the first and the last sample")
        shape = self.displacement.shape[:-1]
        records = _arrays.to_shape(self.record, shape + self.time.shape)
        found = np.zeros((4,) + shape + (instants.size,))
        kinds: Dict[str, Any] = {"input": self.input, "between": self.between}
        made: Dict[float, NDArray[np.void]] = {}  # by the length of the step
        for i, instant in enumerate(instants.reshape(-1).tolist()):
            step, length, fraction = self._step_of(instant)
            if length not in made:
                made[length] = coefficients(self.system, length, **kinds)
            coeffs_at = _library.addresses(_arrays.to_shape(made[length], shape)).tolist()
            for coeffs, row in zip(coeffs_at, np.ndindex(shape)):
                before = row + (step,)
                found[(slice(None),) + row + (i,)] = _inside(
                    coeffs, self.displacement[before], self.velocity[before], records[before],
                    records[row + (step + 1,)], fraction,
                )  # fmt: skip
        return Histories(*found.reshape((4,) + shape + instants.shape))

    def _step_of(self, instant: float) -> Tuple[int, float, float]:
        """The step that an instant lies in, its length, and the fraction of it; a sample ends a step."""
        step = max(int(np.searchsorted(self.time, instant)) - 1, 0)
        usual = self.provenance["options"]["dt"]
        length = float(self.time[step + 1] - self.time[step]) if usual is None else usual
        at_the_end = instant == self.time[step + 1]
        return step, length, 1.0 if at_the_end else min((instant - float(self.time[step])) / length, 1.0)

    @staticmethod
    def _times(values: Doubles, history: Reals) -> Reals:
        return np.asarray(values[..., np.newaxis].astype(history.dtype) * history)


def _inside(
    coeffs: int, displacement: float, velocity: float, sample: float, following: float, fraction: float
) -> Tuple[float, float, float, float]:
    """The four histories at a fraction of a step."""
    state = np.array([(displacement, velocity, sample, sample)], _library.STATE)
    place = _library.address(state)
    _library.check(_library.call("inside", coeffs, place, following, fraction, place))
    accelerations = [_library.call(name, coeffs, place) for name in ("acceleration", "total_acceleration")]
    return float(state["u"][0]), float(state["v"][0]), accelerations[0], accelerations[1]


def chosen_system(
    system: Optional[System], damping: Optional[ArrayLike], mass: Optional[ArrayLike], **natural: Any
) -> System:
    """The one that is given, or one by its natural vibration."""
    if system is None:
        if damping is None:
            raise TypeError("damping: the ratio to critical damping is needed where no system is given")
        return System.natural(damping=damping, mass=1.0 if mass is None else mass, **natural)
    if not isinstance(system, System):
        raise TypeError(f"system: a System is needed, not {type(system).__name__}")
    besides = [name for name, value in {**natural, "damping": damping, "mass": mass}.items()
               if name != "allow_strong_damping" and value is not None]  # fmt: skip
    if besides:
        raise TypeError(f"system: {' and '.join(besides)} given besides it")
    return system


def respond(
    record: ArrayLike,
    dt: Optional[float] = None,
    *,
    input: Input,
    system: Optional[System] = None,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: Optional[ArrayLike] = None,
    mass: Optional[ArrayLike] = None,
    time: Optional[ArrayLike] = None,
    between: Between = "ramp",
    start: Start = "at once",
    displacement: ArrayLike = 0.0,
    velocity: ArrayLike = 0.0,
    precision: Optional[Precision] = None,
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> Response:
    """The exact response to sampled records that are straight lines (or constant) between their samples.

    Parameters
    ----------
    record : array_like, shape (..., n)
        Samples along the last axis, of any real type and layout. Doubles without gaps along that axis are read where
        they lie, and so are frames: for samples of shape (n, channels) give ``frames.T``.
    dt : float
        Interval between samples, in the systems' unit of time. Exactly one of `dt` and `time` is needed.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are. Base acceleration is given as itself, never as -m a; in g it gives displacements in
        g s^2.
    system : System, optional
        The systems; their shape is broadcast with ``record.shape[:-1]``. Instead of it:
    period, frequency, omega : array_like, optional
        Exactly one of them, with `damping`, as in `System.natural`.
    damping : array_like, optional
        Ratio to critical damping.
    mass : array_like
        Mass, with period, frequency or omega; otherwise 1. It matters for forces only.
    time : array_like, shape (n,), optional
        Times of the samples, rising, at any distances.
    between : {'ramp', 'hold'}
        What the input does between samples.
    start : {'at once', 'ramp', 'settled'}
        'at once': the input is the first sample from its instant on, from the initial `displacement` and
        `velocity`. 'ramp': everything is at rest one dt before the first sample, and the input rises to it.
        'settled': static equilibrium under the first sample.
    displacement, velocity : array_like
        Initial values for 'at once', broadcast with the result's shape without its last axis.
    precision : {'double', 'single'}, optional
        Precision of the steps and of the result; otherwise single for float32 arrays at equal intervals, and double
        for all others.
    allow_strong_damping : bool
        Takes damping ratios above 2.
    threads : int
        Records and systems are spread over so many threads; the bits stay the same.
    progress : bool
        Shows a bar of progress where tqdm is installed.

    Returns
    -------
    Response
        Histories of shape ``broadcast(system.shape, record.shape[:-1]) + (n,)``.

    Raises
    ------
    ValueError
        A number is out of range, a sample is NaN or infinite, or a response overflows; the text names the argument
        and the sample.
    TypeError
        An argument is not of a usable kind.

    Notes
    -----
    N. C. Nigam and P. C. Jennings, Bull. Seism. Soc. Am. 59(2), 909-922, 1969. The bits are those of the C library's
    rampwise_solve and rampwise_run_at. Results support, and never replace, the governing code and a licensed
    engineer's judgement.

    Examples
    --------
    A load of 2 that stays, on an undamped system of stiffness 1: u = 2 (1 - cos t), at most 4.

    >>> import numpy, rampwise
    >>> system = rampwise.System(mass=1, damper=0, stiffness=1)
    >>> response = rampwise.respond(numpy.full(101, 2.0), dt=numpy.pi / 100, input="force", system=system)
    >>> round(float(response.displacement[-1]), 12)
    4.0
    """
    systems = chosen_system(system, damping, mass, period=period, frequency=frequency, omega=omega,
                            allow_strong_damping=allow_strong_damping)  # fmt: skip
    if start not in _STARTS:
        raise ValueError(f"start: {start!r} is none of {', '.join(map(repr, _STARTS))}")
    if (dt is None) == (time is None):
        raise TypeError("exactly one of dt and time is needed")
    stamps = None if time is None else _times(time, start)
    step = _arrays.double(dt, "dt") if stamps is None else _usual_interval(stamps)
    numbers = _numbers(precision, record, stamps)
    made = coefficients(systems, step, input=input, between=between, precision=numbers.name)
    given = _arrays.reals(record, "record", numbers.real)
    frames = stamps is None and numbers.name == "double" and _are_frames(given, made)
    samples = given if frames else _arrays.records(record, "record", numbers.real)
    n = samples.shape[-1]
    if stamps is not None and stamps.shape != (n,):
        raise ValueError(f"time: shape {stamps.shape} for records of {n} samples")
    shape = _arrays.broadcast(made.shape, samples.shape[:-1], "record and system")
    states = _states(numbers, made, samples, shape, start, displacement, velocity)
    if frames:
        histories = _run_frames(samples, _arrays.to_shape(made, shape), states, start)
    else:
        histories = _Rows(numbers, samples, stamps, made, states, start).run(threads, progress)
    return Response(
        stamps if stamps is not None else np.arange(n) * step,
        samples,
        histories[0],
        histories[1],
        histories[2],
        histories[3],
        systems,
        input,
        between,
        provenance(dt=step if stamps is None else None, start=start, precision=numbers.name, threads=threads),
    )


def _numbers(precision: Optional[str], record: Any, stamps: Optional[Doubles]) -> Arithmetic:
    if stamps is None:
        return arithmetic(precision, record)
    if precision == "single":
        raise ValueError("precision: given times need 'double'")
    return arithmetic(precision)


def _times(time: ArrayLike, start: str) -> Doubles:
    stamps = _arrays.in_order(_arrays.doubles(time, "time"))
    if stamps.ndim != 1:
        raise ValueError(f"time: shape {stamps.shape}, where one axis is needed")
    if start == "ramp":
        raise ValueError("start: a ramp before the first sample needs dt, not time")
    wrong = np.flatnonzero(~np.isfinite(stamps))
    if wrong.size == 0:
        wrong = np.flatnonzero(~(np.diff(stamps) > 0)) + 1
    if wrong.size > 0:
        _library.check(_library.constant("ERROR_TIME"), f"at sample {wrong[0]}")
    return stamps


def _usual_interval(stamps: Doubles) -> float:
    """The coefficients for it are at hand first; any length is right."""
    return float(np.median(np.diff(stamps))) if stamps.size > 1 else 1.0


def _are_frames(record: Reals, made: NDArray[np.void]) -> bool:
    """Whether samples lie frame by frame in memory, all channels of an instant side by side."""
    return (
        record.ndim == 2
        and record.shape[0] > 1
        and record.shape[1] > 1
        and record.T.flags.c_contiguous
        and record.flags.aligned
        and made.shape in ((), (1,), record.shape[:1])
    )


def _states(
    numbers: Arithmetic,
    made: NDArray[np.void],
    samples: Reals,
    shape: Tuple[int, ...],
    start: str,
    displacement: ArrayLike,
    velocity: ArrayLike,
) -> NDArray[np.void]:
    """States at the first sample, or before it for a ramp."""
    states = np.zeros(shape, numbers.state)
    for field, values, name in (("u", displacement, "displacement"), ("v", velocity, "velocity")):
        array = _arrays.doubles(values, name)
        if start != "at once" and array.any():
            raise ValueError(f"{name}: an initial value goes with the start 'at once' only")
        try:
            states[field] = array
        except ValueError:
            raise ValueError(f"{name}: shape {array.shape} for results of shape {shape}") from None
        if not np.isfinite(array).all():
            _library.check(_library.constant("ERROR_STATE"), state=name)
    if start == "ramp":
        return states
    states["p"] = states["p_before"] = samples[..., 0]
    if start == "settled":
        coeffs_at, states_at = _library.addresses(_arrays.to_shape(made, shape)), _library.addresses(states)
        for index, coeffs, state, sample in zip(np.ndindex(shape), coeffs_at, states_at, states["p"].flat):
            status = numbers.call("start_settled", int(coeffs), int(state), sample)
            _library.check(status, f"at sample 0{_which(index)}")
    return states


def _which(index: Tuple[int, ...]) -> str:
    return f" of response {list(index)}" if index else ""


def _empty(shape: Tuple[int, ...], real: "np.dtype[Any]") -> Tuple[Reals, ...]:
    return tuple(np.empty(shape, real) for _ in _HISTORIES)


class _Rows:
    """Every row of the result by itself: one system under one record."""

    def __init__(
        self,
        numbers: Arithmetic,
        samples: Reals,
        stamps: Optional[Doubles],
        made: NDArray[np.void],
        states: NDArray[np.void],
        start: str,
    ) -> None:
        self.numbers = numbers
        self.n = samples.shape[-1]
        self.shape = states.shape
        self.states = states.reshape(-1)
        self.stamps = stamps
        self.ramps = start == "ramp"
        self.kept = (samples, made)  # alive while their addresses are used
        self.coeffs_at = _library.addresses(_arrays.to_shape(made, self.shape))
        self.samples_at = _library.addresses(_arrays.to_shape(samples[..., 0], self.shape))
        self.histories = _empty(self.shape + (self.n,), numbers.real)

    def run(self, threads: int, progress: bool) -> Tuple[Reals, ...]:
        rows = self.states.size
        a_task = max(1, _SAMPLES_A_TASK // self.n)
        tasks = [range(first, min(rows, first + a_task)) for first in range(0, rows, a_task)]
        spread(self._run_rows, tasks, threads, progress)
        return self.histories

    def _run_rows(self, rows: range) -> None:
        for row in rows:
            bad = np.zeros(1, np.uintp)
            status = self._run_row(row, bad)
            if status != 0:
                index = tuple(int(i) for i in np.unravel_index(row, self.shape))
                _library.check(status, f"at sample {bad[0]}{_which(index)}")

    def _run_row(self, row: int, bad: NDArray[np.uintp]) -> int:
        coeffs, p, state = int(self.coeffs_at[row]), int(self.samples_at[row]), self.states[row]
        out = np.zeros(1, _library.HISTORY)
        for field, history in zip(("u", "v", "a", "total"), self.histories):
            out[field] = _library.address(history) + row * self.n * history.itemsize
        status: int
        if self.ramps:
            at = _library.address(self.states[row : row + 1])
            status = self.numbers.call("run", coeffs, at, self.n, p, _library.address(out), _library.address(bad))
        else:
            first = self.n if self.stamps is None else 1
            status = self.numbers.call("solve", coeffs, float(state["u"]), float(state["v"]), first, p,
                                       _library.address(out), _library.address(bad))  # fmt: skip
        if status == 0 and self.stamps is not None:
            status = self._run_stamped(coeffs, row, p, out, bad)
        return status

    def _run_stamped(self, coeffs: int, row: int, p: int, out: NDArray[np.void], bad: NDArray[np.uintp]) -> int:
        """The samples after the first."""
        assert self.stamps is not None
        for field in ("u", "v", "a", "total"):
            out[field] += np.uintp(self.stamps.itemsize)
        last = self.stamps[:1].copy()
        at = _library.address(self.states[row : row + 1])
        status: int = _library.call("run_at", coeffs, at, _library.address(last), self.n - 1,
                                    _library.address(self.stamps) + 8, p + 8, _library.address(out),
                                    _library.address(bad))  # fmt: skip
        bad += np.uintp(1)
        return status


def _run_frames(
    samples: Reals, made: NDArray[np.void], states: NDArray[np.void], start: str
) -> Tuple[Reals, ...]:
    """All channels side by side, frame by frame as they lie in memory."""
    channels, n = samples.shape
    coeffs = np.ascontiguousarray(made)
    histories = _empty((n, channels), samples.dtype)
    first = 0
    if start != "ramp":
        _put_states(coeffs, states, histories)
        first = 1
    out = np.zeros(1, _library.HISTORY)
    for field, history in zip(("u", "v", "a", "total"), histories):
        out[field] = _library.address(history) + first * channels * history.itemsize
    bad = np.zeros(1, np.uintp)
    status = _library.call("run_frames", channels, _library.address(coeffs), _library.address(states), n - first,
                           _library.address(samples) + first * channels * samples.itemsize, _library.address(out),
                           _library.address(bad))  # fmt: skip
    sample, channel = divmod(int(bad[0]), channels)
    _library.check(status, f"at sample {sample + first}{_which((channel,))}")
    return tuple(history.T for history in histories)


def _put_states(coeffs: NDArray[np.void], states: NDArray[np.void], histories: Tuple[Reals, ...]) -> None:
    """The first frame: the initial states."""
    if not np.all(np.isfinite(states["p"])):
        wrong = int(np.flatnonzero(~np.isfinite(states["p"]))[0])
        _library.check(_library.constant("ERROR_SAMPLE"), f"at sample 0{_which((wrong,))}")
    histories[0][0] = states["u"]
    histories[1][0] = states["v"]
    for i in range(states.size):
        c, s = _library.address(coeffs[i : i + 1]), _library.address(states[i : i + 1])
        histories[2][0, i] = _library.call("acceleration", c, s)
        histories[3][0, i] = _library.call("total_acceleration", c, s)
        if not all(np.isfinite(history[0, i]) for history in histories):
            _library.check(_library.OVERFLOW, f"at sample 0{_which((i,))}")
