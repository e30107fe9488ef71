"""Discharge time of a capacitor after power-off: from its greatest steady voltage down to a level.

All supplies are left open: the supply net becomes free and joins what hangs on it through resistors and capacitors.
What integrated circuits draw never counts as bleed, nor does leakage. One resistor and one capacitor: RC ln(V/to).
Infinite where no resistive path discharges it. Source: first-order discharging law; IEC 60335-1, IEC 62368-1 use such
limits.
"""

import numpy as np

from rcrules.measures._measure import Measure, Theory
from rcrules.measures._options import level
from rcrules.measures._passing import passed
from rcrules.measures._theory import crossing, unproved
from rcrules.problems import Array, Structure, solved

ENDLESS = ("endless", 1.0)


def compute(structure: Structure, cases: Array) -> Array:
    """Time until the voltage has fallen to the level [s] (case,); cases: (case, column), SI."""
    case, to = solved(structure, cases), structure.level("to")
    if ENDLESS in structure.options:
        return np.where(np.abs(case.start) <= case.form(to.offset), 0.0, np.inf)
    return passed(case, to)


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """Signs of a crossing; what no resistor discharges depends on how high it was charged alone."""
    if ENDLESS not in structure.options:
        return crossing(structure, low, high, structure.level("to"))
    return Theory(signs=unproved(structure, low, high).signs, vertices=True)


MEASURE = Measure(
    name="discharge_time",
    subject="capacitor",
    unit="s",
    summary="Time until the capacitor has discharged to a level after all supplies are opened.",
    compute=compute,
    theory=theory,
    options={"to": level(None, "the voltage that is safe")},
    poses="discharge",
)
