"""What is around each joint: pins, branches, contacts, diodes and what the pins say; the evidence that holds nets."""

from collections import defaultdict
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from itertools import chain
from typing import Final, TypeVar

from rcrules.design import Design, Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._connected import connected
from rcrules.networks._held_names import NameHint, hint
from rcrules.networks._held_pins import claim, is_regulator, outputs_by_position
from rcrules.networks._held_reference import cathode
from rcrules.networks._joints import Rail
from rcrules.networks._joints import joints as join_nets
from rcrules.networks._links import branch, branches, contact, diodes, is_thermistor, joined
from rcrules.networks._model import Branch, Contact, Diode
from rcrules.networks._named import Facts
from rcrules.networks._series import PLAIN, follow, other_end
from rcrules.networks._switching import switching_nets
from rcrules.parts import Known, RatedPart

Ends = TypeVar("Ends", Branch, Contact)
_NONE: Final[frozenset[str]] = frozenset()
_MAKERS: Final = frozenset(("ic", "other"))


@dataclass(frozen=True, slots=True, kw_only=True)
class Resistance:
    """A resistor, or several in series, seen from a joint."""

    ref: str
    """References, joined by ``+``."""
    far: str
    """The joint at the other end."""
    ohms: float | None
    """[Ω]; None = not known."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Scene:
    """The board around its joints, before anything is held; all mappings are by joint unless said otherwise."""

    design: Design
    parts: Mapping[str, RatedPart]
    facts: Facts
    joints: Mapping[str, str]
    members: Mapping[str, tuple[str, ...]]
    pins: Mapping[str, tuple[Pin, ...]]
    kinds: Mapping[str, frozenset[str]]
    """Kinds of the parts with a pin at the joint."""
    claims: Mapping[str, Mapping[str, tuple[Pin, ...]]]
    """What pins say (a word of _held_pins) -> the pins that say it."""
    branches: Mapping[str, tuple[Branch, ...]]
    contacts: Mapping[str, tuple[Contact, ...]]
    diodes: Mapping[str, tuple[Diode, ...]]
    coils: Mapping[str, tuple[str, ...]]
    """Joint -> joints at the far end of inductors that are no DC joint, because one end is a switching node."""
    switching: frozenset[str]
    """Joints that a power switch drives: the input or output of an inductor that is switched."""
    _capacitors: dict[str, tuple[tuple[Branch, str], ...]] = field(default_factory=dict, repr=False)
    """What has been asked for, so that each joint is looked at once."""
    _resistors: dict[str, tuple[Resistance, ...]] = field(default_factory=dict, repr=False)
    _hints: dict[str, tuple[NameHint, ...]] = field(default_factory=dict, repr=False)

    def says(self, joint: str, *claims: str) -> tuple[Pin, ...]:
        """The pins at the joint that say any of the claims."""
        found = self.claims.get(joint, {})
        said = [found[claim] for claim in claims if claim in found]
        return said[0] if len(said) == 1 else tuple(chain.from_iterable(said))

    def of_kind(self, joint: str, *kinds: str) -> tuple[Pin, ...]:
        """The pins at the joint of parts of these kinds."""
        if self.kinds.get(joint, _NONE).isdisjoint(kinds):
            return ()
        parts = self.parts
        return tuple([pin for pin in self.pins[joint] if _kind(parts, pin.ref) in kinds])

    def kind(self, ref: str) -> str:
        """Kind of the part, ``other`` where it is not known."""
        return _kind(self.parts, ref)

    def hints(self, joint: str) -> tuple[NameHint, ...]:
        """What the names of the joint's nets say, strong ones first."""
        if joint not in self._hints:
            found = [named for net in self.members[joint] if (named := hint(net))]
            self._hints[joint] = tuple(sorted(found, key=lambda named: (not named.strong, named.volts is None)))
        return self._hints[joint]

    def capacitors(self, joint: str) -> tuple[tuple[Branch, str], ...]:
        """Capacitors at the joint, each with its other end."""
        if joint not in self._capacitors:
            items = [item for item in self.branches.get(joint, ()) if item.kind == "capacitor"]
            self._capacitors[joint] = tuple([(item, other_end(item, joint)) for item in items])
        return self._capacitors[joint]

    def resistors(self, joint: str) -> tuple[Resistance, ...]:
        """Resistors at the joint; those in series with nothing between them are one."""
        if joint not in self._resistors:
            items = [item for item in self.branches.get(joint, ()) if item.kind == "resistor"]
            self._resistors[joint] = tuple([self._resistance(item, joint) for item in items])
        return self._resistors[joint]

    def _resistance(self, branch: Branch, joint: str) -> Resistance:
        items, far = follow(branch, joint, lambda at: self.branches.get(at, ()), self._is_plain)
        values = [self.parts[item.ref].value for item in items]
        known = [value.si for value in values if isinstance(value, Known)]
        refs = " + ".join(item.ref for item in items)
        return Resistance(ref=refs, far=far, ohms=sum(known) if len(known) == len(values) else None)

    def _is_plain(self, joint: str) -> bool:
        told = any(hint(net) or self.facts.net(net) or self.facts.held(net) for net in self.members[joint])
        return not told and self.kinds[joint] <= PLAIN


