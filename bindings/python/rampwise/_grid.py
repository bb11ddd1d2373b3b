"""The grid of a spectrum: every damping ratio with every period."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, NamedTuple, Optional, Tuple, Union

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _library
from ._arrays import Doubles
from ._provenance import Result
from .system import System, damping_ratio, one_of


@dataclasses.dataclass(frozen=True, eq=False)
class GridResult(Result):
    """What every spectrum begins with."""

    period: Doubles
    frequency: Doubles
    omega: Doubles
    damping: Doubles


class Grid(NamedTuple):
    """Its oscillators, flat: damping by damping, and in it period by period."""

    name: str
    given: Doubles
    omega: Doubles
    damping: Doubles
    lists: Tuple[Doubles, Doubles, Doubles, Doubles]  # period, frequency, omega, damping, as they were shaped
    shape: Tuple[int, ...]

    @classmethod
    def make(cls, damping: ArrayLike, allow_strong_damping: bool, **natural: Optional[ArrayLike]) -> "Grid":
        """From what a user gave: exactly one of period, frequency, omega."""
        name, given = one_of(**natural)
        ratio = damping_ratio(damping, allow_strong_damping)
        with np.errstate(divide="ignore"):
            omega = given if name == "omega" else 2 * np.pi * given if name == "frequency" else 2 * np.pi / given
            lists = (
                given if name == "period" else np.asarray(2 * np.pi / omega),
                given if name == "frequency" else np.asarray(omega / (2 * np.pi)),
                np.asarray(omega),
                ratio,
            )
        flat = [np.tile(array.reshape(-1), ratio.size) for array in (given, lists[2])]
        return cls(name, flat[0], flat[1], np.repeat(ratio.reshape(-1), given.size), lists, ratio.shape + given.shape)

    @property
    def rigid(self) -> NDArray[np.bool_]:
        return np.asarray(self.given == (0.0 if self.name == "period" else np.inf))

    def systems(self, chosen: Union[slice, NDArray[np.intp]]) -> System:
        """Some of them, none rigid."""
        natural: Dict[str, Any] = {self.name: self.given[chosen]}
        return System.natural(damping=self.damping[chosen], allow_strong_damping=True, **natural)

    def places(self, block: slice) -> Tuple[int, int, int]:
        """How many oscillators a block has, and where their omega and damping lie, as the library takes them."""
        omega = self.omega[block]
        return omega.size, _library.address(omega), _library.address(self.damping[block])
