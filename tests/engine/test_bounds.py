"""Bounds against all vertices, grids and answers in closed form."""

import itertools

import numpy as np
import pytest

from rcrules.engine import Shape, bounds, search, solve
from tests.engine.networks import at_node, step

approx = pytest.approx


def counted(function):
    """The function, and the number of calls and cases it was asked for."""
    calls = []

    def asked(cases):
        calls.append(len(cases))
        return function(cases)

    return asked, calls


def test_known_signs_take_one_batch_of_three_cases():
    evaluate, calls = counted(lambda x: x[:, 0] - x[:, 1])
    found = bounds(evaluate, [1.0, 1.0, 7.0], [2.0, 2.0, 8.0], [3.0, 4.0, 9.0], [1, -1, 0], False)
    assert (found.low, found.nominal, found.high) == (-3.0, 0.0, 2.0)
    assert found.low_at == (1.0, 4.0, 8.0)
    assert found.high_at == (3.0, 1.0, 8.0)
    assert found.proved
    assert calls == [3]


def test_no_number_at_all_has_three_equal_values():
    found = bounds(lambda x: np.full(len(x), 5.0), [], [], [], [], False)
    assert (found.low, found.nominal, found.high, found.low_at, found.proved) == (5.0, 5.0, 5.0, (), True)


def test_numbers_without_width_need_no_search():
    assert bounds(lambda x: x[:, 0] ** 2, [2.0], [2.0], [2.0], [None], False).proved


def test_vertices_prove_what_is_linear_fractional_in_each_number():
    """Two 1 % resistors from 1 V: 0.495 .. 0.505."""
    found = bounds(lambda x: x[:, 1] / x.sum(axis=1), [9.9, 9.9], [10.0, 10.0], [10.1, 10.1], [None, None], True)
    assert (found.low, found.high) == (approx(0.495), approx(0.505))
    assert found.proved
    assert found.low_at == (10.1, 9.9)


def test_too_many_vertices_are_searched_not_proved():
    p = 14
    found = bounds(lambda x: x.sum(axis=1), np.zeros(p), np.full(p, 0.5), np.ones(p), [None] * p, True)
    assert (found.low, found.high, found.proved) == (0.0, float(p), False)


def test_power_peaks_inside_at_matched_resistance():
    """5 V, 100 Ω, load 50 .. 150 Ω: 55.556 mW at 50 Ω, 62.5 mW at 100 Ω, wherever nominal lies."""
    for nominal in (60.0, 100.0, 140.0):
        found = bounds(lambda x: 25.0 * x[:, 0] / (100.0 + x[:, 0]) ** 2, [50.0], [nominal], [150.0], [None], False)
        assert found.low == approx(25.0 * 50.0 / 150.0**2, rel=1e-15)
        assert found.high == approx(0.0625, rel=1e-12)
        assert found.high_at == approx((100.0,), rel=1e-4)
        assert not found.proved


def test_infinite_is_above_every_value():
    found = bounds(lambda x: np.where(x[:, 0] > 2.5, np.inf, x[:, 0]), [1.0], [2.0], [3.0], [1], False)
    assert (found.low, found.nominal, found.high) == (1.0, 2.0, np.inf)
    searched = bounds(lambda x: np.where(x[:, 0] > 2.5, np.inf, x[:, 0]), [1.0], [2.0], [3.0], [None], False)
    assert (searched.low, searched.high) == (1.0, np.inf)


def test_what_is_not_defined_somewhere_is_said():
    with np.errstate(invalid="ignore"):
        found = bounds(lambda x: np.sqrt(x[:, 0]), [-1.0], [1.0], [4.0], [None], False)
    assert np.isnan(found.low)
    assert np.isnan(found.high)
    assert found.nominal == 1.0
    assert found.low_at == (-1.0,)


def test_equal_values_give_the_lowest_case():
    found = bounds(lambda x: np.zeros(len(x)), [1.0, 1.0], [2.0, 2.0], [3.0, 3.0], [None, None], True)
    assert found.low_at == found.high_at == (1.0, 1.0)


