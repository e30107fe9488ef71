"""What a pin says about the net it is on: ground, supply, source of a supply, switching node, output."""

import re
from typing import Final

from rcrules.design import Pin
from rcrules.networks._links import words
from rcrules.parts import RatedPart

GROUND: Final = "ground"
NEGATIVE: Final = "negative"
"""The lower supply pin of a part: on ground or on a negative supply."""
SUPPLY: Final = "supply"
SOURCE: Final = "source"
"""Gives a supply: a regulator's output, an internal regulator's capacitor pin, a reference."""
SWITCH: Final = "switch"
OUTPUT: Final = "output"
OPEN: Final = "open-drain"
NEVER: Final = "never"
"""A pin that holds no net whatever its type says: compensation, feedback, crystal, timing, bootstrap."""
NOTHING: Final = ""

_MARKS: Final = re.compile(r"[~{}\\\s#*]|_?\d+$")
_NAMES: Final = tuple(
    (claim, re.compile(pattern))
    for claim, pattern in (
        (GROUND, r"[A-Z]+_GND|SHIELD|SHELL|CHASSIS|[A-Z]{0,4}GND[A-Z0-9_]{0,5}|[ADPQ]?VSS[A-Z0-9_]{0,8}|GROUND|EP|E?PAD|EXP(OSED)?_?PAD|THERMAL_?P?(AD)?|POWERPAD|0V"),
        (NEGATIVE, r"V-|VS-|-VS|VCC-|-VCC|VEE|AVEE|-V|V-/GND|GND/V-"),
        (NEVER, r"COMP[A-Z]?|V?C?ITH|V?FB[A-Z+\-]?|FEEDBACK|ADJ(/GND)?|GND/ADJ|V?SENSE?[+\-PN]?|VSNS|V?SS(/(TR|PG).*)?|TR(AC)?K|SOFT_?START|RT(/.*)?"
                r"|CT|RC|RT/CT|TIM(ER)?|C?T?DLY|CDELAY|REXT|RBIAS|[RIV]SET|I?LIM|IREF|IMON|MON|IPROG|PROG|ISENSE|CS[+\-PN]?|X(TAL)?_?(IN|OUT|[IO])?|E?XTAL.*|OSC(_?(IN|OUT|[IO]))?"
                r"|XT[IO]|.*/E?XTAL\d*|.*OSC32_?(IN|OUT).*|BO?O?ST(RAP)?|V?BST|CB|CBOOT|VB|BOOT|SPLIT|THR(ES)?|TRIG?|THRESH(OLD)?|DIS(CH)?|CV|CONT(ROL)?|EN(ABLE)?[A-Z]?|SHDN|N?RE?SE?T_?N?|MCLR.*"
                r"|V?RST.*|ZQ|UVLO|OVP|REF_?ADJ|[A-Z]*VR[PN](_.*)?|C\d*[+\-]|CAP\d*[+\-]|C[A-Z]?[+\-]|FL(Y|T)?[+\-]|CF(LY)?[+\-PN]|FILT(ER)?|AGC"),
        (SWITCH, r"SW[A-Z]?|SW_[\dA-Z]*|LX[A-Z]?|PHASE|PH|LL|VSW|SWN|SWC|SWE|SWITCH|DCC|DCDC_?SW|L[XN]?_?SW|SWOUT"),
        (SOURCE, r"V?REG_?(OUT|N)?|VREG[A-Z]*|VCAP[_A-Z]*|VCORE[_A-Z]*|LDO[_A-Z]*|V?LDO[_A-Z]*|DEC[A-Z]?|DECOUPLE?|REGN|PMID|V?SYS|VOUT[A-Z_+]*|V?REF_?OUT|OUT_?[FS]|VTT(_?REF)?"
                 r"|VDDOUT|V?DDCAP|VDD_?CORE_?OUT|BYP(ASS)?|NR|CRES|[\d.V]+_?V?-?OUT|V?\d+(\.|V|P)\d+_?V?_?OUT|VOUT\d+|INTVCC|VINT[A-Z]*|VLDO|V5OUT|V3OUT|3V3OUT|DVDT_?OUT|AREF|VREF[A-KMO-Z+]*|VPLL_?OUT|VTTREF|VDRV_?OUT|VCP|CPOUT|V1P\dOUT|VDDD|VDDG"),
        (SUPPLY, r"[ADPM]?V(CC|DD)[A-Z0-9_.+/]*|V\+|\+V|\+VS|VS\+?|VCC\+|\+VCC|[PA]?VIN[A-Z_+]*|V?I|IN\+?|V?BATT?[A-Z_+]*|BAT\+|VBUS[A-Z_]*|VUSB|VPP|VMOT?|VM[A-Z]?|VSUPP?(LY)?|VPWR|VP|VL|VL?IO[A-Z0-9]*"
                 r"|VLOGIC|VAA|PVDD.*|VPHY|VPLL|VDRV|VREFP|VANA|VDIG|VHV|VIN\(VCC\)|PWR|POWER|\+?\d+(\.\d+)?V(_\w*)?|\+?\d+V\d*(_\w*)?|\+5V.*|\+3\.?3?V.*|VADJ|VTG|VTREF|IOREF"),
    )
)
_OPEN_NAMES: Final = re.compile(r"N?INT|IRQ|ALERT|P?GOOD|PG|FAULT|FLA?G|FLT|SDA|SCL|OD|OC|ALARM|RDY|BUSY")
_LOGIC_OUT: Final = re.compile(r"[A-D1-8]?(OUT|Y|Q)[A-D1-8]?|V?O|OUT[+\-PNAB]?|[A-Z]?DOUT|[TR]OUT|RO|TXOUT")
_ANALOG_OUT: Final = re.compile(r"VOUT[+\-A-D]?|VOUT_?[A-D1-8]")
"""Outputs of amplifiers, converters and sensors, where the part makes no supply."""
_FLYING: Final = re.compile(r"C(F|FLY|AP|P)?\d?[+\-]")
"""Pins of a charge pump's flying capacitor."""
_REGULATOR: Final = re.compile(
    r"REGULATOR|\bLDO\b|LOW.?DROP|STEP.?(DOWN|UP)|\bBUCK\b|\bBOOST\b|DC.?DC|CONVERTER.*POWER|VOLTAGE REF|LOAD SWITCH|POWER SWITCH"
    r"|\bL?[A-Z]{0,4}(78|79)[LMTS]?\d\d|1117|LINEAR"
)
_OUT: Final = re.compile(r"V?O(UT)?[\dA-Z]?|OUT_?\d*")
_IN: Final = re.compile(r"V?I(N)?[\dA-Z]?|IN_?\d*|[PA]VIN")

