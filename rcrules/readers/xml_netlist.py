"""The XML netlist: root ``export`` of versions D and E."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import TYPE_CHECKING, Final

from rcrules.readers._component import Component, Departure, Entry, LibraryPart
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._netlist import Netlist
from rcrules.readers._xml import root_name
from rcrules.readers._xml_stream import Elements, local

if TYPE_CHECKING:
    from lxml.etree import _Element

NAME: Final = "xml-netlist"
_TAGS: Final = ("title_block", "comp", "libpart", "net")
Line = Callable[["_Element"], int]


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for XML whose root is called ``export``."""
    return root_name(source) == "export"


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the netlist element by element, each let go once it is understood. Raises UserMistake."""
    del columns  # a netlist has none
    elements = Elements(source, _TAGS)
    netlist = Netlist(source, NAME)
    for tag, element in elements:
        _TAKE[tag](netlist, element, elements.line)
    return netlist.export()


def _take_title(netlist: Netlist, element: _Element, line: Line) -> None:
    del line
    if not netlist.title:
        netlist.title = _text(element, "title").strip()


def _take_component(netlist: Netlist, element: _Element, line: Line) -> None:
    component = Component(ref=element.get("ref", "").strip(), line=line(element))
    add = component.properties.append
    for child in element:
        tag = local(child)
        if tag == "property":  # the most frequent by far
            add((child.get("name", ""), child.get("value"), line(child)))
        else:
            _fill(component, child, tag, line)
    netlist.add_component(component)


def _fill(component: Component, child: _Element, tag: str, line: Line) -> None:
    match tag:
        case "value":
            component.value, component.value_line = child.text or "", line(child)
        case "footprint":
            component.footprint = child.text or ""
        case "description":
            component.description = child.text or ""
        case "fields":
            component.fields += [(item.get("name", ""), item.text, line(item)) for item in child]
        case "libsource":
            component.library, component.symbol = child.get("lib", ""), child.get("part", "")
            component.description = component.description or child.get("description", "")
        case "sheetpath":
            component.sheet = child.get("names", "")
        case "variants":
            component.variants.extend(_departure(item, line) for item in child)


def _departure(element: _Element, line: Line) -> Departure:
    found = Departure(name=element.get("name", "").strip(), line=line(element))
    for child in element:
        if local(child) == "property":
            found.properties.append(_entry(child, child.get("value"), line))
        elif local(child) == "fields":
            found.fields.extend(_entry(item, item.text, line) for item in child)
    return found


def _entry(item: _Element, text: str | None, line: Line) -> Entry:
    return item.get("name", ""), text, line(item)


def _take_library_part(netlist: Netlist, element: _Element, line: Line) -> None:
    del line
    names, pins = [element.get("part", "")], {}
    for child in element:
        match local(child):
            case "aliases":
                names.extend(alias.text or "" for alias in child)
            case "pins":
                pins = {pin.get("num", ""): (pin.get("name", ""), pin.get("type", "")) for pin in child}
    part = LibraryPart(pins=pins, description=_text(element, "description"))
    netlist.add_library_part(element.get("lib", ""), names, part)


def _take_net(netlist: Netlist, element: _Element, line: Line) -> None:
    add = netlist.add_node
    for child in element:
        if local(child) == "node":
            get = child.get
            names = get("pinfunction", ""), get("pintype", "")
            add((get("ref", "").strip(), get("pin", "").strip(), *names, line(child)))
    netlist.add_net(element.get("name", ""), element.get("code", ""), line(element))


_TAKE: Final = {
    "title_block": _take_title,
    "comp": _take_component,
    "libpart": _take_library_part,
    "net": _take_net,
}


def _text(element: _Element, tag: str) -> str:
    return next((child.text or "" for child in element if local(child) == tag), "")


READER = Reader(name=NAME, order=10, claims=claims, read=read)
