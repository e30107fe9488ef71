"""The observed voltage over time, at nominal and in the two worst cases, for a drawing."""

import math
from typing import Final

import numpy as np

from rcrules.engine import FloatingNode
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Array, Bounds, LevelForm, Problem, Unsettled, evaluate, solved

POINTS: Final = 121
_SPAN: Final = 6.0
"""Slowest time constants that are shown after the last change of a source."""
_BEFORE: Final = 0.04
"""Part of the span that is shown before the event."""


def response(problem: Problem, measure: Measure, bounds: Bounds, limit: Json | None) -> Json | None:
    """Curves, thresholds, limit and crossing; None where the measure is not one of an event, or nothing moves.

    ``{unit, time, nominal, low_case, high_case, thresholds: [{name, low, nominal, high}], limit, crossing}``; times in
    seconds since the event.
    """
    if measure.poses != "event" or not problem.structure.shape.free:
        return None
    _, nominal, _ = problem.box()
    cases = np.array([nominal, bounds.low_at, bounds.high_at], dtype=float)
    if not np.isfinite(cases).all():
        return None
    try:
        return _drawn(problem, measure, bounds, cases, limit)
    except (FloatingNode, Unsettled):
        return None  # its finding is undecided, with the reason


def _drawn(problem: Problem, measure: Measure, bounds: Bounds, cases: Array, limit: Json | None) -> Json | None:
    found = solved(problem.structure, cases)
    span = _span(problem, measure, cases, bounds)
    if not 0.0 < span < math.inf:
        return None
    time = np.linspace(-_BEFORE * span, span, POINTS)
    curves = _curves(problem, cases, time)
    timed = measure.unit == "s"
    crossing = {"low": bounds.low, "nominal": bounds.nominal, "high": bounds.high} if timed else None
    return {
        "unit": "V",
        "time": [float(value) for value in time],
        "nominal": curves[0],
        "low_case": curves[1],
        "high_case": curves[2],
        "thresholds": _thresholds(problem, cases, found.final, found.start),
        "limit": {key: limit[key] for key in ("at_least", "at_most") if key in limit} if limit and timed else None,
        "crossing": crossing,
    }


def _span(problem: Problem, measure: Measure, cases: Array, bounds: Bounds) -> float:
    """[s] From the event to where everything of interest has happened."""
    found = solved(problem.structure, cases)
    slowest, starts = float(found.modes.taus.max(initial=0.0)), found.sources[0]
    last = float(starts[np.isfinite(starts)].max(initial=0.0))
    ends = [float(value) for value in (bounds.low, bounds.high) if measure.unit == "s" and math.isfinite(value)]
    return max([last + _SPAN * slowest, *(1.2 * abs(end) for end in ends)])


def _curves(problem: Problem, cases: Array, time: Array) -> list[list[float]]:
    """Observed voltages [V] of every case; before the event the one at which it rests."""
    every = solved(problem.structure, np.repeat(cases, len(time), axis=0))
    times = np.tile(time, len(cases))
    values = np.where(times < 0.0, every.start, every.signal.at(np.maximum(times, 0.0)))
    return [[float(value) for value in row] for row in values.reshape(len(cases), len(time))]


def _thresholds(problem: Problem, cases: Array, final: Array, start: Array) -> list[Json]:
    """Every level of the measure that stands still, at nominal and in the two cases."""
    rows = []
    for name, level in problem.structure.levels:
        if level.kind == "voltage" and not level.follows:
            values = evaluate(level.offset, cases)
        elif level.kind == "voltage":
            values = _following(problem, level, cases)
        else:
            part = evaluate(level.fraction, cases)
            values = part * final if level.kind == "final" else start + part * (final - start)
        low, high = float(values.min()), float(values.max())
        rows.append({"name": name, "low": low, "nominal": float(values[0]), "high": high})
    return rows


def _following(problem: Problem, level: LevelForm, cases: Array) -> Array:
    """A level that follows held terminals, where those end."""
    values = evaluate(level.offset, cases)
    for terminal, fraction in level.follows:
        wave = problem.structure.waveforms[terminal - problem.structure.shape.free]
        values = values + evaluate(fraction, cases) * evaluate(wave.points[-1][1], cases)
    return values
