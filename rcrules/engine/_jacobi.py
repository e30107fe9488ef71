"""One-sided Jacobi: rows made orthogonal by plane rotations, many cases at once.

Keeps the relative precision of small rows, where a symmetric eigensolver keeps only that of the largest (SIAM Journal
on Matrix Analysis and Applications 13 (1992) 1204; from memory).
"""

from functools import lru_cache

import numpy as np

from rcrules.engine._shape import Array, Flags

BLOCK = 2**16
"""Numbers worked on at a time, so that they stay in the cache."""
SWEEPS = 60
"""More than ever needed; ten serve for a hundred rows."""
ORTHOGONAL = 4e-16
"""Cosine below which two rows count as orthogonal."""
LAST = 1e-9
"""Cosine below which one more rotation ends it: convergence is quadratic."""


def orthogonalise(rows: Array, width: int) -> Array:
    """Rotate rows until their first ``width`` columns are orthogonal, longest row first.

    rows: (n, columns, case), overwritten; columns from ``width`` on are carried along.
    Returns the rows.
    """
    if len(rows) < 2 or width == 0:
        return rows
    cases, block = rows.shape[2], max(64, BLOCK // (len(rows) * rows.shape[1]))
    if cases > 2 * block:
        for start in range(0, cases, block):
            rows[:, :, start : start + block] = orthogonalise(rows[:, :, start : start + block].copy(), width)
        return rows
    for _ in range(SWEEPS):
        active = np.zeros(cases, dtype=bool)
        for first, second in _schedule(len(rows)):
            active |= _rotate(rows, width, first, second)
        if not active.any():
            break
        if cases > 64 and 2 * np.count_nonzero(active) < cases:
            rows[:, :, active] = orthogonalise(rows[:, :, active], width)
            break
    return rows


@lru_cache(maxsize=256)
def _schedule(count: int) -> tuple[tuple[slice | list[int], slice | list[int]], ...]:
    """Every pair of rows once, in rounds of disjoint pairs (a round-robin tournament)."""
    ring = [*range(count), *([-1] if count % 2 else [])]
    rounds: list[tuple[slice | list[int], slice | list[int]]] = []
    for _ in range(len(ring) - 1):
        half = len(ring) // 2
        pairs = sorted(
            (min(a, b), max(a, b)) for a, b in zip(ring[:half], ring[: half - 1 : -1], strict=True) if min(a, b) >= 0
        )
        if len(pairs) == 1:
            (a, b) = pairs[0]
            rounds.append((slice(a, a + 1), slice(b, b + 1)))
        else:
            rounds.append(([a for a, _ in pairs], [b for _, b in pairs]))
        ring = [ring[0], ring[-1], *ring[1:-1]]
    return tuple(rounds)


def _rotate(rows: Array, width: int, first: slice | list[int], second: slice | list[int]) -> Flags:
    """Make the rows ``first`` orthogonal to the rows ``second``, the longer one first; which cases were far from it."""
    x, y = rows[first], rows[second]
    a = np.einsum("pmc,pmc->pc", x[:, :width], x[:, :width])
    b = np.einsum("pmc,pmc->pc", y[:, :width], y[:, :width])
    g = np.einsum("pmc,pmc->pc", x[:, :width], y[:, :width])
    size = np.sqrt(a) * np.sqrt(b)
    slope = np.abs(g)
    swap = b > a
    turn = (slope > ORTHOGONAL * size) | swap
    if not turn.any():
        return np.asarray(turn.any(axis=0))
    cosine, sine = _angle(a, b, g, swap)
    turned = cosine[:, None] * x - sine[:, None] * y
    rows[second] = sine[:, None] * x + cosine[:, None] * y
    rows[first] = turned
    return np.asarray(((slope > LAST * size) | swap).any(axis=0))


def _angle(a: Array, b: Array, g: Array, swap: Flags) -> tuple[Array, Array]:
    """Cosine and sine of the rotation that makes two rows of squared lengths a, b and product g orthogonal."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        zeta = (b - a) / (g + g)
        tangent = 1.0 / (zeta + np.copysign(np.sqrt(1.0 + zeta * zeta), zeta))
    tangent = np.where(g == 0.0, 0.0, tangent)
    cosine = 1.0 / np.sqrt(1.0 + tangent * tangent)
    sine = cosine * tangent
    return np.where(swap, sine, cosine), np.where(swap, -cosine, sine)
