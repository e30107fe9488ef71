"""Pin voltage: the most, or the least, that a pin meets over every subset of supplies that may be on.

Both levels of every driver, both positions of contacts, and where a bridging capacitor lets it go further the
transients: from empty to all sources on, back to all off, one source alone in any state, and contacts that move. With
``above = "limit"`` it counts from the pin's own ``max-voltage``, which may follow a supply that is off while another
still drives the pin: above 0 V the pin is over its limit. A supply that is off counts as 0 V.
Source: nodal analysis; absolute maximum ratings of data sheets state such limits.
"""

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._stress import ACROSS, across, of_states
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Structure


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage [V] (case,); cases: (case, column), SI."""
    level = dict(structure.levels).get("limit", ACROSS)
    low, high = across(structure, cases, level)
    return high if structure.option("extreme") == "most" else low


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """T1 where a single DC state decides and the limit stands still."""
    return (unproved if structure.levels else of_states)(structure, low, high)


MEASURE = Measure(
    name="pin_voltage",
    subject="pin",
    unit="V",
    summary="Most, or least, voltage at the pin over all subsets of supplies that may be on.",
    compute=compute,
    theory=theory,
    options={
        "extreme": Option(kind="choice", default="most", choices=("most", "least"), summary="which end"),
        "above": Option(kind="choice", default="0 V", choices=("0 V", "limit"), summary="what it counts from"),
    },
    poses="states",
)
