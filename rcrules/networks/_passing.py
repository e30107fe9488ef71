"""Supplies that pass through diodes, closed power switches and switched inductors to further joints."""

import re
from collections import deque
from collections.abc import Iterator
from dataclasses import replace
from typing import Final

from rcrules.networks import _held_claims as say
from rcrules.networks._held_verdict import Verdict, Verdicts
from rcrules.networks._held_voltage import volts_here
from rcrules.networks._links import words
from rcrules.networks._scene import Resistance, Scene
from rcrules.parts import RatedPart

DIODE_DROP: Final = (0.0, 0.3, 0.9)
"""Least, nominal and most voltage across a conducting diode [V]; no load to full load, Schottky to silicon."""
_DIVIDER_OHMS: Final = 10e3
_SHUNT_OHMS: Final = 0.2
"""Up to here a resistor in a supply's way measures its current."""
_ENTRY: Final = re.compile(
    r"\bDC[-_ ]?(IN|POWER|JACK|INPUT)|BARREL|JACK[-_]?DC|POWER[-_ ]?(IN|JACK|INPUT|SUPPLY)"
    r"|\bBATT?(ERY)?\b|ALIMENTA|NETZTEIL|ПИТАНИ",
    re.IGNORECASE,
)
"""Words that name a power input in a connector's value, symbol, description or footprint."""
_BIPOLAR: Final = re.compile(r"(?<![A-Z])(NPN|PNP|BJT)(?![A-Z])", re.IGNORECASE)
_ENTRY_PINS: Final = 4
_SIGNALS: Final = ("ic", "transistor", "contact", "crystal")


def passed(scene: Scene, verdicts: Verdicts) -> None:
    """Add to the verdicts all supplies that others feed, to a fixed point; fill in voltages that their source tells."""
    for joint, verdict in _inputs(scene, verdicts):
        verdicts.setdefault(joint, verdict)
    waiting = deque(joint for joint, verdict in verdicts.items() if verdict.kind == "supply")
    while waiting:
        joint = waiting.popleft()
        for far, verdict in _onward(scene, joint, verdicts):
            if any(scene.facts.free(net) for net in scene.members[far]):
                continue
            known = verdicts.get(far)
            if known is None or _tells_more(known, verdict):
                verdicts[far] = verdict if known is None else _with_voltage(known, verdict)
                waiting.append(far)


def _with_voltage(known: Verdict, source: Verdict) -> Verdict:
    evidence = tuple(dict.fromkeys((*known.evidence, *source.evidence)))
    return replace(source, evidence=evidence, sure=known.sure)


def _tells_more(known: Verdict, source: Verdict) -> bool:
    """Whether a source gives a voltage that is not known yet, or a higher one through a second diode."""
    new, old = source.voltage, known.voltage
    if known.kind != "supply" or new is None:
        return False
    return old is None or (known.through_diode and source.through_diode and abs(new.nominal) > abs(old.nominal))


def _onward(scene: Scene, joint: str, verdicts: Verdicts) -> Iterator[tuple[str, Verdict]]:
    here = verdicts[joint]
    for diode in scene.diodes.get(joint, ()):
        if diode.anode == joint and _is_fed_by_diode(scene, joint, diode.cathode, verdicts):
            yield diode.cathode, here.passed(f"diode {diode.ref} from {joint}", drop=DIODE_DROP)
    for ref, far in _switched(scene, joint):
        if _takes_supply(scene, far, verdicts) or _is_power_output(scene, far, verdicts):
            passed_on = here.passed(f"power switch {ref} from {joint}", sure=False)
            yield far, replace(passed_on, spread=None, given=False) if _is_bipolar(scene, ref) else passed_on
    for ref, far in _linked(scene, joint, verdicts):
        yield far, here.passed(f"link {ref} from {joint}")
    for item in scene.resistors(joint):
        if item.far not in verdicts and _is_shunt(item) and scene.of_kind(item.far, "connector"):
            yield item.far, here.passed(f"shunt {item.ref} from {joint}", sure=False)
    for source in scene.coils.get(joint, ()):
        yield from _rectified(scene, source, verdicts)


def _linked(scene: Scene, joint: str, verdicts: Verdicts) -> Iterator[tuple[str, str]]:
    """Supplies of unknown voltage and source behind a header of two pins: a link for a current meter."""
    for pin in scene.of_kind(joint, "connector", "jumper"):
        pins = scene.parts[pin.ref].part.pins
        far = next((scene.joints[other.net] for other in pins if scene.joints[other.net] != joint), None)
        if len(pins) != 2 or far is None or not _is_supply(verdicts, far) or scene.says(far, say.SOURCE):
            continue
        if len(scene.of_kind(far, "connector", "jumper", "battery")) == 1:
            yield pin.ref, far


def _is_shunt(item: Resistance) -> bool:
    return item.ohms is not None and 0 < item.ohms <= _SHUNT_OHMS


def _inputs(scene: Scene, verdicts: Verdicts) -> Iterator[tuple[str, Verdict]]:
    """Joints that bring a supply in: connectors before a diode, power inputs, inductors and diodes after a switch."""
    for joint in scene.members:
        if joint in verdicts or joint in scene.switching:
            continue
        into = [
            diode
            for diode in scene.diodes.get(joint, ())
            if diode.anode == joint and _is_supply(verdicts, diode.cathode)
        ]
        if into and scene.of_kind(joint, "connector") and not _carries_signal(scene, joint):
            why = f"connector, and diode {into[0].ref} into {into[0].cathode}"
            yield joint, replace(verdicts[into[0].cathode], evidence=(why,), sure=False, given=False)
        elif _is_power_entry(scene, joint):
            volts, _ = volts_here(scene, joint)
            yield joint, Verdict(kind="supply", spread=volts, evidence=("power connector",), sure=False)
        elif scene.coils.get(joint) and not _is_filtered(scene, joint, verdicts) and _has_bulk(scene, joint, verdicts):
            volts, _ = volts_here(scene, joint)
            why = f"switched inductor from {scene.coils[joint][0]}"
            yield joint, Verdict(kind="supply", spread=volts, evidence=(why,))
        elif _is_rectified(scene, joint, verdicts):
            volts, _ = volts_here(scene, joint)
            yield joint, Verdict(kind="supply", spread=volts, evidence=("diode from a switching node",))


