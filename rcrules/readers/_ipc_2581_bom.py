"""BOM items, characteristics and makers' part numbers of an IPC-2581 file."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from math import isfinite
from typing import TYPE_CHECKING, Final

from rcrules.readers._columns import plain
from rcrules.readers._xml_stream import local

if TYPE_CHECKING:
    from lxml.etree import _Element

    from rcrules.readers._component import Entry

_VALUES: Final = ("value", "comp value", "part value", "val", "resistance", "capacitance", "inductance")
"""Names under which writers give the value, best first."""
_NO: Final = frozenset({"false", "0"})
Line = Callable[["_Element"], int]


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """What a BOM says of all parts of one item."""

    number: str
    """OEMDesignNumberRef: the key of the list of makers."""
    quantity: str
    description: str
    line: int
    entries: tuple[Entry, ...]
    """Characteristics, with the internal part number."""
    places: tuple[tuple[str, str, bool, int], ...]
    """Reference, package, whether populated, and line of each part."""


@dataclass(slots=True, kw_only=True)
class Bom:
    """One BOM of the file."""

    name: str
    line: int
    steps: list[str] = field(default_factory=list)
    items: list[Item] = field(default_factory=list)


def item_of(element: _Element, line: Line) -> Item:
    """The item of a BomItem element."""
    entries: list[Entry] = []
    places: list[tuple[str, str, bool, int]] = []
    own = element.get("packageRef", "")
    for child in element:
        match local(child):
            case "RefDes":
                populated = child.get("populate", "").strip().lower() not in _NO
                package = child.get("packageRef", "") or own
                places.append((child.get("name", "").strip(), package, populated, line(child)))
            case "Characteristics":
                entries.extend(entry for said in child for entry in _characteristic(said, line))
    internal = element.get("internalPartNumber", "")
    if internal:
        entries.append(("internalPartNumber", internal, line(element)))
    return Item(
        number=element.get("OEMDesignNumberRef", ""),
        quantity=element.get("quantity", ""),
        description=element.get("description", ""),
        line=line(element),
        entries=tuple(entries),
        places=tuple(places),
    )


def split_value(entries: tuple[Entry, ...]) -> tuple[Entry | None, list[Entry]]:
    """The entry that gives the value, None without one, and the others."""
    for wanted in _VALUES:
        for index, (name, text, _) in enumerate(entries):
            if plain(name) == wanted and (text or "").strip():
                return entries[index], [*entries[:index], *entries[index + 1 :]]
    return None, list(entries)


def makers(element: _Element) -> tuple[str, str, str]:
    """Design number, maker's part number and enterprise of an AvlItem: the chosen one, else the first."""
    offers = [child for child in element if local(child) == "AvlVmpn"]
    chosen = [offer for offer in offers if offer.get("chosen", "").strip().lower() in ("true", "1")]
    offer = next(iter((*chosen, *offers)), None)
    parts = {} if offer is None else {local(child): child for child in offer}
    number = parts["AvlMpn"].get("name", "") if "AvlMpn" in parts else ""
    maker = parts["AvlVendor"].get("enterpriseRef", "") if "AvlVendor" in parts else ""
    return element.get("OEMDesignNumber", ""), number, maker


def _characteristic(said: _Element, line: Line) -> Iterator[Entry]:
    kind, at = local(said), line(said)
    match kind:
        case "Textual" | "Enumerated":
            stem = kind.lower()
            yield said.get(f"{stem}CharacteristicName", ""), said.get(f"{stem}CharacteristicValue", ""), at
        case "Measured":
            name, unit = said.get("measuredCharacteristicName", ""), said.get("engineeringUnitOfMeasure", "")
            value = said.get("measuredCharacteristicValue", "")
            yield name, f"{value} {unit}".strip(), at
            yield from _tolerance(said, name, value, at)
        case "Ranged":
            name, unit = said.get("rangedCharacteristicName", ""), said.get("engineeringUnitOfMeasure", "")
            ends = [said.get(f"rangedCharacteristic{end}Value", "") for end in ("Lower", "Upper")]
            yield name, " .. ".join(f"{end} {unit}".strip() for end in ends if end), at


def _tolerance(said: _Element, name: str, value: str, line: int) -> Iterator[Entry]:
    """The tolerance of a measured value, which stands in the unit of the value, in percent."""
    nominal = _number(value)
    below, above = (_number(said.get(f"engineering{end}Tolerance", "")) for end in ("Negative", "Positive"))
    if plain(name) not in _VALUES or not nominal or below is None or above is None:
        return
    low, high = (f"{100 * abs(part / nominal):.6g} %" for part in (below, above))
    yield "Tolerance", low if low == high else f"-{low} +{high}", line


def _number(text: str) -> float | None:
    try:
        number = float(text)
    except ValueError:
        return None
    return number if isfinite(number) else None
