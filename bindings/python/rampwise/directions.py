"""Two horizontal components: percentiles of the largest response over all directions in their plane."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike

from . import _arrays, _library
from ._arrays import Doubles
from ._grid import Grid, GridResult
from ._provenance import provenance
from ._work import blocks, spread
from .peaks import AT_SAMPLES, QUANTITIES, Quantity
from .system import Input, choice, kinds

_A_TASK = 64  # oscillators: two groups, 1 MB


@dataclasses.dataclass(frozen=True, eq=False)
class DirectionalSpectrum(GridResult):
    """Percentiles over the direction, for a grid of damping ratios and periods.

    Attributes
    ----------
    period, frequency, omega : ndarray
        The natural periods of the oscillators, and the same as frequencies and circular frequencies.
    damping : ndarray
        Damping ratios.
    percent : ndarray
        50 is the median over the direction, 100 the largest over all directions.
    quantity : str
        Of what.
    value : ndarray, shape percent.shape + damping.shape + period.shape
        The percentiles, in size.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    percent: Doubles
    quantity: str
    value: Doubles
    provenance: Dict[str, Any]

    @property
    def PSA(self) -> Doubles:
        """omega^2 times the percentiles of displacement: those of the pseudo-acceleration."""
        if self.quantity != "displacement":
            raise ValueError("quantity: pseudo-acceleration is made of displacement")
        return np.asarray(self.omega * (self.omega * self.value))


def _pair(first: ArrayLike, second: ArrayLike) -> Tuple[Doubles, Doubles]:
    x, y = _arrays.records(first, "first"), _arrays.records(second, "second")
    if x.ndim != 1 or x.shape != y.shape:
        raise ValueError(f"first and second: shapes {x.shape} and {y.shape}, where two of (n,) are needed")
    return x, y


def directional_spectrum(
    first: ArrayLike,
    second: ArrayLike,
    dt: float,
    *,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: ArrayLike = 0.05,
    quantity: Quantity = "displacement",
    percent: ArrayLike = (50.0, 100.0),
    input: Input = "base acceleration",
    at_samples: bool = False,
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> DirectionalSpectrum:
    """Percentiles of response spectra over the direction of two horizontal components.

    Parameters
    ----------
    first, second : array_like, shape (n,)
        The two components, at right angles. Every oscillator is at rest under their first samples.
    dt : float
        Interval between samples.
    period, frequency, omega : array_like
        Exactly one of them, as in `response_spectrum`; a rigid oscillator goes with its base.
    damping : array_like
        Ratios to critical damping, not negative. Every ratio meets every period.
    quantity : {'displacement', 'velocity', 'total_acceleration'}
        Of what.
    percent : array_like
        0 to 100: 50 is the median, 100 the largest over all directions.
    input : {'base acceleration', 'base velocity', 'base displacement', 'force'}
        What the samples are.
    at_samples : bool
        Looks at the samples only; otherwise every value falls short by less than 1e-6 of the largest.
    allow_strong_damping : bool
        Takes damping ratios above 2.
    threads : int
        Oscillators are spread over so many threads.
    progress : bool
        Shows a bar of progress where tqdm is installed.

    Returns
    -------
    DirectionalSpectrum

    Notes
    -----
    D. M. Boore, Bulletin of the Seismological Society of America 100(4), 1830-1835, 2010.

    Examples
    --------
    A base that moves in one line at 30 degrees has all of its motion there.

    >>> import numpy, rampwise
    >>> line = numpy.sin(numpy.arange(200) / 9)
    >>> north, east = line * numpy.cos(numpy.pi / 6), line * numpy.sin(numpy.pi / 6)
    >>> both = rampwise.directional_spectrum(north, east, dt=0.02, period=0.7, percent=100)
    >>> bool(abs(both.value / rampwise.response_spectrum(line, dt=0.02, period=0.7).SD - 1) < 1e-6)
    True
    """
    grid = Grid.make(damping, allow_strong_damping, period=period, frequency=frequency, omega=omega)
    x, y = _pair(first, second)
    step = _arrays.double(dt, "dt")
    percents = _arrays.in_order(_arrays.doubles(percent, "percent"))
    input_number, _ = kinds(input, "ramp")
    number = choice(quantity, QUANTITIES, "quantity")
    value = np.zeros((grid.omega.size, percents.size))

    def work(block: slice) -> None:
        bad = np.zeros(1, np.uintp)
        status = _library.call("spectrum_directions", x.size, step, _library.address(x), _library.address(y),
                               input_number, *grid.places(block), number, AT_SAMPLES if at_samples else 0,
                               percents.size, _library.address(percents), _library.address(value[block]),
                               _library.address(bad))  # fmt: skip
        _library.check(status, f"number {bad[0]}", sample="first or second", frequency=grid.name, damper="damping")

    spread(work, blocks(len(value), _A_TASK), threads, progress)
    return DirectionalSpectrum(
        *grid.lists,
        percents,
        quantity,
        np.moveaxis(value, -1, 0).reshape(percents.shape + grid.shape),
        provenance(dt=step, input=input, at_samples=bool(at_samples), threads=threads),
    )


def percentiles_over_angle(first: ArrayLike, second: ArrayLike, percent: ArrayLike) -> Doubles:
    """Percentiles, over the direction, of the largest of two histories at right angles.

    Parameters
    ----------
    first, second : array_like, shape (n,)
        Whatever was measured or computed.
    percent : array_like
        0 to 100.

    Returns
    -------
    ndarray
        Of the shape of `percent`.

    Examples
    --------
    >>> import rampwise
    >>> float(rampwise.percentiles_over_angle([3.0], [4.0], 100))
    5.0
    """
    x, y = _pair(first, second)
    percents = _arrays.in_order(_arrays.doubles(percent, "percent"))
    value, bad = np.zeros(percents.shape), np.zeros(1, np.uintp)
    status = _library.call("percentiles_over_angle", x.size, _library.address(x), _library.address(y), percents.size,
                           _library.address(percents), _library.address(value), _library.address(bad))  # fmt: skip
    _library.check(status, f"number {bad[0]}", sample="first or second")
    return value
