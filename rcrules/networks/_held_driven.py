"""Driven joints: switching nodes, outputs, and nets that come from a connector."""

import re
from collections.abc import Sequence
from typing import Final

from rcrules.design import Pin
from rcrules.names import tokens
from rcrules.networks import _held_claims as say
from rcrules.networks._family import family
from rcrules.networks._held_verdict import Verdict, Verdicts, keys
from rcrules.networks._held_ways import drives_filter, is_led_out
from rcrules.networks._links import words
from rcrules.networks._scene import Scene

_BUS_LINES: Final = frozenset(("SDA", "SCL", "SMBDAT", "SMBCLK", "ALERT", "ONEWIRE"))
"""Shared open-drain lines: free, their rise is the pull-up's."""
_LINE_OHMS: Final = 200.0
"""Up to here a resistor matches a line; above, it pulls."""
_IDLE: Final = re.compile(r"E?N?A?(EN|OE|ST(BY)?|NC|VC|TRI).*")
"""Pins of an oscillator module that are inputs or open."""
_WITHIN_RAILS: Final = ("amplifier", "logic")
"""What keeps its outputs between its supply pins."""
_RAILS: Final = (say.SUPPLY, say.GROUND, say.NEGATIVE)
_CONTROLLER_PINS: Final = 12
"""A chip with at least so many bidirectional pins is a controller, whose pins marked as outputs may be inputs."""


