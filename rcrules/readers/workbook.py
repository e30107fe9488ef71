"""The bill of materials as a workbook (XLSX, ODS): the sheets that hold a table of references."""

import hashlib
from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Final

from rcrules.errors import Place
from rcrules.readers._archive import Sheet
from rcrules.readers._bom_parts import PartList
from rcrules.readers._bom_tables import Table, tables
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._workbooks import is_workbook, sheets

NAME: Final = "bom-workbook"
_SHOWN: Final = 8


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for a ZIP with the catalogue of a workbook."""
    return is_workbook(source.data)


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the first visible sheet with a table of references; others that have one are told, not merged.

    Places are row and column of ``file!sheet``. Raises UserMistake where no sheet holds references.
    """
    found = sheets(source)
    listed = [(sheet, made) for sheet in found if (made := tables(sheet.rows, columns))]
    if not listed:
        names = ", ".join(repr(sheet.name) for sheet in found[:_SHOWN])
        raise refusal(
            source.name,
            "no column of references found in the workbook",
            found=f"sheets {names}" if names else "no visible sheet",
            expected="a sheet with a header row with a name such as Reference, Designator or RefDes",
            do='name the column in the project file: [columns] reference = "…", or save the sheet as CSV',
        )
    sheet, own = listed[0]
    inside = replace(source, name=f"{source.name}!{sheet.name}")
    parts = PartList(inside, columns)
    for table in own:
        parts.add(table)
    return Export(
        reader=NAME,
        source=source.name,
        sha256=hashlib.sha256(source.data).hexdigest(),
        kind="bom",
        parts=parts.parts(),
        remarks=(*parts.remarks(), *_failed(inside, sheet, own), *_others(source, sheet, listed[1:])),
    )


def _failed(source: Source, sheet: Sheet, own: Sequence[Table]) -> list[Remark]:
    """Cells of the tables that hold an error, or a formula whose result was not saved."""
    lines = {row.line for table in own for row in table.rows}
    cells = [(line, column) for line, column in sheet.failed if line in lines]
    if not cells:
        return []
    text = f"{len(cells)} cells hold an error, or a formula without a saved result; they are read as empty"
    return [Remark(place=Place(file=source.name, line=cells[0][0], column=cells[0][1]), text=text)]


def _others(source: Source, sheet: Sheet, others: Sequence[tuple[Sheet, list[Table]]]) -> list[Remark]:
    """Further sheets with references: another board, or the same one again."""
    if not others:
        return []
    names = ", ".join(repr(other.name) for other, _ in others[:_SHOWN])
    text = f"only sheet {sheet.name!r} is read; {names} hold references too: save the one you mean as CSV"
    return [Remark(place=Place(file=source.name), text=text)]


READER = Reader(name=NAME, order=5, claims=claims, read=read)
