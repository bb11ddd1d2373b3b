"""SciPy's eigenvalue solvers, and what is zero after them."""

from __future__ import annotations

from typing import Any, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays
from ._arrays import Doubles

_ROUNDINGS = 32  # times n eps of the largest: what counts as zero after an eigenvalue solver


def _linalg() -> Any:
    try:
        import scipy.linalg
    except ImportError as error:
        raise ImportError(f"structures need SciPy: {error}") from error
    return scipy.linalg


def matrix(values: ArrayLike, name: str) -> Doubles:
    """A symmetric matrix; a list is its diagonal."""
    given = _arrays.doubles(values, name)
    square = np.diag(given) if given.ndim == 1 else given
    if square.ndim != 2 or square.shape[0] != square.shape[1] or square.size == 0:
        raise ValueError(f"{name}: shape {given.shape}, where (n, n), or (n,) for a diagonal, is needed")
    if not np.isfinite(square).all():
        raise ValueError(f"{name}: a number is not finite")
    if (np.abs(square - square.T) > zero_beside(square)).any():
        raise ValueError(f"{name}: the matrix is not symmetric")
    return np.asarray((square + square.T) / 2)


def zero_beside(values: Doubles) -> float:
    """What rounding may have left of zero in such an array."""
    return float(_ROUNDINGS * len(values) * np.finfo(float).eps * np.abs(values).max())


def modes_of(mass: Doubles, stiffness: Doubles) -> Tuple[Doubles, Doubles]:
    """omega^2, lowest first, and shapes [mode][body] of unit modal mass."""
    linalg = _linalg()
    if stiffness.shape != mass.shape:
        raise ValueError(f"stiffness: shape {stiffness.shape}, where {mass.shape} is needed")
    try:
        squares, vectors = linalg.eigh(stiffness, mass)
    except linalg.LinAlgError:
        raise ValueError("mass: the matrix is not positive definite") from None
    zero = zero_beside(squares)
    if squares[0] < -zero:
        raise ValueError("stiffness: the structure falls away from its place: an omega^2 is negative")
    squares[np.abs(squares) <= zero] = 0.0
    return squares, np.ascontiguousarray(vectors.T)


def turned(squares: Doubles, shapes: Doubles, damper: Doubles) -> Doubles:
    """Shapes of one frequency are free among themselves: here those that the damper keeps apart."""
    found = shapes.copy()
    first = np.flatnonzero(np.diff(squares) > zero_beside(squares)) + 1
    for block in np.split(np.arange(len(squares)), first):
        if block.size > 1:
            _, vectors = _linalg().eigh(shapes[block] @ damper @ shapes[block].T)
            found[block] = vectors.T @ shapes[block]
    return found


def damped_roots(squares: Doubles, damper: Doubles) -> Tuple[NDArray[np.complex128], NDArray[np.complex128]]:
    """Roots, and shapes [root][mode], of (root^2 + root damper + omega^2) shape = 0, from the companion matrix."""
    n = len(squares)
    companion = np.zeros((2 * n, 2 * n))
    companion[:n, n:] = np.eye(n)
    companion[n:, :n] = -np.diag(squares)
    companion[n:, n:] = -damper
    roots, vectors = _linalg().eig(companion)
    return roots.astype(complex), np.ascontiguousarray(vectors[:n].T, complex)  # SciPy's are real where all roots are
