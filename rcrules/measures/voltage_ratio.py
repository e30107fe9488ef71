"""Voltage ratio of a capacitor or resistor: the greatest voltage across it in parts of its rated voltage.

max |v| / rated. Source: the derating practice of ECSS-Q-ST-30-11 and IPC guides counts in this ratio (from memory).
"""

from rcrules.measures._measure import Measure
from rcrules.measures._stress import most, of_states
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage over rated voltage [1] (case,); cases: (case, column), SI."""
    return most(structure, cases) / evaluate(structure.rating or (), cases)


MEASURE = Measure(
    name="voltage_ratio",
    subject="capacitor",
    also=("resistor",),
    unit="1",
    summary="Greatest voltage across the part over its rated voltage.",
    compute=compute,
    theory=of_states,
    poses="states",
    rating="voltage",
)
