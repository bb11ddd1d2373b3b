"""Greatest and least values of responses."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, List, Literal, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._provenance import provenance
from .system import Between, Input, System, choice, coefficients

Part = Literal["primary", "residual", "maximax"]
Quantity = Literal["displacement", "velocity", "total_acceleration"]

QUANTITIES = ("displacement", "velocity", "total_acceleration")
PARTS: Dict[str, int] = {
    "primary": 0,
    "residual": _library.constant("RESIDUAL"),
    "maximax": _library.constant("MAXIMAX"),
}
AT_SAMPLES = _library.constant("AT_SAMPLES")
_EVIDENCE = _library.constant("EVIDENCE")
_FASTEST = _library.constant("FASTEST")


def part_number(part: str) -> int:
    """The library's number for a part of the time."""
    if part not in PARTS:
        raise ValueError(f"part: {part!r} is none of {', '.join(map(repr, PARTS))}")
    return PARTS[part]


@dataclasses.dataclass(frozen=True, eq=False)
class Peaks:
    """Greatest and least values of a response, and when.

    Attributes
    ----------
    high, low : ndarray
        Greatest and least value; from rest ``high >= 0 >= low``. Infinite where a response overflows, or grows
        without end.
    high_time, low_time : ndarray
        Their instants, counted from the first sample, in the unit of time of `dt`; infinite for a value that is never
        reached.
    high_error, low_error : ndarray or None
        Where evidence was asked for: estimates of what the sampling of the record has cost each. ``high - high_error``
        is closer to the response to the smooth load.
    later : ndarray or None
        Of a structure's free motion: no value after the steps that were looked at is larger in size. Where that is
        above the smaller of ``high`` and ``-low``, a peak after them may be larger than the one found.
    """

    high: Doubles
    high_time: Doubles
    low: Doubles
    low_time: Doubles
    high_error: Optional[Doubles] = None
    low_error: Optional[Doubles] = None
    later: Optional[Doubles] = None

    @classmethod
    def _read(cls, peaks: NDArray[np.void], dt: float, evidence: Optional[NDArray[np.void]]) -> "Peaks":
        values: List[Doubles] = []
        for side in ("high", "low"):
            instant = peaks[side]
            sample = instant["sample"]
            never = sample == np.iinfo(np.uint64).max
            values += [instant["value"].copy(), np.where(never, np.inf, (sample + instant["fraction"]) * dt)]
        if evidence is not None:
            values += [evidence["error_high"].copy(), evidence["error_low"].copy()]
        return cls(*values)

    def _then(self, after: "Peaks") -> "Peaks":
        """The peaks of this time and of the time after it."""
        high, low = after.high > self.high, after.low < self.low
        return Peaks(
            np.where(high, after.high, self.high),
            np.where(high, after.high_time, self.high_time),
            np.where(low, after.low, self.low),
            np.where(low, after.low_time, self.low_time),
            later=after.later,
        )

    def _at(self, index: Any, shape: Tuple[int, ...] = ()) -> "Peaks":
        """Some of these peaks, of the given shape."""
        whole = [getattr(self, field.name) for field in dataclasses.fields(self)]
        part: List[Any] = [None if values is None else values[index].reshape(shape) for values in whole]
        return Peaks(*part)

    @property
    def _high_is_larger(self) -> NDArray[np.bool_]:
        high, low = np.abs(self.high), np.abs(self.low)
        return np.asarray((high > low) | ((high == low) & (self.high_time <= self.low_time)))

    @property
    def value(self) -> Doubles:
        """The larger in size of the two, with its sign; the earlier where they are equal."""
        return np.where(self._high_is_larger, self.high, self.low)

    @property
    def size(self) -> Doubles:
        """Size of the larger one."""
        return np.abs(self.value)

    @property
    def sign(self) -> Doubles:
        """Sign of the larger one: 1, -1, or 0 where nothing moves."""
        return np.sign(self.value)

    @property
    def time(self) -> Doubles:
        """Instant of the larger one."""
        return np.where(self._high_is_larger, self.high_time, self.low_time)

    @property
    def error(self) -> Optional[Doubles]:
        """Estimated sampling error of the larger one; None where no evidence was asked for."""
        if self.high_error is None or self.low_error is None:
            return None
        return np.where(self._high_is_larger, self.high_error, self.low_error)

    @property
    def share(self) -> Optional[Doubles]:
        """Size of the error over that of the value; 0 where both are 0."""
        error = self.error
        if error is None:
            return None
        size = np.where(error == 0, 1.0, self.size)
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.asarray(np.abs(error) / size)


class PeaksObject:
    """The library's object for the peaks of oscillators under one input; `made` is flat."""

    def __init__(self, made: NDArray[np.void], quantities: Tuple[str, ...], at_samples: bool, evidence: bool) -> None:
        made = np.ascontiguousarray(made)
        self.count, self.evidence = made.size, evidence
        numbers = np.array([choice(name, QUANTITIES, "quantities") for name in quantities], np.intc)
        size = _library.call("peaks_size", made.size)
        self._memory = _arrays.aligned(size, _library.call("peaks_alignment"))
        place = np.zeros(1, np.uintp)
        flags = (AT_SAMPLES if at_samples else 0) | (_EVIDENCE if evidence else 0)
        status = _library.call("peaks_init", _library.address(self._memory), size, made.size, _library.address(made),
                               numbers.size, _library.address(numbers), flags, _FASTEST,
                               _library.address(place))  # fmt: skip
        _library.check(status, quantity="quantities", count="system or quantities")
        self.at = int(place[0])

    def run(self, samples: int, at: int) -> Tuple[int, int]:
        """The next samples at an address: status, and the number of a bad one."""
        bad = np.zeros(1, np.uintp)
        return _library.call("peaks_run", self.at, samples, at, _library.address(bad)), int(bad[0])

    def get(self, quantity: str, part: int) -> Tuple[NDArray[np.void], NDArray[np.void]]:
        """Peaks so far, and their evidence: zeros where none was asked for."""
        number = choice(quantity, QUANTITIES, "quantity")
        found, cost = np.zeros(self.count, _library.PEAK), np.zeros(self.count, _library.EVIDENCE)
        status = _library.call("peaks_get", self.at, number, part, _library.address(found))
        _library.check(status, count="samples")
        if self.evidence:
            _library.check(_library.call("peaks_evidence", self.at, number, part, _library.address(cost)))
        return found, cost


