"""Structures against matrix exponentials, closed forms from handbooks, and themselves."""

import copy
import json
import pickle

import mpmath
import numpy as np
import pytest
import scipy.linalg
import scipy.sparse
from bits import HISTORIES, same_bits
from hypothesis import given, settings
from hypothesis import strategies as st

import rampwise

SEEDS = st.integers(0, 2**32 - 1)


def chain(spring):
    """Masses in a row; the first spring goes to the ground, and so does the last."""
    beside = np.diag(spring[1:-1], 1)
    return np.diag(spring[:-1] + spring[1:]) - beside - beside.T


def exact(mass, damper, stiffness, force, record, dt, begin=0.0):
    """Displacements, velocities, accelerations [sample][3 n] from the first two at sample 0: SciPy's exponential of all
    equations with the inputs and their slopes, [0, 1, 0, 0; -K/M, -C/M, F/M, 0; 0, 0, 0, 1/dt; 0]."""
    n, inputs = len(mass), len(force)
    rates = [np.linalg.solve(mass, part) for part in (-stiffness, -damper, force.T)]
    matrix = np.zeros((2 * (n + inputs),) * 2)
    matrix[:n, n : 2 * n] = np.eye(n)
    matrix[n : 2 * n, : 2 * n + inputs] = np.hstack(rates)
    matrix[2 * n : 2 * n + inputs, 2 * n + inputs :] = np.eye(inputs) / dt
    step, states = scipy.linalg.expm(matrix * dt), [np.zeros(2 * n) + begin]
    for before, now in zip(record[:-1], record[1:]):
        states.append((step @ np.concatenate((states[-1], before, now - before)))[: 2 * n])
    motion = np.array(states)
    return np.hstack((motion, np.hstack((motion, record)) @ np.hstack(rates).T))


def all_outputs(structure):
    makers = (structure.displacement, structure.velocity, structure.acceleration)
    return {f"{maker.__name__} {i}": maker(i) for maker in makers for i in range(len(structure.omega))}


def agree(structure, mass, damper, stiffness, force, record, dt, tolerance=1e-10, **initial):
    """All motion, each kind in units of its peak. 1e-10: the eigenvalue solvers' roundings, some n eps of the largest
    root, act over all steps; measured 2e-13 over 150 random chains of 2 to 12, 5e-13 for 60. Initial displacements q
    come in as impulses C q, which are larger than the motion that strong dampers let them leave: then also in units of
    q times the fastest root, or its square; measured 1.3e-12 over 1500 chains of 1 to 12."""
    values = structure.respond(record, dt, all_outputs(structure), peaks=False, **initial).values
    begin = np.concatenate(list(initial.values())) if initial else np.zeros(2 * len(mass))
    expected = exact(mass, damper, stiffness, force, record, dt, begin)
    q, root = np.abs(begin[: len(mass)]).max(), np.abs(structure.roots).max()
    for i, (ours, theirs) in enumerate(zip(np.split(values, 3, axis=1), np.split(expected, 3, axis=1))):
        unit = max(np.abs(theirs).max(), q * root**i)
        np.testing.assert_allclose(ours, theirs, rtol=0, atol=tolerance * unit)


def initial_of(random, n, slow=1.0):
    return {"displacement": random.normal(size=n), "velocity": slow * random.normal(size=n)}


def random_chain(random, n, light):
    mass = np.diag(random.uniform(0.5, 2, n))
    stiffness = chain(np.append(random.uniform(100, 400, n), 0))
    damper = chain(np.append(light * random.uniform(0.01, 1, n), 0))
    return mass, damper, stiffness


@pytest.mark.parametrize("free", [False, True])
def test_shear_buildings(free):
    """Uniform, fixed at its foot: omega_j = 2 sqrt(k/m) sin((2 j - 1) pi/(2 (2 n + 1))); free at both ends:
    2 sqrt(k/m) sin(j pi/(2 n)), j = 0 a rigid body (R. D. Blevins, Formulas for Natural Frequency and Mode Shape,
    spring-mass chains; from memory, and any textbook of vibration). Solver and sines to n^2 roundings."""
    for n in range(2, 21):
        spring = np.full(n + 1, 330.0)
        spring[-1] = 0
        if free:
            spring[0] = 0
        frame = rampwise.Structure(np.full(n, 1.7), chain(spring), damping=0.0, force=np.ones(n))
        j = np.arange(n)
        angle = j * np.pi / (2 * n) if free else (2 * j + 1) * np.pi / (2 * (2 * n + 1))
        top = 4 * 330 / 1.7
        np.testing.assert_allclose(frame.omega**2, top * np.sin(angle) ** 2, rtol=0, atol=n**2 * 2.3e-16 * top)
        assert (frame.omega[0] == 0) == free and frame.classical and np.all(frame.damping == 0)
        np.testing.assert_allclose(frame.shapes @ (1.7 * frame.shapes.T), np.eye(n), atol=1e-13)


def beam(elements):
    """M and K of a free beam of length 10, EI = 2e8, mass 50 per length: deflection and slope at every node, cubic
    shapes (M. Petyt, Introduction to Finite Element Vibration Analysis; from memory)."""
    l, size = 10 / elements, 2 * elements + 2
    inertia = [[156, 22 * l, 54, -13 * l], [22 * l, 4 * l**2, 13 * l, -3 * l**2],
               [54, 13 * l, 156, -22 * l], [-13 * l, -3 * l**2, -22 * l, 4 * l**2]]  # fmt: skip
    spring = [[12, 6 * l, -12, 6 * l], [6 * l, 4 * l**2, -6 * l, 2 * l**2],
              [-12, -6 * l, 12, -6 * l], [6 * l, 2 * l**2, -6 * l, 4 * l**2]]  # fmt: skip
    mass, stiffness = np.zeros((2, size, size))
    for first in range(0, size - 2, 2):
        four = slice(first, first + 4)
        mass[four, four] += 50 * l / 420 * np.array(inertia)
        stiffness[four, four] += 2e8 / l**3 * np.array(spring)
    return mass, stiffness


@pytest.mark.parametrize("elements", [4, 20, 100, 200])
@pytest.mark.parametrize("sign", [1, -1])
def test_slow_modes_of_beams(elements, sign):
    """cos(x) cosh(x) = -1 of a cantilever, 1 of a free beam with its two rigid bodies (R. D. Blevins, Formulas for
    Natural Frequency and Mode Shape, table 8-1; from memory); the roots by mpmath. Elements are off by some
    (x/elements)^4/1440, and rounding K moves omega^2 by eps over the least eigenvalue of K scaled to a diagonal of 1,
    some 0.5/elements^4 of a cantilever and 10/elements^4 of a free beam."""
    mass, stiffness = (matrix[1 + sign :, 1 + sign :] for matrix in beam(elements))
    rigid = 0 if sign == 1 else 2
    frame = rampwise.Structure(mass, stiffness, damping=0.02, force=np.eye(len(mass))[0])
    roots = [mpmath.findroot(lambda x: mpmath.cos(x) + sign * mpmath.sech(x), x)
             for x in ((1.9, 4.7, 7.9) if sign == 1 else (4.7, 7.9))]  # fmt: skip
    expected = np.array([float(x) ** 2 / 100 * 2000 for x in roots])
    found = frame.omega[rigid : rigid + len(roots)]
    bound = (np.array(roots, float) / elements) ** 4 / 1400 + 2.2e-16 * elements**4 * (1 if sign == 1 else 0.1)
    assert np.all(np.abs(found / expected - 1) < bound) and np.all(frame.omega[:rigid] == 0)
    np.testing.assert_allclose(frame.shapes @ mass @ frame.shapes.T, np.eye(len(mass)), atol=1e-13)


