"""One quantity of a network over time, and what can be asked of it."""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from rcrules.engine._energy import squared
from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._shape import Array, Indices
from rcrules.engine._zeros import zeros


@dataclass(frozen=True, slots=True, kw_only=True)
class Signal:
    """f(t) for t >= 0 in every case, a sum of exponentials in each piece; jumps between pieces allowed."""

    starts: Array
    """Start of each piece. [s], (s, case)"""
    sums: tuple[ExponentialSum, ...]
    """f in each piece, over the time since its start."""
    lengths: tuple[Array, ...]
    """[s], (case,) for each piece; inf in the last"""

    def take(self, cases: Indices) -> "Signal":
        """The same in some of the cases, each as often as it is named.

        cases: (n,)
        """
        return Signal(
            starts=self.starts[:, cases],
            sums=tuple(found.take(cases) for found in self.sums),
            lengths=tuple(length[cases] for length in self.lengths),
        )

    def initial(self) -> Array:
        """Value just after t = 0. [V], (case,)"""
        return self._just_after(tuple(found.start for found in self.sums))

    def slope_initial(self) -> Array:
        """Slope just after t = 0. [V/s], (case,)"""
        return self._just_after(tuple(found.initial_slope() for found in self.sums))

    def final(self) -> Array:
        """Limit for long times. [V], (case,); inf where a source ramps for ever"""
        return self.sums[-1].end()

    def at(self, t: Array) -> Array:
        """Value, after the jump where there is one. [V], (case,)

        t: time, >= 0. [s], (case,)
        """
        t = np.broadcast_to(np.asarray(t, float), self.starts.shape[1:])
        value = self.sums[0].at(t)
        for start, found in zip(self.starts[1:], self.sums[1:], strict=True):
            later = t >= start
            value = np.where(later, found.at(np.where(later, t - start, 0.0)), value)
        return np.asarray(value)

    def first_crossing(self, direction: Array | float) -> Array:
        """First t >= 0 at which f >= 0 (direction +1) or f <= 0 (-1). [s], (case,); inf = never

        direction: +1 or -1. [1], (case,) or one number
        A touch of 0 at t = 0 with the slope away is not a crossing.
        """
        cases = self.starts.shape[1]
        direction = np.broadcast_to(np.asarray(direction, float), (cases,))
        result = np.full(cases, np.inf)
        for index, (start, found, length) in enumerate(zip(self.starts, self.sums, self.lengths, strict=True)):
            if len(self.sums) == 1:
                return _first(found.merged().times(direction), length)
            open_cases = np.flatnonzero(np.isinf(result) & (length > 0.0))
            part = found.take(open_cases).merged().times(direction[open_cases])
            result[open_cases] = start[open_cases] + _first(part, length[open_cases])
            if index and not np.isinf(result).any():
                break
        return result

    def last_exit(self, low: Array | float, high: Array | float) -> Array:
        """Last time outside [low, high]. [s], (case,); 0 = never outside, inf = it ends outside

        low: lower edge of the band. [V], (case,) or one number
        high: upper edge of the band. [V], (case,) or one number
        """
        cases = self.starts.shape[1]
        low, high = (np.broadcast_to(np.asarray(edge, float), (cases,)) for edge in (low, high))
        result = np.full(cases, -1.0)
        for start, found, length in reversed(list(zip(self.starts, self.sums, self.lengths, strict=True))):
            todo = np.flatnonzero((result < 0.0) & (length > 0.0))
            last = _last(found.take(todo).merged(), low[todo], high[todo], length[todo])
            result[todo] = np.where(last >= 0.0, start[todo] + last, -1.0)
        return np.asarray(np.maximum(result, 0.0))

    def extremes(self) -> tuple[Array, Array]:
        """Least and greatest value over t >= 0, limits included. [V], (case,) each"""
        lowest, highest = self.final(), self.final()
        for found, length in zip(self.sums, self.lengths, strict=True):
            ends = [found.start, found.at(np.where(np.isfinite(length), length, 0.0))]
            least, most = np.minimum(*ends), np.maximum(*ends)
            case, t = zeros(found.derivative(), length)
            inner = found.take(case).at(t)
            np.minimum.at(least, case, inner)
            np.maximum.at(most, case, inner)
            there = length > 0.0
            lowest = np.where(there, np.minimum(lowest, least), lowest)
            highest = np.where(there, np.maximum(highest, most), highest)
        return lowest, highest

    def width(self) -> Array:
        """Total time with f >= 0. [s], (case,); inf where f ends there"""
        total = np.zeros(self.starts.shape[1])
        for found, length in zip(self.sums, self.lengths, strict=True):
            total = total + _time_above(found.merged(), length)
        return total

    def energy(self) -> Array:
        """Integral of f² over t >= 0. [V² s], (case,); inf where f does not end at 0"""
        total = np.zeros(self.starts.shape[1])
        for found, length in zip(self.sums, self.lengths, strict=True):
            total = total + squared(found, length)
        return total

    def _just_after(self, values: tuple[Array, ...]) -> Array:
        """The value of the first piece that has a length."""
        result = values[-1]
        for value, length in zip(reversed(values[:-1]), reversed(self.lengths[:-1]), strict=True):
            result = np.where(length > 0.0, value, result)
        return result


def _first(found: ExponentialSum, length: Array) -> Array:
    """First time in the piece at which f >= 0. [s], (case,)"""
    result = np.full(len(length), np.inf)
    case, t = zeros(found, length)
    result[case[::-1]] = t[::-1]
    at_once = found.start > 0.0
    touching = found.start == 0.0
    if touching.any():
        slope = found.initial_slope()
        at_once |= touching & ((slope > 0.0) | ((slope == 0.0) & (found.initial_bend() >= 0.0)))
    return np.where(at_once, 0.0, result)


def _last(found: ExponentialSum, low: Array, high: Array, length: Array) -> Array:
    """Last time in the piece outside the band. [s], (case,); -1 = none, the length = outside at its end"""
    finite = np.isfinite(length)
    end = np.where(finite, found.at(np.where(finite, length, 0.0)), found.end())
    result = np.where((end < low) | (end > high), length, -1.0)
    inside = result < 0.0
    for edge in (low, high):
        case, t = zeros(found.minus(edge), length)
        keep = inside[case]
        np.maximum.at(result, case[keep], t[keep])
    return np.where((result < 0.0) & ((found.start < low) | (found.start > high)), 0.0, result)


def _time_above(found: ExponentialSum, length: Array) -> Array:
    """Time in the piece with f >= 0. [s], (case,)"""
    case, t = zeros(found, length)
    count = np.bincount(case, minlength=len(length))
    marks = np.zeros((int(count.max(initial=0)) + 2, len(length)))
    marks[1:] = length
    rank = np.arange(len(case)) - np.repeat(np.cumsum(count) - count, count)
    marks[rank + 1, case] = t
    return _above(found, marks)


def _above(found: ExponentialSum, marks: Array) -> Array:
    """Sum of the stretches between marks (mark, case) in which f is positive or zero. [s]"""
    total = np.zeros(marks.shape[1])
    tail = np.where(found.amps != 0.0, 1.0 / found.rates, 0.0).max(axis=0, initial=0.0) + 1.0
    for left, right in pairwise(marks):
        there = right > left
        middle = np.where(np.isfinite(right), 0.5 * (left + np.where(np.isfinite(right), right, 0.0)), left + tail)
        middle = np.where(there, middle, 0.0)
        positive = there & (found.at(middle) >= 0.0)
        total = total + np.where(positive, np.where(there, right, 0.0) - left, 0.0)
    return total
