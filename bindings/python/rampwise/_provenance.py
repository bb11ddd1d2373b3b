"""Where a result comes from, and results as plain dictionaries."""

from __future__ import annotations

import dataclasses
from typing import Any, ClassVar, Dict, Tuple

import numpy as np

from . import _library


def provenance(**options: Any) -> Dict[str, Any]:
    """What a result needs to be made again: stored results of equal edition compare bit for bit."""
    return {
        "library": "rampwise",
        "version": _library.library_version,
        "arithmetic_edition": _library.arithmetic_edition,
        "options": options,
    }


def plain(value: Any) -> Any:
    """Dictionaries, lists, numbers and texts only, as json.dumps takes them."""
    if dataclasses.is_dataclass(value):
        return {field.name: plain(getattr(value, field.name)) for field in dataclasses.fields(value)}
    if isinstance(value, np.ndarray):
        names = value.dtype.names
        return {name: plain(value[name]) for name in names} if names else value.tolist()
    if isinstance(value, np.generic):
        return value.item()
    if isinstance(value, dict):
        return {key: plain(item) for key, item in value.items()}
    if isinstance(value, (list, tuple)):
        return [plain(item) for item in value]
    return value


class Result:
    """A result as dictionaries, with what is derived from its fields."""

    _derived: ClassVar[Tuple[str, ...]] = ()

    def to_dict(self) -> Dict[str, Any]:
        """Everything as plain dictionaries, lists, numbers and texts, as ``json.dumps`` takes them."""
        result: Dict[str, Any] = plain(self)
        result.update((name, plain(getattr(self, name))) for name in self._derived)
        return result
