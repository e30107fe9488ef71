"""The S-expression netlist: ``(export (version …) …)`` of versions D and E."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.readers._component import Component, Departure, Entry, LibraryPart
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._netlist import Netlist
from rcrules.readers._sexpr import Form, parse
from rcrules.readers._text import decode, head

NAME: Final = "sexpr-netlist"
_START: Final = re.compile(r'\s*\(\s*"?export"?(?=[\s()"])')
_BRACED: Final = re.compile(r"\{([a-z]+)\}")
_CHARACTERS: Final = {
    "slash": "/",
    "backslash": "\\",
    "brace": "{",
    "dblquote": '"',
    "quote": "'",
    "lt": "<",
    "gt": ">",
    "colon": ":",
    "bar": "|",
    "space": " ",
    "tab": "\t",
    "return": "\n",
    "dollar": "$",
}


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for text that starts with ``(export``."""
    return _START.match(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the netlist form by form, each let go once it is understood. Raises UserMistake."""
    del columns  # a netlist has none
    text, remarks = decode(source)
    netlist = Netlist(source, NAME, remarks)

    def take(around: str | None, form: Form) -> bool:
        taker = _TAKE.get((around or "", form.head or ""))
        if taker is not None:
            taker(netlist, form)
        return taker is not None

    parse(source.name, text, take, _CONTAINERS)
    return netlist.export()


def _take_title(netlist: Netlist, form: Form) -> None:
    if not netlist.title:
        netlist.title = _resolved(form.text("title")).strip()


def _take_component(netlist: Netlist, form: Form) -> None:
    component = Component(ref=form.text("ref").strip(), line=form.line)
    for child in form.forms:
        _fill(component, child)
    netlist.add_component(component)


def _fill(component: Component, child: Form) -> None:
    match child.head:
        case "value":
            component.value, component.value_line = _first(child), child.line
        case "footprint":
            component.footprint = _first(child)
        case "description":
            component.description = _first(child)
        case "fields":
            component.fields.extend(_entry(item, _first(item)) for item in child.forms)
        case "property":
            component.properties.append(_property(child))
        case "libsource":
            component.library, component.symbol = _resolved(child.text("lib")), _resolved(child.text("part"))
            component.description = component.description or _resolved(child.text("description"))
        case "sheetpath":
            component.sheet = _resolved(child.text("names"))
        case "variants":
            component.variants.extend(_departure(item) for item in child.forms)


def _property(form: Form) -> Entry:
    value = form.find("value")
    return _entry(form, None if value is None else _first(value))


def _departure(form: Form) -> Departure:
    found = Departure(name=_resolved(form.text("name")).strip(), line=form.line)
    for child in form.forms:
        if child.head == "property":
            found.properties.append(_property(child))
        elif child.head == "fields":
            found.fields.extend(_entry(item, _first(item)) for item in child.forms)
    return found


def _entry(item: Form, text: str | None) -> Entry:
    return _resolved(item.text("name")), text, item.line


def _take_library_part(netlist: Netlist, form: Form) -> None:
    names = [_resolved(form.text("part"))]
    pins: dict[str, tuple[str, str]] = {}
    for child in form.forms:
        match child.head:
            case "aliases":
                names.extend(_first(alias) for alias in child.forms)
            case "pins":
                pins = {pin.text("num"): (_resolved(pin.text("name")), pin.text("type")) for pin in child.forms}
    part = LibraryPart(pins=pins, description=_resolved(form.text("description")))
    netlist.add_library_part(_resolved(form.text("lib")), names, part)


def _take_net(netlist: Netlist, form: Form) -> None:
    netlist.add_net(_resolved(form.text("name")), form.text("code"), form.line)


def _take_node(netlist: Netlist, form: Form) -> None:
    said = {child.head: child.atoms[0] for child in form.forms if child.atoms}
    function = _resolved(said.get("pinfunction", ""))
    names = said.get("ref", "").strip(), said.get("pin", "").strip()
    netlist.add_node((*names, function, said.get("pintype", ""), form.line))


_TAKE: Final = {
    ("sheet", "title_block"): _take_title,
    ("components", "comp"): _take_component,
    ("libparts", "libpart"): _take_library_part,
    ("nets", "net"): _take_net,
    ("net", "node"): _take_node,
}


_CONTAINERS: Final = frozenset({"export", "design", "sheet", "components", "libparts", "libraries", "nets"})
"""What stands directly in these is taken at once or needed nowhere."""


def _first(form: Form) -> str:
    return _resolved(form.first())


def _resolved(text: str) -> str:
    """The text with its brace escapes resolved (``{slash}``); unknown ones stay."""
    if "{" not in text:
        return text
    return _BRACED.sub(lambda found: _CHARACTERS.get(found.group(1), found.group(0)), text)


READER = Reader(name=NAME, order=20, claims=claims, read=read)
