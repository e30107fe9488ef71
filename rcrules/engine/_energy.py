"""Integral of the square of a sum of exponentials: what a resistor turns to heat, per conductance."""

import numpy as np

from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._shape import Array

PANELS = 52
"""Most halvings towards the start of a piece with ramps."""
SMOOTH = 4.0
"""Time constants of the fastest mode in the first panel: each panel is smooth for every mode that still lives in it."""
POINTS, WEIGHTS = np.polynomial.legendre.leggauss(16)


def squared(found: ExponentialSum, length: Array) -> Array:
    """Integral of f² over the length. [V² s], (case,)

    found: the function
    length: [s], (case,); inf allowed where nothing ramps
    """
    if found.ramps is None and not found.ramping:
        return _closed(found, length)
    total = np.where(np.isfinite(length), 0.0, np.inf)
    some = np.flatnonzero(np.isfinite(length) & (length > 0.0))
    if len(some):
        total[some] = _by_panels(found.take(some), length[some])
    return total


def _closed(found: ExponentialSum, length: Array) -> Array:
    """Without ramps: the products of all pairs of terms, each integrated."""
    rest = found.end()
    amps, rates = found.amps, found.rates
    size = np.abs(found.start) + np.abs(amps).sum(axis=0)
    rest = np.where(np.isinf(length) & (np.abs(rest) <= 1e-14 * size), 0.0, rest)
    with np.errstate(invalid="ignore"):
        total = np.where(rest == 0.0, 0.0, rest * rest * length)
        for amp, rate in zip(amps, rates, strict=True):
            total = total - 2.0 * rest * amp * np.expm1(-rate * length) / rate
            total = total - (amp * amps * np.expm1(-(rate + rates) * length) / (rate + rates)).sum(axis=0)
    return np.asarray(np.where(length > 0.0, total, 0.0))


def _by_panels(found: ExponentialSum, length: Array) -> Array:
    """With ramps: Gauss-Legendre on panels that halve towards the start, where fast modes die."""
    total, halvings = np.zeros_like(length), _halvings(found, length)
    for panel in range(halvings + 1):
        right = length * 2.0**-panel
        left = 0.5 * right if panel < halvings else 0.0 * right
        for point, weight in zip(POINTS, WEIGHTS, strict=True):
            value = found.at(left + (right - left) * (0.5 + 0.5 * float(point)))
            total += 0.5 * float(weight) * (right - left) * value * value
    return total


def _halvings(found: ExponentialSum, length: Array) -> int:
    """How often the length is halved until no mode that is there changes much within the first panel."""
    there = found.amps != 0.0 if found.ramps is None else (found.amps != 0.0) | (found.ramps != 0.0)
    spans = np.where(there, found.rates * length, 0.0).max(initial=SMOOTH)
    return int(min(np.ceil(np.log2(spans / SMOOTH)), PANELS))
