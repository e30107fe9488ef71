"""Long lines folded at the width of a terminal, what follows set under what it belongs to."""

import re
from collections.abc import Iterable
from itertools import groupby
from typing import Final

from rcrules.reports._columns import cells
from rcrules.reports._lines import Line, joined, safe

_LEAST: Final = 40
"""On a narrower terminal lines stay whole."""
_LABEL: Final = 16
"""The longest first word under which nothing else stands."""
_HANGING: Final = 8
_FURTHER: Final = 4
_GLUED: Final = re.compile(r"(?<=\d) (?=[^\s\d.(\[])|(?<= \.\.) ")
"""A blank between a number and its unit, or between the dots of a range and what follows."""
_OUTER: Final = re.compile(r"\S+(?: \S+)*? {2,}")
_INNER: Final = re.compile(r"\S+(?: \S+)*? {2}(?! )")
"""A first word with its gap; further in, three blanks part columns, and two follow a word such as ``why``."""

Styled = list[tuple[str, str]]
"""Letters with their styles."""


def laid_out(lines: Iterable[Line], *, color: bool, width: int | None) -> str:
    """All lines as one text, folded at the width of the terminal; None = every line stays whole."""
    return joined(lines if width is None else (part for line in lines for part in folded(line, width)), color=color)


def folded(line: Line, width: int) -> list[Line]:
    """The line as lines of at most ``width`` columns; what cannot be folded stays long."""
    letters = _letters(line)
    if width < _LEAST or cells("".join(letter for letter, _ in letters)) <= width:
        return [line]
    lines: list[Line] = []
    hanging = _hanging("".join(letter for letter, _ in letters), width)
    while letters:
        end = _end(letters, width, start=hanging if lines else 0)
        lines.append(_spans(letters[:end]))
        letters = letters[end:]
        while letters and letters[0][0] == " ":
            del letters[0]
        if letters:
            letters = [(" ", "")] * hanging + letters
    return lines


def _letters(line: Line) -> Styled:
    spans = [(span, "") if isinstance(span, str) else span for span in line]
    letters = [(letter, style) for text, style in spans for letter in safe(text)]
    while letters and letters[-1][0] == " ":
        letters.pop()
    return letters


def _hanging(text: str, width: int) -> int:
    """Where further lines start: behind a short first word and its gap, else a little further in."""
    indent = len(text) - len(text.lstrip(" "))
    gap = (_INNER if indent else _OUTER).match(text, indent)
    if gap and gap.end() - indent <= _LABEL and gap.end() <= width // 2:
        return gap.end()
    return indent + _FURTHER if indent else _HANGING


def _end(letters: Styled, width: int, *, start: int) -> int:
    """Index of the blank at which the line ends: the gap between two columns, if one lies in its last third."""
    text = "".join(letter for letter, _ in letters)
    if cells(text) <= width:
        return len(text)
    first = max(start, len(text) - len(text.lstrip(" "))) + 1
    blanks = [index for index in range(first, len(text)) if _breaks(letters, text, index)]
    fitting = [index for index in blanks if cells(text[:index]) <= width]
    gaps = [index for index in fitting if text.startswith("   ", index) and text[index - 1] != " "]
    if gaps and 3 * cells(text[: gaps[-1]]) >= 2 * width:
        return gaps[-1]
    return (fitting[-1:] or blanks[:1] or [len(text)])[0]


def _breaks(letters: Styled, text: str, index: int) -> bool:
    """Whether a line may end here: at a blank, but not before a unit, nor in a name or a line to copy."""
    return text[index] == " " and letters[index][1] != "name" and not _GLUED.match(text, index)


def _spans(letters: Styled) -> Line:
    runs = groupby(letters, key=lambda item: item[1])
    return tuple(("".join(letter for letter, _ in run), style) for style, run in runs)
