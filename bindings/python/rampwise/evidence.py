"""What the sampling of a smooth load has cost, for whole histories."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from . import _arrays, _library
from ._arrays import Doubles


def evidence_input(record: ArrayLike) -> Doubles:
    """A record whose response is the estimated error of the response to `record`.

    A straight line between samples cuts the corners of a smooth load by a twelfth of the second difference of the
    samples on average. The response to that, of the same system from rest, estimates by how much the response to the
    record is too large.

    Parameters
    ----------
    record : array_like, shape (..., n)
        Samples of a smooth load at equal intervals, along the last axis.

    Returns
    -------
    ndarray, shape (..., n)
        In the unit of the record; 0 at the first and the last sample.

    Notes
    -----
    The estimate holds for displacement and, under a force or base acceleration, for velocity and base acceleration's
    total acceleration; where the record neither starts nor stops abruptly; and for input straight between samples. It
    sees neither aliasing nor earlier resampling. For peaks, `response_spectrum` has it as ``evidence=True``.

    Examples
    --------
    Ten samples a cycle of a load swelling and fading: half of the error is taken away at least.

    >>> import numpy, rampwise
    >>> def load(step):
    ...     t = numpy.arange(0, 20 + step / 2, step)
    ...     return numpy.sin(numpy.pi * t / 20) ** 4 * numpy.sin(2 * numpy.pi * t)
    >>> def displacement(record, step):
    ...     return rampwise.respond(record, step, input="force", period=0.8, damping=0.05).displacement
    >>> true, coarse = displacement(load(0.1 / 64), 0.1 / 64)[::64], displacement(load(0.1), 0.1)
    >>> corrected = coarse - displacement(rampwise.evidence_input(load(0.1)), 0.1)
    >>> bool(abs(corrected - true).max() < 0.5 * abs(coarse - true).max())
    True
    """
    samples = _arrays.records(record, "record")
    found, bad = np.zeros(samples.shape), np.zeros(1, np.uintp)
    rows = zip(_library.addresses(samples[..., 0]).tolist(), _library.addresses(found[..., 0]).tolist())
    for row, (given, put) in enumerate(rows):
        status = _library.call("evidence_input", samples.shape[-1], given, put, _library.address(bad))
        index = [int(i) for i in np.unravel_index(row, samples.shape[:-1])]
        _library.check(status, f"at sample {bad[0]}" + (f" of record {index}" if index else ""))
    return found
