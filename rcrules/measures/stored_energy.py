"""Stored energy of a capacitor, or of all at a supply, at the greatest voltage that lies across it.

W = C V² / 2. Source: OpenStax University Physics 2, section 8.3.
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._stress import most, with_capacitance
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Energy [J] (case,); cases: (case, column), SI. Without structure.element all count."""
    own = structure.farads if structure.element is None else (structure.farads[structure.element],)
    farads = sum((evaluate(form, cases) for form in own), np.zeros(len(cases)))
    return 0.5 * most(structure, cases) ** 2 * farads


MEASURE = Measure(
    name="stored_energy",
    subject="capacitor",
    also=("supply",),
    unit="J",
    summary="Energy in the capacitor, or in all at the supply, at the greatest voltage.",
    compute=compute,
    theory=with_capacitance,
    poses="states",
)
