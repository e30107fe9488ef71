"""Sums of decaying exponentials with a ramp: values, slopes, signs."""

from dataclasses import dataclass, replace

import numpy as np

from rcrules.engine._shape import Array, Indices

SERIES_BELOW = 0.25
"""Argument of phi below which the series is used; there the closed form loses digits."""
TERMS = 12
"""Terms of the series: 0.25^12 / 13! is below the last digit."""


def phi(x: Array) -> Array:
    """(exp(-x) - 1 + x)/x: the share of a ramp that a mode has followed. [1]

    x: time over time constant, >= 0. [1], any shape
    """
    with np.errstate(divide="ignore", invalid="ignore"):
        closed = 1.0 + np.expm1(-x) / x
    if not (x < SERIES_BELOW).any():
        return closed
    small = np.minimum(x, SERIES_BELOW)
    series = np.zeros_like(small)
    for m in range(TERMS, 0, -1):
        series = (1.0 - series) * small / (m + 1.0)
    return np.where(x < SERIES_BELOW, series, closed)


@dataclass(frozen=True, slots=True, kw_only=True)
class ExponentialSum:
    """f(t) = start + slope t + sum over modes of amps (exp(-rates t) - 1) + ramps t phi(rates t), for t >= 0."""

    start: Array
    """[V], (case,)"""
    slope: Array
    """[V/s], (case,)"""
    amps: Array
    """[V], (n, case)"""
    rates: Array
    """Rising; an amplitude of 0 for modes without time constant. [1/s], (n, case)"""
    ramps: Array | None
    """[V/s], (n, case); None = no ramps"""

    @property
    def ramping(self) -> bool:
        """Whether it has a slope in some case."""
        return bool(self.slope.any())

    def at(self, t: Array) -> Array:
        """Value. [V], (case,)

        t: [s], (case,)
        """
        x = self.rates * t
        value: Array = self.start + self.slope * t + (self.amps * np.expm1(-x)).sum(axis=0)
        return value if self.ramps is None else value + np.asarray((self.ramps * t * phi(x)).sum(axis=0))

    def initial_slope(self) -> Array:
        """Slope just after the start. [V/s], (case,)"""
        return np.asarray(self.slope - (self.rates * self.amps).sum(axis=0))

    def initial_bend(self) -> Array:
        """Second derivative just after the start. [V/s²], (case,)"""
        ramps = 0.0 if self.ramps is None else self.ramps
        return np.asarray((self.rates * (self.rates * self.amps + ramps)).sum(axis=0))

    def end(self) -> Array:
        """Limit for long times. [V], (case,); inf where it ramps for ever"""
        plain = self.merged()
        rest = plain.start - plain.amps.sum(axis=0)
        return np.where(plain.slope == 0.0, rest, np.copysign(np.inf, plain.slope))

    def merged(self) -> "ExponentialSum":
        """The same function with the ramps written as amplitudes and slope."""
        if self.ramps is None:
            return self
        amps = self.amps + self.ramps / self.rates
        return replace(self, slope=self.slope + self.ramps.sum(axis=0), amps=amps, ramps=None)

    def derivative(self) -> "ExponentialSum":
        """The slope over time, as a sum of the same kind."""
        amps = -self.rates * self.amps
        if self.ramps is not None:
            amps = amps - self.ramps
        return replace(self, start=self.initial_slope(), slope=np.zeros_like(self.slope), amps=amps, ramps=None)

    def ending_at(self, end: Array) -> "ExponentialSum":
        """The same function with its limit corrected in the last digits; the slowest mode takes the difference.

        end: the limit, known better. [V], (case,)
        """
        amps = self.amps.copy()
        amps[0] += (self.start - self.amps.sum(axis=0)) - end
        return replace(self, amps=amps)

    def minus(self, level: Array | float) -> "ExponentialSum":
        """The function less a constant level. [V], (case,)"""
        return replace(self, start=self.start - level)

    def times(self, sign: Array) -> "ExponentialSum":
        """The function times a factor. [1], (case,)"""
        if (sign == 1.0).all():
            return self
        ramps = None if self.ramps is None else self.ramps * sign
        return replace(self, start=self.start * sign, slope=self.slope * sign, amps=self.amps * sign, ramps=ramps)

    def take(self, cases: Indices) -> "ExponentialSum":
        """The function in the cases of these indices only."""
        ramps = None if self.ramps is None else self.ramps[:, cases]
        return ExponentialSum(
            start=self.start[cases],
            slope=self.slope[cases],
            amps=self.amps[:, cases],
            rates=self.rates[:, cases],
            ramps=ramps,
        )
