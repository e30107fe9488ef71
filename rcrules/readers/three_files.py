"""The netlist in three files: nets with their nodes, parts with their primitives, primitives with their values."""

import re
from collections.abc import Mapping
from dataclasses import replace
from typing import Final

from rcrules.errors import Place, UserMistake
from rcrules.readers import _bounds
from rcrules.readers._component import Component
from rcrules.readers._export import Cell, Export, Primitive, Reader, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._pin_types import pin_type
from rcrules.readers._text import decode, head, numbered

NAME: Final = "three-files"
MAX_LINES: Final = 1_000_000
CLAIM: Final = re.compile(
    r"^[ \t]*(?:FILE_TYPE[ \t]*=[ \t]*(?:EXPANDED(?:NET|PART)LIST|LIBRARY_PARTS)\b|NODE_NAME[ \t]+\S+[ \t]+\S"
    r"|PART_NAME[ \t]*$|primitive[ \t]+')",
    re.IGNORECASE | re.MULTILINE,
)
_NODE: Final = re.compile(r"NODE_NAME\s+(\S+)\s+(\S+)", re.IGNORECASE)
_QUOTED: Final = re.compile(r"'([^']*)'")
_PIN_NAME: Final = re.compile(r"'([^']*)'\s*:\s*;?")
_PART: Final = re.compile(r"(\S+)\s+'([^']*)'.*")
_PRIMITIVE: Final = re.compile(r"primitive\s+(.*)", re.IGNORECASE)
_PROPERTY: Final = re.compile(r"([\w$]+)\s*=\s*'([^']*)'\s*[;,]?")
_NUMBERS: Final = re.compile(r"[^\s(),]+")
_USES: Final = {
    "in": "input",
    "out": "output",
    "bi": "bidirectional",
    "power": "power-in",
    "ground": "power-in",
    "tri": "tri-state",
    "ocl": "open-collector",
    "oca": "open-collector",
    "nc": "no-connect",
    "unspec": "",
}


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for any one of the three."""
    return CLAIM.search(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read nets and pins, or parts, or a library. Raises UserMistake, also where ``END.`` is missing."""
    del columns  # none of the three has any
    text, assumed = decode(source)
    found = _File(source, Netlist(source, NAME, assumed))
    for line, said in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        plain = said.strip()
        if plain.upper() == "END.":
            return found.export()
        if plain and not plain.startswith("{"):
            found.take(line, plain)
    raise refusal(
        source.name,
        "the file has no end",
        line=text.rstrip().count("\n") + 1,
        expected="a last line END.",
        do="export it again; if it is whole, add a line END. at its end",
    )


