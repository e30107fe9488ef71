"""Numbers and words that a rule names: pin, then net, part, settings of the rule, and what the rule itself gives."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import TypeVar

from rcrules.checks._select import globbed
from rcrules.checks._subjects import Subject
from rcrules.networks import Board
from rcrules.project import Project
from rcrules.quantities import Spread
from rcrules.rulebook import Rule

Table = TypeVar("Table")


@dataclass(frozen=True, slots=True, kw_only=True)
class Found:
    """A number or word, and where it stands."""

    value: Spread | str
    origin: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Missing:
    """Nothing found: what is missing, and the lines that would say it, most useful first."""

    reason: str
    ask: tuple[str, ...]


def look_up(name: str, rule: Rule, subject: Subject, board: Board, project: Project) -> Found | Missing:
    """The value of a name for a rule and a subject."""
    unit = rule.given_units.get(name, "1")
    for origin, table in _tables(rule, subject, board, project):
        for key in (name, name.replace("_", "-")):
            if key in table:
                return Found(value=_spread(table[key], unit), origin=origin)
    given = rule.given.get(name, "ask")
    if isinstance(given, Spread):
        return Found(value=given, origin=f"rule {rule.id}")
    return Missing(reason=f"{name} is not given", ask=_lines(name, rule, subject))


def _tables(
    rule: Rule, subject: Subject, board: Board, project: Project
) -> Iterable[tuple[str, Mapping[str, str | float]]]:
    """Every table that may hold the name, the strongest first."""
    for pattern, pin in _exact_first(project.pins):
        if globbed((pattern,), _pin_names(subject.feeds, board)):
            yield f'[pin."{pattern}"]', pin.set
    for pattern, net in _exact_first(project.nets):
        if globbed((pattern,), subject.nets):
            yield f'[net."{pattern}"]', net.set
    for pattern, part in _exact_first(project.parts):
        if globbed((pattern,), subject.refs):
            yield f'[part."{pattern}"]', part.set
    yield f'[settings."{rule.id}"]', project.settings.get(rule.id, {})


def _exact_first(tables: Mapping[str, Table]) -> list[tuple[str, Table]]:
    """Names before globs; a longer glob before a shorter one."""
    return sorted(tables.items(), key=lambda item: (any(mark in item[0] for mark in "*?["), -len(item[0])))


def _pin_names(feeds: Iterable[str], board: Board) -> set[str]:
    """Fed pins by name and by number."""
    names = set(feeds)
    for key in feeds:
        part = board.design.parts.get(key.partition(".")[0])
        names |= {f"{pin.ref}.{pin.number}" for pin in (part.pins if part else ()) if pin.key == key}
    return names


def _spread(value: str | float, unit: str) -> Spread | str:
    return value if isinstance(value, str) else Spread(low=value, nominal=value, high=value, unit=unit)


def _lines(name: str, rule: Rule, subject: Subject) -> tuple[str, ...]:
    """The line for all subjects of the rule first, then the one for this subject alone."""
    key = name.replace("_", "-")
    if subject.feeds:
        own = f'[pin."{subject.feeds[0]}"] {key} = "…"'
    elif subject.net is not None:
        own = f'[net."{subject.nets[0]}"] set = {{ {key} = "…" }}'
    else:
        own = f'[part."{subject.refs[0]}"] {key} = "…"'
    return (f'[settings."{rule.id}"] {name} = "…"', own)
