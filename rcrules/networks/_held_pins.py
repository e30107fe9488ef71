"""What a pin says about the net it is on: ground, supply, source of a supply, switching node, output."""

import re
from collections.abc import Mapping
from functools import lru_cache
from typing import Final

from rcrules.design import Pin
from rcrules.networks._family import inverting
from rcrules.networks._held_claims import GROUND, NEGATIVE, NEVER, NOTHING, OPEN, OUTPUT, SOURCE, SUPPLY, SWITCH
from rcrules.networks._held_pin_words import NAMES
from rcrules.networks._links import words
from rcrules.parts import RatedPart

_MARKS: Final = re.compile(r"[~{}\\\s#*]|_?\d+$")
_OPEN_NAMES: Final = re.compile(r"N?INT|IRQ|ALERT|P?GOOD|PG|FAULT|FLA?G|FLT|SDA|SCL|OD|OC|ALARM|RDY|BUSY")
_LOGIC_OUT: Final = re.compile(r"[A-D1-8]?(OUT|Y|Q)[A-D1-8]?|V?O|OUT[+\-PNAB]?|[A-Z]?DOUT|[TR]OUT|RO|TXOUT|DTR|RTS")
_CONVERTER_OUT: Final = re.compile(r"[AI]OUT[A-Z]{0,2}\d{0,2}[PNLR+\-]?")
"""Outputs of digital-to-analog converters, by channel, side and sign; no pin of such a name takes a voltage in."""
_ANALOG_OUT: Final = re.compile(r"VOUT[+\-A-D]?|VOUT_?[A-D1-8]")
"""Outputs of amplifiers, converters and sensors, where the part makes no supply."""
_FLYING: Final = re.compile(r"C(F|FLY|AP|P)?\d?[+\-]")
"""Pins of a charge pump's flying capacitor."""
_REGULATOR: Final = re.compile(
    r"REGULATOR|\bLDO\b|LOW.?DROP|STEP.?(DOWN|UP)|\bBUCK\b|\bBOOST\b|DC.?DC|CONVERTER.*POWER|VOLTAGE REF|LOAD SWITCH"
    r"|POWER SWITCH|\bL?[A-Z]{0,4}(78|79)[LMTS]?\d\d|1117|LINEAR"
)
_OUT: Final = re.compile(r"V?O(UT)?[\dA-Z]?|OUT_?\d*")
_IN: Final = re.compile(r"V?I(N)?[\dA-Z]?|IN_?\d*|[PA]VIN")

_NO_REGULATOR: Final = re.compile(
    r"OP.?AMP|AMPLIFIER|COMPARATOR|\bDAC\b|DIGITAL.TO.ANALOG|SENSOR|BUFFER|DRIVER|\bADC\b"
)
_AMPLIFIER: Final = frozenset(("+IN", "-IN", "IN+", "IN-", "+INA", "+", "-", "INA+", "IN1+", "+IN1", "VIN+", "VIN-"))
_SUPPLIED: Final = frozenset(("VDD", "VCC", "V+", "VS", "+VS", "VS+"))
"""A part with a supply pin of such a name beside its input and output is a driver or sensor."""
_FEEDBACK: Final = frozenset(("FB", "VFB", "FEEDBACK", "ADJ", "SW", "LX", "PH", "PHASE", "BST", "BOOT"))
_BY_TYPE: Final = {"output": OUTPUT, "open-collector": OPEN, "open-emitter": OUTPUT, "tri-state": OUTPUT}
_POSITIONS: Final = {
    ("5", "2"): frozenset("1"),
    ("7", "4"): frozenset("6"),
    ("8", "4"): frozenset("17"),
    ("4", "11"): frozenset(("1", "7", "8", "14")),
    ("3", "12"): frozenset(("1", "2", "13", "14")),
}
"""Supply pins, positive and negative -> outputs: single in 5 and 8 pins, dual, quad amplifier, quad comparator."""
_PINOUTS: Final = (
    (re.compile(r"(?<!\d)(?:393|2903)(?!\d)"), 8, frozenset("17"), OPEN),
    (re.compile(r"(?<!\d)(?:339|2901)(?!\d)"), 14, frozenset(("1", "2", "13", "14")), OPEN),
    (re.compile(r"(?<!\d)(?:358|2904|0[678]2|4558|5532|833|1458)(?!\d)"), 8, frozenset("17"), OUTPUT),
    (re.compile(r"(?<!\d)(?:324|2902|0[678]4)(?!\d)"), 14, frozenset(("1", "7", "8", "14")), OUTPUT),
)
"""Type numbers of the trade, number of pins, their outputs and what these are: dual and quad comparator, amplifier."""
_SEVERAL_OUTPUTS: Final = frozenset(("1", "7", "8", "14"))
_POWERED: Final = ("power-in", "power-out")
_CONNECTOR_NAMES: Final = frozenset((GROUND, SUPPLY))
_MODULE_PINS: Final = 4


def claim(pin: Pin, part: RatedPart, *, regulator: bool) -> str:
    """What the pin says about its net; only pins of ICs, modules, batteries and connectors say anything."""
    kind = part.kind
    if kind in ("ic", "other", "transformer"):
        return _of_chip(pin, regulator=regulator)
    if kind == "connector":
        found = by_name(pin.name)
        signal = found == SUPPLY and (_IN.fullmatch(pin.name.upper()) is not None and pin.type not in _POWERED)
        if found in _CONNECTOR_NAMES and not signal:
            return found
        drives = _LOGIC_OUT.fullmatch(pin.name.upper()) or _ANALOG_OUT.fullmatch(pin.name.upper())
        return OUTPUT if drives and _is_module(part) else NOTHING
    return SUPPLY if kind == "battery" and _positive(pin) else NOTHING


