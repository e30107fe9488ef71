"""Effective capacitance: what is left of a capacitor over tolerance, temperature, age and the voltage across it.

C = marked value × (1 + each share); the bias share is taken from 0 V to the greatest voltage that its network can put
across the capacitor, or at its worst where that is not known. Source: bias curves of makers are incremental
capacitances; EIA-198 for letter codes.
"""

from rcrules.measures._measure import Measure, Theory
from rcrules.measures._theory import Slopes
from rcrules.measures._topology import columns, increasing
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Capacitance [F] (case,); cases: (case, column), SI. Needs structure.element."""
    return evaluate(structure.farads[structure.element or 0], cases)


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """It is its own column."""
    del high
    form = structure.farads[structure.element or 0]
    slopes = Slopes([0] * len(low))
    slopes.add(columns([form]), 1 if increasing(form, low) else None)
    return slopes.theory()


MEASURE = Measure(
    name="effective_capacitance",
    subject="capacitor",
    unit="F",
    summary="What is left of the capacitance over tolerance, temperature, age and the voltage across it.",
    compute=compute,
    theory=theory,
    poses="value",
)
