"""Where the energy goes: histories and spectra."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, Literal, Optional

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._grid import Grid, GridResult
from ._provenance import Result, provenance
from ._work import blocks, spread
from .response import chosen_system
from .system import Between, Input, System, choice, coefficients, kinds

Frame = Literal["relative", "absolute"]

_FRAMES = ("relative", "absolute")
_A_TASK = 16  # oscillators


@dataclasses.dataclass(frozen=True, eq=False)
class Energies:
    """input = kinetic + strain + dissipated - (kinetic + strain at the start).

    Attributes
    ----------
    input : ndarray
        Work of the force that drives the mass.
    kinetic, strain, dissipated : ndarray
        Energy of motion, in the spring, and taken by the damper so far. None is found from the others.
    """

    input: Doubles
    kinetic: Doubles
    strain: Doubles
    dissipated: Doubles

    @classmethod
    def _read(cls, energy: NDArray[np.void]) -> "Energies":
        return cls(*(energy[name].copy() for name in ("input", "kinetic", "strain", "dissipated")))


@dataclasses.dataclass(frozen=True, eq=False)
class EnergyHistory(Energies, Result):
    """Energies at every sample, shape (..., n).

    Attributes
    ----------
    time : ndarray, shape (n,)
        Times of the samples.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    time: Doubles
    provenance: Dict[str, Any]

    @property
    def imbalance(self) -> Doubles:
        """What the four leave open at each sample: a check, some rounding errors."""
        stored = self.kinetic + self.strain
        return np.asarray(self.input - (stored + self.dissipated - stored[..., :1]))


