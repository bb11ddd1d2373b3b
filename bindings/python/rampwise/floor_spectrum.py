"""Floor spectra: what a shaken structure does to light equipment of every period."""

from __future__ import annotations

import dataclasses
from typing import Any, ClassVar, Dict, List, Literal, Mapping, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike

from . import _arrays
from ._arrays import Doubles
from ._grid import Grid, GridResult
from ._provenance import provenance
from ._work import blocks, spread
from .live_structure import Equipment
from .peaks import Peaks
from .spectrum import Spectrum, response_spectrum
from .structure import Row, Structure
from .system import System

_A_TASK = 64  # pieces of equipment


@dataclasses.dataclass(frozen=True, eq=False)
class FloorSpectrum(GridResult):
    """Largest motions of light equipment on points of a structure, over a grid of damping ratios and periods.

    Attributes
    ----------
    period, frequency, omega : ndarray
        The natural periods of the equipment, and the same as frequencies and circular frequencies.
    damping : ndarray
        Damping ratios.
    points : tuple of str
        Names of the points.
    displacement, total_acceleration : Peaks
        Stretch between point and equipment, and total acceleration of the equipment, of shape ``(points,) +
        damping.shape + period.shape``: exact for the sampled inputs, true between the samples.
    floor : Peaks
        Of the points' own total accelerations, shape (points,).
    sampled : Spectrum
        The usual way, for comparison: response spectra of the points' accelerations at the samples, taken as straight
        between them.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    _derived: ClassVar[Tuple[str, ...]] = ("SD", "SA", "PSA", "sampled_error")

    points: Tuple[str, ...]
    displacement: Peaks
    total_acceleration: Peaks
    floor: Peaks
    sampled: Spectrum
    provenance: Dict[str, Any]

    @property
    def SD(self) -> Doubles:
        """The largest stretch between point and equipment, in size."""
        return self.displacement.size

    @property
    def SA(self) -> Doubles:
        """The largest total acceleration of the equipment, in size."""
        return self.total_acceleration.size

    @property
    def PSA(self) -> Doubles:
        """Pseudo-acceleration, omega^2 SD: the spring force per mass."""
        return np.asarray(self.omega * (self.omega * self.SD))

    @property
    def sampled_error(self) -> Doubles:
        """By which share the usual way's SA is off: negative where it is too small."""
        usual, exact = self.sampled.SA, self.SA
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.where(usual == exact, 0.0, usual / exact - 1)


