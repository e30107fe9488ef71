"""Records of described files: rows of a table, elements of an XML, lines of a section; each with its line."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Final, cast

from rcrules.readers import _bounds
from rcrules.readers._mistakes import refusal
from rcrules.readers._table import rows
from rcrules.readers._text import numbered
from rcrules.readers._xml import MAX_MARKS, root_name
from rcrules.readers._xml_stream import Elements, local

if TYPE_CHECKING:
    from lxml.etree import _Element

    from rcrules.errors import UserMistake
    from rcrules.project import FileFormat, PathStep, Records, XmlPath
    from rcrules.readers._export import Source

Record = tuple[int, dict[str, str]]
"""Line, and cells by name."""
MAX_LINES: Final = 1_000_000
MAX_STEPS: Final = 2_000_000
"""Children that are looked at on all paths of one file."""


def table(source: Source, said: FileFormat, text: str, records: Records) -> Iterator[Record]:
    """Rows below the header that names every column. Raises UserMistake without one."""
    wanted = {cell: _plain(header) for cell, header in records.cells.items()}
    found = rows(source, text, lambda cells: {*wanted.values()} <= {_plain(cell) for cell in cells})
    at: dict[str, int] = {}
    header: tuple[str, ...] = ()
    for row in found:
        if not at:
            names = [_plain(cell) for cell in row.cells]
            if {*wanted.values()} <= {*names}:
                at, header = {cell: names.index(name) for cell, name in wanted.items()}, row.cells
        elif row.cells != header:
            yield row.line, {cell: row.cell(index) for cell, index in at.items()}
    if not at:
        raise _no_header(source, said, records, found[0].line if found else 1)


def _no_header(source: Source, said: FileFormat, records: Records, line: int) -> UserMistake:
    return refusal(
        source.name,
        f"no row names the columns of the format {said.name!r}",
        line=line,
        expected=", ".join(records.cells.values()),
        do=f"correct the columns in {said.place}, or export the file again",
    )


def lines(source: Source, said: FileFormat, text: str, records: Records) -> Iterator[Record]:
    """Lines below those that start with the marker. Raises UserMistake where a list that has an end breaks off."""
    markers = [item.after for item in (said.parts, said.pins) if item is not None]
    within, title = False, ""
    for line, full in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        plain = full.strip()
        if said.end and plain.startswith(said.end):
            return
        marker = max((item for item in markers if _begins(plain, item)), key=len, default=None)
        if marker is not None:
            within, title = marker == records.after, plain[len(marker) :].strip()
            if within and records.title:
                yield line, {records.title: title}
        elif within and plain:
            cells = _words(plain, records)
            yield line, {records.title: title, **cells} if records.title else cells
    if said.end:
        problem, expected = "the list has no end", f"a last line {said.end}"
        raise refusal(source.name, problem, line=line, expected=expected, do="export it again; it was cut off")


def _begins(line: str, marker: str) -> bool:
    """Whether a line starts with the whole words of a marker."""
    after = line[len(marker) : len(marker) + 1]
    return line.startswith(marker) and not (after.isalnum() and marker[-1:].isalnum())


def _words(line: str, records: Records) -> dict[str, str]:
    most = len(records.words) - 1
    words = line.split(records.separator, most) if records.separator else line.split(None, most)
    return {cell: word.strip(" \t\"'") for cell, word in zip(records.words, words, strict=False)}


def elements(source: Source, said: FileFormat, records: Records) -> Iterator[Record]:
    """Every element that the path selects. Raises UserMistake where the XML is damaged, hostile or beyond bounds."""
    if root_name(source) is None:
        problem = f"no XML, as the format {said.name!r} says"
        raise refusal(source.name, problem, line=1, expected="XML", do=f"correct kind in {said.place}")
    _bounds.bound(source.name, 1, "elements", source.data.count(b"<"), MAX_MARKS)
    stream = Elements(source, None, "file")
    found: list[tuple[int, _Element]] = []
    steps = _Steps(source)
    for _, element in stream:
        stream.keep()
        if records.each is not None and steps.selected(element, records.each):
            found.append((stream.line(element), element))
    for line, element in found:
        yield line, {cell: steps.follow(element, path) for cell, path in records.paths.items()}


class _Steps:
    """Follows paths, within bounds."""

    def __init__(self, source: Source) -> None:
        self._source = source
        self._taken = 0

    def selected(self, element: _Element, path: XmlPath) -> bool:
        """Whether a path from the root, or from anywhere, ends at an element; read from its end."""
        here: _Element | None = element
        for step in reversed(path.steps):
            if here is None or not self._meets(here, step):
                return False
            here = here.getparent()
        return path.anywhere or here is None

    def follow(self, element: _Element, path: XmlPath) -> str:
        """The text at the end of a path from an element, '' where it leads nowhere."""
        here: _Element | None = element
        for step in path.steps:
            if here is None:
                return ""
            if step.name.startswith("@"):
                return _attribute(here, step.name[1:])
            if step.name == "..":
                here = here.getparent()
            elif step.name != ".":
                here = next((child for child in self._children(here) if self._meets(child, step)), None)
        return " ".join((here.text or "").split()) if here is not None else ""

    def _children(self, element: _Element) -> Iterator[_Element]:
        """Every child, each counted. Raises UserMistake beyond bounds."""
        for child in element:
            self._taken += 1
            if self._taken > MAX_STEPS:
                line = cast("int | None", child.sourceline) or 1
                _bounds.bound(self._source.name, line, "steps on the paths of its format", self._taken, MAX_STEPS)
            yield child

    def _meets(self, element: _Element, step: PathStep) -> bool:
        if step.name not in ("*", local(element)):
            return False
        if not step.key:
            return True
        if step.key.startswith("@"):
            return _attribute(element, step.key[1:]) == step.value
        children = self._children(element)
        return any(local(child) == step.key and (child.text or "").strip() == step.value for child in children)


def _attribute(element: _Element, name: str) -> str:
    return next((str(text).strip() for key, text in element.items() if str(key).rpartition("}")[2] == name), "")


def _plain(header: str) -> str:
    return " ".join(header.split()).casefold()
