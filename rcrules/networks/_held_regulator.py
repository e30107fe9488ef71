"""The output voltage of a regulator: written in its value, or set by two resistors at a known reference."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_pins import is_regulator
from rcrules.networks._held_reference import cathode, reference_volts, sense_pin
from rcrules.networks._scene import Scene
from rcrules.parts import RatedPart

_SERIES: Final = re.compile(
    r"(?<!\d)(?P<sign>78|79)(?:[LMTS]|HC)?(?P<whole>05|06|08|09|10|12|15|18|24|33)(?!\d)", re.IGNORECASE
)
"""The type numbers 78xx and 79xx, whose last digits are the voltage (33 = 3.3 V)."""
_WRITTEN: Final = tuple(
    re.compile(pattern, re.IGNORECASE)
    for pattern in (
        # switching modules in the pinout of a 78xx: 78E5.0-0.5 78SR-12/1.5 (the last number is the current)
        r"(?<!\d)78[A-Z]{1,2}-?(?P<whole>\d{1,2})(?:\.(?P<part>\d{1,2}))?(?=[-/ ]|$)",
        # 2940T-12 2596S-5 1085-3.3: old types that write whole volts
        r"(?<!\d)(?:25[79]\d|29[34]\d|108[4-6]|340)[A-Z]{0,3}-(?P<whole>\d{1,2})(?:\.(?P<part>\d{1,2}))?(?!\d)",
        # 1117-3.3 …_1V8 …-33 …-5V
        r"[-_ /](?P<whole>\d{1,2})[.,V](?P<part>\d{1,2})V?(?!\d)",
        r"[-_ /]V?(?P<pair>33|18|25|28|50)(?:V|\b)",
        r"[-_ /](?P<whole>\d{1,2})V\b",
        # 1700-3302E: tenths of a volt, then the tolerance
        r"-(?P<pair>12|15|18|25|28|30|33|50)0[1-5](?=[A-Z]|$)",
    )
)
_GLUED: Final = tuple(
    re.compile(pattern)
    for pattern in (
        # 1117ST33 2112K-50
        r"\d{2}(?:[A-Z]{1,3}-?|-)(?P<pair>33|18|25|28|30|50)(?=[A-Z]|$|[-_ /])",
        # 2112K12
        r"\d{2}[A-Z]{1,3}(?P<pair>12|15)(?=[A-Z]|$|[-_ /])",
        # 6206P332MR: a digit of the tolerance behind
        r"\d{4}[A-Z](?P<pair>12|15|18|25|28|30|33|50)[12](?=[A-Z]|$)",
        # 70233 7A2033
        r"(?:(?<![\dA-Z])[A-Z]{2,4}\d{3}|\d[A-Z]\d{2})(?P<pair>33|18|25|28)(?=[A-Z]{0,4}(?:[-_ /]|$))",
        # 7333 7550
        r"(?<!\d)7[135](?P<pair>18|21|25|27|30|33|36|44|50)(?!\d)",
        # references: REF, two digits of the type, tenths of a volt
        r"REF\d\d(?P<pair>12|20|25|30|33|40|50)(?!\d)",
    )
)
"""Tenths of a volt at the end of a regulator's type number; at a type with a feedback pin they mean other things."""
_DIVIDED: Final = frozenset(("FB", "VFB", "FEEDBACK", "ADJ", "ADJUST"))
_ADJUSTABLE: Final = re.compile(r"(?<!\d)(?P<type>317|350|337|333)(?!\d)|(?<!\d)108[4-7]|(?<!\d)1117", re.IGNORECASE)
"""Three-terminal types that keep 1.25 V between output and adjust pin; 337 and 333 are negative (from memory)."""
_REFERENCE_VOLTS: Final = 1.25
_ADJUST: Final = frozenset(("ADJ", "ADJUST", "GND", "ADJ/GND", "GND/ADJ"))


