"""TOML files with the place of every key and value.

Python's own reader gives the data, and a position for mistakes of syntax only; ``Scanner`` walks the text once more,
without recursion, and notes where each key and value stands. Source of the grammar: TOML 1.0.0.
"""

import pathlib
import re
import tomllib
from bisect import bisect_right
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Final, Literal

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.tomlfile._scanner import Path, Scanner, Span

MAX_CHARACTERS: Final = 1_000_000
MAX_DEPTH: Final = 24
"""Arrays and inline tables inside each other; steps of a dotted key."""

_GUARD: Final = re.compile(
    r'"""(?:[^\\"]++|\\.|"(?!""))*+"{0,5}|\'\'\'(?:[^\']++|\'(?!\'\'))*+\'{0,5}'
    r'|"(?:[^"\\\n]++|\\.)*+"?|\'[^\'\n]*+\'?|#[^\n]*+|[\[{]|[\]}]|\.|[=,\n]',
    re.DOTALL,
)
"""Strings (also unterminated ones, so that each character is looked at once), comments, and the marks that nest."""
_ADVICE: Final = {
    "invalid value": 'put texts in quotes: key = "text"',
    "illegal character '\\n'": "close the quote on the same line, or write ''' around texts of several lines",
    "cannot overwrite a value": "say each key once",
    "cannot declare": "give each table its heading once; a list of tables has double brackets: [[rule]]",
}
"""What the TOML reader says, and what to do about it."""
_POSITION: Final = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")


@dataclass(frozen=True, slots=True, kw_only=True)
class TomlFile:
    """A parsed TOML file whose items know where they stand."""

    name: str
    data: Mapping[str, Any]
    text: str
    """Line ends are ``\\n``, without a byte-order mark."""
    keys: Mapping[Path, Place]
    """Where each key stands."""
    values: Mapping[Path, Place]
    """Where each value starts (for a string: its opening quote; for a table: its header, or its key)."""
    key_spans: Mapping[Path, Span] = field(default_factory=dict)
    spans: Mapping[Path, Span] = field(default_factory=dict)
    """Of the values."""

    def mistake(
        self,
        path: Path,
        problem: str,
        *,
        on: Literal["key", "value"] = "value",
        at: int | None = None,
        length: int = 1,
        found: str | None = None,
        expected: str | None = None,
        do: str | None = None,
    ) -> Mistake:
        """A mistake at a key or value with the marker under it; ``at`` and ``length`` point inside a string."""
        spans = self.key_spans if on == "key" else self.spans
        span = spans.get(path) or self._nearest(path)
        if at is not None:
            span = _inside(self.text, span, at, length)
        place, shown, marker = _marked(self.name, self.text, span)
        return Mistake(place=place, problem=problem, found=found, expected=expected, do=do, shown=shown, span=marker)

    def _nearest(self, path: Path) -> Span:
        """Where a value stands, or else the innermost table or list around it that stands somewhere."""
        return next((self.spans[path[:size]] for size in range(len(path), 0, -1) if path[:size] in self.spans), (0, 1))


def read(path: pathlib.Path, name: str) -> TomlFile:
    """Read a UTF-8 file and parse it; ``name`` is the path as messages show it. Raises UserMistake."""
    try:
        with path.open("rb") as stream:
            raw = stream.read(4 * MAX_CHARACTERS + 1)
    except OSError as error:
        raise _refused(name, f"cannot be read: {error.strerror or error}", do="check the path") from error
    try:
        return load(name, raw.decode("utf-8-sig"))
    except UnicodeDecodeError as error:
        line = raw.count(b"\n", 0, error.start) + 1
        raise _refused(name, "is not UTF-8 text", line=line, do="save the file as UTF-8") from error


