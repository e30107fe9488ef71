"""The bill of materials as XML: one element a part or an item, its cells as attributes, elements or named fields."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterator, Mapping
from typing import TYPE_CHECKING, Final

from rcrules.readers import _bounds
from rcrules.readers._bom_parts import PartList
from rcrules.readers._bom_tables import tables
from rcrules.readers._columns import REFERENCE, plain
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._foreign import unknown
from rcrules.readers._table import MAX_CELLS, MAX_COLUMNS, Row
from rcrules.readers._xml import MAX_MARKS, root_name
from rcrules.readers._xml_stream import Elements, local

if TYPE_CHECKING:
    from lxml.etree import _Element

NAME: Final = "bom-xml"
_DEPTH: Final = 3
"""Levels below an item at which its cells may stand."""
_HUMP: Final = re.compile(r"(?<=[a-z])(?=[A-Z])")
Item = tuple[int, dict[str, str]]
"""Line and cells by name."""


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for XML that no other reader knows; whether it lists parts is seen when it is read."""
    return root_name(source) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read every element that holds a reference and something else. Raises UserMistake where there is none.

    columns: canonical name (``reference value …``) to the name that the file gives the element, attribute or field.
    """
    wanted = {key: _split(name) for key, name in columns.items()}
    reference = {*REFERENCE, plain(wanted.get("reference", "reference"))}
    rows = _rows(source, list(_items(source, reference)))
    listed = tables(rows, wanted) if rows else []
    if not listed:
        raise unknown(source)
    parts = PartList(source, wanted)
    for table in listed:
        parts.add(table)
    return Export(
        reader=NAME,
        source=source.name,
        sha256=hashlib.sha256(source.data).hexdigest(),
        kind="bom",
        parts=parts.parts(),
        remarks=parts.remarks(),
    )


def _items(source: Source, reference: set[str]) -> Iterator[Item]:
    """Every innermost element with a reference and at least one cell of another name."""
    marks = source.data.count(b"<")
    _bounds.bound(source.name, 1, "elements", marks, MAX_MARKS)
    elements = Elements(source, None, "BOM")
    count = 0
    for _, element in elements:
        cells = _cells(element, reference) if len(element) or len(element.attrib) > 1 else {}
        if len(cells) < 2 or reference.isdisjoint(map(plain, cells)):
            elements.keep()
            continue
        line = elements.line(element)
        count += len(cells)
        _bounds.bound(source.name, line, "cells", count, MAX_CELLS)
        for name, text in cells.items():
            _bounds.named(source.name, line, "a name", name)
            _bounds.named(source.name, line, "a text", text, _bounds.MAX_TEXT)
        yield line, cells


def _cells(element: _Element, reference: set[str]) -> dict[str, str]:
    """What an element says by attributes and by what stands in it; several references are joined."""
    cells: dict[str, str] = {}
    for name, text in _said(element, _DEPTH):
        plain_text = " ".join(text.split())
        if name in cells and plain(name) in reference and plain_text:
            cells[name] = f"{cells[name]}, {plain_text}"
        elif name:
            cells.setdefault(name, plain_text)
    return cells


def _said(element: _Element, depth: int) -> Iterator[tuple[str, str]]:
    for key, text in element.items():
        yield _split(str(key).rpartition("}")[2]), str(text)
    for child in element:
        said: Mapping[str, str] = {str(own): str(value) for own, value in child.items()}
        name, value = said.get("name"), said.get("value")
        if len(child):
            if depth > 1:
                yield from _said(child, depth - 1)
        elif name is not None and (value is not None or child.text):
            yield _split(name.strip()), value or child.text or ""
        elif child.text:
            yield _split(local(child)), child.text
        else:
            yield from _said(child, 1)


def _rows(source: Source, items: list[Item]) -> list[Row]:
    """A header of all names, then a row for each item; [] without items."""
    names = list(dict.fromkeys(name for _, cells in items for name in cells))
    if not names:
        return []
    _bounds.bound(source.name, items[0][0], "different names of cells", len(names), MAX_COLUMNS)
    _bounds.bound(source.name, items[0][0], "cells", len(names) * len(items), 4 * MAX_CELLS)
    columns = (0,) * len(names)
    rows = [Row(line=items[0][0], cells=tuple(names), columns=columns, delimiter="")]
    for line, cells in items:
        rows.append(Row(line=line, cells=tuple(cells.get(name, "") for name in names), columns=columns, delimiter=""))
    return rows


def _split(name: str) -> str:
    """``PartReference`` as two words."""
    return _HUMP.sub(" ", name)


READER = Reader(name=NAME, order=15, claims=claims, read=read)
