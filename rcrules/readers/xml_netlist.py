"""The XML netlist: root ``export`` of versions D and E."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from io import BytesIO
from typing import TYPE_CHECKING, Final, cast

from rcrules.readers._component import Component, Entry, LibraryPart
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._xml import BoundedStream, doctype_refusal, refuse_doctype, root_name

if TYPE_CHECKING:
    from lxml.etree import _Element

NAME: Final = "xml-netlist"
_TAGS: Final = ("{*}title_block", "{*}comp", "{*}libpart", "{*}net")


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for XML whose root is called ``export``."""
    return root_name(source) == "export"


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the netlist element by element, each let go once it is understood. Raises UserMistake."""
    del columns  # a netlist has none
    refuse_doctype(source)
    netlist = Netlist(source, NAME)
    blanks = source.data[: len(source.data) - len(source.data.lstrip(b" \t\r\n"))]
    skipped = blanks.count(b"\n")
    for element in _elements(source, source.data[len(blanks) :], skipped):
        _TAKE[_local(element)](netlist, element, skipped)
    return netlist.export()


def _elements(source: Source, data: bytes, skipped: int) -> Iterator[_Element]:
    """Each element of interest when it is complete; cleared after use, with all that stood before it."""
    from lxml import etree

    stream = BoundedStream(source, BytesIO(data), skipped + 1)
    context = etree.iterparse(
        stream,
        events=("end",),
        tag=_TAGS,
        resolve_entities="internal",
        no_network=True,
        load_dtd=False,
        attribute_defaults=False,
        huge_tree=False,
        remove_comments=True,
        remove_pis=True,
    )
    try:
        for _, element in context:
            yield element
            _let_go(element)
            stream.marks = 0
        root = context.root
    except etree.XMLSyntaxError as error:
        raise _broken(source, error, skipped) from error
    if root is not None and root.getroottree().docinfo.doctype:
        raise doctype_refusal(source, None)


def _let_go(element: _Element) -> None:
    element.clear()
    parent = element.getparent()
    while parent is not None and element.getprevious() is not None:
        del parent[0]


def _broken(source: Source, error: Exception, skipped: int) -> Exception:
    line, column = getattr(error, "position", (0, 0))
    return refusal(
        source.name,
        "the XML breaks off or is damaged",
        line=line + skipped if line else None,
        column=column or None,
        found=shorten(str(getattr(error, "msg", error)).partition(", use XML_")[0], 160),
        expected="one whole, well-formed XML document",
        do="export the netlist again",
    )


def _take_title(netlist: Netlist, element: _Element, skipped: int) -> None:
    del skipped
    if not netlist.title:
        netlist.title = _text(element, "title").strip()


def _take_component(netlist: Netlist, element: _Element, skipped: int) -> None:
    component = Component(ref=element.get("ref", "").strip(), line=_line(element, skipped))
    for child in element:
        _fill(component, child, _local(child), skipped)
    netlist.add_component(component)


def _fill(component: Component, child: _Element, tag: str, skipped: int) -> None:
    match tag:
        case "value":
            component.value, component.value_line = child.text or "", _line(child, skipped)
        case "footprint":
            component.footprint = child.text or ""
        case "description":
            component.description = child.text or ""
        case "fields":
            component.fields.extend(_entry(item, item.text, skipped) for item in child)
        case "property":
            component.properties.append(_entry(child, child.get("value"), skipped))
        case "libsource":
            component.library, component.symbol = child.get("lib", ""), child.get("part", "")
            component.description = component.description or child.get("description", "")
        case "sheetpath":
            component.sheet = child.get("names", "")
        case "variants":
            component.variants.extend(item.get("name", "") for item in child)


def _entry(item: _Element, text: str | None, skipped: int) -> Entry:
    return item.get("name", ""), text, _line(item, skipped)


def _take_library_part(netlist: Netlist, element: _Element, skipped: int) -> None:
    del skipped
    names, pins = [element.get("part", "")], {}
    for child in element:
        match _local(child):
            case "aliases":
                names.extend(alias.text or "" for alias in child)
            case "pins":
                pins = {pin.get("num", ""): (pin.get("name", ""), pin.get("type", "")) for pin in child}
    part = LibraryPart(pins=pins, description=_text(element, "description"))
    netlist.add_library_part(element.get("lib", ""), names, part)


def _take_net(netlist: Netlist, element: _Element, skipped: int) -> None:
    for child in element:
        if _local(child) == "node":
            get = child.get
            names = get("pinfunction", ""), get("pintype", "")
            netlist.add_node((get("ref", "").strip(), get("pin", "").strip(), *names, _line(child, skipped)))
    netlist.add_net(element.get("name", ""), element.get("code", ""), _line(element, skipped))


_TAKE: Final = {
    "title_block": _take_title,
    "comp": _take_component,
    "libpart": _take_library_part,
    "net": _take_net,
}


def _text(element: _Element, tag: str) -> str:
    return next((child.text or "" for child in element if _local(child) == tag), "")


def _local(element: _Element) -> str:
    return str(element.tag).rpartition("}")[2]


def _line(element: _Element, skipped: int) -> int:
    return skipped + (cast("int | None", element.sourceline) or 1)


READER = Reader(name=NAME, order=10, claims=claims, read=read)
