"""Power ratio of a resistor: its greatest DC power in parts of its rated power.

max V² / R / rated. Derating above 70 °C is left to the limit. Source: the derating practice of ECSS-Q-ST-30-11 counts
in this ratio (from memory).
"""

from rcrules.measures._measure import Measure
from rcrules.measures._stress import most
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Power over rated power [1] (case,); cases: (case, column), SI. Needs structure.element."""
    power = most(structure, cases) ** 2 / evaluate(structure.ohms[structure.element or 0], cases)
    return power / evaluate(structure.rating or (), cases)


MEASURE = Measure(
    name="power_ratio",
    subject="resistor",
    unit="1",
    summary="Greatest DC power in the resistor over its rated power.",
    compute=compute,
    theory=unproved,
    poses="states",
    rating="power",
)