class PeakBank:
    """The true peaks of many oscillators under one input that is fed in blocks: spectra of records of any length.

    Parameters
    ----------
    system : System
        Oscillators of any shape.
    dt : float
        Interval between samples.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are.
    between : {'ramp', 'hold'}
        What the input does between samples.
    quantities : sequence of str
        Of 'displacement', 'velocity', 'total_acceleration', what is looked at.
    at_samples : bool
        Looks at the samples only.
    evidence : bool
        Estimates what the sampling of a smooth load has cost each peak, for 'ramp' and not base displacement.

    Notes
    -----
    All are at rest under the first sample, unless `start` says otherwise. Memory is 2.6 KB an oscillator, however long
    the record. It belongs to one thread at a time. It can be pickled, and goes on to the same peaks.

    Examples
    --------
    >>> import numpy, rampwise
    >>> ground = numpy.sin(numpy.arange(400) / 9)
    >>> system = rampwise.System.natural(period=[0.5, 1.0], damping=0.05)
    >>> bank = rampwise.PeakBank(system, dt=0.02, input="base acceleration")
    >>> for block in numpy.split(ground, 8):
    ...     bank.put(block)
    >>> whole = rampwise.response_spectrum(ground, dt=0.02, period=[0.5, 1.0])
    >>> bool((bank.peaks("displacement").size == whole.SD).all())
    True
    """

    def __init__(
        self,
        system: System,
        dt: float,
        *,
        input: Input,
        between: Between = "ramp",
        quantities: Tuple[Quantity, ...] = ("displacement", "total_acceleration"),
        at_samples: bool = False,
        evidence: bool = False,
    ) -> None:
        made = coefficients(system, dt, input=input, between=between)
        if isinstance(quantities, str):
            raise TypeError("quantities: a sequence of names is needed, not one text")
        options = {"dt": float(dt), "input": input, "between": between, "quantities": tuple(quantities),
                   "at_samples": bool(at_samples), "evidence": bool(evidence)}  # fmt: skip
        self._make(made, options)

    def _make(self, made: NDArray[np.void], options: Dict[str, Any]) -> None:
        self.shape: Tuple[int, ...] = made.shape
        self._coeffs, self._options = made, options
        self._object = PeaksObject(made.reshape(-1), options["quantities"], options["at_samples"], options["evidence"])

    @property
    def provenance(self) -> Dict[str, Any]:
        """Version, edition of the arithmetic, options."""
        return provenance(**self._options)

    def start(self, state: Optional[NDArray[np.void]] = None) -> None:
        """Begins anew: at rest under the next sample; or from states like those of `Bank.state`, as sample 0."""
        if state is not None and (getattr(state, "dtype", None) != _library.STATE or state.shape != self.shape):
            raise TypeError(f"state: an array of states of shape {self.shape} is needed")
        plain = None if state is None else np.ascontiguousarray(state)
        place = None if plain is None else _library.address(plain)
        _library.check(_library.call("peaks_start", self._object.at, place), different="state")

    def put(self, samples: ArrayLike) -> None:
        """The next samples, shape (n,) or (). An oscillator that overflows stops with an infinite peak."""
        block = _arrays.records(np.atleast_1d(_arrays.doubles(samples, "samples")), "samples")
        if block.ndim != 1:
            raise ValueError(f"samples: shape {block.shape}, where one axis is needed")
        status, bad = self._object.run(block.size, _library.address(block))
        _library.check(status, f"at sample {bad} of this block", sample="samples")

    def peaks(self, quantity: Quantity, part: Part = "primary") -> Peaks:
        """The peaks so far of one of the `quantities`, of the shape of the systems; the bank goes on unchanged.

        Parameters
        ----------
        quantity : {'displacement', 'velocity', 'total_acceleration'}
            Of what.
        part : {'primary', 'residual', 'maximax'}
            From the first to the last sample, in the free motion from here on, or both.
        """
        found, cost = self._object.get(quantity, part_number(part))
        evidence = cost.reshape(self.shape) if self._object.evidence else None
        return Peaks._read(found.reshape(self.shape), self._options["dt"], evidence)

    def save(self) -> bytes:
        """All of it as bytes of the library's own form, which C reads too."""
        return _library.saved("peaks", self._object.at)

    def resume(self, saved: bytes) -> None:
        """Goes on where `save` was called on a bank of as many oscillators, with the same options."""
        _library.resume("peaks", self._object.at, saved)

    def __getstate__(self) -> Dict[str, Any]:
        return {"coeffs": self._coeffs, "options": self._options, "saved": self.save()}

    def __setstate__(self, held: Dict[str, Any]) -> None:
        self._make(held["coeffs"], held["options"])
        self.resume(held["saved"])
