"""Pulse energy of a resistor: what an event leaves in it besides the power that lasts.

∫ (v - v(∞))² / R dt; C V²/2 for a resistor that charges or discharges a capacitor alone, whatever R is. Source:
OpenStax University Physics 2, sections 8.3 and 10.5; Joule's law.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Energy [J] (case,); cases: (case, column), SI. Needs structure.element."""
    case = solved(structure, cases)
    return case.watch(case.weights(), case.final).energy() / case.ohms[:, structure.element or 0]


MEASURE = Measure(
    name="pulse_energy",
    subject="resistor",
    unit="J",
    summary="Energy that an event leaves in the resistor besides its lasting power.",
    compute=compute,
    theory=unproved,
    options={"event": event("power-up")},
)
