"""Rows of a BOM to parts, each reference once."""

import re
from collections.abc import Mapping
from dataclasses import replace
from typing import Final

from rcrules.errors import Place, UserMistake
from rcrules.readers._bom_tables import Table
from rcrules.readers._bounds import named
from rcrules.readers._export import Cell, ExportPart, Remark, Source
from rcrules.readers._fitting import fitting
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._references import MAX_REFERENCES, TooManyError, count_references, references
from rcrules.readers._remarks import Remarks
from rcrules.readers._table import Row

_EMPTY: Final = frozenset({"", "~", "-", "--", "—"})
_COUNT: Final = re.compile(r"(\d+)(?:[.,]0*)?")
_PIECE: Final = re.compile(r"[^\W\d_]+\d+#\d+")
"""``J10#1``: one of several pieces bought for the part J10."""
_SHOWN: Final = 8
_ENOUGH: Final = 4
"""Rows that must agree before quantities are taken as those of several boards."""


class PartList:
    """Collects the parts of every table of one file."""

    def __init__(self, source: Source, columns: Mapping[str, str]) -> None:
        self._source, self._columns = source, columns
        self._parts: dict[str, ExportPart] = {}
        self._table_of: dict[str, int] = {}
        self._tables = 0
        self._listed = 0
        self._remarks = Remarks()
        self._left_out: list[Row] = []
        self._starred: list[str] = []

    def parts(self) -> tuple[ExportPart, ...]:
        """Every part, in the order of the file."""
        return tuple(self._parts.values())

    def remarks(self) -> tuple[Remark, ...]:
        """Everything odd, in the order of the file."""
        remarks = list(self._remarks.all())
        if self._left_out:
            lines = ", ".join(str(row.line) for row in self._left_out[:_SHOWN])
            more = f" and {len(self._left_out) - _SHOWN} more" if len(self._left_out) > _SHOWN else ""
            first = shorten(" | ".join(cell for cell in self._left_out[0].cells if cell))
            text = f"rows without references left out: line {lines}{more} (the first: {first!r})"
            remarks.append(Remark(place=self._place(self._left_out[0].line), text=text))
        if self._starred:
            named = ", ".join(self._starred[:_SHOWN]) + (" …" if len(self._starred) > _SHOWN else "")
            place = self._parts[self._starred[0]].place
            remarks.append(Remark(place=place, text=f"values marked with an asterisk, taken as fitted: {named}"))
        return tuple(remarks)

    def add(self, table: Table) -> None:
        """Take in a table; what an earlier table says about a reference stands."""
        self._tables += 1
        for line, said in table.remarks:
            self._remarks.add(self._place(line), said)
        factor = _boards(table)
        if factor > 1:
            said = f"every quantity is {factor} times the number of references; taken as for {factor} boards"
            self._remarks.add(self._place(table.rows[0].line), said)
        if factor == 0:
            self._remarks.add(self._place(table.rows[0].line), "every quantity is 0; quantities are not compared")
        for row in table.rows:
            self._add_row(table, row, factor)

    def _add_row(self, table: Table, row: Row, factor: int) -> None:
        text = row.cell(table.reference)
        quantity = _count(row.cell(table.quantity))
        wanted = None if quantity is None or factor == 0 else quantity // factor
        refs = self._references(row, text, wanted)
        pieces = tuple(ref for ref in refs if _PIECE.fullmatch(ref))
        if pieces:
            said = f"pieces that are bought for a part are no parts of their own: {shorten(', '.join(pieces))}"
            self._remarks.add(self._place(row.line), said)
            refs = tuple(ref for ref in refs if ref not in pieces)
            if not refs:
                return
        if not refs:
            if not row.cells[0].startswith("#") and sum(1 for cell in row.cells if cell) > 1:
                self._left_out.append(row)
            return
        self._check_quantity(table, row, refs, wanted)
        self._listed += len(refs)
        if self._listed > self._source.limits.parts:
            raise self._too_many(row, f"more than {self._source.limits.parts} references in all")
        entry = self._part(table, row, refs[0])
        for ref in refs:
            named(self._source.name, row.line, "a reference", ref)
            self._add_part(entry if ref == refs[0] else replace(entry, ref=ref))

    def _references(self, row: Row, text: str, wanted: int | None) -> tuple[str, ...]:
        try:
            return references(text, wanted)
        except TooManyError as error:
            raise self._too_many(row, str(error)) from error

    def _too_many(self, row: Row, found: str) -> UserMistake:
        return refusal(
            self._source.name,
            "the rows stand for too many parts",
            line=row.line,
            found=found,
            expected=f"at most {MAX_REFERENCES} references in a cell and {self._source.limits.parts} in a file",
            do="correct the ranges of references; --limit parts=N allows more",
        )

    def _check_quantity(self, table: Table, row: Row, refs: tuple[str, ...], wanted: int | None) -> None:
        if wanted is not None and wanted != len(refs) and table.quantity is not None:
            place = self._place(row.line, row.columns[table.quantity])
            text = f"quantity {wanted}, but {len(refs)} references: {shorten(', '.join(refs))}"
            self._remarks.add(place, text)

    def _add_part(self, part: ExportPart) -> None:
        first = self._parts.get(part.ref)
        if first is None:
            self._parts[part.ref] = part
            self._table_of[part.ref] = self._tables
            if part.value is not None and part.value.text.endswith("*"):
                self._starred.append(part.ref)
            return
        one, other = _value(first), _value(part)
        if one != other or self._table_of[part.ref] == self._tables:
            said = f" with value {other!r} instead of {one!r}" if one != other else ""
            text = f"{part.ref} is listed again{said}; line {first.place.line} stands"
            self._remarks.add(part.place, text)
        if _adds(first, part):
            self._parts[part.ref] = _completed(first, part)

    def _part(self, table: Table, row: Row, ref: str) -> ExportPart:
        value, at = row.cell(table.value), table.value
        fields = self._fields(table, row)
        fitted, why = fitting(value, ((name, cell.text) for name, cell in fields.items()))
        known = value not in _EMPTY and at is not None
        return ExportPart(
            ref=ref,
            place=self._place(row.line, row.columns[table.reference]),
            value=Cell(text=value, place=self._place(row.line, row.columns[at])) if known and at is not None else None,
            footprint=row.cell(table.footprint),
            symbol=row.cell(table.symbol),
            description=row.cell(table.description),
            fields=fields,
            fitted=fitted,
            fitted_why=why,
        )

    def _fields(self, table: Table, row: Row) -> dict[str, Cell]:
        """Every further column under its own header, and once more under the name the project gives it."""
        own = {table.reference, table.value, table.quantity}
        names = dict(enumerate(table.headers))
        fields = {
            names.get(index, f"column {index + 1}"): Cell(text=text, place=self._place(row.line, row.columns[index]))
            for index, text in enumerate(row.cells)
            if index not in own and text not in _EMPTY
        }
        for key, index in table.named.items():
            if row.cell(index) not in _EMPTY:
                fields[key] = Cell(text=row.cell(index), place=self._place(row.line, row.columns[index]))
        return fields

    def _place(self, line: int, column: int | None = None) -> Place:
        return Place(file=self._source.name, line=line, column=column or None)


