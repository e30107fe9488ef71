"""Natural modes against answers in closed form and in many digits."""

import mpmath as mp
import numpy as np
import pytest

from rcrules.engine import FloatingNode, Shape, roughly, solve
from tests.engine.networks import at_node, random_shape, random_values, step
from tests.engine.oracle import exact

approx = pytest.approx


def ladder(sections: int) -> Shape:
    """R in series, C to ground, repeated; driven at terminal ``sections``, ground is the last terminal."""
    resistors = tuple((sections if node == 0 else node - 1, node) for node in range(sections))
    return Shape(sections, 2, resistors, tuple((node, sections + 1) for node in range(sections)))


def test_equal_two_section_ladder():
    """The poles solve s² + 3s + 1 = 0 over RC (hand derivation): tau = (3 ± √5)/2 RC."""
    modes = solve(ladder(2), np.full((1, 2), 1e3), np.full((1, 2), 1e-6))
    root = np.sqrt(5.0)
    assert modes.taus[0] == approx([1e-3 * (3.0 + root) / 2.0, 1e-3 * (3.0 - root) / 2.0], rel=1e-15)


def test_equal_three_section_ladder():
    """tau = 5.048917, 0.643104, 0.307979 RC (1/(4 sin²) formula of uniform ladders), Elmore sum 6 RC."""
    taus = solve(ladder(3), np.ones((1, 3)), np.ones((1, 3))).taus[0]
    assert taus == approx([5.048917, 0.643104, 0.307979], abs=5e-7)
    assert taus.sum() == approx(6.0, rel=1e-15)


def test_one_node_is_the_product_of_r_and_c():
    modes = solve(Shape(1, 1, ((0, 1), (1, 0)), ((1, 0), (0, 1))), np.array([[2e3, 2e3]]), np.array([[1e-6, 2e-6]]))
    assert modes.taus[0] == approx([3e-3], rel=1e-15)


def test_nodes_without_capacitors_have_a_time_constant_of_exactly_zero():
    modes = solve(Shape(3, 2, ((3, 0), (0, 1), (1, 2), (2, 4)), ((1, 4),)), np.full((1, 4), 1e3), np.full((1, 1), 1e-6))
    assert modes.taus[0, 0] == approx(1e-3, rel=1e-14)
    assert list(modes.taus[0, 1:]) == [0.0, 0.0]


def test_a_capacitor_between_two_free_nodes_alone_leaves_one_zero():
    """Seen from the capacitor: 1 kΩ + 3 kΩ."""
    modes = solve(Shape(2, 1, ((0, 2), (1, 2)), ((0, 1),)), np.array([[1e3, 3e3]]), np.array([[1e-9]]))
    assert modes.taus[0, 0] == approx(4e-6, rel=1e-14)
    assert modes.taus[0, 1] == 0.0


def test_the_number_of_zeros_is_counted_case_by_case():
    modes = solve(ladder(2), np.full((3, 2), 1.0), np.array([[1.0, 1.0], [0.0, 1.0], [0.0, 0.0]]))
    assert [(row > 0.0).sum() for row in modes.taus] == [2, 1, 0]
    assert modes.taus[1, 0] == approx(2.0, rel=1e-15)


def test_a_floating_node_is_named_with_its_case():
    shape = Shape(3, 1, ((0, 3), (1, 2), (1, 3)), ((0, 3), (1, 3), (2, 3)))
    ohms = np.array([[1e3, 1e3, 1e3], [1e3, 1e3, np.inf]])
    with pytest.raises(FloatingNode) as caught:
        solve(shape, ohms, np.full((2, 3), 1e-9))
    assert caught.value.node in {1, 2}
    assert caught.value.case == 1


@pytest.mark.parametrize("nodes", [1, 2, 3])
def test_no_resistor_at_all_is_floating(nodes):
    shape = Shape(nodes, 1, (), tuple((node, nodes) for node in range(nodes)))
    with pytest.raises(FloatingNode):
        solve(shape, np.zeros((1, 0)), np.full((1, nodes), 1e-9))


