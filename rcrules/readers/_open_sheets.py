"""Sheets of a workbook after OpenDocument (ISO/IEC 26300)."""

from collections.abc import Iterator
from typing import TYPE_CHECKING, Final

from rcrules.readers._archive import DAMAGE, MAX_ROWS, Sheet, broken, elements, number, opened, row
from rcrules.readers._export import Source
from rcrules.readers._table import MAX_CELL, MAX_CELLS, MAX_COLUMNS, Row

if TYPE_CHECKING:
    from lxml import etree

CONTENT: Final = "content.xml"
_NUMBERS: Final = frozenset({"float", "percentage"})


def sheets(source: Source) -> list[Sheet]:
    """Every sheet that holds text, in the order of the workbook. Raises UserMistake where it is out of bounds."""
    try:
        with opened(source).open(CONTENT) as stream:
            return _sheets(source, elements(source, stream, "table-row"))
    except (*DAMAGE, KeyError) as error:
        raise broken(source, str(error)) from error


def _sheets(source: Source, found: "Iterator[etree._Element]") -> list[Sheet]:
    rows: dict[str, list[Row]] = {}
    failed: dict[str, list[tuple[int, int]]] = {}
    lines: dict[str, int] = {}
    count = 0
    for index, element in enumerate(found):
        if index > 2 * MAX_ROWS:
            raise broken(source, f"more than {2 * MAX_ROWS} rows, empty ones among them")
        table = next(element.iterancestors("{*}table"), None)
        name = "" if table is None else _said(table, "name")
        cells, bad = _cells(source, element)
        repeated = _repeated(element, "rows")
        line = lines.get(name, 0) + 1
        lines[name] = line + repeated - 1
        failed.setdefault(name, []).extend((line, column) for column in bad)
        if not cells:
            continue
        count += repeated * max(cells)
        if count > MAX_CELLS or len(rows.get(name, ())) + repeated > MAX_ROWS:
            raise broken(source, f"more than {MAX_ROWS} rows or {MAX_CELLS} cells in sheet {name!r}")
        rows.setdefault(name, []).extend(row(line + further, cells) for further in range(repeated))
    return [Sheet(name=name, rows=tuple(own), failed=tuple(failed[name])) for name, own in rows.items()]


def _cells(source: Source, element: "etree._Element") -> tuple[dict[int, str], list[int]]:
    """Texts by column of the cells that hold one, and the columns whose cell holds an error."""
    texts: dict[int, str] = {}
    failed: list[int] = []
    column = 1
    for cell in element.iterfind("{*}*"):
        repeated = _repeated(cell, "columns")
        if _said(cell, "value-type") == "error":
            failed.append(column)
        elif text := " ".join(_value(cell).split()):
            if column + repeated - 1 > MAX_COLUMNS or len(text) > MAX_CELL:
                raise broken(source, f"a cell beyond column {MAX_COLUMNS} or of more than {MAX_CELL} characters")
            texts.update(dict.fromkeys(range(column, column + repeated), text))
        column += repeated
    return texts, failed


def _value(cell: "etree._Element") -> str:
    if _said(cell, "value-type") in _NUMBERS:
        return number(_said(cell, "value"))
    return "\n".join(_text(paragraph) for paragraph in cell.iterfind("{*}p"))


def _text(paragraph: "etree._Element") -> str:
    """The text of a paragraph; blanks and line ends in it are elements."""
    for element in paragraph.iterfind(".//{*}*"):
        if str(element.tag).endswith(("}s", "}tab", "}line-break")):
            element.text = " "
    return "".join(str(piece) for piece in paragraph.itertext())


def _repeated(element: "etree._Element", what: str) -> int:
    text = _said(element, f"number-{what}-repeated")
    return max(1, int(text)) if text.isdecimal() and len(text) < 8 else 1


def _said(element: "etree._Element", name: str) -> str:
    """An attribute by its name in any namespace; the last where several have it."""
    return next((str(text) for key, text in reversed(element.items()) if str(key).rpartition("}")[2] == name), "")