def _adds(first: ExportPart, later: ExportPart) -> bool:
    """True where the later entry of a reference says something that the first does not."""
    return (
        (first.value is None and later.value is not None)
        or (first.fitted is not False and later.fitted is not None)
        or any(
            not said and more
            for said, more in (
                (first.footprint, later.footprint),
                (first.symbol, later.symbol),
                (first.description, later.description),
            )
        )
        or not later.fields.keys() <= first.fields.keys()
    )


def _completed(first: ExportPart, later: ExportPart) -> ExportPart:
    """The first entry of a reference, with what only the later one says."""
    return replace(
        first,
        value=first.value or later.value,
        footprint=first.footprint or later.footprint,
        symbol=first.symbol or later.symbol,
        description=first.description or later.description,
        fields={**later.fields, **first.fields},
        fitted=False if later.fitted is False else first.fitted,
        fitted_why=first.fitted_why or later.fitted_why,
    )


def _value(part: ExportPart) -> str:
    return part.value.text if part.value is not None else ""


def _count(text: str) -> int | None:
    found = _COUNT.fullmatch(text)
    return int(found.group(1)) if found and len(found.group(1)) < 9 else None


def _boards(table: Table) -> int:
    """How many boards the quantities are for: the one factor of every row, 0 where none is filled in, else 1."""
    factors = set()
    rows = 0
    for row in table.rows:
        quantity = _count(row.cell(table.quantity))
        count = 0 if quantity is None else count_references(row.cell(table.reference))
        if quantity is None or not count:
            continue
        if quantity % count:
            return 1
        rows += 1
        factors.add(quantity // count)
    return factors.pop() if len(factors) == 1 and rows >= _ENOUGH else 1
