"""A case worked out: the fewest digits at which the sheet arrives at what the tool prints."""

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from itertools import product
from typing import Final

import numpy as np

from rcrules.derivation import _amounts, _heat, _spans, _states, _times
from rcrules.derivation._known import value_in
from rcrules.derivation._reduce import TooLarge
from rcrules.derivation._respond import respond
from rcrules.derivation._sheet import Number, Step
from rcrules.derivation._working import Working, working
from rcrules.measures import Measure
from rcrules.problems import Names, Problem

DIGITS: Final = (6, 9, 12)
"""Significant digits that are tried."""
EXACT: Final = 2e-5
"""How far the sheet may be from the tool, relative: less than what four printed digits tell."""

_BY_HAND: Final[Mapping[str, Callable[[Working], Number | None]]] = {
    "applied_voltage": _states.across,
    "corner_frequency": _states.corner,
    "delay": _times.delay,
    "dip_rearm": _spans.rearmed,
    "discharge_time": _spans.discharged,
    "discharged_energy": _heat.spent,
    "edge_slowness": _spans.slowness,
    "effective_capacitance": _amounts.own,
    "final_voltage": _times.last,
    "gain": _states.gain,
    "hold_up_time": _amounts.hold_up,
    "initial_voltage": _times.first,
    "input_voltage_high": _states.highest,
    "input_voltage_low": _states.lowest,
    "inrush_current": _amounts.inrush,
    "peak_current": _amounts.first_current,
    "peak_pin_current": _amounts.first_current,
    "peak_voltage": _spans.most,
    "pin_voltage": _states.at_pin,
    "power": _states.power,
    "power_ratio": _states.power_ratio,
    "pulse_energy": _heat.spent,
    "residual": _times.left,
    "pulse_width": _spans.width,
    "rise_time": _times.edge,
    "sample_error": _spans.missed,
    "series_share": _spans.share,
    "settling_time": _times.settled,
    "stored_charge": _states.charge,
    "stored_energy": _states.energy,
    "thermal_noise": _amounts.noise,
    "time_constant": _states.time_constant,
    "time_to_63": _times.to_63,
    "total_capacitance": _amounts.total,
    "voltage_at": _times.voltage_later,
    "voltage_ratio": _states.ratio,
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Worked:
    """The lines of a case, and whether they arrive at the number by themselves."""

    value: float
    """What the tool prints."""
    steps: tuple[Step, ...]
    by_hand: bool
    """False: the last line is the tool's own number; the lines before it say what it was read from."""


def work_out(problem: Problem, names: Names, measure: Measure, case: tuple[float, ...]) -> Worked:
    """Lines that arrive at the value of a measure in a case."""
    value = value_in(measure, problem.structure, np.array(case, dtype=float))
    for modal, digits in product((False, True), DIGITS):
        work = working(problem, names, measure, case, digits, modal=modal)
        found = _tried(work)
        if found is not None and _agrees(found.value, value) and all(_same(*pair) for pair in work.checks):
            return Worked(value=value, steps=_closed(work, found), by_hand=True)
    return _told(problem, names, measure, case, value)


def _tried(work: Working) -> Number | None:
    hand = None if work.problem.structure.amplifiers else _BY_HAND.get(work.measure.name)
    try:
        return hand(work) if hand else None
    except TooLarge:
        return None


def _closed(work: Working, found: Number) -> tuple[Step, ...]:
    """The lines, the last of which is the result."""
    if work.sheet.steps and work.sheet.steps[-1].number == found:
        return tuple(work.sheet.steps)
    work.sheet.work(work.measure.name.replace("_", " "), found.unit, "{}", lambda value: value, found)
    return tuple(work.sheet.steps)


def _told(problem: Problem, names: Names, measure: Measure, case: tuple[float, ...], value: float) -> Worked:
    """The response where there is one, and the number that the tool reads from it."""
    work = working(problem, names, measure, case, DIGITS[0], modal=True)
    if measure.poses == "event" and not problem.structure.amplifiers:
        respond(work, math.inf)
    note = f"by the tool: {measure.summary[0].lower()}{measure.summary[1:].rstrip('.')}"
    work.sheet.given(measure.name.replace("_", " "), value, measure.unit, note)
    return Worked(value=value, steps=tuple(work.sheet.steps), by_hand=False)


def _agrees(found: float, value: float) -> bool:
    if math.isinf(value) or math.isinf(found):
        return found == value
    return abs(found - value) <= EXACT * abs(value) + 1e-15


def _same(one: Number, other: Number) -> bool:
    return math.isclose(one.value, other.value, rel_tol=1e-3, abs_tol=1e-9)
