"""SciPy's eigenvalue solvers, and what is zero after them."""

from __future__ import annotations

from typing import Any, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays
from ._arrays import Doubles

_ROUNDINGS = 32  # times n eps of what was added up: what counts as zero after an eigenvalue solver
_LEAST_PIVOT = 1e-10  # of K scaled to a diagonal of 1: eps over it is 2e-6 of an omega^2
_MOST_HIDDEN = 1e-4  # of the lowest omega^2, in rigid bodies: roundings add up to much less
_ONE_FREQUENCY = 1e-9  # of omega^2: nothing further apart is one, whatever rounding may have done
_EPS = float(np.finfo(float).eps)


def _linalg() -> Any:
    try:
        import scipy.linalg
    except ImportError as error:
        raise ImportError(f"structures need SciPy: {error}") from error
    return scipy.linalg


def matrix(values: ArrayLike, name: str) -> Doubles:
    """A symmetric matrix, SciPy's sparse ones too; a list is its diagonal."""
    dense = getattr(values, "toarray", lambda: values)()
    given = _arrays.doubles(dense, name)
    square = np.diag(given) if given.ndim == 1 else given
    if square.ndim != 2 or square.shape[0] != square.shape[1] or square.size == 0:
        raise ValueError(f"{name}: shape {given.shape}, where (n, n), or (n,) for a diagonal, is needed")
    _arrays.finite(square, name)
    if (np.abs(square - square.T) > zero_beside(square)).any():
        raise ValueError(f"{name}: the matrix is not symmetric")
    return np.asarray((square + square.T) / 2)


def zero_beside(values: Doubles) -> float:
    """What rounding may have left of zero in such an array."""
    return float(_ROUNDINGS * len(values) * _EPS * np.abs(values).max())


def zero_within(shapes: Doubles, matrix: Doubles) -> Doubles:
    """What rounding may have left of zero in each element of shapes matrix shapes': each body's part of a shape is off
    by roundings of its largest."""
    off = np.broadcast_to(np.linalg.norm(shapes, axis=0), shapes.shape)
    one_off = off @ np.abs(matrix) @ np.abs(shapes).T
    return np.asarray(_ROUNDINGS * len(matrix) * _EPS * (one_off + one_off.T))


def modes_of(mass: Doubles, stiffness: Doubles) -> Tuple[Doubles, Doubles]:
    """omega^2, lowest first, and shapes [mode][body] of unit modal mass.

    With M = R R' and K = F F', omega are the singular values of R^-1 F, and R' shape its left vectors; what is left of
    the space are rigid bodies. Eigenvalues of K and M would be off by roundings of the largest omega^2: one stiff
    spring takes all digits of the slow modes. Jacobi's rotations leave each omega its own digits (Z. Drmac and
    K. Veselic, SIAM J. Matrix Anal. Appl. 29(4), 1322-1342, 2008; from memory).
    """
    linalg = _linalg()
    if stiffness.shape != mass.shape:
        raise ValueError(f"stiffness: shape {stiffness.shape}, where {mass.shape} is needed")
    try:
        root = linalg.cholesky(mass, lower=True)
    except linalg.LinAlgError:
        raise ValueError(
            "mass: the matrix is not positive definite; degrees of freedom without mass are condensed first"
        ) from None
    half, sure = _half(stiffness)
    (n, elastic), omega, vectors = half.shape, np.zeros(len(mass)), np.eye(len(mass))
    if elastic > 0:
        bodies = linalg.solve_triangular(root, half, lower=True)
        found, vectors, _, work, _, info = linalg.lapack.dgejsv(bodies, joba=2, jobu=1, jobv=3, jobr=0, jobt=0, jobp=0)
        if info != 0:
            raise ValueError("stiffness, mass: Jacobi's rotations find no end")
        omega[n - elastic :] = found[::-1] * (work[0] / work[1])
    shapes = np.ascontiguousarray(linalg.solve_triangular(root, vectors[:, ::-1], lower=True, trans=1).T)
    rigid = np.abs(shapes[: n - elastic])
    hidden = _EPS * ((rigid @ np.abs(stiffness)) * rigid).sum(axis=1)  # the omega^2 of a rounding of K
    if not sure or (elastic > 0 and (hidden > _MOST_HIDDEN * omega[n - elastic] ** 2).any()):
        raise ValueError(
            "stiffness: beside its stiffest springs the rounding of the matrix leaves no digits to the slow modes; "
            "soften those springs, or make what they hold together one"
        )
    return omega**2, shapes


def _half(stiffness: Doubles) -> Tuple[Doubles, bool]:
    """F [n][rank] of K = F F', by Cholesky's way with pivots, and whether its last column has digits.

    It goes over K scaled to a diagonal of 1: eps over its last pivot is what rounding may do to the lowest omega^2.
    """
    diagonal = stiffness.diagonal()
    scale = np.sqrt(np.where(diagonal > 0, diagonal, 1.0))
    scaled = stiffness / scale[:, np.newaxis] / scale
    zero = zero_beside(np.ones(len(scaled)))
    held, order, rank, _ = _linalg().lapack.dpstrf(scaled, tol=zero, lower=1)
    half = np.zeros((len(scaled), rank))
    half[order - 1] = np.tril(held)[:, :rank]
    if (np.abs(scaled - half @ half.T) > zero).any():
        raise ValueError("stiffness: the structure falls away from its place: an omega^2 is negative")
    return scale[:, np.newaxis] * half, rank == 0 or bool(held[rank - 1, rank - 1] ** 2 > _LEAST_PIVOT)


def turned(squares: Doubles, shapes: Doubles, stiffness: Doubles, damper: Doubles) -> Doubles:
    """Shapes of one frequency are free among themselves: here those that the damper keeps apart."""
    found = shapes.copy()
    one = np.minimum(zero_within(shapes, stiffness).diagonal(), _ONE_FREQUENCY * squares)
    first = np.flatnonzero(np.diff(squares) > one[1:]) + 1
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