def regulated(part: RatedPart) -> float | None:
    """The output voltage written in a regulator's value: ``…1117-3.3``, ``78L05``, ``…-33``, ``…1117S33``."""
    series = _SERIES.search(part.text)
    if series:
        return -_written(series) if series["sign"] == "79" else _written(series)
    found = next((match for pattern in _WRITTEN if (match := pattern.search(part.text))), None)
    if found is None and is_regulator(part) and _DIVIDED.isdisjoint(pin.name.upper() for pin in part.part.pins):
        found = next((match for pattern in _GLUED if (match := pattern.search(part.text.upper()))), None)
    return None if found is None else _written(found)


def _written(found: re.Match[str]) -> float:
    groups = found.groupdict()
    if groups.get("pair") or groups["whole"] == "33":
        return float(groups.get("pair") or groups["whole"]) / 10
    return float(f"{groups['whole']}.{groups.get('part') or 0}")


def adjusted(scene: Scene, joint: str, output: Pin) -> tuple[float, str] | None:
    """What two resistors set at the adjust or reference pin of a type whose reference is known, and which two."""
    part = scene.parts[output.ref]
    shunt = reference_volts(part) if cathode(part, scene.design, scene.parts) else None
    pin = sense_pin(part) if shunt else _pin_called(part, _ADJUST) if _ADJUSTABLE.search(part.text) else None
    if shunt and (pin is None or scene.joints[pin.net] == joint):
        return shunt, f"the reference of {output.ref}"
    if pin is None or scene.joints[pin.net] == joint:
        return None
    found = _divider(scene, joint, scene.joints[pin.net])
    if found is None:
        return None
    upper, lower = found
    reference = shunt or _REFERENCE_VOLTS
    volts = reference * (1.0 + (upper[1] / lower[1] if shunt else lower[1] / upper[1]))
    kind = _ADJUSTABLE.search(part.text)
    sign = -1.0 if kind is not None and kind["type"] in ("337", "333") else 1.0
    return sign * volts, f"{upper[0]} and {lower[0]} at {pin.key} (reference {reference} V)"


def divided(scene: Scene, joint: str) -> str | None:
    """How many times an unknown reference two resistors at a regulator's feedback pin set the joint to."""
    for item in scene.resistors(joint):
        fed = next(
            (pin for pin in scene.of_kind(item.far, "ic") if pin.name.upper().rstrip("0123456789") in _DIVIDED), None
        )
        found = _divider(scene, joint, item.far) if fed is not None else None
        if fed is not None and found is not None:
            upper, lower = found
            times = 1.0 + upper[1] / lower[1]
            return f"{upper[0]} and {lower[0]} set {times:.4g} times the reference at {fed.key}, which is not known"
    return None


def _divider(scene: Scene, high: str, tap: str) -> tuple[tuple[str, float], tuple[str, float]] | None:
    """The one resistor from a joint to a tap and the one from there to a ground, each with its value [Ω]."""
    upper = list(_ohms(scene, tap, high))
    lower = [found for far in _grounds(scene) for found in _ohms(scene, tap, far)]
    if len(upper) != 1 or len(lower) != 1 or not upper[0][1] or not lower[0][1]:
        return None
    return upper[0], lower[0]


def _pin_called(part: RatedPart, names: frozenset[str]) -> Pin | None:
    return next((pin for pin in part.part.pins if pin.name.upper() in names), None)


def _ohms(scene: Scene, joint: str, far: str) -> Iterator[tuple[str, float]]:
    """Resistors of known value between two joints [Ω]."""
    for item in scene.resistors(joint):
        if item.far == far and item.ohms is not None:
            yield item.ref, item.ohms


def _grounds(scene: Scene) -> Iterator[str]:
    """Joints that are ground by their name or by counted pins."""
    for joint in scene.members:
        named = scene.hints(joint)
        if (named and named[0].kind == "ground") or len(scene.says(joint, say.GROUND)) > 1:
            yield joint
