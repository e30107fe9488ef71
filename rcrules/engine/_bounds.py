"""Lowest and highest value of a function of many numbers over a box, and where they lie."""

from collections.abc import Callable, Generator, Sequence
from dataclasses import dataclass

import numpy as np

from rcrules.engine._box import Best, Box, vertices
from rcrules.engine._climb import climb
from rcrules.engine._shape import Array
from rcrules.engine._turn import corners, scan, turn

Search = Generator[Array, Array, "Bounds"]

PROVABLE = 12
"""Most columns of unknown sign whose vertices are all evaluated for a proof."""
ALL_VERTICES = 8
"""Most columns of unknown sign whose vertices are all evaluated in a search."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Bounds:
    """Lowest, nominal and highest value over a box, and the cases in which they occur.

    nan in ``low`` and ``high`` means: not defined somewhere in the box, for instance in the case given.
    """

    low: float
    nominal: float
    high: float
    low_at: tuple[float, ...]
    high_at: tuple[float, ...]
    proved: bool
    """True: the theorems that the caller vouches for leave no other case; False: the best that a search found."""


def bounds(
    evaluate: Callable[[Array], Array],
    low: Array,
    nominal: Array,
    high: Array,
    signs: Sequence[int | None],
    vertices_prove: bool,
) -> Bounds:
    """Bounds of a function over a box.

    evaluate: cases (case, p) -> values (case,); inf is a value above all others, nan = not defined
    low: least of each number. [any], (p,)
    nominal: each number as marked. [any], (p,)
    high: greatest of each number. [any], (p,)
    signs: of the slope of the function in each number: +1, -1, 0 = does not depend on it, None = not known
    vertices_prove: the extremes over the numbers of unknown sign are known to lie at vertices
    """
    running = search(low, nominal, high, signs, vertices_prove)
    cases = next(running)
    while True:
        try:
            cases = running.send(evaluate(cases))
        except StopIteration as end:
            found: Bounds = end.value
            return found


def search(low: Array, nominal: Array, high: Array, signs: Sequence[int | None], vertices_prove: bool) -> Search:
    """The search of ``bounds`` as a coroutine: yields cases (case, p), is sent their values (case,), returns Bounds.

    low: least of each number. [any], (p,)
    nominal: each number as marked. [any], (p,)
    high: greatest of each number. [any], (p,)
    signs: as for ``bounds``
    vertices_prove: as for ``bounds``
    """
    low, nominal, high = (np.asarray(numbers, float) for numbers in (low, nominal, high))
    box = Box(low=low, nominal=nominal, high=high, signs=tuple(signs))
    best = Best(box=box)
    unknown = box.unknown()
    everywhere = len(unknown) <= (PROVABLE if vertices_prove else ALL_VERTICES)
    yield from best.ask(_first(box, unknown if everywhere else ()))
    proved = not len(unknown) or (vertices_prove and everywhere)
    if not proved:
        for part in (turn, scan, climb)[everywhere:]:
            if not best.undefined():
                yield from part(best)
            if part is turn and best.value(-1) == best.value(1):
                yield from best.ask(corners(box, unknown, PROVABLE))
                yield from turn(best)
    return _result(best, proved)


def _first(box: Box, columns: tuple[int, ...]) -> Array:
    """Nominal, then the vertices in these columns for both sides. (case, p)"""
    sides = [vertices(box, -1, columns)]
    if any(box.signs):
        sides.append(vertices(box, 1, columns))
    return np.concatenate([box.nominal[None], *sides])


def _result(best: Best, proved: bool) -> Bounds:
    """The best cases of both sides."""
    low, high = best.side(-1), best.side(1)
    return Bounds(
        low=best.value(-1),
        nominal=best.nominal,
        high=best.value(1),
        low_at=tuple(float(number) for number in low),
        high_at=tuple(float(number) for number in high),
        proved=proved,
    )
