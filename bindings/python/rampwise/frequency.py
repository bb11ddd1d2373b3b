"""How a sampled oscillator answers a steady tone, beside the continuous one."""

from __future__ import annotations

from typing import NamedTuple, Optional

import numpy as np
from numpy.typing import ArrayLike

from . import _library
from ._arrays import Doubles
from ._output import Output, output_struct
from .system import Between, Input, System, coefficients, one_of


class FrequencyResponse(NamedTuple):
    """Gain and phase of an output, of shape ``system.shape + omega.shape``.

    Attributes
    ----------
    omega : ndarray
        Circular frequencies of the tones.
    gain, phase : ndarray
        Output per input at the samples, and by how much it leads, in (-pi, pi] radians.
    continuous_gain, continuous_phase : ndarray
        The same for a tone that is not sampled.
    """

    omega: Doubles
    gain: Doubles
    phase: Doubles
    continuous_gain: Doubles
    continuous_phase: Doubles


def frequency_response(
    system: System,
    dt: float,
    *,
    input: Input,
    output: Output = "displacement",
    frequency: Optional[ArrayLike] = None,
    omega: Optional[ArrayLike] = None,
    between: Between = "ramp",
) -> FrequencyResponse:
    """Gain and phase under an endless tone, as it is taken between its samples, and of the continuous oscillator.

    Parameters
    ----------
    system : System
        Oscillators of any shape; a steady answer needs damping.
    dt : float
        Interval between samples.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are.
    output : str or four weights
        'displacement', 'velocity', 'acceleration', 'total_acceleration', 'spring_force', 'damper_force', 'load', or
        weights over u, v, p and p - p_before.
    frequency, omega : array_like
        Exactly one of them: cycles per unit of time, or circular frequencies, 0 or more. Above a half of 1/dt the
        samples see an alias.
    between : {'ramp', 'hold'}
        A ramp adds no delay, a held input dt/2.

    Returns
    -------
    FrequencyResponse

    Examples
    --------
    A tone of ten samples a cycle loses sinc^2(1/10), 3.2 %, and no phase: what differs besides is its images.

    >>> import rampwise
    >>> system = rampwise.System.natural(frequency=1.0, damping=0.05)
    >>> tone = rampwise.frequency_response(system, 0.1, input="force", frequency=1.0)
    >>> round(float(tone.gain / tone.continuous_gain), 3), bool(abs(tone.phase - tone.continuous_phase) < 2e-3)
    (0.968, True)
    """
    name, given = one_of(frequency=frequency, omega=omega)
    circular = np.asarray(2 * np.pi * given if name == "frequency" else given)
    made = coefficients(system, dt, input=input, between=between)
    _, struct = output_struct(output, "output")
    found = np.zeros((2, made.size, circular.size), _library.RESPONSE)
    for i, coeffs in enumerate(_library.addresses(made).tolist()):
        for j, tone in enumerate(circular.reshape(-1).tolist()):
            places = [_library.address(found[side, i, j, ...]) for side in range(2)]
            status = _library.call("frequency_response", coeffs, _library.address(struct), tone, *places)
            _library.check(status, f"{tone:g}", frequency=name, overflow=name, coefficient="output", quantity="output")
    sampled, continuous = found.reshape((2,) + made.shape + circular.shape)
    return FrequencyResponse(circular, sampled["gain"].copy(), sampled["phase"].copy(), continuous["gain"].copy(),
                             continuous["phase"].copy())  # fmt: skip
