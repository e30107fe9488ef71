"""Applied voltage of a capacitor or resistor: the most, or the least, that ever lies across it.

Over every subset of supplies that may be on, both levels of every driver, both positions of a contact, and the
transient where a bridging capacitor lets it go further. A polarised capacitor counts from + to -, signed; any other
its magnitude. Source: nodal analysis; the DC voltage does not depend on capacitance.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option
from rcrules.measures._stress import across, of_states
from rcrules.problems import Array, Structure


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage across the part [V] (case,); cases: (case, column), SI."""
    low, high = across(structure, cases)
    if ("signed", 1.0) not in structure.options:
        least = np.where((low <= 0.0) & (high >= 0.0), 0.0, np.minimum(np.abs(low), np.abs(high)))
        low, high = least, np.maximum(high, -low)
    return high if structure.option("extreme") == "most" else low


MEASURE = Measure(
    name="applied_voltage",
    subject="capacitor",
    also=("resistor",),
    unit="V",
    summary="Most, or least, voltage that ever lies across the part.",
    compute=compute,
    theory=of_states,
    options={"extreme": Option(kind="choice", default="most", choices=("most", "least"), summary="which end")},
    poses="states",
)
