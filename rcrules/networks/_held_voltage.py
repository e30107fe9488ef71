"""The voltage of a supply, as far as net names, part values and pin names tell it."""

import re
from collections.abc import Iterable, Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_names import volts_in
from rcrules.networks._held_regulator import adjusted, regulated
from rcrules.networks._held_tracking import CELL_VOLTS, SEVERAL, Reading, followed
from rcrules.networks._links import words
from rcrules.networks._scene import Scene
from rcrules.parts import RatedPart
from rcrules.quantities import Spread

_QUIET: Final = re.compile(r"BYP(ASS)?|NR|CRES|DEC\w*|SS\w*|INT\w*|V?CAP\w*")
"""Pins of a regulator that carry another voltage than its output."""
_COIN: Final = re.compile(r"\b[BC]R\d{4}\b", re.IGNORECASE)
"""Designations of lithium coin cells in IEC 60086: 3 V."""
_COIN_VOLTS: Final = 3.0
_RECHARGEABLE: Final = re.compile(
    r"\bLI[-_ ]?(?:ION|PO(?:LY)?)\b|\bLITHIUM[-_ ]?(?:ION|POLYMER)|(?<!\d)(?:18650|14500|16340)(?!\d)", re.IGNORECASE
)
_USB: Final = re.compile(r"(?<![A-Z])USB", re.IGNORECASE)
_USB_VOLTS: Final = 5.0
_PIN_VOLTS: Final = re.compile(
    r"(?<![A-Z0-9.])V?(?:OUT|LDO|REG|REGOUT|CAP)?_?(?P<pair>33|18|25|12|15)(?:_?OUT)?$|(?P<whole>\d)(?:\.|V|P)(?P<part>\d)"
)
_MOST_PLAUSIBLE: Final = 1000.0


def volts_here(scene: Scene, joint: str) -> tuple[Spread | None, str | None]:
    """Voltage [V] and where it was read, (None, None) when nothing tells it."""
    for read, why in _readings(scene, joint):
        low, nominal, high = read if isinstance(read, tuple) else (read, read, read)
        if low is not None and nominal is not None and high is not None and abs(nominal) <= _MOST_PLAUSIBLE:
            told = f"{nominal:g} V" if low == high else f"{low:g} V .. {high:g} V"
            return Spread(low=low, nominal=nominal, high=high, unit="V"), f"{told} from {why}"
    return None, None


def _readings(scene: Scene, joint: str) -> Iterator[Reading]:
    for named in scene.hints(joint):
        if named.kind == "supply":
            yield named.volts, "the net name"
    yield from _of_sources(scene, joint)
    for pin in scene.says(joint, say.SUPPLY):
        if scene.kind(pin.ref) == "connector":
            usb = _USB.search(f"{words(scene.parts[pin.ref])} {scene.parts[pin.ref].part.footprint}")
            yield volts_in(pin.name), f"pin {pin.key}"
            yield _USB_VOLTS if usb else None, f"pin {pin.key} of a USB connector"
    yield from followed(scene, joint)
    for pin in scene.of_kind(joint, "battery"):
        yield _cell(scene.parts[pin.ref]), f"the value of {pin.ref}"
    yield from _of_consumers(scene.says(joint, say.SUPPLY))


def _of_sources(scene: Scene, joint: str) -> Iterator[Reading]:
    """What regulators on the joint, or behind its inductor, say of their output."""
    sources = scene.says(joint, say.SOURCE)
    coils = [pin for far in scene.coils.get(joint, ()) for pin in scene.of_kind(far, "ic")]
    for pin in (*sources, *coils):
        if not _QUIET.fullmatch(pin.name.upper()):
            yield regulated(scene.parts[pin.ref]), f"the value of {pin.ref}"
    for pin in sources:
        yield pin_volts(pin), f"pin {pin.key}"
        found = adjusted(scene, joint, pin)
        if found is not None:
            yield found


def _of_consumers(pins: Iterable[Pin]) -> Iterator[Reading]:
    """The voltage in the names of supply pins, such as ``VDD18``, where the digits do not count the pins."""
    told = {pin.key: volts_in(pin.name) for pin in pins}
    stems = {re.sub(r"\d+", "", pin.name.upper()): pin.name for pin in pins}
    counted = any(stems[re.sub(r"\d+", "", pin.name.upper())] != pin.name for pin in pins)
    found = {volts for volts in told.values() if volts is not None}
    if len(found) == 1 and not counted:
        yield next((volts, f"pin {key}") for key, volts in told.items() if volts is not None)


def pin_volts(pin: Pin) -> float | None:
    """The voltage written in a pin's name: ``LDO33``, ``VOUT33``, ``V1.8_OUT``, ``VREG_3V3``."""
    found = _PIN_VOLTS.search(pin.name.upper())
    if found is None:
        return volts_in(pin.name)
    return float(found["pair"]) / 10 if found["pair"] else float(f"{found['whole']}.{found['part']}")


def _cell(part: RatedPart) -> float | tuple[float, float, float] | None:
    text = f"{words(part)} {part.part.footprint}"
    written = volts_in(part.text)
    if written is not None:
        return written
    if _RECHARGEABLE.search(text) and not SEVERAL.search(part.text):
        return CELL_VOLTS
    return _COIN_VOLTS if _COIN.search(text) else None
