"""Where each resistor and capacitor ends: judged, undecided, met by no rule, or nothing for rules."""

from collections.abc import Iterable, Mapping
from typing import Final

from rcrules.findings import Finding
from rcrules.inventory._parts import listed
from rcrules.networks import Board
from rcrules.vocabulary import AGREEMENT

CLASSES: Final = ("not_fitted", "unreadable", "judged", "undecided", "unruled", "decoupling", "elsewhere")
"""In the order in which they apply."""


def coverage(board: Board, findings: Iterable[Finding]) -> Mapping[str, str]:
    """Reference of each listed part -> the first class that applies."""
    judged: set[str] = set()
    undecided: set[str] = set()
    for item in (item for item in findings if not item.measure.startswith(AGREEMENT)):
        (undecided if item.outcome == "undecided" else judged).update(item.parts)
    before = {part.ref: board.coverage.get(part.ref, "elsewhere") for part in listed(board)}
    return {ref: _class(ref, name, judged, undecided) for ref, name in before.items()}


def _class(ref: str, before: str, judged: set[str], undecided: set[str]) -> str:
    if before in ("not_fitted", "unreadable"):
        return before
    if ref in judged:
        return "judged"
    if ref in undecided:
        return "undecided"
    return "unruled" if before == "network" else before


def counts(classes: Mapping[str, str]) -> dict[str, int]:
    """Class -> number of parts, every class named."""
    found = list(classes.values())
    return {name: found.count(name) for name in CLASSES}