def test_a_range_up_to_infinity_is_scanned():
    """x/(1 + (x/7)²) peaks at 7 with 3.5; a resistor may be anything from 1 Ω to open."""

    def evaluate(x):
        return np.where(np.isinf(x[:, 0]), 0.0, 1.0 / (1.0 / x[:, 0] + x[:, 0] / 49.0))

    found = bounds(evaluate, [1.0], [np.inf], [np.inf], [None], False)
    assert found.high == approx(3.5, rel=1e-10)
    assert found.low == 0.0


def test_the_search_can_be_run_in_step_with_others():
    """Two searches, their cases evaluated in one call, find what they find alone."""

    def function(x):
        return (x[:, 0] - 0.3) ** 2 - x[:, 1] * x[:, 0]

    box = np.zeros(2), np.full(2, 0.5), np.ones(2)
    running = [search(*box, (None, None), False) for _ in range(2)]
    waiting = [next(one) for one in running]
    ends = []
    while running:
        values = np.split(function(np.concatenate(waiting)), np.cumsum([len(cases) for cases in waiting])[:-1])
        pairs, running, waiting = list(zip(running, values, strict=True)), [], []
        for one, value in pairs:
            try:
                waiting.append(one.send(value))
                running.append(one)
            except StopIteration as end:
                ends.append(end.value)
    assert ends == [bounds(function, *box, (None, None), False)] * 2


@pytest.mark.parametrize("seed", range(12))
def test_multilinear_functions_reach_the_best_vertex(seed):
    """Ten numbers of unknown sign: the search finds what all 1 024 vertices hold."""
    rng = np.random.default_rng(seed)
    lean, twist = rng.normal(size=10), rng.normal(size=(10, 10)) * 0.15

    def evaluate(x):
        return x @ lean + np.einsum("ci,ij,cj->c", x, np.triu(twist, 1), x)

    box = -np.ones(10), np.zeros(10), np.ones(10)
    found = bounds(evaluate, *box, [None] * 10, False)
    every = evaluate(np.array(list(itertools.product((-1.0, 1.0), repeat=10))))
    assert found.low <= every.min() + 1e-9
    assert found.high >= every.max() - 1e-9
    assert evaluate(np.array([found.low_at]))[0] == approx(found.low, rel=1e-12)


@pytest.mark.parametrize("seed", range(8))
def test_inner_extremes_match_a_fine_grid(seed):
    """Random quadratic forms in three numbers: at least as good as a grid of 41³ cases."""
    rng = np.random.default_rng(seed)
    middle, shape = rng.uniform(-0.7, 0.7, 3), rng.normal(size=(3, 3))

    def evaluate(x):
        y = (x - middle) @ shape
        return np.exp(-0.5 * (y * y).sum(axis=1)) + 0.1 * x[:, 0]

    axis = np.linspace(-1.0, 1.0, 41)
    every = evaluate(np.array(list(itertools.product(axis, repeat=3))))
    found = bounds(evaluate, -np.ones(3), np.zeros(3), np.ones(3), [None] * 3, False)
    assert found.high >= every.max() - 1e-9
    assert found.low <= every.min() + 1e-9


def test_settling_with_a_side_branch_peaks_inside_the_box():
    """Driven 36 kΩ, 1 nF; side branch 1 kΩ .. with 1 nF: the slowest settling is not at a vertex (grid of 61 x 61)."""
    shape = Shape(2, 2, ((2, 0), (0, 1)), ((0, 3), (1, 3)))

    def evaluate(x):
        response = solve(shape, x[:, :2], x[:, 2:]).respond(step(shape, [1.0, 0.0], len(x)), np.zeros((len(x), 2)))
        return response.observe(at_node(shape, 0), 1.0).last_exit(-0.01, 0.01)

    low, high = np.array([1e3, 1e3, 1e-9, 1e-9]), np.array([3e4, 3e5, 2e-9, 1e-7])
    found = bounds(evaluate, low, np.sqrt(low * high), high, [None] * 4, False)
    axes = [np.geomspace(a, b, 9) for a, b in zip(low, high, strict=True)]
    every = evaluate(np.array(list(itertools.product(*axes))))
    assert found.high >= every.max() * (1.0 - 1e-9)
    assert found.low <= every.min() * (1.0 + 1e-9)
    assert not found.proved