class _File:
    """Takes in line by line what one of the three says."""

    def __init__(self, source: Source, netlist: Netlist) -> None:
        self._source, self._netlist = source, netlist
        self._expected = self._section = self._pin = ""
        self._net: tuple[str, int] | None = None
        self._node: list[str] = []
        self._node_line = 0
        self._refs: dict[str, int] = {}
        self._names: list[str] = []
        self._library: dict[str, Primitive] = {}
        self._properties: dict[str, Cell] = {}
        self._pins: dict[str, tuple[str, str]] = {}

    def take(self, line: int, said: str) -> None:
        """Take in one line. Raises UserMistake where a net, a node or a part is not named as it should be."""
        upper = said.upper()
        if upper.startswith("NET_NAME"):
            self._finish_net()
            self._expected = "net"
            said = said[8:].strip()
        elif upper == "PART_NAME":
            self._expected, said = "part", ""
        if not said:
            return
        if self._expected:
            self._named(line, said)
        elif upper.startswith("NODE_NAME"):
            self._begin_node(line, said)
        elif _PRIMITIVE.fullmatch(said):
            self._begin_primitive(line, said)
        elif self._names:
            self._of_primitive(line, said)
        elif self._node and _PIN_NAME.fullmatch(said) and not said.startswith("'@"):
            self._node[2] = said[1:].partition("'")[0]

    def _named(self, line: int, said: str) -> None:
        """The line after NET_NAME or PART_NAME."""
        expected, self._expected = self._expected, ""
        if expected == "net":
            name = _QUOTED.search(said)
            if name is None or not name[1]:
                raise self._wrong(line, said, "a net without a name", "'NAME' on the line after NET_NAME")
            self._net = (name[1], line)
            return
        part = _PART.fullmatch(said)
        if part is None:
            raise self._wrong(line, said, "a part without a primitive", "REF 'PRIMITIVE' on the line after PART_NAME")
        self._netlist.add_component(Component(ref=part[1], line=line, symbol=part[2]))

    def _begin_node(self, line: int, said: str) -> None:
        self._finish_node()
        found = _NODE.match(said)
        if found is None or self._net is None:
            raise self._wrong(line, said, "a node without a part, a pin or a net", "NET_NAME, then NODE_NAME R1 2")
        self._node, self._node_line = [found[1], found[2], ""], line
        self._refs.setdefault(found[1], line)

    def _finish_node(self) -> None:
        if self._node:
            ref, number, name = self._node
            self._netlist.add_node((ref, number, name, "", self._node_line))
        self._node = []

    def _finish_net(self) -> None:
        self._finish_node()
        if self._net is not None:
            self._netlist.add_net(self._net[0], "", self._net[1])
        self._net = None

    def _begin_primitive(self, line: int, said: str) -> None:
        self._finish_primitive()
        self._names = _QUOTED.findall(said)
        self._section = ""
        _bounds.bound(self._source.name, line, "parts", len(self._library), self._source.limits.parts)

    def _of_primitive(self, line: int, said: str) -> None:
        word = said.rstrip(";").lower()
        if word in {"pin", "body"}:
            self._section = word
        elif word in {"end_pin", "end_body"}:
            self._section = ""
        elif word == "end_primitive":
            self._finish_primitive()
        elif self._section == "pin":
            self._of_pin(said)
        elif self._section == "body":
            found = _PROPERTY.fullmatch(said)
            if found is not None and found[2].strip():
                place = Place(file=self._source.name, line=line)
                self._properties.setdefault(found[1].upper(), Cell(text=found[2].strip(), place=place))
                _bounds.bound(self._source.name, line, "fields of one part", len(self._properties), _bounds.MAX_FIELDS)

    def _of_pin(self, said: str) -> None:
        named, property_ = _PIN_NAME.fullmatch(said), _PROPERTY.fullmatch(said)
        if named is not None:
            self._pin = named[1]
        elif property_ is not None and property_[1].upper() == "PIN_NUMBER":
            self._pins.update((number, (self._pin, "")) for number in _NUMBERS.findall(property_[2]) if number != "0")
        elif property_ is not None and property_[1].upper() == "PINUSE":
            use = _USES.get(property_[2].lower(), pin_type(property_[2]) or "unspecified")
            self._pins = {
                number: (name, use if name == self._pin else kind) for number, (name, kind) in self._pins.items()
            }

    def _finish_primitive(self) -> None:
        said = self._properties
        for name in self._names:
            self._library[name] = Primitive(
                value=said.get("VALUE"),
                symbol=said["PART_NAME"].text if "PART_NAME" in said else "",
                footprint=said["JEDEC_TYPE"].text if "JEDEC_TYPE" in said else "",
                fields={key: cell for key, cell in said.items() if key not in {"VALUE", "PART_NAME", "JEDEC_TYPE"}},
                pins=self._pins,
            )
        self._names, self._properties, self._pins = [], {}, {}

    def _wrong(self, line: int, said: str, problem: str, expected: str) -> UserMistake:
        do = "export the file again, or correct the line"
        return refusal(self._source.name, problem, line=line, found=shorten(said), expected=expected, do=do)

    def export(self) -> Export:
        """Everything as an export; parts that only the nets name are among them."""
        self._finish_net()
        self._finish_primitive()
        for ref, line in self._refs.items():
            self._netlist.add_component(Component(ref=ref, line=line))
        export = self._netlist.export()
        return replace(export, library=self._library, by_primitive=True)


READER = Reader(name=NAME, order=24, claims=claims, read=read)
