"""Delay of a node: the time at which its voltage passes a level, from the event or from a valid supply.

t(to) - t(from), with v(t) the exact response of the whole network: a sum of real exponentials, jumps and ramps. For
one resistor and one capacitor stepped from rest, t = RC ln(V/(V - v)). Infinite where the level is never passed; not
defined where the supply never becomes valid. It may be negative: the level is passed while the supply still rises.
Source: first-order charging law, e.g. the Navy training series NEETS, module 2; NAVEDTRA 14174 (from memory).
"""

import numpy as np

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._options import event, level
from rcrules.measures._passing import passed
from rcrules.measures._theory import Slopes, crossing
from rcrules.measures._topology import columns
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Delay [s] (case,); cases: (case, column), SI."""
    case = solved(structure, cases)
    when = passed(case, structure.level("to"))
    if structure.reference is None:
        return when
    reference = case.reference
    return np.where(np.isfinite(reference), when - np.where(np.isfinite(reference), reference, 0.0), np.nan)


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """Signs of a crossing; what sets the reference is known only where the crossing does not depend on it."""
    found = crossing(structure, low, high, structure.level("to"))
    if structure.reference is None:
        return found
    terminal, valid = structure.reference
    wave = structure.waveforms[terminal - structure.shape.free]
    slopes = Slopes(list(found.signs))
    slopes.add(columns([valid.offset]), -1)
    slopes.add(columns(time for time, _ in wave.points), None)
    slopes.add(columns(volts for _, volts in wave.points), 1)
    return slopes.theory(vertices=False)


MEASURE = Measure(
    name="delay",
    subject="node",
    unit="s",
    summary="Time from an event, or from a valid supply, until the node passes a level.",
    compute=compute,
    theory=theory,
    scale_free=True,
    options={
        "event": event(None),
        "from": Option(
            kind="choice", default="event", choices=("event", "supply valid"), summary="where time counts from"
        ),
        "to": level(None, "the level to pass"),
    },
)
