"""Small boards for tests of recognition, written as text.

One part a line: ``R1 10k +3V3 NRST`` lies between two nets, and ``U1 [value] IN:power-in=+5V OUT=+3V3`` has its pins as
``name:type=net``. ``!`` after the reference marks a part that is not fitted, ``?`` a value that is not understood.
"""

import re
from collections.abc import Iterator

from rcrules.design import Design, Fact, Net, Part, Pin
from rcrules.errors import Place
from rcrules.networks import Board, Held, recognise
from rcrules.parts import Known, RatedPart, Unknown
from rcrules.project import Project

PLACE = Place(file="board.xml", line=1)
KINDS = {
    "R": "resistor", "LDR": "other", "TH": "thermistor", "RV": "potentiometer", "C": "capacitor",
    "RN": "resistor-array", "L": "inductor",
    "FB": "ferrite", "F": "fuse", "JP": "jumper", "NT": "net-tie", "Y": "crystal", "U": "ic", "Q": "transistor",
    "J": "connector", "SW": "contact", "D": "diode", "BT": "battery", "TP": "test-point", "H": "mechanical",
}  # fmt: skip
SCALE = {"p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "": 1.0, "k": 1e3, "M": 1e6}
VALUED = ("R", "C", "RV", "TH")


def board(text: str, project: Project | None = None) -> Board:
    """The board that is recognised from the text."""
    rated = map(part, filter(None, map(str.strip, text.splitlines())))
    parts = {item.ref: item for item in rated}
    nets: dict[str, list[Pin]] = {}
    for item in parts.values():
        for pin in item.part.pins:
            nets.setdefault(pin.net, []).append(pin)
    design = Design(
        parts={ref: item.part for ref, item in parts.items()},
        nets={name: Net(name=name, pins=tuple(pins), place=PLACE) for name, pins in nets.items()},
        exports=(),
        remarks=(),
    )
    return recognise(design, parts, project or Project())


def held(text: str, project: Project | None = None) -> dict[str, Held]:
    """What holds the nets of a board."""
    return dict(board(text, project).held)


def kinds(text: str, project: Project | None = None) -> dict[str, str]:
    """Kind of each held net of a board."""
    return {net: item.kind for net, item in held(text, project).items()}


def volts(text: str, net: str) -> float | None:
    """Nominal voltage of a held net [V]."""
    found = held(text)[net].voltage
    return None if found is None else found.nominal


def part(line: str) -> RatedPart:
    """The part of one line."""
    ref, _, rest = line.partition(" ")
    fitted, ref = not ref.endswith("!"), ref.rstrip("!")
    prefix = re.sub(r"\d.*", "", ref)
    text, words = _value(rest, valued=prefix in VALUED)
    pins = tuple(_pins(ref, words))
    facts = (Fact(text=text, origin="netlist value", place=PLACE),)
    drawn = Part(
        ref=ref, place=PLACE, values=facts, fields={}, footprint="", symbol="", description="", sheet="",
        fitted=fitted, fitted_why="" if fitted else "marked not fitted", pins=pins,
    )  # fmt: skip
    value = _number(text) if prefix in ("R", "C") else Unknown(why="not a resistor or capacitor")
    return RatedPart(
        part=drawn, kind=KINDS[prefix], kind_why="", text=text, value=value, fitted=fitted, fitted_why=drawn.fitted_why
    )


def _value(rest: str, *, valued: bool) -> tuple[str, list[str]]:
    bracket = re.match(r"\s*\[(.*?)\]", rest)
    if bracket:
        return bracket[1], rest[bracket.end() :].split()
    words = rest.split()
    return (words[0], words[1:]) if valued else ("", words)


def _pins(ref: str, words: list[str]) -> Iterator[Pin]:
    for number, word in enumerate(words, 1):
        label, equals, net = word.rpartition("=")
        name, _, kind = label.partition(":")
        yield Pin(ref=ref, number=str(number), name=name, type=kind, net=net if equals else word, place=PLACE)


def _number(text: str) -> Known | Unknown:
    found = re.fullmatch(r"([\d.]+)([pnumkM]?)", text)
    if not found:
        return Unknown(why="not understood")
    return Known(si=float(found[1]) * SCALE[found[2]], origin="netlist value")
