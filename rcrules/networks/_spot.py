"""What lies around one joint: resistors, capacitors and active pins, each with what it leads to."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from typing import Final

from rcrules.design import Pin
from rcrules.networks._draft import Draft
from rcrules.networks._model import Branch, Contact, Diode, Held
from rcrules.networks._series import PLAIN, follow
from rcrules.parts import Known
from rcrules.project import match

SILENT: Final = frozenset(
    {
        "resistor", "thermistor", "varistor", "potentiometer", "resistor-array", "capacitor", "capacitor-array",
        "jumper", "net-tie", "test-point", "mechanical", "ferrite", "fuse", "diode", "contact",
    }
)  # fmt: skip
"""Kinds of parts whose pins say nothing about who drives or reads a joint."""
HUB: Final = 64
"""A free joint of more resistors or capacitors counts as a source of its own."""
SMALL: Final = 0.02
"""A resistor below this share of another one at either end is a stopper: what is behind it counts as at the joint."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Arm:
    """A resistor or capacitor seen from one of its ends; resistors in series with nothing between them are one."""

    ref: str
    """The reference nearest to the joint."""
    far: str
    """The joint at the other end."""
    value: float | None
    """[Ω] or [F], None = not known."""
    held: Held | None
    """What holds the far joint, None = it is free."""
    behind: tuple[str, ...] = ()
    """References of the resistors in series behind the first."""

    @property
    def to(self) -> str:
        """``ground``, ``supply``, ``driven``, or ``free``."""
        return self.held.kind if self.held else "free"

    @property
    def fixed(self) -> bool:
        """Whether the far joint is a ground or a supply."""
        return self.to in ("ground", "supply")


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """A joint with everything that meets there."""

    joint: str
    resistors: tuple[Arm, ...]
    capacitors: tuple[Arm, ...]
    pins: tuple[Pin, ...]
    """Pins of parts that drive or read: ICs, transistors, connectors, crystals, coils …"""
    contacts: tuple[Contact, ...]
    diodes: tuple[Diode, ...]
    local: bool
    """A supply behind a filter resistor, held for what it feeds."""

    @property
    def hub(self) -> bool:
        """Whether so much meets here that what lies beyond does not matter."""
        return len(self.resistors) > HUB or len(self.capacitors) > HUB

    @property
    def bare(self) -> bool:
        """Whether nothing but resistors and capacitors meets here."""
        return not (self.pins or self.contacts or self.diodes or self.local)


@dataclass(slots=True)
class View:
    """A draft seen joint by joint, each looked at once."""

    draft: Draft
    ends: dict[tuple[str, str], dict[str, float]] = field(default_factory=dict)
    """Held joints that resistors reach [Ω], by start and the joint not to pass."""
    signals: dict[tuple[str, str], bool] = field(default_factory=dict)
    """Whether a driven net is reached, by start and the joint not to pass."""
    families: dict[str, str] = field(default_factory=dict)
    """What an IC is, by reference."""
    _spots: dict[str, Spot] = field(default_factory=dict)

    def at(self, joint: str) -> Spot:
        """What meets at a joint."""
        if joint not in self._spots:
            self._spots[joint] = _spot(self.draft, joint)
        return self._spots[joint]

    def kind(self, pin: Pin) -> str:
        """Kind of the part that a pin belongs to."""
        return self.draft.kind_of(pin.ref)

    def joint(self, pin: Pin) -> str:
        """The joint that a pin is on."""
        return self.draft.joints.get(pin.net, pin.net)

    def pins_of(self, ref: str) -> tuple[Pin, ...]:
        """All pins of a part."""
        part = self.draft.design.parts.get(ref)
        return part.pins if part is not None else ()

    def leads_on(self, arm: Arm, but: str) -> bool:
        """Whether a free joint behind a resistor holds other resistors or capacitors than those towards ``but``."""
        far = self.at(arm.far)
        return any(other.far != but for other in far.resistors + far.capacitors)

    def stoppers(self, here: Spot) -> Iterator[Arm]:
        """Resistors into free joints that are small beside another one, or lead only to pins."""
        for arm in here.resistors:
            if arm.held is None and (self._is_small(arm, here) or not self.leads_on(arm, here.joint)):
                yield arm

    def _is_small(self, arm: Arm, here: Spot) -> bool:
        far = self.at(arm.far)
        beyond = [other for other in far.resistors if other.far != here.joint] if not far.hub else []
        beside = max(greatest(here.resistors), least(beyond) if beyond else 0.0)
        return arm.value is not None and arm.value <= SMALL * beside

    def pins_near(self, here: Spot) -> tuple[Pin, ...]:
        """Pins at the joint and behind its stoppers."""
        return here.pins + tuple(pin for arm in self.stoppers(here) for pin in self.at(arm.far).pins)

    def has_kind(self, here: Spot, *kinds: str) -> bool:
        """Whether a pin of a part of one of these kinds is at the joint."""
        return any(self.kind(pin) in kinds for pin in here.pins)


def least(arms: Iterable[Arm]) -> float:
    """The lowest known resistance or capacitance, infinite where none is known."""
    return min((arm.value for arm in arms if arm.value is not None), default=float("inf"))


def greatest(arms: Iterable[Arm]) -> float:
    """The highest known resistance or capacitance, 0 where none is known."""
    return max((arm.value for arm in arms if arm.value is not None), default=0.0)


def _spot(draft: Draft, joint: str) -> Spot:
    branches = draft.branches_at(joint)
    return Spot(
        joint=joint,
        resistors=tuple(_arm(draft, branch, joint) for branch in branches if branch.kind == "resistor"),
        capacitors=tuple(_arm(draft, branch, joint) for branch in branches if branch.kind == "capacitor"),
        pins=tuple(pin for pin in draft.pins_at(joint) if draft.kind_of(pin.ref) not in SILENT),
        contacts=draft.contacts_at(joint),
        diodes=draft.diodes_at(joint),
        local=joint in draft.local,
    )


def _arm(draft: Draft, branch: Branch, joint: str) -> Arm:
    items, far = chain(draft, branch, joint)
    values = [_value(draft, item.ref) for item in items]
    known = [value for value in values if value is not None]
    return Arm(
        ref=branch.ref,
        far=far,
        value=sum(known) if len(known) == len(values) else None,
        held=draft.held_joint(far),
        behind=tuple(item.ref for item in items[1:]),
    )


def chain(draft: Draft, branch: Branch, joint: str) -> tuple[tuple[Branch, ...], str]:
    """A branch, or resistors in series, from a joint on, and the joint where they end."""
    return follow(branch, joint, draft.branches_at, lambda at: is_plain(draft, at))


def is_plain(draft: Draft, joint: str) -> bool:
    """Whether a free joint holds nothing but resistors and is not named by the project."""
    if draft.held_joint(joint) is not None or joint in draft.local:
        return False
    if draft.contacts_at(joint) or draft.diodes_at(joint):
        return False
    nets = draft.project.nets
    named = bool(nets) and any(match(key, net) for key in nets for net in draft.members.get(joint, (joint,)))
    return not named and all(draft.kind_of(pin.ref) in PLAIN for pin in draft.pins_at(joint))


def _value(draft: Draft, ref: str) -> float | None:
    part = draft.parts.get(ref)
    return part.value.si if part is not None and isinstance(part.value, Known) else None
