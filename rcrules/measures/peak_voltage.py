"""Peak voltage: the highest the node gets from the event on.

max over t >= 0 of v(t), the value just after the event and the final value included.
Source: extremes of a sum of exponentials, bracketed by sign changes (Laguerre).
"""

from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Highest voltage [V] (case,); cases: (case, column), SI."""
    return solved(structure, cases).signal.extremes()[1]


MEASURE = Measure(
    name="peak_voltage",
    subject="node",
    unit="V",
    summary="Highest voltage of the node from the event on.",
    compute=compute,
    theory=unproved,
    options={"event": event("power-up")},
)
