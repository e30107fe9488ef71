"""What broke, what mended, what moved against a saved document, in words."""

from collections import Counter
from collections.abc import Iterator, Mapping
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._lines import Line
from rcrules.reports._words import bounds, count, number, parts_text

_INDENT: Final = " " * 8
_SHOWN: Final = 12
"""Rows of one kind; the rest is counted, unless all are asked for."""
_SHOWN_CAUSES: Final = 6
_WORDS: Final = {"broke": "broke", "still failing": "still fail", "mended": "mended", "moved": "moved"}
_LOOKS: Final = {"broke": "fails error", "still failing": "fails note", "mended": "good", "moved": "open"}


def comparison_lines(document: Document, texts: Mapping[str, str], *, verbose: bool) -> list[Line]:
    """The counts, then every finding that broke, mended or moved, with its causes; what fails as before is counted."""
    found = document.comparison
    if found is None:
        return []
    lines: list[Line] = [(), _counts(found)]
    for change in _WORDS:
        rows = [row for row in found["findings"] if row["change"] == change]
        told = rows if verbose or change != "still failing" else [row for row in rows if row["was"] != row["now"]]
        shown = told if verbose else told[:_SHOWN]
        lines += [line for row in shown for line in _row(row, texts)]
        if rest := len(told) - len(shown):
            lines.append((_INDENT, f"{rest} more {_WORDS[change]} (--verbose lists them)"))
    return [*lines, *_networks(found["networks"])]


def _counts(found: Json) -> Line:
    return (("against", "name"), f"   {found['board']} as saved   {counts_text(found)}")


def counts_text(found: Json) -> str:
    """``1 broke, 2 mended, 199 still fail``."""
    counts = Counter(row["change"] for row in found["findings"])
    told = [f"{counts[change]} {word}" for change, word in _WORDS.items() if counts[change]]
    return ", ".join(told) or "no finding changed"


def _row(row: Json, texts: Mapping[str, str]) -> Iterator[Line]:
    change = row["change"]
    word = "fails" if change == "still failing" else change
    where = "   ".join(filter(None, (row["net"], parts_text(row["parts"], texts))))
    yield ((f"{word:<8}", _LOOKS[change]), (row["rule"], "name"), f"   {where}")
    yield (_INDENT, "was  ", verdict_text(row["was"]))
    yield (_INDENT, "now  ", verdict_text(row["now"]))
    if row["causes"]:
        yield (_INDENT, "since  ", causes_text(row["causes"]))


def verdict_text(verdict: Json | None) -> str:
    """``fails   21.9 ms .. 35.7 ms .. 49.7 ms   at least 30 ms``."""
    if verdict is None:
        return "not there"
    measured, limit = verdict["measured"], verdict["limit"] or {}
    words = [verdict["outcome"]]
    if measured is not None:
        words.append(bounds(measured["low"], measured["nominal"], measured["high"], measured["unit"]))
    names = {"at_least": "at least", "at_most": "at most"}
    words += [f"{name} {number(limit[key], limit['unit'])}" for key, name in names.items() if key in limit]
    return "   ".join(words)


def causes_text(causes: list[str]) -> str:
    """``C7 10 µF → 4.7 µF, R12 removed (10 kΩ), 3 more``."""
    rest = len(causes) - _SHOWN_CAUSES
    return ", ".join([*causes[:_SHOWN_CAUSES], *([f"{rest} more"] if rest > 0 else [])])


def _networks(networks: Json) -> Iterator[Line]:
    for change, ids in networks.items():
        if ids:
            shown = ", ".join(ids[:_SHOWN]) + (f" and {len(ids) - _SHOWN} more" if len(ids) > _SHOWN else "")
            yield (_INDENT, f"{count(len(ids), 'network')} {change}  {shown}")
