"""Workbooks (ECMA-376): a ZIP of XML, read within bounds; the sheets as rows of texts."""

import re
import zipfile
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from io import BytesIO
from itertools import islice
from math import isfinite
from typing import IO, TYPE_CHECKING, Final

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._table import MAX_CELL, MAX_CELLS, MAX_COLUMNS, Row
from rcrules.readers._xml import BoundedStream

if TYPE_CHECKING:
    from lxml import etree

MAX_ENTRIES: Final = 1000
MAX_UNPACKED: Final = 64 * 1024 * 1024
"""Bytes of all entries together, as declared; the ZIP reader never yields more than it declares."""
MAX_ROWS: Final = 100_000
MAX_STRINGS: Final = 200_000
"""Texts that cells share."""
_CATALOGUE: Final = "xl/workbook.xml"
_ADDRESS: Final = re.compile(r"([A-Z]{1,3})(\d{1,7})")
_RELATION: Final = "{http://schemas.openxmlformats.org/officeDocument/2006/relationships}id"


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """One visible sheet: its rows that hold text, and where a cell holds an error or a formula without a result."""

    name: str
    rows: tuple[Row, ...]
    failed: tuple[tuple[int, int], ...]
    """(row, column) of cells without a usable value."""


def is_workbook(data: bytes) -> bool:
    """Whether the bytes are a ZIP with the catalogue of a workbook."""
    if not data.startswith(b"PK\x03\x04"):
        return False
    try:
        return _CATALOGUE in zipfile.ZipFile(BytesIO(data)).namelist()
    except (zipfile.BadZipFile, UnicodeDecodeError, NotImplementedError):
        return False


def sheets(source: Source) -> list[Sheet]:
    """Every visible sheet in the order of the workbook. Raises UserMistake where it is broken or out of bounds."""
    try:
        archive = zipfile.ZipFile(BytesIO(source.data))
        _check(source, archive)
        strings = _strings(source, archive)
        return [_sheet(source, archive, name, path, strings) for name, path in _catalogue(source, archive)]
    except (zipfile.BadZipFile, EOFError, NotImplementedError, OSError, RuntimeError) as error:
        raise _broken(source, str(error)) from error


def _check(source: Source, archive: zipfile.ZipFile) -> None:
    entries = archive.infolist()
    if len(entries) > MAX_ENTRIES or sum(entry.file_size for entry in entries) > MAX_UNPACKED:
        raise _broken(source, "more or larger entries than a BOM has")
    if len({entry.filename for entry in entries}) < len(entries):
        raise _broken(source, "two entries of one name")
    if any(entry.flag_bits & 1 for entry in entries):
        raise refusal(source.name, "the workbook is encrypted", do="save it without a password, or as CSV")


def _broken(source: Source, found: str) -> Exception:
    do = "save the workbook again, or save the sheet that holds the BOM as CSV, UTF-8"
    return refusal(source.name, "the workbook cannot be read", found=shorten(found), expected="a workbook", do=do)


def _elements(source: Source, stream: IO[bytes], tag: str) -> "Iterator[etree._Element]":
    """Every element of a local name, let go after use. Raises UserMistake."""
    from lxml import etree

    bounded = BoundedStream(source, stream)
    context = etree.iterparse(
        bounded,
        events=("end",),
        tag=f"{{*}}{tag}",
        resolve_entities=False,
        no_network=True,
        load_dtd=False,
        huge_tree=False,
    )
    try:
        for _, element in context:
            if element.getroottree().docinfo.doctype:
                raise _broken(source, "a document type (DOCTYPE) inside")
            yield element
            element.clear()
            while element.getprevious() is not None:
                del element.getparent()[0]
            bounded.marks = 0
    except etree.XMLSyntaxError as error:
        raise _broken(source, str(error)) from error


def _text(element: "etree._Element") -> str:
    """The text of a string item, its runs joined; phonetic hints are left out."""
    hints = {hint for hints in element.iterfind("{*}rPh") for hint in hints.iterfind("{*}t")}
    return "".join(item.text or "" for item in element.iterfind(".//{*}t") if item not in hints)


def _strings(source: Source, archive: zipfile.ZipFile) -> list[str]:
    path = "xl/sharedStrings.xml"
    if path not in archive.namelist():
        return []
    with archive.open(path) as stream:
        found = [_text(item) for item in islice(_elements(source, stream, "si"), MAX_STRINGS + 1)]
    if len(found) > MAX_STRINGS:
        raise _broken(source, f"more than {MAX_STRINGS} texts")
    return found


def _catalogue(source: Source, archive: zipfile.ZipFile) -> list[tuple[str, str]]:
    """Name and entry of every visible sheet."""
    with archive.open(_CATALOGUE) as stream:
        found = [
            (item.get("name", ""), item.get(_RELATION, ""))
            for item in _elements(source, stream, "sheet")
            if item.get("state", "visible") == "visible"
        ]
    paths = "xl/_rels/workbook.xml.rels"
    targets: dict[str, str] = {}
    if paths in archive.namelist():
        with archive.open(paths) as stream:
            targets = {item.get("Id", ""): item.get("Target", "") for item in _elements(source, stream, "Relationship")}
    entries = [(name, _entry(targets.get(relation, ""))) for name, relation in found]
    return [(name, entry) for name, entry in entries if entry in archive.namelist()]


def _entry(target: str) -> str:
    return target.lstrip("/") if target.startswith("/") else f"xl/{target}"


def _sheet(source: Source, archive: zipfile.ZipFile, name: str, path: str, strings: list[str]) -> Sheet:
    rows: list[Row] = []
    failed: list[tuple[int, int]] = []
    line = count = 0
    with archive.open(path) as stream:
        for element in _elements(source, stream, "row"):
            number = element.get("r", "")
            line = int(number) if number.isdecimal() and len(number) < 8 else line + 1
            cells, bad = _cells(source, element, strings)
            failed.extend((line, column) for column in bad)
            if any(cells.values()):
                rows.append(_row(line, cells))
            count += max(cells, default=1)
            if count > MAX_CELLS or len(rows) > MAX_ROWS:
                raise _broken(source, f"more than {MAX_ROWS} rows or {MAX_CELLS} cells in sheet {name!r}")
    return Sheet(name=name, rows=tuple(rows), failed=tuple(failed))


def _row(line: int, cells: Mapping[int, str]) -> Row:
    width = max(cells)
    texts = tuple(cells.get(column, "") for column in range(1, width + 1))
    return Row(line=line, cells=texts, columns=tuple(range(1, width + 1)), delimiter="")


def _cells(source: Source, row: "etree._Element", strings: list[str]) -> tuple[dict[int, str], list[int]]:
    """Texts by column of the cells that hold one, and the columns whose cell has no usable value."""
    texts: dict[int, str] = {}
    failed: list[int] = []
    column = 0
    for cell in row.iterfind("{*}c"):
        address = _ADDRESS.fullmatch(cell.get("r", ""))
        column = _column(address.group(1)) if address else column + 1
        text = _value(cell, strings)
        if column > MAX_COLUMNS or len(text or "") > MAX_CELL:
            raise _broken(source, f"a cell beyond column {MAX_COLUMNS} or of more than {MAX_CELL} characters")
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
    return _number(value) if kind == "n" else value


def _number(text: str) -> str:
    """A stored number as the shortest text that reads back equal: ``4.7000000000000002`` is 4.7."""
    try:
        number = float(text)
    except ValueError:
        return text
    if not isfinite(number):
        return text
    return str(int(number)) if abs(number) < 1e15 and number == int(number) and "." not in text else repr(number)
