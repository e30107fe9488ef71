"""A board as the posing of problems looks things up in it."""

from collections import defaultdict
from collections.abc import Callable, Hashable
from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import TypeVar

from rcrules.design import Pin
from rcrules.events._circuit import Circuit
from rcrules.events._facts import fact
from rcrules.events._table import Table
from rcrules.networks import Board, Branch, Held, Network, Node
from rcrules.parts import RatedPart
from rcrules.project import NetFacts, PinFacts, Project, SupplyFacts

Value = TypeVar("Value")


@dataclass(frozen=True, kw_only=True, eq=False)
class Bench:
    """A board and its project, with indexes that are made when they are first needed."""

    board: Board
    project: Project

    @cached_property
    def built(self) -> dict[Hashable, tuple[Circuit, Table]]:
        """Circuits that were built so far, with their columns; never changed, only copied."""
        return {}

    @cached_property
    def network_of_node(self) -> dict[int, Network]:
        """Identity of a node -> its network."""
        return {id(node): network for network in self.board.networks for node in network.nodes}

    @cached_property
    def network_of_part(self) -> dict[str, tuple[Network, Branch]]:
        """Reference -> the network and branch it is in."""
        return {item.ref: (network, item) for network in self.board.networks for item in network.branches}

    @cached_property
    def nets(self) -> dict[str, tuple[str, ...]]:
        """Joint -> its nets."""
        found: dict[str, list[str]] = defaultdict(list)
        for net in self.board.design.nets:
            found[self.joint(net)].append(net)
        return {joint: tuple(nets) for joint, nets in found.items()}

    @cached_property
    def branches(self) -> dict[str, tuple[Branch, ...]]:
        """Joint -> all fitted resistors and capacitors with one of their two ends there, in or out of networks."""
        found: dict[str, list[Branch]] = defaultdict(list)
        for part in self.board.parts.values():
            branch = self.branch(part)
            if branch is not None and branch.a != branch.b:
                found[branch.a].append(branch)
                found[branch.b].append(branch)
        return {joint: tuple(items) for joint, items in found.items()}

    def branch(self, part: RatedPart) -> Branch | None:
        """A fitted resistor or capacitor between its two joints; None for anything else."""
        if part.kind not in ("resistor", "capacitor") or not part.fitted:
            return None
        if part.ref in self.network_of_part:
            return self.network_of_part[part.ref][1]
        ends: dict[str, str] = {}
        for pin in sorted(part.part.pins, key=_first_plus):
            if pin.net:
                ends.setdefault(pin.number, self.joint(pin.net))
        if len(ends) != 2:
            return None
        a, b = ends.values()
        return Branch(ref=part.ref, kind=part.kind, a=a, b=b)

    def joint(self, net: str) -> str:
        """The joint that stands for a net."""
        return self.board.joints.get(net, net)

    def names(self, joint: str) -> tuple[str, ...]:
        """A joint's own name first, then its other nets."""
        return (joint, *(net for net in self.nets.get(joint, ()) if net != joint))

    def held(self, joint: str) -> Held | None:
        """What holds a joint."""
        return self.board.held.get(joint)

    def net_fact(self, joint: str, value: Callable[[NetFacts], Value | None]) -> Value | None:
        """A fact of [net] about any net of a joint."""
        return fact(self.project.nets, self.names(joint), value)

    def supply_fact(self, joint: str, value: Callable[[SupplyFacts], Value | None]) -> Value | None:
        """A fact of [supply] about any net of a joint."""
        return fact(self.project.supplies, self.names(joint), value)

    def pin_fact(self, pin: Pin, value: Callable[[PinFacts], Value | None]) -> Value | None:
        """A fact of [pin] about a pin."""
        return fact(self.project.pins, (pin.key, f"{pin.ref}.{pin.number}"), value)

    def pins(self, joint: str) -> list[Pin]:
        """Pins on a joint, those of fitted resistors and capacitors left out."""
        nets = (self.board.design.nets[net] for net in self.names(joint) if net in self.board.design.nets)
        return [pin for net in nets for pin in net.pins if not self._passive(pin.ref)]

    def pin(self, key: str) -> Pin | None:
        """The pin that is called ``U3.NRST``."""
        ref, _, name = key.partition(".")
        part = self.board.design.parts.get(ref)
        return next((pin for pin in part.pins if name in (pin.name, pin.number)), None) if part else None

    def network(self, node: Node) -> Network:
        """The network of a node of the board, or of any other free joint."""
        found = self.network_of_node.get(id(node))
        return found or next(network for network in self.board.networks if node.joint in network.free)

    def _passive(self, ref: str) -> bool:
        part = self.board.parts.get(ref)
        return part is not None and part.kind in ("resistor", "capacitor")


@dataclass(frozen=True, slots=True, eq=False)
class _Same:
    """Two inputs that are the same when they are the very same objects."""

    board: Board
    project: Project

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _Same) and self.board is other.board and self.project is other.project

    def __hash__(self) -> int:
        return hash((id(self.board), id(self.project)))


def bench(board: Board, project: Project) -> Bench:
    """The bench of a board; that of the last board is kept."""
    return _bench(_Same(board, project))


def let_go() -> None:
    """Forget the bench that is kept, and the board with it."""
    _bench.cache_clear()


@lru_cache(maxsize=1)
def _bench(same: _Same) -> Bench:
    return Bench(board=same.board, project=same.project)


def _first_plus(pin: Pin) -> tuple[int, int, str]:
    return ({"+": 0, "P": 0, "POS": 0, "-": 2, "N": 2, "NEG": 2}.get(pin.name.upper(), 1), len(pin.number), pin.number)
