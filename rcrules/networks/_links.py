"""What a part is between its nets: a joint at DC, a contact, a diode, a resistor or a capacitor."""

import re
from collections.abc import Iterator, Mapping
from dataclasses import replace
from itertools import pairwise
from typing import Final

from rcrules.design import Pin
from rcrules.networks._model import Branch, Contact, Diode
from rcrules.parts import Known, RatedPart
from rcrules.project import Project

_CLOSED: Final = re.compile(
    r"NORMALLY.?CLOSED|_NC(_|\b)|BRIDGED|\bCLOSED?\b|^JUMPER$|\bN\.?C\.?\b|SHORTED|CERRADO|ЗАМКНУТ", re.IGNORECASE
)
_OPEN: Final = re.compile(r"NORMALLY.?OPEN|_NO(_|\b)|OPEN|\bN\.?O\.?\b|ABIERTO", re.IGNORECASE)
_BRIDGED: Final = re.compile(r"BRIDGED(\d{2,3})", re.IGNORECASE)
_NORMALLY_CLOSED: Final = re.compile(r"NORMALLY.?CLOSED|\bN\.?C\.?\b|_NC(_|\b)", re.IGNORECASE)
_RESETTABLE: Final = re.compile(r"\d\s*m?A\b|RESET+ABLE|POLY.?(FUSE|SWITCH)|\bFUSE|\bPPTC\b|MULTIFUSE", re.IGNORECASE)
_COMMON: Final = frozenset(("C", "COM", "COMMON", "CC", "B", "2"))
_ANODE: Final = re.compile(r"A\d?|ANODE|\+?A\+?|AN", re.IGNORECASE)
_CATHODE: Final = re.compile(r"K\d?|C\d?|CATH?ODE|KATHODE|CAT", re.IGNORECASE)
_SHARED: Final = re.compile(r"COM|CA|AK|KA|A-?K|K-?A|COMMON", re.IGNORECASE)
_JOINING: Final = frozenset(("ferrite", "inductor", "fuse"))
_PHOTO: Final = re.compile(r"\bLDR|PHOTO.?(CELL|RESIST)|LIGHT.DEPENDENT|FOTO.?RESIST|ФОТОРЕЗИСТ", re.IGNORECASE)
_THERMISTOR: Final = re.compile(r"THERMIST|\b[NP]TC\b", re.IGNORECASE)


def joined(part: RatedPart, project: Project) -> Iterator[tuple[Pin, Pin]]:
    """Pairs of pins of a fitted part that are one net at DC."""
    pins = part.part.pins
    if part.kind == "net-tie":
        yield from pairwise(pins)
    elif part.kind == "jumper":
        yield from _bridged(part, project)
    elif len(pins) == 2 and ((part.kind in _JOINING and not is_thermistor(part)) or _is_link(part)):
        yield pins[0], pins[1]


def branches(part: RatedPart) -> Iterator[tuple[str, Pin, Pin]]:
    """Kind and the two pins of each resistor and capacitor in a part, the + pin of a capacitor first."""
    pins = part.part.pins
    if part.kind == "potentiometer":
        yield from (("resistor", first, second) for first, second in _track(pins))
    elif part.kind in ("resistor-array", "capacitor-array"):
        yield from ((part.kind.removesuffix("-array"), first, second) for first, second in _elements(part))
    elif len(pins) >= 2 and (part.kind in ("resistor", "capacitor") or is_thermistor(part)) and not _is_link(part):
        ends = _two_ends(pins)
        if ends:
            yield ("capacitor" if part.kind == "capacitor" else "resistor", *_plus_first(ends))


def contact(part: RatedPart, project: Project) -> Iterator[Contact]:
    """Contacts of a switch or button between nets, by net name; each throw of a change-over switch is one."""
    facts = project.parts.get(part.ref)
    said = facts.contact if facts else None
    closed = _NORMALLY_CLOSED.search(words(part)) if said is None else "closed" in said
    pins = _one_per_net(part.part.pins)
    common = next((pin for pin in pins if _COMMON & {pin.name.upper(), pin.number}), pins[0] if pins else None)
    for pin in pins:
        if common is not None and pin is not common and len(pins) <= 6:
            yield Contact(ref=part.ref, a=common.net, b=pin.net, normally="closed" if closed else "open")


def diodes(part: RatedPart) -> Iterator[Diode]:
    """Diodes of a one- or two-diode package whose pins are told by name, by net name; else nothing."""
    pins = part.part.pins
    if len(pins) not in (2, 3):
        return
    anodes, cathodes, shared = (_named(pins, pattern) for pattern in (_ANODE, _CATHODE, _SHARED))
    if len(pins) == 2 and not (anodes and cathodes):
        anodes, cathodes = _by_number(pins) if not (anodes or cathodes) else ([], [])
    if len(shared) == 1 and len(anodes) == len(cathodes) == 1:
        yield Diode(ref=part.ref, anode=anodes[0].net, cathode=shared[0].net)
        yield Diode(ref=part.ref, anode=shared[0].net, cathode=cathodes[0].net)
    elif min(len(anodes), len(cathodes)) == 1:
        yield from (Diode(ref=part.ref, anode=a.net, cathode=k.net) for a in anodes for k in cathodes if a.net != k.net)