@pytest.mark.parametrize("elements", [2, 3, 10, 60])
def test_rigid_bodies_of_rounded_matrices(elements):
    """A free beam without its slopes, by static condensation, and in mixed coordinates: the two rigid bodies and no
    more are left of K that others' roundings went through; omega of the mixed are the same, to what those do to
    omega^2, eps over the least eigenvalue of the scaled K, some 10/elements^4."""
    _, stiffness = beam(elements)
    moved, turned = (slice(first, None, 2) for first in (0, 1))
    beside = stiffness[moved, turned]
    condensed = stiffness[moved, moved] - beside @ np.linalg.solve(stiffness[turned, turned], beside.T)
    condensed = (condensed + condensed.T) / 2
    n = elements + 1
    mix = np.linalg.qr(np.random.default_rng(32).normal(size=(n, n)))[0]
    plain = rampwise.Structure(np.ones(n), condensed, damping=0.02, force=np.ones(n))
    mixed = rampwise.Structure(np.ones(n), mix @ condensed @ mix.T, damping=0.02, force=np.ones(n))
    for frame in (plain, mixed):
        assert np.all(frame.omega[:2] == 0) and np.all(frame.omega[2:] > 0)
    np.testing.assert_allclose(mixed.omega**2, plain.omega**2, rtol=1e-13 + 10 * 2.2e-16 * elements**4)


@pytest.mark.parametrize("support", [1e10, 1e16, 1e18, 1e25])
@pytest.mark.parametrize("ratio", [True, False])
def test_stiff_supports(support, ratio):
    """A chain whose first mass a stiff spring holds is the chain without that mass, fixed there, all but 100/support of
    its springs: omega as in `test_shear_buildings`, and its responses, by damping ratios and by a damper of M and K.
    1e-11: some hundred roundings over 200 steps; a hundred for what 100/support in omega does over omega t."""
    n, found = 20, []
    record = np.random.default_rng(30).uniform(-1, 1, 200)
    for extra in (0, 1):
        size = n + extra
        stiffness = chain(np.append(np.full(size, 100.0), 0))
        stiffness[0, 0] += extra * (support - 100)
        damping = {"damping": 0.02} if ratio else {"damper": 0.1 * np.eye(size) + 0.003 * stiffness}
        frame = rampwise.Structure(np.ones(size), stiffness, direction=np.ones(size), **damping)
        top = {"top": frame.displacement(size - 1)}
        assert frame.classical
        found.append((frame.omega[:n], frame.respond(record, 0.1, top, modes=n)))
    omega = 20 * np.sin((2 * np.arange(n) + 1) * np.pi / (2 * (2 * n + 1)))
    np.testing.assert_allclose(found[1][0], omega, rtol=1e-13 + 100 / support)
    fixed, held = found[0][1], found[1][1]
    tolerance = 1e-11 + 1e4 / support
    np.testing.assert_allclose(held["top"], fixed["top"], rtol=0, atol=tolerance * np.abs(fixed["top"]).max())
    np.testing.assert_allclose(held.peaks["top"].value, fixed.peaks["top"].value, rtol=tolerance)


def test_stiff_links():
    """A spring between bodies leaves the digits that K holds: against mpmath's eigenvalues of the same K, to eps over
    its last pivot, the ratio of the springs. Where K holds too few, it is refused, bound to the ground or not."""
    mass, springs = np.array([1.0, 2.0, 1.5, 1.0]), np.array([100.0, 130.0, 0.0, 90.0, 0.0])
    for link in (1e4, 1e8):
        springs[2] = link
        frame = rampwise.Structure(mass, chain(springs), damping=0.02, force=np.ones(4))
        with mpmath.workdps(40):
            root = mpmath.diag([1 / mpmath.sqrt(m) for m in mass])
            squares = mpmath.eigsy(root * mpmath.matrix(chain(springs).tolist()) * root, eigvals_only=True)
        np.testing.assert_allclose(frame.omega**2, [float(square) for square in squares], rtol=1e-15 * link / 90)
    for ground in (0.0, 100.0):
        for link in (1e14, 1e17, 1e20):
            springs[0], springs[2] = ground, link
            with pytest.raises(ValueError, match="^stiffness: beside its stiffest springs"):
                rampwise.Structure(mass, chain(springs), damping=0.02, force=np.ones(4))


def test_two_storeys():
    """Effective masses 8/3 m and 1/3 m of 3 m (A. K. Chopra, Dynamics of Structures, Examples 10.4 and 13.2; from
    memory)."""
    frame = rampwise.Structure([6.0, 3.0], [[600.0, -200.0], [-200.0, 200.0]], damping=[0.02, 0.05], direction=[1, 1])
    np.testing.assert_allclose(frame.effective_mass[:, 0], [8, 1], rtol=1e-13)
    np.testing.assert_allclose(frame.mass_share(1), [8 / 9], rtol=1e-13)
    np.testing.assert_allclose(frame.mass_share(), [1], rtol=1e-13)
    np.testing.assert_allclose(frame.damping, [0.02, 0.05], rtol=1e-13)
    np.testing.assert_allclose(np.sort(frame.roots.real), -np.repeat(frame.damping * frame.omega, 2)[::-1], rtol=1e-12)


@settings(max_examples=12)
@given(SEEDS, st.integers(1, 12), st.floats(0.003, 0.2))
def test_classical_records(seed, n, dt):
    random = np.random.default_rng(seed)
    mass, _, stiffness = random_chain(random, n, 0)
    damper = 0.4 * mass + 0.002 * stiffness
    direction = random.normal(size=(2, n))
    frame = rampwise.Structure(mass, stiffness, damper=damper, direction=direction)
    assert frame.classical
    agree(frame, mass, damper, stiffness, -direction @ mass, random.uniform(-1, 1, (100, 2)), dt)


@settings(max_examples=12)
@given(SEEDS, st.integers(2, 12), st.floats(0.003, 0.1), st.sampled_from([1.0, 20.0, 150.0]), st.integers(1, 3))
def test_records_of_other_damping(seed, n, dt, light, inputs):
    """From light dampers to those that leave real roots."""
    random = np.random.default_rng(seed)
    mass, damper, stiffness = random_chain(random, n, light)
    force = random.normal(size=(inputs, n))
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=force)
    assert not frame.classical
    agree(frame, mass, damper, stiffness, force, random.uniform(-1, 1, (100, inputs)), dt)