def driven(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """What drives the joint from outside the RC network, or None where it is free."""
    if joint in scene.switching:
        return Verdict(kind="driven", evidence=("switching node", *keys(scene.says(joint, say.SWITCH))))
    if scene.of_kind(joint, "crystal"):
        return _clock(scene, joint, verdicts)
    return (
        _output(scene, joint)
        or _between_chips(scene, joint)
        or _open_drain(scene, joint)
        or _through_diode(scene, joint)
        or _connector(scene, joint, verdicts)
        or _into_filter(scene, joint, verdicts)
    )


def _clock(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """The output of an oscillator module, which has a pin on a supply; a bare crystal drives nothing."""
    for pin in scene.of_kind(joint, "crystal"):
        others = scene.parts[pin.ref].part.pins
        supplied = any(_is_supply(verdicts, scene.joints[other.net]) for other in others)
        if supplied and not _IDLE.fullmatch(pin.name.upper()):
            why = f"oscillator module, {keys((pin,))[0]}"
            return Verdict(kind="driven", evidence=(why,), sure=pin.type == "output")
    return None


def _output(scene: Scene, joint: str) -> Verdict | None:
    switch = [pin for pin in scene.says(joint, say.SWITCH) if pin.type not in ("input", "power-in")]
    outputs = (*switch, *scene.says(joint, say.OUTPUT))
    if not outputs:
        return None
    waits = bool(scene.capacitors(joint)) and bool(scene.resistors(joint))
    if waits and (scene.contacts.get(joint) or all(_is_controller(scene, pin.ref) for pin in outputs)):
        return None
    sure = any(pin.type in ("output", "power-out") for pin in outputs)
    return Verdict(kind="driven", evidence=keys(outputs), sure=sure, within=_rails(scene, outputs))


def _rails(scene: Scene, outputs: Sequence[Pin]) -> tuple[str, str] | None:
    """The lower and upper rail of the one amplifier or gate that drives a net, where it has one of each."""
    if len({pin.ref for pin in outputs}) != 1:
        return None
    part = scene.parts[outputs[0].ref]
    if part.kind != "ic" or family(words(part), tuple(pin.name for pin in part.part.pins)) not in _WITHIN_RAILS:
        return None
    said = {pin: joint for pin in part.part.pins if pin in scene.says(joint := scene.joints[pin.net], *_RAILS)}
    upper = {joint for pin, joint in said.items() if pin in scene.says(joint, say.SUPPLY)}
    lower = set(said.values()) - upper
    return (lower.pop(), upper.pop()) if len(lower) == len(upper) == 1 else None


def _between_chips(scene: Scene, joint: str) -> Verdict | None:
    """A net between chips whose pins have no types, with small resistors alone: one of the chips drives the line."""
    pins = [pin for pin in scene.of_kind(joint, "ic") if pin.type == ""]
    resistors = scene.resistors(joint)
    lines = bool(resistors) and all(item.ohms is not None and item.ohms <= _LINE_OHMS for item in resistors)
    if len({pin.ref for pin in pins}) < 2 or not lines or scene.capacitors(joint):
        return None
    return Verdict(kind="driven", evidence=("line between chips", *keys(pins)), sure=False)


def _open_drain(scene: Scene, joint: str) -> Verdict | None:
    """An open-drain output holds a net that no capacitor slows and that is no shared bus."""
    pins = scene.says(joint, say.OPEN)
    bus = _is_bus(scene, joint)
    if not pins or bus or scene.capacitors(joint) or _asked(scene, joint):
        return None
    return Verdict(kind="driven", evidence=(f"open-drain {keys(pins)[0]}",), sure=False)


def _through_diode(scene: Scene, joint: str) -> Verdict | None:
    """A pin of either direction with nothing but a diode: it pulls what is behind the diode."""
    pins = scene.of_kind(joint, "ic")
    alone = {scene.kind(pin.ref) for pin in scene.pins[joint]} == {"ic", "diode"}
    if not alone or len(pins) != 1 or pins[0].type not in ("bidirectional", "tri-state", "unspecified"):
        return None
    if scene.says(joint, say.NEVER) or len(scene.diodes.get(joint, ())) != 1:
        return None
    return Verdict(kind="driven", evidence=(f"{keys(pins)[0]} drives through a diode",), sure=False)


def _into_filter(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """A chip's pin of either direction is the source of a filter or gate that nothing else can drive."""
    if drives_filter(scene, joint, verdicts):
        pins = scene.of_kind(joint, "ic")
        return Verdict(kind="driven", evidence=(f"{keys(pins)[0]}, the one source there is",), sure=False)
    return None


def _connector(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """A connector drives its net, unless a contact, a bus, or only a pull and a capacitor say otherwise."""
    pins = scene.of_kind(joint, "connector")
    if (
        not pins
        or scene.contacts.get(joint)
        or scene.says(joint, say.NEVER)
        or _is_bus(scene, joint)
        or _asked(scene, joint)
    ):
        return None
    capacitors = scene.capacitors(joint)
    sources = [item.far for item in scene.resistors(joint) if _feeds(scene, item.far, verdicts)]
    coupled = [far for _, far in capacitors if _feeds(scene, far, verdicts) and not _is_supply(verdicts, far)]
    if (capacitors and sources) or coupled or is_led_out(scene, joint, verdicts):
        return None
    return Verdict(kind="driven", evidence=(f"connector {pins[0].key}",), sure=False)


def _feeds(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether a joint is a source other than ground: a supply, or the output of a part."""
    verdict = verdicts.get(joint)
    if verdict is not None:
        return verdict.kind != "ground"
    return joint in scene.switching or bool(scene.says(joint, say.OUTPUT, say.SOURCE))


def _is_supply(verdicts: Verdicts, joint: str) -> bool:
    return joint in verdicts and verdicts[joint].kind == "supply"


def _is_bus(scene: Scene, joint: str) -> bool:
    names = (*scene.members[joint], *(pin.name for pin in scene.of_kind(joint, "ic") if len(pin.name) <= 8))
    return any(not _BUS_LINES.isdisjoint(tokens(name)) for name in names)


def _asked(scene: Scene, joint: str) -> bool:
    """Whether the project file describes the net as one to be looked at: its wiring, role or pulls."""
    nets = [scene.facts.net(net) for net in scene.members[joint]]
    pins = [scene.facts.pin(pin) for pin in scene.pins[joint]]
    pulled = any(pin is not None and (pin.pull_up or pin.pull_down) for pin in pins)
    return pulled or any(net is not None and (net.wiring_capacitance or net.role) for net in nets)


def _is_controller(scene: Scene, ref: str) -> bool:
    pins = scene.parts[ref].part.pins
    return sum(pin.type == "bidirectional" for pin in pins) >= _CONTROLLER_PINS
