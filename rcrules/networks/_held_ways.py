"""Which end of a chain of resistors is the source: a connector that is led out to, a chip's pin that drives."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.names import tokens
from rcrules.networks import _held_claims as say
from rcrules.networks._held_verdict import Verdicts
from rcrules.networks._passing import control_pins
from rcrules.networks._scene import Scene

_ACTIVE: Final = ("ic", "transistor", "contact", "crystal", "other")
_EITHER: Final = frozenset(("bidirectional", "tri-state", "unspecified", "output"))
_PORT: Final = re.compile(r"P[A-K]_?\d+\b.*|P\d+[._]\d+.*|GPIO_?\d+.*|IO_?\d+.*|[AD]\d+|.*PWM.*|.*DAC.*", re.IGNORECASE)
"""Names of pins that may drive, where nothing gives their type."""
_CONVERTER: Final = frozenset(("ADC", "AIN", "AN"))
_FAR: Final = 16
"""Joints looked at from one end."""


def is_led_out(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether resistors lead to the connector at the joint from an output: through a capacitor, or filtered.

    Filtered: the connector's net has a capacitor to a rail, and the resistors before it start at an output or at one
    chip's pin without a capacitor. The other way round the capacitor is at the chip.
    """
    if scene.of_kind(joint, *_ACTIVE):
        return False
    smoothed = _is_smoothed(scene, joint, verdicts)
    before, seen = _free(scene, joint, verdicts), {joint}
    while before and len(seen) < _FAR:
        here = before.pop()
        seen.add(here)
        if _is_coupled_out(scene, here, joint, verdicts) or (smoothed and _is_driven(scene, here, verdicts)):
            return True
        if smoothed and scene.capacitors(here) and not scene.of_kind(here, *_ACTIVE, "connector"):
            before += [far for far in _free(scene, here, verdicts) if far not in seen]
    return False


def drives_filter(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether a chip's pin of either direction is the one source of the capacitors that its resistors lead to."""
    pins = scene.of_kind(joint, "ic")
    if len(pins) != 1 or not _may_drive(pins[0]) or not _CONVERTER.isdisjoint(tokens(pins[0].name)):
        return False
    plain = {scene.kind(pin.ref) for pin in scene.pins[joint]} <= {"ic", "resistor", "test-point"}
    if not plain or scene.says(joint, say.NEVER, say.SUPPLY, say.GROUND):
        return False
    reached = list(_reached(scene, joint, verdicts))
    slowed = any(_is_smoothed(scene, here, verdicts) for here in reached)
    return slowed and not any(_has_source(scene, here, verdicts) for here in reached)


def _reached(scene: Scene, joint: str, verdicts: Verdicts) -> Iterator[str]:
    """Free joints and sources that resistors reach from a joint, grounds left out."""
    todo, seen = [joint], {joint}
    while todo and len(seen) < _FAR:
        for item in scene.resistors(todo.pop()):
            far = item.far
            if far in seen or (far in verdicts and verdicts[far].kind == "ground"):
                continue
            seen.add(far)
            yield far
            if far not in verdicts:
                todo.append(far)


def _has_source(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether anything at a joint may drive it: what holds it, a contact, a connector without a capacitor, a switch."""
    if joint in verdicts or scene.contacts.get(joint) or scene.diodes.get(joint) or scene.says(joint, say.OUTPUT):
        return True
    if scene.of_kind(joint, "connector", "other", "crystal") and not _is_smoothed(scene, joint, verdicts):
        return True
    if any(pin.number not in control_pins(scene, pin.ref) for pin in scene.of_kind(joint, "transistor")):
        return True
    plain = not _is_smoothed(scene, joint, verdicts)
    return plain and any(_may_drive(pin) for pin in scene.of_kind(joint, "ic"))


def _may_drive(pin: Pin) -> bool:
    return pin.type in _EITHER or (pin.type in ("", "passive") and _PORT.fullmatch(pin.name) is not None)


def _is_coupled_out(scene: Scene, joint: str, towards: str, verdicts: Verdicts) -> bool:
    """Whether a capacitor couples an output to a joint that holds nothing else but resistors to rails."""
    coupled = any(_is_output(scene, far, verdicts) for _, far in scene.capacitors(joint))
    others = [item.far for item in scene.resistors(joint) if item.far != towards]
    return coupled and not scene.of_kind(joint, *_ACTIVE) and all(far in verdicts for far in others)


def _is_driven(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether an output feeds a joint through a resistor, or the joint is one chip's pin without a capacitor."""
    if any(_is_output(scene, item.far, verdicts) for item in scene.resistors(joint)):
        return True
    bare = not scene.capacitors(joint) and not scene.of_kind(joint, "connector")
    pins = scene.of_kind(joint, "ic")
    return bare and len(pins) == 1 and _may_drive(pins[0])


def _is_smoothed(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    return any(far in verdicts and verdicts[far].kind != "driven" for _, far in scene.capacitors(joint))


def _free(scene: Scene, joint: str, verdicts: Verdicts) -> list[str]:
    return [item.far for item in scene.resistors(joint) if item.far not in verdicts]


def _is_output(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether the output of a part is at a joint that no supply is."""
    return bool(scene.says(joint, say.OUTPUT)) and not (joint in verdicts and verdicts[joint].kind != "driven")
