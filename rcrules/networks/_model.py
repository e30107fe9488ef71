"""Held nets, networks and nodes of a board."""

from collections.abc import Mapping
from dataclasses import dataclass

from rcrules.design import Design
from rcrules.parts import RatedPart
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class Held:
    """A net whose voltage is set from outside the RC network."""

    net: str
    kind: str
    """``ground``, ``supply``, ``driven``."""
    voltage: Spread | None
    """[V]; for a driven net its swing; None = not known."""
    given: bool
    """True when the voltage comes from the project file; else it was read from names or pins (an assumption)."""
    evidence: tuple[str, ...]
    sure: bool
    within: tuple[str, str] | None = None
    """Joints of the lower and the upper rail of the part whose output drives the net: it stays between them."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Branch:
    """A resistor or capacitor between two joints of a network."""

    ref: str
    kind: str
    """``resistor`` or ``capacitor``."""
    a: str
    """Joint of pin 1 (of the + pin, where there is one)."""
    b: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Contact:
    """A switch or button between two joints."""

    ref: str
    a: str
    b: str
    normally: str
    """``open`` or ``closed``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Diode:
    """A diode between two joints; it conducts from anode to cathode."""

    ref: str
    anode: str
    cathode: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Node:
    """A free joint of a network, or two held joints bridged by R and C."""

    net: str
    """Net name, or ``A <-> B`` for a bridged pair."""
    joint: str
    """The joint that is observed (of a pair: the first)."""
    across: str | None
    """The second joint of a bridged pair, else None."""
    role: str
    certainty: str
    """``sure`` or ``unsure``."""
    evidence: tuple[str, ...]
    parts: tuple[str, ...]
    """References that set the time at the node, resistors first."""
    fed_from: tuple[str, ...]
    """Held nets (or nodes) that feed the node through its resistors."""
    feeds: tuple[str, ...]
    """Fed pins as ``U3.NRST`` (part.pin-name, or part.pin-number without a name)."""
    kinds_fed: tuple[str, ...] = ()
    """What the fed pins are, from vocabulary.FED_KINDS."""
    active: str | None = None
    """Why the passive model is not true here (an amplifier inside the loop …), else None."""
    amplifier: str | None = None
    """The amplifier that acts here, by reference. Where ``active`` is None its network is solved with it as ideal."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Amplifier:
    """An amplifier taken as ideal, by the joints of its pins."""

    ref: str
    plus: str
    """The input that does not invert."""
    minus: str
    output: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Network:
    """A largest connected set of free joints, with the held joints around it."""

    id: str
    branches: tuple[Branch, ...]
    free: tuple[str, ...]
    held: tuple[str, ...]
    nodes: tuple[Node, ...]
    contacts: tuple[Contact, ...] = ()
    diodes: tuple[Diode, ...] = ()
    amplifier: Amplifier | None = None
    """The one amplifier inside, where all of the network is linear around it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Board:
    """A design with everything recognised on it."""

    design: Design
    parts: Mapping[str, RatedPart]
    held: Mapping[str, Held]
    """By net name; also nets that are joined at DC to a held net (behind a ferrite, a 0 Ω link …)."""
    joints: Mapping[str, str]
    """Net name -> joint: the name of the net that stands for all nets joined at DC."""
    networks: tuple[Network, ...]
    coverage: Mapping[str, str]
    """Reference of each resistor and capacitor -> its class before rules: ``not_fitted``, ``unreadable``, ``network``,
    ``decoupling``, ``elsewhere``."""
    reasons: Mapping[str, str]
    """Reference -> why it is in that class, where that needs saying."""
