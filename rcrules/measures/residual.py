"""Residual: the part of the step that is still missing at a time after the event.

|v(t) - v(∞)| / step, with step the larger of |v(∞) - v(before)| and |v(∞) - v(0+)|; e^(-t/RC) for one resistor and one
capacitor. What a dielectric absorbs comes long after: no less than its share can be promised. Source: first-order
charging law; dielectric absorption by makers' comparisons of dielectrics.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._options import event
from rcrules.measures._passing import step
from rcrules.measures._theory import Slopes, fraction_left
from rcrules.measures._topology import columns
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Part of the step left [1] (case,) at option ``time`` [s]; nan = nothing moves; cases: (case, column), SI."""
    case = solved(structure, cases)
    size = step(case)
    left = np.abs(case.signal.at(np.full(len(cases), float(structure.option("time")))) - case.final)
    found: Array = np.maximum(left / size, case.form(structure.absorbed))
    return found


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """As for what is left of the step; what is absorbed only adds."""
    slopes = Slopes(list(fraction_left(structure, low, high).signs))
    slopes.add(columns([structure.absorbed]), 1)
    return slopes.theory()


MEASURE = Measure(
    name="residual",
    subject="node",
    unit="1",
    summary="Part of the node's step that is still missing at a time after the event.",
    compute=compute,
    theory=theory,
    options={
        "event": event("step-up"),
        "time": Option(kind="quantity", default=None, unit="s", summary="time after the event"),
    },
    settles="by a share",
    scale_free=True,
)