def load(name: str, text: str) -> TomlFile:
    """Parse; bounded work. Raises UserMistake with line and column."""
    text = text.removeprefix("\ufeff").replace("\r\n", "\n")
    if len(text) > MAX_CHARACTERS:
        raise _refused(name, f"has more than {MAX_CHARACTERS} characters")
    _guard(name, text)
    try:
        data = tomllib.loads(text)
    except RecursionError as error:
        raise _refused(name, "arrays or tables are nested too deeply") from error
    except ValueError as error:
        raise UserMistake(_syntax(name, text, str(error))) from error
    scanner = Scanner(text)
    scanner.run()
    starts = _line_starts(text)
    return TomlFile(
        name=name,
        data=data,
        text=text,
        keys={path: _place(name, starts, span[0]) for path, span in scanner.keys.items()},
        values={path: _place(name, starts, span[0]) for path, span in scanner.values.items()},
        key_spans=scanner.keys,
        spans=scanner.values,
    )


def _refused(
    name: str, problem: str, *, line: int | None = None, found: str | None = None, do: str | None = None
) -> UserMistake:
    return UserMistake(Mistake(place=Place(file=name, line=line), problem=problem, found=found, do=do))


def _guard(name: str, text: str) -> None:
    """Refuse what would cost the parser recursion or quadratic time: deep nesting and long dotted keys."""
    depth = dots = 0
    for match in _GUARD.finditer(text):
        mark = match[0]
        if mark in "[{":
            depth, dots = depth + 1, 0
        elif mark in "]}":
            depth, dots = max(depth - 1, 0), 0
        elif mark == ".":
            dots += 1
        elif mark in "=,\n":
            dots = 0
        if depth > MAX_DEPTH or dots > MAX_DEPTH:
            what = "arrays or tables are nested too deeply" if depth > MAX_DEPTH else "a key has too many steps"
            place, shown, marker = _marked(name, text, match.span())
            raise UserMistake(
                Mistake(place=place, problem=what, expected=f"at most {MAX_DEPTH} levels", shown=shown, span=marker)
            )


def _syntax(name: str, text: str, message: str) -> Mistake:
    """A mistake of syntax; before Python 3.14 the position stands in the message only."""
    match = _POSITION.search(message)
    if match is None:
        return Mistake(place=Place(file=name), problem=f"not valid TOML: {message.split(';')[0].lower()}")
    at = len(text.rstrip())
    if match[1] is not None:
        at = _line_starts(text)[int(match[1]) - 1] + int(match[2]) - 1
    place, shown, marker = _marked(name, text, (at, at + 1))
    problem = f"not valid TOML: {message[: match.start()].lower()}"
    do = next((advice for words, advice in _ADVICE.items() if words in problem), None)
    return Mistake(place=place, problem=problem, do=do, shown=shown, span=marker)


def _line_starts(text: str) -> list[int]:
    return [0, *(match.end() for match in re.finditer("\n", text))]


def _place(name: str, starts: list[int], offset: int) -> Place:
    line = bisect_right(starts, offset)
    return Place(file=name, line=line, column=offset - starts[line - 1] + 1)


def _marked(name: str, text: str, span: Span) -> tuple[Place, str, Span]:
    """Place of a span, the line it stands on (cut to a window when long), and start and length of the marker."""
    begin = text.rfind("\n", 0, span[0]) + 1
    end = text.find("\n", span[0])
    line = text[begin:] if end < 0 else text[begin:end]
    column = span[0] - begin
    length = max(min(span[1] - span[0], len(line) - column), 1)
    place = Place(file=name, line=text.count("\n", 0, span[0]) + 1, column=column + 1)
    cut = max(column - 60, 0) if len(line) > 160 else 0
    shown = "".join(letter if letter.isprintable() else " " for letter in line[cut : cut + 160])
    return place, shown, (column - cut + 1, min(length, max(len(shown) - column + cut, 1)))


def _inside(text: str, span: Span, at: int, length: int) -> Span:
    """The part of a one-line string without escapes that starts ``at`` characters into it; else the whole string."""
    raw = text[span[0] : span[1]]
    if raw[:1] not in ("'", '"') or raw[:3] in ("'''", '"""') or "\\" in raw:
        return span
    start = min(span[0] + 1 + at, span[1] - 1)
    return start, min(start + max(length, 1), max(span[1] - 1, start + 1))
