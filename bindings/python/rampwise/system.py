"""Spring-mass-damper systems, and the coefficients of their steps."""

from __future__ import annotations

import dataclasses
from typing import Any, Literal, Optional, Tuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._precision import Precision, arithmetic

Input = Literal["force", "base acceleration", "base velocity", "base displacement"]
Between = Literal["ramp", "hold"]

_INPUTS = ("force", "base acceleration", "base velocity", "base displacement")
_BETWEENS = ("ramp", "hold")
_MAKERS = {"period": "system_period", "frequency": "system_hertz", "omega": "system_natural"}
LARGEST_DAMPING = 2.0


def choice(value: Any, choices: Tuple[str, ...], name: str) -> int:
    """The library's number for one of several words."""
    if value not in choices:
        words = ", ".join(repr(word) for word in choices)
        raise ValueError(f"{name}: {value!r} is none of {words}")
    return _library.constant(str(value).upper().replace(" ", "_"))


def kinds(input: str, between: str) -> Tuple[int, int]:
    """The library's numbers for what the samples are and what happens between them."""
    return choice(input, _INPUTS, "input"), choice(between, _BETWEENS, "between")


def one_of(**values: Optional[ArrayLike]) -> Tuple[str, Doubles]:
    """The one value that was given, with its name."""
    given = {name: value for name, value in values.items() if value is not None}
    if len(given) != 1:
        got = " and ".join(given) if given else "none"
        raise TypeError(f"exactly one of {', '.join(values)} is needed by name; got {got}")
    ((name, value),) = given.items()
    return name, _arrays.doubles(value, name)


def damping_ratio(damping: ArrayLike, allow_strong_damping: Optional[bool] = None) -> Doubles:
    """Damping as a ratio; refused where it looks like per cent. None: the caller has no such option."""
    ratio = _arrays.doubles(damping, "damping")
    if not allow_strong_damping and (ratio > LARGEST_DAMPING).any():
        raise ValueError(
            f"damping: {ratio.max():g} is above {LARGEST_DAMPING:g}; it is the ratio to critical damping, not per "
            "cent (5 % is 0.05)"
            + (". If it is meant, pass allow_strong_damping=True" if allow_strong_damping is not None else "")
        )
    return ratio


@dataclasses.dataclass(frozen=True, eq=False)
class System:
    """One or many systems m u'' + c u' + k u = p(t).

    Units are the caller's, any consistent set: with masses in kg, lengths in m and times in s, forces are in N.

    Parameters
    ----------
    mass, damper, stiffness : array_like
        m above 0; c and k any finite number: k = 0 is a free mass, k < 0 an unstable one. Shapes are broadcast.

    Attributes
    ----------
    shape : tuple of int
        The common shape; ``()`` for one system.

    See Also
    --------
    System.natural : by period, frequency or circular frequency, and damping ratio.

    Examples
    --------
    >>> import rampwise
    >>> rampwise.System(mass=2.0, damper=0.0, stiffness=[8.0, 18.0]).omega
    array([2., 3.])
    """

    mass: Doubles
    damper: Doubles
    stiffness: Doubles

    def __init__(self, mass: ArrayLike, damper: ArrayLike, stiffness: ArrayLike) -> None:
        values = {"mass": mass, "damper": damper, "stiffness": stiffness}
        arrays = {name: _arrays.doubles(value, name) for name, value in values.items()}
        shape = _arrays.broadcast(arrays["mass"].shape, arrays["damper"].shape, "mass and damper")
        shape = _arrays.broadcast(shape, arrays["stiffness"].shape, "stiffness")
        for name, array in arrays.items():
            object.__setattr__(self, name, _arrays.to_shape(array, shape))
        if not (np.isfinite(self.mass) & (self.mass > 0)).all():
            _library.check(_library.constant("ERROR_MASS"))
        if not np.isfinite(self.damper).all():
            _library.check(_library.constant("ERROR_DAMPER"))
        if not np.isfinite(self.stiffness).all():
            _library.check(_library.constant("ERROR_STIFFNESS"))

    @classmethod
    def natural(
        cls,
        *,
        period: Optional[ArrayLike] = None,
        frequency: Optional[ArrayLike] = None,
        omega: Optional[ArrayLike] = None,
        damping: ArrayLike,
        mass: ArrayLike = 1.0,
        allow_strong_damping: bool = False,
    ) -> "System":
        """Systems by their natural vibration.

        Parameters
        ----------
        period, frequency, omega : array_like
            Exactly one of them: the undamped natural period (unit of time), frequency (cycles per unit of time) or
            circular frequency (rad per unit of time).
        damping : array_like
            Ratio to critical damping: 0.05 is 5 %. Above 2 it is refused unless `allow_strong_damping`.
        mass : array_like
            The masses. Everything is multiplied by them.
        allow_strong_damping : bool
            Takes damping ratios above 2.

        Returns
        -------
        System
            Of the shape that frequency, damping and mass have in common. Of unit mass, damper = 2 damping omega and
            stiffness = omega^2 are correctly rounded, with 2 pi carried to twice the digits of a double.

        Examples
        --------
        >>> import rampwise
        >>> rampwise.System.natural(period=[[0.5], [1.0]], damping=[0.02, 0.05, 0.1]).shape
        (2, 3)
        """
        name, given = one_of(period=period, frequency=frequency, omega=omega)
        ratio = damping_ratio(damping, allow_strong_damping)
        shape = _arrays.broadcast(given.shape, ratio.shape, f"{name} and damping")
        unit = np.zeros(shape, _library.SYSTEM)
        pairs = zip(*(_arrays.to_shape(array, shape).reshape(-1).tolist() for array in (given, ratio)))
        for place, (value, zeta) in zip(_library.addresses(unit).tolist(), pairs):
            status = _library.call(_MAKERS[name], place, value, zeta)
            if status != 0:
                _library.check(status, f"{value:g}", frequency=name, damper="damping")
        size = _arrays.doubles(mass, "mass")
        _arrays.broadcast(shape, size.shape, "mass")
        return cls(unit["mass"] * size, unit["damper"] * size, unit["stiffness"] * size)

    @property
    def shape(self) -> Tuple[int, ...]:
        """The common shape of mass, damper and stiffness."""
        return self.mass.shape

    @property
    def omega(self) -> Doubles:
        """Undamped natural circular frequency sqrt(k/m); NaN where the stiffness is negative."""
        with np.errstate(invalid="ignore"):
            return np.asarray(np.sqrt(self.stiffness / self.mass))

    @property
    def damping(self) -> Doubles:
        """Ratio to critical damping, c / (2 sqrt(k m)); NaN or infinite without a spring."""
        with np.errstate(invalid="ignore", divide="ignore"):
            return np.asarray(self.damper / (2 * np.sqrt(self.stiffness * self.mass)))


