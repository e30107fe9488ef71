"""Peak pin current: the greatest current through a pin or contact that shorts what its net has charged.

V/R at the first instant where a capacitor lies right at it, R that of the contact, or the volts over the amperes of the
pin's stated drive (a real pin limits itself before); infinite for a contact without resistance. Elsewhere the sum of
the currents that reach it through resistors. Source: OpenStax University Physics 2, section 10.5; Kirchhoff's law.
"""

import numpy as np

from rcrules.measures._branches import capacitors_at, into
from rcrules.measures._measure import Measure
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved

NOTHING = 1e-6
"""Resistance up to which a contact has none [Ω]."""


def compute(structure: Structure, cases: Array) -> Array:
    """Greatest current [A] (case,); cases: (case, column), SI. Needs structure.element."""
    case, element = solved(structure, cases), structure.element or 0
    pair = structure.shape.resistors[element]
    bare = [end for end in pair if end < structure.shape.free and not capacitors_at(structure, end)]
    if bare:
        low, high = into(case, bare[0], without=element).extremes()
        return np.maximum(high, -low)
    low, high = case.signal.extremes()
    volts, ohms = np.maximum(high, -low), case.ohms[:, element]
    return np.where((ohms <= NOTHING) & (volts > 0.0), np.inf, volts / ohms)


MEASURE = Measure(
    name="peak_pin_current",
    subject="pin",
    unit="A",
    summary="Greatest current through a pin or contact that shorts what its net has charged.",
    compute=compute,
    theory=unproved,
    poses="short",
)
