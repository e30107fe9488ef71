"""Bracketed Newton iteration on many functions at once."""

import numpy as np

from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._shape import Array

STEPS = 300
"""Enough for bisection alone over the whole range of a double."""
CLOSE = 1e-10
"""Relative step after which one Newton step leaves no error: it squares."""


def refine(rising: ExponentialSum, low: Array, high: Array) -> Array:
    """Time of the only zero in the closed bracket. [s], (case,)

    rising: negative before its zero, positive after
    low: bracket, lower end. [s], (case,)    high: upper end. [s], (case,)
    """
    if not len(low):
        return low
    low, high = low.copy(), np.maximum(low, high)
    return _iterate(rising, low, high, _guess(rising, low, high))


def _guess(rising: ExponentialSum, low: Array, high: Array) -> Array:
    """Zero of the slowest mode alone where there is one, else the geometric middle. [s], (case,)"""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        middle = np.sqrt(np.maximum(low, 1e-25 * high)) * np.sqrt(high)
        if not len(rising.amps):
            return np.clip(-rising.start / rising.slope, low, high)
        rest = rising.start - rising.amps.sum(axis=0)
        guess = np.log(-rising.amps[0] / rest) / rising.rates[0]
    usable = np.isfinite(guess) & (rising.slope == 0.0)
    return np.where(usable, np.clip(guess, low, high), middle)


def _iterate(rising: ExponentialSum, low: Array, high: Array, t: Array) -> Array:
    """Newton steps in exp(-t of the slowest mode), geometric bisection where they leave the bracket."""
    done = low >= high
    for step in range(STEPS):
        value, slope = _value_and_slope(rising, t)
        low, high = np.where(value < 0.0, t, low), np.where(value < 0.0, high, t)
        new = _step(rising, t, value, slope)
        outside = ~((new >= low) & (new <= high)) | (step % 16 == 15)
        if outside.any():
            new = np.where(outside, np.sqrt(np.maximum(low, 1e-25 * high)) * np.sqrt(high), new)
        new = np.where(done, t, new)
        done |= (np.abs(new - t) <= CLOSE * t) | (value == 0.0)
        t = new
        left = len(done) - np.count_nonzero(done)
        if left == 0:
            break
        if 2 * left < len(done) and len(done) > 64:
            rest = np.flatnonzero(~done)
            t[rest] = _iterate(rising.take(rest), low[rest], high[rest], t[rest])
            break
    return t


def _value_and_slope(rising: ExponentialSum, t: Array) -> tuple[Array, Array]:
    """Value and slope at t. [V], [V/s]; with ramps amplitudes may be huge, and only their change is exact"""
    if not rising.ramping:
        left = rising.amps * np.exp(-rising.rates * t)
        rest = rising.start - rising.amps.sum(axis=0)
        return np.asarray(rest + left.sum(axis=0)), np.asarray(-(rising.rates * left).sum(axis=0))
    fallen = rising.amps * np.expm1(-rising.rates * t)
    value = rising.start + rising.slope * t + fallen.sum(axis=0)
    return value, rising.slope - (rising.rates * (fallen + rising.amps)).sum(axis=0)


def _step(rising: ExponentialSum, t: Array, value: Array, slope: Array) -> Array:
    """Next time by Newton's rule; in exp(-t) of the slowest mode, in which the tail is a straight line."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        if not len(rising.amps):
            return np.asarray(t - value / slope)
        rate = rising.rates[0]
        return np.asarray(t - np.log1p(rate * value / slope) / rate)
