"""Time to 63 %: when a node has made 1 - 1/e = 63.2 % of its own step.

Equal to RC for one resistor and one capacitor; for more, it lies beside the slowest time constant and says how fast
this node is. Source: definition of the time constant of a first-order response, IEC 60050-103-05-26 (from memory).
"""

import math

from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._passing import passed
from rcrules.measures._theory import fraction_left
from rcrules.problems import Array, LevelForm, Structure, constant, solved

LEVEL = LevelForm(kind="step", fraction=constant(1.0 - math.exp(-1.0)))


def compute(structure: Structure, cases: Array) -> Array:
    """Time to 63.2 % of the step [s] (case,); cases: (case, column), SI."""
    return passed(solved(structure, cases), LEVEL)


MEASURE = Measure(
    name="time_to_63",
    subject="node",
    unit="s",
    summary="Time until the node has made 63.2 % of its step.",
    compute=compute,
    theory=fraction_left,
    options={"event": event("step-up")},
    scale_free=True,
)
