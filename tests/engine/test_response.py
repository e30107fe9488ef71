"""Responses against the matrix exponential, and what must hold at jumps and over pieces."""

import numpy as np
import pytest
from scipy.linalg import expm

from rcrules.engine import Drive, Shape, solve
from tests.engine.networks import at_node, ramp, random_shape, random_values, step

approx = pytest.approx


def nodal(shape, pairs, values):
    """Indefinite nodal matrices of a batch, (case, terminal, terminal)."""
    size = shape.free + shape.held
    matrix = np.zeros((len(values), size, size))
    for k, (a, b) in enumerate(pairs):
        for row, column, sign in ((a, a, 1.0), (b, b, 1.0), (a, b, -1.0), (b, a, -1.0)):
            matrix[:, row, column] += sign * values[:, k]
    return matrix


def by_exponential(shape, ohms, farads, slopes, t):
    """Node voltages at t from rest when the held terminals ramp from 0, by one matrix exponential per case.

    States v and u: C v' = -G v - G_h u - C_h s, u' = s.
    """
    free, held = shape.free, shape.held
    g, c = nodal(shape, shape.resistors, 1.0 / ohms), nodal(shape, shape.capacitors, farads)
    inverse = np.linalg.inv(c[:, :free, :free])
    size = free + held + 1
    system = np.zeros((len(ohms), size, size))
    system[:, :free, : free + held] = -inverse @ g[:, :free]
    system[:, :free, -1] = -np.einsum("cij,cjh,ch->ci", inverse, c[:, :free, free:], slopes)
    system[:, free:-1, -1] = slopes
    return expm(system * t[:, None, None])[:, :free, -1]


def grounded(rng, free):
    """A random shape in which every free node also has a capacitor to a held terminal."""
    shape = random_shape(rng, free)
    return Shape(
        free, 2, shape.resistors, (*shape.capacitors, *((node, free + int(rng.integers(2))) for node in range(free)))
    )


def test_ramps_against_the_matrix_exponential():
    """Values over 2.5 decades each, so that the exponential itself is good to 1e-9 of the swing."""
    rng = np.random.default_rng(2)
    for _ in range(20):
        shape = grounded(rng, int(rng.integers(1, 7)))
        ohms, farads = random_values(rng, shape, 20, 2.5)
        slopes = rng.uniform(-1.0, 1.0, (20, 2))
        modes = solve(shape, ohms, farads)
        t = modes.taus[:, 0] * rng.uniform(0.05, 1.0, 20)
        zero = np.zeros((20, 1, 2))
        drive = Drive(starts=np.zeros((20, 1)), levels=zero, slopes=slopes[:, None], amps=np.zeros((20, shape.free)))
        response = modes.respond(drive, np.zeros((20, len(shape.capacitors))))
        wanted = by_exponential(shape, ohms, farads, slopes, t)
        swing = np.abs(slopes).max(axis=1) * t
        for node in range(shape.free):
            found = response.observe(at_node(shape, node), 0.0).at(t)
            assert np.all(np.abs(found - wanted[:, node]) <= 1e-9 * swing)


CASES = 70


def test_ten_thousand_networks_against_the_general_eigenproblem():
    """v = v_end + V exp(-t L) V^-1 (v_start - v_end) with C^-1 G = V L V^-1 by LAPACK; values over 4 decades each.

    150 shapes with 70 sets of values: 10 500 networks.
    """
    rng = np.random.default_rng(9)
    for _ in range(150):
        shape = grounded(rng, int(rng.integers(1, 7)))
        ohms, farads = random_values(rng, shape, CASES, 4.0)
        volts = rng.uniform(-1.0, 1.0, 2)
        g, c = nodal(shape, shape.resistors, 1.0 / ohms), nodal(shape, shape.capacitors, farads)
        free = shape.free
        start = np.linalg.solve(c[:, :free, :free], -(c[:, :free, free:] @ volts)[..., None])
        end = np.linalg.solve(g[:, :free, :free], -(g[:, :free, free:] @ volts)[..., None])
        rates, vectors = np.linalg.eig(np.linalg.solve(c[:, :free, :free], g[:, :free, :free]))
        modes = solve(shape, ohms, farads)
        assert np.sort(1.0 / rates.real, axis=1)[:, ::-1] == approx(modes.taus, rel=1e-6)
        t = modes.taus[:, 0] * rng.uniform(0.0, 3.0, CASES)
        parts = np.exp(-rates * t[:, None])[..., None] * np.linalg.solve(vectors, start - end)
        wanted = (end + vectors @ parts).real[..., 0]
        response = modes.respond(step(shape, volts, CASES), np.zeros((CASES, len(shape.capacitors))))
        for node in range(free):
            found = response.observe(at_node(shape, node), 0.0).at(t)
            assert np.all(np.abs(found - wanted[:, node]) <= 1e-9 * np.abs(volts).max())


