"""Which subjects a rule is held against."""

from collections.abc import Callable, Iterable, Mapping
from fnmatch import fnmatchcase
from typing import Final

from rcrules.checks._facts import facts, words
from rcrules.checks._subject import Subject
from rcrules.checks._views import View
from rcrules.names import has_token
from rcrules.networks import Board
from rcrules.parts import Known, RatedPart
from rcrules.quantities import Spread
from rcrules.rulebook import Selection, holds

_UNITS: Final = {"resistor": "Ω", "capacitor": "F"}


def selected(selection: Selection, subject: Subject, board: Board) -> bool | None:
    """Whether all given keys match at one and the same node; None where that hangs on a fact that is not known."""
    found = [matches(selection, view, board) for view in subject.views]
    return True if True in found else None if None in found else False


def matches(selection: Selection, view: View, board: Board) -> bool | None:
    """Whether all given keys match, one of ``any-of`` does, and none of ``not``."""
    asked = ((wanted, test) for key, test in TESTS.items() if (wanted := getattr(selection, key)))
    if not (all(test(wanted, view) for wanted, test in asked) and valued(selection, view)):
        return False
    any_of = [matches(item, view, board) for item in selection.any_of] or [True]
    excluded = [matches(item, view, board) for item in selection.exclude]
    when = True if selection.when is None else holds(selection.when, facts(view, board), words(view))
    one = True if True in any_of else None if None in any_of else False
    none = False if True in excluded else None if None in excluded else True
    together = (one, none, when)
    return False if False in together else None if None in together else True


def _within(wanted: tuple[str, ...], found: Iterable[str]) -> bool:
    return not wanted or not set(wanted).isdisjoint(found)


def globbed(patterns: tuple[str, ...], names: Iterable[str]) -> bool:
    """Whether a name equals a pattern or matches it as a glob; no patterns match everything."""
    return not patterns or any(name == pattern or fnmatchcase(name, pattern) for name in names for pattern in patterns)


def _named(wanted: tuple[str, ...], view: View) -> bool:
    """Whole words of a net, or of the own name of a fed pin."""
    names = (*view.nets, *(pin.partition(".")[2] for pin in view.feeds))
    return not wanted or any(has_token(name, word) for name in names for word in wanted)


def valued(selection: Selection, view: View) -> bool:
    """Whether a part of the unit asked for has a marked value within both bounds, and one the polarity asked for."""
    low, high, polarised = selection.value_at_least, selection.value_at_most, selection.polarised
    within = (low is None and high is None) or any(_between(part, low, high) for part in view.parts)
    return within and (polarised is None or any(part.polarised == polarised for part in view.parts))


def _between(part: RatedPart, low: Spread | None, high: Spread | None) -> bool:
    if not isinstance(part.value, Known) or any(bound and bound.unit != _UNITS.get(part.kind) for bound in (low, high)):
        return False
    return (low is None or part.value.si >= low.nominal) and (high is None or part.value.si <= high.nominal)


_Test = Callable[[tuple[str, ...], View], bool]
TESTS: Final[Mapping[str, _Test]] = {
    "role": lambda wanted, view: _within(wanted, view.roles),
    "name": lambda wanted, view: _named(wanted, view),
    "net": lambda wanted, view: globbed(wanted, view.nets),
    "pin": lambda wanted, view: globbed(wanted, view.feeds),
    "part": lambda wanted, view: globbed(wanted, (part.ref for part in view.parts)),
    "sheet": lambda wanted, view: globbed(wanted, (part.part.sheet for part in view.parts)),
    "kind": lambda wanted, view: _within(wanted, (part.kind for part in view.parts)),
    "kind_fed": lambda wanted, view: _within(wanted, view.kinds_fed),
    "dielectric": lambda wanted, view: _within(wanted, (part.dielectric or "" for part in view.parts)),
    "certainty": lambda wanted, view: _within(wanted, (view.certainty,)),
}
"""Key -> whether one of the texts given for it matches."""
