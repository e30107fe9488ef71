"""What the name of a net says: ground, or a supply and its voltage."""

import re
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

from rcrules.names import automatic, tokens

_LETTERS: Final = str.maketrans(
    {"В": "V", "в": "V", "А": "A", "а": "A", ",": ".", "−": "-", "–": "-", "﹣": "-", "＋": "+"}
)
"""Look-alikes: Cyrillic volts, decimal comma, typographic minus."""

_VOLTAGES: Final = tuple(
    re.compile(pattern)
    for pattern in (
        # +3V3 12VIN 1V8A -5V +3.3V 24V_A; V or P in the decimal's place
        r"(?<![A-Z0-9.])(?P<sign>[-+]?)(?P<whole>\d{1,3})(?:\.(?P<part>\d{1,2}))?V(?![A-Z]?\.)(?P<tail>\d{1,2})?(?!\d)",
        # P2V5 N12V; with a point only after a word of a supply, P1.5 is a port
        r"(?<![A-Z0-9])(?P<sign>[PNM])(?P<whole>\d{1,3})(?:\.(?P<part>\d{1,2}))?V(?P<tail>\d{1,2})?(?!\d)",
        # VCC1V0 VDD_3V3 AVDD1.8V V3.3
        r"(?<![A-Z0-9])(?P<sign>[AD]?V(?:CC|DD|EE|SS|BUS|IN|OUT)?[A-Z]{0,3}_?)(?P<whole>\d{1,3})"
        r"(?:V(?P<tail>\d{1,2})?|\.(?P<part>\d{1,2})V?)(?!\d)",
        # V3P3D V1P2 VDD_1P8
        r"(?<![A-Z0-9])(?P<sign>[AD]?V(?:CC|DD)?_?)(?P<whole>\d{1,2})P(?P<tail>\d{1,2})V?(?!\d)",
        # P3P3V 3P3V
        r"(?<![A-Z0-9])(?P<sign>[-+PN])?(?P<whole>\d{1,2})P(?P<tail>\d{1,2})V(?!\d)",
        # PP3V3 D3V3 A5V
        r"(?<![A-Z0-9])(?P<sign>PP|A|D)(?P<whole>\d{1,2})V(?P<tail>\d{1,2})?(?![A-Z0-9])",
        # +5 -12 +3.3 alone, with a letter or a word behind: +24A +5_LOGIC
        r"^(?P<sign>[-+])(?P<whole>\d{1,3})(?:\.(?P<part>\d{1,2}))?(?:[A-Z]|_[A-Z]\w*)?$",
        # VDD33 VCC18 VDDIO25
        r"(?<![A-Z0-9])(?P<sign>[AD]?V(?:CC|DD)(?:IO|A|D)?_?)"
        r"(?P<whole>[1235])(?P<tail>(?<=3)3|(?<=1)8|(?<=2)5|(?<=2)8|(?<=1)5|(?<=5)0)(?!\d)",
    )
)

_GROUND: Final = re.compile(
    r"[A-Z]{0,5}GND[A-Z]{0,4}|[ADP]?VSS[A-Z]{0,2}|GROUND|EARTH|CHASSIS|MASSE|MASA|TERRE|TIERRA|ERDE|ЗЕМЛЯ|ОБЩИЙ|ОБЩ|地"
)
_WEAK_GROUND: Final = frozenset(("COM", "COMMON", "SHIELD", "CHS", "CHGND", "PE", "FE"))
_VIRTUAL: Final = re.compile(r"V(?:IRTUAL)?_?GR?(?:OU)?NDS?")
"""A virtual ground is a supply."""

_SUPPLY: Final = re.compile(
    r"[AD]?VCC[A-Z]{0,5}|[ADPM]?VDD[A-Z]{0,5}|AVCC|VEE|VBAT[A-Z]*|BATT?|BATTERY|V?BUS|VBUS|VUSB|VIN|VOUT|VSYS|VREF[A-KMO-Z]*|VPP|VAA|VTT"
    r"|VPWR|PWR|VMOT|VM|VRAW|VS|VSUP|VSUPPLY|VCORE|VIO|VLOGIC|VMAIN|VANA|VDIG|VUNREG|VBOOST|VLED|VSERVO|VHV|VPOS|VNEG|AVEE|ПИТАНИЕ|UB|UBAT|UIN"
)
_STRICT_SUPPLY: Final = re.compile(r"[AD]?VCC[A-Z]{0,5}|[ADPM]?VDD[A-Z]{0,5}|VBAT|VBUS|VUSB|VSYS|VEE|VPP|VAA")
_BUS: Final = re.compile(r"(?<![A-Z])V(?:BUS|USB)(?![A-Z])")
_USB_VOLTS: Final = 5.0

