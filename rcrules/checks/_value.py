"""A value that is more than one measure, for one subject: every measure posed, one column wherever a number acts."""

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Final

from rcrules.checks._composite import Composite, Posed
from rcrules.checks._count import count, least_path
from rcrules.checks._lookup import Missing, look_up
from rcrules.checks._named import named_number
from rcrules.checks._place import stands_at
from rcrules.checks._resolve import Bound, Case, is_count, is_joint
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.engine import Shape
from rcrules.events import OptionValue, Unmeasurable, part_parameter, pose
from rcrules.expressions import Binary, Call, Expression, Number, calls, names, text_of
from rcrules.measures import Measure
from rcrules.networks import Board
from rcrules.problems import Parameter, Problem, Structure
from rcrules.project import Project
from rcrules.quantities import Spread, show
from rcrules.rulebook import Limit, Rule, Term, dict_of
from rcrules.tomlfile import guess

if TYPE_CHECKING:
    from rcrules.derivation import Value

_EMPTY: Final = Structure(shape=Shape(free=0, held=0, resistors=(), capacitors=()), ohms=(), farads=(), waveforms=())
"""Where nothing is posed."""


@dataclass(slots=True, kw_only=True)
class _Columns:
    """Parameters by name, each once: one number wherever it acts."""

    parameters: list[Parameter] = field(default_factory=list)
    by_name: dict[str, int] = field(default_factory=dict)

    def add(self, item: Parameter) -> int:
        """Its column. Of two spreads of one number (such as two bias ranges) the wider counts."""
        if item.name not in self.by_name:
            self.by_name[item.name] = len(self.parameters)
            self.parameters.append(item)
            return self.by_name[item.name]
        index = self.by_name[item.name]
        other = self.parameters[index]
        self.parameters[index] = replace(
            other,
            low=min(other.low, item.low),
            high=max(other.high, item.high),
            given_low=min(other.given_low, item.given_low),
            given_high=max(other.given_high, item.given_high),
        )
        return index


def pose_value(case: Case, subjects: Subjects, board: Board, project: Project) -> tuple[Case, Problem]:
    """The case with the measure that its value is here, and its problem.

    Raises Unmeasurable where a measure cannot be posed, or a name or place is missing.
    """
    rule = case.rule
    columns = _Columns()
    joint = [limit for limit in rule.limits if is_joint(limit)]
    expression = _with_limits(case, joint)
    terms = (*rule.terms, *(term for limit in joint for term in limit.terms))
    posed = tuple(_posed(term, rule, case.subject, subjects, board, project, columns) for term in terms)
    constants, own, units = _named(expression, rule, case.subject, board, project, columns)
    counts = tuple(_counted(call, case.subject, board, columns) for call in calls(expression) if is_count(call))
    whole = Composite(expression=expression, posed=posed, constants=constants, columns=own, counts=counts, units=units)
    measure = replace(rule.measure, compute=whole.compute, theory=whole.theory, options={})
    bounds = case.bounds
    if joint:
        measure, bounds = _named_after(measure, expression), _shifted(case)
    posed_case = replace(case, rule=replace(rule, measure=measure, options={}), bounds=bounds, options={}, value=whole)
    structure = posed[0].structure if len(posed) == 1 and expression == posed[0].call else _EMPTY
    return posed_case, Problem(structure=structure, parameters=tuple(columns.parameters))


def _with_limits(case: Case, joint: Sequence[Limit]) -> Expression:
    """The value; less its limit where that depends on the same numbers; beside others the smallest of all margins."""
    rule = case.rule
    value = rule.value
    if value is None:
        raise ValueError("a rule with a plain measure has no value to pose")
    if not joint:
        return value
    limits = [_told(limit, bound) for limit, bound in zip(rule.limits, case.bounds, strict=True)]
    if len(limits) == 1:
        return Binary(sign="-", left=value, right=limits[0], at=0)
    ends = [
        (limit, value) if item.kind == "at-most" else (value, limit)
        for item, limit in zip(rule.limits, limits, strict=True)
    ]
    margins = tuple(Binary(sign="-", left=left, right=right, at=0) for left, right in ends)
    return Call(name="min", arguments=margins, options=(), at=0)


def _told(limit: Limit, bound: Bound) -> Expression:
    """The limit's own expression, or the number that it is at this subject."""
    if is_joint(limit) and limit.expression is not None:
        return limit.expression
    return Number(value=bound.strict, unit=bound.unit, text=show(bound.strict, bound.unit), at=0)