def test_steps_are_the_limit_of_steep_ramps():
    rng = np.random.default_rng(3)
    for _ in range(30):
        shape = random_shape(rng, int(rng.integers(1, 6)))
        ohms, farads = random_values(rng, shape, 5, 4.0)
        modes, charged = solve(shape, ohms, farads), np.zeros((5, len(shape.capacitors)))
        t = modes.taus[:, 0] + 1e-9
        for node in range(shape.free):
            sudden = modes.respond(step(shape, [1.0, 0.3], 5), charged).observe(at_node(shape, node), 0.0)
            steep = modes.respond(ramp(shape, [1.0, 0.3], 1e-22, 5), charged).observe(at_node(shape, node), 0.0)
            assert steep.at(t) == approx(sudden.at(t), abs=1e-9)


def test_a_step_through_bridging_capacitors_divides_by_capacitance():
    """1 nF over 3 nF: a quarter of the step arrives at once, and the resistors divide in the end."""
    shape = Shape(1, 2, ((1, 0), (0, 2)), ((1, 0), (0, 2)))
    modes = solve(shape, np.array([[1e3, 1e3]]), np.array([[1e-9, 3e-9]]))
    signal = modes.respond(step(shape, [8.0, 0.0]), np.zeros((1, 2))).observe(at_node(shape, 0), 0.0)
    assert signal.initial() == approx([2.0], rel=1e-15)
    assert signal.final() == approx([4.0], rel=1e-15)


def test_capacitors_that_contradict_each_other_share_their_charge():
    """1 µF at 6 V switched onto 2 µF at 0 V: 2 V."""
    shape = Shape(1, 1, ((0, 1),), ((0, 1), (1, 0)))
    modes = solve(shape, np.array([[1e3]]), np.array([[1e-6, 2e-6]]))
    assert modes.respond(step(shape, [0.0]), np.array([[6.0, 0.0]])).observe(
        at_node(shape, 0), 0.0
    ).initial() == approx([2.0], rel=1e-15)


def test_nothing_moves_from_a_steady_state_that_is_kept():
    rng = np.random.default_rng(4)
    for _ in range(20):
        shape = random_shape(rng, int(rng.integers(1, 6)))
        ohms, farads = random_values(rng, shape, 3, 6.0)
        modes, volts = solve(shape, ohms, farads), np.array([[3.0, -1.0]] * 3)
        everywhere = np.concatenate([modes.steady(volts, np.zeros((3, shape.free))), volts], axis=1)
        first, second = np.array(shape.capacitors, dtype=int).reshape(-1, 2).T
        charged = everywhere[:, first] - everywhere[:, second]
        response = modes.respond(step(shape, [3.0, -1.0], 3), charged)
        for node in range(shape.free):
            lowest, highest = response.observe(at_node(shape, node), 0.0).extremes()
            assert lowest == approx(everywhere[:, node], abs=1e-9)
            assert highest == approx(everywhere[:, node], abs=1e-9)