def coefficients(
    system: System, dt: float, *, input: Input, between: Between = "ramp", precision: Precision = "double"
) -> NDArray[np.void]:
    """Everything a step of length dt needs.

    Between two samples the input is a straight line or stays where it was, and the response is known in closed
    form (N. C. Nigam and P. C. Jennings, Bull. Seism. Soc. Am. 59(2), 909-922, 1969)::

        u1 = A  u0 + B  v0 + C  p0 + D  p1
        v1 = Ap u0 + Bp v0 + Cp p0 + Dp p1

    Parameters
    ----------
    system : System
        Of any shape.
    dt : float
        Length of a step, in the system's unit of time.
    input : {'force', 'base acceleration', 'base velocity', 'base displacement'}
        What the samples are. Base acceleration is given as itself, never as -m a.
    between : {'ramp', 'hold'}
        What the input does between samples: a straight line, or constant until the next.
    precision : {'double', 'single'}
        Of the coefficients.

    Returns
    -------
    ndarray
        Structured, of the system's shape, with the fields A, B, C, D, Ap, Bp, Cp, Dp, A_minus_1, Bp_minus_1
        (the increments keep digits that A and Bp have no room for), acceleration and total (rows over u, v, p and the
        input's last change), system, dt. Each coefficient is within 0.6 ulp of its largest value inside the step.
        In single precision each is rounded once, and mass, damper, stiffness and rate stand for system.

    Examples
    --------
    >>> import rampwise
    >>> free = rampwise.System(mass=1.0, damper=0.0, stiffness=0.0)
    >>> float(rampwise.coefficients(free, 2.0, input="force")["Dp"])
    1.0
    """
    if not isinstance(system, System):
        raise TypeError(f"system: a System is needed, not {type(system).__name__}")
    input_number, between_number = kinds(input, between)
    step = _arrays.double(dt, "dt")
    systems = np.empty(system.shape, _library.SYSTEM)
    for field in ("mass", "damper", "stiffness"):
        systems[field] = getattr(system, field)
    numbers = arithmetic(precision)
    made = np.zeros(system.shape, numbers.coeffs)
    places = zip(_library.addresses(made).tolist(), _library.addresses(systems).tolist())
    for i, (place, system_place) in enumerate(places):
        status = numbers.call("coeffs_make", place, system_place, step, input_number, between_number)
        if status != 0:
            _library.check(status, f"entry {i} of system" if made.size > 1 else "")
    return made
