"""Margins of many cases over many boxes, all in one call of the solver."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from rcrules.checks._margin import Margin, worst
from rcrules.checks._resolve import Case
from rcrules.measures import Measure, Theory
from rcrules.problems import Array, Bounds, Failure, Problem, Structure, solve_bounds


@dataclass(frozen=True, slots=True, kw_only=True)
class Finite:
    """A measure whose infinite values count as low as can be: its highest value where it is reached."""

    measure: Measure

    def compute(self, structure: Structure, cases: Array) -> Array:
        """Values (case,); +inf becomes -inf."""
        values = self.measure.compute(structure, cases)
        return np.where(np.isposinf(values), -np.inf, values)

    def theory(self, structure: Structure, low: Array, high: Array) -> Theory:  # noqa: ARG002 - nothing is proved
        """Nothing is proved where values jump."""
        return Theory(signs=(None,) * len(low))


@dataclass(frozen=True, slots=True, kw_only=True)
class Solution:
    """Bounds of the measure and the worst margin over one box."""

    bounds: Bounds
    margin: Margin


def endless(measure: Measure) -> bool:
    """Whether infinity says that something never happens."""
    return measure.unit == "s" and not measure.lasting


def solve(asked: Sequence[tuple[Case, Problem]]) -> list[Solution | Failure]:
    """Bounds and margin of every case over the whole box of its problem, in order; equal questions are asked once."""
    places: dict[tuple[int, str], int] = {}
    requests: list[tuple[Problem, Measure | Finite]] = []
    wanted = []
    for case, problem in asked:
        measure = case.rule.measure
        raw = _place(places, requests, problem, measure, "")
        finite = _place(places, requests, problem, Finite(measure=measure), " finite") if _forgives(case) else None
        wanted.append((case, raw, finite))
    solved = solve_bounds(requests)
    return [_solution(case, solved[raw], None if finite is None else solved[finite]) for case, raw, finite in wanted]


def _forgives(case: Case) -> bool:
    """Whether a level that is never reached keeps an upper limit."""
    return (
        case.rule.never == "holds"
        and endless(case.rule.measure)
        and any(bound.kind == "at-most" for bound in case.bounds)
    )


def _place(
    places: dict[tuple[int, str], int],
    requests: list[tuple[Problem, Measure | Finite]],
    problem: Problem,
    quantity: Measure | Finite,
    mark: str,
) -> int:
    """Index of the request, made where it is new."""
    name = (quantity.measure if isinstance(quantity, Finite) else quantity).name + mark
    key = (id(problem), name)
    if key not in places:
        places[key] = len(requests)
        requests.append((problem, quantity))
    return places[key]


def _solution(case: Case, raw: Bounds | Failure, finite: Bounds | Failure | None) -> Solution | Failure:
    if isinstance(raw, Failure):
        return raw
    if isinstance(finite, Failure):
        return finite
    is_endless = endless(case.rule.measure)
    if finite is None:
        return Solution(bounds=raw, margin=worst(raw, case.bounds, endless=is_endless, never=case.rule.never))
    upper = tuple(bound for bound in case.bounds if bound.kind == "at-most")
    lower = tuple(bound for bound in case.bounds if bound.kind == "at-least")
    margins = [worst(finite, upper, endless=is_endless, never="holds")]
    if lower:
        margins.append(worst(raw, lower, endless=is_endless, never="holds"))
    return Solution(bounds=raw, margin=min(margins, key=lambda margin: margin.value))