def test_real_roots_alone():
    """Three bodies on dampers so strong that nothing swings."""
    mass, stiffness = np.diag([1.0, 2.0, 1.5]), chain(np.array([100.0, 200.0, 150.0, 0.0]))
    damper = chain(np.array([90.0, 150.0, 200.0, 0.0]))
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=np.eye(3)[:2])
    assert not frame.classical and np.all(frame.roots.imag == 0)
    random = np.random.default_rng(1)
    agree(frame, mass, damper, stiffness, np.eye(3)[:2], random.uniform(-1, 1, (100, 2)), 0.05)
    agree(frame, mass, damper, stiffness, np.eye(3)[:2], random.uniform(-1, 1, (100, 2)), 0.05, **initial_of(random, 3))


@settings(max_examples=20)
@given(SEEDS, st.integers(1, 12), st.floats(0.003, 0.1), st.sampled_from([0.0, 1.0, 20.0, 150.0]), st.integers(1, 3))
def test_initial_states(seed, n, dt, light, inputs):
    """Classical, by pairs of complex roots, with real roots; under loads as large as the springs' forces, and none."""
    random = np.random.default_rng(seed)
    mass, damper, stiffness = random_chain(random, n, light)
    damper += 0.4 * mass
    force = random.normal(size=(inputs, n))
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=force)
    assert frame.classical == (light == 0 or n == 1)
    record = random.uniform(-300, 300, (100, inputs))
    for load in (record, 0 * record):
        agree(frame, mass, damper, stiffness, force, load, dt, **initial_of(random, n, 15.0))


@pytest.mark.parametrize("moved", [1e-7, -1e-7, 1e-6, 1e-4])
def test_beside_a_defective_spectrum(moved):
    """(s^2 + c s + 3) (s^2 + 0.3 s + 2) - 1 has a double root at c = 3.3213..., mpmath's solution of it and its
    derivative. A damper moved by a share d has roots sqrt(d) apart, whose residues cancel by as much and whose errors
    are eps/sqrt(d) each: some 10 eps/d of the peak; measured 6e-9 at 1e-7, 4e-10 at 1e-6. At the root it is refused."""
    def double(s, c):
        return ((s**2 + c * s + 3) * (s**2 + 0.3 * s + 2) - 1,
                (2 * s + c) * (s**2 + 0.3 * s + 2) + (s**2 + c * s + 3) * (2 * s + 0.3))  # fmt: skip

    critical = float(mpmath.findroot(double, (-1.6, 3.3))[1])
    stiffness, force = np.array([[3.0, -1.0], [-1.0, 2.0]]), np.array([[1.0, 0.5]])
    with pytest.raises(ValueError, match="^damper: The spectrum is defective"):
        frame = rampwise.Structure([1.0, 1.0], stiffness, damper=[critical, 0.3], force=force)
        frame.respond([1.0, 1.0], 0.1, all_outputs(frame))
    damper = np.diag([critical * (1 + moved), 0.3])
    frame = rampwise.Structure([1.0, 1.0], stiffness, damper=damper, force=force)
    record = np.random.default_rng(31).uniform(-1, 1, (200, 1))
    agree(frame, np.eye(2), damper, stiffness, force, record, 0.1, 10 * 2.2e-16 / abs(moved) + 1e-12)


def test_initial_states_of_one_mass():
    """A mass of 1 is an oscillator: the same displacements and velocities, bit for bit. One number does for all
    degrees of freedom."""
    record, initial = np.random.default_rng(22).uniform(-1, 1, 200), {"displacement": 0.3, "velocity": -2.0}
    mass = rampwise.Structure([1.0], [9.0], damper=[0.6], force=[1.0])
    outputs = {"displacement": mass.displacement(0), "velocity": mass.velocity(0)}
    for between in ("ramp", "hold"):
        found = mass.respond(record, 0.04, outputs, between=between, **initial)
        alone = rampwise.respond(record, 0.04, input="force", system=rampwise.System(1.0, 0.6, 9.0), between=between,
                                 **initial)  # fmt: skip
        for name in outputs:
            same_bits(found[name], getattr(alone, name))


def test_initial_states_without_all_modes():
    """What stays is nearest to the motion given, by its energy: least squares of M^(1/2) by NumPy. From there on the
    modes kept move by their own exponential. 1e-12: a hundred roundings of the eigenvalue solver, and 100 steps'."""
    random = np.random.default_rng(23)
    mass, _, stiffness = random_chain(random, 6, 0)
    frame = rampwise.Structure(mass, stiffness, damping=0.04, force=np.ones(6))
    record, initial = random.uniform(-300, 300, (100, 1)), initial_of(random, 6, 15.0)
    values = frame.respond(record, 0.02, all_outputs(frame), modes=2, peaks=False, **initial).values
    root, shapes = np.sqrt(mass), frame.shapes[:2].T
    begin = [np.linalg.lstsq(root @ shapes, root @ motion, rcond=None)[0] for motion in initial.values()]
    omega = frame.omega[:2]
    motion = exact(np.eye(2), np.diag(0.08 * omega), np.diag(omega**2), np.ones((1, 6)) @ shapes, record, 0.02,
                   np.concatenate(begin))  # fmt: skip
    for ours, theirs in zip(np.split(values, 3, axis=1), np.split(motion, 3, axis=1)):
        np.testing.assert_allclose(ours, theirs @ shapes.T, rtol=0, atol=1e-12 * np.abs(theirs).max())


def test_both_ways_agree():
    """A classical structure by its modes and by pairs of roots, with a total acceleration: 1e-12 is some hundred
    roundings of the eigenvalue solver."""
    random = np.random.default_rng(5)
    mass, _, stiffness = random_chain(random, 6, 0)
    damper = rampwise.rayleigh_damper(mass, stiffness, omega=(2.0, 20.0), damping=0.05)
    frame = rampwise.Structure(mass, stiffness, damper=damper, direction=np.ones(6))
    outputs = {"top": frame.total_acceleration(5), "drift": frame.displacement(1) - frame.displacement(0)}
    ground = random.uniform(-1, 1, 300)
    by_modes = frame.respond(ground, 0.02, outputs)
    frame.classical = False
    by_roots = frame.respond(ground, 0.02, outputs)
    for name in outputs:
        np.testing.assert_allclose(by_roots[name], by_modes[name], rtol=0, atol=1e-12 * np.abs(by_modes[name]).max())
        np.testing.assert_allclose(by_roots.peaks[name].value, by_modes.peaks[name].value, rtol=1e-11)


