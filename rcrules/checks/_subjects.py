"""What a rule may be held against: nodes, capacitors and resistors, each with the facts that selections ask for."""

from collections import defaultdict
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property

from rcrules.networks import Board, Network, Node
from rcrules.parts import Known, RatedPart


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """The facts of one subject at one node; a part at several nodes has several views."""

    roles: tuple[str, ...]
    certainty: str
    nets: tuple[str, ...]
    around: tuple[str, ...]
    """Held nets around the network; of a part between held nets those two."""
    fed_from: tuple[str, ...]
    feeds: tuple[str, ...]
    kinds_fed: tuple[str, ...]
    parts: tuple[RatedPart, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Subject:
    """A node, or a capacitor or resistor."""

    kind: str
    """``node``, ``capacitor``, ``resistor``."""
    target: Node | RatedPart
    network: Network | None
    """Where it stands; None for a part between held nets."""
    net: str | None
    """Name of the node; None for a part."""
    refs: tuple[str, ...]
    feeds: tuple[str, ...]
    nets: tuple[str, ...]
    """Nets of the node, joined ones too, or of the part's pins."""
    views: tuple[View, ...]


class Subjects:
    """All subjects of a board, each kind worked out once, when it is asked for."""

    def __init__(self, board: Board) -> None:
        self._board = board
        self._parts: dict[str, tuple[Subject, ...]] = {}

    def of(self, kind: str) -> tuple[Subject, ...]:
        """Subjects of a kind of measure, in the board's order; none for a kind that is not judged."""
        if kind == "node":
            return self._node_subjects
        if kind not in self._parts:
            self._parts[kind] = self._part_subjects(kind) if kind in ("capacitor", "resistor") else ()
        return self._parts[kind]

    @cached_property
    def _node_subjects(self) -> tuple[Subject, ...]:
        return tuple(self._node_subject(node, network) for network in self._board.networks for node in network.nodes)

    def _part_subjects(self, kind: str) -> tuple[Subject, ...]:
        """Every fitted, connected part of the kind with a value."""
        return tuple(
            self._part_subject(part)
            for part in self._board.parts.values()
            if part.kind == kind and part.fitted and part.part.pins and isinstance(part.value, Known)
        )

    def _node_subject(self, node: Node, network: Network) -> Subject:
        parts = tuple(self._board.parts[ref] for ref in node.parts)
        nets = self._nets(node)
        view = _view(node, network, nets, parts)
        return Subject(
            kind="node",
            target=node,
            network=network,
            net=node.net,
            refs=node.parts,
            feeds=node.feeds,
            nets=nets,
            views=(view,),
        )

    def _part_subject(self, part: RatedPart) -> Subject:
        nets = tuple(dict.fromkeys(pin.net for pin in part.part.pins))
        network = self._network_of.get(part.ref)
        nodes = self._nodes_of.get(part.ref, ()) if network else ()
        views = tuple(_view(node, network, nets, (part,)) for node in nodes if network)
        apart = _apart(part, nets, self._board.coverage.get(part.ref, ""))
        return Subject(
            kind=part.kind,
            target=part,
            network=network,
            net=None,
            refs=(part.ref,),
            feeds=(),
            nets=nets,
            views=views or (apart,),
        )

    def _nets(self, node: Node) -> tuple[str, ...]:
        """Every net joined to the node; it answers to each name."""
        joints = tuple(item for item in (node.joint, node.across) if item)
        return tuple(dict.fromkeys((*joints, *(net for joint in joints for net in self._members.get(joint, ())))))

    @cached_property
    def _members(self) -> Mapping[str, list[str]]:
        members: dict[str, list[str]] = defaultdict(list)
        for net, joint in self._board.joints.items():
            members[joint].append(net)
        return dict(members)

    @cached_property
    def _network_of(self) -> Mapping[str, Network]:
        return {branch.ref: network for network in self._board.networks for branch in network.branches}

    @cached_property
    def _nodes_of(self) -> Mapping[str, list[Node]]:
        """Reference -> the nodes whose time it sets; failing those, the nodes it hangs on."""
        named: dict[str, list[Node]] = defaultdict(list)
        touched: dict[str, list[Node]] = defaultdict(list)
        for network in self._board.networks:
            joints = {joint: node for node in network.nodes for joint in (node.joint, node.across) if joint}
            for node in network.nodes:
                for ref in node.parts:
                    named[ref].append(node)
            for branch in network.branches:
                touched[branch.ref] += [joints[end] for end in (branch.a, branch.b) if end in joints]
        return {**touched, **named}


def _view(node: Node, network: Network, nets: Iterable[str], parts: tuple[RatedPart, ...]) -> View:
    """The facts at a node, for the node itself or for a part at it."""
    return View(
        roles=(node.role,),
        certainty=node.certainty,
        nets=tuple(dict.fromkeys((node.net, *nets))),
        around=network.held,
        fed_from=node.fed_from,
        feeds=node.feeds,
        kinds_fed=node.kinds_fed,
        parts=parts,
    )


def _apart(part: RatedPart, nets: tuple[str, ...], coverage: str) -> View:
    """The facts of a part that hangs on no node."""
    roles = ("decoupling",) if coverage == "decoupling" else ()
    return View(
        roles=roles, certainty="sure", nets=nets, around=nets, fed_from=nets, feeds=(), kinds_fed=(), parts=(part,)
    )
