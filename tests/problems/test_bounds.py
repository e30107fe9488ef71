"""Many bounds in one go."""

from dataclasses import dataclass, field, replace

import numpy as np
import pytest

from rcrules.engine import FloatingNode, Shape, corner
from rcrules.engine._rough import is_rough
from rcrules.problems import Bounds, Failure, Parameter, Problem, Structure, column, solve_bounds


@dataclass(frozen=True)
class Known:
    signs: tuple[int | None, ...]
    vertices: bool = False


@dataclass(frozen=True)
class Product:
    """Product of two columns; it counts its calls."""

    calls: list[int] = field(default_factory=list, hash=False)

    def compute(self, structure: Structure, cases: np.ndarray) -> np.ndarray:
        self.calls.append(len(cases))
        if structure.at == 7 and (cases[:, 0] > 5).any():
            raise FloatingNode(0, 0)
        return cases[:, 0] * cases[:, 1]

    def theory(self, structure: Structure, low: np.ndarray, high: np.ndarray) -> Known:
        assert structure is not None
        assert (low <= high).all()
        return Known(signs=(1, None))


def problem(nominal: float, **changes: object) -> Problem:
    parameters = tuple(
        Parameter(
            name=name, unit="", low=0.5 * n, nominal=n, high=2 * n, given_low=n, given_high=1.5 * n, origin="test"
        )
        for name, n in (("a", nominal), ("b", 2.0))
    )
    empty = Structure(shape=Shape(0, 0, (), ()), ohms=(column(0), column(1)), farads=(), waveforms=())
    return Problem(structure=replace(empty, **changes), parameters=parameters)  # type: ignore[arg-type]  # any field


def bounds(found: Bounds | Failure) -> tuple[float, float, float]:
    assert isinstance(found, Bounds)
    return found.low, found.nominal, found.high


def test_results_come_in_the_order_of_the_requests():
    found = solve_bounds([(problem(n), Product()) for n in (3.0, 1.0, 2.0)])
    assert [bounds(item)[1] for item in found] == [6.0, 2.0, 4.0]


def test_equal_structures_share_their_calls():
    alone, together = Product(), Product()
    solve_bounds([(problem(1.0), alone)])
    solve_bounds([(problem(float(n)), together) for n in range(1, 51)])
    assert len(together.calls) == len(alone.calls)


def test_equal_requests_are_searched_once():
    once, twice = Product(), Product()
    solve_bounds([(problem(1.0), once)])
    found = solve_bounds([(problem(1.0), twice), (problem(1.0), twice)])
    assert once.calls == twice.calls
    assert found[0] == found[1]


def test_the_box_may_leave_assumptions_out():
    found = solve_bounds([(problem(1.0), Product()), (problem(1.0), Product(), True)])
    assert bounds(found[0]) == pytest.approx((0.5, 2.0, 8.0))
    assert bounds(found[1]) == pytest.approx((2.0, 2.0, 4.5))


def test_one_floating_node_fails_only_its_own_request():
    quantity = Product()
    found = solve_bounds([(problem(1.0, at=7), quantity), (problem(9.0, at=7), quantity), (problem(1.0), quantity)])
    assert isinstance(found[0], Bounds)
    assert isinstance(found[1], Failure)
    assert "no resistive path" in found[1].reason
    assert isinstance(found[2], Bounds)


@dataclass(frozen=True)
class Corner:
    """Corner frequency of a ladder of ten equal sections; columns: first resistor, middle resistor, middle capacitor.

    It remembers what it answered, and whether it was asked roughly.
    """

    answers: dict[tuple[float, ...], tuple[bool, float]] = field(default_factory=dict, hash=False)

    def compute(self, structure: Structure, cases: np.ndarray) -> np.ndarray:
        ohms, farads = np.full((len(cases), 10), 1e3), np.full((len(cases), 10), 1e-7)
        ohms[:, 0], ohms[:, 5], farads[:, 5] = cases.T
        found = corner(structure.shape, ohms, farads, 10, 5)
        for case, value in zip(cases, found, strict=True):
            self.answers[tuple(case)] = is_rough(), float(value)
        return found

    def theory(self, structure: Structure, low: np.ndarray, high: np.ndarray) -> Known:
        assert structure is not None
        assert (low <= high).all()
        return Known(signs=(None, None, None))


def test_a_network_of_many_nodes_is_searched_roughly_and_reported_exactly():
    series = tuple((10 if node == 0 else node - 1, node) for node in range(10))
    shape = Shape(10, 2, series, tuple((node, 11) for node in range(10)))
    numbers = (("a", 1e3, 2e3), ("b", 1e3, 4e3), ("c", 1e-7, 3e-7))
    parameters = tuple(
        Parameter(name=name, unit="", low=low, nominal=low, high=high, given_low=low, given_high=high, origin="test")
        for name, low, high in numbers
    )
    structure = Structure(shape=shape, ohms=(), farads=(), waveforms=())
    asked = Corner()
    (found,) = solve_bounds([(Problem(structure=structure, parameters=parameters), asked)])
    assert isinstance(found, Bounds)
    assert (False, found.low) == asked.answers[found.low_at]
    assert (False, found.high) == asked.answers[found.high_at]
    assert sum(rough for rough, _ in asked.answers.values()) > 5
    assert not is_rough()
