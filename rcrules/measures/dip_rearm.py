"""Dip re-arm: how long a reset lasts after its supply has dipped to 0 V for a while; 0 where the dip starts none.

From steady state all supplies fall at once to 0 V, stay there for ``length`` and return along their ramps. Where the
node does not get beyond ``armed`` in that time, no reset follows and the value is 0. Else it is the time from the
return (or from the supply valid) until the node passes ``to`` for good. For R to the supply and C to ground the node is
at V e^(-length/RC) at the return, and a level v is passed RC ln((V - V e^(-length/RC))/(V - v)) later: less than from
empty. Infinite where it never gets out of reset. Source: first-order charging and discharging law.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option
from rcrules.measures._options import level
from rcrules.measures._theory import unproved
from rcrules.problems import Array, LevelForm, Solved, Structure, solved

LATER = 1.0 + 1e-12
"""What an instant must exceed another by to be later."""


def compute(structure: Structure, cases: Array) -> Array:
    """Time [s] (case,); cases: (case, column), SI."""
    case = solved(structure, cases)
    length = float(structure.option("length"))
    armed = _asserted_until(case, structure.level("armed")) > length * LATER
    start = np.full(len(cases), length) if structure.reference is None else case.reference
    counted = _asserted_until(case, structure.level("to")) - np.where(np.isfinite(start), start, 0.0)
    return np.where(armed, np.where(np.isfinite(start), counted, np.nan), 0.0)


def _asserted_until(case: Solved, level: LevelForm) -> Array:
    """Last time at which the node is on the side of a level on which it resets [s] (case,); 0 = never there."""
    signal, _ = case.above(level)
    lowest, highest = signal.extremes()
    if case.structure.rising:
        return signal.last_exit(0.0, np.maximum(highest, 0.0) + 1.0)
    return signal.last_exit(np.minimum(lowest, 0.0) - 1.0, 0.0)


MEASURE = Measure(
    name="dip_rearm",
    subject="network",
    also=("node",),
    unit="s",
    summary="How long a reset lasts after its supply has dipped to 0 V for a given time; 0 = the dip starts none.",
    compute=compute,
    theory=unproved,
    options={
        "length": Option(kind="quantity", default=None, unit="s", summary="how long the supply is at 0 V"),
        "armed": level("must have switched", "the level that the node must fall to for a reset"),
        "to": level("may switch", "the level at which the reset ends"),
        "from": Option(
            kind="choice", default="event", choices=("event", "supply valid"), summary="where time counts from"
        ),
    },
    poses="dip",
)
