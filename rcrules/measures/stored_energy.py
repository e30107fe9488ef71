"""Stored energy of a capacitor at the greatest voltage that lies across it.

W = C V² / 2. Source: OpenStax University Physics 2, section 8.3.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._stress import most, with_capacitance
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Energy [J] (case,); cases: (case, column), SI. Needs structure.element."""
    return 0.5 * most(structure, cases) ** 2 * evaluate(structure.farads[structure.element or 0], cases)


MEASURE = Measure(
    name="stored_energy",
    subject="capacitor",
    unit="J",
    summary="Energy in the capacitor at the greatest voltage across it.",
    compute=compute,
    theory=with_capacitance,
    poses="states",
)
