"""Structures from their matrices: modes, participation, outputs, records. Needs SciPy for its eigenvalue solvers."""

from __future__ import annotations

import dataclasses
from typing import Dict, Mapping, NamedTuple, Optional, Tuple, Union

import numpy as np
from numpy.typing import ArrayLike, NDArray

from . import _arrays, _library
from ._arrays import Doubles
from ._eigenvalues import damped_roots, matrix, modes_of, turned, zero_within
from .live_structure import Equipment, LiveStructure, Oscillators, StructureResponse
from .peaks import Part, part_number
from .system import Between, System, coefficients, damping_ratio


def rayleigh_damper(
    mass: ArrayLike, stiffness: ArrayLike, *, omega: Tuple[float, float], damping: Union[float, Tuple[float, float]]
) -> Doubles:
    """The damper matrix a M + b K with given damping ratios at two circular frequencies.

    Parameters
    ----------
    mass, stiffness : array_like, shape (n, n) or (n,)
        M and K; a list is a diagonal.
    omega : two floats
        Circular frequencies (rad per unit of time), above 0 and different.
    damping : float or two floats
        Ratios to critical damping at them: a/(2 omega) + b omega/2.

    Returns
    -------
    ndarray, shape (n, n)

    Notes
    -----
    Lord Rayleigh, The Theory of Sound, 1877. Between the two the modes have less damping, beyond them more.

    Examples
    --------
    >>> import rampwise
    >>> damper = rampwise.rayleigh_damper([1.0, 1.0], [4.0, 9.0], omega=(2.0, 3.0), damping=0.1)
    >>> damper.diagonal().round(12)
    array([0.4, 0.6])
    """
    m, k = matrix(mass, "mass"), matrix(stiffness, "stiffness")
    ratios = damping_ratio(np.broadcast_to(_arrays.doubles(damping, "damping"), (2,)))
    first, second = (_arrays.double(value, "omega") for value in omega)
    if not (0 < first < np.inf and 0 < second < np.inf and first != second):
        raise ValueError("omega: two different frequencies above 0 are needed")
    a, b = np.linalg.solve([[1 / (2 * first), first / 2], [1 / (2 * second), second / 2]], ratios)
    return np.asarray(a * m + b * k)


def modal_damper(mass: ArrayLike, stiffness: ArrayLike, damping: ArrayLike) -> Doubles:
    """The damper matrix with given damping ratios in the undamped modes, to which dampers may be added.

    Parameters
    ----------
    mass, stiffness : array_like, shape (n, n) or (n,)
        M and K; a list is a diagonal.
    damping : array_like, shape () or (n,)
        Ratios to critical damping of all modes, or of each from the slowest on. A rigid body stays undamped.

    Returns
    -------
    ndarray, shape (n, n)
        The sum of 2 zeta omega (M shape) (M shape)' over shapes of unit modal mass.

    Examples
    --------
    >>> import rampwise
    >>> rampwise.modal_damper([1.0, 1.0], [4.0, 9.0], [0.1, 0.5]).diagonal().round(12)
    array([0.4, 3. ])
    """
    m, k = matrix(mass, "mass"), matrix(stiffness, "stiffness")
    squares, shapes = modes_of(m, k)
    loaded = shapes @ m
    return np.asarray(loaded.T * _modal_dampers(squares, damping) @ loaded)


def _modal_dampers(squares: Doubles, damping: ArrayLike) -> Doubles:
    ratio = damping_ratio(damping)
    if ratio.shape not in ((), squares.shape):
        raise ValueError(f"damping: one ratio, or {squares.size}, are needed, not shape {ratio.shape}")
    return np.asarray(2 * _arrays.finite(ratio, "damping") * np.sqrt(squares))


