"""The case that makes the worst margin, in parts and their shares, the most influential first."""

import math
from collections.abc import Sequence
from typing import Final

import numpy as np

from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.networks import Board
from rcrules.parts import RatedPart, Share, apart
from rcrules.problems import Parameter, Problem

_TINY: Final = 1e-9


def worst_case(problem: Problem, case: Sequence[float], measure: Measure, board: Board) -> list[Json]:
    """One object per parameter off nominal: value, relative change, what makes it up; by influence on the measure."""
    off = [index for index, item in enumerate(problem.parameters) if _off(item, case[index])]
    influence = _influence(problem, case, measure, off)
    ordered = sorted(off, key=lambda index: (-influence[index], problem.parameters[index].name))
    moving = [index for index in ordered if influence[index] > 0] or ordered
    return [_row(problem.parameters[index], case[index], board) for index in moving]


def _off(item: Parameter, value: float) -> bool:
    if math.isinf(item.nominal):
        return value != item.nominal
    return abs(value - item.nominal) > _TINY * max(abs(item.nominal), abs(item.high - item.low))


def _influence(problem: Problem, case: Sequence[float], measure: Measure, columns: list[int]) -> dict[int, float]:
    """Column -> how far the measure moves when it alone goes back to nominal."""
    cases = np.tile(np.asarray(case, dtype=float), (len(columns) + 1, 1))
    for row, index in enumerate(columns):
        cases[row, index] = problem.parameters[index].nominal
    values = np.nan_to_num(measure.compute(problem.structure, cases), nan=0.0, posinf=1e300, neginf=-1e300)
    moved = np.abs(values[:-1] - values[-1])
    smallest = _TINY * max(float(np.max(moved, initial=0.0)), 0.0)
    return {index: float(move) if move > smallest else 0.0 for index, move in zip(columns, moved, strict=True)}


def _row(item: Parameter, value: float, board: Board) -> Json:
    relative = value / item.nominal - 1 if item.nominal and math.isfinite(item.nominal) else None
    part = board.parts.get(item.name)
    return {
        "parameter": item.name,
        "value": value,
        "unit": item.unit,
        "relative": relative,
        "why": _shares(part, relative) if part and relative is not None else "",
        "from": item.origin,
    }


def made_of(item: Parameter, value: float, board: Board) -> str:
    """Every share of a part's value at an end of its spread, to be multiplied by hand; '' where there is none."""
    part = board.parts.get(item.name)
    if part is None or not item.nominal or not math.isfinite(item.nominal):
        return ""
    return _told(part, value / item.nominal - 1, 4)


def _shares(part: RatedPart, relative: float) -> str:
    """``tolerance -20 %, temperature -15 %``; '' where one share says it all, or the case lies between the ends."""
    return _told(part, relative, 2) if len(apart(part, relative)) > 1 else ""


def _told(part: RatedPart, relative: float, digits: int) -> str:
    return ", ".join(f"{_name(share)} {100 * move:+.{digits}g} %" for share, move in apart(part, relative))


def _name(share: Share) -> str:
    return share.name if share.given else f"assumed {share.name}"