@pytest.mark.parametrize(
    ("ohms", "farads"), [(0.0, 1e-9), (-1.0, 1e-9), (np.nan, 1e-9), (1e3, -1e-9), (1e3, np.inf), (1e3, np.nan)]
)
def test_values_out_of_range_are_refused(ohms, farads):
    with pytest.raises(ValueError, match="must be positive"):
        solve(Shape(1, 1, ((0, 1),), ((0, 1),)), np.array([[ohms]]), np.array([[farads]]))


def test_a_branch_to_nowhere_is_refused():
    with pytest.raises(ValueError, match="terminal"):
        Shape(1, 1, ((0, 2),), ())


def test_no_free_node_is_a_network_too():
    shape = Shape(0, 2, ((0, 1),), ((0, 1),))
    modes = solve(shape, np.full((3, 1), 1e3), np.full((3, 1), 1e-9))
    assert modes.taus.shape == (3, 0)
    assert modes.steady(np.zeros((3, 2)), np.zeros((3, 0))).shape == (3, 0)
    signal = modes.respond(step(shape, [5.0, 0.0], 3), np.zeros((3, 1))).observe(np.array([1.0, -1.0]), 1.0)
    assert list(signal.initial()) == [4.0] * 3
    assert list(signal.first_crossing(1.0)) == [0.0] * 3
    assert list(signal.first_crossing(-1.0)) == [np.inf] * 3


def test_an_open_resistor_is_as_if_it_were_not_there():
    shape = Shape(2, 2, ((2, 0), (0, 1), (1, 3), (0, 3)), ((0, 3), (1, 3)))
    less = Shape(2, 2, ((2, 0), (0, 1), (1, 3)), ((0, 3), (1, 3)))
    farads = np.array([[1e-6, 1e-9]])
    with_open = solve(shape, np.array([[1e3, 2e3, 3e3, np.inf]]), farads)
    assert list(with_open.taus[0]) == list(solve(less, np.array([[1e3, 2e3, 3e3]]), farads).taus[0])


def test_a_leak_beside_a_large_conductance_keeps_its_digits():
    """1 mΩ between two nodes, 1 TΩ to ground: the divider formula in exact numbers."""
    modes = solve(Shape(2, 2, ((2, 0), (0, 1), (1, 3)), ()), np.array([[1e12, 1e-3, 3e12]]), np.zeros((1, 0)))
    assert modes.steady(np.array([[4.0, 0.0]]), np.zeros((1, 2)))[0] == approx([3.0, 3.0], rel=4e-16)


def test_current_drawn_from_a_node_lowers_it_by_its_resistance():
    """3.3 V through 1 MΩ, 1 µA drawn: 2.3 V; -1 µA: 4.3 V."""
    modes = solve(Shape(1, 1, ((1, 0),), ()), np.full((2, 1), 1e6), np.zeros((2, 0)))
    assert modes.steady(np.full((2, 1), 3.3), np.array([[1e-6], [-1e-6]]))[:, 0] == approx([2.3, 4.3], rel=1e-14)


def test_orders_of_elimination_that_differ_between_cases_do_not_mix():
    rng = np.random.default_rng(5)
    for free in (2, 3, 5):
        shape = random_shape(rng, free)
        ohms, farads = random_values(rng, shape, 40, 8.0)
        together = solve(shape, ohms, farads)
        for case in range(40):
            alone = solve(shape, ohms[case : case + 1], farads[case : case + 1])
            assert together.taus[case] == approx(alone.taus[0], rel=1e-14)