def _named_after(measure: Measure, expression: Expression) -> Measure:
    """What is measured is the distance to the limit, and is called so."""
    unit = "K" if measure.unit == "degC" else measure.unit
    return replace(measure, name=text_of(expression), unit=unit)


def _shifted(case: Case) -> tuple[Bound, ...]:
    """Limits that went into the value leave a limit of 0."""
    first = case.bounds[0]
    kind = "at-least" if len(case.bounds) > 1 else first.kind
    return (replace(first, kind=kind, strict=0.0, unit="K" if first.unit == "degC" else first.unit),)


def _posed(
    term: Term, rule: Rule, subject: Subject, subjects: Subjects, board: Board, project: Project, columns: _Columns
) -> Posed:
    place = subject if term.at is None else _place(term, subjects)
    options = {name: _option(value, rule, subject, board, project) for name, value in term.options.items()}
    problem = pose(board, project, place.target, term.measure, options)
    own = tuple(columns.add(item) for item in problem.parameters)
    return Posed(call=term.call, structure=problem.structure, measure=term.measure, columns=own, names=problem.names)


def _place(term: Term, subjects: Subjects) -> Subject:
    """The subject at another net, part or pin."""
    at = term.at or ""
    found = [item for item in subjects.of(term.measure.subject) if stands_at(item, at)]
    if len(found) != 1:
        many = "no" if not found else "more than one"
        near = "" if found else guess(at, _names(subjects.of(term.measure.subject)))
        raise Unmeasurable(f"{many} {term.measure.subject} at {at}, for {term.measure.name}{near}", "")
    return found[0]


def _names(subjects: Iterable[Subject]) -> list[str]:
    """What a place may be called: nets, fed pins, parts."""
    return [name for item in subjects for name in (*item.nets, *item.feeds, *item.refs)]


def _option(value: OptionValue, rule: Rule, subject: Subject, board: Board, project: Project) -> OptionValue:
    """An option; a text that starts with ``?`` is a name to look up."""
    if not (isinstance(value, str) and value.startswith("?")):
        return value
    found = look_up(value[1:], rule, subject, board, project)
    if isinstance(found, Missing):
        raise Unmeasurable(found.reason, found.ask[0] if found.ask else "")
    return found.value.nominal if isinstance(found.value, Spread) else found.value


def _named(
    of: Expression, rule: Rule, subject: Subject, board: Board, project: Project, columns: _Columns
) -> tuple[tuple[tuple[str, float], ...], tuple[tuple[str, int], ...], tuple[tuple[str, str], ...]]:
    """Names that are one number, names that are columns, units. Raises Unmeasurable where a name is not known."""
    constants: list[tuple[str, float]] = []
    own: list[tuple[str, int]] = []
    units: list[tuple[str, str]] = []
    for name in dict.fromkeys(item.name for item in names(of)):
        found = named_number(name, rule, subject, board, project)
        if isinstance(found, Missing):
            raise Unmeasurable(found.reason, found.ask[0] if found.ask else "")
        units.append((name, found.unit))
        if found.low == found.high:
            constants.append((name, found.nominal))
        else:
            own.append((name, columns.add(found)))
    return tuple(constants), tuple(own), tuple(units)


def _counted(call: Call, subject: Subject, board: Board, columns: _Columns) -> tuple[Call, float, tuple[int, ...]]:
    """A count, or the resistors of a path as columns; without a path infinite. Raises Unmeasurable without its ends."""
    options: Mapping[str, str] = dict_of(call)
    if call.name == "count":
        return call, float(count(options, subject, board)), ()
    path = least_path(options, subject, board)
    if path is None:
        return call, math.inf, ()
    return call, 0.0, tuple(columns.add(part_parameter(board.parts[ref])) for ref in path)


def value_told(whole: Composite, problem: Problem) -> "Value":
    """The value as its derivation takes it."""
    from rcrules.derivation import Term, Value

    terms = tuple(
        Term(
            call=item.call,
            problem=Problem(
                structure=item.structure,
                parameters=tuple(problem.parameters[index] for index in item.columns),
                names=item.names,
            ),
            measure=item.measure,
            columns=item.columns,
        )
        for item in whole.posed
    )
    units = dict(whole.units)
    constants = [(name, units[name], number, None) for name, number in whole.constants]
    own = [(name, units[name], 0.0, column) for name, column in whole.columns]
    return Value(expression=whole.expression, terms=terms, names=(*constants, *own), counts=whole.counts)
