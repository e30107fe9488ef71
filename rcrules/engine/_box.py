"""A box of cases, and the best cases found in it so far."""

from collections.abc import Generator, Sequence
from dataclasses import dataclass, field
from itertools import product

import numpy as np

from rcrules.engine._shape import Array

Asking = Generator[Array, Array, Array]
"""Yields cases (case, p), is sent their values (case,), returns them."""

WIDE = 4.0
"""Ratio of high to low from which a number is divided geometrically."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Box:
    """Range of each number, and what is known of the slope in it."""

    low: Array
    """[any], (p,)"""
    nominal: Array
    """[any], (p,)"""
    high: Array
    """[any], (p,); inf allowed above a positive low"""
    signs: tuple[int | None, ...]
    """+1, -1, 0 or None = not known"""

    def unknown(self) -> tuple[int, ...]:
        """Columns of unknown sign that have a width."""
        return tuple(i for i, sign in enumerate(self.signs) if sign is None and self.low[i] < self.high[i])

    def base(self, side: int) -> Array:
        """The case that is best on one side as far as signs are known, nominal elsewhere. (p,)"""
        case = self.nominal.copy()
        for index, sign in enumerate(self.signs):
            if sign:
                case[index] = self.high[index] if sign * side > 0 else self.low[index]
        return case

    def point(self, index: int, share: float) -> float:
        """The number at a share of its range: 0 = low, 1 = high."""
        low, high = float(self.low[index]), float(self.high[index])
        if share <= 0.0 or share >= 1.0:
            return low if share <= 0.0 else high
        if np.isinf(high):
            return low / (1.0 - share) if low > 0.0 else share / (1.0 - share)
        if low > 0.0 and high > WIDE * low:
            return float(np.clip(low * (high / low) ** share, low, high))
        return float(np.clip(low + (high - low) * share, low, high))

    def share(self, index: int, number: float) -> float:
        """The share of its range at which a number lies."""
        low, high = float(self.low[index]), float(self.high[index])
        if number <= low or number >= high:
            return 0.0 if number <= low else 1.0
        if np.isinf(high):
            return 1.0 - low / number if low > 0.0 else number / (1.0 + number)
        if low > 0.0 and high > WIDE * low:
            return float(np.log(number / low) / np.log(high / low))
        return (number - low) / (high - low)


@dataclass(slots=True, kw_only=True)
class Best:
    """The lowest and highest value seen, each with its case; equal values: the lowest case."""

    box: Box
    nominal: float = np.nan
    asked: int = 0
    """Number of cases asked for."""
    found: dict[int, tuple[float, tuple[float, ...]]] = field(default_factory=dict)
    """By side (-1, +1): value and case."""

    def ask(self, cases: Array) -> Asking:
        """Have cases evaluated and remember the best."""
        values = np.asarray((yield cases), float)
        if not self.asked:
            self.nominal = float(values[0])
        self.asked += len(cases)
        for side in (-1, 1):
            self._remember(side, cases, values)
        return values

    def ask_once(self, cases: Array) -> Asking:
        """The same where many cases are alike, such as steps beyond an end of the range."""
        rows, back = np.unique(cases, axis=0, return_inverse=True)
        values = yield from self.ask(rows)
        return values[back.reshape(-1)]

    def _remember(self, side: int, cases: Array, values: Array) -> None:
        """Keep the best of what is known and what is new; an undefined value stays for ever."""
        undefined = np.isnan(values)
        extreme = np.nan if undefined.any() else side * np.max(side * values)
        rows = cases[undefined if undefined.any() else values == extreme]
        new = (float(extreme), min(tuple(float(number) for number in row) for row in rows))
        old = self.found.get(side)
        if old is None or (not np.isnan(old[0]) and _better(side, new, old)):
            self.found[side] = new

    def undefined(self) -> bool:
        """Whether a value was not defined."""
        return any(np.isnan(value) for value, _ in self.found.values())

    def value(self, side: int) -> float:
        """Best value of a side."""
        return self.found[side][0]

    def side(self, side: int) -> Array:
        """Best case of a side. (p,)"""
        return np.array(self.found[side][1])


def _better(side: int, new: tuple[float, tuple[float, ...]], old: tuple[float, tuple[float, ...]]) -> bool:
    """Whether a value and its case go before another."""
    if np.isnan(new[0]):
        return True
    return side * new[0] > side * old[0] or (new[0] == old[0] and new[1] < old[1])


def vertices(box: Box, side: int, columns: Sequence[int]) -> Array:
    """All vertices in these columns; the others as the signs demand. (2^columns, p)"""
    cases = np.tile(box.base(side), (2 ** len(columns), 1))
    if len(columns):
        ends = [(box.low[index], box.high[index]) for index in columns]
        cases[:, list(columns)] = np.array(list(product(*ends)))
    return cases
