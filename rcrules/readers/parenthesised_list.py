"""The older parenthesised list: a part after ``(`` with its stamp, then ``( pin net )`` on lines of their own."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._component import Component, Node
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._text import decode, head, numbered

NAME: Final = "parenthesised-list"
MAX_LINES: Final = 1_000_000
_STAMP: Final = r"(?:/[0-9A-Fa-f]*)+|[0-9A-Fa-f]{6,}"
CLAIM: Final = re.compile(rf"\A\s*(?:#[^\r\n]*\s+)*\(\s*(?:\{{[^\r\n]*\s+)?\(\s*(?:{_STAMP})\s")
_PART: Final = re.compile(rf"\(\s*({_STAMP})\s+(\S+)\s+(\S+)(?:\s+([^{{}}]*?))?\s*(?:\{{(.*)\}})?")
_PIN: Final = re.compile(r"\(\s*(\S+)\s+(\S+)\s*\)")
_NO_FOOTPRINT: Final = "$noname"
_OPEN: Final = "?"
_SYMBOL: Final = re.compile(r"Lib=(\S+)")


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True where a bracket opens and the next one starts with the stamp of a part."""
    return CLAIM.match(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read parts and their pins. Raises UserMistake, also where a bracket is not closed."""
    del columns  # a list in brackets has none
    text, assumed = decode(source)
    parts = _Parts(source, assumed)
    for line, said in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        plain = said.strip()
        if plain and not plain.startswith("#") and not parts.take(line, plain):
            return parts.export()
    raise refusal(
        source.name,
        "the list has no end",
        line=text.rstrip().count("\n") + 1,
        expected="a closing bracket for the first one",
        do="export it again; check that the file was not cut",
    )


class _Parts:
    """Takes in line by line what the list says."""

    def __init__(self, source: Source, assumed: tuple[Remark, ...]) -> None:
        self._source = source
        self._netlist = Netlist(source, NAME, assumed)
        self._depth = 0
        self._ref = ""
        self._nets: dict[str, list[Node]] = {}

    def take(self, line: int, said: str) -> bool:
        """Take in one line; False at the end of the list."""
        pin = _PIN.fullmatch(said) if self._depth == 2 else None
        part = _PART.fullmatch(said) if self._depth == 1 else None
        if pin is not None:
            self._pin(line, pin[1], pin[2])
        elif part is not None:
            self._part(line, part)
        elif said == ")" and self._depth:
            self._depth -= 1
        elif self._depth == 0 and said.partition("{")[0].strip() == "(":
            self._depth = 1
        else:
            raise refusal(
                self._source.name,
                "a line that is neither a part nor a pin",
                line=line,
                found=shorten(said),
                expected="( STAMP FOOTPRINT R1 10k, ( 1 NET ) or )",
                do="export the list again, or correct the line",
            )
        return self._depth > 0

    def _part(self, line: int, found: re.Match[str]) -> None:
        _, footprint, self._ref, value, further = found.groups()
        symbol = _SYMBOL.search(further or "")
        self._netlist.add_component(
            Component(
                ref=self._ref,
                line=line,
                value=(value or "").strip(),
                footprint="" if footprint == _NO_FOOTPRINT else footprint,
                symbol=symbol[1] if symbol else "",
            )
        )
        self._depth = 2

    def _pin(self, line: int, number: str, net: str) -> None:
        node = (self._ref, number, "", "", line)
        if net == _OPEN:
            self._netlist.add_open(node)
        else:
            self._nets.setdefault(net, []).append(node)

    def export(self) -> Export:
        """Everything as an export, nets in the order in which their first pins stand."""
        for name, nodes in self._nets.items():
            for node in nodes:
                self._netlist.add_node(node)
            self._netlist.add_net(name, "", nodes[0][4])
        return self._netlist.export()


READER = Reader(name=NAME, order=21, claims=claims, read=read)
