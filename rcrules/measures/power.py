"""Power in a resistor, the greatest over all DC states.

P = V² / R. It peaks inside the box where the resistance matches what feeds it, so that its ends alone prove nothing.
Source: Joule's law; maximum power transfer (Jacobi).
"""

from rcrules.measures._measure import Measure
from rcrules.measures._stress import most
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Power [W] (case,); cases: (case, column), SI. Needs structure.element."""
    return most(structure, cases) ** 2 / evaluate(structure.ohms[structure.element or 0], cases)


MEASURE = Measure(
    name="power",
    subject="resistor",
    unit="W",
    summary="Greatest DC power in the resistor.",
    compute=compute,
    theory=unproved,
    poses="states",
)