def test_equal_frequencies():
    """Their shapes are turned to suit the damper: M^-1 K is a multiple of 1, which every C goes with."""
    damper = np.array([[1.0, 0.5, 0.2], [0.5, 1.0, -0.3], [0.2, -0.3, 0.7]])
    frame = rampwise.Structure(np.ones(3), 9 * np.ones(3), damper=damper, force=[1.0, 2.0, -1.0])
    assert frame.classical
    np.testing.assert_allclose(np.sort(2 * frame.damping * frame.omega), np.linalg.eigvalsh(damper), rtol=1e-13)
    record = np.random.default_rng(2).uniform(-1, 1, (100, 1))
    agree(frame, np.eye(3), damper, 9 * np.eye(3), np.array([[1.0, 2.0, -1.0]]), record, 0.1, 1e-13)


@pytest.mark.parametrize("free", [False, True])
def test_equal_frequencies_in_mixed_coordinates(free):
    """Twenty frequencies over three decades, two modes each, in coordinates that mix them: roundings of the fastest part
    the slow ones by more than their own. M^-1 C ties each two alone, with ratios of the eigenvalues of the tie."""
    n, tie = 20, np.array([[1.0, 0.5], [0.5, 0.7]])
    mix = np.linalg.qr(np.random.default_rng(33).normal(size=(2 * n, 2 * n)))[0]
    springs = np.append(np.logspace(0, 5, n), 0)
    springs[0] *= not free
    one = chain(springs)
    stiffness = mix @ np.kron(np.eye(2), one) @ mix.T
    damper = mix @ np.kron(tie, np.eye(n)) @ mix.T
    frame = rampwise.Structure(np.ones(2 * n), stiffness, damper=damper, force=np.eye(2 * n)[0])
    assert frame.classical and (frame.omega == 0).sum() == 2 * free
    pairs = np.sort((frame.shapes @ damper @ frame.shapes.T).diagonal().reshape(n, 2))
    np.testing.assert_allclose(pairs, np.tile(np.linalg.eigvalsh(tie), (n, 1)), rtol=1e-12)


@pytest.mark.parametrize("dampers", [(0, 0, 0), (0, 3, 0.1), (0.4, 3, 0.1)])
def test_rigid_bodies(dampers):
    """A free chain of four: undamped, damped inside (its rigid body is not), and slowed against the ground."""
    mass, stiffness = np.diag([1.0, 2.0, 0.7, 1.1]), chain(np.array([0.0, 90, 200, 150, 0]))
    damper = chain(np.array([dampers[0], dampers[1], dampers[2], 0.0, 0.0]))
    force = np.array([[1.0, -0.2, 0.4, 2.0], [0.0, 1.0, 1.0, 0.0]])
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=force)
    assert frame.omega[0] == 0 and frame.omega[1] > 1 and frame.classical == (not any(dampers))
    assert frame.damping[0] == (np.inf if dampers[0] else 0)
    random = np.random.default_rng(3)
    record = random.uniform(-1, 1, (150, 2))
    agree(frame, mass, damper, stiffness, force, record, 0.03)
    agree(frame, mass, damper, stiffness, force, record, 0.03, **initial_of(random, 4))


def test_an_undamped_rigid_body_keeps_its_pace():
    """Dampers in proportion to springs do not hold it: no rounding of 0 does, so that it goes on for ever."""
    for seed in range(4):
        random = np.random.default_rng(seed)
        mass, stiffness = random.uniform(1, 2, 4), chain(np.concatenate(([0], random.uniform(50, 100, 3), [0])))
        frame = rampwise.Structure(mass, stiffness, damper=0.01 * stiffness, force=np.eye(4)[0])
        live = frame.live(0.02, {"place": frame.displacement(0)})
        live.put(np.append(np.ones(30), 0.0))
        assert frame.classical and frame.damping[0] == 0 and live.peaks("residual")["place"].later == np.inf


def test_two_rigid_bodies():
    """Two free chains, in coordinates that mix them: one slowed against the ground, one damped inside alone. The zero
    frequency is double, and only the right one of its shapes is free of the damper."""
    random = np.random.default_rng(21)
    halves = [np.array([0.0, 90.0, 120.0, 0.0]), np.array([0.0, 70.0, 200.0, 0.0])]
    dampers = [np.array([3.0, 2.0, 0.0, 0.0]), np.array([0.0, 4.0, 1.0, 0.0])]
    mix = np.linalg.qr(random.normal(size=(6, 6)))[0]
    mass, stiffness, damper = (
        mix.T @ scipy.linalg.block_diag(*parts) @ mix
        for parts in ([np.diag([1.0, 2.0, 1.5]), np.eye(3)], map(chain, halves), map(chain, dampers))
    )
    force = random.normal(size=(2, 6))
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=force)
    assert np.all(frame.omega[:2] == 0) and frame.omega[2] > 1 and not frame.classical
    agree(frame, mass, damper, stiffness, force, random.uniform(-1, 1, (100, 2)), 0.03)
    agree(frame, mass, damper, stiffness, force, random.uniform(-1, 1, (100, 2)), 0.03, **initial_of(random, 6))


def test_dampers():
    """Rayleigh's matrix and the modal one give the ratios asked for; a damper more makes the damping non-classical."""
    random = np.random.default_rng(8)
    mass, _, stiffness = random_chain(random, 5, 0)
    bare = rampwise.Structure(mass, stiffness, damping=0.0, force=np.ones(5))
    two = rampwise.rayleigh_damper(mass, stiffness, omega=tuple(bare.omega[[0, 3]]), damping=(0.02, 0.06))
    damped = rampwise.Structure(mass, stiffness, damper=two, force=np.ones(5))
    np.testing.assert_allclose(damped.damping[[0, 3]], [0.02, 0.06], rtol=1e-12)
    ratios = [0.01, 0.02, 0.05, 0.1, 0.3]
    modal = rampwise.modal_damper(mass, stiffness, ratios)
    damped = rampwise.Structure(mass, stiffness, damper=modal, force=np.ones(5))
    assert damped.classical
    np.testing.assert_allclose(damped.damping, ratios, rtol=1e-11)
    modal[0, 0] += 0.01
    assert not rampwise.Structure(mass, stiffness, damper=modal, force=np.ones(5)).classical


@pytest.mark.parametrize("moving", [False, True])
def test_peaks_against_a_fine_scan(moving):
    """The exponential at 64 points a step misses a peak by at most (dt/64)^2/8 times the largest second derivative."""
    random = np.random.default_rng(4)
    mass, damper, stiffness = random_chain(random, 3, 10.0)
    frame = rampwise.Structure(mass, stiffness, damper=damper, force=np.ones(3))
    record = np.append(0, random.uniform(-1, 1, 60))
    begin = moving * random.normal(size=(2, 3)) / 100
    found = frame.respond(record, 0.1, {"top": frame.displacement(2)}, displacement=begin[0],
                          velocity=begin[1]).peaks["top"]  # fmt: skip
    fine = np.interp(np.arange(60 * 64 + 1) / 64, np.arange(61), record)[:, np.newaxis]
    motion = exact(mass, damper, stiffness, np.ones((1, 3)), fine, 0.1 / 64, begin.reshape(-1))
    bound = np.abs(motion[:, 8]).max() * (0.1 / 64) ** 2 / 8 + 1e-13
    assert motion[:, 2].max() - 1e-13 <= found.high <= motion[:, 2].max() + bound
    assert motion[:, 2].min() + 1e-13 >= found.low >= motion[:, 2].min() - bound
    assert abs(found.high_time - 0.1 / 64 * motion[:, 2].argmax()) <= 0.1 / 64


