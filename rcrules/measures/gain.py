"""Gain: how much of a sine at the source arrives at the node, at one frequency.

|H(j 2π f)| of the exact transfer function of the whole network; 1/sqrt(1 + (2π f RC)²) for one resistor and one
capacitor, and at 0 Hz the ratio of a divider. Source: Kuphaldt, Lessons in Electric Circuits, volume 2, chapter 8.
"""

import math

from rcrules.measures._measure import Measure, Option
from rcrules.measures._theory_edges import gain
from rcrules.problems import Array, Structure, gain_at


def compute(structure: Structure, cases: Array) -> Array:
    """Gain [1] (case,) at the option ``frequency`` [Hz]; cases: (case, column), SI."""
    return gain_at(structure, cases, 2.0 * math.pi * float(structure.option("frequency")))


MEASURE = Measure(
    name="gain",
    subject="node",
    unit="1",
    summary="Part of a sine at the source that arrives at the node.",
    compute=compute,
    theory=gain,
    options={"frequency": Option(kind="quantity", default=None, unit="Hz", summary="frequency of the sine")},
    poses="transfer",
    scale_free=True,
    amplified=True,
)