def test_pieces_cut_anywhere_change_nothing():
    """One ramp written as three pieces, two of them of no length, equals the ramp in one piece."""
    rng = np.random.default_rng(6)
    for _ in range(20):
        shape = random_shape(rng, int(rng.integers(1, 5)))
        ohms, farads = random_values(rng, shape, 2, 4.0)
        modes, charged = solve(shape, ohms, farads), np.zeros((2, len(shape.capacitors)))
        end = float(modes.taus.max()) + 1e-6
        whole = modes.respond(ramp(shape, [2.0, 1.0], end, 2), charged)
        starts = np.tile([0.0, 0.0, 0.4 * end, 0.4 * end, end, end], (2, 1))
        level = np.array([2.0, 1.0])
        levels = np.tile(np.stack([level * 9.0, level * 0.0, level * -5.0, level * 0.4, level * 7.0, level]), (2, 1, 1))
        slopes = np.tile(np.stack([level, level / end, level, level / end, level, level * 0.0]), (2, 1, 1))
        cut = modes.respond(Drive(starts=starts, levels=levels, slopes=slopes, amps=np.zeros((2, shape.free))), charged)
        for node in range(shape.free):
            one, other = (response.observe(at_node(shape, node), 0.5) for response in (whole, cut))
            for t in (0.0, 0.2 * end, 0.4 * end, 0.9 * end, end, 3.0 * end):
                assert other.at(np.full(2, t)) == approx(one.at(np.full(2, t)), abs=1e-10)
            assert other.initial() == approx(one.initial(), abs=1e-12)
            assert other.slope_initial() == approx(one.slope_initial(), rel=1e-6, abs=1e-9 / end)
            assert other.extremes()[1] == approx(one.extremes()[1], abs=1e-9)
            assert other.first_crossing(1.0) == approx(one.first_crossing(1.0), rel=1e-8)


def test_each_case_may_have_its_own_times():
    """A pulse of 1 ms in one case, of 2 ms in the other: 1 - exp(-T/RC) is reached, then it falls."""
    shape = Shape(1, 2, ((1, 0),), ((0, 2),))
    modes = solve(shape, np.full((2, 1), 1e3), np.full((2, 1), 1e-6))
    levels = np.tile(np.array([[1.0, 0.0], [0.0, 0.0]]), (2, 1, 1))
    drive = Drive(
        starts=np.array([[0.0, 1e-3], [0.0, 2e-3]]), levels=levels, slopes=np.zeros((2, 2, 2)), amps=np.zeros((2, 1))
    )
    signal = modes.respond(drive, np.zeros((2, 1))).observe(at_node(shape, 0), 0.0)
    assert signal.extremes()[1] == approx(1.0 - np.exp([-1.0, -2.0]), rel=1e-13)
    assert signal.final() == approx([0.0, 0.0], abs=0.0)


def test_resistor_current_and_capacitor_voltage_are_weights():
    """5 V, 1 kΩ, 1 µF: the current starts at 5 mA; after RC the capacitor holds 63.2 %."""
    shape = Shape(1, 2, ((1, 0),), ((0, 2),))
    response = solve(shape, np.array([[1e3]]), np.array([[1e-6]])).respond(step(shape, [5.0, 0.0]), np.zeros((1, 1)))
    current = response.observe(np.array([[-1e-3, 1e-3, 0.0]]), 0.0)
    assert current.initial() == approx([5e-3], rel=1e-15)
    assert current.slope_initial() == approx([-5.0], rel=1e-15)
    across = response.observe(np.array([[1.0, 0.0, -1.0]]), 0.0)
    assert across.at(np.array([1e-3])) == approx([5.0 * (1.0 - np.exp(-1.0))], rel=1e-15)


def test_voltage_between_held_terminals_is_followed_too():
    shape = Shape(1, 2, ((1, 0), (1, 2)), ((0, 2), (1, 2)))
    modes = solve(shape, np.full((1, 2), 1e3), np.full((1, 2), 1e-6))
    signal = modes.respond(ramp(shape, [4.0, 0.0], 2.0), np.zeros((1, 2))).observe(np.array([0.0, 1.0, -1.0]), 1.0)
    assert signal.first_crossing(1.0) == approx([0.5], rel=1e-12)
    assert signal.final() == approx([3.0], rel=1e-15)


def test_a_source_that_ramps_for_ever_ends_at_infinity():
    shape = Shape(1, 1, ((1, 0),), ())
    modes = solve(shape, np.array([[1e3]]), np.zeros((1, 0)))
    drive = Drive(
        starts=np.zeros((1, 1)), levels=np.zeros((1, 1, 1)), slopes=np.full((1, 1, 1), -2.0), amps=np.zeros((1, 1))
    )
    signal = modes.respond(drive, np.zeros((1, 0))).observe(np.array([1.0, 0.0]), 0.0)
    assert list(signal.final()) == [-np.inf]
    assert signal.at(np.array([3.0])) == approx([-6.0])