def cascade(omega, zeta, piece_omega, piece_zeta, record, dt):
    """Stretch of equipment on one mode, from rest under record[0]: mpmath's exponential with 40 digits of
    {mode, equipment, input, slope}; the point's total acceleration is -2 zeta omega q' - omega^2 q."""
    with mpmath.workdps(40):
        w, z, e, d = (mpmath.mpf(float(x)) for x in (omega, zeta, piece_omega, piece_zeta))
        matrix = mpmath.matrix(6)
        matrix[0, 1] = matrix[2, 3] = 1
        matrix[1, 0], matrix[1, 1], matrix[1, 4] = -w * w, -2 * z * w, -1
        matrix[3, 2], matrix[3, 3], matrix[3, 0], matrix[3, 1] = -e * e, -2 * d * e, w * w, 2 * z * w
        matrix[4, 5] = 1 / mpmath.mpf(dt)
        step = mpmath.expm(matrix * mpmath.mpf(dt))
        state, stretches = mpmath.matrix([0] * 6), [0.0]
        for before, now in zip(record[:-1], record[1:]):
            state[4], state[5] = mpmath.mpf(float(before)), mpmath.mpf(float(now)) - mpmath.mpf(float(before))
            state = step * state
            stretches.append(float(state[2]))
        return np.array(stretches)


@pytest.mark.parametrize("detuned", [0.0, 1e-9, 1e-4, 0.3])
@pytest.mark.parametrize("zetas", [(0.0, 0.0), (0.03, 0.03), (0.05, 0.002)])
def test_equipment_tuned_to_its_structure(detuned, zetas):
    """1e-13: roundings of omega^2 and 2 zeta omega in double, of some eps, turn phases by omega t eps, and those of 60
    steps add up; measured 8e-16."""
    omega, dt = 7.0, 0.05
    record = np.random.default_rng(6).uniform(-1, 1, 60)
    frame = rampwise.Structure([1.0], [omega**2], damping=zetas[0], direction=[1.0])
    piece = rampwise.System.natural(omega=omega * (1 + detuned), damping=zetas[1])
    response = frame.respond(record, dt, {"floor": frame.total_acceleration(0)},
                             equipment={"cabinet": rampwise.Equipment("floor", piece)})  # fmt: skip
    expected = cascade(omega, zetas[0], omega * (1 + detuned), zetas[1], record, dt)
    stretch = response.equipment["cabinet"].displacement
    np.testing.assert_allclose(stretch, expected, rtol=0, atol=1e-13 * np.abs(expected).max())
    assert response.equipment_displacement["cabinet"].size >= np.abs(stretch).max()


def test_residual_peaks():
    """A run over zeros finds the same, the bank of single oscillators has it in closed form, and what is tuned and
    undamped grows for ever. The floor spectrum's maximax is the larger of both times."""
    rng = np.random.default_rng(7)
    frame = rampwise.Structure([2.0, 1.0], [[300.0, -100.0], [-100.0, 100.0]], damping=0.03, direction=[1.0, 1.0])
    record = np.append(rng.standard_normal(60), 0.0)
    points = {"roof": frame.total_acceleration(1)}
    piece = rampwise.System.natural(period=[0.4, 0.9], damping=0.02)
    live = frame.live(0.02, points, equipment={"box": rampwise.Equipment("roof", piece)})
    live.put(record)
    before, residual, both = (live.equipment_displacement(p)["box"] for p in ("primary", "residual", "maximax"))
    outputs = live.peaks("maximax")["roof"]
    assert np.all(residual.later <= np.minimum(residual.high, -residual.low) * (1 + 1e-10))
    assert np.all(residual.high_time >= 1.2) and np.all(before.high_time <= 1.2)
    same_bits(both.high, np.maximum(before.high, residual.high))
    same_bits(both.low_time, np.where(before.low <= residual.low, before.low_time, residual.low_time))
    live.put(np.zeros(4000))
    np.testing.assert_allclose(live.equipment_displacement()["box"].high, both.high, rtol=1e-11)
    np.testing.assert_allclose(live.peaks()["roof"].low, outputs.low, rtol=1e-11)
    floors = rampwise.floor_spectrum(frame, record, 0.02, points, period=[0.4, 0.9], damping=0.02, part="maximax")
    same_bits(floors.displacement.high, both.high[np.newaxis, :])
    assert np.all(np.abs(floors.sampled_error) < 0.01)

    mass = rampwise.Structure([1.0], [[9.0]], damping=0.0, direction=[1.0])
    alike = rampwise.System(*(getattr(mass.live(0.1, {"x": mass.displacement(0)})._oscillators.system, name)
                              for name in ("mass", "damper", "stiffness")))  # fmt: skip
    grown = mass.respond([1.0, -1.0, 0.5], 0.1, {"point": mass.total_acceleration(0)}, part="residual",
                         equipment={"box": rampwise.Equipment("point", alike)})  # fmt: skip
    assert np.all(grown.equipment_displacement["box"].high == np.inf)
    assert np.all(grown.equipment_displacement["box"].high_time == np.inf)
    assert grown.peaks["point"].size <= grown.peaks["point"].later * (1 + 1e-11)
    with pytest.raises(ValueError, match="^part: 'all' is none of"):
        live.peaks("all")
    with pytest.raises(ValueError, match="^part: 'residual' is neither"):
        rampwise.floor_spectrum(frame, record, 0.02, points, period=0.4, part="residual")
    with pytest.raises(ValueError, match="^samples: -1 is not"):
        live.peaks("residual", samples=-1)


@pytest.mark.parametrize("between", ["ramp", "hold"])
@pytest.mark.parametrize("part", ["primary", "residual", "maximax"])
def test_parts_of_one_mass(between, part):
    """A mass and the oscillator of a response spectrum have one response. 1e-10 leaves room for the
    roundings of slopes in instants."""
    record = np.random.default_rng(2).standard_normal(40)
    mass = rampwise.Structure([1.0], [25.0], damping=0.03, direction=[1.0])
    outputs = {"stretch": mass.displacement(0), "total": mass.total_acceleration(0)}
    found = mass.respond(record, 0.1, outputs, between=between, part=part)
    alone = rampwise.response_spectrum(record, 0.1, omega=[5.0], damping=0.03, between=between, part=part)
    for peaks, expected in ((found.peaks["stretch"], alone.displacement),
                            (found.peaks["total"], alone.total_acceleration)):  # fmt: skip
        for field in ("high", "low", "high_time", "low_time"):
            np.testing.assert_allclose(getattr(peaks, field), getattr(expected, field)[0], rtol=1e-10)
    assert len(found.values) == 40
    with pytest.raises(ValueError, match="^part: 'all' is none of"):
        mass.respond(record, 0.1, outputs, part="all", peaks=False)


