"""Measures of an event made of several instants: widths, edges, resets after a dip; discharges with a fault."""

import math
from dataclasses import replace
from typing import TypeVar

import numpy as np

from rcrules.derivation._known import value_in
from rcrules.derivation._respond import respond
from rcrules.derivation._sheet import Number
from rcrules.derivation._times import arrival, discharge, first, instant, last, reached, valid_at, voltage_later
from rcrules.derivation._working import Working
from rcrules.problems import Problem, solved

_T = TypeVar("_T")

_PEAK = 1e-9
"""What a peak is above the ends, and above where it is first near, in its own parts."""
OPEN = ("fault", "any one resistor open")


def slowness(work: Working) -> Number | None:
    """Time per volt between two levels."""
    structure = work.problem.structure
    whens = [instant(work, structure.level(name), f"t {name}") for name in ("near", "far")]
    times = [when for when in whens if when is not None and math.isfinite(when.value)]
    if len(times) < 2:
        return None
    at = [float(work.solved.signal.at(np.array([time.value]))[0]) for time in times]
    volts = [work.sheet.number(f"v({time.symbol})", value, "V") for time, value in zip(times, at, strict=True)]
    if volts[0].value == volts[1].value:
        return None
    formula = "abs({} - {}) / abs({} - {})"
    numbers = times[1], times[0], volts[1], volts[0]
    return work.sheet.work("slowness", "s/V", formula, lambda t, u, v, w: abs(t - u) / abs(v - w), *numbers)


def missed(work: Working) -> Number | None:
    """What the sampling capacitor is still off at an instant."""
    volts = voltage_later(work)
    return volts and work.sheet.work("error", "1", "abs({})", abs, volts)


def most(work: Working) -> Number | None:
    """The first or the last voltage, whichever is higher, or one between them."""
    start, end = float(work.solved.signal.initial()[0]), float(work.solved.final[0])
    high = float(work.solved.signal.extremes()[1][0])
    if high - max(start, end) > _PEAK * abs(high):
        return _between(work, high)
    return first(work) if start >= end else last(work)


def share(work: Working) -> Number | None:
    """The part at the first instant, by capacitance, or in the end, by conductance, whichever is more."""
    if ("loose", 1.0) in work.problem.structure.options:
        return work.sheet.given("share", 1.0, "1", "no resistor holds its ends: what leaks alone decides, up to all")
    ends = [abs(float(work.solved.signal.initial()[0])), abs(float(work.solved.final[0]))]
    low, high = (float(side[0]) for side in work.solved.signal.extremes())
    if max(high, -low) - max(ends) > _PEAK:
        volts: Number | None = _between(work, high if high >= -low else low)
    else:
        volts = first(work) if ends[0] >= ends[1] else respond(work, math.inf)[-1].rest
    source = work.sheet.number("source", 1.0, "V")
    return volts and work.sheet.work("share", "1", "abs({}) / {}", lambda v, s: abs(v) / s, volts, source)


def _between(work: Working, value: float) -> Number:
    """v at its peak, on the way."""
    side = 1.0 if value > float(work.solved.final[0]) else -1.0
    near = np.array([value - side * _PEAK * abs(value)])
    time = float(work.solved.watch(work.solved.weights(), near).first_crossing(side)[0])
    piece, x, _ = reached(work, time)
    return piece.at(work.sheet, "v", x, note=f"at its peak, {work.sheet.number('', time, 's').text} after the event")


def width(work: Working) -> Number | None:
    """From the first instant beyond a level to the last one."""
    level, side = work.problem.structure.level("level"), str(work.problem.structure.option("side"))
    signal, _ = work.solved.above(level, turned=side == "below")
    whole = float(signal.width()[0])
    if whole == 0.0 or math.isinf(whole):
        note = f"v never goes {side} the level" if whole == 0.0 else f"v stays {side} the level"
        return work.sheet.given("width", whole, "s", note)
    lowest, _ = signal.extremes()
    begin = float(signal.first_crossing(1.0)[0])
    end = float(signal.last_exit(np.minimum(lowest, 0.0) - 1.0, 0.0)[0])
    times = [arrival(work, level, time, symbol) for time, symbol in ((begin, "t1"), (end, "t2"))]
    return work.sheet.work("width", "s", "{} - {}", lambda b, a: b - a, times[1], times[0])


def rearmed(work: Working) -> Number | None:
    """From the return of the supply, or its valid level, to the end of the reset; 0 where the dip starts none."""
    structure, sheet = work.problem.structure, work.sheet
    value = value_in(work.measure, structure, work.cases)
    length = float(structure.option("length"))
    if value == 0.0:
        volts = float(work.solved.signal.at(np.array([length]))[0])
        told = sheet.number("", volts, "V").text
        return sheet.given("reset", 0.0, "s", f"at the return v is at {told}: not far enough for a reset")
    if not math.isfinite(value):
        return None
    begin = sheet.given("t0", length, "s", "when the supply returns")
    if structure.reference is not None:
        begin = valid_at(work)
    end = arrival(work, structure.level("to"), value + begin.value, "t")
    return sheet.work("reset", "s", "{} - {}", lambda t, b: t - b, end, begin)


def discharged(work: Working) -> Number | None:
    """The time down to a level, with the resistor open that makes it longest where one may be."""
    structure, compute = work.problem.structure, work.measure.compute
    if OPEN not in structure.options:
        return discharge(work)
    sound = replace(structure, options=tuple(item for item in structure.options if item != OPEN))
    healthy = replace(work.problem, structure=sound)
    cases = [(healthy, work.names.resistors, "")] + [
        (_opened(healthy, index), _without(work.names.resistors, index), name)
        for index, name in enumerate(work.names.resistors)
        if index not in structure.leaks
    ]
    times = [float(compute(problem.structure, work.cases)[0]) for problem, _, _ in cases]
    problem, resistors, name = cases[int(np.argmax(times))]
    if name:
        work.sheet.given(name, math.inf, "Ω", "open: of all single faults the one that makes it longest")
    if math.isinf(max(times)):
        return work.sheet.given("t", math.inf, "s", "nothing discharges it then")
    names = replace(work.names, resistors=resistors)
    return discharge(replace(work, problem=problem, names=names, solved=solved(problem.structure, work.cases)))


def _opened(problem: Problem, index: int) -> Problem:
    """The problem without one of its resistors."""
    structure = problem.structure
    shape = replace(structure.shape, resistors=_without(structure.shape.resistors, index))
    leaks = tuple(leak - (leak > index) for leak in structure.leaks)
    return replace(
        problem, structure=replace(structure, shape=shape, ohms=_without(structure.ohms, index), leaks=leaks)
    )


def _without(items: tuple[_T, ...], index: int) -> tuple[_T, ...]:
    return (*items[:index], *items[index + 1 :])
