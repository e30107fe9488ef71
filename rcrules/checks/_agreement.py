"""Whether the inputs of a board say the same about a part."""

from collections.abc import Iterable
from typing import Final

from rcrules.design import Difference
from rcrules.networks import Board
from rcrules.parts import RatedPart, read_value
from rcrules.rulebook import Rule
from rcrules.vocabulary import AGREEMENT

AGREED: Final = "yes"


def agreement(fact: str, part: RatedPart) -> str:
    """``yes``, or what they say, each with its place."""
    about = fact.removeprefix(AGREEMENT)
    if about == "ratings":
        return "; ".join(part.disagreements) or AGREED
    told = [item.text for item in part.part.differences if item.about == about and not _says_so_too(item, part)]
    if about == "listing" and not part.fitted:
        return AGREED  # what is left out need not be listed
    return "; ".join(told) or AGREED


def _says_so_too(item: Difference, part: RatedPart) -> bool:
    """Whether texts that differ mean the same: one value, or a part that is listed without a mark and is not fitted."""
    if item.about not in ("fitting", "value"):
        return False
    read = [read_value(fact.text, part.kind) for fact in item.said]
    if item.about == "fitting":
        return any(not found.fitted for found in read)
    return None not in (values := {found.value for found in read}) and len(values) == 1


def differing(board: Board) -> list[RatedPart]:
    """Resistors and capacitors about which several inputs say different things; none of one input alone."""
    if len(board.design.exports) < 2:
        return []
    parts = (part for part in board.parts.values() if part.kind in ("resistor", "capacitor"))
    return [part for part in parts if part.part.differences or part.disagreements]


def agreeing(rules: Iterable[Rule], board: Board) -> frozenset[str]:
    """Parts of which the rules judge whether the inputs agree, so that no remark needs to tell it."""
    judged = any(rule.fact.startswith(AGREEMENT) for rule in rules)
    return frozenset(part.ref for part in differing(board)) if judged else frozenset()
