"""A structure's oscillators under records and live data, with equipment."""

from __future__ import annotations

import dataclasses
from typing import Any, Dict, NamedTuple, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._provenance import Result, provenance
from .bank import Histories
from .peaks import Part, Peaks, part_number
from .system import Between, System, coefficients

_FASTEST = _library.constant("FASTEST")
_DISPLACEMENT, _TOTAL_ACCELERATION = _library.constant("DISPLACEMENT"), _library.constant("TOTAL_ACCELERATION")


class Equipment(NamedTuple):
    """Light equipment on a point of a structure, which does not feel it.

    Attributes
    ----------
    on : str
        Name of the output that is the total acceleration of the point.
    system : System
        One oscillator or, of any shape, many.
    """

    on: str
    system: System


class Oscillators(NamedTuple):
    """A structure as oscillators under forces: the arrays of the library's plan, and where they begin."""

    system: System  # (modes,)
    load: Doubles  # (modes, inputs)
    on_displacement: Doubles  # (modes, outputs)
    on_velocity: Doubles
    on_acceleration: Doubles
    on_input: Doubles  # (inputs, outputs)
    begin: Doubles  # (2, modes): displacements, velocities at sample 0

    def plan(self, coeffs: NDArray[np.void]) -> NDArray[np.void]:
        """The library's struct; it holds while this tuple and the coefficients live."""
        plan = np.zeros(1, _library.MODES_PLAN)
        _library.call("modes_plan_init", _library.address(plan))
        plan["modes"], plan["inputs"] = self.load.shape
        plan["outputs"] = self.on_input.shape[1]
        plan["c"] = _library.address(coeffs)
        for name in self._fields[1:-1]:
            array = getattr(self, name)
            if array.any() or name == "load":  # weights that are all zero would cost a sample as much as others
                plan[name] = _library.address(array)
        return plan


class StructureBlock(NamedTuple):
    """What samples gave.

    Attributes
    ----------
    values : ndarray, shape (n, outputs)
        The outputs at each sample.
    equipment : dict of Histories
        By the names of the equipment: motion relative to its point, and the total acceleration, of shape
        ``(n,) + system.shape``. Empty where it was not asked for.
    """

    values: Doubles
    equipment: Dict[str, Histories]


@dataclasses.dataclass(frozen=True, eq=False)
class StructureResponse(Result):
    """Histories and true peaks of a structure's outputs under a record; ``response["roof"]`` is one history.

    Attributes
    ----------
    time : ndarray, shape (n,)
        Times of the samples.
    outputs : tuple of str
        Names of the outputs.
    values : ndarray, shape (n, outputs)
        Their histories.
    peaks : dict of Peaks
        By the names of the outputs: true between the samples. Empty where they were not asked for.
    equipment : dict of Histories
        By the names of the equipment, of shape ``(n,) + system.shape``.
    equipment_displacement, equipment_acceleration : dict of Peaks
        Of the stretch between point and equipment, and of its total acceleration; of the shape of its system.
    provenance : dict
        Version, edition of the arithmetic, options.
    """

    time: Doubles
    outputs: Tuple[str, ...]
    values: Doubles
    peaks: Dict[str, Peaks]
    equipment: Dict[str, Histories]
    equipment_displacement: Dict[str, Peaks]
    equipment_acceleration: Dict[str, Peaks]
    provenance: Dict[str, Any]

    def __getitem__(self, name: str) -> Doubles:
        """The history of one output, shape (n,)."""
        if name not in self.outputs:
            raise KeyError(f"{name!r} is none of the outputs {', '.join(map(repr, self.outputs))}")
        return self.values[:, self.outputs.index(name)]


