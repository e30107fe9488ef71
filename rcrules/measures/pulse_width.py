"""Pulse width: how long the node is above (or below) a level after the event.

Sum of all times with v(t) >= level. For a capacitor from a stepped supply and a resistor to ground RC ln(V/level); 0
where the level is not reached at all, as behind a slow supply. Infinite where it ends beyond the level. Source:
first-order discharging law.
"""

from rcrules.measures._measure import Measure, Option
from rcrules.measures._options import event, level
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Time above or below the level [s] (case,); cases: (case, column), SI."""
    turned = structure.option("side") == "below"
    return solved(structure, cases).above(structure.level("level"), turned=turned)[0].width()


MEASURE = Measure(
    name="pulse_width",
    subject="node",
    unit="s",
    summary="How long the node is above, or below, a level after the event.",
    compute=compute,
    theory=unproved,
    options={
        "event": event("power-up"),
        "level": level(None, "the level"),
        "side": Option(kind="choice", default="above", choices=("above", "below"), summary="which side of it counts"),
    },
)