@pytest.mark.parametrize("moving", [False, True])
def test_equipment_as_a_light_part_of_the_structure(moving):
    """A thousand-millionth of a mass on a frame with a damper of its own, in the coupled equations, is equipment to
    1e-9 of tuned motion over its damping: 1e-6 leaves room. It begins as its point moves. Its histories belong
    together."""
    random = np.random.default_rng(9)
    mass, damper, stiffness = random_chain(random, 3, 15.0)
    frame = rampwise.Structure(mass, stiffness, damper=damper, direction=np.ones(3))
    record = random.uniform(-1, 1, 200)
    piece = rampwise.System.natural(omega=frame.omega[0], damping=0.04)
    box = {"box": rampwise.Equipment("top", piece)}
    begin = moving * random.normal(size=(2, 3)) / 100
    live = frame.live(0.02, {"top": frame.total_acceleration(2)}, displacement=begin[0], velocity=begin[1],
                      equipment=box)  # fmt: skip
    block = live.put(record, equipment_histories=True)
    small, tie = 1e-9, np.zeros((4, 4))
    tie[2:, 2:] = [[1, -1], [-1, 1]]
    wider = [np.pad(matrix, (0, 1)) for matrix in (mass, damper, stiffness)]
    wider[0][3, 3] = small
    wider[1] += small * float(piece.damper) * tie
    wider[2] += small * float(piece.stiffness) * tie
    motion = exact(wider[0], wider[1], wider[2], -np.ones((1, 4)) @ wider[0], record[:, np.newaxis], 0.02,
                   np.pad(begin, ((0, 0), (0, 1)), "edge").reshape(-1))  # fmt: skip
    stretch = motion[:, 3] - motion[:, 2]
    histories = block.equipment["box"]
    np.testing.assert_allclose(histories.displacement, stretch, rtol=0, atol=1e-6 * np.abs(stretch).max())
    forces = -(float(piece.damper) * histories.velocity + float(piece.stiffness) * histories.displacement)
    size = np.abs(histories.total_acceleration).max()
    np.testing.assert_allclose(histories.total_acceleration, forces, rtol=0, atol=1e-14 * size)
    np.testing.assert_allclose(histories.total_acceleration, histories.acceleration + block.values[:, 0], rtol=0,
                               atol=1e-13 * size)  # fmt: skip


def test_equipment_at_the_start():
    """A force of 3 on a mass of 2 at rest: the point sets out with 1.5, and the equipment stays where it is."""
    frame = rampwise.Structure([2.0], [50.0], damping=0.1, force=[1.0])
    box = rampwise.Equipment("point", rampwise.System.natural(omega=4.0, damping=0.1))
    histories = frame.respond([3.0, 1.0], 0.1, {"point": frame.total_acceleration(0)}, equipment={"box": box}).equipment
    np.testing.assert_allclose([float(history[0]) for history in histories["box"]], [0, 0, -1.5, 0], rtol=1e-14)


def test_floor_spectra():
    """The base's record cut 40 times finer is the same load; the usual way then loses a 1600th of some 4 %."""
    frame = rampwise.Structure([2.0, 1.0], [[900.0, -300.0], [-300.0, 300.0]], damping=0.03, direction=[1.0, 1.0])
    dt = 2 * np.pi / frame.omega[1] / 8
    record = np.append(0, np.random.default_rng(11).uniform(-1, 1, 120))
    points = {"first floor": frame.total_acceleration(0), "roof": frame.total_acceleration(1)}
    grid = {"period": [0.15, 2 * np.pi / frame.omega[1], 0.7], "damping": [0.02, 0.1]}
    floors = rampwise.floor_spectrum(frame, record, dt, points, **grid)
    fine = np.interp(np.arange(120 * 40 + 1) / 40, np.arange(121), record)
    histories = frame.respond(fine, dt / 40, points).values
    expected = rampwise.response_spectrum(histories.T, dt / 40, **grid)
    assert floors.SA.shape == (2, 2, 3) and floors.points == ("first floor", "roof")
    np.testing.assert_allclose(floors.SA, expected.SA, rtol=1e-4)
    np.testing.assert_allclose(floors.SD, expected.SD, rtol=1e-4)
    assert np.abs(floors.sampled_error).max() > 0.02
    np.testing.assert_allclose(floors.sampled_error, floors.sampled.SA / floors.SA - 1)
    piece = rampwise.System.natural(period=grid["period"][1], damping=0.1)
    live = frame.live(dt, points, equipment={"piece": rampwise.Equipment("roof", piece)})
    live.put(record)
    same_bits(live.equipment_acceleration()["piece"].value, floors.total_acceleration.value[1, 1, 1])
    same_bits(live.peaks()["roof"].value, floors.floor.value[1])
    same_bits(rampwise.floor_spectrum(frame, record, dt, points, threads=2, **grid).SA, floors.SA)
    with pytest.raises(ValueError, match="^period: equipment is neither rigid nor free"):
        rampwise.floor_spectrum(frame, record, dt, points, period=0.0)


def test_floor_spectrum_of_nothing():
    """Where nothing moves the usual way is off by nothing."""
    frame = rampwise.Structure([1.0], [9.0], damping=0.05, direction=[1.0])
    points = {"point": frame.total_acceleration(0)}
    assert np.all(rampwise.floor_spectrum(frame, np.zeros(9), 0.1, points, period=[0.5, 1.0]).sampled_error == 0)


def test_sparse_matrices():
    """SciPy's, in any of its forms, are what they are when full."""
    stiffness = np.array([[3.0, -1.0], [-1.0, 1.0]])
    for kind in (scipy.sparse.csr_matrix, scipy.sparse.coo_array):
        frame = rampwise.Structure(kind(np.diag([2.0, 1.0])), kind(stiffness), damping=0.05, force=[1.0, 0.0])
        same_bits(frame.omega, rampwise.Structure([2.0, 1.0], stiffness, damping=0.05, force=[1.0, 0.0]).omega)


def test_static_correction():
    """Two modes of eight under a load that stays: with the correction every output settles where K says."""
    random = np.random.default_rng(12)
    mass, _, stiffness = random_chain(random, 8, 0)
    force = random.normal(size=8)
    frame = rampwise.Structure(mass, stiffness, damping=0.5, force=force)
    outputs = {str(i): frame.displacement(i) for i in range(8)}
    settled = np.linalg.solve(stiffness, force)
    for corrected in (True, False):
        values = frame.respond(np.ones(400), 0.5, outputs, modes=2, static_correction=corrected).values[-1]
        assert (np.abs(values - settled).max() < 1e-11 * np.abs(settled).max()) == corrected
    both = rampwise.Structure(mass, stiffness, damping=0.5, direction=np.ones(8), force=force)
    for unit in np.eye(2):
        values = both.respond(np.tile(unit, (400, 1)), 0.5, {name: both.displacement(int(name)) for name in outputs},
                              modes=2, static_correction=True).values[-1]  # fmt: skip
        expected = settled if unit[1] else -np.linalg.solve(stiffness, mass.diagonal())
        np.testing.assert_allclose(values, expected, rtol=0, atol=1e-11 * np.abs(expected).max())
    based = rampwise.Structure(mass, stiffness, damping=0.5, direction=np.ones(8))
    roof = {"roof": based.total_acceleration(7)}
    values = based.respond(np.ones(400), 0.5, roof, modes=2, static_correction=True)["roof"]
    np.testing.assert_allclose(values[-1], 1, rtol=1e-13)
    assert based.mass_share(2)[0] < based.mass_share(3)[0] < 1


