"""The observed voltage over time, at nominal and in the two worst cases, for a drawing."""

import math
from collections.abc import Mapping, Sequence
from typing import Final

import numpy as np

from rcrules.derivation._curve import along
from rcrules.engine import FloatingNode
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Array, Bounds, LevelForm, Problem, Solved, Unsettled, constant, evaluate, solved

_OVER_TIME: Final = ("event", "sample", "discharge", "dip")
"""What is posed as something that happens over time."""
_INSTANTS: Final = ("delay", "dip_rearm", "discharge_time", "settling_time", "time_to_63")
"""Measures that are the instant of something that a drawing shows, counted from its zero."""
_REST: Final = 0.005
"""Part of all it moves within which the voltage has come to rest, for a drawing."""
_ROOM: Final = 1.2
"""How far beyond the last instant that matters is shown."""
_63: Final = LevelForm(kind="step", fraction=constant(1.0 - math.exp(-1.0)))


def response(problem: Problem, measure: Measure, bounds: Bounds, limit: Json | None) -> Json | None:
    """Curves, thresholds, limit and crossing; None where nothing happens over time, or nothing moves.

    ``{unit, time, nominal, low_case, high_case, thresholds: [{name, low, nominal, high}], limit, crossing}``. Times in
    seconds, all from where the measure counts: the event, or in each case the instant at which its supply is valid.
    """
    if measure.poses not in _OVER_TIME or not problem.structure.shape.free:
        return None
    cases = np.array([problem.box()[1], bounds.low_at, bounds.high_at], dtype=float)
    if np.isnan(cases).any():
        return None
    try:
        return _drawn(problem, measure, bounds, cases, limit)
    except (FloatingNode, Unsettled):
        return None  # its finding is undecided, with the reason


def _drawn(problem: Problem, measure: Measure, bounds: Bounds, cases: Array, limit: Json | None) -> Json | None:
    found = solved(problem.structure, cases)
    zero = _zero(found, measure)
    timed = measure.name in _INSTANTS
    crossing = {"low": bounds.low, "nominal": bounds.nominal, "high": bounds.high} if timed else {}
    span = _span(found, zero, [float(value) for value in crossing.values()])
    if not 0.0 < span < math.inf:
        return None
    time, curves = along(found, zero, span, _marked(found, zero, crossing))
    return {
        "unit": "V",
        "time": [float(value) for value in time],
        "nominal": curves[0],
        "low_case": curves[1],
        "high_case": curves[2],
        "thresholds": [_row(name, values) for name, values in _thresholds(found, measure)],
        "limit": {key: limit[key] for key in ("at_least", "at_most") if key in limit} if limit and timed else None,
        "crossing": crossing or None,
    }


def _zero(found: Solved, measure: Measure) -> Array:
    """Where each case counts from, since the event [s] (case,)."""
    if measure.poses == "dip" and found.structure.reference is None:
        return np.full(len(found.cases), float(found.structure.option("length")))
    return np.where(np.isfinite(found.reference), found.reference, 0.0)


def _span(found: Solved, zero: Array, instants: Sequence[float]) -> float:
    """[s] To where all cases rest and everything of interest has happened; 0 where nothing moves."""
    low, high = found.watch(found.weights(), found.final).extremes()
    room = _REST * np.maximum(high, -low)
    rest = found.watch(found.weights(), found.final).last_exit(-room, room) - zero
    known = [value for value in instants if math.isfinite(value)]
    return _ROOM * max(0.0, *(float(value) for value in rest[np.isfinite(rest)]), *known)


def _marked(found: Solved, zero: Array, crossing: Mapping[str, float]) -> list[float]:
    """Instants that a curve must not cut short: where sources turn, and where what is measured happens."""
    turns = (found.sources[0] - zero[:, None]).ravel()
    every = [*turns, *(-zero), *crossing.values()]
    return sorted({float(value) for value in every if math.isfinite(value)})


def _row(name: str, values: Array) -> Json:
    return {"name": name, "low": float(values.min()), "nominal": float(values[0]), "high": float(values.max())}


def _thresholds(found: Solved, measure: Measure) -> list[tuple[str, Array]]:
    """Every level of the measure, at nominal and in the two cases; the edges of its band."""
    rows = [(name, _level(found, level)) for name, level in found.structure.levels]
    if measure.name == "time_to_63":
        rows.append(("63.2 % of step", _level(found, _63)))
    if measure.name == "settling_time":
        size = np.maximum(np.abs(found.final - found.start), np.abs(found.final - found.signal.initial()))
        band = float(found.structure.option("band")) * size
        rows += [("band, upper edge", found.final + band), ("band, lower edge", found.final - band)]
    return rows


def _level(found: Solved, level: LevelForm) -> Array:
    """A level [V] (case,); one that follows held terminals, where those end."""
    if level.kind != "voltage":
        part = found.form(level.fraction)
        return part * found.final if level.kind == "final" else found.start + part * (found.final - found.start)
    values = found.form(level.offset)
    for terminal, fraction in level.follows:
        wave = found.structure.waveforms[terminal - found.structure.shape.free]
        values = values + found.form(fraction) * evaluate(wave.points[-1][1], found.cases)
    return values
