"""Tells the kinds of workbooks apart."""

from rcrules.readers import _open_sheets, _sheets
from rcrules.readers._archive import Sheet, entries
from rcrules.readers._export import Source

_OPEN: frozenset[str] = frozenset({_open_sheets.CONTENT, "META-INF/manifest.xml"})


def is_workbook(data: bytes) -> bool:
    """Whether the bytes are a ZIP with the catalogue of a workbook, or with the content of an open document."""
    found = entries(data)
    return _sheets.CATALOGUE in found or found >= _OPEN


def sheets(source: Source) -> list[Sheet]:
    """Every sheet in the order of the workbook. Raises UserMistake where it is broken or out of bounds."""
    if _sheets.CATALOGUE in entries(source.data):
        return _sheets.sheets(source)
    return _open_sheets.sheets(source)
