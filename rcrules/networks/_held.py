"""Which joints are held: ground, supplies, driven nets, each with its evidence.

Evidence in order: project file, counted ground and supply pins with names, sources of supplies, what passes through
diodes, switches and switched inductors, filter resistors, outputs and connectors. A name alone holds nothing that only
resistors and capacitors reach: ``VREF`` at a divider's tap is a node.
"""

import re
from collections.abc import Callable, Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_driven import driven
from rcrules.networks._held_ground import ground, only_ground
from rcrules.networks._held_names import leaf
from rcrules.networks._held_regulator import divided
from rcrules.networks._held_verdict import Verdict, Verdicts, keys
from rcrules.networks._held_voltage import volts_here
from rcrules.networks._passing import passed
from rcrules.networks._scene import Resistance, Scene
from rcrules.parts import Known

FILTER_OHMS: Final = 100.0
"""Up to here a resistor from a supply to a local supply pin is a filter; above, it is a node like any other."""
MANY_CAPACITORS: Final = 3
BULK_FARADS: Final = 1e-6
"""A chip's net with so many capacitors to ground, one of them so large, is a supply even where no pin has a name."""
_INTERNAL: Final = re.compile(
    r"V[A-Z]{0,4}\d?|V(DD|CC|REF|REG|OUT|CAP|INT|CM|COM|MID|BIAS)\w*|\w*(CAP|REG|LDO|REF|DEC|BYP)\w*"
)
"""Names of pins that bring out an internal supply for its capacitor."""
MANY_PARTS: Final = 3
"""A net with the supply pins of so many parts is a supply, whatever feeds it."""

Step = Callable[[Scene, str, Verdicts], Verdict | None]


def held_joints(scene: Scene) -> tuple[Verdicts, frozenset[str]]:
    """Joint -> what holds it, and the joints that are local supplies behind a filter resistor."""
    verdicts: Verdicts = {}
    for step in _FIRST:
        verdicts.update(_deciding(scene, verdicts, step))
        if step is ground:
            verdicts.update(only_ground(scene, verdicts))
    passed(scene, verdicts)
    local = dict(_deciding(scene, verdicts, _local))
    verdicts.update(local)
    passed(scene, verdicts)
    for step in _LAST:
        verdicts.update(_deciding(scene, verdicts, step))
    return verdicts, frozenset(local)


def _deciding(scene: Scene, verdicts: Verdicts, step: Step) -> Iterator[tuple[str, Verdict]]:
    free = scene.facts.free
    asked = (
        joint
        for joint in scene.members
        if joint not in verdicts and (len(scene.pins[joint]) > 1 or step is _by_project)
    )
    found = [(joint, step(scene, joint, verdicts)) for joint in asked]
    return (
        (joint, verdict) for joint, verdict in found if verdict and not any(free(net) for net in scene.members[joint])
    )


def _by_project(scene: Scene, joint: str, _: Verdicts) -> Verdict | None:
    for net in scene.members[joint]:
        found = scene.facts.held(net)
        if found:
            return found
    pins = [(pin, facts.kind) for pin in scene.pins[joint] if (facts := scene.facts.pin(pin)) and facts.kind]
    for kind, holds in (("supply", "supply"), ("output", "driven")):
        said = [pin for pin, word in pins if word == kind]
        if said:
            return Verdict(kind=holds, evidence=(f"project [pin] {', '.join(keys(said))} is {kind}",))
    return None


