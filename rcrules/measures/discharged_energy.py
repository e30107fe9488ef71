"""Discharged energy: what charged capacitors leave in a pin or contact that shorts them.

∫ (v - v(∞))² / R dt over its own resistance R: C V²/2 for a capacitor right at it whatever R is, and the part R/(R + r)
of that behind a resistor r. The current that flows for good is left out. Source: OpenStax University Physics 2,
section 8.3; Joule's law.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Energy [J] (case,); cases: (case, column), SI. Needs structure.element."""
    case = solved(structure, cases)
    return case.watch(case.weights(), case.final).energy() / case.ohms[:, structure.element or 0]


MEASURE = Measure(
    name="discharged_energy",
    subject="pin",
    unit="J",
    summary="Energy that charged capacitors leave in a pin or contact that shorts them.",
    compute=compute,
    theory=unproved,
    poses="short",
)
