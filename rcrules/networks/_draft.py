"""The board while it is being recognised: joints, held nets and networks, before roles."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from rcrules.design import Design, Pin
from rcrules.networks._model import Branch, Contact, Diode, Held
from rcrules.parts import RatedPart
from rcrules.project import Project


@dataclass(frozen=True, slots=True, kw_only=True)
class RawNetwork:
    """A largest connected set of free joints, with the held joints around it; resistors alone may make one."""

    id: str
    branches: tuple[Branch, ...]
    """By reference, in natural order."""
    free: tuple[str, ...]
    """Joints that are observed; a local supply behind a filter resistor is the only free joint of its own network."""
    held: tuple[str, ...]
    contacts: tuple[Contact, ...] = ()
    """Contacts with at least one end on a free joint."""
    diodes: tuple[Diode, ...] = ()
    """Diodes with at least one end on a free joint."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Draft:
    """A design with its joints, held nets and networks; every mapping by joint has an entry only where there is one."""

    design: Design
    parts: Mapping[str, RatedPart]
    project: Project
    joints: Mapping[str, str]
    """Net name -> joint: the name of the net that stands for all nets joined at DC."""
    members: Mapping[str, tuple[str, ...]]
    """Joint -> its nets, in order."""
    held: Mapping[str, Held]
    """By net name."""
    local: frozenset[str] = frozenset()
    """Joints that are local supplies behind a filter resistor: held for what they feed, free for what feeds them."""
    pins: Mapping[str, tuple[Pin, ...]] = field(default_factory=dict)
    """By joint; pins of fitted parts only."""
    branches: Mapping[str, tuple[Branch, ...]] = field(default_factory=dict)
    """By joint, held joints too; fitted resistors and capacitors, value known or not, between two different joints."""
    contacts: Mapping[str, tuple[Contact, ...]] = field(default_factory=dict)
    """By joint."""
    diodes: Mapping[str, tuple[Diode, ...]] = field(default_factory=dict)
    """By joint."""
    networks: tuple[RawNetwork, ...] = ()

    def held_joint(self, joint: str) -> Held | None:
        """What holds the joint, or None where it is free; a local supply is held here."""
        return self.held.get(joint)

    def pins_at(self, joint: str) -> tuple[Pin, ...]:
        """All pins of fitted parts on the nets of the joint, resistors and capacitors included."""
        return self.pins.get(joint, ())

    def branches_at(self, joint: str) -> tuple[Branch, ...]:
        """Resistors and capacitors with one end at the joint."""
        return self.branches.get(joint, ())

    def contacts_at(self, joint: str) -> tuple[Contact, ...]:
        """Switches and buttons with one end at the joint."""
        return self.contacts.get(joint, ())

    def diodes_at(self, joint: str) -> tuple[Diode, ...]:
        """Diodes with one end at the joint."""
        return self.diodes.get(joint, ())

    def kind_of(self, ref: str) -> str:
        """Kind of the part, ``other`` where it is not known."""
        part = self.parts.get(ref)
        return part.kind if part else "other"
