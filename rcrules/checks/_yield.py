"""Verdicts on the share of boards that pass: ``bounds = "yield"`` with ``passing = "99.9 %"``.

Random cases are drawn until the share can be told apart from what is asked; what its confidence interval does not tell
is undecided, and so is what holds at one end of the assumptions alone.
"""

import math
from collections.abc import Sequence
from dataclasses import replace
from typing import Final

from rcrules.checks._asked import Asked
from rcrules.checks._ends import End, with_ends
from rcrules.checks._resolve import Case
from rcrules.checks._statistics import failing
from rcrules.checks._verdict import Verdict
from rcrules.networks import Board
from rcrules.problems import Problem
from rcrules.project import Project
from rcrules.statistics import wilson

_FEWEST: Final = 10_000
_MOST: Final = 1_000_000
_ENOUGH: Final = 10.0
"""So many failing cases are expected where the share that may fail does fail."""
_ENDS: Final[tuple[End, ...]] = ("nominal", "low", "high")


def counted(passing: float, asked: Asked) -> int:
    """How many cases are drawn."""
    wanted = math.ceil(_ENOUGH / max(1.0 - passing, 1e-9))
    return max(asked.samples, min(max(wanted, _FEWEST), _MOST))


def by_yield(
    posed: Sequence[tuple[Case, Problem]], verdicts: Sequence[Verdict], board: Board, project: Project, asked: Asked
) -> list[Verdict]:
    """The verdicts, those of rules about yield by random cases; what holds in the worst case passes everywhere."""
    return [
        _judged(case, problem, verdict, board, project, asked) if case.rule.passing is not None else verdict
        for (case, problem), verdict in zip(posed, verdicts, strict=True)
    ]


def _judged(case: Case, problem: Problem, verdict: Verdict, board: Board, project: Project, asked: Asked) -> Verdict:
    passing = case.rule.passing
    if verdict.solution is None or verdict.outcome == "holds" or passing is None:
        return verdict
    count = counted(passing, asked)
    found = [
        _outcome(failing(case, with_ends(problem, {}, end), board, project, count, asked.seed), count, passing)
        for end in _ENDS
    ]
    outcomes = {outcome for outcome, _ in found}
    if len(outcomes) == 1:
        return replace(verdict, outcome=found[0][0], reason=found[0][1], deciding=None)
    reason = f"the share that passes depends on what is assumed: {found[1][1]}; {found[2][1]}"
    return replace(verdict, outcome="undecided", reason=reason)


def _outcome(broken: int | None, count: int, passing: float) -> tuple[str, str]:
    """Outcome and words; undecided where the confidence interval holds the share that is asked."""
    if broken is None:
        return "undecided", "one of the random cases has no solution"
    share = wilson(broken, count)
    low, high = 100 * (1 - share.high), 100 * (1 - share.low)
    words = f"{low:.5g} % .. {high:.5g} % of the boards pass ({count} random cases, 95 % confidence)"
    if 1 - share.high >= passing:
        return "holds", words
    return ("fails" if 1 - share.low < passing else "undecided"), words