def _is_module(part: RatedPart) -> bool:
    """Whether a part drawn as a connector is a sensor or receiver: three or four named pins, supply and ground.

    With an input and an output instead it makes a supply.
    """
    names = {by_name(pin.name) for pin in part.part.pins if not _IN.fullmatch(pin.name.upper())}
    return len(part.part.pins) <= _MODULE_PINS and {GROUND, SUPPLY} <= names


def by_name(name: str) -> str:
    """What the name alone says; trailing digits and marks of active-low are ignored."""
    return _by_name(name.upper().strip("~{}# "))


@lru_cache(maxsize=16384)
def _by_name(own: str) -> str:
    for text in (own, _MARKS.sub("", own)):
        for what, pattern in NAMES:
            if text and pattern.fullmatch(text):
                return what
    return NOTHING


def is_regulator(part: RatedPart) -> bool:
    """Whether the part makes a supply: by its words, or by an input, an output and few other pins."""
    names = {pin.name.upper() for pin in part.part.pins}
    if names & _AMPLIFIER or _NO_REGULATOR.search(words(part).upper()):
        return False
    if _REGULATOR.search(words(part).upper()):
        return True
    if any(_FLYING.fullmatch(name) for name in names):
        return True
    if names & _SUPPLIED and not names & _FEEDBACK:
        return False
    has = [any(pattern.fullmatch(name) for name in names) for pattern in (_IN, _OUT)]
    return has[0] and ((has[1] and len(names) <= 8) or bool(names & _FEEDBACK))


def _of_chip(pin: Pin, *, regulator: bool) -> str:
    name = pin.name.upper()
    named = by_name(name)
    if named == SOURCE and _ANALOG_OUT.fullmatch(name) and pin.type != "power-out" and not regulator:
        return OUTPUT
    if regulator and _OUT.fullmatch(name):
        return SOURCE
    if named in (SWITCH, NEVER, GROUND, NEGATIVE, SOURCE):
        return _unless_typed(pin, named)
    if named == SUPPLY and pin.type not in ("output", "power-out", "open-collector", "tri-state"):
        return SUPPLY if regulator or not _IN.fullmatch(name) or pin.type == "power-in" else NOTHING
    return _typed(pin, name, named)


def outputs_by_position(part: RatedPart) -> Mapping[str, str]:
    """Number -> claim of the outputs of an amplifier or comparator whose outputs have no pin names.

    By the type number, else what is left beside named inputs, else by where the supply pins are.
    """
    pins = {pin.number: pin.name.upper() for pin in part.part.pins}
    nameless = {number for number, name in pins.items() if name.strip("~") in ("", number)}
    known = next(((out, claim) for name, count, out, claim in _PINOUTS if _fits(part, name, count)), None)
    if known is not None:
        return dict.fromkeys(known[0] & nameless, known[1])
    plus = [number for number, name in pins.items() if name in ("V+", "VCC", "VDD", "VS+", "+VS", "VCC+", "V")]
    minus = [number for number, name in pins.items() if name in ("V-", "GND", "VSS", "VS-", "-VS", "VCC-", "VEE")]
    if {True, False} <= {inverting(name) for name in pins.values()} and (plus or minus):
        return dict.fromkeys(nameless if len(nameless) == 1 else nameless & _SEVERAL_OUTPUTS, OUTPUT)
    if len(plus) != 1 or len(minus) != 1 or len(nameless) < 3:
        return {}
    return dict.fromkeys(_POSITIONS.get((plus[0], minus[0]), frozenset()) & nameless, OUTPUT)


def _fits(part: RatedPart, name: re.Pattern[str], count: int) -> bool:
    """Whether a part has a type number and as many pins, or fewer where the export leaves open ones out."""
    return len(part.part.pins) <= count and name.search(part.text) is not None


def _unless_typed(pin: Pin, named: str) -> str:
    """The name, but a power output is no ground unless named so in full, and a supply pin type beats a passive name."""
    if named == GROUND and pin.type in ("input", "output", "bidirectional") and len(pin.name) <= 2:
        return NOTHING
    if named == NEVER and pin.type == "power-in":
        return NOTHING
    if named == NEGATIVE and pin.type == "power-out":
        return SOURCE
    return named


def _typed(pin: Pin, name: str, named: str) -> str:
    if pin.type == "power-in":
        return SUPPLY
    if pin.type == "power-out":
        return SOURCE
    if pin.type == "output" and _OPEN_NAMES.fullmatch(_MARKS.sub("", name)):
        return OPEN
    if pin.type in _BY_TYPE:
        return SOURCE if named == SUPPLY else _BY_TYPE[pin.type]
    drives = _LOGIC_OUT.fullmatch(name) or _CONVERTER_OUT.fullmatch(name)
    return OUTPUT if pin.type in ("", "passive", "unspecified", "input") and drives else NOTHING


def _positive(pin: Pin) -> bool:
    return pin.name.upper() in ("+", "P", "POS", "PLUS", "A", "BAT+") or (
        not pin.name.strip("-") and pin.number in ("1", "+")
    )
