"""Pin voltage: the most, or the least, that a pin meets over every subset of supplies that may be on.

Both levels of every driver, both positions of contacts, and the transient where a bridging capacitor lets it go
further. With ``above = "limit"`` it counts from the pin's own ``max-voltage``, which may follow a supply that is off
while another still drives the pin: above 0 V the pin is over its limit. A supply that is off counts as 0 V.
Source: nodal analysis; absolute maximum ratings of data sheets state such limits.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._stress import of_states
from rcrules.measures._theory import unproved
from rcrules.problems import Array, LevelForm, Structure, evaluate, solved, steady_states

ZERO = LevelForm(kind="voltage")


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage [V] (case,); cases: (case, column), SI."""
    level = dict(structure.levels).get("limit", ZERO)
    states = steady_states(structure, cases)
    volts = states[:, :, structure.at] - evaluate(level.offset, cases)[:, None]
    for terminal, fraction in level.follows:
        volts = volts - states[:, :, terminal] * evaluate(fraction, cases)[:, None]
    low, high = volts.min(axis=1), volts.max(axis=1)
    if ("transient", 1.0) in structure.options:
        least, most = solved(structure, cases).above(level)[0].extremes()
        low, high = np.minimum(low, least), np.maximum(high, most)
    found: Array = high if structure.option("extreme") == "most" else low
    return found


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
