"""A circuit in text, one part a line: ``R1 10k 1% : +3V3, NRST``.

part  = reference value : pin { , pin }      pin = [name [type]] net
``U1 controller : VDD power-in +3V3, NRST input NRST, GND GND`` names pins, ``C1 1uF X7R : NRST, GND`` numbers them
from 1. Lines that are empty or start with # say nothing.
"""

from collections.abc import Iterator
from dataclasses import replace
from hashlib import sha256
from typing import Final

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.readers import Cell, Export, ExportPart, ExportPin
from rcrules.tomlfile import cut
from rcrules.vocabulary import PIN_TYPES

MAX_LINES: Final = 30
_LEFT_OUT: Final = "DNP"


def circuit_export(text: str, place: Place) -> Export:
    """The circuit as if an export had been read. Raises UserMistake at the place of the example."""
    lines = [line.strip() for line in text.splitlines()]
    told = [(number, line) for number, line in enumerate(lines, 1) if line and not line.startswith("#")]
    if not told or len(told) > MAX_LINES:
        raise _mistake(place, "the circuit has no parts or too many", f"{len(told)}", f"1 to {MAX_LINES} lines")
    rows = [_row(line, place) for _, line in told]
    refs = [ref for ref, _, _ in rows]
    if len(set(refs)) < len(refs):
        twice = next(ref for ref in refs if refs.count(ref) > 1)
        raise _mistake(place, "a reference stands twice in the circuit", twice, "each part once")
    pins = tuple(pin for ref, _, own in rows for pin in _pins(ref, own, place))
    return Export(
        reader="example",
        source=place.file,
        sha256=sha256(text.encode("utf-8", "replace")).hexdigest(),
        kind="netlist",
        parts=tuple(_part(ref, value, place) for ref, value, _ in rows),
        pins=pins,
        nets=tuple((net, place) for net in dict.fromkeys(pin.net for pin in pins)),
    )


def bom_export(text: str, place: Place) -> Export:
    """A BOM as if it had been read: ``R1 12k 1% | description`` a line, ``DNP`` after the value of what is left out."""
    rows = [line.split(maxsplit=1) for line in text.splitlines() if line.strip()]
    return Export(
        reader="example",
        source=f"{place.file}: bom",
        sha256=sha256(text.encode("utf-8", "replace")).hexdigest(),
        kind="bom",
        parts=tuple(_listed(row[0], row[1].strip() if len(row) > 1 else "", place) for row in rows),
        pins=(),
        nets=(),
    )


def _listed(ref: str, text: str, place: Place) -> ExportPart:
    value, _, description = (word.strip() for word in text.partition("|"))
    out = value.endswith(_LEFT_OUT)
    part = replace(_part(ref, value.removesuffix(_LEFT_OUT).strip(), place), description=description)
    return replace(part, fitted=False, fitted_why=_LEFT_OUT) if out else part


def _row(line: str, place: Place) -> tuple[str, str, str]:
    """Reference, value text, pins."""
    head, colon, pins = line.rpartition(" : ")
    ref, _, value = head.strip().partition(" ")
    if not colon or not ref or not pins.strip():
        raise _mistake(place, "a line of the circuit is no part", f"'{cut(line)}'", "R1 10k 1% : +3V3, NRST")
    return ref, value.strip(), pins


def _part(ref: str, value: str, place: Place) -> ExportPart:
    return ExportPart(ref=ref, place=place, value=Cell(text=value, place=place) if value else None)


def _pins(ref: str, text: str, place: Place) -> Iterator[ExportPin]:
    for number, pin in enumerate(text.split(","), 1):
        words = pin.split()
        if not 1 <= len(words) <= 3:
            expected = "NET, NAME NET or NAME TYPE NET"
            raise _mistake(place, f"a pin of {ref} is not understood", f"'{cut(pin)}'", expected)
        kind = words[1] if len(words) == 3 else ""
        if kind not in PIN_TYPES:
            raise _mistake(place, f"a pin of {ref} has no such type", kind, ", ".join(filter(None, PIN_TYPES)))
        name = words[0] if len(words) > 1 else ""
        yield ExportPin(ref=ref, number=str(number), name=name, type=kind, net=words[-1], place=place)


def _mistake(place: Place, problem: str, found: str, expected: str) -> UserMistake:
    return UserMistake(Mistake(place=place, problem=problem, found=found, expected=expected))
