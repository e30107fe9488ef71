"""What samples tell: a fraction with its confidence interval, and the root-sum-square of single changes."""

import math
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

_Z: Final = 1.959963984540054
"""Standard normal quantile of 97.5 %: a two-sided interval of 95 %."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Estimate:
    """A fraction estimated from samples, with a 95 % confidence interval."""

    fraction: float
    low: float
    high: float


def wilson(failing: int, count: int) -> Estimate:
    """Fraction of failing samples with the score interval. count > 0.

    Source: E. B. Wilson, Probable inference, the law of succession, and statistical inference, J. Am. Stat. Assoc. 22
    (1927); it is right also where none or all fail.
    """
    share, square = failing / count, _Z * _Z
    middle = (share + square / (2 * count)) / (1 + square / count)
    half = _Z / (1 + square / count) * math.sqrt(share * (1 - share) / count + square / (4 * count * count))
    low = 0.0 if failing == 0 else max(0.0, middle - half)
    high = 1.0 if failing == count else min(1.0, middle + half)
    return Estimate(fraction=share, low=low, high=high)


def root_sum_square(moves: Iterable[float]) -> float:
    """The square root of the sum of squares of what each parameter does alone; nan where one is not finite."""
    total = sum(move * move for move in moves)
    return math.sqrt(total) if math.isfinite(total) else math.nan
