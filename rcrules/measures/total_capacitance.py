"""Total capacitance of a supply: the sum of all capacitors right between it and ground.

Σ C, bias loss at the supply's voltage included; capacitors behind resistors are left out. Source: parallel capacitors,
OpenStax University Physics 2, section 8.2; regulators state which output capacitance keeps them stable.
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._theory_supply import total
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Capacitance [F] (case,); cases: (case, column), SI."""
    return sum((evaluate(form, cases) for form in structure.farads), np.zeros(len(cases)))


MEASURE = Measure(
    name="total_capacitance",
    subject="supply",
    unit="F",
    summary="Sum of the capacitors right between the supply and ground.",
    compute=compute,
    theory=total,
    poses="supply",
)