def test_fifteen_decades_against_ninety_digits():
    """Time constants to 1e-13, voltages to 1e-9 of the step, values over 15 decades (worst of 1 500: 3e-11)."""
    rng = np.random.default_rng(15)
    for _ in range(100):
        shape = random_shape(rng, int(rng.integers(1, 6)))
        ohms, farads = random_values(rng, shape, 1, 15.0)
        truth, modes = exact(shape, ohms[0], farads[0]), solve(shape, ohms, farads)
        assert modes.taus[0] == approx([float(tau) for tau in truth.taus], rel=1e-13, abs=0.0)
        volts = rng.uniform(-1.0, 1.0, 2)
        response = modes.respond(step(shape, volts), np.zeros((1, len(shape.capacitors))))
        for t in (0.0, *(modes.taus[0][modes.taus[0] > 0.0] * 0.7)):
            wanted = [float(v) for v in truth.step([0.0, 0.0], list(volts), t)]
            found = [response.observe(at_node(shape, k), 0.0).at(np.array([t]))[0] for k in range(shape.free)]
            assert found == approx(wanted, rel=0.0, abs=1e-9 * np.abs(volts).max())


def test_coupling_capacitors_alone_against_ninety_digits():
    """Groups of nodes that only capacitors between them join: as many zeros as groups, the rest to 1e-13."""
    rng = np.random.default_rng(16)
    for _ in range(40):
        free = int(rng.integers(3, 7))
        pairs = tuple(tuple(int(k) for k in rng.choice(free, 2, replace=False)) for _ in range(free - 1))
        shape = Shape(free, 2, random_shape(rng, free).resistors, pairs)
        ohms, farads = random_values(rng, shape, 1, 12.0)
        wanted = [float(tau) for tau in exact(shape, ohms[0], farads[0]).taus]
        assert solve(shape, ohms, farads).taus[0] == approx(wanted, rel=1e-13, abs=0.0)


def test_many_nodes_against_ninety_digits():
    """Ten nodes, values over 4 and over 12 decades: with and without the dense eigensolver before."""
    rng = np.random.default_rng(17)
    for decades in (4.0, 12.0):
        shape = random_shape(rng, 10)
        ohms, farads = random_values(rng, shape, 1, decades)
        truth, modes = exact(shape, ohms[0], farads[0]), solve(shape, ohms, farads)
        assert modes.taus[0] == approx([float(tau) for tau in truth.taus], rel=1e-10, abs=0.0)
        response = modes.respond(step(shape, [1.0, 0.0]), np.zeros((1, len(shape.capacitors))))
        t = modes.taus[0, 0]
        found = [response.observe(at_node(shape, k), 0.0).at(np.array([t]))[0] for k in range(10)]
        assert found == approx([float(v) for v in truth.step([0.0, 0.0], [1.0, 0.0], t)], abs=1e-9)


def test_a_case_comes_out_of_a_batch_as_it_does_alone():
    """A batch of thousands goes through in blocks."""
    rng = np.random.default_rng(18)
    shape = random_shape(rng, 5)
    ohms, farads = random_values(rng, shape, 5000, 8.0)
    together = solve(shape, ohms, farads).taus
    for case in range(0, 5000, 617):
        assert together[case] == approx(solve(shape, ohms[case : case + 1], farads[case : case + 1]).taus[0], rel=1e-14)


def test_the_oracle_knows_the_golden_ratio():
    """The oracle itself: the golden ratio of the two-section ladder in forty digits."""
    with mp.workdps(60):
        taus = exact(ladder(2), [1.0, 1.0], [1.0, 1.0]).taus
        assert mp.almosteq(taus[0], (3 + mp.sqrt(5)) / 2, rel_eps=mp.mpf(10) ** -40)


def test_a_rough_answer_of_many_nodes_is_good_enough_to_search_by():
    shape = ladder(20)
    rng = np.random.default_rng(7)
    ohms, farads = 10.0 ** rng.uniform(2, 5, (50, 20)), 10.0 ** rng.uniform(-9, -6, (50, 20))
    precise = solve(shape, ohms, farads)
    with roughly():
        rough = solve(shape, ohms, farads)
    assert not np.array_equal(rough.taus, precise.taus)
    assert np.allclose(rough.taus[:, 0], precise.taus[:, 0], rtol=1e-10)
    assert np.allclose(rough.steady(np.ones((50, 2)), np.zeros((50, 20))), 1.0, rtol=1e-12)
