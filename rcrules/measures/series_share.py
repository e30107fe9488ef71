"""Series share: the greatest part of the voltage across capacitors in series that one of them may take.

From empty, a step first divides by capacitance and in the end by conductance: balancing resistors and what dielectrics
leak, each anything from nothing to its most. Without balancing resistors leakage alone decides, so that each may take
the whole: 1. Two equal capacitors with balancing resistors R and leakage up to 1/r: (R ∥ ∞)/(R + R ∥ r) in the end.
Source: charge conservation and the voltage divider; makers of electrolytic capacitors size balancing resistors so.
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved

LOOSE = ("loose", 1.0)
"""No resistor holds an end of the capacitor."""


def compute(structure: Structure, cases: Array) -> Array:
    """Part of the voltage [1] (case,); the source steps from 0 V to 1 V; cases: (case, column), SI."""
    if LOOSE in structure.options:
        return np.ones(len(cases))
    low, high = solved(structure, cases).signal.extremes()
    return np.maximum(high, -low)


MEASURE = Measure(
    name="series_share",
    subject="capacitor",
    unit="1",
    summary="Greatest part of the voltage across capacitors in series that this one may take.",
    compute=compute,
    theory=unproved,
    poses="string",
    scale_free=True,
)
