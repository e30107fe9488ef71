"""Initial voltage: the node just after the event, jumps through capacitors included.

v(0+). Source: continuity of capacitor voltages; the algebraic part of the nodal equations.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage just after the event [V] (case,); cases: (case, column), SI."""
    return solved(structure, cases).initial


MEASURE = Measure(
    name="initial_voltage",
    subject="node",
    unit="V",
    summary="Voltage of the node just after the event.",
    compute=compute,
    theory=unproved,
    options={"event": event("power-up")},
    amplified=True,
)
