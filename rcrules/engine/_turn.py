"""Search among vertices: flip what gains, from several starts; then scan across the box. Both sides go in one batch."""

from collections.abc import Generator

import numpy as np

from rcrules.engine._box import Best, Box, vertices
from rcrules.engine._shape import Array

Step = Generator[Array, Array, None]

SIDES = (-1, 1)
TURNS = 12
"""Most rounds of vertex iteration."""
MANY = 24
"""Columns of unknown sign beyond which every case is dear: one start, few rounds, one place on each line."""
FEW_TURNS = 8
SHARES = (1 / 64, 1 / 8, 1 / 4, 1 / 2, 3 / 4, 7 / 8, 63 / 64)
"""Where a line across the box is scanned; the outermost tell whether a vertex is a peak."""


def turn(best: Best) -> Step:
    """Vertex iteration: flip the numbers whose flip alone is a gain, from several starts, until none is."""
    box, columns = best.box, best.box.unknown()
    many = len(columns) > MANY
    starts = [(side, start) for side in SIDES for start in _starts(box, side)]
    trails = [(side, box.base(side)) for side in SIDES] if many else starts
    seen: set[tuple[int, bytes]] = set()
    for _ in range(FEW_TURNS if many else TURNS):
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
            for (side, _), block, value in zip(trails, blocks, values.reshape(len(blocks), -1), strict=True)
            for following in (
                _opposed(box, side, block, value, columns) if many else _following(side, block, value, columns)
            )
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


def _opposed(box: Box, side: int, block: Array, values: Array, columns: tuple[int, ...]) -> list[tuple[int, Array]]:
    """All gaining flips at once; of a number inside its range a flip that loses says that its other end gains.

    block, values: as for ``_following``
    """
    together = block[0].copy()
    for row, index in enumerate(columns):
        if side * values[row + 1] > side * values[0]:
            together[index] = block[row + 1, index]
        elif box.low[index] < together[index] < box.high[index]:
            together[index] = box.low[index]
    return [] if (together == block[0]).all() else [(side, together)]


def _following(side: int, block: Array, values: Array, columns: tuple[int, ...]) -> list[tuple[int, Array]]:
    """All gaining flips at once, and the best of them alone.

    block: a case, then the case with each number flipped. [any], (1 + columns, p)
    values: of these cases. [any], (1 + columns,)
    """
    gains = side * values[1:] > side * values[0]
    if not gains.any():
        return []
    together = block[0].copy()
    for row, index in enumerate(columns):
        if gains[row]:
            together[index] = block[row + 1, index]
    return [(side, together), (side, block[1 + int(np.argmax(side * values[1:]))])]


def corners(box: Box, columns: tuple[int, ...], most: int) -> Array:
    """Vertices for a function that no single flip changes, such as a level passed at once: all, or 2^most spread ones.

    Returns (case, p)
    """
    if len(columns) <= most:
        return np.concatenate([vertices(box, side, columns) for side in SIDES])
    spread = np.random.default_rng(len(columns)).random((2**most // 4, len(columns))) < 0.5
    cases = np.tile(box.nominal, (len(spread), 1))
    cases[:, list(columns)] = np.where(spread, box.high[list(columns)], box.low[list(columns)])
    return cases


def scan(best: Best) -> Step:
    """Scan across the box in each number of unknown sign, through the best case of each side and through nominal."""
    box, columns = best.box, best.box.unknown()
    cases = []
    many = len(columns) > MANY
    shares = (1 / 2,) if many else SHARES
    for side in SIDES:
        for centre in (best.side(side), *(() if many else (box.base(side),))):
            for index in columns:
                line = np.tile(centre, (len(shares), 1))
                line[:, index] = [box.point(index, share) for share in shares]
                cases.append(line)
    yield from best.ask(np.unique(np.concatenate(cases), axis=0))
