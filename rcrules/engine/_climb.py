"""The searching part of bounds: from vertex to vertex, along lines, then uphill inside. Both sides go in one batch."""

from collections.abc import Generator

import numpy as np

from rcrules.engine._box import Best, Box
from rcrules.engine._shape import Array

Step = Generator[Array, Array, None]

SIDES = (-1, 1)
TURNS = 12
"""Most rounds of vertex iteration."""
SHARES = (1 / 64, 1 / 8, 1 / 4, 1 / 2, 3 / 4, 7 / 8, 63 / 64)
"""Where a line across the box is scanned."""
FIRST_STEP = 1 / 16
SHORTER = 1 / 4
LAST_STEP = 1e-5
"""Steps of the climb, as shares of the range."""
CLIMBS = 40
"""Most rounds of a climb."""
ALONG = 1e-12
"""Relative gain below which a case is no better."""


def turn(best: Best) -> Step:
    """Vertex iteration: flip the numbers whose flip alone is a gain, from several starts, until none is."""
    box, columns = best.box, best.box.unknown()
    trails = [(side, start) for side in SIDES for start in _starts(box, side)]
    seen: set[tuple[int, bytes]] = set()
    for _ in range(TURNS):
        trails = [(side, case) for side, case in trails if (side, case.tobytes()) not in seen]
        if not trails:
            return
        seen.update((side, case.tobytes()) for side, case in trails)
        blocks = [np.concatenate([case[None], _flipped(box, case, columns)]) for _, case in trails]
        values = yield from best.ask(np.concatenate(blocks))
        if best.undefined():
            return
        trails = [
            following
            for (side, case), block, value in zip(trails, blocks, values.reshape(len(blocks), -1), strict=True)
            for following in _following(side, case, block, value, columns)
        ]


def _starts(box: Box, side: int) -> list[Array]:
    """Where vertex iteration begins: nominal, all low, all high, low and high in turn."""
    base, columns = box.base(side), list(box.unknown())
    low, high, mixed = base.copy(), base.copy(), base.copy()
    low[columns], high[columns] = box.low[columns], box.high[columns]
    mixed[columns] = np.where(np.arange(len(columns)) % 2, box.high[columns], box.low[columns])
    return [base, low, high, mixed]


def _flipped(box: Box, case: Array, columns: tuple[int, ...]) -> Array:
    """The case with one number each at its other end; from inside, at its high end. (columns, p)"""
    cases = np.tile(case, (len(columns), 1))
    for row, index in enumerate(columns):
        cases[row, index] = box.low[index] if case[index] == box.high[index] else box.high[index]
    return cases


def _following(
    side: int, case: Array, block: Array, values: Array, columns: tuple[int, ...]
) -> list[tuple[int, Array]]:
    """All gaining flips at once, and the best of them alone; from inside, the other numbers go to their other end."""
    gains = side * values[1:] > side * values[0]
    together = case.copy()
    for row, index in enumerate(columns):
        if gains[row]:
            together[index] = block[row + 1, index]
    if not gains.any():
        return []
    return [(side, together), (side, block[1 + int(np.argmax(side * values[1:]))])]


def scan(best: Best) -> Step:
    """Scan across the box in each number of unknown sign, through the best case of each side and through nominal."""
    box, columns = best.box, best.box.unknown()
    cases = []
    for side in SIDES:
        for centre in (best.side(side), box.base(side)):
            for index in columns:
                line = np.tile(centre, (len(SHARES), 1))
                line[:, index] = [box.point(index, share) for share in SHARES]
                cases.append(line)
    yield from best.ask(np.concatenate(cases))


def climb(best: Best) -> Step:
    """Ascend inside from the best case of each side: steps both ways in each number, then the tops of the parabolas."""
    steps = dict.fromkeys(SIDES, FIRST_STEP)
    for _ in range(CLIMBS):
        sides = [side for side in SIDES if steps[side] >= LAST_STEP and _may_climb(best, side)]
        if not sides or best.undefined():
            return
        before = {side: (best.value(side), best.side(side)) for side in sides}
        around = {side: _around(best.box, before[side][1], steps[side]) for side in sides}
        values = yield from best.ask(np.concatenate([around[side] for side in sides]))
        tops = []
        for side, part in zip(sides, np.split(values, len(sides)), strict=True):
            tops.append(_tops(best.box, side, before[side], around[side], part))
        yield from best.ask(np.concatenate(tops))
        for side in sides:
            if side * best.value(side) <= side * before[side][0] + ALONG * abs(before[side][0]):
                steps[side] *= SHORTER


def _may_climb(best: Best, side: int) -> bool:
    """Whether the best case is finite; a vertex is left alone only by the steps themselves."""
    return bool(np.isfinite(best.value(side)))


def _around(box: Box, case: Array, step: float) -> Array:
    """The case with one number each a step lower, then a step higher. (2 columns, p)"""
    columns = box.unknown()
    cases = np.tile(case, (2 * len(columns), 1))
    for row, index in enumerate(columns):
        share = box.share(index, case[index])
        cases[2 * row, index] = box.point(index, share - step)
        cases[2 * row + 1, index] = box.point(index, share + step)
    return cases


def _tops(box: Box, side: int, start: tuple[float, Array], around: Array, values: Array) -> Array:
    """The top of the parabola in each number alone, and of all at once. (columns + 1, p)"""
    value, case = start
    columns = box.unknown()
    cases = np.tile(case, (len(columns) + 1, 1))
    for row, index in enumerate(columns):
        ends = [box.share(index, around[2 * row + k, index]) for k in (0, 1)]
        here = box.share(index, case[index])
        heights = side * (values[2 * row : 2 * row + 2] - value)
        share = _top(here, ends, heights)
        cases[row, index] = cases[-1, index] = box.point(index, share)
    return cases


def _top(here: float, ends: list[float], heights: Array) -> float:
    """Share at which the parabola through three points peaks, kept near them; the best point where it has no peak."""
    if not np.isfinite(heights).all():
        return here
    left, right = here - ends[0], ends[1] - here
    if left > 0.0 and right > 0.0:
        bend = heights[0] / left + heights[1] / right
        lean = heights[1] / right * left - heights[0] / left * right
        if bend < 0.0:
            return float(np.clip(here - 0.5 * lean / bend, here - 4.0 * left, here + 4.0 * right))
    best = int(np.argmax(heights))
    return ends[best] if heights[best] > 0.0 else here
