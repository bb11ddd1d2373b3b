"""One value of the response: by its name, or as four weights over u, v, p and p - p_before."""

from __future__ import annotations

from typing import Sequence, Tuple, Union

import numpy as np
from numpy.typing import NDArray

from . import _arrays, _library
from .system import choice

Output = Union[str, Sequence[float]]

_QUANTITIES = (
    "displacement", "velocity", "acceleration", "total_acceleration", "spring_force", "damper_force", "load",
)  # fmt: skip


def output_struct(output: Output, argument: str = "outputs") -> Tuple[str, NDArray[np.void]]:
    """Its name and struct."""
    struct = np.zeros((), _library.OUTPUT)
    if isinstance(output, str):
        struct["quantity"] = choice(output, _QUANTITIES, argument)
        return output, struct
    weights = _arrays.doubles(output, argument)
    if weights.shape != (4,):
        raise ValueError(
            f"{argument}: four weights over u, v, p and p - p_before are needed, not shape {weights.shape}"
        )
    struct["row"] = weights
    struct["quantity"] = _library.constant("WEIGHTED")
    return "weighted", struct
