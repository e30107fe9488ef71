"""The head of the page: counts as tiles, and under what conditions."""

from collections import Counter
from dataclasses import dataclass

from rcrules.findings import Document
from rcrules.reports._text_summary import found_text, share_text
from rcrules.reports._words import number
from rcrules.vocabulary import SEVERITIES

_WORDS = {"error": ("error", "errors"), "warning": ("warning", "warnings"), "note": ("note", "notes")}


@dataclass(frozen=True, slots=True, kw_only=True)
class Tile:
    """One count."""

    look: str
    """Style class."""
    number: int
    word: str


def tiles(document: Document) -> list[Tile]:
    """Failing findings by level, undecided ones, those that hold, those waived; what there is none of is left out."""
    failing = Counter(item.level for item in document.findings if item.outcome == "fails")
    outcomes = Counter(item.outcome for item in document.findings)
    found = [Tile(look=level, number=failing[level], word=_WORDS[level][failing[level] != 1]) for level in SEVERITIES]
    words = {"undecided": "undecided", "holds": "hold", "waived": "waived"}
    found += [Tile(look=outcome, number=outcomes[outcome], word=word) for outcome, word in words.items()]
    return [tile for tile in found if tile.number or tile.look in ("error", "holds")]


def facts(document: Document) -> list[tuple[str, str]]:
    """What was judged, and under what conditions."""
    told = [("Board", found_text(document))]
    if document.packs:
        told.append(("Decided", share_text(document).strip()))
    for name, row in document.conditions.items():
        ends = dict.fromkeys(number(row[end], row["unit"]) for end in ("low", "high") if row[end] is not None)
        told.append((name.capitalize(), " .. ".join(ends) or "not given"))
    return told
