"""Workbooks as ZIP archives of XML: opened within bounds; rows of texts for all kinds of them."""

import zipfile
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from io import BytesIO
from math import isfinite
from typing import IO, TYPE_CHECKING, Final

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._table import Row
from rcrules.readers._xml import BoundedStream
from rcrules.readers._xml_stream import let_go

if TYPE_CHECKING:
    from lxml import etree

DAMAGE: Final = (zipfile.BadZipFile, EOFError, NotImplementedError, OSError, RuntimeError)
"""What the ZIP reader raises at a damaged archive."""
MAX_ENTRIES: Final = 1000
MAX_UNPACKED: Final = 64 * 1024 * 1024
"""Bytes of all entries together, as declared; the ZIP reader never yields more than it declares."""
MAX_ROWS: Final = 100_000


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """One visible sheet: its rows that hold text, and where a cell holds an error or a formula without a result."""

    name: str
    rows: tuple[Row, ...]
    failed: tuple[tuple[int, int], ...]
    """(row, column) of cells without a usable value."""


def opened(source: Source) -> zipfile.ZipFile:
    """The archive, its entries checked. Raises UserMistake where it is out of bounds or encrypted."""
    archive = zipfile.ZipFile(BytesIO(source.data))
    _check(source, archive)
    return archive


def entries(data: bytes) -> frozenset[str]:
    """Names of the entries of a ZIP archive; none where the bytes are no archive."""
    if not data.startswith(b"PK\x03\x04"):
        return frozenset()
    try:
        return frozenset(zipfile.ZipFile(BytesIO(data)).namelist())
    except (zipfile.BadZipFile, UnicodeDecodeError, NotImplementedError):
        return frozenset()


def _check(source: Source, archive: zipfile.ZipFile) -> None:
    entries = archive.infolist()
    if len(entries) > MAX_ENTRIES or sum(entry.file_size for entry in entries) > MAX_UNPACKED:
        raise broken(source, "more or larger entries than a BOM has")
    if len({entry.filename for entry in entries}) < len(entries):
        raise broken(source, "two entries of one name")
    if any(entry.flag_bits & 1 for entry in entries):
        raise refusal(source.name, "the workbook is encrypted", do="save it without a password, or as CSV")


def broken(source: Source, found: str) -> Exception:
    """The mistake of a workbook that cannot be read."""
    do = "save the workbook again, or save the sheet that holds the BOM as CSV, UTF-8"
    return refusal(source.name, "the workbook cannot be read", found=shorten(found), expected="a workbook", do=do)


def elements(source: Source, stream: IO[bytes], tag: str) -> "Iterator[etree._Element]":
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
                raise broken(source, "a document type (DOCTYPE) inside")
            yield element
            element.clear()
            let_go(element)
            bounded.marks = 0
    except etree.XMLSyntaxError as error:
        raise broken(source, str(error)) from error


def row(line: int, cells: Mapping[int, str]) -> Row:
    """A row of the texts by column."""
    width = max(cells)
    texts = tuple(cells.get(column, "") for column in range(1, width + 1))
    return Row(line=line, cells=texts, columns=tuple(range(1, width + 1)), delimiter="")


def number(text: str) -> str:
    """A stored number as the shortest text that reads back equal: ``4.7000000000000002`` is 4.7."""
    try:
        number = float(text)
    except ValueError:
        return text
    if not isfinite(number):
        return text
    return str(int(number)) if abs(number) < 1e15 and number == int(number) and "." not in text else repr(number)
