import math
from collections.abc import Callable

import numpy as np
import pytest

from rcrules.checks._resolve import Bound, Case
from rcrules.checks._subject import Subject
from rcrules.checks._verdict import Verdict, decide
from rcrules.engine import Shape
from rcrules.measures import Measure, Theory
from rcrules.problems import Array, Parameter, Problem, Structure
from tests.checks._objects import rule

STRUCTURE = Structure(
    shape=Shape(free=1, held=1, resistors=((1, 0),), capacitors=((0, 1),)), ohms=(), farads=(), waveforms=()
)


def product(_: Structure, cases: Array) -> Array:
    """All columns multiplied."""
    return np.prod(cases, axis=1)


def parameter(
    name: str, low: float, nominal: float, high: float, given: tuple[float, float] | None = None
) -> Parameter:
    """A column; with ``given`` its bounds rest on an assumption."""
    given_low, given_high = given or (low, high)
    return Parameter(
        name=name,
        unit="Ω",
        low=low,
        nominal=nominal,
        high=high,
        given_low=given_low,
        given_high=given_high,
        origin="test",
        assumed=() if given is None else (f"spread of {name}",),
        ask="" if given is None else f'[part."{name}"] tolerance = "…"',
    )


def verdict(
    *parameters: Parameter,
    at_least: float | None = None,
    at_most: float | None = None,
    compute: Callable[[Structure, Array], Array] = product,
    never: str = "fails",
) -> Verdict:
    """The verdict on the product of the columns against the limits."""
    measure = Measure(
        name="product",
        subject="node",
        unit="s",
        summary="",
        compute=compute,
        theory=lambda _, low, __: Theory(signs=(1,) * len(low) if compute is product else (None,) * len(low)),
    )
    limits = [("at-least", at_least), ("at-most", at_most)]
    bounds = tuple(
        Bound(kind=kind, strict=value, unit="s", text="", origin="") for kind, value in limits if value is not None
    )
    case = Case(rule=rule(measure=measure, never=never), subject=SUBJECT, options={}, bounds=bounds, missing=())
    return decide([(case, Problem(structure=STRUCTURE, parameters=parameters))])[0]


SUBJECT = Subject(kind="node", target=None, network=None, net="N", refs=(), feeds=(), nets=("N",), views=())  # type: ignore[arg-type] # not looked at


def test_a_limit_kept_over_the_whole_box_holds() -> None:
    found = verdict(parameter("R", 9, 10, 11), parameter("C", 1, 2, 4, given=(2, 2)), at_least=9)
    assert found.outcome == "holds"
    assert found.solution.margin.value == 0


def test_a_limit_broken_by_what_is_given_fails() -> None:
    found = verdict(parameter("R", 9, 10, 11), parameter("C", 2, 2, 2), at_least=19)
    assert found.outcome == "fails"
    assert found.solution.margin.value == -1
    assert found.solution.margin.case == (9, 2)


def test_a_limit_broken_whatever_the_assumption_fails() -> None:
    found = verdict(parameter("R", 9, 10, 11), parameter("C", 1, 2, 4, given=(2, 2)), at_least=36.1)
    assert found.outcome == "fails"


def test_a_limit_that_one_end_of_an_assumption_keeps_is_undecided() -> None:
    found = verdict(parameter("R", 9, 10, 11), parameter("C", 1, 2, 4, given=(2, 2)), at_least=35.9)
    assert found.outcome == "undecided"
    assert found.deciding.column == 1
    assert found.deciding.end == "high"
    assert found.deciding.alone
    assert found.deciding.flips_at == pytest.approx(35.9 / 9, rel=1e-3)


def test_what_is_given_stays_at_its_worst_while_the_assumption_moves() -> None:
    """C given 2 within 10 %, assumed down to half and up to double: at its best end it is still 3.6 .. 4.4."""
    column = parameter("C", 0.9, 2, 4.4, given=(1.8, 2.2))
    assert verdict(column, at_least=3.61).outcome == "fails"
    assert verdict(column, at_least=3.59).outcome == "undecided"


def test_an_upper_limit_asks_for_the_low_end() -> None:
    found = verdict(parameter("R", 10, 10, 10), parameter("C", 1, 2, 4, given=(2, 2)), at_most=30)
    assert (found.outcome, found.deciding.end) == ("undecided", "low")
    assert found.deciding.flips_at == pytest.approx(3, rel=1e-3)


def test_two_assumptions_that_save_only_together_leave_it_undecided() -> None:
    columns = [parameter(name, 1, 2, 4, given=(2, 2)) for name in ("R", "C")]
    found = verdict(*columns, at_least=15.9)
    assert found.outcome == "undecided"
    assert not found.deciding.alone
    assert verdict(*columns, at_least=16.1).outcome == "fails"


def test_assumptions_that_save_only_at_opposite_ends_are_found() -> None:
    def difference(_: Structure, cases: Array) -> Array:
        return np.abs(cases[:, 0] - cases[:, 1])

    columns = [parameter(name, 1, 2, 4, given=(2, 2)) for name in ("R", "C")]
    assert verdict(*columns, at_least=2.9, compute=difference).outcome == "undecided"
    assert verdict(*columns, at_least=3.1, compute=difference).outcome == "fails"


def test_numbers_that_are_not_positive_move_by_an_offset() -> None:
    column = parameter("offset", -3, 0, 5, given=(-1, 1))
    assert verdict(column, at_least=2.9).outcome == "undecided"
    assert verdict(column, at_least=3.1).outcome == "fails"


def test_a_level_that_may_never_be_reached_fails_both_limits() -> None:
    def seldom(_: Structure, cases: Array) -> Array:
        return np.where(cases[:, 0] > 10.5, np.inf, cases[:, 0])

    for limits in ({"at_least": 1.0}, {"at_most": 100.0}):
        found = verdict(parameter("R", 9, 10, 11), compute=seldom, **limits)
        assert found.outcome == "fails"
        assert found.solution.margin.never
        assert found.solution.margin.value == -math.inf


def test_a_rule_may_say_that_never_holds() -> None:
    def seldom(_: Structure, cases: Array) -> Array:
        return np.where(cases[:, 0] > 10.5, np.inf, cases[:, 0])

    assert verdict(parameter("R", 9, 10, 11), at_least=9, compute=seldom, never="holds").outcome == "holds"
    assert verdict(parameter("R", 9, 10, 11), at_most=10.6, compute=seldom, never="holds").outcome == "holds"
    assert verdict(parameter("R", 9, 10, 11), at_most=10.4, compute=seldom, never="holds").outcome == "fails"


def test_a_quantity_that_is_not_defined_is_undecided() -> None:
    found = verdict(parameter("R", 9, 10, 11), at_least=1, compute=lambda _, cases: cases[:, 0] * np.nan)
    assert found.outcome == "undecided"
    assert found.reason == "the quantity is not defined in every case"


def test_the_narrower_of_two_limits_counts() -> None:
    found = verdict(parameter("R", 9, 10, 11), at_least=8, at_most=10.9)
    assert (found.outcome, found.solution.margin.side) == ("fails", "at_most")
