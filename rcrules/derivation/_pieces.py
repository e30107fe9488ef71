"""The observed voltage over time, piece by piece: one exponential worked out by hand, or a sum of them."""

from dataclasses import dataclass
from math import exp, log
from typing import Protocol

from rcrules.derivation._sheet import Number, Sheet


class Piece(Protocol):
    """v(x), x counted from the start of the piece."""

    @property
    def begins(self) -> Number:
        """[s]"""

    @property
    def start(self) -> Number:
        """v at x = 0 [V]"""

    @property
    def rest(self) -> Number:
        """What v goes to in the end, where nothing ramps [V]"""

    def at(self, sheet: Sheet, symbol: str, x: Number, note: str = "") -> Number:
        """v(x)."""

    def when(self, sheet: Sheet, symbol: str, level: Number) -> Number | None:
        """x at which v is at a constant level; None where no formula gives it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class One:
    """v(x) = V + (v0 - V) e^(-x/tau), and S (x - tau (1 - e^(-x/tau))) where a source ramps."""

    begins: Number
    start: Number
    rest: Number
    slope: Number | None
    tau: Number

    def at(self, sheet: Sheet, symbol: str, x: Number, note: str = "") -> Number:
        """v(x)."""
        numbers = [self.rest, self.start, self.rest, x, self.tau]
        formula = "{} + ({} - {}) · exp(-{} / {})"
        if self.slope is None:
            return sheet.work(symbol, "V", formula, _decay, *numbers, note=note)
        numbers += [self.slope, x, self.tau, x, self.tau]
        formula += " + {} · ({} - {} · (1 - exp(-{} / {})))"
        return sheet.work(symbol, "V", formula, _ramp, *numbers, note=note)

    def when(self, sheet: Sheet, symbol: str, level: Number) -> Number | None:
        """x = tau ln((v0 - V)/(L - V)); None while a source ramps."""
        if self.slope is not None or not _positive(self.start.value - self.rest.value, level.value - self.rest.value):
            return None
        numbers = (self.tau, self.start, self.rest, level, self.rest)
        return sheet.work(symbol, "s", "{} · ln(({} - {}) / ({} - {}))", _logarithm, *numbers)


@dataclass(frozen=True, slots=True, kw_only=True)
class Sum:
    """v(x) = E + S x + sum of A e^(-x/tau) over the modes."""

    begins: Number
    start: Number
    rest: Number
    slope: Number | None
    modes: tuple[tuple[Number, Number], ...]
    """Amplitude and time constant of each mode that is seen here."""

    def at(self, sheet: Sheet, symbol: str, x: Number, note: str = "") -> Number:
        """v(x)."""
        numbers = [self.rest] + ([self.slope, x] if self.slope else [])
        formula = "{}" + (" + {} · {}" if self.slope else "") + " + {} · exp(-{} / {})" * len(self.modes)
        for amplitude, tau in self.modes:
            numbers += [amplitude, x, tau]
        ramp = 2 if self.slope else 0

        def compute(rest: float, *others: float) -> float:
            total = rest + (others[0] * others[1] if ramp else 0.0)
            for index in range(ramp, len(others), 3):
                total += others[index] * _exp(others[index + 1], others[index + 2])
            return total

        return sheet.work(symbol, "V", formula, compute, *numbers, note=note)

    def when(self, sheet: Sheet, symbol: str, level: Number) -> Number | None:
        """x = tau ln(A/(L - E)) for a single mode without a ramp."""
        if self.slope is not None or len(self.modes) != 1:
            return None
        amplitude, tau = self.modes[0]
        if not _positive(amplitude.value, level.value - self.rest.value):
            return None
        return sheet.work(
            symbol, "s", "{} · ln({} / ({} - {}))", _logarithm_of_amplitude, tau, amplitude, level, self.rest
        )


def _positive(above: float, below: float) -> bool:
    """Whether a ratio has a logarithm."""
    return above * below > 0.0


def _exp(x: float, tau: float) -> float:
    return exp(-x / tau)


def _decay(rest: float, start: float, rest_again: float, x: float, tau: float) -> float:
    return rest + (start - rest_again) * _exp(x, tau)


def _ramp(rest: float, start: float, rest_again: float, x: float, tau: float, slope: float, *_: float) -> float:
    return rest + (start - rest_again) * _exp(x, tau) + slope * (x - tau * (1.0 - _exp(x, tau)))


def _logarithm(tau: float, start: float, rest: float, level: float, rest_again: float) -> float:
    return tau * log((start - rest) / (level - rest_again))


def _logarithm_of_amplitude(tau: float, amplitude: float, level: float, rest: float) -> float:
    return tau * log(amplitude / (level - rest))
