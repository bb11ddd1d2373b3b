"""Rules for the peak of a sum of modes, or of directions, where only a spectrum is known."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from . import _arrays, _library
from ._arrays import Doubles
from .system import damping_ratio


def _along_last(name: str, peaks: ArrayLike, *columns: Doubles, share: float = 0.0) -> Doubles:
    """A rule over the last axis."""
    given = _arrays.in_order(_arrays.records(peaks, "peaks"))
    last = (float(share),) if name == "with_share" else tuple(_library.address(column) for column in columns)
    rows = _library.addresses(given[..., 0]).tolist()
    combined = [_library.call("combine_" + name, given.shape[-1], row, *last) for row in rows]
    return np.array(combined).reshape(given.shape[:-1])


def absolute_sum(peaks: ArrayLike) -> Doubles:
    """Sum of sizes over the last axis: never exceeded.

    Parameters
    ----------
    peaks : array_like, shape (..., modes)
        Peaks of one response quantity, a mode each.

    Returns
    -------
    ndarray, shape (...)

    Examples
    --------
    >>> import rampwise
    >>> float(rampwise.absolute_sum([3.0, -4.0]))
    7.0
    """
    return _along_last("absolute_sum", peaks)


def root_of_squares(peaks: ArrayLike) -> Doubles:
    """Square root of the sum of squares (SRSS) over the last axis.

    For modes whose frequencies lie well apart; also for what directions at right angles cause in one quantity.

    Parameters
    ----------
    peaks : array_like, shape (..., modes)
        Peaks of one response quantity, a mode or a direction each.

    Returns
    -------
    ndarray, shape (...)

    Examples
    --------
    >>> import rampwise
    >>> float(rampwise.root_of_squares([3.0, -4.0]))
    5.0
    """
    return _along_last("root_of_squares", peaks)


def complete_quadratic(peaks: ArrayLike, omega: ArrayLike, damping: ArrayLike) -> Doubles:
    """Complete quadratic combination (CQC) over the last axis.

    Parameters
    ----------
    peaks : array_like, shape (..., modes)
        Peaks of one response quantity with their signs, a mode each: `Structure.modal_peaks`.
    omega : array_like, shape (modes,)
        Circular frequencies of the modes.
    damping : array_like, shape (modes,) or ()
        Their damping ratios.

    Returns
    -------
    ndarray, shape (...)

    Notes
    -----
    A. Der Kiureghian, Earthquake Engineering and Structural Dynamics 9(5), 419-435, 1981.

    Examples
    --------
    Two modes of one frequency move together.

    >>> import rampwise
    >>> float(rampwise.complete_quadratic([3.0, -4.0], omega=[2.0, 2.0], damping=0.05))
    1.0
    """
    modes = _arrays.records(peaks, "peaks").shape[-1:]
    frequencies, ratios = _arrays.doubles(omega, "omega"), damping_ratio(damping)
    if frequencies.shape != modes:
        raise ValueError(f"omega: shape {frequencies.shape}, where {modes} is needed: one of each peak's mode")
    if ratios.shape not in (modes, ()):
        raise ValueError(f"damping: shape {ratios.shape}, where {modes}, or one number, is needed")
    columns = [_arrays.in_order(_arrays.to_shape(column, modes)) for column in (frequencies, ratios)]
    return _along_last("complete_quadratic", peaks, *columns)


def with_share(peaks: ArrayLike, share: float) -> Doubles:
    """One direction with a share of the others: the largest of \\|peak\\| + share times the sizes of the others.

    Parameters
    ----------
    peaks : array_like, shape (..., directions)
        Peaks of one response quantity, a direction of the load each.
    share : float
        0.3 and 0.4 are in use; the code that governs says which.

    Returns
    -------
    ndarray, shape (...)

    Examples
    --------
    >>> import rampwise
    >>> float(rampwise.with_share([10.0, 4.0, -6.0], share=0.5))
    15.0
    """
    return _along_last("with_share", peaks, share=_arrays.double(share, "share"))


def modal_correlation(omega_1: float, damping_1: float, omega_2: float, damping_2: float) -> float:
    """How far two modes' responses to a broad-banded load go together, 0 to 1: rho of `complete_quadratic`.

    Examples
    --------
    >>> import rampwise
    >>> round(rampwise.modal_correlation(1.0, 0.05, 0.9, 0.05), 3)
    0.473
    """
    values = {"omega_1": omega_1, "damping_1": damping_1, "omega_2": omega_2, "damping_2": damping_2}
    numbers = {name: _arrays.double(value, name) for name, value in values.items()}
    damping_ratio([numbers["damping_1"], numbers["damping_2"]])
    return float(_library.call("modal_correlation", *numbers.values()))