def words(part: RatedPart) -> str:
    """Value, symbol and description in one text."""
    return f"{part.text} {part.part.symbol} {part.part.description}"


def branch(part: RatedPart, kind: str, pins: tuple[Pin, Pin], joints: Mapping[str, str]) -> Branch | None:
    """The branch between two joints, None where both pins are on one."""
    a, b = (joints[pin.net] for pin in pins)
    return Branch(ref=part.ref, kind=kind, a=a, b=b) if a != b else None


def is_thermistor(part: RatedPart) -> bool:
    """Whether the part may measure temperature: called so, without a word of a fuse or a current."""
    called = part.kind == "thermistor" or (part.kind == "fuse" and bool(_THERMISTOR.search(words(part))))
    return called and not _RESETTABLE.search(words(part))


def as_sensor(part: RatedPart) -> RatedPart:
    """A part of two pins that light turns into another resistance counts as a sensor like a thermistor."""
    if part.kind != "other" or len(part.part.pins) != 2 or not _PHOTO.search(f"{part.ref} {words(part)}"):
        return part
    return replace(part, kind="thermistor")


def _is_link(part: RatedPart) -> bool:
    return (part.kind in ("thermistor", "fuse") and bool(_RESETTABLE.search(words(part)))) or (
        part.kind == "resistor" and isinstance(part.value, Known) and part.value.si == 0.0
    )


def _bridged(part: RatedPart, project: Project) -> Iterator[tuple[Pin, Pin]]:
    facts, pins = project.parts.get(part.ref), part.part.pins
    said = facts.contact if facts else None
    found = _BRIDGED.search(words(part))
    if len(pins) > 2 and found:
        by_number = {pin.number: pin for pin in pins}
        yield from pairwise(by_number[number] for number in found[1] if number in by_number)
    elif len(pins) == 2 and (is_closed(part) if said is None else "closed" in said):
        yield pins[0], pins[1]


def is_closed(part: RatedPart) -> bool:
    """Whether a two-pin jumper is drawn closed; where nothing is said it counts as open."""
    texts = (part.text, part.part.symbol, part.part.description)
    return any(_CLOSED.search(text) for text in texts) and not any(_OPEN.search(text) for text in texts)


def _two_ends(pins: tuple[Pin, ...]) -> tuple[Pin, Pin] | None:
    ends = _one_per_net(pins)
    return (ends[0], ends[1]) if len(ends) == 2 else None


def _one_per_net(pins: tuple[Pin, ...]) -> list[Pin]:
    return list({pin.net: pin for pin in sorted(pins, key=lambda pin: pin.number, reverse=True)}.values())[::-1]


def _plus_first(ends: tuple[Pin, Pin]) -> tuple[Pin, Pin]:
    swap = ends[1].name in ("+", "P", "POS") or ends[0].name in ("-", "N", "NEG")
    return (ends[1], ends[0]) if swap else ends


def _track(pins: tuple[Pin, ...]) -> Iterator[tuple[Pin, Pin]]:
    """A potentiometer: end to wiper and wiper to end; used as a variable resistor, one branch."""
    ordered = sorted(pins, key=lambda pin: pin.number)
    wipers = [pin for pin in ordered if pin.name.upper() in ("W", "WIPER", "S")] or ordered[1:2]
    ends = [pin for pin in ordered if pin not in wipers]
    if len(ordered) == 2:
        yield ordered[0], ordered[1]
    elif len(ordered) == 3:
        yield from ((end, wipers[0]) for end in ends if end.net != wipers[0].net)


def _elements(part: RatedPart) -> Iterator[tuple[Pin, Pin]]:
    """The elements of an array that have both ends on nets."""
    by_number = {pin.number: pin for pin in part.part.pins}
    for first, second in part.elements:
        if first in by_number and second in by_number:
            yield by_number[first], by_number[second]


def _named(pins: tuple[Pin, ...], pattern: re.Pattern[str]) -> list[Pin]:
    return [
        pin
        for pin in pins
        if pattern.fullmatch(pin.name) or (not pin.name.strip("~") and pattern.fullmatch(pin.number))
    ]


def _by_number(pins: tuple[Pin, ...]) -> tuple[list[Pin], list[Pin]]:
    """The convention of footprints: pin 1 is the cathode, pin 2 the anode."""
    if any(pin.name.strip("~12") for pin in pins):
        return [], []
    return [pin for pin in pins if pin.number == "2"], [pin for pin in pins if pin.number == "1"]
