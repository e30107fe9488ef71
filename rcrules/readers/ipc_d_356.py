"""The bare-board test netlist: fixed columns after IPC-D-356 and 356A."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.errors import Place
from rcrules.readers import _bounds
from rcrules.readers._component import Component, Node
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._text import decode, head, numbered

NAME: Final = "ipc-d-356"
_HEAD: Final = 65_536
MAX_LINES: Final = 1_000_000
_COMMENT: Final = re.compile(r"\A(?:[CP](?: [^\r\n]*)?[\r\n]+|[\r\n]+)*+")
_RECORD: Final = re.compile(r"3[0-46]7[^\r\n]{14}   [^\r\n]{6}(?:[- ]|[\r\n]|\Z)")
_JOB: Final = re.compile(r"^P {1,3}(?:JOB|CODE|UNITS|TITLE|VER|IMAGE)\b", re.MULTILINE)
_POINTS: Final = frozenset({"317", "327", "367", "307", "347"})
_SAME_POINT: Final = frozenset({"017", "027", "067", "007", "047"})
"""The record above once more, from the other side of the board."""
_NO_POINTS: Final = frozenset({"378", "078", "379", "079", "389", "089", "088", "388", "099", "390", "090"})
"""Conductors, adjacent nets, outlines."""
_OPEN: Final = "N/C"
_ALIAS: Final = re.compile(r"[CP]\s*NNAME ?(\S+)\s+(\S.*)")
_FULL: Final = (14, 6, 4)
"""Columns of a net name, a reference and a pin."""
_SHOWN: Final = 5


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for text that starts, after comments and parameters, with a test record, or has a job's parameters."""
    text = head(source, _HEAD)
    start = _COMMENT.match(text)
    at = start.end() if start else 0
    return _RECORD.match(text, at) is not None or (at > 0 and _JOB.search(text, 0, at) is not None)


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read connectivity: parts, pins and nets. Raises UserMistake, also where the end record is missing."""
    del columns  # a test netlist has none
    text, assumed = decode(source)
    points = _Points(source)
    for line, record in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        if record.startswith("999"):
            return points.export(assumed)
        if record.strip():
            points.add(line, record)
    raise refusal(
        source.name,
        "the test netlist has no end record",
        line=text.rstrip().count("\n") + 1,
        expected="a last line 999",
        do="export it again; if it is whole, add a line 999 at its end",
    )


class _Points:
    """Collects what each record says of a point on the board."""

    def __init__(self, source: Source) -> None:
        self._source = source
        self._refs: dict[str, int] = {}
        self._nets: dict[str, int] = {}
        self._ends: dict[tuple[str, str, str], int] = {}
        self._aliases: dict[str, str] = {}
        self._unknown: list[int] = []
        self._bare: list[int] = []

    def add(self, line: int, record: str) -> None:
        """Take in one line."""
        kind = record[:3]
        if kind in _POINTS:
            self._point(line, record)
        elif record[0] in "CPcp":
            self._alias(record)
        elif kind not in _SAME_POINT and kind not in _NO_POINTS:
            self._unknown.append(line)

    def _alias(self, record: str) -> None:
        found = _ALIAS.match(record)
        if found is not None:
            self._aliases.setdefault(found[1].casefold(), found[2].rstrip())

    def _point(self, line: int, record: str) -> None:
        net, ref, pin = record[3:17].strip(), record[20:26].strip(), record[27:31].strip()
        net = "" if net.upper() == _OPEN else net
        if ref and ref.upper() != "VIA":
            if not pin:
                self._bare.append(line)
                return
            self._refs.setdefault(ref, line)
            self._ends.setdefault((net, ref, pin), line)
            _bounds.bound(self._source.name, line, "connections", len(self._ends), self._source.limits.connections)
        if net:
            self._nets.setdefault(net, line)
            _bounds.bound(self._source.name, line, "nets", len(self._nets), self._source.limits.nets)

    def export(self, assumed: tuple[Remark, ...]) -> Export:
        """Everything as an export. Raises UserMistake where no record names a part."""
        if not self._refs:
            raise self._nameless()
        netlist = Netlist(self._source, NAME, (*assumed, *self._remarks()))
        for ref, line in self._refs.items():
            netlist.add_component(Component(ref=ref, line=line))
        nodes: dict[str, list[Node]] = {net: [] for net in self._nets}
        for (net, ref, pin), line in self._ends.items():
            node = ref, pin, "", "", line
            if net:
                nodes[net].append(node)
            else:
                netlist.add_open(node)
        for net, own in nodes.items():
            for node in own:
                netlist.add_node(node)
            netlist.add_net(self._long(net), "", self._nets[net])
        return netlist.export()

    def _long(self, net: str) -> str:
        """The long name that the file gives for a name of fourteen columns."""
        token = net.casefold()
        return self._aliases.get(token) or self._aliases.get(token.removeprefix("nname")) or net

    def _nameless(self) -> Exception:
        return refusal(
            self._source.name,
            "the test netlist names no parts",
            line=next(iter(self._nets.values()), None) or next(iter(self._bare), None),
            found=f"{len(self._nets)} nets, no reference with a pin in columns 21 to 31",
            expected="records with references and pins",
            do="export it without leaving names out, or give the netlist of the schematic editor",
        )

    def _remarks(self) -> list[Remark]:
        said = [(next(iter(self._refs.values())), "a test netlist holds no values: they must come from a BOM")]
        cut = [name for name in self._cut() if name]
        if cut:
            first = next(iter(self._refs.values()))
            said.append((first, f"names that fill their columns may be cut, and two cut alike be one: {_listed(cut)}"))
        if self._bare:
            text = f"{len(self._bare)} pads of parts without a pin name are left out"
            said.append((self._bare[0], text))
        if self._unknown:
            lines = _listed(list(map(str, self._unknown)))
            said.append((self._unknown[0], f"records of an unknown kind are left out: line {lines}"))
        return [Remark(place=Place(file=self._source.name, line=line), text=text) for line, text in said]

    def _cut(self) -> list[str]:
        """Names as long as their columns, apart from nets with a long name."""
        nets = [net for net in self._nets if len(net) == _FULL[0] and self._long(net) == net]
        refs = [ref for ref in self._refs if len(ref) == _FULL[1]]
        return [*nets, *refs, *(f"{ref}-{pin}" for _, ref, pin in self._ends if len(pin) == _FULL[2])]


def _listed(names: list[str]) -> str:
    more = f" and {len(names) - _SHOWN} more" if len(names) > _SHOWN else ""
    return ", ".join(shorten(name) for name in names[:_SHOWN]) + more


READER = Reader(name=NAME, order=25, claims=claims, read=read)