@dataclasses.dataclass(frozen=True, eq=False)
class Row:
    """An output of a structure, as weights; made by methods of `Structure`, and by sums and multiples of rows.

    Attributes
    ----------
    displacement, velocity, acceleration : ndarray, shape (n,)
        On the motion of every degree of freedom.
    input : ndarray, shape (inputs,)
        On the inputs.

    Examples
    --------
    >>> import rampwise
    >>> frame = rampwise.Structure([1.0, 1.0], [[2.0, -1.0], [-1.0, 1.0]], damping=0.05, direction=[1.0, 1.0])
    >>> drift = frame.displacement(1) - frame.displacement(0)
    >>> (100 * drift).displacement
    array([-100.,  100.])
    """

    displacement: Doubles
    velocity: Doubles
    acceleration: Doubles
    input: Doubles

    def _feels_motion(self) -> bool:
        """Whether it weighs displacements or velocities: it is then no acceleration of a point."""
        return bool(self.displacement.any() or self.velocity.any())

    def _parts(self) -> Tuple[Doubles, ...]:
        return self.displacement, self.velocity, self.acceleration, self.input

    def __add__(self, other: "Row") -> "Row":
        return Row(*(np.asarray(a + b) for a, b in zip(self._parts(), other._parts())))

    def __sub__(self, other: "Row") -> "Row":
        return self + -1.0 * other

    def __mul__(self, factor: float) -> "Row":
        return Row(*(np.asarray(factor * part) for part in self._parts()))

    __rmul__ = __mul__


def _pieces(equipment: Mapping[str, Equipment], outputs: Mapping[str, Row]) -> Dict[str, Equipment]:
    """Equipment on accelerations."""
    if not isinstance(equipment, Mapping):
        raise TypeError("equipment: a dictionary of names and Equipment is needed")
    for name, piece in equipment.items():
        if not isinstance(piece, Equipment) or not isinstance(piece.system, System):
            raise TypeError(f"equipment: {name!r} is no Equipment with a System")
        if piece.on not in outputs:
            raise ValueError(f"equipment: {name!r} stands on {piece.on!r}, which is none of the outputs")
        if outputs[piece.on]._feels_motion():
            raise ValueError(f"equipment: {name!r} stands on {piece.on!r}, which is not the total acceleration of a "
                             "point: it weighs displacements or velocities")  # fmt: skip
    return dict(equipment)


class _Rows(NamedTuple):
    """All outputs, an output a row."""

    displacement: Doubles  # (outputs, n)
    velocity: Doubles
    acceleration: Doubles
    input: Doubles  # (outputs, inputs)


def _oscillators_of_roots(
    damper: Doubles, squares: Doubles, load: Doubles, on_displacement: Doubles, on_velocity: Doubles
) -> Tuple[System, Doubles, Doubles, Doubles]:
    """By rampwise_roots_to_modes: oscillators, their loads and weights, from those of bodies of mass 1 [body][...]."""
    found, shapes = damped_roots(squares, damper)
    held = {"mass": np.eye(len(load)), "damper": damper, "root": found, "shape": shapes,
            "force": np.ascontiguousarray(load.T), "on_displacement": np.ascontiguousarray(on_displacement.T),
            "on_velocity": np.ascontiguousarray(on_velocity.T)}  # fmt: skip
    roots = np.zeros(1, _library.ROOTS)
    _library.call("roots_init", _library.address(roots))
    (roots["bodies"], roots["inputs"]), roots["outputs"] = load.shape, on_velocity.shape[1]
    for name, array in held.items():
        roots[name] = _library.address(array)
    modes = _library.call("roots_modes", _library.address(roots))
    systems = np.zeros(modes, _library.SYSTEM)
    made = [np.zeros((modes, given.shape[1])) for given in (load, on_displacement, on_velocity)]
    places = [_library.address(array) for array in (roots, systems, *made)]
    _library.check(_library.call("roots_to_modes", *places), weight="outputs, displacement or velocity")
    return System(systems["mass"], systems["damper"], systems["stiffness"]), made[0], made[1], made[2]


