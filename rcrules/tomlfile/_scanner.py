"""A walk over the surface of a TOML text, for the place of every key and value."""

import re
import tomllib
from typing import Final

Path = tuple[str | int, ...]
"""Keys and array indexes from the root: ``("rule", 2, "at-least")``."""
Span = tuple[int, int]
"""Offsets in the text: first character, and the one after the last."""

_BLANK: Final = re.compile(r"(?:[ \t\n,]++|#[^\n]*+)*+")
_KEY: Final = re.compile(r'[ \t]*+("(?:[^"\\]++|\\.)*+"|\'[^\']*+\'|[A-Za-z0-9_-]++)[ \t]*+')
_STRING: Final = re.compile(
    r'"""(?:[^\\"]++|\\.|"(?!""))*+"{3,5}|\'\'\'(?:[^\']++|\'(?!\'\'))*+\'{3,5}|"(?:[^"\\]++|\\.)*+"|\'[^\']*+\'',
    re.DOTALL,
)
_SCALAR: Final = re.compile(r"\d{4}-\d\d-\d\d [\d:.]++(?:[Zz]|[+-][\d:]++)?|[^\s,\]}#]++")


class Scanner:
    """Notes the places in a text that the TOML reader has accepted."""

    def __init__(self, text: str) -> None:
        self.text, self.at = text, 0
        self.keys: dict[Path, Span] = {}
        self.values: dict[Path, Span] = {}
        self.counts: dict[Path, int] = {}
        """Tables so far of each array of tables."""
        self.open: list[tuple[Path, int, int]] = []
        """Open arrays and inline tables: path, start, next index (-1 = inline table)."""
        self.table: Path = ()

    def run(self) -> None:
        """Walk the text once."""
        while True:
            self.at = match.end() if (match := _BLANK.match(self.text, self.at)) else self.at
            if self.at >= len(self.text):
                return
            if self.open:
                self._item()
            elif self.text[self.at] == "[":
                self._header()
            else:
                self._pair(self.table)

    def _item(self) -> None:
        """The next element of the innermost array or inline table, or its end."""
        path, start, index = self.open[-1]
        if self.text[self.at] in "]}":
            self.at += 1
            self.open.pop()
            self.values[path] = (start, self.at)
        elif index < 0:
            self._pair(path)
        else:
            self.open[-1] = (path, start, index + 1)
            self._value((*path, index))

    def _header(self) -> None:
        """``[a.b]`` or ``[[a.b]]``: what follows belongs to that table."""
        start, many = self.at, self.text.startswith("[[", self.at)
        self.at += 2 if many else 1
        path: Path = ()
        steps = self._steps()
        for number, (step, span) in enumerate(steps, start=1):
            path = (*path, step)
            last = number == len(steps)
            if last and many:
                self.counts[path] = self.counts.get(path, 0) + 1
            self._note(path, span, explicit=last and path not in self.counts)
            if path in self.counts:
                path = (*path, self.counts[path] - 1)
        self.at += 2 if many else 1
        self.values[path] = (start, self.at)
        self.table = path

    def _pair(self, base: Path) -> None:
        """``a.b = value`` in the table ``base``."""
        path = base
        steps = self._steps()
        for number, (step, span) in enumerate(steps, start=1):
            path = (*path, step)
            self._note(path, span, explicit=number == len(steps))
        self.at += 1
        self.at = match.end() if (match := _BLANK.match(self.text, self.at)) else self.at
        self._value(path)

    def _note(self, path: Path, span: Span, *, explicit: bool) -> None:
        """A key; the tables on the way to one keep their first mention until their own header comes."""
        if explicit or path not in self.keys:
            self.keys[path] = self.values[path] = span

    def _steps(self) -> list[tuple[str, Span]]:
        """The steps of a dotted key with their spans."""
        steps = []
        while match := _KEY.match(self.text, self.at):
            steps.append((_plain(match[1]), match.span(1)))
            self.at = match.end()
            if not self.text.startswith(".", self.at):
                break
            self.at += 1
        return steps

    def _value(self, path: Path) -> None:
        """A value starts here; arrays and inline tables are opened and closed later."""
        if self.text[self.at] in "[{":
            self.open.append((path, self.at, 0 if self.text[self.at] == "[" else -1))
            self.values[path] = (self.at, self.at + 1)
            self.at += 1
            return
        match = _STRING.match(self.text, self.at) or _SCALAR.match(self.text, self.at)
        end = match.end() if match else self.at + 1
        self.values[path] = (self.at, end)
        self.at = end


def _plain(raw: str) -> str:
    """A key as the data has it, without quotes and escapes."""
    if raw[0] == '"' and "\\" in raw:
        return str(tomllib.loads(f"k = {raw}")["k"])
    return raw[1:-1] if raw[0] in "'\"" else raw
