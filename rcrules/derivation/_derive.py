"""Everything about how one number comes about, as the document holds it."""

from collections.abc import Iterator
from functools import partial
from typing import Final

import numpy as np

from rcrules.derivation._cases import MadeOf, worked_cases
from rcrules.derivation._picture import picture
from rcrules.derivation._sensitivity import sensitivity
from rcrules.derivation._work import work_out
from rcrules.engine import FloatingNode
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Array, Bounds, Form, Names, Problem, Solved, Unsettled, evaluate, solved

_SOURCELESS: Final = ("network", "noise", "string", "transfer", "value")
"""What is posed whatever the sources are at."""
LEAST_SHARE: Final = 1e-6
"""A mode whose part in what is observed is smaller is not told."""


def derive(problem: Problem, measure: Measure, bounds: Bounds, made_of: MadeOf | None = None) -> Json | None:
    """How nominal, lowest and highest value of a measure come about; None where the problem has no names.

    made_of: what makes up the value of a parameter that is off nominal, in words; '' = nothing to say.

    Keys: ``summary`` of the measure; ``picture`` of the network; ``sources`` at their ends; ``voltages`` before, just
    after and in the end; ``modes`` with their shares; ``cases`` worked out step by step; ``parameters`` by influence.
    """
    names = problem.names
    if names is None:
        return None
    return {
        "measure": measure.name,
        "summary": measure.summary,
        **circumstances(problem, names, measure),
        "cases": list(worked_cases(problem, measure, bounds, partial(work_out, problem, names, measure), made_of)),
        "parameters": parameters(problem, measure, bounds),
    }


def circumstances(problem: Problem, names: Names, measure: Measure) -> Json:
    """``picture``, ``sources``, ``voltages`` and ``modes``."""
    plain = problem.structure.shape.free > 0 and not problem.structure.amplifiers
    event = measure.poses == "event" and plain
    return {
        "picture": picture(problem, names),
        "sources": list(_sources(problem, names)) if measure.poses not in _SOURCELESS else [],
        "voltages": _voltages(problem, names) if event else [],
        "modes": _modes(problem) if event else [],
    }


def _sources(problem: Problem, names: Names) -> Iterator[Json]:
    """Held terminals other than 0 V: where each is in the end, from lowest to highest, and its way there at nominal."""
    box = problem.box()
    for name, wave in zip(names.terminals[problem.structure.shape.free :], problem.structure.waveforms, strict=True):
        if name == "0 V":
            continue
        ends = [_at(wave.points[-1][1], case) for case in box]
        way = [[_at(time, box[1]), _at(volts, box[1])] for time, volts in wave.points]
        bounds = {"low": min(ends), "nominal": ends[1], "high": max(ends)}
        yield {"net": name, **bounds, "before": _at(wave.before, box[1]), "way": way}


def _at(form: Form, case: Array) -> float:
    return float(evaluate(form, case[None, :])[0])


def _voltages(problem: Problem, names: Names) -> list[Json]:
    """Free terminals at nominal: before the event, just after it, in the end; none where they cannot be told."""
    structure, (_, nominal, _) = problem.structure, problem.box()
    case = solved(structure, nominal[None, :])
    try:
        before = case.volts_before[0]
        ends = [_watched(problem, index, case) for index in range(structure.shape.free)]
    except (FloatingNode, Unsettled):
        return []  # its finding is undecided, with the reason
    return [
        {"net": name, "before": float(before[index]), "start": start, "final": final}
        for index, (name, (start, final)) in enumerate(zip(names.terminals, ends, strict=False))
    ]


def _watched(problem: Problem, terminal: int, case: Solved) -> tuple[float, float]:
    """Voltage of one terminal just after the event and in the end."""
    shape = problem.structure.shape
    weights = np.zeros((1, shape.free + shape.held))
    weights[0, terminal] = 1.0
    signal = case.watch(weights, np.zeros(1))
    return float(signal.initial()[0]), float(signal.final()[0])


def _modes(problem: Problem) -> list[Json]:
    """Time constants at nominal, each with its part in what the node does after the last change of a source."""
    if problem.structure.diodes:
        return []
    case = solved(problem.structure, problem.box()[1][None, :])
    try:
        last = case.signal.sums[-1].merged()
    except FloatingNode:
        return []  # its finding is undecided, with the reason
    amps, rates = np.abs(last.amps[:, 0]), last.rates[:, 0]
    total = float(amps.sum())
    rows = [
        {"tau": 1.0 / float(rate), "share": float(amp) / total if total else 0.0}
        for amp, rate in zip(amps, rates, strict=True)
        if rate > 0.0
    ]
    return sorted((row for row in rows if row["share"] > LEAST_SHARE), key=lambda row: -row["tau"])


def parameters(problem: Problem, measure: Measure, bounds: Bounds) -> list[Json]:
    """By influence on the spread."""
    return list(_influences(problem, measure, bounds))


def _influences(problem: Problem, measure: Measure, bounds: Bounds) -> Iterator[Json]:
    for influence in sensitivity(problem, measure, bounds):
        item = problem.parameters[influence.column]
        yield {
            "parameter": item.name,
            "low": item.low,
            "nominal": item.nominal,
            "high": item.high,
            "unit": item.unit,
            "to_low": influence.to_low,
            "to_high": influence.to_high,
            "share": influence.share,
            "given": not item.assumed,
            "from": item.origin or "; ".join(item.assumed),
        }
