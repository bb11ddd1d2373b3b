"""From what users hold to arrays that the library can read, copied only where it must be."""

from __future__ import annotations

from typing import Any, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _library

Doubles = NDArray[np.float64]


def doubles(values: ArrayLike, name: str) -> Doubles:
    """Real numbers of any kind as doubles."""
    array: Doubles = reals(values, name, np.dtype(np.float64))
    return array


def reals(values: ArrayLike, name: str, real: "np.dtype[Any]") -> NDArray[Any]:
    """Real numbers of any kind as those of one type, in any layout; the same array where they are that already."""
    if isinstance(values, np.ma.MaskedArray) and np.any(values.mask):
        raise ValueError(f"{name}: values are masked; fill or cut them first")
    try:
        array = np.asarray(values)
    except ValueError as error:
        raise TypeError(f"{name}: not an array of numbers: {error}") from None
    if array.dtype.kind not in "biuf":
        raise TypeError(f"{name}: real numbers are needed, not {array.dtype}")
    with np.errstate(over="ignore"):  # infinite samples are refused where they enter
        return array.astype(real, copy=False)


def finite(array: Doubles, name: str) -> Doubles:
    """The array, where none of it is infinite or NaN."""
    if not np.isfinite(array).all():
        raise ValueError(f"{name}: a number is not finite")
    return array


def double(value: Any, name: str) -> float:
    """One real number."""
    array = doubles(value, name)
    if array.ndim != 0:
        raise TypeError(f"{name}: one number is needed, not an array of shape {array.shape}")
    return float(array)


def integers(array: NDArray[Any], name: str, kind: Any) -> NDArray[Any]:
    """Whole numbers as those of one type."""
    if array.dtype.kind not in "iu":
        raise TypeError(f"{name}: whole numbers are needed, not {array.dtype}")
    limits = np.iinfo(kind)
    if array.size > 0 and (array.min() < limits.min or array.max() > limits.max):
        raise ValueError(f"{name}: a number is beyond {limits.min} to {limits.max}")
    return in_order(array.astype(kind, copy=False))


def whole(value: Any, name: str, least: int) -> int:
    """One whole number."""
    if isinstance(value, (bool, np.bool_)) or not hasattr(value, "__index__"):
        raise TypeError(f"{name}: a whole number is needed, not {value!r}")
    number = int(value.__index__())
    if not least <= number < 2**64:
        raise ValueError(f"{name}: {number} is not from {least} to 2^64 - 1")
    return number


def records(values: ArrayLike, name: str, real: "np.dtype[Any]" = np.dtype(np.float64)) -> NDArray[Any]:
    """Records along the last axis, each without gaps in memory; other axes as they are."""
    array = reals(values, name, real)
    if array.ndim == 0:
        raise TypeError(f"{name}: an array of samples is needed, not one number")
    if array.shape[-1] == 0:
        raise ValueError(f"{name}: there are no samples")
    plain = array.strides[-1] == array.itemsize or array.shape[-1] == 1
    return array if plain and array.flags.aligned else in_order(array)


def in_order(array: NDArray[Any]) -> NDArray[Any]:
    """Without gaps and at natural alignment: the same array where it is."""
    return np.require(array, None, ["C", "A"])


def broadcast(first: Tuple[int, ...], second: Tuple[int, ...], name: str) -> Tuple[int, ...]:
    """The shape that two have in common."""
    if first == second:
        return first
    try:
        return np.broadcast_shapes(first, second)
    except ValueError:
        raise ValueError(f"{name}: shapes {first} and {second} do not go together") from None


def to_shape(array: NDArray[Any], shape: Tuple[int, ...]) -> NDArray[Any]:
    """The array, repeated without copying where its shape is another."""
    return array if array.shape == shape else np.broadcast_to(array, shape)


def aligned(size: int, alignment: int) -> NDArray[np.uint8]:
    """Memory whose first byte lies at a multiple of `alignment`."""
    memory = np.zeros(size + alignment, np.uint8)
    first = -_library.address(memory) % alignment
    return memory[first : first + size]