@dataclasses.dataclass(frozen=True, eq=False)
class EnergySpectrum(GridResult):
    """Energy spectra per unit mass, over a grid of damping ratios and periods.

    Attributes
    ----------
    period, frequency, omega : ndarray
        The natural periods of the oscillators, and the same as frequencies and circular frequencies.
    damping : ndarray
        Damping ratios.
    last : Energies
        At the last sample, of shape damping.shape + period.shape.
    greatest : ndarray
        Greatest input energy at any sample.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    last: Energies
    greatest: Doubles
    provenance: Dict[str, Any]

    @property
    def equivalent_velocity(self) -> Doubles:
        """sqrt(2 E) of the greatest input energy E per unit mass."""
        return np.asarray(np.sqrt(2 * self.greatest))


def energies(
    record: ArrayLike,
    dt: float,
    *,
    input: Input,
    frame: Frame = "relative",
    system: Optional[System] = None,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: Optional[ArrayLike] = None,
    mass: Optional[ArrayLike] = None,
    between: Between = "ramp",
    displacement: float = 0.0,
    velocity: float = 0.0,
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> EnergyHistory:
    """Energies at every sample, exact for the input as it is given.

    Parameters
    ----------
    record : array_like, shape (..., n)
        Samples along the last axis.
    dt : float
        Interval between samples.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are. A base acceleration's base is at rest at first; base displacement has absolute energies
        only.
    frame : {'relative', 'absolute'}
        Motion against the base and work of -m a, or motion against a fixed frame and work of what the base passes on
        (C.-M. Uang and V. V. Bertero, Earthq. Eng. Struct. Dyn. 19, 77-90, 1990).
    system, period, frequency, omega, damping, mass, between, allow_strong_damping
        As in `respond`.
    displacement, velocity : float
        Initial values.
    threads : int
        Records and systems are spread over so many threads.
    progress : bool
        Shows a bar of progress where tqdm is installed.

    Returns
    -------
    EnergyHistory

    Examples
    --------
    A load of 1 that stays on a spring of stiffness 1: at rest at last under u = 1, half the work is in the spring.

    >>> import numpy, rampwise
    >>> energy = rampwise.energies(numpy.ones(2000), dt=0.05, input="force", omega=1.0, damping=0.5)
    >>> [round(float(part[-1]), 12) for part in (energy.input, energy.strain, energy.dissipated)]
    [1.0, 0.5, 0.5]
    """
    systems = chosen_system(system, damping, mass, period=period, frequency=frequency, omega=omega,
                            allow_strong_damping=allow_strong_damping)  # fmt: skip
    number = choice(frame, _FRAMES, "frame")
    step = _arrays.double(dt, "dt")
    made = coefficients(systems, step, input=input, between=between)
    samples = _arrays.records(record, "record")
    n = samples.shape[-1]
    shape = _arrays.broadcast(made.shape, samples.shape[:-1], "record and system")
    u0, v0 = _arrays.double(displacement, "displacement"), _arrays.double(velocity, "velocity")
    energy = np.zeros(shape + (n,), _library.ENERGY)
    coeffs_at = _library.addresses(_arrays.to_shape(made, shape))
    samples_at = _library.addresses(_arrays.to_shape(samples[..., 0], shape))

    def work(row: int) -> None:
        bad = np.zeros(1, np.uintp)
        place = _library.address(energy) + row * n * energy.itemsize
        status = _library.call("energy_solve", int(coeffs_at[row]), number, u0, v0, n, int(samples_at[row]), place,
                               _library.address(bad))  # fmt: skip
        index = [int(i) for i in np.unravel_index(row, shape)]
        _library.check(status, f"at sample {bad[0]}" + (f" of {index}" if index else ""), impulses="frame",
                       state="displacement or velocity")  # fmt: skip

    spread(work, list(range(coeffs_at.size)), threads, progress)
    parts = Energies._read(energy)
    return EnergyHistory(
        parts.input, parts.kinetic, parts.strain, parts.dissipated, np.arange(n) * step,
        provenance(dt=step, input=input, between=between, frame=frame, displacement=u0, velocity=v0, threads=threads),
    )  # fmt: skip


def energy_spectrum(
    record: ArrayLike,
    dt: float,
    *,
    period: Optional[ArrayLike] = None,
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    damping: ArrayLike = 0.05,
    input: Input = "base acceleration",
    frame: Frame = "relative",
    allow_strong_damping: bool = False,
    threads: int = 1,
    progress: bool = False,
) -> EnergySpectrum:
    """Energy spectra of a record, per unit mass.

    Parameters
    ----------
    record : array_like, shape (n,)
        Straight lines between samples; every oscillator starts with u = u' = 0.
    dt : float
        Interval between samples.
    period, frequency, omega, damping, input, allow_strong_damping, threads, progress
        As in `response_spectrum`, without rigid oscillators.
    frame : {'relative', 'absolute'}
        As in `energies`.

    Returns
    -------
    EnergySpectrum
    """
    grid = Grid.make(damping, allow_strong_damping, period=period, frequency=frequency, omega=omega)
    input_number, _ = kinds(input, "ramp")
    number = choice(frame, _FRAMES, "frame")
    step = _arrays.double(dt, "dt")
    samples = _arrays.records(record, "record")
    if samples.ndim != 1:
        raise ValueError(f"record: shape {samples.shape}, where one axis is needed")
    last, greatest = np.zeros(grid.omega.size, _library.ENERGY), np.zeros(grid.omega.size)

    def work(block: slice) -> None:
        bad = np.zeros(1, np.uintp)
        status = _library.call("energy_spectrum", samples.size, step, _library.address(samples), input_number, number,
                               *grid.places(block), _library.address(last[block]),
                               _library.address(greatest[block]), _library.address(bad))  # fmt: skip
        _library.check(status, f"number {bad[0]}", frequency=grid.name, damper="damping", impulses="frame")

    spread(work, blocks(last.size, _A_TASK), threads, progress)
    return EnergySpectrum(
        *grid.lists,
        Energies._read(last.reshape(grid.shape)),
        greatest.reshape(grid.shape),
        provenance(dt=step, input=input, frame=frame, threads=threads),
    )
