"""How often a finding would fail, by random cases and by root-sum-square."""

import math
from collections.abc import Sequence
from typing import Final

import numpy as np

from rcrules.checks._asked import Asked
from rcrules.checks._margin import EQUAL
from rcrules.checks._resolve import Bound, Case
from rcrules.checks._solve import endless
from rcrules.derivation import sensitivity
from rcrules.engine import FloatingNode
from rcrules.findings import Json
from rcrules.networks import Board
from rcrules.problems import Array, Bounds, Problem, Unsettled
from rcrules.project import Project
from rcrules.statistics import root_sum_square, samples, values, wilson

_QUANTILES: Final = (0.00135, 0.5, 0.99865)
"""Those of plus and minus three standard deviations, and the middle."""


def statistics(
    asked: Asked, case: Case, problem: Problem, bounds: Bounds, board: Board, project: Project
) -> Json | None:
    """Fraction of random cases that fail with its confidence interval, their spread, and the root-sum-square range.

    None where one of the cases has no solution.
    """
    distributions = _distributions(problem, board, project)
    drawn = samples(problem.parameters, distributions, asked.samples, asked.seed)
    try:
        told = values(problem, case.rule.measure, drawn)
    except (FloatingNode, Unsettled):
        return None  # the bounds beside it have their own word on that
    broken = int(_fails(told, case).sum())
    found = wilson(broken, asked.samples)
    low, middle, high = (float(value) for value in np.quantile(told, _QUANTILES, method="inverted_cdf"))
    below, above = _root_sum_square(problem, case, bounds)
    return {
        "samples": asked.samples,
        "seed": asked.seed,
        "failing": broken,
        "fraction": {"low": found.low, "nominal": found.fraction, "high": found.high},
        "quantiles": {"low": low, "nominal": middle, "high": high},
        "root_sum_square": {"low": below, "high": above},
        "distributions": sorted(set(distributions)),
    }


def failing(case: Case, problem: Problem, board: Board, project: Project, count: int, seed: int) -> int | None:
    """How many of so many random cases break a limit; None where one of them has no solution."""
    drawn = samples(problem.parameters, _distributions(problem, board, project), count, seed)
    try:
        return int(_fails(values(problem, case.rule.measure, drawn), case).sum())
    except (FloatingNode, Unsettled):
        return None


def _distributions(problem: Problem, board: Board, project: Project) -> list[str]:
    return [_distribution(item.name, board, project) for item in problem.parameters]


def _distribution(name: str, board: Board, project: Project) -> str:
    """Of the part, else of its kind, else of everything."""
    part = board.parts.get(name)
    tables = [] if part is None else [project.parts.get(name), project.defaults.get(part.kind)]
    said = next((table.distribution for table in tables if table is not None and table.distribution), None)
    return said or project.distribution or "uniform"


def _fails(told: Array, case: Case) -> Array:
    """Which samples break a limit (case,); what is not defined fails."""
    found = np.isnan(told)
    for bound in case.bounds:
        found = found | _breaks(told, bound, case)
    return np.asarray(found)


def _breaks(told: Array, bound: Bound, case: Case) -> Array:
    if bound.choices:
        return np.asarray(~np.isclose(told[:, None], bound.choices, rtol=EQUAL, atol=0.0).any(axis=1))
    broken = told < bound.strict if bound.kind == "at-least" else told > bound.strict
    if endless(case.rule.measure):
        never = np.isposinf(told)
        broken = broken & ~never if case.rule.never == "holds" else broken | never
    return np.asarray(broken)


def _root_sum_square(problem: Problem, case: Case, bounds: Bounds) -> tuple[float, float]:
    """Nominal minus and plus the root of the sum of squares of what each parameter does alone."""
    alone: Sequence[tuple[float, float]] = [
        (item.to_low, item.to_high) for item in sensitivity(problem, case.rule.measure, bounds)
    ]
    down, up = (root_sum_square(move[side] for move in alone) for side in (0, 1))
    nominal = float(bounds.nominal)
    return (nominal - down, nominal + up) if math.isfinite(nominal) else (math.nan, math.nan)
