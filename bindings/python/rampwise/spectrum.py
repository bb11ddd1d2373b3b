"""Response spectra: the largest responses of many oscillators to records."""

from __future__ import annotations

import dataclasses
from typing import Any, ClassVar, Dict, List, NamedTuple, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._grid import Grid, GridResult
from ._provenance import provenance
from ._work import blocks, spread
from .peaks import AT_SAMPLES, QUANTITIES, Part, Peaks, PeaksObject, part_number
from .system import Between, Input, choice, coefficients, kinds

_ABRUPT_START, _ABRUPT_END = _library.constant("ABRUPT_START"), _library.constant("ABRUPT_END")
_A_TASK = 64  # oscillators: two blocks of lanes, 170 KB


@dataclasses.dataclass(frozen=True, eq=False)
class Spectrum(GridResult):
    """Response spectra over a grid of damping ratios and periods.

    Attributes
    ----------
    period, frequency, omega : ndarray
        The natural periods of the oscillators, and the same as frequencies and circular frequencies.
    damping : ndarray
        Damping ratios.
    displacement, velocity, total_acceleration : Peaks
        Values, instants and signs, of shape ``records + damping.shape + period.shape``. Displacement and velocity are
        relative to the base.
    abrupt_start, abrupt_end : ndarray of bool or None
        Where evidence was asked for, of each record: it starts or stops abruptly. At the start that makes all estimates
        of sampling errors worthless, at the end those of the last samples and of residuals.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    _derived: ClassVar[Tuple[str, ...]] = ("SD", "SV", "SA", "PSV", "PSA")

    displacement: Peaks
    velocity: Peaks
    total_acceleration: Peaks
    abrupt_start: Optional[NDArray[np.bool_]]
    abrupt_end: Optional[NDArray[np.bool_]]
    provenance: Dict[str, Any]

    def shortest_period(self, share: float, quantity: str = "total_acceleration") -> Doubles:
        """The shortest period from which on upwards no sampling error is estimated above a share of the value.

        Parameters
        ----------
        share : float
            0.01 is one per cent.
        quantity : {'displacement', 'velocity', 'total_acceleration'}
            Of which peak.

        Returns
        -------
        ndarray
            One for each record and damping ratio; infinite where the longest period has more. Worth nothing where
            `abrupt_start` is true.
        """
        if quantity not in ("displacement", "velocity", "total_acceleration"):
            raise ValueError(f"quantity: {quantity!r} is none of 'displacement', 'velocity', 'total_acceleration'")
        shares = getattr(self, quantity).share
        if shares is None:
            raise ValueError("share: the spectrum was made without evidence=True")
        axes = tuple(range(shares.ndim - self.period.ndim, shares.ndim))
        exceeding = np.max(np.where(shares <= share, -1.0, self.period), axis=axes, keepdims=True, initial=-1.0)
        return np.asarray(np.min(np.where(self.period > exceeding, self.period, np.inf), axis=axes, initial=np.inf))

    @property
    def SD(self) -> Doubles:
        """Spectral displacement: the largest relative displacement, in size."""
        return self.displacement.size

    @property
    def SV(self) -> Doubles:
        """Spectral velocity: the largest relative velocity, in size. Not the pseudo-velocity."""
        return self.velocity.size

    @property
    def SA(self) -> Doubles:
        """Spectral acceleration: the largest total acceleration (against a fixed frame), in size.

        Not the pseudo-acceleration, which many programs call Sa.
        """
        return self.total_acceleration.size

    @property
    def PSV(self) -> Doubles:
        """Pseudo-velocity, omega SD."""
        return self._times_omega(self.SD)

    @property
    def PSA(self) -> Doubles:
        """Pseudo-acceleration, omega^2 SD: the spring force per mass. Of rigid oscillators, the total acceleration."""
        pseudo = self._times_omega(self.PSV)
        return np.where(np.isinf(self.omega), self.SA, pseudo)

    def _times_omega(self, values: Doubles) -> Doubles:
        finite = np.where(np.isinf(self.omega), 0.0, self.omega)  # rigid oscillators do not move
        return np.asarray(finite * values)


def response_spectrum(
    record: ArrayLike,
    dt: float,
    *,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: ArrayLike = 0.05,
    input: Input = "base acceleration",
    between: Between = "ramp",
    part: Part = "primary",
    at_samples: bool = False,
    evidence: bool = False,
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> Spectrum:
    """Response spectra of records, with the true peaks between the samples.

    Parameters
    ----------
    record : array_like, shape (..., n)
        Records along the last axis, straight lines between samples. Every oscillator is at rest under the first
        sample.
    dt : float
        Interval between samples.
    period, frequency, omega : array_like
        Exactly one of them: natural periods, frequencies in cycles per unit of time, or circular frequencies of
        the oscillators. A period of 0 (frequency or omega infinite) is a rigid one, which goes with its base; omega = 0
        is a free mass.
    damping : array_like
        Ratios to critical damping. The result is a grid: every damping ratio with every period.
    input : {'base acceleration', 'base velocity', 'base displacement', 'force'}
        What the samples are. For a force the mass is 1.
    between : {'ramp', 'hold'}
        What the input does between samples.
    part : {'primary', 'residual', 'maximax'}
        When peaks are looked for: from the first to the last sample, in the free motion after it, or both.
    at_samples : bool
        Looks at the samples only, as many programs do.
    evidence : bool
        Estimates what the sampling of a smooth load has cost each peak too, for half as much work again. Not for base
        displacement, and for 'ramp' only.
    allow_strong_damping : bool
        Takes damping ratios above 2.
    threads : int
        Oscillators and records are spread over so many threads; the bits stay the same.
    progress : bool
        Shows a bar of progress where tqdm is installed.

    Returns
    -------
    Spectrum
        SD, SV, SA, PSV, PSA and the peaks, of shape ``record.shape[:-1] + damping.shape + period.shape``. SA is the
        total acceleration; PSA is the pseudo-acceleration.

    Raises
    ------
    ValueError, TypeError
        With the name of the argument.

    Notes
    -----
    Inside a step the response is a line plus a free vibration; its extremes are found exactly, so the values do not
    depend on where the samples happen to lie. What the sampling of the record itself has lost is another matter, of
    which `evidence` is an estimate; ten samples in the shortest period that matters is common practice. float32
    records are converted to double.

    Examples
    --------
    A base that jumps to a steady 3: an undamped oscillator doubles it.

    >>> import numpy, rampwise
    >>> spectrum = rampwise.response_spectrum(numpy.full(601, 3.0), dt=0.001, period=[0.5, 1.0], damping=0.0)
    >>> spectrum.SA.round(9)
    array([6., 6.])
    >>> spectrum.total_acceleration.time.round(9)
    array([0.25, 0.5 ])
    """
    grid = Grid.make(damping, allow_strong_damping, period=period, frequency=frequency, omega=omega)
    samples = _arrays.records(record, "record")
    rows = _Records(samples, _arrays.double(dt, "dt"), input, between, part, at_samples, evidence)
    shape = samples.shape[:-1] + grid.shape
    found, errors = rows.peaks(grid, threads, progress)
    peaks = [
        Peaks._read(found[i].reshape(shape), rows.dt, errors[i].reshape(shape) if evidence else None)
        for i in range(len(QUANTITIES))
    ]
    abrupt = errors[0]["abrupt"][:, 0].reshape(samples.shape[:-1]) if evidence and grid.omega.size else None
    return Spectrum(
        *grid.lists,
        peaks[0],
        peaks[1],
        peaks[2],
        None if abrupt is None else (abrupt & _ABRUPT_START) != 0,
        None if abrupt is None else (abrupt & _ABRUPT_END) != 0,
        provenance(dt=rows.dt, input=input, between=between, part=part, at_samples=bool(at_samples),
                   evidence=bool(evidence), threads=threads),
    )  # fmt: skip


class _Found(NamedTuple):
    """Structs of the library for each quantity."""

    peaks: List[NDArray[np.void]]
    evidence: List[NDArray[np.void]]


def _nothing(shape: Tuple[int, ...]) -> _Found:
    return _Found(
        [np.zeros(shape, _library.PEAK) for _ in QUANTITIES], [np.zeros(shape, _library.EVIDENCE) for _ in QUANTITIES]
    )


class _Records:
    """The records of a call, and how they are looked at."""

    def __init__(
        self,
        samples: Doubles,
        dt: float,
        input: Input,
        between: Between,
        part: str,
        at_samples: bool,
        evidence: bool,
    ) -> None:
        self.samples = samples
        self.dt = dt
        self.input: Input = input
        self.between: Between = between
        self.part = part_number(part)
        self.at_samples = bool(at_samples)
        self.evidence = evidence
        self.n = samples.shape[-1]
        self.at = _library.addresses(samples[..., 0])

    def peaks(self, grid: Grid, threads: int, progress: bool) -> _Found:
        """[records, oscillators] for each quantity."""
        rigid = grid.rigid
        moving = np.flatnonzero(~rigid)
        made = coefficients(grid.systems(moving), self.dt, input=self.input, between=self.between)
        result = _nothing((self.at.size, rigid.size))
        tasks = [(row, block) for row in range(self.at.size) for block in blocks(moving.size, _A_TASK)]

        def work(task: Tuple[int, slice]) -> None:
            row, block = task
            found = self._block(row, made[block])
            for whole, part in zip(result.peaks + result.evidence, found.peaks + found.evidence):
                whole[row, moving[block]] = part

        spread(work, tasks, threads, progress)
        self._follow_base(result, np.flatnonzero(rigid), grid.damping)
        return result

    def _block(self, row: int, made: NDArray[np.void]) -> _Found:
        """The peaks of some oscillators under one record."""
        seen = PeaksObject(made, QUANTITIES, self.at_samples, self.evidence)
        status, bad = seen.run(self.n, int(self.at[row]))
        self._check(status, row, bad)
        peaks, evidence = zip(*(seen.get(name, self.part) for name in QUANTITIES))
        return _Found(list(peaks), list(evidence))

    def _check(self, status: int, row: int, bad: int) -> None:
        index = [int(i) for i in np.unravel_index(row, self.samples.shape[:-1])]
        _library.check(status, f"at sample {bad}" + (f" of record {index}" if index else ""))

    def _follow_base(self, result: _Found, rigid: NDArray[np.intp], damping: Doubles) -> None:
        """Rigid oscillators have no coefficients."""
        if rigid.size == 0:
            return
        if self.between != "ramp":
            raise ValueError("between: rigid oscillators (period 0) need 'ramp'")
        input_number, _ = kinds(self.input, self.between)
        omega, ratio = np.full(rigid.size, np.inf), damping[rigid]
        for row in range(self.at.size):
            for name, peaks, errors in zip(QUANTITIES, *result):
                found, cost = np.zeros(rigid.size, _library.PEAK), np.zeros(rigid.size, _library.EVIDENCE)
                bad = np.zeros(1, np.uintp)
                places = [_library.address(found)] + ([_library.address(cost)] if self.evidence else [])
                status = _library.call("spectrum_evidence" if self.evidence else "spectrum", self.n, self.dt,
                                       int(self.at[row]), input_number, rigid.size, _library.address(omega),
                                       _library.address(ratio), choice(name, QUANTITIES, "quantity"),
                                       (AT_SAMPLES if self.at_samples else 0) | self.part, *places,
                                       _library.address(bad))  # fmt: skip
                self._check(status, row, int(bad[0]))
                peaks[row, rigid] = found
                errors[row, rigid] = cost


def equal_ratios(count: int, first: float, last: float) -> Doubles:
    """So many values from first to last at equal ratios: periods or frequencies of a spectrum.

    Examples
    --------
    >>> import rampwise
    >>> rampwise.equal_ratios(4, 0.1, 100.0).round(12)
    array([  0.1,   1. ,  10. , 100. ])
    """
    values = np.zeros(_arrays.whole(count, "count", 1))
    ends = _arrays.double(first, "first"), _arrays.double(last, "last")
    _library.check(_library.call("list_log", values.size, *ends, _library.address(values)), frequency="first and last")
    return values


def octaves(first: float, last: float, per_octave: int) -> Doubles:
    """Values from first upwards, so many to each doubling, up to last.

    Examples
    --------
    >>> import rampwise
    >>> rampwise.octaves(1.0, 8.0, 1)
    array([1., 2., 4., 8.])
    """
    steps = _arrays.whole(per_octave, "per_octave", 1)
    ends = _arrays.double(first, "first"), _arrays.double(last, "last")
    count = np.zeros(1, np.uintp)
    for capacity in range(2):  # how many, then the values
        values = np.zeros(int(count[0]))
        status = _library.call("list_octaves", *ends, steps, values.size,
                               _library.address(values) if capacity else None, _library.address(count))  # fmt: skip
        _library.check(status, frequency="first and last", count="per_octave")
    return values
