"""Rise time: from a lower level to a higher one, by default 10 % to 90 % of the node's own step.

t(high) - t(low), first crossings, in the direction in which the node moves. For one resistor and one capacitor, 10 % to
90 % takes RC ln 9 = 2.197 RC. Source: IEC 60469, transition duration between 10 % and 90 % (from memory).
"""

import numpy as np

from rcrules.measures._measure import Measure, Theory
from rcrules.measures._options import event, level
from rcrules.measures._passing import passed
from rcrules.measures._theory import one_exponential, unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Rise or fall time [s] (case,); cases: (case, column), SI."""
    case = solved(structure, cases)
    low, high = passed(case, structure.level("low")), passed(case, structure.level("high"))
    span = np.where(np.isinf(low) | np.isinf(high), np.inf, high - np.where(np.isinf(low), 0.0, low))
    relative = structure.level("low").kind == "step"
    return span if structure.rising or relative else -span


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """T2 where both levels are parts of the step of one exponential."""
    parts = all(level.kind == "step" for _, level in structure.levels)
    return (one_exponential if parts else unproved)(structure, low, high)


MEASURE = Measure(
    name="rise_time",
    subject="node",
    unit="s",
    summary="Time the node takes from a lower to a higher level.",
    compute=compute,
    theory=theory,
    options={
        "event": event("step-up"),
        "low": level("10 % of step", "where the edge begins"),
        "high": level("90 % of step", "where the edge ends"),
    },
    scale_free=True,
)
