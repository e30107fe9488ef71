"""Sheets of a workbook after ECMA-376."""

import re
import zipfile
from itertools import islice
from typing import TYPE_CHECKING, Final

from rcrules.readers._archive import DAMAGE, MAX_ROWS, Sheet, broken, elements, number, opened, row
from rcrules.readers._export import Source
from rcrules.readers._table import MAX_CELL, MAX_CELLS, MAX_COLUMNS, Row

if TYPE_CHECKING:
    from lxml import etree

MAX_STRINGS: Final = 200_000
"""Texts that cells share."""
CATALOGUE: Final = "xl/workbook.xml"
_ADDRESS: Final = re.compile(r"([A-Z]{1,3})(\d{1,7})")
_RELATION: Final = "{http://schemas.openxmlformats.org/officeDocument/2006/relationships}id"


def sheets(source: Source) -> list[Sheet]:
    """Every visible sheet in the order of the workbook. Raises UserMistake where it is broken or out of bounds."""
    try:
        archive = opened(source)
        strings = _strings(source, archive)
        return [_sheet(source, archive, name, path, strings) for name, path in _catalogue(source, archive)]
    except DAMAGE as error:
        raise broken(source, str(error)) from error


def _text(element: "etree._Element") -> str:
    """The text of a string item, its runs joined; phonetic hints are left out."""
    hints = {hint for hints in element.iterfind("{*}rPh") for hint in hints.iterfind("{*}t")}
    return "".join(item.text or "" for item in element.iterfind(".//{*}t") if item not in hints)


def _strings(source: Source, archive: zipfile.ZipFile) -> list[str]:
    path = "xl/sharedStrings.xml"
    if path not in archive.namelist():
        return []
    with archive.open(path) as stream:
        found = [_text(item) for item in islice(elements(source, stream, "si"), MAX_STRINGS + 1)]
    if len(found) > MAX_STRINGS:
        raise broken(source, f"more than {MAX_STRINGS} texts")
    return found


def _catalogue(source: Source, archive: zipfile.ZipFile) -> list[tuple[str, str]]:
    """Name and entry of every visible sheet."""
    with archive.open(CATALOGUE) as stream:
        found = [
            (item.get("name", ""), item.get(_RELATION, ""))
            for item in elements(source, stream, "sheet")
            if item.get("state", "visible") == "visible"
        ]
    paths = "xl/_rels/workbook.xml.rels"
    targets: dict[str, str] = {}
    if paths in archive.namelist():
        with archive.open(paths) as stream:
            targets = {item.get("Id", ""): item.get("Target", "") for item in elements(source, stream, "Relationship")}
    entries = [(name, _entry(targets.get(relation, ""))) for name, relation in found]
    return [(name, entry) for name, entry in entries if entry in archive.namelist()]


def _entry(target: str) -> str:
    return target.lstrip("/") if target.startswith("/") else f"xl/{target}"


def _sheet(source: Source, archive: zipfile.ZipFile, name: str, path: str, strings: list[str]) -> Sheet:
    rows: list[Row] = []
    failed: list[tuple[int, int]] = []
    line = count = 0
    with archive.open(path) as stream:
        for element in elements(source, stream, "row"):
            number = element.get("r", "")
            line = int(number) if number.isdecimal() and len(number) < 8 else line + 1
            cells, bad = _cells(source, element, strings)
            failed.extend((line, column) for column in bad)
            if any(cells.values()):
                rows.append(row(line, cells))
            count += max(cells, default=1)
            if count > MAX_CELLS or len(rows) > MAX_ROWS:
                raise broken(source, f"more than {MAX_ROWS} rows or {MAX_CELLS} cells in sheet {name!r}")
    return Sheet(name=name, rows=tuple(rows), failed=tuple(failed))


def _cells(source: Source, line: "etree._Element", strings: list[str]) -> tuple[dict[int, str], list[int]]:
    """Texts by column of the cells that hold one, and the columns whose cell has no usable value."""
    texts: dict[int, str] = {}
    failed: list[int] = []
    column = 0
    for cell in line.iterfind("{*}c"):
        address = _ADDRESS.fullmatch(cell.get("r", ""))
        column = _column(address.group(1)) if address else column + 1
        text = _value(cell, strings)
        if column > MAX_COLUMNS or len(text or "") > MAX_CELL:
            raise broken(source, f"a cell beyond column {MAX_COLUMNS} or of more than {MAX_CELL} characters")
        if text is None:
            failed.append(column)
        elif text.strip():
            texts[column] = " ".join(text.split())
    return texts, failed


def _column(letters: str) -> int:
    number = 0
    for letter in letters:
        number = 26 * number + ord(letter) - ord("A") + 1
    return number


def _value(cell: "etree._Element", strings: list[str]) -> str | None:
    """Text of a cell, '' for none; None for an error or a formula without a result."""
    kind, value = cell.get("t", "n"), cell.findtext("{*}v")
    if kind == "inlineStr":
        return _text(cell)
    if kind == "e" or (value is None and cell.find("{*}f") is not None):
        return None
    if not value:
        return ""
    if kind == "s":
        return strings[int(value)] if value.isdecimal() and int(value) < len(strings) else None
    return number(value) if kind == "n" else value
