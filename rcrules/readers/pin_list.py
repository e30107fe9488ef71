"""The pin list: delimited rows of net, part and pin in any order, or of net and ``PART.PIN``."""

import hashlib
from collections.abc import Mapping, Sequence
from typing import Final

from rcrules.readers._columns import (
    FOOTPRINT,
    JOINED,
    NET,
    PART,
    PIN,
    PIN_NAME,
    PIN_TYPE,
    PIN_VALUE,
    find,
    find_named,
)
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._pin_rows import PinColumns, PinRows
from rcrules.readers._table import DELIMITERS, rows
from rcrules.readers._text import decode, head

NAME: Final = "pin-list"


def claims(source: Source, columns: Mapping[str, str]) -> bool:
    """True for delimited text with a header row that names nets and pins."""
    lines = head(source).splitlines()[:40]
    split = (_cells(line, mark) for line in lines for mark in DELIMITERS if mark in line)
    return any(_columns(cells, columns) is not None for cells in split)


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read every row below the header. Raises UserMistake where the header is hidden or a quoted cell is not closed.

    columns: canonical name (``net reference pin value footprint``) to the header that this team uses.
    """
    text, remarks = decode(source)
    found = rows(source, text, lambda cells: _columns(cells, columns) is not None)
    headers = ((index, row.cells, _columns(row.cells, columns)) for index, row in enumerate(found))
    start, header, known = next((item for item in headers if item[2] is not None), (0, (), None))
    if known is None:  # letters that are broken, or quotes, hid it from the rows that ``claims`` looks at
        raise refusal(
            source.name,
            "no header row that names nets and pins",
            line=found[0].line if found else None,
            found=shorten(" | ".join(found[0].cells)) if found else None,
            expected="a header such as net, part, pin",
            do="export the list again, as UTF-8",
        )
    pins = PinRows(source, known)
    for row in found[start + 1 :]:
        if row.cells != header and not row.cells[0].startswith("#"):
            pins.add(row)
    return Export(
        reader=NAME,
        source=source.name,
        sha256=hashlib.sha256(source.data).hexdigest(),
        kind="netlist",
        parts=pins.parts(),
        pins=pins.pins(),
        nets=pins.nets(),
        remarks=(*remarks, *pins.remarks()),
    )


def _columns(cells: Sequence[str], columns: Mapping[str, str]) -> PinColumns | None:
    """The columns of a header row, None where the row does not name nets and pins."""

    def pick(key: str, spellings: Sequence[str], taken: frozenset[int]) -> int | None:
        named = find_named(cells, columns, key)
        return find(cells, spellings, taken) if named is None else named

    net = pick("net", NET, frozenset())
    if net is None:
        return None
    pin_name = pick("pin-name", PIN_NAME, frozenset({net}))
    part = pick("reference", PART, frozenset({net}))
    pin = pick("pin", PIN, frozenset({net}))
    joined = pick("pin", JOINED, frozenset({net})) if part is None else None
    if (part is None and joined is None) or (part is not None and pin is None and pin_name is None):
        return None
    value, footprint = pick("value", PIN_VALUE, frozenset()), pick("footprint", FOOTPRINT, frozenset())
    kind = pick("pin-type", PIN_TYPE, frozenset())
    own = {net, part, pin, joined, pin_name, kind, value, footprint}
    further = tuple((index, name) for index, name in enumerate(cells) if index not in own and name)
    return PinColumns(
        net=net,
        part=part,
        pin=pin,
        joined=joined,
        pin_name=pin_name,
        pin_type=kind,
        value=value,
        footprint=footprint,
        further=further,
    )


def _cells(line: str, delimiter: str) -> list[str]:
    return [cell.strip(' "') for cell in line.split(delimiter)]


READER = Reader(name=NAME, order=30, claims=claims, read=read)
