"""Voltage at an instant after the event.

v(t) of the exact response; for one resistor and one capacitor V (1 - e^(-t/RC)).
Source: first-order charging law.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option
from rcrules.measures._options import event
from rcrules.measures._theory import voltage_later
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage [V] (case,) at the option ``time`` [s]; cases: (case, column), SI."""
    return solved(structure, cases).signal.at(np.full(len(cases), float(structure.option("time"))))


MEASURE = Measure(
    name="voltage_at",
    subject="node",
    unit="V",
    summary="Voltage of the node at a time after the event.",
    compute=compute,
    theory=voltage_later,
    options={
        "event": event("power-up"),
        "time": Option(kind="quantity", default=None, unit="s", summary="time after the event"),
    },
)
