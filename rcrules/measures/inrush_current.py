"""Inrush current of a supply: what its capacitors draw while it ramps up.

Σ C · V / rise. Loads, and capacitors behind resistors, are left out; infinite where it rises in no time.
Source: i = C dv/dt, definition of capacitance.
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._theory_supply import inrush
from rcrules.measures.total_capacitance import compute as total
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Current [A] (case,); cases: (case, column), SI."""
    rise, volts = (evaluate(form, cases) for form in structure.waveforms[0].points[-1])
    charge = np.abs(volts) * total(structure, cases)
    return np.divide(charge, rise, out=np.full_like(charge, np.inf), where=rise > 0.0)


MEASURE = Measure(
    name="inrush_current",
    subject="supply",
    unit="A",
    summary="Current that the supply's capacitors draw while it rises.",
    compute=compute,
    theory=inrush,
    poses="supply",
)
