"""Edge slowness: how long an edge takes per volt between the two thresholds of the pin it drives.

(t at V_IH - t at V_IL) / (V_IH - V_IL), first crossings, for rising and falling edges alike; the voltages are those at
the crossings, so that ratiometric thresholds count too. For one resistor and one capacitor that charge to V:
RC ln((V - V_IL)/(V - V_IH)) / (V_IH - V_IL). Infinite where the far threshold is never passed.
Source: input transition rate Δt/Δv of the recommended operating conditions of logic families, e.g. JESD7-A (from
memory).
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._options import event, level
from rcrules.measures._passing import passed
from rcrules.measures._theory_edges import slowness
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Time per volt [s/V] (case,); cases: (case, column), SI."""
    case = solved(structure, cases)
    begin, end = passed(case, structure.level("near")), passed(case, structure.level("far"))
    never = np.isinf(begin) | np.isinf(end)
    first, last = (np.where(never, 0.0, when) for when in (begin, end))
    volts = np.abs(case.signal.at(last) - case.signal.at(first))
    span = np.abs(last - first)
    slow = np.divide(span, volts, out=np.where(span > 0.0, np.inf, 0.0), where=volts > 0.0)
    return np.where(never, np.inf, slow)


MEASURE = Measure(
    name="edge_slowness",
    subject="node",
    unit="s/V",
    summary="Time per volt that an edge takes between the thresholds of the pin it drives.",
    compute=compute,
    theory=slowness,
    options={
        "event": event("step-up"),
        "near": level("may switch", "the threshold that is passed first"),
        "far": level("must have switched", "the threshold that is passed last"),
    },
)