def scene(design: Design, parts: Mapping[str, RatedPart], facts: Facts) -> Scene:
    """Look at the fitted parts once."""
    fitted = [part for part in parts.values() if part.fitted and part.part.pins]
    by_net = _claims(fitted, design, parts)
    switching = switching_nets(design, parts, by_net)
    pairs = [pair for part in fitted for pair in joined(part, facts.project) if not _coil(part, switching)]
    pairs += [fuse for part in fitted if (fuse := _series_thermistor(design, parts, by_net, part))]
    joints, members = join_nets(design, parts, pairs, _rails(design, facts, by_net))
    pins = {
        joint: tuple(pin for net in nets for pin in design.nets[net].pins if _is_fitted(parts, pin))
        for joint, nets in members.items()
    }
    return Scene(
        design=design, parts=parts, facts=facts, joints=joints, members=members, pins=pins,
        kinds={joint: frozenset(_kind(parts, pin.ref) for pin in own) for joint, own in pins.items()},
        claims=_merged(by_net, joints),
        branches=_by_ends(connected(_branches(fitted, joints), pins, facts)),
        contacts=_by_ends(_contacts(fitted, facts, joints)),
        diodes=_diodes(fitted, joints),
        coils=_coils(fitted, switching, joints),
        switching=frozenset(joints[net] for net in switching if net in joints),
    )  # fmt: skip


def _kind(parts: Mapping[str, RatedPart], ref: str) -> str:
    part = parts.get(ref)
    return part.kind if part else "other"


def _is_fitted(parts: Mapping[str, RatedPart], pin: Pin) -> bool:
    return pin.ref not in parts or parts[pin.ref].fitted


def _claims(fitted: list[RatedPart], design: Design, parts: Mapping[str, RatedPart]) -> dict[str, dict[str, list[Pin]]]:
    """Net -> claim -> pins."""
    found: dict[str, dict[str, list[Pin]]] = defaultdict(lambda: defaultdict(list))
    for part in fitted:
        regulator = part.kind in _MAKERS and is_regulator(part)
        outputs = outputs_by_position(part) if part.kind == "ic" else {}
        shunt = cathode(part, design, parts)
        for pin in part.part.pins if shunt is None else (shunt,):
            said = outputs.get(pin.number) or claim(pin, part, regulator=regulator)
            said = said if shunt is None else say.SOURCE
            if said:
                found[pin.net][said].append(pin)
    return found


def _coil(part: RatedPart, switching: set[str]) -> bool:
    return part.kind == "inductor" and any(pin.net in switching for pin in part.part.pins)


