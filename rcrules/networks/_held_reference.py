"""Shunt references: a part that holds the net at its cathode, alone or with two resistors at its reference pin."""

import re
from collections.abc import Iterator, Mapping
from typing import Final

from rcrules.design import Design, Pin
from rcrules.networks._links import words
from rcrules.parts import Known, RatedPart

_SHUNT: Final = re.compile(
    r"SHUNT.{0,20}REF|REF.{0,20}SHUNT|VOLTAGE.?REF|(?<!\d)(?P<type>431|432|4040|4041|385|336)(?!\d)", re.IGNORECASE
)
_LOW: Final = re.compile(r"TLV\d?431|(?<!\d)432(?!\d)|1[.,]2\d*V?\b", re.IGNORECASE)
_CATHODES: Final = frozenset(("K", "C", "CATHODE", "CATH", "KA"))
_ANODES: Final = frozenset(("A", "ANODE", "AN"))
_SENSES: Final = frozenset(("REF", "R", "ADJ", "VREF", "FB"))
_VOLTS: Final = 2.495
_LOW_VOLTS: Final = 1.24
"""Reference voltages of the types 431 and 432 [V] (from memory)."""


def cathode(part: RatedPart, design: Design, parts: Mapping[str, RatedPart]) -> Pin | None:
    """The pin at which a shunt reference holds its net, None where the part is none or amplifies an error instead.

    The reference pin must be on the cathode's net, or a resistor must lie between the two.
    """
    pins = part.part.pins
    if part.kind not in ("ic", "other", "diode") or len(pins) > 8 or not _SHUNT.search(words(part)):
        return None
    upper = _only(pins, _CATHODES)
    if upper is None or _only(pins, _ANODES) is None:
        return None
    sense = sense_pin(part)
    if sense is None or sense.net == upper.net or any(_between(design, parts, upper.net, sense.net)):
        return upper
    return None


def sense_pin(part: RatedPart) -> Pin | None:
    """The reference pin, None where the part has none."""
    return _only(part.part.pins, _SENSES)


def reference_volts(part: RatedPart) -> float | None:
    """Voltage between reference pin and anode of a type that has one [V]."""
    found = _SHUNT.search(words(part))
    if found is None or found["type"] not in ("431", "432"):
        return None
    return _LOW_VOLTS if _LOW.search(part.text) else _VOLTS


def _between(design: Design, parts: Mapping[str, RatedPart], one: str, other: str) -> Iterator[str]:
    """Fitted resistors between two nets."""
    ends = {pin.ref for pin in design.nets[other].pins}
    for pin in design.nets[one].pins:
        part = parts.get(pin.ref)
        if pin.ref not in ends or part is None or not part.fitted:
            continue
        if part.kind == "resistor" and isinstance(part.value, Known):
            yield pin.ref


def _only(pins: tuple[Pin, ...], names: frozenset[str]) -> Pin | None:
    found = {pin.net: pin for pin in pins if pin.name.upper() in names}
    return next(iter(found.values())) if len(found) == 1 else None
