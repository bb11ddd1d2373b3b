"""Double and single precision: what differs between them."""

from __future__ import annotations

from typing import Any, Literal, NamedTuple, Optional

import numpy as np

from . import _library

Precision = Literal["double", "single"]


class Arithmetic(NamedTuple):
    """One of the two: the real type, the end of the functions' names, the structs."""

    name: Precision
    real: "np.dtype[Any]"
    suffix: str
    coeffs: "np.dtype[Any]"
    state: "np.dtype[Any]"

    def call(self, name: str, *arguments: Any) -> Any:
        """A function of the library in this precision."""
        return _library.call(name + self.suffix, *arguments)


DOUBLE = Arithmetic("double", np.dtype(np.float64), "", _library.COEFFS, _library.STATE)
SINGLE = Arithmetic("single", np.dtype(np.float32), "_f32", _library.COEFFS_F32, _library.STATE_F32)


def arithmetic(precision: Optional[str], samples: Any = None) -> Arithmetic:
    """The precision of that name; without one, single for arrays of single precision."""
    if precision is None:
        return SINGLE if getattr(samples, "dtype", None) == np.float32 else DOUBLE
    for known in (DOUBLE, SINGLE):
        if precision == known.name:
            return known
    raise ValueError(f"precision: {precision!r} is none of 'double', 'single'")
