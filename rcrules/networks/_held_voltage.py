"""The voltage of a supply, as far as net names, part values and pin names tell it."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_names import volts_in
from rcrules.networks._scene import Scene
from rcrules.parts import RatedPart

_FIXED: Final = re.compile(
    r"[-_ /](?P<whole>\d{1,2})[.,V](?P<part>\d{1,2})V?(?!\d)"
    r"|[-_ /]V?(?P<pair>33|18|25|28)(?:V|\b)|[-_ /](?P<plain>\d{1,2})V\b",
    re.IGNORECASE,
)
"""``…-3.3``, ``…_1V8``, ``…-33``, ``…-5V`` at the end of a regulator's value."""
_SERIES: Final = re.compile(
    r"(?<!\d)(?P<sign>78|79)(?:[LMTS]|HC)?(?P<volts>05|06|08|09|10|12|15|18|24|33)(?!\d)", re.IGNORECASE
)
"""The type numbers 78xx and 79xx, whose last digits are the voltage (33 = 3.3 V)."""
_QUIET: Final = re.compile(r"BYP(ASS)?|NR|CRES|DEC\w*|SS\w*|INT\w*|V?CAP\w*")
"""Pins of a regulator that carry another voltage than its output."""
_COIN: Final = re.compile(r"\b[BC]R\d{4}\b", re.IGNORECASE)
"""Designations of lithium coin cells in IEC 60086: 3 V."""
_COIN_VOLTS: Final = 3.0
_PIN_VOLTS: Final = re.compile(
    r"(?<![A-Z0-9.])V?(?:OUT|LDO|REG|REGOUT|CAP)?_?(?P<pair>33|18|25|12|15)(?:_?OUT)?$|(?P<whole>\d)(?:\.|V|P)(?P<part>\d)"
)
_MOST_PLAUSIBLE: Final = 1000.0


def volts_here(scene: Scene, joint: str) -> tuple[float | None, str | None]:
    """Voltage [V] and where it was read, (None, None) when nothing tells it."""
    for volts, why in _readings(scene, joint):
        if volts is not None and abs(volts) <= _MOST_PLAUSIBLE:
            return volts, f"{volts:g} V from {why}"
    return None, None


def _readings(scene: Scene, joint: str) -> Iterator[tuple[float | None, str]]:
    for named in scene.hints(joint):
        if named.kind == "supply":
            yield named.volts, "the net name"
    sources = scene.says(joint, say.SOURCE)
    coils = [pin for far in scene.coils.get(joint, ()) for pin in scene.of_kind(far, "ic")]
    for pin in (*sources, *coils):
        if not _QUIET.fullmatch(pin.name.upper()):
            yield regulated(scene.parts[pin.ref]), f"the value of {pin.ref}"
    for pin in sources:
        yield pin_volts(pin), f"pin {pin.key}"
    for pin in scene.says(joint, say.SUPPLY):
        if scene.kind(pin.ref) == "connector":
            yield volts_in(pin.name), f"pin {pin.key}"
    for pin in scene.of_kind(joint, "battery"):
        yield _cell(scene.parts[pin.ref]), f"the value of {pin.ref}"


def regulated(part: RatedPart) -> float | None:
    """The output voltage written in a regulator's value: ``…1117-3.3``, ``78L05``, ``…-33``."""
    series = _SERIES.search(part.text)
    if series:
        volts = 3.3 if series["volts"] == "33" else float(series["volts"])
        return -volts if series["sign"] == "79" else volts
    fixed = _FIXED.search(part.text)
    if fixed is None:
        return None
    if fixed["pair"]:
        return float(fixed["pair"]) / 10
    return float(fixed["plain"] or f"{fixed['whole']}.{fixed['part']}")


def pin_volts(pin: Pin) -> float | None:
    """The voltage written in a pin's name: ``LDO33``, ``VOUT33``, ``V1.8_OUT``, ``VREG_3V3``."""
    found = _PIN_VOLTS.search(pin.name.upper())
    if found is None:
        return volts_in(pin.name)
    return float(found["pair"]) / 10 if found["pair"] else float(f"{found['whole']}.{found['part']}")


def _cell(part: RatedPart) -> float | None:
    words = f"{part.text} {part.part.symbol} {part.part.footprint} {part.part.description}"
    written = volts_in(part.text)
    return written if written is not None else _COIN_VOLTS if _COIN.search(words) else None
