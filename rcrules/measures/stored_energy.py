"""Stored energy of a capacitor, or of all at a supply, at the greatest voltage that lies across it.

W = C V² / 2; along a bias curve, which is incremental, W = ∫ v C dv. Source: OpenStax University Physics 2, section
8.3.
"""

import numpy as np

from rcrules.measures._bias import energy
from rcrules.measures._measure import Measure
from rcrules.measures._stress import most, with_capacitance
from rcrules.problems import Array, Structure


def compute(structure: Structure, cases: Array) -> Array:
    """Energy [J] (case,); cases: (case, column), SI. Without structure.element all count."""
    own = range(len(structure.farads)) if structure.element is None else (structure.element,)
    volts = most(structure, cases)
    return sum((energy(structure, index, volts, cases) for index in own), np.zeros(len(cases)))


MEASURE = Measure(
    name="stored_energy",
    subject="capacitor",
    also=("supply",),
    unit="J",
    summary="Energy in the capacitor, or in all at the supply, at the greatest voltage.",
    compute=compute,
    theory=with_capacitance,
    poses="states",
    incremental=True,
)