def _series_thermistor(
    design: Design, parts: Mapping[str, RatedPart], claims: Mapping[str, Mapping[str, list[Pin]]], part: RatedPart
) -> tuple[Pin, Pin] | None:
    """A thermistor from a supply to a net without a resistor: a resettable fuse or an inrush limiter."""
    pins = part.part.pins
    if not is_thermistor(part) or len(pins) != 2:
        return None
    for here, far in (pins, reversed(pins)):
        named = hint(here.net)
        alone = all(parts[pin.ref].kind != "resistor" for pin in design.nets[far.net].pins if pin.ref in parts)
        supplied = say.SUPPLY in claims.get(here.net, {}) or (
            named is not None and named.kind == "supply" and named.strong
        )
        if supplied and alone:
            return here, far
    return None


def _rails(design: Design, facts: Facts, claims: Mapping[str, Mapping[str, list[Pin]]]) -> dict[str, Rail]:
    """Nets that certainly are ground or a supply: a strap of two links never joins them."""
    found = {net: _rail(net, facts, claims.get(net, {})) for net in design.nets}
    return {net: rail for net, rail in found.items() if rail is not None}


def _rail(net: str, facts: Facts, claims: Mapping[str, list[Pin]]) -> Rail | None:
    named = hint(net)
    if facts.is_ground(net) or (named and named.strong and named.kind == "ground"):
        return "ground"
    if named and named.kind == "supply" and named.volts is not None:
        return named.volts
    return "supply" if say.SOURCE in claims else None


def _merged(
    by_net: Mapping[str, Mapping[str, list[Pin]]], joints: Mapping[str, str]
) -> dict[str, dict[str, tuple[Pin, ...]]]:
    found: dict[str, dict[str, list[Pin]]] = defaultdict(lambda: defaultdict(list))
    for net, claims in by_net.items():
        for said, pins in claims.items():
            found[joints[net]][said].extend(pins)
    return {joint: {said: tuple(pins) for said, pins in claims.items()} for joint, claims in found.items()}


def _branches(fitted: list[RatedPart], joints: Mapping[str, str]) -> list[Branch]:
    found = ((branch(part, kind, (first, second), joints)) for part in fitted for kind, first, second in branches(part))
    return [item for item in found if item is not None]


def _contacts(fitted: list[RatedPart], facts: Facts, joints: Mapping[str, str]) -> list[Contact]:
    at_nets = (item for part in fitted if part.kind == "contact" for item in contact(part, facts.project))
    at_joints = (replace(item, a=joints[item.a], b=joints[item.b]) for item in at_nets)
    return [item for item in at_joints if item.a != item.b]


def _by_ends(items: list[Ends]) -> dict[str, tuple[Ends, ...]]:
    found: dict[str, list[Ends]] = defaultdict(list)
    for item in items:
        found[item.a].append(item)
        found[item.b].append(item)
    return {joint: tuple(at) for joint, at in found.items()}


def _diodes(fitted: list[RatedPart], joints: Mapping[str, str]) -> dict[str, tuple[Diode, ...]]:
    found: dict[str, list[Diode]] = defaultdict(list)
    for part in fitted:
        for item in diodes(part) if part.kind == "diode" else ():
            placed = replace(item, anode=joints[item.anode], cathode=joints[item.cathode])
            for joint in dict.fromkeys((placed.anode, placed.cathode)):
                found[joint].append(placed)
    return {joint: tuple(items) for joint, items in found.items()}


def _coils(fitted: list[RatedPart], switching: set[str], joints: Mapping[str, str]) -> dict[str, tuple[str, ...]]:
    found: dict[str, list[str]] = defaultdict(list)
    for part in fitted:
        if _coil(part, switching):
            ends = [joints[pin.net] for pin in part.part.pins]
            for end in ends:
                found[end].extend(other for other in ends if other != end)
    return {joint: tuple(far) for joint, far in found.items()}
