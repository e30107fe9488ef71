"""A rule for one subject: its options and limits with every name looked up."""

from collections.abc import Mapping
from dataclasses import dataclass
from itertools import product
from typing import Final

import numpy as np

from rcrules.checks._composite import Composite
from rcrules.checks._conditions import condition
from rcrules.checks._lookup import Missing, look_up
from rcrules.checks._named import named_number
from rcrules.checks._subject import Subject
from rcrules.expressions import Call, Values, calls, names, value_of
from rcrules.levels import Level
from rcrules.networks import Board
from rcrules.project import Project
from rcrules.quantities import Spread
from rcrules.rulebook import COUNTS, Limit, Rule

OptionValue = str | float | Level
_MOST_NAMES: Final = 8
"""Names of one limit, of which every combination of ends is tried."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Bound:
    """A limit in numbers."""

    kind: str
    """``at-least``, ``at-most`` or ``one-of``."""
    strict: float
    """The end of the limit's own spread that is hardest to keep; of several choices the first."""
    unit: str
    text: str
    """As the rule or the project writes it; '' where only the number is known."""
    origin: str
    choices: tuple[float, ...] = ()
    """The numbers, one of which it must be."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """One rule and one subject, ready to be posed, or what is missing."""

    rule: Rule
    subject: Subject
    options: Mapping[str, OptionValue]
    bounds: tuple[Bound, ...]
    missing: tuple[Missing, ...]
    sure: bool = True
    """False: whether the rule meets the subject is not known."""
    value: Composite | None = None
    """Of a rule about more than one measure, once it is posed."""


def resolve(rule: Rule, subject: Subject, board: Board, project: Project, *, sure: bool = True) -> Case:
    """Look up every name; everything missing at once.

    sure: False where a fact is missing that decides whether the rule meets the subject.
    """
    missing: list[Missing] = [] if sure else [condition(rule, subject, board)]
    options = {name: _option(value, rule, subject, board, project) for name, value in rule.options.items()}
    bounds = [_bound(limit, rule, subject, board, project) for limit in rule.limits]
    missing += [item for item in (*options.values(), *bounds) if isinstance(item, Missing)]
    return Case(
        rule=rule,
        subject=subject,
        options={name: value for name, value in options.items() if not isinstance(value, Missing)},
        bounds=tuple(item for item in bounds if not isinstance(item, Missing)),
        missing=tuple(dict.fromkeys(missing)),
        sure=sure,
    )


def _option(value: OptionValue, rule: Rule, subject: Subject, board: Board, project: Project) -> OptionValue | Missing:
    """An option; a text that starts with ``?`` is a name to look up."""
    if not (isinstance(value, str) and value.startswith("?")):
        return value
    found = look_up(value[1:], rule, subject, board, project)
    if isinstance(found, Missing):
        return found
    return found.value.nominal if isinstance(found.value, Spread) else found.value


def _bound(limit: Limit, rule: Rule, subject: Subject, board: Board, project: Project) -> Bound | Missing:
    """A limit in numbers: written, looked up, or chosen by a word that is looked up."""
    if limit.choices:
        origin, choices = f"rule {rule.id}", limit.choices
        return Bound(
            kind=limit.kind, strict=choices[0], unit=limit.unit, text=limit.text, origin=origin, choices=choices
        )
    if limit.value is not None:
        return _strict(limit.kind, limit.value, limit.text, f"rule {rule.id}")
    if limit.expression is not None:
        return _of_expression(limit, rule, subject, board, project)
    name = limit.table[0] if limit.table else limit.name
    found = look_up(name or "", rule, subject, board, project)
    if isinstance(found, Missing):
        return found
    if isinstance(found.value, Spread):
        return _strict(limit.kind, found.value, "", found.origin)
    table = limit.table[1] if limit.table else {}
    chosen = table.get(found.value)
    if chosen is None:
        words = ", ".join(table) or "a quantity"
        reason = f"{name} is {found.value!r} in {found.origin}; expected {words}"
        return Missing(reason=reason, ask=(f'{found.origin} {name} = "…"',))
    return _strict(limit.kind, chosen, "", f"{found.origin} {name} = {found.value!r}")


def _strict(kind: str, value: Spread, text: str, origin: str) -> Bound:
    strict = value.high if kind == "at-least" else value.low
    return Bound(kind=kind, strict=strict, unit=value.unit, text=text, origin=origin)


def is_count(call: Call) -> bool:
    """Whether a call is read off the network itself."""
    return call.name in COUNTS


def is_joint(limit: Limit) -> bool:
    """Whether a limit depends on measures, and so on the same numbers as what it limits."""
    return limit.expression is not None and (
        bool(limit.terms) or any(is_count(call) for call in calls(limit.expression))
    )


def _of_expression(limit: Limit, rule: Rule, subject: Subject, board: Board, project: Project) -> Bound | Missing:
    """A limit worked out from names: the end that is hardest to keep, over all ends of theirs; 0 where it is joint."""
    if limit.expression is None or is_joint(limit):
        return Bound(kind=limit.kind, strict=0.0, unit=rule.measure.unit, text=limit.text, origin=f"rule {rule.id}")
    own = list(dict.fromkeys(item.name for item in names(limit.expression)))[:_MOST_NAMES]
    found = [named_number(name, rule, subject, board, project) for name in own]
    missing = next((item for item in found if isinstance(item, Missing)), None)
    if missing is not None:
        return missing
    ends = [dict.fromkeys((item.low, item.high)) for item in found if not isinstance(item, Missing)]
    values = [
        float(np.asarray(value_of(limit.expression, Values(names=dict(zip(own, corner, strict=True)), calls={}))))
        for corner in product(*ends)
    ]
    strict = max(values) if limit.kind == "at-least" else min(values)
    return Bound(kind=limit.kind, strict=strict, unit=rule.measure.unit, text=limit.text, origin=f"rule {rule.id}")
