"""Many records of unequal length in one call."""

from __future__ import annotations

import dataclasses
from typing import Any, Callable, Dict, Generic, Hashable, Mapping, Sequence, Tuple, TypeVar, Union

from ._work import spread

Result = TypeVar("Result")


@dataclasses.dataclass(frozen=True)
class Outcomes(Generic[Result]):
    """What came of each record.

    Attributes
    ----------
    results : dict
        By the record's key (its number in a list): the result, where there is one.
    errors : dict
        By the record's key: the exception of each that was refused.
    """

    results: Dict[Hashable, Result]
    errors: Dict[Hashable, Exception]


def for_each(
    function: Callable[..., Result],
    records: Union[Sequence[Any], Mapping[Any, Any]],
    dt: Any,
    *,
    threads: int = 1,
    progress: bool = False,
    **options: Any,
) -> Outcomes[Result]:
    """Calls a function for each of many records; a bad one is reported and does not stop the rest.

    Parameters
    ----------
    function : callable
        `respond`, `response_spectrum`, or any function that is called as ``function(record, dt, **options)``.
    records : sequence or mapping of array_like
        Records of any lengths.
    dt : float, sequence or mapping
        One interval for all, or one for each record.
    threads : int
        Records are spread over so many threads; the bits stay the same.
    progress : bool
        Shows a bar of progress where tqdm is installed.
    **options
        Handed on.

    Returns
    -------
    Outcomes
        ``results`` and ``errors``, by number or key.

    Examples
    --------
    >>> import rampwise
    >>> outcomes = rampwise.for_each(rampwise.response_spectrum, [[0, 1, 2], [0, float("nan")]], dt=0.01, period=0.5)
    >>> list(outcomes.results), outcomes.errors
    ([0], {1: ValueError('record: A sample is not a finite number (at sample 1)')})
    """
    keyed = dict(records) if isinstance(records, Mapping) else dict(enumerate(records))
    intervals = _for_keys(dt, keyed)

    def work(key: Hashable) -> Tuple[Any, Any]:
        try:
            return function(keyed[key], intervals[key], **options), None
        except (ValueError, TypeError, MemoryError) as error:
            return None, error

    outcomes = dict(zip(keyed, spread(work, list(keyed), threads, progress)))
    return Outcomes(
        {key: result for key, (result, error) in outcomes.items() if error is None},
        {key: error for key, (_, error) in outcomes.items() if error is not None},
    )


def _for_keys(dt: Any, keyed: Mapping[Any, Any]) -> Dict[Hashable, Any]:
    if isinstance(dt, Mapping):
        missing = [key for key in keyed if key not in dt]
        if missing:
            raise ValueError(f"dt: there is none for record {missing[0]!r}")
        return dict(dt)
    if getattr(dt, "ndim", 0) == 0 and not isinstance(dt, Sequence):
        return dict.fromkeys(keyed, dt)
    if len(dt) != len(keyed):
        raise ValueError(f"dt: {len(dt)} intervals for {len(keyed)} records")
    return dict(zip(keyed, dt))