def test_weights_of_zero_change_no_bits():
    """Outputs of displacements alone take no weights on the motion: alone and beside a velocity, the same bits."""
    frame, outputs, _ = frame_and_outputs()
    record = np.random.default_rng(18).uniform(-1, 1, (100, 2))
    drift = {"drift": outputs["drift"]}
    beside = frame.respond(record, 0.02, {**drift, **outputs, "velocity": frame.velocity(1)})
    alone = frame.respond(record, 0.02, drift)
    same_bits(alone["drift"], beside["drift"])
    same_bits(alone.peaks["drift"].value, beside.peaks["drift"].value)
    plan = frame.live(0.02, drift)._oscillators.plan(np.zeros(1))[0]
    assert plan["on_acceleration"] == 0 and plan["on_velocity"] != 0  # pairs of roots weigh velocities too
    classical = rampwise.Structure([1.0, 2.0], [[3.0, -1.0], [-1.0, 1.0]], damping=0.05, direction=[1.0, 1.0])
    plan = classical.live(0.02, {"top": classical.displacement(1)})._oscillators.plan(np.zeros(1))[0]
    assert plan["on_velocity"] == plan["on_acceleration"] == plan["on_input"] == 0 != plan["on_displacement"]


def frame_and_outputs():
    random = np.random.default_rng(14)
    mass, damper, stiffness = random_chain(random, 40, 5.0)
    frame = rampwise.Structure(mass, stiffness, damper=damper, direction=np.ones(40), force=np.eye(40)[3])
    piece = rampwise.System.natural(omega=[5.0, 9.0], damping=0.03)
    return (frame, {"top": frame.total_acceleration(39), "drift": frame.displacement(3) - frame.displacement(2)},
            {"pair": rampwise.Equipment("top", piece)})  # fmt: skip


@pytest.mark.parametrize("moving", [False, True])
def test_blocks_and_saving_change_no_bits(moving):
    frame, outputs, equipment = frame_and_outputs()
    random = np.random.default_rng(15)
    record = random.uniform(-1, 1, (90, 2))
    initial = initial_of(random, 40) if moving else {}
    whole = frame.respond(record, 0.02, outputs, equipment=equipment, **initial)
    for again in (lambda live: pickle.loads(pickle.dumps(live)), copy.deepcopy):
        live = again(frame.live(0.02, outputs, equipment=equipment, **initial))
        parts = []
        for block in np.split(record, [1, 17, 50]):
            parts.append(live.put(block, equipment_histories=True))
            live = again(live)
        same_bits(np.concatenate([part.values for part in parts]), whole.values)
        for name in HISTORIES:
            joined = np.concatenate([getattr(part.equipment["pair"], name) for part in parts])
            same_bits(joined, getattr(whole.equipment["pair"], name))
        same_bits(live.peaks()["top"].value, whole.peaks["top"].value)
        same_bits(live.equipment_displacement()["pair"].value, whole.equipment_displacement["pair"].value)
    live.start()
    same_bits(live.put(record).values, whole.values)
    assert live.provenance == whole.provenance


def test_plain_dictionaries_and_copies():
    frame, outputs, equipment = frame_and_outputs()
    record = np.random.default_rng(17).uniform(-1, 1, (20, 2))
    response = pickle.loads(pickle.dumps(frame)).respond(record, 0.02, outputs, equipment=equipment)
    same_bits(response.values, frame.respond(record, 0.02, outputs).values)
    told = json.loads(json.dumps(response.to_dict()))
    assert told["peaks"]["top"]["high"] == response.peaks["top"].high and told["outputs"] == ["top", "drift"]
    floors = rampwise.floor_spectrum(frame, record, 0.02, {"top": outputs["top"]}, frequency=[2.0, 3.0])
    assert json.loads(json.dumps(floors.to_dict()))["SA"] == floors.SA.tolist()
    np.testing.assert_allclose(floors.PSA, (2 * np.pi * np.array([[2.0, 3.0]])) ** 2 * floors.SD, rtol=1e-14)
    with pytest.raises(KeyError, match="none of the outputs 'top', 'drift'"):
        response["bottom"]


def test_rules_at_their_limits():
    """A. Der Kiureghian 1981: coefficients 1 and 0 where frequencies agree and lie far apart; 0.473 at 5 % and a ratio
    of 0.9 (A. K. Chopra, Dynamics of Structures, fig. 13.7.1; from memory)."""
    peaks = np.array([[3.0, -4.0, 12.0], [1.0, 2.0, 2.0]])
    same_bits(rampwise.absolute_sum(peaks), [19.0, 5.0])
    np.testing.assert_allclose(rampwise.root_of_squares(peaks), [13, 3], rtol=1e-15)
    np.testing.assert_allclose(rampwise.complete_quadratic(peaks, [1, 1e5, 1e10], 0.02), [13, 3], rtol=1e-6)
    np.testing.assert_allclose(rampwise.complete_quadratic(peaks, [2, 2, 2], [0.02] * 3), [11, 5], rtol=1e-13)
    np.testing.assert_allclose(rampwise.with_share(peaks, 0.3), [14.1, 2.9], rtol=1e-15)
    assert abs(rampwise.modal_correlation(1, 0.05, 0.9, 0.05) - 0.473) < 5e-4
    assert rampwise.modal_correlation(3, 0, 3, 0) == 1 and rampwise.modal_correlation(3, 0, 4, 0) == 0


def test_refused_combinations():
    """A list of another length would be read beyond its end, or spread over modes that it does not belong to."""
    for name, omega, damping in (("omega: shape \\(1,\\)", [2.0], 0.05), ("omega: shape \\(\\)", 2.0, 0.05),
                                 ("omega: shape \\(3,\\)", [1.0, 2.0, 3.0], 0.05),
                                 ("damping: shape \\(1,\\)", [1.0, 2.0], [0.05]),
                                 ("damping: shape \\(3,\\)", [1.0, 2.0], [0.05] * 3),
                                 ("damping: 5 is above .* not per cent", [1.0, 2.0], 5.0)):  # fmt: skip
        with pytest.raises(ValueError, match="^" + name):
            rampwise.complete_quadratic([3.0, 4.0], omega, damping)
    with pytest.raises(ValueError, match="^damping: 5 is above .* not per cent"):
        rampwise.modal_correlation(1.0, 0.05, 2.0, 5.0)
    assert rampwise.complete_quadratic([3.0], [2.0], [0.05]) == 3


