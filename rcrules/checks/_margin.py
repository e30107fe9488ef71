"""How far the worst case stays from the limits."""

import math
from dataclasses import dataclass

from rcrules.checks._resolve import Bound
from rcrules.problems import Bounds


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
    if limit.kind == "at-least":
        value, case = found.low - limit.strict, found.low_at
    else:
        value, case = limit.strict - found.high, found.high_at
    if math.isnan(found.low) or math.isnan(found.high):
        value = math.nan
    return Margin(value=_rounded(value, limit.strict), case=case, side=limit.kind.replace("-", "_"), never=False)


def _rounded(margin: float, limit: float) -> float:
    """A margin within the rounding of its terms is none: a limit met exactly holds."""
    return 0.0 if abs(margin) <= 1e-9 * abs(limit) else margin
