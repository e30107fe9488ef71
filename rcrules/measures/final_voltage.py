"""Final voltage: the node a long time after the event.

v(∞) = G⁻¹ (sources - currents drawn): a DC divider, with leakage. Linear-fractional in each resistance, so that its
extremes lie at vertices (T1). Source: nodal analysis.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._theory import steady
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Final voltage [V] (case,); cases: (case, column), SI."""
    return solved(structure, cases).final


MEASURE = Measure(
    name="final_voltage",
    subject="node",
    unit="V",
    summary="Voltage of the node a long time after the event.",
    compute=compute,
    theory=steady,
    options={"event": event("power-up")},
    amplified=True,
)
