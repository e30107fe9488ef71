"""Numbers and words that a rule names: pin, then net, part, settings of the rule, and what the rule itself gives."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from rcrules.checks._subject import Subject
from rcrules.networks import Board
from rcrules.project import Project, line_for, ranked
from rcrules.quantities import Spread
from rcrules.rulebook import Rule

Table = tuple[str, Mapping[str, str | float], Mapping[str, Spread]]


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
    for origin, words, spreads in _tables(rule, subject, board, project):
        for key in (name, name.replace("_", "-")):
            if key in spreads:
                return Found(value=spreads[key], origin=origin)
            if key in words:
                return Found(value=_value(words[key], rule.given_units.get(name, "1")), origin=origin)
    given = rule.given.get(name, "ask")
    if isinstance(given, Spread):
        return Found(value=given, origin=f"rule {rule.id}")
    return Missing(reason=f"{name} is not given", ask=_lines(name, rule, subject))


def _tables(rule: Rule, subject: Subject, board: Board, project: Project) -> Iterable[Table]:
    """Every table that may hold the name, the strongest first: its heading, its words, its numbers with bounds."""
    for pattern, pin in ranked(project.pins, _pin_names(subject.feeds, board)):
        yield f'[pin."{pattern}"]', pin.set, pin.spreads
    for pattern, net in ranked(project.nets, subject.nets):
        yield f'[net."{pattern}"]', net.set, net.spreads
    for pattern, part in ranked(project.parts, (*subject.refs, *_contacts(subject))):
        yield f'[part."{pattern}"]', part.set, part.spreads
    yield f'[settings."{rule.id}"]', project.settings.get(rule.id, {}), project.setting_spreads.get(rule.id, {})


def _value(value: str | float, unit: str) -> Spread | str:
    return value if isinstance(value, str) else Spread(low=value, nominal=value, high=value, unit=unit)


def _contacts(subject: Subject) -> tuple[str, ...]:
    """Contacts that act on the subject's network: their bounce and resistance are facts of it."""
    return tuple(contact.ref for contact in subject.network.contacts) if subject.network else ()


def _pin_names(feeds: Iterable[str], board: Board) -> set[str]:
    """Fed pins by name and by number."""
    names = set(feeds)
    for key in feeds:
        part = board.design.parts.get(key.partition(".")[0])
        names |= {f"{pin.ref}.{pin.number}" for pin in (part.pins if part else ()) if pin.key == key}
    return names


def _lines(name: str, rule: Rule, subject: Subject) -> tuple[str, ...]:
    """The line for all subjects of the rule first, then the one for this subject alone."""
    if subject.feeds:
        own = line_for("pin", subject.feeds[0], name)
    elif subject.net is not None:
        own = line_for("net", subject.nets[0], name)
    else:
        own = line_for("part", subject.refs[0], name)
    return (f'[settings."{rule.id}"] {name} = "…"', own)
