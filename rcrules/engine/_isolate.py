"""Isolation of the zeros of sums of exponentials: split, exclude by bounds, accept where the slope keeps its sign."""

import numpy as np

from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._shape import Array, Indices

ROUNDS = 200
"""Halvings; geometric first, so far more than ever needed."""
NARROW = 4e-15
"""Relative width at which an interval is a point."""
NOISE = 1e-15
"""Share of the sum of all terms that rounding may decide."""


def isolate(found: ExponentialSum, low: Array, high: Array, first: Array) -> tuple[Indices, Array, Array, Array]:
    """Intervals that hold exactly one zero each.

    found: the function, without ramps apart
    low: where to begin, no zero before. [s], (case,)    high: where to end. [s], (case,)
    first: sign of the function just after 0. [1], (case,)
    Returns the case of each interval, its ends [s], and the sign of the function after the zero.
    """
    case = np.flatnonzero(high > low)
    left, right = low[case], high[case]
    kept: list[tuple[Indices, Array, Array, Array]] = []
    for _ in range(ROUNDS):
        if not len(case):
            break
        crosses, split, sign = _judge(found.take(case), left, right, np.where(left == low[case], first[case], 0.0))
        kept.append((case[crosses], left[crosses], right[crosses], sign[crosses]))
        case, left, right = case[split], left[split], right[split]
        middle = np.where(right > 4.0 * left, np.sqrt(np.maximum(left, 1e-25 * right) * right), 0.5 * (left + right))
        case = np.concatenate([case, case])
        left, right = np.concatenate([left, middle]), np.concatenate([middle, right])
    case, left, right, sign = (
        (np.concatenate(parts) for parts in zip(*kept, strict=True)) if kept else (case, left, right, right)
    )
    return case, left, right, sign


def _judge(found: ExponentialSum, left: Array, right: Array, first: Array) -> tuple[Array, Array, Array]:
    """Which intervals hold one zero, which must be split, and the sign of the function at the right end."""
    a, b = np.expm1(-found.rates * left), np.expm1(-found.rates * right)
    ends = (found.amps * a, found.amps * b)
    at_left = found.start + found.slope * left + ends[0].sum(axis=0)
    at_right = found.start + found.slope * right + ends[1].sum(axis=0)
    speeds = (-found.rates * found.amps * (1.0 + a), -found.rates * found.amps * (1.0 + b))
    fastest = found.slope + np.maximum(*speeds).sum(axis=0)
    slowest = found.slope + np.minimum(*speeds).sum(axis=0)
    width = right - left
    noise = NOISE * (np.abs(found.start) + np.abs(found.slope) * right + np.maximum(*np.abs(ends)).sum(axis=0))
    top = np.minimum(at_left + width * np.maximum(fastest, 0.0), at_right - width * np.minimum(slowest, 0.0))
    bottom = np.maximum(at_left + width * np.minimum(slowest, 0.0), at_right - width * np.maximum(fastest, 0.0))
    first = np.where(first != 0.0, first, np.sign(at_left))
    differ = (first * at_right < 0.0) | ((at_right == 0.0) & (first != 0.0))
    monotone = (slowest >= 0.0) | (fastest <= 0.0)
    empty = (top < 0.0) | (bottom > 0.0) | ((top < noise) & (bottom > -noise) & ~differ)
    point = width <= NARROW * right
    return ~empty & (monotone | point) & differ, ~empty & ~monotone & ~point, -first
