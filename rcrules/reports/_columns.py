"""Texts on a terminal: how wide they are, and cells under one another."""

from collections.abc import Iterable, Sequence
from typing import Final
from unicodedata import combining, east_asian_width

from rcrules.reports._lines import Line, Span, safe

_GAP: Final = "   "
_MOST: Final = 44
"""A wider cell does not push the others aside; what follows it in its row moves to the right."""


def cells(text: str) -> int:
    """Columns that a text takes."""
    return len(text) if text.isascii() else sum(_cell(letter) for letter in text)


def _cell(letter: str) -> int:
    return 0 if combining(letter) else 2 if east_asian_width(letter) in ("W", "F") else 1


def aligned(rows: Iterable[Sequence[Span]], indent: str = "") -> list[Line]:
    """One line a row, its cells under those of the other rows; empty columns are left out."""
    table = [list(row) for row in rows]
    widths = [max(map(_fitting, column)) for column in zip(*table, strict=True)]
    return [(indent, *_padded(row, widths)) for row in table]


def _fitting(span: Span) -> int:
    width = cells(safe(_text(span)))
    return width if width <= _MOST else 0


def _text(span: Span) -> str:
    return span if isinstance(span, str) else span[0]


def _padded(row: Sequence[Span], widths: Sequence[int]) -> list[Span]:
    """The cells of one row with the blanks between them."""
    line: list[Span] = []
    for span, width in zip(row, widths, strict=True):
        if width or _text(span):
            blanks = max(width - cells(safe(_text(span))), 0)
            line += [span, " " * blanks + _GAP]
    return line