_SIGNAL_WORDS: Final = """
    EN ENA ENABLE EN1 PG PGOOD PWRGD PWRGOOD PWROK POK OK GOOD FB SENSE SNS SEN MON MONITOR MEAS DET DETECT ADC
    AIN FLT FLAG FAULT CTRL CTL ON OFF ONOFF SHDN LX PH PHASE COMP TRIM ADJ SET UVLO OVP OC SEL RST RESET NRST
    INT IRQ ALERT STAT STATUS PWM DIS BOOT BST GATE TX RX TXD RXD SCL SDA CLK CLOCK DATA SCK MOSI MISO CS SS BTN
    BUTTON KEY LED_K WAKE TEST TEMP DIV SCALED LEVEL LVL CMD REQ ACK DISCH CHG CE OE LO HI WARN LOW VALID
"""
_SIGNAL: Final = frozenset(_SIGNAL_WORDS.split())
"""Words that make ``EN_3V3``, ``1V8_PGOOD``, ``VBAT_SENSE`` a signal about a supply, not the supply."""


@dataclass(frozen=True, slots=True, kw_only=True)
class NameHint:
    """What a net's name says."""

    kind: str
    """``ground`` or ``supply``."""
    volts: float | None
    """[V]; None = the name gives none."""
    strong: bool
    """A name that nobody gives to anything else, such as ``+3V3`` or ``GND``."""


@lru_cache(maxsize=65536)
def hint(net: str) -> NameHint | None:
    """What the name says, None when it says nothing: ``+3,3В`` is a supply of 3.3 V, ``EN_3V3`` is a signal."""
    own = leaf(net)
    if not own:
        return None
    words = set(tokens(own)) | set(re.split(r"[\W_]+", own))
    return _ground(own, words) or _supply(own, words)


def leaf(net: str) -> str | None:
    """The name without its sheet path, look-alike letters made Latin, in upper case; None for an automatic name."""
    own = (net.rsplit("/", 1)[-1] if net.startswith("/") else net).strip()
    return None if automatic(own) else own.translate(_LETTERS).upper().strip("~{}")


def volts_in(text: str) -> float | None:
    """The voltage written in a net name, pin name or part value, if there is one."""
    own = text.translate(_LETTERS).upper()
    for pattern in _VOLTAGES:
        match = pattern.search(own)
        if match:
            found = match.groupdict()
            volts = float(f"{found['whole']}.{found.get('part') or found.get('tail') or 0}")
            return -volts if (found["sign"] or "") in ("-", "N", "M") else volts
    return _USB_VOLTS if _BUS.search(own) else None


def _ground(own: str, words: set[str]) -> NameHint | None:
    if own in ("0", "0V", "VSS", "GND"):
        return NameHint(kind="ground", volts=0.0, strong=True)
    if words & _SIGNAL or any(_VIRTUAL.fullmatch(word) for word in words):
        return None
    if any(_GROUND.fullmatch(word) for word in words):
        return NameHint(kind="ground", volts=0.0, strong=True)
    negative = own.endswith("-") and bool(words & {"BAT", "BATT", "BATTERY", "DC"})
    return NameHint(kind="ground", volts=0.0, strong=False) if negative or words & _WEAK_GROUND else None


def _supply(own: str, words: set[str]) -> NameHint | None:
    if words & _SIGNAL:
        return None
    volts = volts_in(own)
    if any(_VIRTUAL.fullmatch(word) for word in words):
        return NameHint(kind="supply", volts=volts, strong=False)
    signed = own[0] in "+-" and len(own) > 1
    if volts is not None:
        return NameHint(
            kind="supply", volts=volts, strong=signed or _begins_with_voltage(own) or bool(_BUS.search(own))
        )
    if own in ("V+", "V-", "B+") or any(_SUPPLY.fullmatch(word) for word in words):
        strict = any(_STRICT_SUPPLY.fullmatch(word) for word in words)
        return NameHint(kind="supply", volts=None, strong=signed or strict)
    return NameHint(kind="supply", volts=None, strong=False) if _looks_like_rail(own, signed=signed) else None


def _begins_with_voltage(own: str) -> bool:
    return any(match.start() == 0 for match in (pattern.search(own) for pattern in _VOLTAGES) if match)


def _looks_like_rail(own: str, *, signed: bool) -> bool:
    """Weak: ``+VMOT``, ``BAT_PROT+``."""
    polarity = own.endswith("+") and bool({"BAT", "BATT", "PWR", "SUPPLY", "DC"} & set(re.split(r"[\W_]+", own)))
    return (signed and own[1:2].isalpha()) or polarity
