"""Greatest and least values of responses."""

from __future__ import annotations

import dataclasses
from typing import List, Optional

import numpy as np
from numpy.typing import NDArray

from . import _library
from ._arrays import Doubles


@dataclasses.dataclass(frozen=True, eq=False)
class Peaks:
    """Greatest and least values of a response, and when.

    Attributes
    ----------
    high, low : ndarray
        Greatest and least value; from rest ``high >= 0 >= low``. Infinite where a response overflows, or grows
        without end.
    high_time, low_time : ndarray
        Their instants, counted from the first sample, in the unit of time of `dt`; infinite for a value that is never
        reached.
    high_error, low_error : ndarray or None
        Where evidence was asked for: estimates of what the sampling of the record has cost each. ``high - high_error``
        is closer to the response to the smooth load.
    """

    high: Doubles
    high_time: Doubles
    low: Doubles
    low_time: Doubles
    high_error: Optional[Doubles] = None
    low_error: Optional[Doubles] = None

    @classmethod
    def _read(cls, peaks: NDArray[np.void], dt: float, evidence: Optional[NDArray[np.void]]) -> "Peaks":
        values: List[Doubles] = []
        for side in ("high", "low"):
            instant = peaks[side]
            sample = instant["sample"]
            never = sample == np.iinfo(np.uint64).max
            values += [instant["value"].copy(), np.where(never, np.inf, (sample + instant["fraction"]) * dt)]
        if evidence is not None:
            values += [evidence["error_high"].copy(), evidence["error_low"].copy()]
        return cls(*values)

    @property
    def _high_is_larger(self) -> NDArray[np.bool_]:
        high, low = np.abs(self.high), np.abs(self.low)
        return np.asarray((high > low) | ((high == low) & (self.high_time <= self.low_time)))

    @property
    def value(self) -> Doubles:
        """The larger in size of the two, with its sign; the earlier where they are equal."""
        return np.where(self._high_is_larger, self.high, self.low)

    @property
    def size(self) -> Doubles:
        """Size of the larger one."""
        return np.abs(self.value)

    @property
    def sign(self) -> Doubles:
        """Sign of the larger one: 1, -1, or 0 where nothing moves."""
        return np.sign(self.value)

    @property
    def time(self) -> Doubles:
        """Instant of the larger one."""
        return np.where(self._high_is_larger, self.high_time, self.low_time)

    @property
    def error(self) -> Optional[Doubles]:
        """Estimated sampling error of the larger one; None where no evidence was asked for."""
        if self.high_error is None or self.low_error is None:
            return None
        return np.where(self._high_is_larger, self.high_error, self.low_error)

    @property
    def share(self) -> Optional[Doubles]:
        """Size of the error over that of the value; 0 where both are 0."""
        error = self.error
        if error is None:
            return None
        size = np.where(error == 0, 1.0, self.size)
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.asarray(np.abs(error) / size)