class Structure:
    """M u'' + C u' + K u = sum of force vectors times inputs, with u relative to a moving base.

    Parameters
    ----------
    mass : array_like, shape (n, n) or (n,)
        M, symmetric and positive definite; a list is a diagonal, and matrices of scipy.sparse are taken in full. Units
        are the caller's, any consistent set.
    stiffness : array_like, shape (n, n) or (n,)
        K, symmetric; no omega^2 may be negative. Rigid bodies stay: as many as pivots of K, scaled to a diagonal of 1,
        are within 32 n eps of 0. Stiff supports cost the slow modes no digits, though the little motion of what they
        hold drowns in roundings of the others': sum their forces rather than take the support's. Stiff springs between
        bodies do cost digits where K itself, rounded, no longer holds them: 1e6 times the neighbours' stiffness is
        rigid enough, and where rounding may change the lowest omega^2 by some 1e-6 of it, mostly from 1e9 times on
        (1e13 in a free body), K is refused.
    damper : array_like, shape (n, n) or (n,)
        C, symmetric, of any distribution: one may start from `rayleigh_damper` or `modal_damper`. Exactly one of
        `damper` and `damping` is needed.
    damping : array_like, shape () or (n,)
        Ratios to critical damping of all modes, or of each from the slowest on.
    direction : array_like, shape (n,) or (k, n), optional
        What every degree of freedom does when the base moves by 1 as a rigid body: r of each base acceleration.
    force : array_like, shape (n,) or (k, n), optional
        Forces on the degrees of freedom for a unit of each input. Inputs are the base accelerations in order, then
        these; one at least is needed.

    Attributes
    ----------
    omega : ndarray, shape (n,)
        Circular frequencies of the undamped modes, lowest first; 0 for a rigid body.
    shapes : ndarray, shape (n, n)
        Their shapes, a mode a row, of unit modal mass: ``shapes @ M @ shapes.T`` is 1.
    classical : bool
        Whether C M^-1 K = K M^-1 C to rounding: ``shapes @ C @ shapes.T`` has then nothing beside its diagonal but 32 n
        eps of what it is added up from, after shapes of one frequency were turned to suit. Every mode is then an
        oscillator. If not, pairs of complex or real roots are (A. S. Veletsos and C. E. Ventura, Earthquake
        Engineering and Structural Dynamics 14(2), 217-243, 1986).

    Notes
    -----
    T. K. Caughey and M. E. J. O'Kelly, Journal of Applied Mechanics 32(3), 583-588, 1965, for the condition (from
    memory). A pair of roots that coincide without a shape of their own each is refused: move a damper by 1e-7 of it,
    which changes a response by some 3e-8 of its peak and leaves it 8 digits. Nearer to coincidence more are
    lost; so they are, in the eigenvalue solver, by dampers of many times the critical where damping is not classical.
    Modes come from LAPACK by SciPy, so that their last digits, and those of responses, depend on the platform; the
    response to given modes does not. Their work grows as n^3: on one core 0.5 s for 400 degrees of freedom, 4 s for
    1000. Results support, and never replace, the governing code and a licensed engineer's
    judgement.

    Examples
    --------
    Two storeys of a frame, masses 2 and 1, stiffnesses 2 and 1: omega^2 is 1/2 and 2.

    >>> import numpy, rampwise
    >>> frame = rampwise.Structure([2.0, 1.0], [[3.0, -1.0], [-1.0, 1.0]], damping=0.05, direction=[1.0, 1.0])
    >>> (frame.omega**2).round(12)
    array([0.5, 2. ])
    >>> frame.mass_share(modes=1).round(4)
    array([0.8889])
    >>> ground = numpy.sin(numpy.arange(400) / 10)
    >>> response = frame.respond(ground, dt=0.1, outputs={"roof": frame.total_acceleration(1)})
    >>> bool(response.peaks["roof"].size >= numpy.abs(response["roof"]).max())
    True
    """

    def __init__(
        self,
        mass: ArrayLike,
        stiffness: ArrayLike,
        *,
        damper: Optional[ArrayLike] = None,
        damping: Optional[ArrayLike] = None,
        direction: Optional[ArrayLike] = None,
        force: Optional[ArrayLike] = None,
    ) -> None:
        if (damper is None) == (damping is None):
            raise TypeError("exactly one of damper and damping is needed by name")
        self._mass = matrix(mass, "mass")
        springs = matrix(stiffness, "stiffness")
        self._squares, self.shapes = modes_of(self._mass, springs)
        self.omega: Doubles = np.sqrt(self._squares)
        if damper is not None:
            given = matrix(damper, "damper")
            if given.shape != self._mass.shape:
                raise ValueError(f"damper: shape {given.shape}, where {self._mass.shape} is needed")
            self.shapes = turned(self._squares, self.shapes, springs, given)
            self._modal_damper = self.shapes @ given @ self.shapes.T
            self._zero_damper = zero_within(self.shapes, given)
        elif damping is not None:
            self._modal_damper = np.diag(np.broadcast_to(_modal_dampers(self._squares, damping), self.omega.shape))
            self._zero_damper = np.zeros_like(self._modal_damper)
        beside = self._modal_damper - np.diag(self._modal_damper.diagonal())
        self.classical = bool((np.abs(beside) <= self._zero_damper).all())
        self._direction = self._vectors(direction, "direction")
        if not self._direction.any(axis=1).all():
            raise ValueError("direction: all numbers of a direction are 0, so that nothing moves with the base")
        self._force = np.concatenate((-self._direction @ self._mass, self._vectors(force, "force")))
        if len(self._force) == 0:
            raise TypeError("direction or force is needed by name")

    def _vectors(self, values: Optional[ArrayLike], name: str) -> Doubles:
        """[inputs][n]"""
        n = len(self._mass)
        vectors = np.atleast_2d(_arrays.doubles(np.zeros((0, n)) if values is None else values, name))
        if vectors.ndim != 2 or vectors.shape[1] != n:
            raise ValueError(f"{name}: {n} numbers an input are needed, not shape {vectors.shape}")
        return _arrays.finite(vectors, name)

    @property
    def inputs(self) -> int:
        """How many inputs there are: base accelerations, then forces."""
        return len(self._force)

    @property
    def damping(self) -> Doubles:
        """Damping ratios of the undamped modes, shape (n,), from the diagonal of ``shapes @ C @ shapes.T``.

        Exact for classical damping, else roughly those of `roots`. 0 for an undamped rigid body, infinite for a damped
        one.
        """
        dampers = self._dampers()
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.where(dampers == 0, 0.0, np.asarray(dampers / (2 * self.omega)))

    def _dampers(self) -> Doubles:
        """Of the undamped modes; without roundings of 0, which would be of weight on a rigid body."""
        dampers = self._modal_damper.diagonal()
        return np.where(np.abs(dampers) <= self._zero_damper.diagonal(), 0.0, dampers)

    @property
    def roots(self) -> NDArray[np.complex128]:
        """The 2 n roots of det(root^2 M + root C + K) = 0, in no order: -zeta omega +- i omega_damped of each pair."""
        return damped_roots(self._squares, self._modal_damper)[0]

    @property
    def directions(self) -> int:
        """How many of the inputs are base accelerations."""
        return len(self._direction)

    @property
    def participation(self) -> Doubles:
        """Participation factors shape' M r (modal masses are 1), shape (n, directions)."""
        return np.asarray(self.shapes @ self._mass @ self._direction.T)

    @property
    def effective_mass(self) -> Doubles:
        """Effective modal masses, shape (n, directions): what each mode takes of r' M r."""
        return np.asarray(self.participation**2)

    def mass_share(self, modes: Optional[int] = None) -> Doubles:
        """The share of the mass r' M r of each direction that the first modes take, shape (directions,).

        Codes ask for 0.9 as a rule; see `static_correction` of `live` for what is missing.

        Parameters
        ----------
        modes : int, optional
            How many, from the slowest on; all where not given, whose share is 1.
        """
        directions = len(self._direction)
        share = np.zeros(directions)
        if directions == 0:
            return share
        shapes = self.shapes[: self._count(modes)]
        nothing = np.zeros((len(shapes), 1))
        system = System(1.0, 0.0, self._squares[: len(shapes)])
        load = np.ascontiguousarray(shapes @ self._force[:directions].T)
        weights = (nothing, nothing, nothing, np.zeros((directions, 1)))
        bare = Oscillators(system, load, *weights, begin=np.zeros((2, len(shapes))))
        coeffs = coefficients(system, 1 / (self.omega.max() or 1.0), input="force")  # of any step
        whole = np.einsum("in,nm,im->i", self._direction, self._mass, self._direction)
        places = [_library.address(array) for array in (bare.plan(coeffs), whole, share)]
        _library.check(_library.call("mass_share", *places), mass="direction")
        return share

    def _count(self, modes: Optional[int]) -> int:
        n = len(self.omega)
        count = n if modes is None else _arrays.whole(modes, "modes", 1)
        if count > n:
            raise ValueError(f"modes: there are {n}, not {count}")
        return count

    def _row(self, **parts: Doubles) -> Row:
        n = len(self.omega)
        empty = {name: np.zeros(n) for name in ("displacement", "velocity", "acceleration")}
        return Row(**{**empty, "input": np.zeros(self.inputs), **parts})

    def _at(self, at: Union[int, ArrayLike]) -> Doubles:
        """Weights on the degrees of freedom."""
        n = len(self.omega)
        if isinstance(at, (int, np.integer)):
            if not 0 <= at < n:
                raise ValueError(f"at: a number from 0 to {n - 1} is needed, not {at}")
            return np.asarray(np.eye(n)[at])
        weights = _arrays.doubles(at, "at")
        if weights.shape != (n,):
            raise ValueError(f"at: {n} weights, or a whole number, are needed, not shape {weights.shape}")
        return weights

    def displacement(self, at: Union[int, ArrayLike]) -> Row:
        """The displacement of a degree of freedom by its number, or with n weights a sum, against the base."""
        return self._row(displacement=self._at(at))

    def velocity(self, at: Union[int, ArrayLike]) -> Row:
        """Likewise the velocity against the base."""
        return self._row(velocity=self._at(at))

    def acceleration(self, at: Union[int, ArrayLike]) -> Row:
        """Likewise the acceleration against the base."""
        return self._row(acceleration=self._at(at))

    def total_acceleration(self, at: Union[int, ArrayLike]) -> Row:
        """Likewise the acceleration against a fixed frame: what equipment there feels."""
        weights = self._at(at)
        of_base = np.zeros(self.inputs)
        of_base[: len(self._direction)] = self._direction @ weights
        return self._row(acceleration=weights, input=of_base)

    def modal_peaks(self, row: Row, displacement: ArrayLike, direction: int = 0) -> Doubles:
        """Peaks of an output, a mode each, from a spectrum of the base: for the rules of combination.

        Parameters
        ----------
        row : Row
            Of displacements alone.
        displacement : array_like, shape (..., modes)
            Spectral displacements at the frequencies and damping ratios of the first modes.
        direction : int
            Number of the direction of the base's motion.

        Returns
        -------
        ndarray, shape (..., modes)
            Shape times participation factor times spectral displacement, with signs.
        """
        if row.velocity.any() or row.acceleration.any() or row.input.any():
            raise ValueError("row: displacements alone can be taken from a spectrum of displacements")
        if not 0 <= direction < len(self._direction):
            raise ValueError(f"direction: there are {len(self._direction)} directions, no number {direction}")
        spectral = _arrays.doubles(displacement, "displacement")
        if spectral.ndim == 0:
            raise ValueError("displacement: a value a mode is needed")
        count = self._count(spectral.shape[-1])
        return np.asarray(spectral * (self.shapes @ row.displacement * self.participation[:, direction])[:count])

    def _rows(self, outputs: Mapping[str, Row]) -> _Rows:
        if not isinstance(outputs, Mapping) or not outputs:
            raise TypeError("outputs: a dictionary of names and rows is needed")
        n = len(self.omega)
        for name, row in outputs.items():
            if not isinstance(row, Row) or row.displacement.shape != (n,) or row.input.shape != (self.inputs,):
                raise TypeError(f"outputs: {name!r} is no row of this structure")
        return _Rows(*(np.stack(parts) for parts in zip(*(row._parts() for row in outputs.values()))))

    def _state(self, **given: ArrayLike) -> Doubles:
        """Displacements and velocities of the undamped modes, shape' M u of each: [2][n]."""
        n = len(self.omega)
        state = np.zeros((2, n))
        for part, (name, values) in zip(state, given.items()):
            motion = _arrays.doubles(values, name)
            if motion.shape not in ((), (n,)):
                raise ValueError(f"{name}: one number, or {n}, are needed, not shape {motion.shape}")
            _arrays.finite(motion, name)
            with np.errstate(over="ignore", invalid="ignore"):  # a LiveStructure refuses what is not finite
                part[:] = self.shapes @ (self._mass @ np.broadcast_to(motion, n))
        return state

    def _classical_oscillators(self, count: int, rows: _Rows, state: Doubles) -> Oscillators:
        shapes = self.shapes[:count]
        return Oscillators(
            System(1.0, self._dampers()[:count], self._squares[:count]),
            np.ascontiguousarray(shapes @ self._force.T),
            np.ascontiguousarray(shapes @ rows.displacement.T),
            np.ascontiguousarray(shapes @ rows.velocity.T),
            np.ascontiguousarray(shapes @ rows.acceleration.T),
            np.ascontiguousarray(rows.input.T),
            np.ascontiguousarray(state[:, :count]),
        )

    def _paired_oscillators(self, rows: _Rows, state: Doubles) -> Oscillators:
        """Undamped rigid bodies as they are; pairs of roots of all that the damper ties together."""
        free = (self._squares == 0) & (np.abs(self._modal_damper) <= self._zero_damper).all(axis=1)
        tied = np.flatnonzero(~free)
        whole = self._classical_oscillators(len(self.omega), rows, state)
        pairs = self._pairs(tied, whole)
        none = np.zeros(int(free.sum()))
        return Oscillators(
            System(1.0, np.append(none, pairs.system.damper), np.append(none, pairs.system.stiffness)),
            np.concatenate((whole.load[free], pairs.load)),
            np.concatenate((whole.on_displacement[free], pairs.on_displacement)),
            np.concatenate((whole.on_velocity[free], pairs.on_velocity)),
            np.concatenate((whole.on_acceleration[free], pairs.on_acceleration)),
            pairs.on_input,
            np.ascontiguousarray(np.hstack((whole.begin[:, free], pairs.begin))),
        )

    def _pairs(self, tied: NDArray[np.intp], whole: Oscillators) -> Oscillators:
        """In the coordinates of the undamped modes: q'' = -C q' - omega^2 q + load.

        From q and q' they go on as from rest after the derivative of an impulse q, and an impulse C q + q': two inputs
        more. An oscillator z'' + c z' + k z = L p is at z, z' = L, -c L after the one, at 0, L after the other.
        """
        accelerations, load, q = whole.on_acceleration[tied], whole.load[tied], whole.begin[:, tied]
        damper = np.ascontiguousarray(self._modal_damper[np.ix_(tied, tied)])
        on_displacement = whole.on_displacement[tied] - self._squares[tied, np.newaxis] * accelerations
        on_velocity = whole.on_velocity[tied] - damper @ accelerations
        impulses = np.stack((q[0], damper @ q[0] + q[1]), axis=1) if q.any() else np.zeros((tied.size, 0))
        system, loads, on_displacement, on_velocity = _oscillators_of_roots(
            damper, self._squares[tied], np.hstack((load, impulses)), on_displacement, on_velocity
        )
        begin = np.zeros((2, len(loads)))
        if q.any():
            begin[0] = loads[:, -2]
            begin[1] = loads[:, -1] - system.damper * begin[0]
        loads = np.ascontiguousarray(loads[:, : load.shape[1]])
        on_input = whole.on_input + load.T @ accelerations
        none = np.zeros_like(on_displacement)
        return Oscillators(system, loads, on_displacement, on_velocity, none, on_input, begin)

    def _corrected(self, oscillators: Oscillators, rows: _Rows, dt: float, between: Between) -> Oscillators:
        """With weights on the inputs for what modes left out still do.

        The whole structure settles, under the load less its rigid bodies' inertia, as the sum of all elastic modes.
        """
        elastic = self._squares > 0
        shapes = self.shapes[elastic]
        moved = (self._force @ shapes.T / self._squares[elastic]) @ shapes
        settled = np.ascontiguousarray(moved @ rows.displacement.T + rows.input.T)
        on_input = np.zeros(settled.shape)
        coeffs = coefficients(oscillators.system, dt, input="force", between=between)
        places = [_library.address(array) for array in (oscillators.plan(coeffs), settled, on_input)]
        _library.check(_library.call("static_correction", *places))
        return oscillators._replace(on_input=on_input)

    def live(
        self,
        dt: float,
        outputs: Mapping[str, Row],
        *,
        between: Between = "ramp",
        displacement: ArrayLike = 0.0,
        velocity: ArrayLike = 0.0,
        modes: Optional[int] = None,
        static_correction: bool = False,
        peaks: bool = True,
        equipment: Optional[Mapping[str, Equipment]] = None,
    ) -> LiveStructure:
        """The structure on samples as they come.

        Parameters
        ----------
        dt : float
            Interval between samples.
        outputs : dict of Row
            What is wanted, by names: ``{"roof": frame.total_acceleration(2)}``.
        between : {'ramp', 'hold'}
            What the inputs do between samples.
        displacement, velocity : array_like, shape () or (n,)
            Initial values of the degrees of freedom, against the base at the first sample: one for all, or one each.
            Where damping is not classical and there is one input, they double the oscillators.
        modes : int, optional
            How many modes are kept, from the slowest on; all where not given. For classical damping. What those left
            out hold of `displacement` and `velocity` is left out with them, as of the load: shape' M u of those kept
            stays, which comes as near to u as their shapes can, by u' M u (of a velocity, twice the kinetic energy).
        static_correction : bool
            The outputs settle where the whole structure does, although modes are left out (residual mode, missing
            mass).
        peaks : bool
            Looks for peaks, true between the samples. Without them a sample is cheaper.
        equipment : dict of Equipment, optional
            Light equipment by names, exact for the sampled inputs, tuned to the structure or not. It begins at rest
            against its point.

        Returns
        -------
        LiveStructure
        """
        rows = self._rows(outputs)
        count = self._count(modes)
        state = self._state(displacement=displacement, velocity=velocity)
        if self.classical:
            oscillators = self._classical_oscillators(count, rows, state)
        elif count < len(self.omega) or static_correction:
            raise ValueError("modes: they can be left out, and corrected, for classical damping only")
        else:
            oscillators = self._paired_oscillators(rows, state)
        if static_correction:
            oscillators = self._corrected(oscillators, rows, _arrays.double(dt, "dt"), between)
        return LiveStructure(oscillators, dt, tuple(outputs), between, peaks, _pieces(equipment or {}, outputs))

    def respond(
        self,
        record: ArrayLike,
        dt: float,
        outputs: Mapping[str, Row],
        *,
        between: Between = "ramp",
        displacement: ArrayLike = 0.0,
        velocity: ArrayLike = 0.0,
        modes: Optional[int] = None,
        static_correction: bool = False,
        peaks: bool = True,
        part: Part = "primary",
        equipment: Optional[Mapping[str, Equipment]] = None,
    ) -> StructureResponse:
        """The response to a whole record, from its first sample on.

        Parameters
        ----------
        record : array_like, shape (n,) or (n, inputs)
            Instants along the first axis; (n,) where there is one input.
        dt, outputs, between, displacement, velocity, modes, static_correction, peaks, equipment
            As in `live`.
        part : {'primary', 'residual', 'maximax'}
            Whether the peaks are those of the record, of the free motion after it, or both: as in
            `LiveStructure.peaks`. Held, the last sample acts for its dt before the free motion begins.

        Returns
        -------
        StructureResponse
            Exact for inputs that are straight (or held) between the samples.

        Examples
        --------
        Pulled along its first mode and let go, a frame is on the other side half a period later.

        >>> import numpy, rampwise
        >>> frame = rampwise.Structure([2.0, 1.0], [[3.0, -1.0], [-1.0, 1.0]], damping=0.0, force=[0.0, 1.0])
        >>> half, top = numpy.pi / frame.omega[0], {"top": frame.displacement(1)}
        >>> frame.respond(numpy.zeros(2), half, top, displacement=[1.0, 2.0])["top"].round(12)
        array([ 2., -2.])
        """
        live = self.live(dt, outputs, between=between, displacement=displacement, velocity=velocity, modes=modes,
                         static_correction=static_correction, peaks=peaks, equipment=equipment)  # fmt: skip
        part_number(part)
        block = live.put(record, equipment_histories=bool(equipment))
        if between == "hold" and part != "primary" and peaks:
            live.put(np.zeros((1, self.inputs)))
        return StructureResponse(
            np.arange(len(block.values)) * float(dt),
            live.outputs,
            block.values,
            live.peaks(part) if peaks else {},
            block.equipment,
            live.equipment_displacement(part) if peaks else {},
            live.equipment_acceleration(part) if peaks else {},
            live.provenance,
        )
