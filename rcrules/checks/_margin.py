"""How far the worst case stays from the limits."""

import math
from dataclasses import dataclass
from typing import Final

from rcrules.checks._resolve import Bound
from rcrules.problems import Bounds

EQUAL: Final = 1e-9
"""Part of a limit within which a number meets it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Margin:
    """The worst margin over a box."""

    value: float
    """Distance to the limit, negative = broken, -inf = without bound or never; nan = not defined."""
    case: tuple[float, ...]
    """The columns of that case."""
    side: str
    """``at_least`` or ``at_most``."""
    never: bool
    """True: broken because the level is never reached."""


def worst(found: Bounds, limits: tuple[Bound, ...], *, endless: bool, never: str) -> Margin:
    """The worst margin against all limits.

    endless: infinity means that something never happens, which fails both kinds of limit unless ``never`` is ``holds``.
    """
    return min((_against(found, limit, endless=endless, never=never) for limit in limits), key=_order)


def _order(margin: Margin) -> float:
    return -math.inf if math.isnan(margin.value) else margin.value


def _against(found: Bounds, limit: Bound, *, endless: bool, never: str) -> Margin:
    if endless and math.isinf(found.high) and found.high > 0 and never == "fails":
        return Margin(value=-math.inf, case=found.high_at, side=limit.kind.replace("-", "_"), never=True)
    if limit.choices:
        return _chosen(found, limit)
    if limit.kind == "at-least":
        value, case = found.low - limit.strict, found.low_at
    else:
        value, case = limit.strict - found.high, found.high_at
    if math.isnan(found.low) or math.isnan(found.high):
        value = math.nan
    return Margin(value=_rounded(value, limit.strict), case=case, side=limit.kind.replace("-", "_"), never=False)


def nearest(found: Bounds, limit: Bound) -> float:
    """Of the numbers, one of which it must be, the one that all cases are nearest to."""
    return min(limit.choices, key=lambda number: max(abs(found.low - number), abs(found.high - number)))


def _chosen(found: Bounds, limit: Bound) -> Margin:
    """The margin of numbers that must be met: none where they are, else the distance."""
    number = nearest(found, limit)
    below, above = number - found.low, found.high - number
    side, distance, case = ("at_least", below, found.low_at) if below > above else ("at_most", above, found.high_at)
    return Margin(value=_rounded(-distance, number), case=case, side=side, never=False)


def _rounded(margin: float, limit: float) -> float:
    """A margin within the rounding of its terms is none: a limit met exactly holds."""
    return 0.0 if abs(margin) <= EQUAL * abs(limit) else margin
