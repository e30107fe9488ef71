"""A description of an XML or delimited file that no reader knows, as far as its names tell."""

from __future__ import annotations

import json
from collections import Counter
from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING, Final

from rcrules.readers import _bounds
from rcrules.readers._columns import FOOTPRINT, NET, PART, PIN, PIN_NAME, PIN_VALUE, VALUE, plain
from rcrules.readers._mistakes import shorten
from rcrules.readers._table import rows
from rcrules.readers._text import decode
from rcrules.readers._xml import MAX_MARKS, root_name
from rcrules.readers._xml_stream import Elements, local

if TYPE_CHECKING:
    from rcrules.readers._export import Source

_NAMES: Final[Mapping[str, Sequence[str]]] = {
    "net": NET,
    "reference": (*PART, "id", "name"),
    "pin": (*PIN, "number", "num", "no"),
    "pin-name": PIN_NAME,
    "value": (*PIN_VALUE, *VALUE),
    "footprint": FOOTPRINT,
}
_PART_CELLS: Final = ("reference", "value", "footprint")
_PIN_CELLS: Final = ("net", "reference", "pin", "pin-name")
_ASK: Final = "?"
"""Stands where no name tells: a project file with it says what is missing, and where."""
_MOST: Final = 400
"""Different paths of elements that are looked at."""


def proposal(source: Source) -> str | None:
    """A ``[[format]]`` table with ``?`` where the file's names tell nothing; None where it is neither XML nor a table.

    Raises UserMistake where the file is damaged or hostile.
    """
    root = root_name(source)
    if root is not None:
        return _of_xml(source, root)
    text, _ = decode(source)
    found = rows(source, text, lambda _: False)
    width = max((len(row.cells) for row in found[:50]), default=0)
    header = next((row for row in found[:50] if len(row.cells) == width), None)
    if header is None or width < 2:
        return None
    named = _guessed(dict.fromkeys(header.cells), ("net", "reference", "pin", "value", "footprint"))
    if "net" not in named:
        named.pop("pin", None)
    asked = {cell: _ASK for cell in ("reference", *(("pin",) if "net" in named else ())) if cell not in named}
    told = header.delimiter.join(header.cells[:2])
    others = [name for name in header.cells if name and name not in named.values()]
    return _text("delimited", told, (f"columns = {_inline({**named, **asked})}",), others)


def _of_xml(source: Source, root: str) -> str | None:
    """The elements that hold parts and pins, by the names of their attributes and children."""
    _bounds.bound(source.name, 1, "elements", source.data.count(b"<"), MAX_MARKS)
    counted: Counter[str] = Counter()
    cells: dict[str, dict[str, None]] = {}
    stream = Elements(source, None, "file")
    for _, element in stream:
        stream.keep()
        around = element.getparent()
        path = local(element) if around is None else f"{local(around)}/{local(element)}"
        if len(cells) >= _MOST and path not in cells:
            continue
        counted[path] += 1
        own = cells.setdefault(path, {})
        own |= dict.fromkeys(f"@{str(key).rpartition('}')[2]}" for key in element.keys())  # noqa: SIM118 - of lxml
        own |= dict.fromkeys(local(child) for child in element if not len(child))
        if around is not None:
            own |= dict.fromkeys(f"../@{str(key).rpartition('}')[2]}" for key in around.keys())  # noqa: SIM118 - of lxml
    pins, pin_cells = _best(counted, cells, _PIN_CELLS, 3)
    parts, part_cells = _best({path: count for path, count in counted.items() if path != pins}, cells, _PART_CELLS, 2)
    lines = [
        f"{name} = {_inline({'each': f'//{path}', **found})}"
        for name, path, found in (("parts", parts, part_cells), ("pins", pins, pin_cells))
        if path
    ]
    if not lines:
        lines = [f"parts = {_inline({'each': '//' + _ASK, 'reference': _ASK, 'value': _ASK})}"]
    others = [f"//{path} ({count})" for path, count in counted.most_common(8) if path not in (parts, pins)]
    return _text("xml", f"<{root}", lines, others)


def _best(
    counted: Mapping[str, int], cells: Mapping[str, dict[str, None]], wanted: Sequence[str], least: int
) -> tuple[str, dict[str, str]]:
    """The element with the most of the cells wanted, and what gives them; ('', {}) where none has enough."""
    guesses = {path: _guessed(cells[path], wanted) for path in counted}
    fit = [path for path, guess in guesses.items() if len({*guess} & {*wanted[:least]}) == least]
    best = max(fit, key=lambda path: (len(guesses[path]), counted[path]), default="")
    return best, guesses.get(best, {})


def _guessed(names: Mapping[str, None], wanted: Sequence[str]) -> dict[str, str]:
    """Cell -> name in the file, by the spellings that exports use; each name once."""
    found: dict[str, str] = {}
    for cell in wanted:
        spelled = {plain(_bare(cell, name)): name for name in reversed([*names]) if name not in found.values()}
        best = next((spelled[spelling] for spelling in _NAMES[cell] if spelling in spelled), None)
        if best is not None:
            found[cell] = best
    return found


def _bare(cell: str, name: str) -> str:
    """The name without its path; the name of the element around a pin is its net's."""
    own = name.rpartition("@")[2]
    return "net" if cell == "net" and name == "../@name" else own


def _inline(cells: Mapping[str, str]) -> str:
    said = {cell: json.dumps(shorten(name, 200), ensure_ascii=False) for cell, name in cells.items()}
    inside = ", ".join(f"{cell} = {text}" for cell, text in said.items())
    return f"{{ {inside} }}"


def _text(kind: str, has: str, lines: Sequence[str], others: Sequence[str]) -> str:
    said = shorten(", ".join(others), 100)
    more = [f"# also in the file: {said}"] if said else []
    head = ("[[format]]", 'name = "house format"', f'kind = "{kind}"', f"has = {json.dumps(has, ensure_ascii=False)}")
    return "\n".join((*head, *lines, *more, ""))
