"""How a value of several measures comes about: each of them, then the expression with their numbers put in."""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import partial
from typing import Final

import numpy as np

from rcrules.derivation._cases import MadeOf, worked_cases
from rcrules.derivation._derive import circumstances, parameters
from rcrules.derivation._known import value_in
from rcrules.derivation._sheet import Number, Sheet, Step
from rcrules.derivation._work import DIGITS, EXACT, Worked, work_out
from rcrules.expressions import Binary, Call, Expression, Name, Power, Unary, Values, text_of, value_of
from rcrules.expressions import Number as Quantity
from rcrules.findings import Json
from rcrules.measures import Measure
from rcrules.problems import Bounds, Problem

_SIGNS: Final = {"*": "·"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Term:
    """One measure of the value."""

    call: Call
    problem: Problem
    """With its own columns."""
    measure: Measure
    columns: tuple[int, ...]
    """Its columns among those of the value."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Value:
    """An expression over measures, counts and numbers."""

    expression: Expression
    terms: tuple[Term, ...]
    names: tuple[tuple[str, str, float, int | None], ...]
    """Name, unit, number, and its column where it is one."""
    counts: tuple[tuple[Call, float, tuple[int, ...]], ...]
    """Calls that are a number, and columns that are added to it."""


def derive_value(
    problem: Problem, measure: Measure, bounds: Bounds, value: Value, made_of: MadeOf | None = None
) -> Json:
    """The same object as for one measure; what the measures share is told once."""
    around = [
        circumstances(term.problem, term.problem.names, term.measure) for term in value.terms if term.problem.names
    ]
    found: Json = {key: _joined(around, key) for key in ("picture", "sources", "voltages")}
    modes = [item["modes"] for item in around if item["modes"]]
    return {
        "measure": measure.name,
        "summary": f"{text_of(value.expression)}.",
        **found,
        "modes": modes[0] if len(modes) == 1 else [],
        "cases": list(worked_cases(problem, measure, bounds, partial(_worked, problem, measure, value), made_of)),
        "parameters": parameters(problem, measure, bounds),
    }


def _joined(around: Sequence[Json], key: str) -> list[Json]:
    """Rows of all, equal ones once; what is drawn from a node is told with the first of them."""
    rows: list[Json] = []
    for row in (row for item in around for row in item[key]):
        if not any({**other, "drawn": None} == {**row, "drawn": None} for other in rows):
            rows.append(row)
    return rows


def _worked(problem: Problem, measure: Measure, value: Value, case: tuple[float, ...]) -> Worked:
    """Lines of every measure, then of the expression."""
    exact = float(measure.compute(problem.structure, np.array([case], dtype=float))[0])
    worked = [_of_term(term, tuple(case[index] for index in term.columns)) for term in value.terms]
    for digits in DIGITS:
        sheet = Sheet(digits=digits)
        found = _put_together(sheet, value, case, measure.unit, [_printed(item) for item in worked])
        steps = [step for item in worked for step in item.steps]
        near = abs(found.value - exact) <= EXACT * abs(exact) if math.isfinite(exact) else found.value == exact
        if near:
            by_hand = all(item.by_hand for item in worked)
            return Worked(value=exact, steps=(*steps, *sheet.steps), by_hand=by_hand)
    sheet.given("value", exact, measure.unit, "by the tool")
    return Worked(value=exact, steps=(*steps, *sheet.steps), by_hand=False)


def _of_term(term: Term, case: tuple[float, ...]) -> Worked:
    """Its lines, the first of which says whose they are."""
    if term.problem.names is None:
        value = value_in(term.measure, term.problem.structure, np.array(case, dtype=float))
        return Worked(value=value, steps=(), by_hand=False)
    found = work_out(term.problem, term.problem.names, term.measure, case)
    return replace(found, steps=tuple(_headed(found.steps, text_of(term.call))))


def _printed(worked: Worked) -> float:
    """What its last line shows, or the number itself where that is the tool's own."""
    return worked.steps[-1].number.value if worked.by_hand else worked.value


def _headed(steps: Sequence[Step], name: str) -> list[Step]:
    first, *others = steps
    note = f"for {name}" + (f"; {first.note}" if first.note else "")
    return [replace(first, note=note), *others]


def _put_together(sheet: Sheet, value: Value, case: tuple[float, ...], unit: str, found: Sequence[float]) -> Number:
    """A line for each measure as the expression calls it, and one for the expression."""
    numbers: dict[Expression | str, Number] = {}
    for term, result in zip(value.terms, found, strict=True):
        numbers[term.call] = sheet.given(text_of(term.call), result, term.measure.unit, "from above")
    for call, start, columns in value.counts:
        total = start + sum(case[index] for index in columns)
        numbers[call] = sheet.given(text_of(call), total, "Ω" if columns else "1", "counted on the board")
    for name, own_unit, number, column in value.names:
        numbers[name] = sheet.number(name.replace("_", " "), number if column is None else case[column], own_unit)
    values = Values(
        names={key: number.value for key, number in numbers.items() if isinstance(key, str)},
        calls={key: number.value for key, number in numbers.items() if isinstance(key, Call)},
    )
    result = float(value_of(value.expression, values))
    if isinstance(value.expression, Call) and value.expression in numbers:
        return numbers[value.expression]
    texts = {key: number.text for key, number in numbers.items()}
    symbols = {key: number.symbol for key, number in numbers.items()}
    return sheet.line(
        "value", result, unit, _told(value.expression, symbols, sheet), _told(value.expression, texts, sheet)
    )


def _told(of: Expression, words: Mapping[Expression | str, str], sheet: Sheet, level: int = 0) -> str:
    """The expression with words put in for measures and names; numbers as the sheet shows them."""
    if isinstance(of, Quantity):
        return sheet.number("", of.value, of.unit).text
    if isinstance(of, Name):
        return _bracketed(words[of.name])
    if isinstance(of, Call):
        told = ", ".join(_told(item, words, sheet) for item in of.arguments)
        return _bracketed(words[of]) if of in words else f"{of.name}({told})"
    if isinstance(of, Unary):
        return f"-{_told(of.of, words, sheet, 2)}"
    if isinstance(of, Power):
        base = _told(of.of, words, sheet, 2)
        power = of.text if of.by is None else _told(of.by, words, sheet, 2)
        return f"{base if isinstance(of.of, Name | Call) and base.isidentifier() else f'({base})'}^{power}"
    if not isinstance(of, Binary):
        raise TypeError(f"{type(of).__name__} has no value")
    own = 0 if of.sign in "+-" else 1
    left = _told(of.left, words, sheet, own)
    right = _told(of.right, words, sheet, own + 1 if of.sign in "-/" else own)
    told = f"{left} {_SIGNS.get(of.sign, of.sign)} {right}"
    return f"({told})" if own < level else told


def _bracketed(text: str) -> str:
    return f"({text})" if text.startswith("-") else text
