"""Everything about how one number comes about, as the document holds it."""

import math
from collections.abc import Callable, Iterator, Sequence
from typing import Final

import numpy as np

from rcrules.derivation._picture import picture
from rcrules.derivation._sensitivity import sensitivity
from rcrules.derivation._sheet import Step
from rcrules.derivation._work import work_out
from rcrules.engine import FloatingNode
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Array, Bounds, Form, Names, Parameter, Problem, Solved, Unsettled, evaluate, solved
from rcrules.quantities import show

_SOURCELESS: Final = ("network", "noise", "string", "transfer", "value")
"""What is posed whatever the sources are at."""
LEAST_SHARE: Final = 1e-6
"""A mode whose part in what is observed is smaller is not told."""


def derive(
    problem: Problem, measure: Measure, bounds: Bounds, made_of: Callable[[Parameter, float], str] | None = None
) -> Json | None:
    """How nominal, lowest and highest value of a measure come about; None where the problem has no names.

    made_of: what makes up the value of a parameter that is off nominal, in words; '' = nothing to say.

    Keys: ``summary`` of the measure; ``picture`` of the network; ``sources`` at their ends; ``voltages`` before, just
    after and in the end; ``modes`` with their shares; ``cases`` worked out step by step; ``parameters`` by influence.
    """
    names = problem.names
    if names is None:
        return None
    plain = problem.structure.shape.free > 0 and not problem.structure.amplifiers
    event = measure.poses == "event" and plain
    return {
        "measure": measure.name,
        "summary": measure.summary,
        "picture": picture(problem, names),
        "sources": list(_sources(problem, names)) if measure.poses not in _SOURCELESS else [],
        "voltages": _voltages(problem, names) if event else [],
        "modes": _modes(problem) if event else [],
        "cases": list(_cases(problem, names, measure, bounds, made_of or _unsaid)),
        "parameters": list(_parameters(problem, measure, bounds)),
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


def _cases(
    problem: Problem, names: Names, measure: Measure, bounds: Bounds, made_of: Callable[[Parameter, float], str]
) -> Iterator[Json]:
    """Nominal, lowest, highest, equal ones as one; what does not matter to an end stays nominal in it."""
    nominal = tuple(problem.box()[1])
    rows = (("nominal", nominal), ("lowest", tuple(bounds.low_at)), ("highest", tuple(bounds.high_at)))
    told: dict[tuple[float, ...], list[str]] = {}
    for name, found in rows:
        if not any(math.isnan(value) for value in found):
            told.setdefault(tuple(float(value) for value in _plainest(problem, measure, found)), []).append(name)
    for case, called in told.items():
        worked = work_out(problem, names, measure, case)
        yield {
            "case": ", ".join(called),
            "value": worked.value,
            "by_hand": worked.by_hand,
            "off": list(_off(problem, case, made_of)),
            "steps": [_step(step) for step in worked.steps],
        }


def _unsaid(item: Parameter, value: float) -> str:  # noqa: ARG001
    return ""


def _off(
    problem: Problem, case: Sequence[float], made_of: Callable[[Parameter, float], str]
) -> Iterator[str]:
    """``C7 6.19 µF (10 µF, tolerance -20 %, temperature -15 %)``: what is off nominal."""
    for item, value in zip(problem.parameters, case, strict=True):
        if _differs(value, item.nominal):
            why = made_of(item, value)
            told = f" ({show(item.nominal, item.unit)}, {why})" if why else ""
            yield f"{item.name} {show(value, item.unit, 4)}{told}"


def _plainest(problem: Problem, measure: Measure, case: Sequence[float]) -> Array:
    """The case with everything at nominal that leaves the value as it is."""
    nominal, found = problem.box()[1], np.asarray(case, dtype=float)
    off = [index for index, value in enumerate(case) if _differs(value, nominal[index])]
    cases = np.tile(found, (len(off) + 1, 1))
    for row, index in enumerate(off):
        cases[row, index] = nominal[index]
    values = measure.compute(problem.structure, cases)
    plainer = found.copy()
    for index, value in zip(off, values, strict=False):
        plainer[index] = nominal[index] if _same(value, values[-1]) else found[index]
    return plainer if _same(float(measure.compute(problem.structure, plainer[None, :])[0]), values[-1]) else found


def _differs(value: float, plain: float) -> bool:
    return value != plain if math.isinf(plain) else abs(value - plain) > 1e-12 * abs(plain)


def _same(one: float, other: float) -> bool:
    return bool(one == other or abs(one - other) <= 1e-9 * abs(other))


def _step(step: Step) -> Json:
    number = step.number
    return {
        "symbol": number.symbol,
        "formula": step.formula,
        "put_in": step.put_in,
        "text": number.text,
        "note": step.note,
    }


def _parameters(problem: Problem, measure: Measure, bounds: Bounds) -> Iterator[Json]:
    """By influence on the spread."""
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
