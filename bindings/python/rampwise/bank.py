"""Many oscillators under one input, fed in blocks."""

from __future__ import annotations

from typing import Any, Dict, NamedTuple, Optional, Sequence, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._precision import Precision, arithmetic
from ._provenance import provenance
from .system import Between, Input, System, choice, coefficients

Reals = NDArray[Any]  # of the bank's precision

_INSTRUCTIONS = ("fastest", "baseline", "avx2", "avx512", "neon")


class Histories(NamedTuple):
    """One value an oscillator, or one a sample and chosen oscillator, shape (k, n)."""

    displacement: Reals
    velocity: Reals
    acceleration: Reals
    total_acceleration: Reals


class Bank:
    """Many oscillators under one input, one a lane of the processor's vectors.

    Every result has the bits of each oscillator alone, whatever the set of instructions and however a record is cut
    into blocks. An oscillator that overflows is stopped at its last finite state, and the others go on.

    Parameters
    ----------
    system : System
        Oscillators of any shape; they are numbered as ``numpy.ravel`` has them.
    dt : float
        Interval between samples.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are.
    between : {'ramp', 'hold'}
        What the input does between samples.
    instructions : {'fastest', 'baseline', 'avx2', 'avx512', 'neon'}
        Set of instructions; the bits are the same.
    precision : {'double', 'single'}
        Single takes twice as many oscillators at a time.

    Notes
    -----
    A bank begins at rest under zero input. It belongs to one thread at a time; different banks are independent. It
    can be pickled, and goes on where it was with the same bits.

    Examples
    --------
    >>> import numpy, rampwise
    >>> floors = rampwise.System.natural(period=numpy.linspace(0.1, 2.0, 500), damping=0.05)
    >>> bank = rampwise.Bank(floors, dt=0.01, input="base acceleration")
    >>> for block in numpy.split(numpy.sin(numpy.arange(400) / 10.0), 4):
    ...     bank.run(block)
    >>> bank.largest.shape
    (500,)
    """

    def __init__(
        self,
        system: System,
        dt: float,
        *,
        input: Input,
        between: Between = "ramp",
        instructions: str = "fastest",
        precision: Precision = "double",
    ) -> None:
        made = coefficients(system, dt, input=input, between=between, precision=precision)
        if made.size == 0:
            raise ValueError("system: at least one oscillator is needed")
        options = {"dt": float(dt), "input": input, "between": between, "instructions": instructions,
                   "precision": precision}  # fmt: skip
        self._make(made, choice(instructions, _INSTRUCTIONS, "instructions"), options)

    def _make(self, made: NDArray[np.void], instructions: int, options: Dict[str, Any]) -> None:
        self.shape: Tuple[int, ...] = made.shape
        self._coeffs = made.reshape(-1)
        self._options = options
        self._numbers = arithmetic(options["precision"])
        self._chosen_instructions = instructions
        size = self._numbers.call("bank_size", self.count)
        self._memory = _arrays.aligned(size, self._numbers.call("bank_alignment"))
        place = np.zeros(1, np.uintp)
        status = self._numbers.call("bank_init", _library.address(self._memory), size, self.count,
                               _library.address(self._coeffs), instructions, _library.address(place))  # fmt: skip
        _library.check(status)
        self._place = int(place[0])
        self._largest = np.zeros(self.count, self._numbers.real)

    @property
    def count(self) -> int:
        """How many oscillators."""
        return self._coeffs.size

    @property
    def largest(self) -> Reals:
        """The largest \\|u\\| of each oscillator at the samples since the start."""
        return self._largest.reshape(self.shape).copy()

    @property
    def stopped(self) -> int:
        """How many oscillators have overflowed."""
        return int(self._numbers.call("bank_stopped", self._place, None))

    @property
    def state(self) -> NDArray[np.void]:
        """States at the present sample: fields u, v, p and p_before, and in single precision u_low and v_low.

        All have the same p and p_before. Setting states starts stopped oscillators anew.
        """
        states = np.zeros(self.count, self._numbers.state)
        _library.check(self._numbers.call("bank_get", self._place, _library.address(states)))
        return states.reshape(self.shape)

    @state.setter
    def state(self, states: NDArray[np.void]) -> None:
        if getattr(states, "dtype", None) != self._numbers.state or states.shape != self.shape:
            raise TypeError(f"state: an array of the bank's own type and shape {self.shape} is needed")
        plain = np.ascontiguousarray(states)
        status = self._numbers.call("bank_set", self._place, _library.address(plain))
        _library.check(status, different="state")

    @property
    def provenance(self) -> Dict[str, Any]:
        """Version, edition of the arithmetic, options."""
        return provenance(**self._options)

    def start(self, sample: float = 0.0) -> None:
        """Starts all at rest under an input that is `sample` from now on."""
        status = self._numbers.call("bank_start", self._place, _arrays.double(sample, "sample"))
        _library.check(status, sample="sample")
        self._largest[:] = 0

    def run(self, samples: ArrayLike, histories: Optional[Sequence[int]] = None) -> Optional[Histories]:
        """The next samples, one step each.

        Parameters
        ----------
        samples : array_like, shape (n,)
            One sample is a live step.
        histories : sequence of int, optional
            Numbers of oscillators whose full histories are wanted.

        Returns
        -------
        Histories or None
            Of shape (k, n) for k chosen oscillators; NaN from where one overflows.
        """
        real = self._numbers.real
        block = _arrays.records(np.atleast_1d(_arrays.reals(samples, "samples", real)), "samples", real)
        if block.ndim != 1:
            raise ValueError(f"samples: shape {block.shape}, where one axis is needed")
        largest = self._largest.copy()
        wanted = np.zeros(1, _library.BANK_WANTED)
        wanted["size"] = wanted.itemsize
        wanted["largest"] = _library.address(largest)
        chosen = self._chosen(histories)
        kept = Histories(*(np.full((chosen.size, block.size), np.nan, self._numbers.real) for _ in Histories._fields))
        if chosen.size > 0:
            wanted["chosen_count"] = chosen.size
            wanted["chosen"] = _library.address(chosen)
            for field, history in zip(("u", "v", "a", "total"), kept):
                wanted["history"][field] = _library.address(history)
        bad = np.zeros(1, np.uintp)
        places = [_library.address(array) for array in (block, wanted, bad)]
        status = self._numbers.call("bank_run", self._place, block.size, *places)
        if status != _library.OVERFLOW:
            _library.check(status, f"at sample {bad[0]}", sample="samples")
        self._largest = largest
        return kept if histories is not None else None

    def _chosen(self, histories: Optional[Sequence[int]]) -> NDArray[np.uintp]:
        numbers = np.asarray([] if histories is None else histories)
        if numbers.ndim != 1 or (numbers.size > 0 and numbers.dtype.kind not in "iu"):
            raise TypeError("histories: a sequence of numbers of oscillators is needed")
        if np.any(numbers < 0) or np.any(numbers >= self.count) or np.unique(numbers).size != numbers.size:
            raise ValueError(f"histories: different numbers from 0 to {self.count - 1} are needed")
        return numbers.astype(np.uintp)

    def read(self) -> Histories:
        """All at the present sample, each of the bank's shape; accelerations of stopped oscillators are NaN."""
        now = Histories(*(np.zeros(self.count, self._numbers.real) for _ in Histories._fields))
        out = np.zeros(1, _library.HISTORY)
        for field, values in zip(("u", "v", "a", "total"), now):
            out[field] = _library.address(values)
        _library.check(self._numbers.call("bank_read", self._place, _library.address(out)))
        return Histories(*(values.reshape(self.shape) for values in now))

    def retune(self, number: int, system: System) -> None:
        """Gives an oscillator another system; its displacement and velocity stay."""
        options = {key: self._options[key] for key in ("input", "between", "precision")}
        made = coefficients(system, self._options["dt"], **options)
        if made.size != 1 or not 0 <= number < self.count:
            raise ValueError(f"number: one system and a number from 0 to {self.count - 1} are needed")
        _library.check(self._numbers.call("bank_retune", self._place, int(number), _library.address(made)))
        self._coeffs[number] = made.reshape(-1)[0]

    def save(self) -> bytes:
        """Coefficients and states as bytes of the library's own form, which C reads too; `largest` is not in them."""
        return _library.saved("bank", self._place, self._numbers.suffix)

    def resume(self, saved: bytes) -> None:
        """Goes on where `save` was called on a bank of as many oscillators, with the same dt, input and between."""
        _library.resume("bank", self._place, saved, self._numbers.suffix)

    def __getstate__(self) -> Dict[str, Any]:
        return {
            "coeffs": self._coeffs.reshape(self.shape),
            "options": self._options,
            "instructions": self._chosen_instructions,
            "saved": self.save(),
            "largest": self._largest,
        }

    def __setstate__(self, held: Dict[str, Any]) -> None:
        self._make(held["coeffs"], held["instructions"], held["options"])
        self.resume(held["saved"])
        self._largest = held["largest"]
