"""Which parameter makes how much of the spread: each alone goes to its worst end, the others stay nominal."""

import math
from dataclasses import dataclass
from typing import Final

import numpy as np

from rcrules.derivation._known import values_in
from rcrules.problems import Array, Bounds, Problem, Quantity

_LEAST: Final = 1e-6
"""Part of the largest change below which a parameter has none: the search leaves some parameters a little off."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Influence:
    """What one parameter does by itself."""

    column: int
    to_low: float
    """Change of the result when it alone goes to where it stands in the lowest case; nan = not defined there."""
    to_high: float
    """The same for the highest case."""
    share: float
    """Its part of all such changes together, 0 .. 1; nan where one is not finite."""


def sensitivity(problem: Problem, measure: Quantity, bounds: Bounds) -> tuple[Influence, ...]:
    """One entry per parameter, the most influential first, then by name.

    The changes need not add up to the spread: parameters multiply, and the worst case of one may depend on another.
    """
    columns = len(problem.parameters)
    moves = _moves(problem, measure, bounds)
    sizes = np.abs(moves).sum(axis=1)
    total = float(sizes.sum())
    shares = sizes / total if total > 0.0 and math.isfinite(total) else np.full(columns, math.nan if total else 0.0)
    found = [
        Influence(
            column=index, to_low=float(moves[index, 0]), to_high=float(moves[index, 1]), share=float(shares[index])
        )
        for index in range(columns)
    ]
    ranked = np.nan_to_num(sizes, nan=math.inf)
    return tuple(sorted(found, key=lambda item: (-ranked[item.column], problem.parameters[item.column].name)))


def _moves(problem: Problem, measure: Quantity, bounds: Bounds) -> Array:
    """Change of the result for each parameter (column) alone at its value in the lowest and highest case."""
    _, nominal, _ = problem.box()
    cases = np.tile(nominal, (2 * len(nominal) + 1, 1))
    for index in range(len(nominal)):
        cases[2 * index, index] = bounds.low_at[index]
        cases[2 * index + 1, index] = bounds.high_at[index]
    values = values_in(measure, problem.structure, cases)
    moved = np.full(2 * len(nominal), math.nan)
    with np.errstate(invalid="ignore"):
        np.subtract(values[:-1], values[-1], out=moved)
    sizes = np.abs(moved[np.isfinite(moved)])
    same = (values[:-1] == values[-1]) | (np.abs(moved) <= _LEAST * sizes.max(initial=0.0))
    found: Array = np.where(same, 0.0, moved).reshape(-1, 2)
    return found
