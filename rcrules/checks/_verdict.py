"""Three values: holds or fails whatever the assumptions, else undecided, with the assumption that decides.

Over what the inputs give, the worst case counts; what is assumed may stand at either end. A finding fails only when no
choice of the assumptions that is tried saves it: all at nominal, each at either end, the best ends together, and every
combination of the ends of the most influential ones.
"""

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import product
from typing import Final

from rcrules.checks._ends import End, assumed, with_ends
from rcrules.checks._flip import flips
from rcrules.checks._margin import Margin
from rcrules.checks._resolve import Case
from rcrules.checks._solve import Solution, solve
from rcrules.problems import Failure, Problem

_COMBINED: Final = 3
"""Number of most influential assumptions whose ends are tried in every combination."""

Ends = Mapping[int, End]


@dataclass(frozen=True, slots=True, kw_only=True)
class Deciding:
    """The assumption that decides a finding."""

    column: int
    end: End
    """Where it would have to stand."""
    alone: bool
    """True: there the finding holds whatever the other assumptions."""
    flips_at: float | None
    """Value at which the verdict flips: its lowest allowed value for end ``high``, its highest for ``low``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Verdict:
    """What became of one posed case."""

    outcome: str
    """``holds``, ``fails``, ``undecided``."""
    solution: Solution | None
    """Over the whole box; None where there is none."""
    reason: str | None = None
    ask: tuple[str, ...] = ()
    """Lines that would decide it, where something is missing."""
    deciding: Deciding | None = None


@dataclass(slots=True)
class _Open:
    """A case whose worst margin is negative and which rests on assumptions."""

    index: int
    case: Case
    problem: Problem
    solution: Solution
    columns: tuple[int, ...]
    tried: dict[tuple[tuple[int, End], ...], float]
    """Ends of the assumed columns -> worst margin there."""

    def saved(self) -> bool:
        """Whether a choice of assumptions that was tried keeps the limit."""
        return any(margin >= 0 for margin in self.tried.values())

    def better(self, column: int) -> End:
        """The end at which the margin is wider, the other assumptions at nominal."""
        low, high = (self._single(column, end) for end in ("low", "high"))
        return "low" if low > high else "high"

    def influence(self, column: int) -> float:
        """How far the margin moves between both ends."""
        low, high = (self._single(column, end) for end in ("low", "high"))
        return 0.0 if low == high else abs(low - high)

    def _single(self, column: int, end: str) -> float:
        margins = [margin for ends, margin in self.tried.items() if ends == ((column, end),)]
        return _ranked(margins[0])


def decide(posed: Sequence[tuple[Case, Problem]]) -> list[Verdict]:
    """The verdict on every posed case, in order."""
    solutions = solve(posed)
    verdicts = [_first(solution, problem) for solution, (_, problem) in zip(solutions, posed, strict=True)]
    found = [_opened(index, *posed[index], solutions[index]) for index in range(len(posed))]
    waiting = [item for item in found if item is not None]
    _try(waiting, lambda item: [{}, *({column: end} for column in item.columns for end in ("low", "high"))])
    _try([item for item in waiting if not item.saved()], _combinations)
    undecided = [item for item in waiting if item.saved()]
    for item, deciding in zip(undecided, _deciding(undecided), strict=True):
        verdicts[item.index] = Verdict(outcome="undecided", solution=item.solution, deciding=deciding)
    return verdicts


def _first(solution: Solution | Failure, problem: Problem) -> Verdict:
    """The verdict where no assumption could turn it."""
    if isinstance(solution, Failure):
        return Verdict(outcome="undecided", solution=None, reason=solution.reason)
    if math.isnan(solution.margin.value):
        return Verdict(outcome="undecided", solution=solution, reason="the quantity is not defined in every case")
    if solution.margin.value < 0:
        return Verdict(outcome="fails", solution=solution)
    if problem.doubt:
        ask = (problem.doubt_ask,) if problem.doubt_ask else ()
        return Verdict(outcome="undecided", solution=solution, reason=problem.doubt, ask=ask)
    return Verdict(outcome="holds", solution=solution)


def _opened(index: int, case: Case, problem: Problem, solution: Solution | Failure) -> _Open | None:
    if isinstance(solution, Failure) or not solution.margin.value < 0:
        return None
    columns = assumed(problem)
    opened = _Open(index=index, case=case, problem=problem, solution=solution, columns=columns, tried={})
    return opened if columns else None


def _try(items: Sequence[_Open], choices: Callable[[_Open], Sequence[Ends]]) -> None:
    """Work out the margin of every choice of every item, the assumptions not named at nominal."""
    wanted = [(item, ends) for item in items for ends in choices(item)]
    for (item, ends), margin in zip(wanted, _margins(wanted, "nominal"), strict=True):
        item.tried[tuple(sorted(ends.items()))] = margin


def _combinations(item: _Open) -> list[Ends]:
    """All at their better ends; the most influential ones at every combination of ends."""
    best: dict[int, End] = {column: item.better(column) for column in item.columns}
    strongest = sorted(item.columns, key=item.influence, reverse=True)[:_COMBINED]
    ends: tuple[End, ...] = ("low", "high")
    return [{**best, **dict(zip(strongest, chosen, strict=True))} for chosen in product(ends, repeat=len(strongest))]


def _margins(wanted: Sequence[tuple[_Open, Ends]], others: End) -> list[float]:
    solved = solve([(item.case, with_ends(item.problem, ends, others)) for item, ends in wanted])
    return [-math.inf if isinstance(solution, Failure) else _value(solution.margin) for solution in solved]


def _value(margin: Margin) -> float:
    """A margin that is not defined saves nothing."""
    return -math.inf if math.isnan(margin.value) else margin.value


def _ranked(margin: float) -> float:
    """Infinite margins as large numbers, so that they can be subtracted."""
    return max(min(margin, 1e300), -1e300)


def _deciding(items: Sequence[_Open]) -> list[Deciding]:
    """The assumption of each item that alone gains most, the others anywhere."""
    wanted = [(item, {column: item.better(column)}) for item in items for column in item.columns]
    margins = iter(_margins(wanted, "full"))
    found = []
    for item in items:
        gains = [(next(margins), -position, column) for position, column in enumerate(item.columns)]
        margin, _, column = max(gains)
        found.append(Deciding(column=column, end=item.better(column), alone=margin >= 0, flips_at=None))
    return _with_flips(items, found)


def _with_flips(items: Sequence[_Open], found: Sequence[Deciding]) -> list[Deciding]:
    """Where one assumption decides alone, the value at which the verdict flips."""
    alone = [(item, deciding) for item, deciding in zip(items, found, strict=True) if deciding.alone]
    values = iter(flips([(item.case, item.problem, deciding.column, deciding.end) for item, deciding in alone]))
    return [replace(deciding, flips_at=next(values)) if deciding.alone else deciding for deciding in found]