def _is_filtered(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether a resistor from a supply feeds the joint: the input of a switched inductor, not its output."""
    return any(_is_supply(verdicts, item.far) and not _is_large(item) for item in scene.resistors(joint))


def _rectified(scene: Scene, joint: str, verdicts: Verdicts) -> Iterator[tuple[str, Verdict]]:
    """Output of a boost converter: the cathode of a diode at the switching node."""
    for diode in scene.diodes.get(joint, ()):
        if diode.anode == joint and diode.cathode not in verdicts and _has_bulk(scene, diode.cathode, verdicts):
            yield diode.cathode, Verdict(kind="supply", evidence=(f"diode {diode.ref} from switching node {joint}",))


def _is_rectified(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    from_switch = any(
        diode.cathode == joint and diode.anode in scene.switching for diode in scene.diodes.get(joint, ())
    )
    return from_switch and _has_bulk(scene, joint, verdicts)


def _is_fed_by_diode(scene: Scene, joint: str, cathode: str, verdicts: Verdicts) -> bool:
    """Whether a diode feeds a supply; beside a resistor between the same joints it speeds a node up or down."""
    if cathode not in verdicts and any(item.far == joint for item in scene.resistors(cathode)):
        return False
    return cathode not in scene.switching and _takes_supply(scene, cathode, verdicts)


def _takes_supply(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Whether a joint behind a diode or switch is a supply: supply pins, a supply's name, or a capacitor to a rail."""
    if joint in verdicts:
        return verdicts[joint].kind == "supply"
    if scene.says(joint, say.SUPPLY, say.SOURCE) or any(named.kind == "supply" for named in scene.hints(joint)):
        return True
    plain = not scene.says(joint, say.OUTPUT, say.OPEN, say.NEVER) and joint not in scene.switching
    return plain and _has_bulk(scene, joint, verdicts)


def _is_power_output(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """A free connector net behind a high-side switch with a freewheeling diode, and no low-side switch at it."""
    if joint in verdicts or not scene.of_kind(joint, "connector"):
        return False
    freewheels = any(_is_ground(verdicts, diode.anode) for diode in scene.diodes.get(joint, ()))
    low_side = any(_is_ground(verdicts, far) for _, far in _switched(scene, joint))
    return freewheels and not low_side


def _is_power_entry(scene: Scene, joint: str) -> bool:
    """A net of a connector that is called a power input, with nothing on it that a signal would need."""
    entries = [pin for pin in scene.of_kind(joint, "connector") if _is_entry(scene.parts[pin.ref])]
    return bool(entries) and not _carries_signal(scene, joint)


def _is_entry(part: RatedPart) -> bool:
    return len(part.part.pins) <= _ENTRY_PINS and bool(_ENTRY.search(f"{words(part)} {part.part.footprint}"))


def _is_ground(verdicts: Verdicts, joint: str) -> bool:
    return joint in verdicts and verdicts[joint].kind == "ground"


def _carries_signal(scene: Scene, joint: str) -> bool:
    small = [item for item in scene.resistors(joint) if not _is_large(item)]
    fused = bool(scene.of_kind(joint, "fuse"))
    up = [diode.ref for diode in scene.diodes.get(joint, ()) if diode.anode == joint]
    clamped = any(diode.cathode == joint and diode.ref in up for diode in scene.diodes.get(joint, ()))
    return bool(scene.of_kind(joint, *_SIGNALS)) or (bool(small) and not fused) or clamped


def _is_large(item: Resistance) -> bool:
    return item.ohms is not None and item.ohms >= _DIVIDER_OHMS


def _has_bulk(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    return any(far in verdicts and verdicts[far].kind in ("ground", "supply") for _, far in scene.capacitors(joint))


def _is_supply(verdicts: Verdicts, joint: str) -> bool:
    return joint in verdicts and verdicts[joint].kind == "supply"


def _switched(scene: Scene, joint: str) -> Iterator[tuple[str, str]]:
    """The other ends of the channels of transistors at the joint, by pin names or the usual order of three pins."""
    for pin in scene.of_kind(joint, "transistor"):
        control = control_pins(scene, pin.ref)
        for other in scene.parts[pin.ref].part.pins:
            far = scene.joints[other.net]
            if (
                far != joint
                and pin.number not in control
                and other.number not in control
                and other.number != pin.number
            ):
                yield pin.ref, far


def _is_bipolar(scene: Scene, ref: str) -> bool:
    """Whether a transistor is a bipolar one, which as often regulates what it passes as it switches it."""
    part = scene.parts[ref]
    pins = {pin.name.upper()[:1] for pin in part.part.pins}
    return {"B", "C", "E"} <= pins or _BIPOLAR.search(words(part)) is not None


def control_pins(scene: Scene, ref: str) -> frozenset[str]:
    """Numbers of the gates or bases: by name, else pin 1 of three."""
    pins = scene.parts[ref].part.pins
    named = frozenset(pin.number for pin in pins if pin.name.upper()[:1] in ("G", "B"))
    if named or len(pins) != 3:
        return named or frozenset(pin.number for pin in pins)
    return frozenset("G") if any(pin.number == "G" for pin in pins) else frozenset("1")
