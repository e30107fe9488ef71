"""Libraries, cells, ports, instances and nets as an EDIF file writes them."""

import re
from dataclasses import dataclass, field
from typing import Final, NamedTuple

from rcrules.readers._component import Entry

_RANGE: Final = re.compile(r"(.*?)[\[(<]\s*(-?\d{1,7})\s*(?::|\.\.|-)\s*(-?\d{1,7})\s*[\])>]\s*")
MAX_WIDTH: Final = 4096
"""Members of one array."""


class Name(NamedTuple):
    """A name as written: its identifier for look-ups, the text to show, and how many members it has."""

    key: str
    text: str
    width: int = 0
    """Members of an array, 0 for a single object."""

    def member(self, index: int) -> str:
        """Text of a member: ``B[7]`` for the first of ``B[7:0]``; a single object is its own member."""
        return self.text if not self.width else f"{self.stem}[{self.label(index)}]"

    @property
    def stem(self) -> str:
        """The name without the range of its members."""
        found = _RANGE.fullmatch(self.text)
        return found[1] if found else self.text

    def label(self, index: int) -> int:
        """What the text calls a member: 7 for the first of ``B[7:0]``."""
        found = _RANGE.fullmatch(self.text)
        if not found:
            return index
        first, last = int(found[2]), int(found[3])
        return first + index if last >= first else first - index


class End(NamedTuple):
    """One reference of a net to a port."""

    port: str
    port_index: int | None
    """None = the whole port, member by member where it is an array."""
    instance: str | None
    """None = a port of the cell itself, or a connector between its pages."""
    instance_index: int | None
    line: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Port:
    """A port of a cell."""

    name: Name
    direction: str
    designator: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Net:
    """A net of a cell."""

    name: Name
    line: int
    ends: tuple[End, ...]
    everywhere: tuple[str, ...]
    """Names of global nets that it belongs to."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Instance:
    """A placed cell."""

    name: Name
    line: int
    view: str
    cell: str
    library: str
    """'' = that of the cell around it."""
    designator: str
    entries: tuple[Entry, ...]
    pins: dict[str, str]
    """Pin numbers of this placement by port."""


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """One view of a cell."""

    key: str
    kind: str
    ports: dict[str, Port]
    instances: tuple[Instance, ...]
    nets: tuple[Net, ...]
    entries: tuple[Entry, ...]


@dataclass(slots=True, kw_only=True)
class Cell:
    """A cell of a library."""

    name: Name
    line: int
    views: list[View]
    entries: tuple[Entry, ...]
    library: str = ""

    def view(self, key: str) -> View | None:
        """The view of that name; without one a netlist, then a schematic, then any."""
        ranks = {"netlist": 0, "schematic": 1}
        ordered = sorted(self.views, key=lambda view: (view.key != key, ranks.get(view.kind, 2)))
        return ordered[0] if ordered else None


@dataclass(slots=True, kw_only=True)
class Libraries:
    """Everything of a file."""

    title: str = ""
    cells: dict[tuple[str, str], Cell] = field(default_factory=dict)
    """By library and cell."""
    tops: list[tuple[str, str]] = field(default_factory=list)
    """Library and cell of each design."""
    _by_name: dict[str, list[Cell]] = field(default_factory=dict)

    def add(self, library: str, cell: Cell) -> None:
        """Keep a cell; of two with one name in one library the first stands."""
        cell.library = library
        if self.cells.setdefault((library, cell.name.key), cell) is cell:
            self._by_name.setdefault(cell.name.key, []).append(cell)

    def cell(self, library: str, cell: str) -> Cell | None:
        """The cell of that library; of any other where only one has a cell of that name."""
        found = self.cells.get((library, cell))
        if found is None:
            others = self._by_name.get(cell, [])
            found = others[0] if len(others) == 1 else None
        return found

    def placed(self, instance: Instance, around: Cell) -> tuple[Cell | None, View | None]:
        """The cell and view that an instance in a cell places, None where the file does not define them."""
        cell = self.cell(instance.library or around.library, instance.cell)
        return cell, cell.view(instance.view) if cell is not None else None


def key_of(identifier: str) -> str:
    """An identifier for look-ups: case does not count, nor does the mark before one that starts with a digit."""
    return identifier.removeprefix("&").casefold()
