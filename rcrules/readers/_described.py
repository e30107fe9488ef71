"""Files that the project file describes: what stands where, read without a reader of their own."""

from collections.abc import Iterator, Mapping
from typing import Final

from rcrules.errors import UserMistake
from rcrules.project import FileFormat, Records
from rcrules.readers import _bounds
from rcrules.readers._component import Component, Node
from rcrules.readers._described_records import Record, elements, lines, table
from rcrules.readers._export import Export, Source
from rcrules.readers._joints import joint
from rcrules.readers._mistakes import refusal
from rcrules.readers._netlist import Netlist
from rcrules.readers._references import TooManyError, references
from rcrules.readers._text import decode, head

_HEAD: Final = 65_536
_OWN: Final = frozenset({"reference", "value", "footprint", "symbol", "description"})
_OF_PINS: Final = frozenset({"net", "pin", "pin-name", "pin-type", "ends"})


def described(source: Source, formats: tuple[FileFormat, ...]) -> Export | None:
    """The export as the first description says whose text the source has near its start; None where none fits.

    Raises UserMistake where the file does not hold what the description says.
    """
    text = head(source, _HEAD)
    found = next((item for item in formats if item.has in text), None)
    return _read(source, found) if found is not None else None


def _read(source: Source, said: FileFormat) -> Export:
    text, assumed = decode(source)
    board = _Board(source, said, Netlist(source, f"format {said.name}", assumed))
    found = 0
    for records, take in ((said.parts, board.part), (said.pins, board.pin)):
        for record in _records(source, said, text, records) if records is not None else ():
            found += 1
            _bounds.bound(source.name, record[0], "connections", found, source.limits.connections)
            take(*record)
    if not found:
        raise _nothing(source, said)
    return board.export()


def _records(source: Source, said: FileFormat, text: str, records: Records) -> Iterator[Record]:
    if said.kind == "xml":
        return elements(source, said, records)
    if said.kind == "delimited":
        return table(source, said, text, records)
    return lines(source, said, text, records)


def _nothing(source: Source, said: FileFormat) -> UserMistake:
    return refusal(
        source.name,
        f"nothing in this file is what the format {said.name!r} describes",
        line=1,
        expected=f"parts or pins as {said.place} says",
        do="correct the description, or export the file again",
    )


class _Board:
    """Collects parts and pins."""

    def __init__(self, source: Source, said: FileFormat, netlist: Netlist) -> None:
        self._source, self._said, self._netlist = source, said, netlist
        self._between = said.pins.between if said.pins is not None else "."
        self._parts: dict[str, Component] = {}
        self._nets: dict[str, list[Node]] = {}

    def part(self, line: int, cells: Mapping[str, str]) -> None:
        """Take in a part; in a list without pins, all parts of a row."""
        said = cells.get("reference", "")
        try:
            refs = (references(said) or (said,)) if self._said.pins is None else (said,)
        except TooManyError as error:
            raise refusal(self._source.name, "too many parts in one cell", line=line, found=str(error)) from error
        for ref in refs:
            self._netlist.add_component(_component(ref, line, cells))
            self._parts.setdefault(ref, Component(ref=ref, line=line))

    def pin(self, line: int, cells: Mapping[str, str]) -> None:
        """Take in one connection, or all ends of a net."""
        net, single = cells.get("net", ""), cells.get("reference", "")
        ends = [(single, cells.get("pin", ""))] if single else []
        words = cells.get("ends", "").replace(",", " ").split()
        ends += [joint(self._source, line, word, self._between) for word in words]
        for ref, number in ends:
            if ref not in self._parts:
                self._parts[ref] = _component(ref, line, cells)
                self._netlist.add_component(self._parts[ref])
            node = (ref, number, cells.get("pin-name", ""), cells.get("pin-type", ""), line)
            if net:
                self._nets.setdefault(net, []).append(node)
            elif number:
                self._netlist.add_open(node)
        if net and not ends:
            self._nets.setdefault(net, [])

    def export(self) -> Export:
        """Everything as an export, nets in the order in which they are first named."""
        for name, nodes in self._nets.items():
            for node in nodes:
                self._netlist.add_node(node)
            self._netlist.add_net(name, "", nodes[0][4] if nodes else 1)
        return self._netlist.export("bom" if self._said.pins is None else "netlist")


def _component(ref: str, line: int, cells: Mapping[str, str]) -> Component:
    further = [(name, text, line) for name, text in cells.items() if name not in _OWN | _OF_PINS and text]
    return Component(
        ref=ref,
        line=line,
        value=cells.get("value", ""),
        footprint=cells.get("footprint", ""),
        symbol=cells.get("symbol", ""),
        description=cells.get("description", ""),
        fields=list(further),
    )
