"""Discharge time of a capacitor or supply after power-off: from its greatest steady voltage down to a level.

All supplies are left open: the supply net becomes free and joins what hangs on it through resistors and capacitors.
What integrated circuits draw never counts as bleed, nor does leakage. One resistor and one capacitor: RC ln(V/to).
Infinite where no resistive path discharges it. With ``fault = "any one resistor open"`` the longest over all resistors,
each open by itself. Source: first-order discharging law; IEC 60335-1, IEC 62368-1 use such limits.
"""

from dataclasses import replace

import numpy as np

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._options import level
from rcrules.measures._passing import passed
from rcrules.measures._theory import Slopes, crossing, unproved
from rcrules.measures._topology import discharges
from rcrules.problems import Array, Structure, solved

ENDLESS = ("endless", 1.0)
OPEN = ("fault", "any one resistor open")


def compute(structure: Structure, cases: Array) -> Array:
    """Time until the voltage has fallen to the level [s] (case,); cases: (case, column), SI."""
    found = _time(structure, cases)
    if OPEN in structure.options:
        for index in _bleeders(structure):
            found = np.maximum(found, _time(_opened(structure, index), cases))
    return found


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """Signs of a crossing; what no resistor discharges depends on how high it was charged alone.

    The longest of several times rises with whatever all of them rise with, or do not depend on.
    """
    found = [_theory(structure, low, high)]
    if OPEN in structure.options:
        found += [_theory(_opened(structure, index), low, high) for index in _bleeders(structure)]
    if len(found) == 1:
        return found[0]
    slopes = Slopes([0] * len(low))
    for index in range(len(low)):
        for part in found:
            if part.signs[index] != 0:
                slopes.add([index], part.signs[index])
    return slopes.theory()


def _time(structure: Structure, cases: Array) -> Array:
    to, case = structure.level("to"), solved(structure, cases)
    if ENDLESS in structure.options:
        return np.where(np.abs(case.start) <= case.form(to.offset), 0.0, np.inf)
    if not discharges(structure):
        highest = np.abs([case.form(form) for _, form in structure.pinned]).max(axis=0, initial=0.0)
        return np.where(highest <= case.form(to.offset), 0.0, np.inf)
    return passed(case, to)


def _opened(structure: Structure, index: int) -> Structure:
    """The structure without one of its resistors."""
    pairs = structure.shape.resistors
    shape = replace(structure.shape, resistors=(*pairs[:index], *pairs[index + 1 :]))
    ohms = (*structure.ohms[:index], *structure.ohms[index + 1 :])
    leaks = tuple(leak - (leak > index) for leak in structure.leaks)
    return replace(structure, shape=shape, ohms=ohms, leaks=leaks)


def _bleeders(structure: Structure) -> list[int]:
    """The resistors of which one may be open; a dielectric is none."""
    return [index for index in range(len(structure.ohms)) if index not in structure.leaks]


def _theory(structure: Structure, low: Array, high: Array) -> Theory:
    if ENDLESS in structure.options or not discharges(structure):
        return Theory(signs=unproved(structure, low, high).signs, vertices=True)
    return crossing(structure, low, high, structure.level("to"))


MEASURE = Measure(
    name="discharge_time",
    subject="capacitor",
    also=("supply",),
    unit="s",
    summary="Time until the capacitor, or the supply, has discharged to a level after all supplies are opened.",
    compute=compute,
    theory=theory,
    options={
        "to": level(None, "the voltage that is safe"),
        "fault": Option(
            kind="choice", default="none", choices=("none", OPEN[1]), summary="what is broken at the same time"
        ),
    },
    poses="discharge",
)