def test_time_constants_over_tolerances_need_two_cases():
    """Every tau rises with every R and C (min-max principle): all vertices of a random box lie between two."""
    shape = Shape(2, 2, ((2, 0), (0, 1)), ((0, 3), (1, 0)))
    low, high = np.array([0.9e3, 1.8e3, 0.8e-6, 1.5e-6]), np.array([1.1e3, 2.2e3, 1.2e-6, 2.5e-6])

    def evaluate(x):
        return solve(shape, x[:, :2], x[:, 2:]).taus[:, 0]

    found = bounds(evaluate, low, 0.5 * (low + high), high, [1] * 4, False)
    every = evaluate(np.array(list(itertools.product(*zip(low, high, strict=True)))))
    assert (found.low, found.high) == (every.min(), every.max())


@pytest.mark.parametrize("seed", range(4))
def test_searched_delays_reach_the_worst_of_all_vertices(seed):
    """Trees with side branches, ±20 %, ten numbers of unknown sign: as late and as early as any of 1 024 vertices."""
    rng = np.random.default_rng(seed)
    resistors = tuple((node, int(rng.integers(node)) if node else 5) for node in range(5))
    shape = Shape(5, 2, resistors, tuple((node, 6) for node in range(5)))
    nominal = np.concatenate([10.0 ** rng.uniform(3.0, 4.0, 5), 10.0 ** rng.uniform(-9.0, -8.0, 5)])
    node = at_node(shape, int(rng.integers(5)))

    def evaluate(x):
        response = solve(shape, x[:, :5], x[:, 5:]).respond(step(shape, [1.0, 0.0], len(x)), np.zeros((len(x), 5)))
        return response.observe(node, 0.05).first_crossing(1.0)

    found = bounds(evaluate, 0.8 * nominal, nominal, 1.2 * nominal, [None] * 10, False)
    every = evaluate(nominal * np.array(list(itertools.product((0.8, 1.2), repeat=10))))
    assert found.high >= every.max() * (1.0 - 1e-9)
    assert found.low <= every.min() * (1.0 + 1e-9)
    assert evaluate(np.array([found.high_at]))[0] == approx(found.high, rel=1e-9)


def test_a_wide_range_is_searched_by_ratio():
    """x/(1 + x²)-like peak at 30 in 1 .. 10 000; the peak is found to ten digits."""
    found = bounds(lambda x: x[:, 0] / (900.0 + x[:, 0] ** 2), [1.0], [5000.0], [1e4], [None], False)
    assert found.high == approx(1.0 / 60.0, rel=1e-10)
    assert found.high_at == approx((30.0,), rel=1e-3)


def test_what_is_not_defined_ends_a_search_among_many_vertices():
    evaluate, calls = counted(lambda x: np.where(x.sum(axis=1) > 8.0, np.nan, x.sum(axis=1)))
    found = bounds(evaluate, np.zeros(10), np.full(10, 0.5), np.ones(10), [None] * 10, False)
    assert np.isnan(found.low)
    assert np.isnan(found.high)
    assert len(calls) == 2


def test_a_value_that_is_infinite_inside_ends_the_climb_of_its_side():
    """Never reached somewhere inside: that is the highest; the lowest is still sought."""
    found = bounds(
        lambda x: np.where(np.abs(x[:, 0] - 0.5) < 0.2, np.inf, (x[:, 0] - 0.9) ** 2),
        [0.0],
        [1.0],
        [1.0],
        [None],
        False,
    )
    assert found.high == np.inf
    assert found.low == approx(0.0, abs=1e-9)


@pytest.mark.parametrize("scale", [1e-310, 1e-200, 1e160, 1e300])
def test_values_near_the_ends_of_the_number_range_do_not_mislead_the_climb(scale):
    """A hill at (0.3, 0.6) of any height; each case asked for is a case of the box."""

    def hill(x):
        assert np.isfinite(x).all()
        return scale * (1.0 - (x[:, 0] - 1.3) ** 2 - (x[:, 1] - 1.6) ** 2 - 0.5 * (x[:, 0] - 1.3) * (x[:, 1] - 1.6))

    found = bounds(hill, [1.0, 1.0], [1.5, 1.5], [2.0, 2.0], [None, None], False)
    assert found.high == approx(scale, rel=1e-3, abs=0.0)
