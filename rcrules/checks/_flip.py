"""The value of one assumed number at which a verdict flips, the other assumptions left anywhere."""

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final

from rcrules.checks._ends import End, shifted
from rcrules.checks._resolve import Case
from rcrules.checks._solve import solve
from rcrules.problems import Failure, Problem

_HALVINGS: Final = 12
"""To a four-thousandth of the assumed slack: more than is shown."""


@dataclass(slots=True)
class _Bracket:
    """An allowed bound that fails and one that holds."""

    fails: float
    holds: float

    @property
    def middle(self) -> float:
        return self.fails + (self.holds - self.fails) / 2


def flips(asked: Sequence[tuple[Case, Problem, int, End]]) -> list[float | None]:
    """For every (case, problem, column, end): the bound of the column from which on the case holds; None = not finite.

    With end ``high`` it is the least value that the column may take, with ``low`` the greatest.
    """
    brackets = [_bracket(problem, column, end) for _, problem, column, end in asked]
    for _ in range(_HALVINGS):
        boxes = [
            (case, _bounded(problem, column, end, bracket.middle))
            for (case, problem, column, end), bracket in zip(asked, brackets, strict=True)
        ]
        for bracket, solution in zip(brackets, solve(boxes), strict=True):
            if isinstance(solution, Failure) or not solution.margin.value >= 0:
                bracket.fails = bracket.middle
            else:
                bracket.holds = bracket.middle
    return [bracket.holds if math.isfinite(bracket.holds) else None for bracket in brackets]


def _bracket(problem: Problem, column: int, end: End) -> _Bracket:
    item = problem.parameters[column]
    low, high = shifted(item, end)
    return _Bracket(fails=item.low, holds=low) if end == "high" else _Bracket(fails=item.high, holds=high)


def _bounded(problem: Problem, column: int, end: End, bound: float) -> Problem:
    """The problem with one bound of one column moved."""
    item = problem.parameters[column]
    low, high = (bound, item.high) if end == "high" else (item.low, bound)
    moved = replace(item, low=low, high=high, nominal=min(max(item.nominal, low), high))
    return replace(problem, parameters=(*problem.parameters[:column], moved, *problem.parameters[column + 1 :]))
