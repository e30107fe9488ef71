"""Curves for a drawing: many instants worked out, those kept at which something happens."""

from collections.abc import Sequence
from typing import Final

import numpy as np

from rcrules.problems import Array, Solved

_KEPT: Final = 140
"""Points of a curve, apart from marked instants."""
_TRIED: Final = 600
"""Instants among which they are chosen: as many evenly spaced, and as many by powers."""
_EARLIEST: Final = 1e-6
"""The first of those by powers, in parts of the span."""
_BEFORE: Final = 0.04
"""Part of the span that is shown before the event."""
_APART: Final = 1e-9
"""How far before an instant the value before its jump stands, in parts of the span."""
_MOST_MARKS: Final = 30


def along(found: Solved, zero: Array, span: float, marks: Sequence[float]) -> tuple[Array, list[list[float]]]:
    """Instants [s], at most 200, and the observed voltage [V] of every case at each; before the event it rests.

    zero: what each case counts from, since the event [s] (case,). marks: instants that are kept, and before which the
    voltage may jump.
    """
    time = _candidates(zero, span, marks)
    curves = _curves(found, zero, time)
    kept = _kept(time, curves, span, marks)
    return time[kept], [[float(value) for value in row] for row in curves[:, kept]]


def _candidates(zero: Array, span: float, marks: Sequence[float]) -> Array:
    begin = -float(zero.max()) - _BEFORE * span
    own = [instant for mark in _inside(marks, span) for instant in (mark - _APART * span, mark)]
    powers = np.geomspace(_EARLIEST * span, span, _TRIED)
    starts = np.unique(-zero)
    early = [start + powers[start + powers < span] for start in starts]
    return np.unique(np.concatenate([np.linspace(begin, span, _TRIED), *early, own]))


def _inside(marks: Sequence[float], span: float) -> list[float]:
    return [mark for mark in marks if mark <= span][:_MOST_MARKS]


def _curves(found: Solved, zero: Array, time: Array) -> Array:
    """Observed voltage [V] (case, instant)."""
    cases = np.repeat(np.arange(len(zero)), len(time))
    since = (time[None, :] + zero[:, None]).ravel()
    after = found.signal.take(cases).at(np.maximum(since, 0.0))
    return np.where(since < 0.0, found.start[cases], after).reshape(len(zero), -1)


def _kept(time: Array, curves: Array, span: float, marks: Sequence[float]) -> Array:
    """Instants that part the way along all curves together into equal pieces, and those that are marked."""
    heights = np.ptp(curves, axis=1, keepdims=True)
    moves = np.abs(np.diff(curves, axis=1)) / np.where(heights > 0.0, heights, 1.0)
    steps = np.diff(time)
    way = steps / span + moves.sum(axis=0)
    near = max((mark for mark in marks if mark <= span), default=0.0)
    if near > 0.0:
        way = way + np.where((time[1:] > 0.0) & (time[1:] <= 2.0 * near), steps / near, 0.0)
    gone = np.concatenate([[0.0], np.cumsum(way)])
    wanted = np.searchsorted(gone, np.linspace(0.0, gone[-1], _KEPT))
    marked = [instant for mark in _inside(marks, span) for instant in (mark - _APART * span, mark)]
    return np.unique(np.concatenate([wanted, np.searchsorted(time, marked)]).clip(0, len(time) - 1))
