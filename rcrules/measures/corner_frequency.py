"""Corner frequency: where the gain from the source to the node is 3 dB (1/√2) below that of the pass band.

Of the exact transfer function of the whole network; 1/(2πRC) for one resistor and one capacitor.
Source: Kuphaldt, Lessons in Electric Circuits, volume 2, chapter 8.
"""

import math

from rcrules.measures._measure import Measure
from rcrules.measures._theory import corner
from rcrules.problems import Array, Structure, corner_omega


def compute(structure: Structure, cases: Array) -> Array:
    """Corner frequency [Hz] (case,); cases: (case, column), SI."""
    return corner_omega(structure, cases) / (2.0 * math.pi)


MEASURE = Measure(
    name="corner_frequency",
    subject="node",
    unit="Hz",
    summary="Frequency at which the node is 3 dB below the pass band of its source.",
    compute=compute,
    theory=corner,
    poses="transfer",
    scale_free=True,
    amplified=True,
)
