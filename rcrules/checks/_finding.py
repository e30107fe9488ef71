"""One judged case as a finding of the document."""

import math
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

from rcrules.checks._asked import Asked
from rcrules.checks._identity import fingerprint
from rcrules.checks._levels import level_text
from rcrules.checks._margin import nearest
from rcrules.checks._resolve import Case
from rcrules.checks._subject import Subject
from rcrules.checks._value import value_told
from rcrules.checks._verdict import Deciding, Verdict
from rcrules.checks._worst import made_of, worst_case
from rcrules.findings import Finding, Json, Quantity
from rcrules.inventory import as_quantity, case_json, place_json
from rcrules.levels import Level
from rcrules.measures import Measure
from rcrules.networks import Board
from rcrules.problems import Problem
from rcrules.project import Project
from rcrules.quantities import show

_DIGITS: Final = 9
"""Significant digits to which numbers of one cause agree."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Judged:
    """A case with its verdict."""

    case: Case
    problem: Problem | None
    """None where it could not be posed."""
    verdict: Verdict


def finding(judged: Judged, board: Board, project: Project, assumptions: list[int], *, asked: Asked) -> Finding:
    """The finding, with what is asked of it besides its verdict."""
    case, verdict = judged.case, judged.verdict
    rule, subject, margin = case.rule, case.subject, verdict.solution and verdict.solution.margin
    measured = _measured(judged)
    return Finding(
        rule=rule.id,
        title=rule.title,
        pack=rule.pack.name,
        level=rule.level,
        outcome=verdict.outcome,
        subject=subject.kind,
        net=subject.net,
        parts=list(subject.refs),
        feeds=list(subject.feeds),
        measure=rule.measure.name,
        options=_options(case),
        measured=measured,
        limit=_limit(judged),
        margin=margin.value if margin and rule.passing is None and not math.isnan(margin.value) else None,
        margin_case=case_json(margin.case, judged.problem) if margin and judged.problem else {},
        reason=_reason(judged),
        ask=list(_ask(judged)),
        why=rule.why,
        source=rule.source,
        places=_places(subject, board),
        fingerprint=fingerprint(rule.id, subject, board),
        assumptions=assumptions,
        cause=_cause(judged, measured, board),
        detail=_detail(judged, board, project),
        derivation=_derivation(judged, board) if asked.derived else None,
        response=_response(judged) if asked.derived else None,
        statistics=_statistics(judged, board, project, asked) if asked.samples else None,
    )


def _derivation(judged: Judged, board: Board) -> Json | None:
    """How the number comes about, where there is one."""
    from rcrules.derivation import derive, derive_value

    solution, problem, case = judged.verdict.solution, judged.problem, judged.case
    if solution is None or problem is None:
        return None
    measure, said = case.rule.measure, lambda item, value: made_of(item, value, board)
    if case.value is None:
        return derive(problem, measure, solution.bounds, said)
    return derive_value(problem, measure, solution.bounds, value_told(case.value, problem), said)


def _response(judged: Judged) -> Json | None:
    """What is observed over time, where there is a number."""
    from rcrules.derivation import response

    solution, problem = judged.verdict.solution, judged.problem
    if solution is None or problem is None:
        return None
    return response(problem, judged.case.rule.measure, solution.bounds, _limit(judged))


def _statistics(judged: Judged, board: Board, project: Project, asked: Asked) -> Json | None:
    """How often it would fail, where there is a number to fail."""
    from rcrules.checks._statistics import statistics

    solution, problem, case = judged.verdict.solution, judged.problem, judged.case
    if solution is None or problem is None:
        return None
    return statistics(asked, case, problem, solution.bounds, board, project)


def _measured(judged: Judged) -> Quantity | None:
    solution = judged.verdict.solution
    if solution is None or judged.problem is None:
        return None
    return as_quantity(solution.bounds, judged.problem, judged.case.rule.measure.unit)


def _options(case: Case) -> Json:
    """Options that differ from what the measure takes by itself, as texts; the event always."""
    measure = case.rule.measure
    given = dict(case.rule.options) | dict(case.options)
    shown = {name: value for name, value in given.items() if name == "event" or value != measure.options[name].default}
    return {name: _option(value, measure, name) for name, value in shown.items()}


def _option(value: str | float | Level, measure: Measure, name: str) -> str:
    if isinstance(value, Level):
        return value.text
    if isinstance(value, str):
        return value.removeprefix("?")
    unit = measure.options[name].unit
    return f"{100 * value:.4g} %" if unit == "1" and 0 < value < 1 else show(value, unit)


def _limit(judged: Judged) -> Json | None:
    """Strictest number per kind, both the same where it must be one number; None where a limit is still asked for."""
    bounds, solution = judged.case.bounds, judged.verdict.solution
    if not bounds:
        return None
    first = bounds[0]
    found: Json = {bound.kind.replace("-", "_"): bound.strict for bound in bounds if not bound.choices}
    if first.choices:
        found["at_least"] = found["at_most"] = nearest(solution.bounds, first) if solution else first.strict
    return {**found, "unit": first.unit, "text": first.text, "from": first.origin}


def _reason(judged: Judged) -> str | None:
    """Why a finding is undecided, in words."""
    verdict = judged.verdict
    if verdict.deciding is None or judged.problem is None:
        return verdict.reason
    item = judged.problem.parameters[verdict.deciding.column]
    text = f"{item.name}: {'; '.join(item.assumed) or item.origin}"
    return text + _flip(verdict.deciding, item.name, item.unit)


def _flip(deciding: Deciding, name: str, unit: str) -> str:
    """What would have to be true of the deciding number."""
    if not deciding.alone:
        return " (with other assumptions)"
    if deciding.flips_at is None:
        return ""
    word = "at least" if deciding.end == "high" else "at most"
    return f"; holds where {name} is {word} {show(deciding.flips_at, unit)}"


def _ask(judged: Judged) -> Iterable[str]:
    """Lines that would decide it: what is missing, or the deciding assumption and then the others."""
    verdict, problem = judged.verdict, judged.problem
    if verdict.deciding is None or problem is None:
        return verdict.ask
    first = problem.parameters[verdict.deciding.column]
    others = [item for item in problem.parameters if item is not first]
    return dict.fromkeys(item.ask for item in (first, *others) if item.assumed and item.ask)


def _places(subject: Subject, board: Board) -> list[Json]:
    """Where the net and the parts stand in the inputs."""
    nets = [board.design.nets[net].place for net in subject.nets[:1] if subject.net and net in board.design.nets]
    parts = [board.parts[ref].part.place for ref in subject.refs]
    return [place_json(place) for place in (*nets, *parts)]


def _cause(judged: Judged, measured: Quantity | None, board: Board) -> str:
    """Findings on equal numbers and equal parts have one cause: the part values, the numbers, the limit, the reason."""
    subject, verdict = judged.case.subject, judged.verdict
    if measured is None:
        return verdict.reason or ""
    numbers = (measured.low, measured.nominal, measured.high, *(bound.strict for bound in judged.case.bounds))
    texts = sorted(f"{board.parts[ref].kind} {board.parts[ref].text}" for ref in subject.refs)
    return "; ".join([*texts, *(f"{number:.{_DIGITS}g}" for number in numbers)])


def _detail(judged: Judged, board: Board, project: Project) -> Json:
    """Worst case in shares, the level in words, the deciding assumption."""
    verdict, problem, case = judged.verdict, judged.problem, judged.case
    if verdict.solution is None or problem is None:
        return {}
    margin = verdict.solution.margin
    found: Json = {"side": margin.side, "never": margin.never}
    if text := level_text(problem, case, project):
        found["level_text"] = text
    if verdict.outcome != "holds":
        found["worst"] = worst_case(problem, margin.case, case.rule.measure, board)
    if verdict.deciding is not None:
        found["deciding"] = _deciding(verdict.deciding, problem)
    return found


def _deciding(deciding: Deciding, problem: Problem) -> Json:
    item = problem.parameters[deciding.column]
    return {
        "parameter": item.name,
        "text": "; ".join(item.assumed),
        "end": deciding.end,
        "alone": deciding.alone,
        "flips_at": deciding.flips_at,
        "unit": item.unit,
    }
