"""The cases of a derivation: nominal and both ends, each with what is off nominal and the lines that work it out."""

import math
from collections.abc import Callable, Iterator, Sequence

import numpy as np

from rcrules.derivation._known import value_in, values_in
from rcrules.derivation._sheet import Step
from rcrules.derivation._work import Worked
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Array, Bounds, Parameter, Problem
from rcrules.quantities import show

MadeOf = Callable[[Parameter, float], str]
"""What makes up the value of a parameter that is off nominal, in words; '' = nothing to say."""


def worked_cases(
    problem: Problem,
    measure: Measure,
    bounds: Bounds,
    work_out: Callable[[tuple[float, ...]], Worked],
    made_of: MadeOf | None,
) -> Iterator[Json]:
    """Nominal, lowest, highest, equal ones as one; what does not matter to an end stays nominal in it.

    work_out: the lines of a case. made_of: None where no part has anything to say.
    """
    nominal = tuple(problem.box()[1])
    rows = (("nominal", nominal), ("lowest", tuple(bounds.low_at)), ("highest", tuple(bounds.high_at)))
    told: dict[tuple[float, ...], list[str]] = {}
    for name, found in rows:
        if not any(math.isnan(value) for value in found):
            told.setdefault(tuple(float(value) for value in _plainest(problem, measure, found)), []).append(name)
    for case, called in told.items():
        worked = work_out(case)
        yield {
            "case": ", ".join(called),
            "value": worked.value,
            "by_hand": worked.by_hand,
            "off": list(_off(problem, case, made_of or _unsaid)),
            "steps": [_step(step) for step in worked.steps],
        }


def _unsaid(item: Parameter, value: float) -> str:  # noqa: ARG001
    return ""


def _off(problem: Problem, case: Sequence[float], made_of: MadeOf) -> Iterator[str]:
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
    values = values_in(measure, problem.structure, cases)
    plainer = found.copy()
    for index, value in zip(off, values, strict=False):
        plainer[index] = nominal[index] if _same(value, values[-1]) else found[index]
    return plainer if _same(value_in(measure, problem.structure, plainer), values[-1]) else found


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
