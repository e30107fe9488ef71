"""Peak current of a capacitor or resistor: the greatest magnitude from the event on.

Of a resistor |v|/R. Of a capacitor, by Kirchhoff's law, the sum of the currents that reach it through resistors: V/R
just after a step from rest. Infinite where a source jumps right across it. Not defined where further capacitors share
the current at both of its ends. Source: OpenStax University Physics 2, section 10.5, initial current V/R.
"""

import numpy as np

from rcrules.measures._branches import into
from rcrules.measures._measure import Measure
from rcrules.measures._options import event
from rcrules.measures._theory import unproved
from rcrules.problems import Array, Solved, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Greatest current [A] (case,); cases: (case, column), SI. Needs structure.element."""
    case = solved(structure, cases)
    element = structure.element or 0
    if structure.option("kind") == "resistor":
        low, high = case.signal.extremes()
        return np.maximum(high, -low) / case.ohms[:, element]
    pair = structure.shape.capacitors[element]
    if min(pair) >= structure.shape.free:
        return _across_sources(case, pair, element)
    alone = [terminal for terminal in pair if _alone(structure, terminal, element)]
    if not alone:
        return np.full(len(cases), np.nan)
    low, high = into(case, alone[0]).extremes()
    return np.maximum(high, -low)


def _alone(structure: Structure, terminal: int, element: int) -> bool:
    """Whether the capacitor is the only one at a free terminal."""
    others = [pair for index, pair in enumerate(structure.shape.capacitors) if index != element]
    return terminal < structure.shape.free and not any(terminal in pair for pair in others)


def _across_sources(case: Solved, pair: tuple[int, int], element: int) -> Array:
    """C dv/dt between two held terminals; infinite at a jump."""
    starts, levels, slopes = case.sources
    a, b = (terminal - case.structure.shape.free for terminal in pair)
    volts, slope = levels[:, :, a] - levels[:, :, b], slopes[:, :, a] - slopes[:, :, b]
    arrived = np.concatenate(
        [
            (case.volts_before[:, pair[0]] - case.volts_before[:, pair[1]])[:, None],
            (volts + slope * _spans(starts))[:, :-1],
        ],
        axis=1,
    )
    jumps = np.abs(volts - arrived) > 1e-9 * np.abs(volts).max(axis=1, keepdims=True)
    return np.where(jumps.any(axis=1), np.inf, case.farads[:, element] * np.abs(slope).max(axis=1))


def _spans(starts: Array) -> Array:
    return np.concatenate([np.diff(starts, axis=1), np.zeros((len(starts), 1))], axis=1)


MEASURE = Measure(
    name="peak_current",
    subject="capacitor",
    also=("resistor",),
    unit="A",
    summary="Greatest current of the part from the event on.",
    compute=compute,
    theory=unproved,
    options={"event": event("power-up")},
)
