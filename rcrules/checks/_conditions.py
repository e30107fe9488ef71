"""Facts that conditions compare: which are not known at a subject, in words, and what would give them."""

from collections.abc import Iterator
from typing import Final

from rcrules.checks._facts import facts, unknown
from rcrules.checks._lookup import Missing
from rcrules.checks._subject import Subject
from rcrules.checks._views import View
from rcrules.networks import Board
from rcrules.parts import RatedPart, Unknown
from rcrules.rulebook import Rule, Selection, facts_of

FACT_WORDS: Final = {
    "rated_voltage": ("the rated voltage is", "a field of the BOM or [part]"),
    "supply": ("the voltage of the supply is", "[supply]"),
    "voltage": ("the voltage there is", "[supply] or [net]"),
}
"""Fact of a condition -> what is missing, and what would give it."""


def compared(selection: Selection) -> tuple[str, ...]:
    """The facts that its conditions compare, without their ends: ``voltage``, ``rated_voltage``, ``supply``."""
    return tuple(sorted({name.rpartition("_")[0] for name in _named(selection)}))


def condition(rule: Rule, subject: Subject, board: Board) -> Missing:
    """What must be known to tell whether a rule meets a subject, and the lines that would tell it."""
    told = [facts(view, board) for view in subject.views]
    missing = [name for name in compared(rule.selection) if not all(f"{name}_nominal" in known for known in told)]
    words = " or ".join(FACT_WORDS[name][0] for name in missing)
    reason = f"{words} not known, and the rule is for {rule.selection.when_text or 'some only'}"
    lines = [line for name in missing for line in _lines(name, subject, board)]
    return Missing(reason=reason, ask=tuple(dict.fromkeys(lines)))


def _lines(name: str, subject: Subject, board: Board) -> Iterator[str]:
    if name == "rated_voltage":
        yield from (_rating(board.parts[ref]) for ref in subject.refs)
        return
    if name == "voltage" and subject.kind == "capacitor" and any(_loose(view, board) for view in subject.views):
        yield f'[part."{subject.refs[0]}"] voltage-across = "…"'
        return
    for held in (held for view in subject.views for held in unknown(view, board)):
        yield f'[supply."{held.net}"] voltage = "…"' if held.kind == "supply" else f'[net."{held.net}"] swing = "…"'


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
