"""Stored charge of a capacitor at the greatest voltage that lies across it.

Q = C V; along a bias curve, which is incremental, Q = ∫ C dv. Source: definition of capacitance, e.g. OpenStax
University Physics 2, section 8.1.
"""

from rcrules.measures._bias import charge
from rcrules.measures._measure import Measure
from rcrules.measures._stress import most, with_capacitance
from rcrules.problems import Array, Structure


def compute(structure: Structure, cases: Array) -> Array:
    """Charge [C] (case,); cases: (case, column), SI. Needs structure.element."""
    return charge(structure, structure.element or 0, most(structure, cases), cases)


MEASURE = Measure(
    name="stored_charge",
    subject="capacitor",
    unit="C",
    summary="Charge in the capacitor at the greatest voltage across it.",
    compute=compute,
    theory=with_capacitance,
    poses="states",
    incremental=True,
)
