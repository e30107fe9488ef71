"""The bill of materials: delimited text with a column of references, with or without a header."""

import hashlib
from collections.abc import Mapping, Sequence
from typing import Final

from rcrules.readers._bom_parts import PartList
from rcrules.readers._bom_tables import tables
from rcrules.readers._columns import is_bom_header, plain
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._table import DELIMITERS, Row, rows
from rcrules.readers._text import decode, head

NAME: Final = "bom"
_HEAD: Final = 65_536
"""Bytes of a file in which two rows must start; one description may be longer than most heads."""
_STRAY: Final = 3
"""Control characters in the head of a file from which on it is no text."""


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for text of at least two lines with a delimiter in them."""
    text = head(source, _HEAD)
    if sum(character < " " and character not in "\t\r\n" for character in text) > _STRAY:
        return False
    lines = [line for line in text.splitlines() if line.strip()]
    return sum(any(mark in line for mark in DELIMITERS) for line in lines) > 1


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read every table of the file. Raises UserMistake where no column holds references.

    columns: canonical name (``reference value quantity footprint description``, or a fact such as ``tolerance``) to
    the header that this team uses.
    """
    text, remarks = decode(source)
    found = rows(source, text, lambda cells: is_bom_header(cells, columns))
    listed = tables(found, columns)
    if not listed:
        first = found[0].cells if found else ()
        raise refusal(
            source.name,
            "no column of references found",
            line=found[0].line if found else None,
            found=f"rows such as {shorten(' | '.join(first))!r}",
            expected="a header row with a name such as Reference, Designator or RefDes",
            do='name the column in the project file: [columns] reference = "…"',
        )
    parts = PartList(source, columns)
    for table in listed:
        parts.add(table)
    return Export(
        reader=NAME,
        source=source.name,
        sha256=hashlib.sha256(source.data).hexdigest(),
        kind="bom",
        parts=parts.parts(),
        remarks=(*remarks, *parts.remarks()),
        title=_title(found),
    )


def _title(found: Sequence[Row]) -> str:
    """What a title row above the table calls the board."""
    titles = (row.cell(1) for row in found[:20] if plain(row.cells[0]) in ("title", "board", "project"))
    return next(titles, "")


READER = Reader(name=NAME, order=40, claims=claims, read=read)
