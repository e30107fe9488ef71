"""Rows of a pin list to parts, pins and nets."""

import re
from dataclasses import dataclass
from typing import Final

from rcrules.errors import Place
from rcrules.readers import _bounds
from rcrules.readers._export import Cell, ExportPart, ExportPin, Remark, Source
from rcrules.readers._fitting import fitting
from rcrules.readers._pin_types import pin_type
from rcrules.readers._remarks import Remarks
from rcrules.readers._table import Row

_JOINED: Final = re.compile(r"(.+?)[.\-:/]([^.\-:/]+)")
_SEPARATOR: Final = re.compile(r"[,;\s]+")
_EMPTY: Final = frozenset({"", "~", "-"})


@dataclass(frozen=True, slots=True, kw_only=True)
class PinColumns:
    """Which column holds what."""

    net: int
    part: int | None
    """None where ``joined`` holds part and pin."""
    pin: int | None
    joined: int | None
    """Cells such as ``R1.2``, or lists of them."""
    pin_name: int | None
    pin_type: int | None
    value: int | None
    footprint: int | None
    further: tuple[tuple[int, str], ...]
    """Other columns with their headers: fields of the part."""


class PinRows:
    """Collects what each row says."""

    def __init__(self, source: Source, columns: PinColumns) -> None:
        self._source, self._columns = source, columns
        self._parts: dict[str, ExportPart] = {}
        self._nets: dict[str, Place] = {}
        self._pins: dict[tuple[str, str, str], ExportPin] = {}
        self._net_of: dict[tuple[str, str], str] = {}
        self._ended = 0
        self._remarks = Remarks()

    def parts(self) -> tuple[ExportPart, ...]:
        """Every part in the order of the file."""
        return tuple(self._parts.values())

    def pins(self) -> tuple[ExportPin, ...]:
        """Every connection in the order of the file."""
        return tuple(self._pins.values())

    def nets(self) -> tuple[tuple[str, Place], ...]:
        """Every net in the order of the file."""
        return tuple(self._nets.items())

    def remarks(self) -> tuple[Remark, ...]:
        """Everything odd, in the order of the file."""
        return self._remarks.all()

    def add(self, row: Row) -> None:
        """Take in a row; comment rows (``#``) and repeated headers are the caller's to leave out."""
        net = row.cell(self._columns.net)
        if net:
            self._bounded(row, "a net name", net)
            self._nets.setdefault(net, self._place(row, self._columns.net))
        ends = self._ends(row)
        if not ends and not net:
            self._remark(row, "this row names neither a net nor a pin; left out")
        self._ended += len(ends)
        for ref, number in ends:
            self._bounded(row, "a reference", ref)
            self._bounded(row, "a pin number", number)
            self._add_part(row, ref)
            if not number:
                self._remark(row, f"{ref} has no pin number here; the connection is left out")
            elif net:
                self._add_pin(row, ref, number, net)

    def _bounded(self, row: Row, what: str, text: str) -> None:
        """Raise UserMistake where a name is endless or there is more of everything than on any board."""
        file = self._source.name
        _bounds.named(file, row.line, what, text)
        _bounds.bound(file, row.line, "connections", self._ended, self._source.limits.connections)
        _bounds.bound(file, row.line, "parts", len(self._parts), self._source.limits.parts)
        _bounds.bound(file, row.line, "nets", len(self._nets), self._source.limits.nets)

    def _ends(self, row: Row) -> list[tuple[str, str]]:
        """Part and pin of each connection of a row."""
        columns = self._columns
        if columns.joined is None:
            ref = row.cell(columns.part)
            return [(ref, row.cell(columns.pin) or row.cell(columns.pin_name))] if ref else []
        found = []
        for word in _SEPARATOR.split(row.cell(columns.joined)):
            match = _JOINED.fullmatch(word)
            if match is not None:
                found.append((match.group(1), match.group(2)))
            elif word:
                self._remark(row, f"{word!r} names no part and pin, such as R1.2; left out")
        return found

    def _add_part(self, row: Row, ref: str) -> None:
        columns = self._columns
        held = self._parts.get(ref)
        text = row.cell(columns.value)
        if held is not None and (text in _EMPTY or held.value is not None):
            if held.value is not None and text not in _EMPTY and text != held.value.text:
                self._remark(row, f"{ref} has the value {text!r} here; {held.value.text!r} of {held.place} stands")
            return
        fields = {
            name: Cell(text=row.cell(index), place=self._place(row, index))
            for index, name in columns.further
            if row.cell(index) not in _EMPTY
        }
        fitted, why = fitting(text, ((name, cell.text) for name, cell in fields.items()))
        at = columns.value
        self._parts[ref] = ExportPart(
            ref=ref,
            place=self._place(row, columns.part if columns.joined is None else columns.joined),
            value=Cell(text=text, place=self._place(row, at)) if at is not None and text not in _EMPTY else None,
            footprint=row.cell(columns.footprint),
            fields=fields,
            fitted=fitted,
            fitted_why=why,
        )

    def _add_pin(self, row: Row, ref: str, number: str, net: str) -> None:
        columns = self._columns
        first = self._net_of.setdefault((ref, number), net)
        if first != net:
            self._remark(row, f"pin {number} of {ref} is on net {first!r} and on net {net!r}; both are kept")
        said = row.cell(columns.pin_type)
        kind = pin_type(said)
        if kind is None:
            self._remark(row, f"pin type {said!r} is not known; taken as unspecified")
        name = row.cell(columns.pin_name)
        pin = ExportPin(
            ref=ref,
            number=number,
            name="" if name in _EMPTY else name,
            type="unspecified" if kind is None else kind,
            net=net,
            place=self._place(row, columns.net),
        )
        self._pins.setdefault((ref, number, net), pin)

    def _remark(self, row: Row, text: str) -> None:
        self._remarks.add(self._place(row, None), text)

    def _place(self, row: Row, index: int | None) -> Place:
        column = row.columns[index] if index is not None and index < len(row.columns) else None
        return Place(file=self._source.name, line=row.line, column=column)