class LiveStructure:
    """A structure on samples as they come, made by `Structure.live`.

    Sample 0 is the first. However a record is cut into blocks, the bits are the same. It belongs to one thread at a
    time; it can be pickled, and goes on where it was with the same bits.
    """

    def __init__(
        self,
        oscillators: Oscillators,
        dt: float,
        outputs: Tuple[str, ...],
        between: Between,
        peaks: bool,
        equipment: Dict[str, Equipment],
    ) -> None:
        if not np.isfinite(oscillators.begin).all():
            _library.check(_library.constant("ERROR_STATE"), state="displacement, velocity")
        made = coefficients(oscillators.system, _arrays.double(dt, "dt"), input="force", between=between)
        options = {"dt": float(dt), "between": between, "peaks": bool(peaks), "outputs": list(outputs)}
        self._make(oscillators, made, options, equipment)

    def _make(
        self,
        oscillators: Oscillators,
        made: NDArray[np.void],
        options: Dict[str, Any],
        equipment: Dict[str, Equipment],
    ) -> None:
        self._oscillators, self._coeffs, self._options, self._equipment = oscillators, made, options, equipment
        self._started = False
        outputs, pieces = options["outputs"], equipment.values()
        systems = np.concatenate([np.zeros(0, _library.SYSTEM)] + [_structs(piece.system) for piece in pieces])
        points = np.concatenate([np.zeros(0, np.uintp)] + [
            np.full(piece.system.mass.size, outputs.index(piece.on), np.uintp) for piece in pieces
        ])  # fmt: skip
        self._points = points
        plan = oscillators.plan(made)
        plan["peaks"], plan["instructions"] = options["peaks"], _FASTEST
        plan["equipment_count"] = points.size
        plan["equipment"], plan["point"] = _library.address(systems), _library.address(points)
        size = _library.call("modes_size", _library.address(plan))
        self._memory = _arrays.aligned(size, _library.call("modes_alignment"))
        place = np.zeros(1, np.uintp)
        status = _library.call("modes_init", _library.address(self._memory), size, _library.address(plan),
                               _library.address(place))  # fmt: skip
        _library.check(status, count="outputs")
        self._at = int(place[0])

    @property
    def outputs(self) -> Tuple[str, ...]:
        """Names of the outputs."""
        return tuple(self._options["outputs"])

    @property
    def provenance(self) -> Dict[str, Any]:
        """Version, edition of the arithmetic, options."""
        return provenance(**self._options)

    def start(self) -> None:
        """Begins anew under the next sample, which is sample 0: at rest, or as `Structure.live` was told."""
        self._started = False

    def put(self, samples: ArrayLike, *, equipment_histories: bool = False) -> StructureBlock:
        """The next samples.

        Parameters
        ----------
        samples : array_like, shape (n,) or (n, inputs)
            Instants along the first axis; (n,) where there is one input.
        equipment_histories : bool
            Whether the motion of the equipment is wanted.

        Returns
        -------
        StructureBlock

        Raises
        ------
        ValueError
            A sample is not finite: nothing was taken. An output or a mode overflows: the samples before it were taken.
        """
        block = self._frames(samples)
        values = np.zeros((len(block), len(self.outputs)))
        histories = self._room(len(block)) if equipment_histories else None
        first = 0 if self._started else 1
        if first:
            self._begin(block, values, histories)
        bad = np.zeros(1, np.uintp)
        out = np.zeros(1, _library.HISTORY)
        for field, history in zip(("u", "v", "a", "total"), histories or ()):
            out[field] = _library.address(history[first:])
        status = _library.call("equipment_run", self._at, len(block) - first, _library.address(block[first:]),
                               _library.address(values[first:]), _library.address(out) if histories else None,
                               _library.address(bad))  # fmt: skip
        _library.check(status, f"at sample {first + int(bad[0])} of this block", sample="samples", overflow="samples")
        return StructureBlock(values, self._split(histories) if histories else {})

    def _frames(self, samples: ArrayLike) -> Doubles:
        given = _arrays.doubles(samples, "samples")
        inputs = self._oscillators.load.shape[1]
        block = given[:, np.newaxis] if given.ndim == 1 and inputs == 1 else given
        if block.ndim != 2 or block.shape[1] != inputs:
            raise ValueError(f"samples: shape {given.shape}, where {'(n,) or ' * (inputs == 1)}(n, {inputs}) is needed")
        if len(block) == 0:
            raise ValueError("samples: there are no samples")
        return np.asarray(_arrays.in_order(block))

    def _room(self, samples: int) -> Histories:
        return Histories(*(np.zeros((samples, self._points.size)) for _ in Histories._fields))

    def _begin(self, block: Doubles, values: Doubles, histories: Optional[Histories]) -> None:
        """Sample 0. The whole block is looked at first, so that a bad one has changed nothing."""
        wrong = np.flatnonzero(~np.isfinite(block).all(axis=1))
        if wrong.size > 0:
            status = _library.constant("ERROR_SAMPLE")
            _library.check(status, f"at sample {wrong[0]} of this block", sample="samples")
        places = [_library.address(array) for array in (*self._oscillators.begin, block)]
        status = _library.call("modes_set", self._at, *places)
        _library.check(status, "at sample 0 of this block", overflow="samples")
        _library.check(_library.call("modes_read", self._at, _library.address(values)))
        if histories is not None:  # at rest against its point
            histories.acceleration[0] = -values[0][self._points]
        self._started = True

    def _split(self, flat: Histories) -> Dict[str, Histories]:
        """Histories of all pieces, by the names of the equipment."""
        found, first = {}, 0
        for name, piece in self._equipment.items():
            last = first + piece.system.mass.size
            found[name] = Histories(*(
                history[:, first:last].reshape(history.shape[:1] + piece.system.shape) for history in flat
            ))  # fmt: skip
            first = last
        return found

    def peaks(self, part: Part = "primary", *, samples: int = 100_000) -> Dict[str, Peaks]:
        """The peaks of the outputs, true between the samples, by name; the structure goes on unchanged.

        Parameters
        ----------
        part : {'primary', 'residual', 'maximax'}
            From sample 0 to the present, in the free motion from here on under zero input, or both. Under 'hold' put a
            zero first where the last sample is to act for its dt.
        samples : int
            How many steps of the free motion are looked at, at most: it ends where nothing later can exceed the peaks.
            ``Peaks.later`` tells what any later value can come to.
        """
        flat = self._parts("modes", (), len(self.outputs), part, samples)
        return {name: flat._at(i) for i, name in enumerate(self.outputs)}

    def equipment_displacement(self, part: Part = "primary", *, samples: int = 100_000) -> Dict[str, Peaks]:
        """Peaks of the stretch between point and equipment, by name, of the shape of each system.

        Parameters
        ----------
        part, samples
            As in `peaks`. Undamped equipment on an undamped mode of its own frequency grows for ever: its residual
            is infinite.
        """
        return self._equipment_peaks(_DISPLACEMENT, part, samples)

    def equipment_acceleration(self, part: Part = "primary", *, samples: int = 100_000) -> Dict[str, Peaks]:
        """Peaks of the total acceleration of equipment, by name, of the shape of each system.

        Parameters
        ----------
        part, samples
            As in `equipment_displacement`.
        """
        return self._equipment_peaks(_TOTAL_ACCELERATION, part, samples)

    def _equipment_peaks(self, quantity: int, part: Part, samples: int) -> Dict[str, Peaks]:
        count, first = self._points.size, 0
        found: Dict[str, Peaks] = {}
        if count > 0:
            flat = self._parts("equipment", (quantity,), count, part, samples)
        for name, piece in self._equipment.items():
            last = first + piece.system.mass.size
            found[name] = flat._at(slice(first, last), piece.system.shape)
            first = last
        return found

    def _parts(self, of: str, quantity: Tuple[int, ...], count: int, part: Part, samples: int) -> Peaks:
        """Flat peaks of the outputs ('modes') or of a quantity of the equipment."""
        part_number(part)
        steps = _arrays.whole(samples, "samples", 0)
        found, later, parts = np.zeros(count, _library.PEAK), np.zeros(count), []
        if part != "residual":
            status = self._fed(f"{of}_peaks", *quantity, _library.address(found))
            _library.check(status, quantity="peaks")
            parts.append(Peaks._read(found, self._options["dt"], None))
        if part != "primary":
            status = self._fed(f"{of}_residual", *quantity, steps, _library.address(found), _library.address(later))
            _library.check(status, quantity="peaks")
            parts.append(dataclasses.replace(Peaks._read(found, self._options["dt"], None), later=later))
        return parts[0] if len(parts) == 1 else parts[0]._then(parts[1])

    def _fed(self, name: str, *arguments: Any) -> int:
        self._need_samples()
        return int(_library.call(name, self._at, *arguments))

    def _need_samples(self) -> None:
        if not self._started:
            raise ValueError("samples: none was put yet")

    def save(self) -> bytes:
        """State and peaks as bytes of the library's own form, after a sample at least."""
        self._need_samples()
        return _library.saved("modes", self._at)

    def resume(self, saved: bytes) -> None:
        """Goes on where `save` was called on a structure with the same outputs and equipment."""
        _library.resume("modes", self._at, saved)
        self._started = True

    def __getstate__(self) -> Dict[str, Any]:
        return {"oscillators": self._oscillators, "coeffs": self._coeffs, "options": self._options,
                "equipment": self._equipment, "saved": self.save() if self._started else None}  # fmt: skip

    def __setstate__(self, held: Dict[str, Any]) -> None:
        self._make(held["oscillators"], held["coeffs"], held["options"], held["equipment"])
        if held["saved"] is not None:
            self.resume(held["saved"])


def _structs(system: System) -> NDArray[np.void]:
    """The library's structs of systems, flat."""
    structs = np.zeros(system.mass.size, _library.SYSTEM)
    for field in ("mass", "damper", "stiffness"):
        structs[field] = getattr(system, field).reshape(-1)
    return structs
