"""Residual: the part of the step that is still missing at a time after the event.

|v(t) - v(∞)| / step, with step the larger of |v(∞) - v(before)| and |v(∞) - v(0+)|; e^(-t/RC) for one resistor and one
capacitor. Source: first-order charging law.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option
from rcrules.measures._options import event
from rcrules.measures._passing import step
from rcrules.measures._theory import fraction_left
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Part of the step left [1] (case,) at option ``time`` [s]; nan = nothing moves; cases: (case, column), SI."""
    case = solved(structure, cases)
    size = step(case)
    left = np.abs(case.signal.at(np.full(len(cases), float(structure.option("time")))) - case.final)
    return left / size


MEASURE = Measure(
    name="residual",
    subject="node",
    unit="1",
    summary="Part of the node's step that is still missing at a time after the event.",
    compute=compute,
    theory=fraction_left,
    options={
        "event": event("step-up"),
        "time": Option(kind="quantity", default=None, unit="s", summary="time after the event"),
    },
    scale_free=True,
)
