"""The output voltage of a regulator: written in its value, or set by two resistors at a known reference."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_pins import is_regulator
from rcrules.networks._scene import Scene
from rcrules.parts import Known, RatedPart

_FIXED: Final = re.compile(
    r"[-_ /](?P<whole>\d{1,2})[.,V](?P<part>\d{1,2})V?(?!\d)"
    r"|[-_ /]V?(?P<pair>33|18|25|28)(?:V|\b)|[-_ /](?P<plain>\d{1,2})V\b",
    re.IGNORECASE,
)
"""``…-3.3``, ``…_1V8``, ``…-33``, ``…-5V`` at the end of a regulator's value."""
_GLUED: Final = re.compile(r"\d{2}(?:[A-Z]{1,3}-?|-)(?P<pair>33|18|25|28|15|12|50|30)(?=[A-Z]|$|[-_ /])")
"""``…1117ST33…``, ``…2112K50``: tenths of a volt behind the letters of a type number."""
_SERIES: Final = re.compile(
    r"(?<!\d)(?P<sign>78|79)(?:[LMTS]|HC)?(?P<volts>05|06|08|09|10|12|15|18|24|33)(?!\d)", re.IGNORECASE
)
"""The type numbers 78xx and 79xx, whose last digits are the voltage (33 = 3.3 V)."""
_ADJUSTABLE: Final = re.compile(r"(?<!\d)(?P<type>317|350|337|333)(?!\d)|(?<!\d)108[4-7]|(?<!\d)1117", re.IGNORECASE)
"""Three-terminal types that keep 1.25 V between output and adjust pin; 337 and 333 are negative (from memory)."""
_REFERENCE_VOLTS: Final = 1.25
_ADJUST: Final = frozenset(("ADJ", "ADJUST", "GND", "ADJ/GND", "GND/ADJ"))


def regulated(part: RatedPart) -> float | None:
    """The output voltage written in a regulator's value: ``…1117-3.3``, ``78L05``, ``…-33``, ``…1117S33``."""
    series = _SERIES.search(part.text)
    if series:
        volts = 3.3 if series["volts"] == "33" else float(series["volts"])
        return -volts if series["sign"] == "79" else volts
    fixed = _FIXED.search(part.text)
    if fixed is None:
        glued = _GLUED.search(part.text.upper()) if is_regulator(part) else None
        return float(glued["pair"]) / 10 if glued else None
    if fixed["pair"]:
        return float(fixed["pair"]) / 10
    return float(fixed["plain"] or f"{fixed['whole']}.{fixed['part']}")


def adjusted(scene: Scene, joint: str, output: Pin) -> tuple[float, str] | None:
    """What two resistors set at the adjust pin of a type whose reference is known, and which two."""
    kind = _ADJUSTABLE.search(scene.parts[output.ref].text)
    pin = next((pin for pin in scene.parts[output.ref].part.pins if pin.name.upper() in _ADJUST), None)
    if kind is None or pin is None or scene.joints[pin.net] == joint:
        return None
    upper = list(_ohms(scene, scene.joints[pin.net], joint))
    lower = [found for far in _grounds(scene) for found in _ohms(scene, scene.joints[pin.net], far)]
    if len(upper) != 1 or len(lower) != 1 or not upper[0][1]:
        return None
    volts = _REFERENCE_VOLTS * (1.0 + lower[0][1] / upper[0][1])
    sign = -1.0 if kind["type"] in ("337", "333") else 1.0
    return sign * volts, f"{upper[0][0]} and {lower[0][0]} at {pin.key} (reference {_REFERENCE_VOLTS} V)"


def _ohms(scene: Scene, joint: str, far: str) -> Iterator[tuple[str, float]]:
    """Resistors of known value between two joints [Ω]."""
    for item, other in scene.far_ends(joint, "resistor"):
        value = scene.parts[item.ref].value
        if other == far and isinstance(value, Known):
            yield item.ref, value.si


def _grounds(scene: Scene) -> Iterator[str]:
    """Joints that are ground by their name or by counted pins."""
    for joint in scene.members:
        named = scene.hints(joint)
        if (named and named[0].kind == "ground") or len(scene.says(joint, say.GROUND)) > 1:
            yield joint
