"""One signal from the signals of many stretches of time."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rcrules.engine import ExponentialSum, Signal
from rcrules.problems._structure import Array

Indices = NDArray[np.intp]


@dataclass(frozen=True, slots=True, kw_only=True)
class Stretch:
    """A signal in some cases over a stretch of time."""

    cases: Indices
    begin: Array
    """[s] (case,)"""
    cut: Array
    """Where the stretch ends, since its begin [s] (case,); inf = never: the last one of the case"""
    signal: Signal


@dataclass(slots=True)
class _Slot:
    """One piece of the whole signal; a case without it has no length there and is never reached."""

    start: Array
    length: Array
    value: Array
    slope: Array
    amps: Array
    rates: Array
    ramps: Array

    def fill(self, cases: Indices, start: Array, length: Array, found: ExponentialSum) -> None:
        """Put the piece of some cases in."""
        self.start[cases], self.length[cases] = start, length
        self.value[cases], self.slope[cases] = found.start, found.slope
        self.amps[:, cases], self.rates[:, cases] = found.amps, found.rates
        self.ramps[:, cases] = 0.0 if found.ramps is None else found.ramps

    def sum(self) -> ExponentialSum:
        """The piece as a sum of exponentials."""
        ramps = self.ramps if self.ramps.any() else None
        return ExponentialSum(start=self.value, slope=self.slope, amps=self.amps, rates=self.rates, ramps=ramps)


def joined(stretches: Sequence[Stretch], cases: int) -> Signal:
    """The signal of all cases. The stretches of a case follow one another; each case has one without end."""
    modes = len(stretches[0].signal.sums[0].amps)
    last, slots = _slot(modes, cases), []
    for item in stretches:
        for start, length, found in _pieces(item):
            ends = np.isinf(length)
            chosen = np.flatnonzero(ends)
            last.fill(item.cases[chosen], item.begin[chosen] + start[chosen], length[chosen], found.take(chosen))
            chosen = np.flatnonzero(~ends & (length > 0.0))
            if len(chosen):
                slot = _slot(modes, cases)
                slot.fill(item.cases[chosen], item.begin[chosen] + start[chosen], length[chosen], found.take(chosen))
                slots.append(slot)
    slots.append(last)
    return Signal(
        starts=np.stack([slot.start for slot in slots]),
        sums=tuple(slot.sum() for slot in slots),
        lengths=tuple(slot.length for slot in slots),
    )


def _slot(modes: int, cases: int) -> _Slot:
    return _Slot(
        start=np.full(cases, np.inf),
        length=np.zeros(cases),
        value=np.zeros(cases),
        slope=np.zeros(cases),
        amps=np.zeros((modes, cases)),
        rates=np.ones((modes, cases)),
        ramps=np.zeros((modes, cases)),
    )


def _pieces(item: Stretch) -> Iterable[tuple[Array, Array, ExponentialSum]]:
    """Start, length up to the cut, and course of each piece of a stretch."""
    for start, found, length in zip(item.signal.starts, item.signal.sums, item.signal.lengths, strict=True):
        yield start, np.maximum(np.minimum(length, item.cut - start), 0.0), found
