"""Facts that conditions compare: which are not known at a subject, in words, and what would give them."""

from collections.abc import Callable, Iterator, Mapping
from typing import Final

from rcrules.checks._facts import facts, tolerance, unknown, words
from rcrules.checks._lookup import Missing
from rcrules.checks._subject import Subject
from rcrules.checks._views import View
from rcrules.networks import Board
from rcrules.parts import RatedPart, Unknown
from rcrules.project import line_for
from rcrules.rulebook import WORDS, Rule, Selection, facts_of

_OF_PARTS: Final = "a field of the BOM or [part]"
_FACT_WORDS: Final = {
    "supply": ("the voltage of the supply", "[supply]"),
    "voltage": ("the voltage there", "[supply] or [net]"),
}
"""Fact of a condition -> what is missing, and what would give it; all others are facts of parts."""
_ENDS: Final = ("_low", "_nominal", "_high")
_LACKS: Final[Mapping[str, tuple[Callable[[RatedPart], bool], str]]] = {
    "dielectric": (lambda part: part.kind == "capacitor" and not part.dielectric, "dielectric"),
    "technology": (lambda part: part.kind == "capacitor" and not part.dielectric, "dielectric"),
    "tolerance": (lambda part: tolerance(part) is None, "tolerance"),
    "rated_power": (lambda part: part.kind == "resistor" and isinstance(part.rated_power, Unknown), "rated_power"),
}
"""Fact of parts -> whether a part lacks it, and the key that would give it."""


def compared(selection: Selection) -> tuple[str, ...]:
    """The facts that its conditions compare, without their ends: ``voltage``, ``rated_voltage``, ``dielectric``."""
    return tuple(sorted({_plain(name) for name in _named(selection)}))


def missing(names: tuple[str, ...]) -> tuple[str, str]:
    """``the rated voltage is``, and what can tell it."""
    told = [_FACT_WORDS.get(name, (f"the {name.replace('_', ' ')}", _OF_PARTS)) for name in names]
    return " or ".join(f"{what} is" for what, _ in told), " or ".join(dict.fromkeys(source for _, source in told))


def condition(rule: Rule, subject: Subject, board: Board) -> Missing:
    """What must be known to tell whether a rule meets a subject, and the lines that would tell it."""
    names = tuple(dict.fromkeys(map(_plain, (name for name in _named(rule.selection) if _open(name, subject, board)))))
    reason = f"{missing(names)[0]} not known, and the rule is for {rule.selection.when_text or 'some only'}"
    lines = [line for name in names for line in _lines(name, subject, board)]
    return Missing(reason=reason, ask=tuple(dict.fromkeys(lines)))


def _plain(name: str) -> str:
    """``rated_voltage`` of ``rated_voltage_low``."""
    return next((name.removesuffix(end) for end in _ENDS if name.endswith(end)), name)


def _open(name: str, subject: Subject, board: Board) -> bool:
    """Whether a fact is not known at one of the nodes of a subject."""
    if name in WORDS:
        return any("" in words(view)[name] for view in subject.views)
    return any(name not in facts(view, board) for view in subject.views)


def _lines(name: str, subject: Subject, board: Board) -> Iterator[str]:
    if name == "voltage" and subject.kind == "capacitor" and any(_loose(view, board) for view in subject.views):
        yield f'[part."{subject.refs[0]}"] voltage-across = "…"'
    elif name in _FACT_WORDS:
        for held in (held for view in subject.views for held in unknown(view, board)):
            yield f'[supply."{held.net}"] voltage = "…"' if held.kind == "supply" else f'[net."{held.net}"] swing = "…"'
    elif name == "rated_voltage":
        yield from (_rating(board.parts[ref]) for ref in subject.refs)
    else:
        lacks, given_by = _LACKS.get(name, (lambda _: False, name))
        parts = (board.parts[ref] for ref in subject.refs)
        yield from (line_for("part", part.ref, given_by) for part in parts if lacks(part))


def _loose(view: View, board: Board) -> bool:
    """Whether an end of the subject is at a net that nothing holds, so that no voltage of another net would help."""
    return any(net not in board.held for net in view.around)


def _rating(part: RatedPart) -> str:
    """The line that gives a rated voltage: of all capacitors, where many lack one."""
    own = f'[part."{part.ref}"] rated-voltage = "…"'
    return part.rated_voltage.ask or own if isinstance(part.rated_voltage, Unknown) else own


def _named(selection: Selection) -> Iterator[str]:
    if selection.when is not None:
        yield from facts_of(selection.when)
    for item in (*selection.any_of, *selection.exclude):
        yield from _named(item)