def _source(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    pins = scene.says(joint, say.SOURCE) or _own_supply(scene, joint, verdicts)
    batteries = [pin for pin in scene.of_kind(joint, "battery") if pin in scene.says(joint, say.SUPPLY)]
    if joint in scene.switching or not (pins or batteries):
        return None
    sure = any(pin.type in ("power-out", "output") for pin in pins) or bool(batteries) or bool(scene.hints(joint))
    return _supply(scene, joint, keys((*pins, *batteries)), sure=sure)


def _own_supply(scene: Scene, joint: str, verdicts: Verdicts) -> tuple[Pin, ...]:
    """A chip's pin of a supply's name with nothing but capacitors on it: an internal supply or reference."""
    pins = [pin for pin in scene.pins[joint] if scene.kind(pin.ref) not in ("capacitor", "test-point")]
    if len(pins) != 1 or scene.kind(pins[0].ref) not in ("ic", "other") or scene.says(joint, say.NEVER, say.SWITCH):
        return ()
    to_ground = any(_is(verdicts, far, "ground") for _, far in scene.capacitors(joint))
    return tuple(pins) if to_ground and _INTERNAL.fullmatch(pins[0].name.upper()) else ()


def _named_supply(scene: Scene, joint: str, _: Verdicts) -> Verdict | None:
    hints = [named for named in scene.hints(joint) if named.kind == "supply"]
    if not hints or joint in scene.switching or only_fed_by_resistors(scene, joint):
        return None
    backed = scene.says(joint, say.SUPPLY) or scene.says(joint, say.NEGATIVE)
    outside = scene.of_kind(joint, "connector", "diode", "transistor", "transformer", "battery", "other")
    quiet = scene.of_kind(joint, "ic") and (
        not scene.resistors(joint) or len(scene.capacitors(joint)) >= MANY_CAPACITORS
    )
    if not (hints[0].strong or backed or outside or quiet):
        return None
    return _supply(scene, joint, (f"name {joint}", *keys(backed)), sure=hints[0].strong or bool(backed))


def _supply_pins(scene: Scene, joint: str, _: Verdicts) -> Verdict | None:
    pins = scene.says(joint, say.SUPPLY, say.NEGATIVE)
    if not pins or joint in scene.switching or only_fed_by_resistors(scene, joint) or _pulled(scene, joint, pins):
        return None
    return _supply(scene, joint, keys(pins), sure=any(pin.type == "power-in" for pin in pins))


def _pulled(scene: Scene, joint: str, pins: tuple[Pin, ...]) -> bool:
    """One pin that nothing but resistors reaches: a sense pin or strap with a supply's name."""
    others = {scene.kind(pin.ref) for pin in scene.pins[joint] if pin not in pins}
    return len(pins) == 1 and pins[0].type != "power-in" and others == {"resistor"}


def _local(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """A supply pin or a name of a supply with a capacitor to ground, fed through one small resistor."""
    pins = scene.says(joint, say.SUPPLY, say.NEGATIVE)
    named = any(named.kind == "supply" and named.strong for named in scene.hints(joint))
    feeds = [item.far for item in scene.resistors(joint) if _is_small(item) and _is(verdicts, item.far, "supply")]
    to_ground = any(_is(verdicts, far, "ground") for _, far in scene.capacitors(joint))
    if not (pins or named) or len(set(feeds)) != 1 or not to_ground:
        return None
    source = verdicts[feeds[0]]
    return Verdict(
        kind="supply",
        spread=source.spread,
        volts=source.volts,
        evidence=(f"filter resistor from {feeds[0]}", *keys(pins)),
    )


def _left_over(scene: Scene, joint: str, verdicts: Verdicts) -> Verdict | None:
    """Supply pins or strong names that nothing known feeds: a sheet that is not in the export, or a resistor alone."""
    strong = [
        named for named in scene.hints(joint) if named.kind == "supply" and named.strong and named.volts is not None
    ]
    if strong:
        return _supply(scene, joint, (f"name {joint}",), sure=False)
    if _is_smoothed(scene, joint, verdicts):
        return _supply(scene, joint, ("a chip's net with many capacitors to ground",), sure=False)
    pins = scene.says(joint, say.SUPPLY)
    resistors = scene.resistors(joint)
    return (
        _supply(scene, joint, keys(pins), sure=False)
        if pins and not resistors and joint not in scene.switching
        else None
    )


def _is_smoothed(scene: Scene, joint: str, verdicts: Verdicts) -> bool:
    """Many capacitors to ground at a chip whose pins say nothing, one of them large, and no resistor from a supply."""
    chips = scene.of_kind(joint, "ic")
    values = [scene.parts[item.ref].value for item, far in scene.capacitors(joint) if _is(verdicts, far, "ground")]
    bulk = any(isinstance(value, Known) and value.si >= BULK_FARADS for value in values)
    fed = any(_is(verdicts, item.far, "supply") for item in scene.resistors(joint))
    silent = bool(chips) and not any(pin.name for pin in chips)
    return silent and bulk and len(values) >= MANY_CAPACITORS and not fed and joint not in scene.switching


def only_fed_by_resistors(scene: Scene, joint: str) -> bool:
    """Whether a resistor from a supply feeds the joint and nothing else does, as far as pins and names tell."""
    if scene.says(joint, say.SOURCE) or scene.of_kind(joint, "battery", "transformer"):
        return False
    feeding = [item for item in scene.resistors(joint) if _is_above(scene, item.far, joint)]
    filtered = any(_is_small(item) and scene.says(item.far, say.SOURCE) for item in feeding)
    if _brings_power(scene, joint) and not filtered:
        return False
    if not feeding or len({pin.ref for pin in scene.says(joint, say.SUPPLY)}) >= MANY_PARTS:
        return False
    blocked = any(item.cathode == joint for item in scene.diodes.get(joint, ()))
    active = blocked or bool(scene.coils.get(joint)) or bool(scene.of_kind(joint, "transistor"))
    return not active or any(map(_is_small, feeding))


def _brings_power(scene: Scene, joint: str) -> bool:
    """Whether a connector may feed the joint; one whose pin takes power in, such as a card's, is fed."""
    takers = [pin for pin in scene.says(joint, say.SUPPLY) if pin.type == "power-in"]
    return any(pin not in takers for pin in scene.of_kind(joint, "connector"))


def _is_above(scene: Scene, far: str, joint: str) -> bool:
    """Whether a joint looks like the source of another: by what feeds it, or as ``+3V3`` is above ``+3V3_A``."""
    one, other = _rank(scene, far), _rank(scene, joint)
    if one[:2] == other[:2] and one[0]:
        names = [leaf(name) or "" for name in (far, joint)]
        if names[0] and names[0] != names[1] and all(names):
            longer, shorter = names[1].startswith(names[0]), names[0].startswith(names[1])
            if longer or shorter:
                return longer
    return one > other


def _rank(scene: Scene, joint: str) -> tuple[bool, bool, bool, int]:
    """How much a joint looks like a source: it makes a supply, has its voltage in its name, is larger."""
    named = [named for named in scene.hints(joint) if named.kind == "supply" and named.strong]
    like = bool(named) or bool(scene.says(joint, say.SUPPLY, say.SOURCE, say.NEGATIVE))
    told = any(item.volts is not None for item in named)
    makes = bool(scene.says(joint, say.SOURCE) or scene.of_kind(joint, "battery"))
    return like, makes, told, len(scene.pins[joint]) if like else 0


def _supply(scene: Scene, joint: str, evidence: tuple[str, ...], *, sure: bool) -> Verdict:
    volts, why = volts_here(scene, joint)
    why = divided(scene, joint) if why is None else why
    return Verdict(kind="supply", spread=volts, evidence=(*evidence, *_given(why)), sure=sure)


def _is_small(item: Resistance) -> bool:
    return item.ohms is not None and item.ohms <= FILTER_OHMS


def _is(verdicts: Verdicts, joint: str, kind: str) -> bool:
    return joint in verdicts and verdicts[joint].kind == kind


def _given(text: str | None) -> tuple[str, ...]:
    return () if text is None else (text,)


_FIRST: Final[tuple[Step, ...]] = (_by_project, ground, _source, _named_supply, _supply_pins)
_LAST: Final[tuple[Step, ...]] = (_left_over, driven)
