"""Which keys of a rule leave a subject out, and what stands there instead."""

from collections.abc import Iterator
from dataclasses import dataclass

from rcrules.checks._select import TESTS, matches, valued
from rcrules.checks._subject import Subject
from rcrules.checks._views import View
from rcrules.networks import Board
from rcrules.parts import Known
from rcrules.quantities import show
from rcrules.rulebook import Selection
from rcrules.tomlfile import listed


@dataclass(frozen=True, slots=True, kw_only=True)
class Excluded:
    """A key of a rule that does not fit a subject."""

    key: str
    """As rules write it."""
    there: str
    """What the subject has, in words; '' where the rule's own words say enough."""


def excluded(selection: Selection, subject: Subject, board: Board) -> list[Excluded]:
    """The keys that leave a subject out, at the node where they are fewest; none where it may be met."""
    found = [list(_of(selection, view, board)) for view in subject.views]
    return min(found, key=len, default=[])


def _of(selection: Selection, view: View, board: Board) -> Iterator[Excluded]:
    for name, test in TESTS.items():
        wanted = getattr(selection, name)
        if wanted and not test(wanted, view):
            told = f"{_there(name, view)}, asked for {listed(wanted)}"
            yield Excluded(key=name.replace("_", "-"), there=told)
    if not valued(selection, view):
        yield Excluded(key="value" if selection.polarised is None else "value or polarised", there=_values(view))
    if matches(Selection(when=selection.when), view, board) is False:
        yield Excluded(key="when", there=f"not where {selection.when_text}")
    if selection.any_of and not any(matches(item, view, board) is not False for item in selection.any_of):
        yield Excluded(key="any-of", there="")
    if any(matches(item, view, board) is True for item in selection.exclude):
        yield Excluded(key="not", there="")


def _there(name: str, view: View) -> str:
    """What a view has where a key asks for something else."""
    found = {
        "role": view.roles,
        "name": view.nets,
        "net": view.nets,
        "pin": view.feeds,
        "part": tuple(part.ref for part in view.parts),
        "sheet": tuple(dict.fromkeys(part.part.sheet for part in view.parts)),
        "kind": tuple(dict.fromkeys(part.kind for part in view.parts)),
        "kind_fed": view.kinds_fed,
        "dielectric": tuple(part.dielectric or "not given" for part in view.parts if part.kind == "capacitor"),
        "certainty": (view.certainty,),
    }[name]
    return ", ".join(item for item in found if item) or "none"


def _values(view: View) -> str:
    known = [(part.value.si, part.kind) for part in view.parts if isinstance(part.value, Known)]
    return ", ".join(show(value, "F" if kind == "capacitor" else "Ω") for value, kind in known) or "not known"