def test_peaks_of_modes():
    """Alone, a mode's spectral peak is the true one; the absolute sum is never exceeded."""
    ground = np.random.default_rng(16).uniform(-1, 1, 400)
    frame = rampwise.Structure([2.0, 1.0], [[900.0, -300.0], [-300.0, 300.0]], damping=0.03, direction=[1.0, 1.0])
    roof = frame.displacement(1)
    spectrum = rampwise.response_spectrum(ground, 0.02, omega=frame.omega, damping=0.03)
    peaks = frame.modal_peaks(roof, spectrum.SD)
    alone = frame.respond(ground, 0.02, {"roof": roof}, modes=1).peaks["roof"].size
    np.testing.assert_allclose(np.abs(peaks[0]), alone, rtol=1e-12)
    both = frame.respond(ground, 0.02, {"roof": roof}).peaks["roof"].size
    assert both <= rampwise.absolute_sum(peaks)
    with pytest.raises(ValueError, match="^row: "):
        frame.modal_peaks(frame.velocity(1), spectrum.SD)


GOOD = {"mass": [1.0, 1.0], "stiffness": [4.0, 9.0], "damping": 0.05, "force": [1.0, 0.0]}
REFUSALS = [
    (ValueError, "mass: the matrix is not positive definite", {"mass": [1.0, -1.0]}),
    (ValueError, "mass: shape", {"mass": np.ones((2, 3))}),
    (ValueError, "stiffness: shape", {"stiffness": [1.0, 2.0, 3.0]}),
    (ValueError, "stiffness: the matrix is not symmetric", {"stiffness": [[1.0, 0.5], [0.0, 1.0]]}),
    (ValueError, "stiffness: a number is not finite", {"stiffness": [1.0, np.nan]}),
    (ValueError, "stiffness: the structure falls away", {"stiffness": [1.0, -1.0]}),
    (ValueError, "damping: .* not per cent \\(5 % is 0.05\\)$", {"damping": 5.0}),
    (ValueError, "damping: one ratio", {"damping": [0.1, 0.1, 0.1]}),
    (TypeError, "exactly one of damper and damping", {"damper": [1.0, 1.0]}),
    (TypeError, "direction or force", {"force": None}),
    (ValueError, "direction: 2 numbers an input", {"direction": [1.0, 1.0, 1.0]}),
    (ValueError, "direction: a number is not finite", {"direction": [1.0, np.nan]}),
    (ValueError, "force: a number is not finite", {"force": [1.0, np.inf]}),
    (ValueError, "damping: a number is not finite", {"damping": np.nan}),
    (ValueError, "direction: all numbers of a direction are 0", {"direction": [[1.0, 0.0], [0.0, 0.0]]}),
    (ValueError, "mass: .* without mass are condensed first", {"mass": [1.0, 0.0]}),
]


@pytest.mark.parametrize("kind, text, options", REFUSALS)
def test_refused_structures(kind, text, options):
    with pytest.raises(kind, match="^" + text):
        rampwise.Structure(**{**GOOD, **options})


def test_other_refusals():
    frame = rampwise.Structure(**GOOD)
    row, box = {"one": frame.acceleration(0)}, rampwise.System(1, 0, 1)
    live = frame.live(0.1, row)
    for kind, text, call in (
        (TypeError, "outputs: a dictionary", lambda: frame.live(0.1, [frame.acceleration(0)])),
        (TypeError, "outputs: 'one' is no row", lambda: frame.live(0.1, {"one": 3.0})),
        (ValueError, "dt: ", lambda: frame.live(-1.0, row)),
        (ValueError, "modes: there are 2", lambda: frame.live(0.1, row, modes=3)),
        (ValueError, "at: ", lambda: frame.displacement(2)),
        (ValueError, "displacement: a number is not finite", lambda: frame.live(0.1, row, displacement=[1, np.nan])),
        (ValueError, "velocity: one number, or 2,", lambda: frame.live(0.1, row, velocity=[1.0])),
        (ValueError, "displacement, velocity: .* not finite",
         lambda: rampwise.Structure(**{**GOOD, "mass": [9.0, 1.0]}).live(0.1, row, velocity=1e308)),
        (ValueError, "equipment: 'a' stands on 'b'",
         lambda: frame.live(0.1, row, equipment={"a": rampwise.Equipment("b", box)})),
        (TypeError, "equipment: 'a' is no Equipment", lambda: frame.live(0.1, row, equipment={"a": ("one", box)})),
        (TypeError, "equipment: 'a' is no Equipment", lambda: frame.live(0.1, row, equipment={"a": box})),
        (TypeError, "equipment: 'a' is no Equipment",
         lambda: frame.live(0.1, row, equipment={"a": rampwise.Equipment("one", 3.0)})),
        (TypeError, "equipment: a dictionary", lambda: frame.live(0.1, row, equipment=[box])),
        (ValueError, "equipment: 'a' stands on 'one', which is not the total acceleration",
         lambda: frame.live(0.1, {"one": frame.displacement(0)}, equipment={"a": rampwise.Equipment("one", box)})),
        (ValueError, "points: 'one' is not the total acceleration",
         lambda: rampwise.floor_spectrum(frame, [1.0, 2.0], 0.1, {"one": frame.velocity(1)}, period=1.0)),
        (TypeError, "outputs: a dictionary",
         lambda: rampwise.floor_spectrum(frame, [1.0, 2.0], 0.1, [3.0], period=1.0)),
        (TypeError, "samples: a whole number is needed, not 10.5", lambda: live.peaks("residual", samples=10.5)),
        (ValueError, "samples: none was put", live.peaks),
        (ValueError, "samples: none was put", live.save),
        (ValueError, "samples: shape", lambda: live.put(np.ones((3, 2)))),
        (ValueError, "samples: there are no", lambda: live.put([])),
        (ValueError, "samples: .* \\(at sample 1 of this block\\)", lambda: live.put([0.0, np.nan])),
        (ValueError, "damper: ", lambda: rampwise.Structure([1.0, 1.0], [[4.0, 0.0], [0.0, 1.0]], force=[1.0, 0.0],
                                                            damper=[[4.0, 1e-9], [1e-9, 2.0]])
         .live(0.1, {"one": frame.displacement(0)})),
    ):  # fmt: skip
        with pytest.raises(kind, match="^" + text):
            call()
    live.put([0.0, 1.0])
    before = live.save()
    with pytest.raises(ValueError, match="^samples: .* \\(at sample 2 of this block\\)"):
        live.put([0.0, 1.0, np.inf])
    assert live.save() == before
    with pytest.raises(ValueError, match="^saved: "):
        live.resume(before[:-1] + bytes([before[-1] ^ 1]))
    with pytest.raises(ValueError, match="^peaks: "):
        quiet = frame.live(0.1, row, peaks=False)
        quiet.put([1.0])
        quiet.peaks()