def floor_spectrum(
    structure: Structure,
    record: ArrayLike,
    dt: float,
    points: Mapping[str, Row],
    *,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: ArrayLike = 0.05,
    part: Literal["primary", "maximax"] = "primary",
    modes: Optional[int] = None,
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> FloorSpectrum:
    """Spectra of light equipment on points of a structure that a record shakes, exact for the record as it is sampled.

    Parameters
    ----------
    structure : Structure
        It does not feel the equipment.
    record : array_like, shape (n,) or (n, inputs)
        Its inputs, instants along the first axis, straight between the samples.
    dt : float
        Interval between samples.
    points : dict of Row
        Total accelerations of points, by names: ``{"roof": frame.total_acceleration(2)}``.
    period, frequency, omega : array_like
        Exactly one of them: of the equipment, as in `response_spectrum`, but none rigid or free.
    damping : array_like
        Ratios to critical damping. Every ratio meets every period.
    part : {'primary', 'maximax'}
        From the first to the last sample, or in the free motion of structure and equipment after it too, as in
        `LiveStructure.peaks`. The usual way then goes over zeros to the last instant of a peak; where the record does
        not end with a zero, the line down to the first of them is one more difference.
    modes : int, optional
        How many modes of the structure are kept, as in `Structure.live`.
    allow_strong_damping : bool
        Takes damping ratios above 2.
    threads : int
        Equipment is spread over so many threads; the bits stay the same.
    progress : bool
        Shows a bar of progress where tqdm is installed.

    Returns
    -------
    FloorSpectrum

    Notes
    -----
    Between two samples a floor does not move along a straight line. Its history at the samples, taken as a record,
    loses sinc^2(1/N) at the frequency of a mode of N samples a cycle, 3.2 % at N = 10; equipment on the modes
    themselves loses nothing. Where omega dt is above 2 every step is looked into, which takes longer. Results support,
    and never replace, the governing code and a licensed engineer's judgement.

    Examples
    --------
    >>> import numpy, rampwise
    >>> frame = rampwise.Structure([2.0, 1.0], [[300.0, -100.0], [-100.0, 100.0]], damping=0.05, direction=[1.0, 1.0])
    >>> ground = numpy.sin(numpy.arange(400) / 4)
    >>> floors = rampwise.floor_spectrum(frame, ground, 0.02, {"roof": frame.total_acceleration(1)}, period=[0.5, 0.9])
    >>> floors.SA.shape
    (1, 2)
    >>> bool(abs(floors.sampled_error).max() < 0.01)
    True
    """
    grid = Grid.make(damping, allow_strong_damping, period=period, frequency=frequency, omega=omega)
    if not np.all(np.isfinite(grid.omega) & (grid.omega > 0)):
        raise ValueError(f"{grid.name}: equipment is neither rigid nor free")
    systems = [grid.systems(block) for block in blocks(grid.omega.size, _A_TASK)]
    if part not in ("primary", "maximax"):
        raise ValueError(f"part: {part!r} is neither 'primary' nor 'maximax'")
    structure._rows(points)  # refuses what are none of its rows
    for name, row in points.items():
        if row._feels_motion():
            raise ValueError(f"points: {name!r} is not the total acceleration of a point: it weighs displacements or "
                             "velocities")  # fmt: skip
    step = _arrays.double(dt, "dt")
    floors = structure.respond(record, step, points, part=part, modes=modes)

    def work(task: Tuple[str, System]) -> Tuple[Peaks, Peaks]:
        point, pieces = task
        live = structure.live(step, {point: points[point]}, modes=modes, equipment={"pieces": Equipment(point, pieces)})
        live.put(record)
        return live.equipment_displacement(part)["pieces"], live.equipment_acceleration(part)["pieces"]

    found = spread(work, [(point, pieces) for point in points for pieces in systems], threads, progress)
    shape = (len(points),) + grid.shape
    displacement = _joined([pair[0] for pair in found], shape)
    total_acceleration = _joined([pair[1] for pair in found], shape)
    histories = floors.values
    if part == "maximax":
        live = structure.live(step, points, modes=modes, peaks=False)
        histories = live.put(_longer(record, step, (displacement, total_acceleration))).values
    sampled = response_spectrum(histories.T, step, period=period, frequency=frequency, omega=omega, damping=damping,
                                allow_strong_damping=True, threads=threads)  # fmt: skip
    return FloorSpectrum(
        *grid.lists,
        floors.outputs,
        displacement,
        total_acceleration,
        _joined([floors.peaks[point] for point in points], (len(points),)),
        sampled,
        provenance(dt=step, part=part, modes=modes, threads=threads),
    )


def _joined(parts: List[Peaks], shape: Tuple[int, ...]) -> Peaks:
    fields = ("high", "high_time", "low", "low_time") + (("later",) if parts[0].later is not None else ())
    return Peaks(**{f: np.concatenate([getattr(part, f).reshape(-1) for part in parts]).reshape(shape) for f in fields})


def _longer(record: ArrayLike, dt: float, peaks: Tuple[Peaks, ...]) -> Doubles:
    """The record with zeros to the last instant of a peak that is reached."""
    given = _arrays.doubles(record, "record")
    times = np.concatenate([time.reshape(-1) for of in peaks for time in (of.high_time, of.low_time)])
    last = int(np.ceil(np.max(times[np.isfinite(times)], initial=0) / dt))
    after = np.zeros((max(last + 1 - len(given), 0),) + given.shape[1:])
    return np.concatenate([given, after])
