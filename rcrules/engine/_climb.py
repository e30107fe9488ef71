"""Ascent inside the box: parabolas in each number, and conjugate gradients across. Both sides go in one batch."""

from collections.abc import Generator
from dataclasses import dataclass
from math import isfinite

import numpy as np

from rcrules.engine._box import Best, Box
from rcrules.engine._shape import Array
from rcrules.engine._turn import MANY

Step = Generator[Array, Array, None]

FIRST_STEP = 1 / 16
SHORTER = 1 / 4
LAST_STEP = 1e-4
"""Steps of the climb, as shares of the range; the parabolas make the last one good to its square."""
FEW_ROUNDS = 2
"""The same where there are many columns."""
ROUNDS = 40
"""Most rounds of a climb."""
GAIN = 1e-10
"""Relative gain below which a case is no better."""
ALONG = (0.25, 0.5, 1.0, 2.0, 4.0, 8.0)
"""Lengths tried along a way, in steps."""


@dataclass(slots=True, kw_only=True)
class Climber:
    """One side on its way up (or down)."""

    side: int
    step: float = FIRST_STEP
    slope: Array | None = None
    """Of the last round, over shares. (column,)"""
    way: Array | None = None
    """Direction of the last round, over shares. (column,)"""


def climb(best: Best) -> Step:
    """Ascend from the best case of each side, where that is not a vertex that the scan found to be a peak."""
    box = best.box
    climbers = [Climber(side=side) for side in (-1, 1) if _inside(best, side)]
    for _ in range(FEW_ROUNDS if len(box.unknown()) > MANY else ROUNDS):
        climbers = [one for one in climbers if one.step >= LAST_STEP and np.isfinite(best.value(one.side))]
        if not climbers or best.undefined():
            return
        starts = [(best.value(one.side), best.side(one.side)) for one in climbers]
        around = [_around(box, case, one.step) for one, (_, case) in zip(climbers, starts, strict=True)]
        values = yield from best.ask_once(np.concatenate(around))
        parts = zip(climbers, starts, around, np.split(values, len(climbers)), strict=True)
        yield from best.ask_once(np.concatenate([_candidates(box, *part) for part in parts]))
        for one, (value, _) in zip(climbers, starts, strict=True):
            if one.side * best.value(one.side) <= one.side * value + GAIN * abs(value):
                one.step, one.way = one.step * SHORTER, None


def _inside(best: Best, side: int) -> bool:
    """Whether the best case is not a vertex."""
    box, case = best.box, best.side(side)
    return any(box.low[index] < case[index] < box.high[index] for index in box.unknown())


def _around(box: Box, case: Array, step: float) -> Array:
    """The case with one number each a step lower, then a step higher. (2 columns, p)"""
    columns = box.unknown()
    cases = np.tile(case, (2 * len(columns), 1))
    for row, index in enumerate(columns):
        share = box.share(index, case[index])
        cases[2 * row, index] = box.point(index, share - step)
        cases[2 * row + 1, index] = box.point(index, share + step)
    return cases


def _candidates(box: Box, climber: Climber, start: tuple[float, Array], around: Array, values: Array) -> Array:
    """The top of the parabola in each number alone and of all at once, and points along the conjugate direction."""
    value, case = start
    columns = box.unknown()
    shares = np.array([box.share(index, case[index]) for index in columns])
    ends = np.array([[box.share(i, around[2 * k + j, i]) for j in (0, 1)] for k, i in enumerate(columns)])
    heights = climber.side * (values.reshape(-1, 2) - value)
    tops = np.array([_top(*row) for row in zip(shares, ends, heights, strict=True)])
    alone = np.tile(case, (len(columns), 1))
    for row, index in enumerate(columns):
        alone[row, index] = box.point(index, float(tops[row]))
    way = _way(climber, shares, ends, heights)
    together = [_at(box, case, point) for point in (tops, *(shares + way * k for k in ALONG))]
    return np.concatenate([alone, np.array(together)])


def _at(box: Box, case: Array, shares: Array) -> Array:
    """The case with the numbers of unknown sign at these shares. (p,)"""
    moved = case.copy()
    for index, share in zip(box.unknown(), shares, strict=True):
        moved[index] = box.point(index, float(share))
    return moved


def _way(climber: Climber, shares: Array, ends: Array, heights: Array) -> Array:
    """Conjugate gradient direction, as long as one step; 0 in numbers that press against an end. (column,)"""
    if not np.isfinite(heights).all():
        return np.zeros_like(shares)
    slope = (heights[:, 1] - heights[:, 0]) / np.maximum(ends[:, 1] - ends[:, 0], 1e-300)
    slope[((shares <= 0.0) & (slope < 0.0)) | ((shares >= 1.0) & (slope > 0.0))] = 0.0
    way = slope
    if climber.way is not None and climber.slope is not None:
        with np.errstate(over="ignore", invalid="ignore"):  # values near the ends of the number range: see below
            size = float(climber.slope @ climber.slope)
            turn = float(slope @ (slope - climber.slope)) / size if size > 0.0 else 0.0
            way = slope + max(0.0, turn) * climber.way
    longest = float(np.abs(way).max())
    if not isfinite(longest):
        return np.zeros_like(shares)
    climber.slope, climber.way = slope, way
    return way / longest * climber.step if longest > 0.0 else way


def _top(here: float, ends: Array, heights: Array) -> float:
    """Share at which the parabola through three points peaks, kept near them; the best point where it has no peak."""
    left, right = here - ends[0], ends[1] - here
    if np.isfinite(heights).all() and left > 0.0 and right > 0.0:
        bend = heights[0] / left + heights[1] / right
        lean = heights[1] / right * left - heights[0] / left * right
        if bend < 0.0:
            return float(np.clip(here - 0.5 * lean / bend, here - 4.0 * left, here + 4.0 * right))
    best = int(np.argmax(heights))
    return float(ends[best]) if heights[best] > 0.0 else here
