"""One-sided Jacobi: rows made orthogonal by plane rotations, many cases at once.

Keeps the relative precision of small rows, where a symmetric eigensolver keeps only that of the largest (SIAM Journal
on Matrix Analysis and Applications 13 (1992) 1204; from memory).
"""

from functools import lru_cache

import numpy as np

from rcrules.engine._rough import MANY, is_rough
from rcrules.engine._shape import Array, Flags

BLOCK = 2**16
"""Numbers worked on at a time, so that they stay in the cache."""
SIMILAR = 1e-10
"""Least ratio of squared row lengths for that."""
SWEEPS = 60
"""More than ever needed; ten serve for a hundred rows."""
ORTHOGONAL = 4e-16
"""Cosine below which two rows count as orthogonal."""
LAST = 1e-9
"""Cosine below which one more rotation ends it: convergence is quadratic."""


def orthogonalise(rows: Array, width: int) -> Array:
    """Rotate rows until their first ``width`` columns are orthogonal, longest row first.

    rows: (n, columns, case), may be overwritten; columns from ``width`` on are carried along.
    Returns the rows; those that are zero in these columns in every case come last.
    """
    live = rows[:, :width].any(axis=(1, 2))
    if not live.all():
        return np.concatenate([orthogonalise(rows[live], width), rows[~live]])
    if len(rows) < 2:
        return rows
    cases, block = rows.shape[2], max(64, BLOCK // (len(rows) * rows.shape[1]))
    if cases <= 2 * block:
        return _swept(rows, width)
    for start in range(0, cases, block):
        rows[:, :, start : start + block] = _swept(rows[:, :, start : start + block].copy(), width)
    return rows


def _swept(rows: Array, width: int) -> Array:
    """Sweeps over all pairs of rows, until no case is left that is not orthogonal."""
    cases = rows.shape[2]
    if len(rows) >= MANY and (turned := _prepared(rows, width)) is not None:
        rows = turned
        if is_rough():
            return rows
    for _ in range(SWEEPS):
        active = np.zeros(cases, dtype=bool)
        for first, second in _schedule(len(rows)):
            active |= _rotate(rows, width, first, second)
        if not active.any():
            break
        if cases > 64 and 2 * np.count_nonzero(active) < cases:
            rows[:, :, active] = _swept(rows[:, :, active], width)
            break
    return rows


def _prepared(rows: Array, width: int) -> Array | None:
    """Many rows of similar length turned by a dense eigensolver first, which leaves a sweep or two.

    Its rounding is that of the longest row; None for rows of very different lengths.
    """
    stored = np.ascontiguousarray(rows[:, :width].transpose(2, 0, 1))
    products = stored @ stored.transpose(0, 2, 1)
    lengths = np.diagonal(products, axis1=1, axis2=2)
    if not (lengths.min(axis=1) > SIMILAR * lengths.max(axis=1)).all():
        return None
    turns = np.linalg.eigh(products)[1][:, :, ::-1]
    turned: Array = turns.transpose(0, 2, 1) @ rows.transpose(2, 0, 1)
    return np.ascontiguousarray(turned.transpose(1, 2, 0))


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
