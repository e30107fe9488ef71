"""Charge and energy of a capacitor whose capacitance depends on the voltage: a bias curve is incremental, C = dQ/dV."""

from collections.abc import Sequence
from itertools import pairwise

import numpy as np

from rcrules.problems import Array, Structure, evaluate

Curve = Sequence[tuple[float, float]]
"""Points of voltage [V] and remaining fraction [1], rising; linear between them, constant outside."""


def charge(structure: Structure, capacitor: int, volts: Array, cases: Array) -> Array:
    """∫ C dv from 0 V [C] (case,); C v without a curve. volts: magnitude [V] (case,); cases: (case, column), SI."""
    curve = dict(structure.curves).get(capacitor)
    return evaluate(structure.farads[capacitor], cases) * (volts if curve is None else _mean(curve, volts, 0))


def energy(structure: Structure, capacitor: int, volts: Array, cases: Array) -> Array:
    """∫ v C dv from 0 V [J] (case,); C v²/2 without a curve. volts: magnitude [V] (case,); cases: (case, column)."""
    curve = dict(structure.curves).get(capacitor)
    plain = 0.5 * volts**2 if curve is None else _mean(curve, volts, 1)
    return evaluate(structure.farads[capacitor], cases) * plain


def _mean(curve: Curve, volts: Array, power: int) -> Array:
    """∫ u^power c(u) du from 0 to volts, stretch by stretch."""
    first, last = curve[0][1], curve[-1][1]
    points = [(0.0, first), *(point for point in curve if point[0] > 0.0), (np.inf, last)]
    total = np.zeros_like(volts)
    for (begin, here), (end, there) in pairwise(points):
        slope = 0.0 if np.isinf(end) else (there - here) / (end - begin)
        top = np.clip(volts, begin, end)
        level = here - slope * begin
        for factor, order in ((level, power + 1), (slope, power + 2)):
            total = total + factor * (top**order - begin**order) / order
    return total
