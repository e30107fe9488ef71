"""Small boards for tests of roles, written as text.

One part a line: ``R1 10k +3V3 NRST`` and ``C1 100n NRST GND`` lie between two nets, ``SW1 NRST GND`` is a contact,
``D1 A K`` a diode, ``Y1 IN OUT`` a crystal, and ``U1 [op-amp] OUT:output=VO -=FB`` any other part with its pins as
``name:type=net``, a pin number before the name as ``3.IN``. Nets are free unless ``hold`` names them.
"""

import re
from collections.abc import Iterable, Mapping
from typing import TypeVar

from rcrules.design import Design, Fact, Net, Part, Pin
from rcrules.errors import Place
from rcrules.networks._draft import Draft, RawNetwork
from rcrules.networks._model import Branch, Contact, Diode, Held, Node
from rcrules.networks._roles import bridged_nodes, nodes_of
from rcrules.parts import Known, RatedPart, Unknown
from rcrules.project import Project

Item = TypeVar("Item")
PLACE = Place(file="board.xml", line=1)
KINDS = {
    "R": "resistor", "TH": "thermistor", "C": "capacitor", "L": "inductor", "Y": "crystal", "U": "ic",
    "Q": "transistor", "J": "connector", "SW": "contact", "D": "diode", "TP": "test-point", "H": "mechanical",
}  # fmt: skip
SCALE = {"p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "": 1.0, "k": 1e3, "M": 1e6}
HOLD = {"GND": "ground", "+3V3": "supply", "+5V": "supply"}


def nodes(
    text: str, hold: Mapping[str, str] | None = None, local: Iterable[str] = (), project: Project | None = None
) -> dict[str, Node]:
    """The nodes of a board by name. hold: net -> kind, besides GND, +3V3 and +5V."""
    board = draft(text, {**HOLD, **(hold or {})}, frozenset(local), project or Project())
    found = [node for network in board.networks for node in nodes_of(board, network)]
    return {node.net: node for node in (*found, *bridged_nodes(board))}


def draft(text: str, hold: Mapping[str, str], local: frozenset[str], project: Project) -> Draft:
    """A draft in which every net is its own joint and all free nets make one network."""
    parts = {part.ref: part for part in map(_rated, filter(None, map(str.strip, text.splitlines())))}
    pins = _grouped((pin.net, pin) for part in parts.values() for pin in part.part.pins)
    branches = [_branch(part) for part in parts.values() if part.kind in ("resistor", "thermistor", "capacitor")]
    joints = {net: net for net in pins}
    held = {
        net: Held(net=net, kind=kind, voltage=None, given=False, evidence=(), sure=True) for net, kind in hold.items()
    }
    return Draft(
        design=Design(
            parts={ref: part.part for ref, part in parts.items()},
            nets={net: Net(name=net, pins=at, place=PLACE) for net, at in pins.items()},
            exports=(),
            remarks=(),
        ),
        parts=parts,
        project=project,
        joints=joints,
        members={net: (net,) for net in joints},
        held=held,
        local=local,
        pins=pins,
        branches=_grouped((end, item) for item in branches for end in (item.a, item.b)),
        contacts=_grouped((end, item) for item in _contacts(parts) for end in (item.a, item.b)),
        diodes=_grouped((end, item) for item in _diodes(parts) for end in (item.anode, item.cathode)),
        networks=(_network(branches, held, local),),
    )


def _network(branches: list[Branch], held: Mapping[str, Held], local: frozenset[str]) -> RawNetwork:
    nets = dict.fromkeys(end for item in branches for end in (item.a, item.b))
    free = tuple(net for net in nets if net not in held or net in local)
    return RawNetwork(id="n", branches=tuple(branches), free=free, held=tuple(net for net in nets if net in held))


def _rated(line: str) -> RatedPart:
    ref, _, rest = line.partition(" ")
    kind = KINDS[re.match(r"[A-Z]+", ref)[0]]  # type: ignore[index]  # every reference in a test has letters
    words = re.match(r"\s*\[(.*?)\]", rest)
    text, nets = (words[1], rest[words.end() :].split()) if words else ("", rest.split())
    if kind in ("resistor", "thermistor", "capacitor"):
        text, *nets = nets
    pins = tuple(_pin(ref, str(number), item) for number, item in enumerate(nets, 1))
    return RatedPart(part=_part(ref, text, pins), kind=kind, kind_why="", text=text, value=_value(text))


def _part(ref: str, text: str, pins: tuple[Pin, ...]) -> Part:
    fact = Fact(text=text, origin="netlist value", place=PLACE)
    return Part(
        ref=ref, place=PLACE, values=(fact,), fields={}, footprint="", symbol="", description="", sheet="/",
        fitted=True, fitted_why="", pins=pins,
    )  # fmt: skip


def _pin(ref: str, number: str, text: str) -> Pin:
    name, _, net = text.rpartition("=")
    name, _, type_ = name.partition(":")
    if match := re.match(r"(\d+)\.(.*)", name):
        number, name = match[1], match[2]
    return Pin(ref=ref, number=number, name=name, type=type_, net=net, place=PLACE)


def _value(text: str) -> Known | Unknown:
    match = re.fullmatch(r"([\d.]+)([pnumkM]?)", text)
    return Known(si=float(match[1]) * SCALE[match[2]], origin="netlist value") if match else Unknown(why="no number")


def _branch(part: RatedPart) -> Branch:
    a, b = (pin.net for pin in part.part.pins)
    return Branch(ref=part.ref, kind="capacitor" if part.kind == "capacitor" else "resistor", a=a, b=b)


def _contacts(parts: Mapping[str, RatedPart]) -> list[Contact]:
    ends = ((part.ref, *(pin.net for pin in part.part.pins)) for part in parts.values() if part.kind == "contact")
    return [Contact(ref=ref, a=a, b=b, normally="open") for ref, a, b in ends]


def _diodes(parts: Mapping[str, RatedPart]) -> list[Diode]:
    ends = ((part.ref, *(pin.net for pin in part.part.pins)) for part in parts.values() if part.kind == "diode")
    return [Diode(ref=ref, anode=anode, cathode=cathode) for ref, anode, cathode in ends]


def _grouped(pairs: Iterable[tuple[str, Item]]) -> dict[str, tuple[Item, ...]]:
    found: dict[str, dict[Item, None]] = {}
    for key, item in pairs:
        found.setdefault(key, {})[item] = None
    return {key: tuple(items) for key, items in found.items()}
