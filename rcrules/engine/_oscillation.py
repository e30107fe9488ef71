"""A constant and exponentials that may oscillate: what an active filter does after a step."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rcrules.engine._shape import Array

Complex = NDArray[np.complex128]

PER_TURN = 64
"""Points looked at in one turn of the fastest oscillation."""
LEAST = 512
MOST = 16384
STEPS = 60


@dataclass(frozen=True, slots=True, kw_only=True)
class Oscillation:
    """constant + real part of the sum of sizes * exp(rates * t), for t >= 0."""

    constant: Array
    """(case,)"""
    sizes: Complex
    """(case, k)"""
    rates: Complex
    """[1/s] (case, k), real parts negative"""

    def initial(self) -> Array:
        """Just after 0. (case,)"""
        found: Array = self.constant + self.sizes.sum(axis=1).real
        return found

    def final(self) -> Array:
        """The limit. (case,)"""
        return self.constant

    def at(self, t: Array) -> Array:
        """Value at the times t [s] (case,) or (case, m); of that shape."""
        times = np.atleast_2d(t.T).T
        turned = np.exp(self.rates[:, :, None] * times[:, None, :])
        found: Array = self.constant[:, None] + (self.sizes[:, :, None] * turned).sum(axis=1).real
        return found[:, 0] if t.ndim == 1 else found

    def last_exit(self, low: Array, high: Array) -> Array:
        """Last time outside [low, high] [s], 0 if never outside, inf if it ends outside. (case,)

        low, high: (case,) or one number, around the constant.
        """
        middle, half = 0.5 * (low + high), 0.5 * (high - low)
        room = np.broadcast_to(np.minimum(high - self.constant, self.constant - low), self.constant.shape)
        times = self._times(np.maximum(room, 0.0))
        distance = np.abs(self.at(times) - np.reshape(middle, (-1, 1))) - np.reshape(half, (-1, 1))
        distance, times = _with_peaks(distance, times)
        outside = distance > 0.0
        index = outside.shape[1] - 1 - outside[:, ::-1].argmax(axis=1)
        case = np.arange(len(index))
        found = self._crossing(times[case, index], times[case, np.minimum(index + 1, times.shape[1] - 1)], middle, half)
        found = np.where(outside.any(axis=1), found, 0.0)
        return np.where(room > 0.0, found, np.inf)

    def _crossing(self, outside: Array, inside: Array, middle: Array, half: Array) -> Array:
        """The time between two at which the distance from the middle is half the band. [s]"""
        for _ in range(STEPS):
            between = 0.5 * (outside + inside)
            out = np.abs(self.at(between) - middle) > half
            outside, inside = np.where(out, between, outside), np.where(out, inside, between)
        return inside

    def _times(self, room: Array) -> Array:
        """Times that show every turn until all exponentials together are within the room. [s], (case, m), rising."""
        decay = -self.rates.real
        size = np.abs(self.sizes)
        slowest = 1.0 / decay.min(axis=1)
        share = size.sum(axis=1) / np.where(room > 0.0, room, 1.0)
        end = slowest * np.maximum(np.log(np.maximum(share, 1.0)), 1.0) * 1.0001
        turns = np.abs(self.rates.imag).max(axis=1) * end / (2.0 * np.pi)
        count = int(np.clip(PER_TURN * turns.max(initial=0.0), LEAST, MOST))
        even = np.linspace(0.0, 1.0, count)
        early = np.geomspace(1e-9, 1.0, LEAST)
        found: Array = end[:, None] * np.union1d(even, early)
        return found


def _with_peaks(distance: Array, times: Array) -> tuple[Array, Array]:
    """Distances in which a point beside a peak that rises above 0 between points stands at the peak's height."""
    left, here, right = distance[:, :-2], distance[:, 1:-1], distance[:, 2:]
    peak = (here >= left) & (here >= right) & (here <= 0.0)
    bend = left - 2.0 * here + right
    height = here - np.where(bend < 0.0, (left - right) ** 2 / np.where(bend < 0.0, 8.0 * bend, 1.0), 0.0)
    found = distance.copy()
    found[:, 1:-1] = np.where(peak & (height > 0.0), height, here)
    return found, times
