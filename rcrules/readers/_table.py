"""Delimited text: rows of cells, each with its place."""

import re
from collections import Counter
from collections.abc import Callable, Iterator, Sequence
from contextlib import suppress
from dataclasses import dataclass
from itertools import accumulate, islice
from typing import Final

from rcrules.errors import UserMistake
from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten

DELIMITERS: Final = (",", ";", "\t", "|")
MAX_COLUMNS: Final = 1024
MAX_CELL: Final = 131_072
"""Characters of the longest cell."""
MAX_CELLS: Final = 1_000_000
_LINE: Final = re.compile(r"([^\r\n]*+)(?:\r\n|\n|\r|\Z)")
_EMPTY: Final = re.compile(r"[\r\n]++")
"""Empty lines, from the start of the first to the end of the last."""
_WHOLE: Final = re.compile(r"(?<![\w.,])\d{1,3}$")
_FRACTION: Final = re.compile(r"\d+ ?[^\W\d_]")
_SAMPLE: Final = 400
"""Rows by which the delimiter is chosen."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """One row: cell texts without blanks around them, and where each cell starts."""

    line: int
    cells: tuple[str, ...]
    columns: tuple[int, ...]
    """Column of the file at which each cell starts, from 1; 0 where it is not known."""
    delimiter: str

    def cell(self, index: int | None) -> str:
        """Text of a cell, '' where the row is too short or no index is given."""
        return self.cells[index] if index is not None and index < len(self.cells) else ""

    def blank(self) -> bool:
        """True where no cell holds text."""
        return not any(self.cells)


def rows(source: Source, text: str, is_header: Callable[[Sequence[str]], bool]) -> tuple[Row, ...]:
    """All rows that hold text, split at the delimiter that fits best.

    That is the one under which a header row is recognised, else the one that cuts most rows into one same number of
    cells. Raises UserMistake where a quoted cell is not closed or a row has too many cells.
    """
    best: tuple[tuple[bool, int, int], str] | None = None
    for delimiter in DELIMITERS:
        if delimiter in text:
            sample = _split(source, text, delimiter, _SAMPLE)
            score = _score(sample, is_header)
            if best is None or score > best[0]:
                best = score, delimiter
    return _split(source, text, best[1] if best else ",", None)


def rejoined(row: Row, width: int) -> Row:
    """The row with decimal commas put back that cut a number in two, ``4`` and ``7uF``, as far as it is too long."""
    cells, columns = list(row.cells), list(row.columns)
    index = 0
    while row.delimiter == "," and len(cells) > width and index + 1 < len(cells):
        adjacent = columns[index + 1] == columns[index] + len(cells[index]) + 1
        if adjacent and _WHOLE.search(cells[index]) and _FRACTION.match(cells[index + 1]):
            cells[index : index + 2] = [f"{cells[index]},{cells[index + 1]}"]
            del columns[index + 1]
        else:
            index += 1
    return Row(line=row.line, cells=tuple(cells), columns=tuple(columns), delimiter=row.delimiter)


def _score(sample: Sequence[Row], is_header: Callable[[Sequence[str]], bool]) -> tuple[bool, int, int]:
    widths = Counter(len(row.cells) for row in sample if len(row.cells) > 1)
    width, count = max(widths.items(), key=lambda item: (item[1], item[0])) if widths else (0, 0)
    return any(is_header(row.cells) for row in sample), count, width


def _split(source: Source, text: str, delimiter: str, limit: int | None) -> tuple[Row, ...]:
    """Rows of text cut at the delimiter outside quotes; blank rows are left out; with a limit, nothing is refused."""
    rows = (row for row in _cut(source, text, delimiter) if not row.blank())
    if limit is None:
        return tuple(rows)
    found: list[Row] = []
    with suppress(UserMistake):  # at the wrong delimiter, perhaps; at the right one it is raised when all is read
        found.extend(islice(rows, limit))
    return tuple(found)


def _cut(source: Source, text: str, delimiter: str) -> Iterator[Row]:
    """Every row, also blank ones, but none for an empty line. Raises UserMistake."""
    cell = _cell_pattern(delimiter)
    at, line, count = 0, 1, 0
    while at < len(text):
        if text[at] in "\r\n":
            empty = _EMPTY.match(text, at)
            assert empty is not None  # it starts with a line end
            at, line = empty.end(), line + _line_ends(empty[0])
            continue
        plain = _LINE.match(text, at)
        assert plain is not None  # it also takes an empty line
        if '"' in plain[1] or len(plain[1]) > MAX_CELL:
            row, at, next_line = _quoted_row(source, text, at, line, delimiter, cell)
        else:
            row, at, next_line = _plain_row(plain[1], line, delimiter), plain.end(), line + 1
        count += len(row.cells)
        if len(row.cells) > MAX_COLUMNS or count > MAX_CELLS:
            raise _too_many(source, line, len(row.cells))
        yield row
        line = next_line


def _plain_row(text: str, line: int, delimiter: str) -> Row:
    """A row without quotes."""
    if delimiter not in text:
        return Row(line=line, cells=(text.strip(),), columns=(1,), delimiter=delimiter)
    pieces = text.split(delimiter)
    starts = accumulate(map(len, pieces[:-1]), lambda start, length: start + length + 1, initial=1)
    return Row(line=line, cells=tuple(map(str.strip, pieces)), columns=tuple(starts), delimiter=delimiter)


def _quoted_row(
    source: Source, text: str, start: int, line: int, delimiter: str, cell: re.Pattern[str]
) -> tuple[Row, int, int]:
    """A row in which cells may be quoted, the offset behind it, and the line there."""
    cells: list[str] = []
    columns: list[int] = []
    at, last = start, line
    while True:
        match = cell.match(text, at)
        assert match is not None  # the pattern also takes an empty cell
        quoted, rest, end = match.groups()
        columns.append(at - start + 1)
        if quoted is None and rest.lstrip(" ").startswith('"'):
            raise _not_closed(source, last, columns[-1], rest)
        if match.end() - at > MAX_CELL:
            raise _too_long(source, last, columns[-1])
        cells.append(_cell_text(quoted, rest))
        last += _line_ends(quoted) if quoted else 0
        at = match.end()
        if end != delimiter or len(cells) > MAX_COLUMNS:
            return Row(line=line, cells=tuple(cells), columns=tuple(columns), delimiter=delimiter), at, last + 1


def _cell_pattern(delimiter: str) -> re.Pattern[str]:
    """Quoted part (1), what follows it or stands alone (2), delimiter or line end (3)."""
    mark = re.escape(delimiter)
    quoted = rf'[ ]*+"((?:[^"]++|"")*+)"(?=[ ]*+(?:{mark}|[\r\n]|\Z))'
    return re.compile(rf"(?:{quoted})?([^{mark}\r\n]*+)({mark}|\r\n|\n|\r|\Z)")


def _cell_text(quoted: str | None, rest: str) -> str:
    text = (rest if quoted is None else quoted.replace('""', '"')).strip()
    return text[2:-1] if text.startswith('="') and text.endswith('"') and len(text) > 2 else text


def _line_ends(text: str) -> int:
    return text.count("\n") + text.count("\r") - text.count("\r\n")


def _too_long(source: Source, line: int, column: int) -> UserMistake:
    return refusal(
        source.name,
        "a cell is too long",
        line=line,
        column=column,
        expected=f"at most {MAX_CELL} characters",
        do="check that the file is a table and was not damaged",
    )


def _too_many(source: Source, line: int, width: int) -> UserMistake:
    return refusal(
        source.name,
        "a row has too many cells" if width > MAX_COLUMNS else "the table is too large",
        line=line,
        expected=f"at most {MAX_COLUMNS} cells in a row and {MAX_CELLS} in all",
        do="check that the file is the table of one board and was not damaged",
    )


def _not_closed(source: Source, line: int, column: int, rest: str) -> UserMistake:
    return refusal(
        source.name,
        "a quoted cell is not closed",
        line=line,
        column=column,
        found=shorten(rest.strip()),
        expected='a closing " before the next delimiter; a " inside is written twice',
        do="export the table again, or mend this cell",
    )