_NO_REGULATOR: Final = re.compile(r"OP.?AMP|AMPLIFIER|COMPARATOR|\bDAC\b|DIGITAL.TO.ANALOG|SENSOR|BUFFER|DRIVER|\bADC\b")
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
"""Numbers of the positive and negative supply pins -> outputs: single in 5 and 8 pins, dual, quad amplifier, quad comparator."""
_CONNECTOR_NAMES: Final = frozenset((GROUND, SUPPLY))


def claim(pin: Pin, part: RatedPart, *, regulator: bool) -> str:
    """What the pin says about its net; only pins of ICs, modules, batteries and connectors say anything."""
    kind = part.kind
    if kind in ("ic", "other", "transformer"):
        return _of_chip(pin, regulator=regulator)
    if kind == "connector":
        found = by_name(pin.name)
        return found if found in _CONNECTOR_NAMES else NOTHING
    return SUPPLY if kind == "battery" and _positive(pin) else NOTHING


def by_name(name: str) -> str:
    """What the name alone says; trailing digits and marks of active-low are ignored."""
    own = name.upper().strip("~{}# ")
    for text in (own, _MARKS.sub("", own)):
        for what, pattern in _NAMES:
            if text and pattern.fullmatch(text):
                return what
    return NOTHING


def is_regulator(part: RatedPart) -> bool:
    """Whether the part makes a supply: by its words, or by an input, an output and few other pins, and no amplifier's."""
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
    return has[0] and (has[1] and len(names) <= 8 or bool(names & _FEEDBACK))


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


def outputs_by_position(part: RatedPart) -> frozenset[str]:
    """Pin numbers of the outputs of an amplifier or comparator drawn without pin names, by where its supply pins are."""
    pins = {pin.number: pin.name.upper() for pin in part.part.pins}
    plus = [number for number, name in pins.items() if name in ("V+", "VCC", "VDD", "VS+", "+VS", "VCC+", "V")]
    minus = [number for number, name in pins.items() if name in ("V-", "GND", "VSS", "VS-", "-VS", "VCC-", "VEE")]
    nameless = {number for number, name in pins.items() if name.strip("~") in ("", number)}
    if len(plus) != 1 or len(minus) != 1 or len(nameless) < 3:
        return frozenset()
    return _POSITIONS.get((plus[0], minus[0]), frozenset()) & nameless


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
    return OUTPUT if pin.type in ("", "passive", "unspecified", "input") and _LOGIC_OUT.fullmatch(name) else NOTHING


def _positive(pin: Pin) -> bool:
    return pin.name.upper() in ("+", "P", "POS", "PLUS", "A", "BAT+") or (not pin.name.strip("-") and pin.number in ("1", "+"))
