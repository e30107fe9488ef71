"""What a rule may be held against: nodes, parts, pins, supplies and networks, each with the facts of selections."""

from collections import defaultdict
from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cached_property

from rcrules.checks._views import View, view_apart, view_around, view_at
from rcrules.design import Pin
from rcrules.networks import Board, Held, Network, Node
from rcrules.parts import Known, RatedPart
from rcrules.project import Project, pin_facts

PIN_KINDS = ("ic", "transistor", "contact", "connector")
"""Kinds of parts whose pins are subjects."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Subject:
    """A node, a capacitor or resistor, a pin, a supply, or a network."""

    kind: str
    """``node``, ``capacitor``, ``resistor``, ``pin``, ``supply``, ``network``, ``board``."""
    target: Node | RatedPart | Pin | Held | Network
    network: Network | None
    """Where it stands; None for a part between held nets."""
    net: str | None
    """Name of the node, of the pin's or supply's net; None for a part."""
    refs: tuple[str, ...]
    feeds: tuple[str, ...]
    nets: tuple[str, ...]
    """Nets of the node, joined ones too, or of the part's pins."""
    views: tuple[View, ...]


class Subjects:
    """All subjects of a board, each kind worked out once, when it is asked for."""

    def __init__(self, board: Board, project: Project | None = None) -> None:
        """project: what it calls pins."""
        self._board, self._project = board, project or Project()
        self._parts: dict[str, tuple[Subject, ...]] = {}

    def of(self, kind: str) -> tuple[Subject, ...]:
        """Subjects of a kind of measure, in the board's order; none for a kind that is not judged."""
        if kind == "node":
            return self._node_subjects
        if kind not in self._parts:
            further = {
                "pin": self._pin_subjects,
                "any pin": self._ic_pins,
                "supply pin": lambda: tuple(pin for pin in self._ic_pins() if self._is_supplied(pin)),
                "open-drain net": self._open_drains,
                "supply": self._supply_subjects,
                "network": self._network_subjects,
                "board": self._whole_board,
            }
            self._parts[kind] = further[kind]() if kind in further else self._part_subjects(kind)
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
        view = view_at(node, network, nets, parts)
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
        views = tuple(view_at(node, network, nets, (part,)) for node in nodes if network)
        apart = view_apart(part, nets, self._board.coverage.get(part.ref, ""))
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

    def _pin_subjects(self) -> tuple[Subject, ...]:
        """Pins of ICs, transistors, contacts and connectors at free nets; of one contact and net one pin."""
        found: dict[tuple[str, str], Subject] = {}
        for network in self._board.networks:
            nodes = {node.joint: node for node in network.nodes if node.across is None}
            for joint in network.free:
                for pin in self._pins(joint):
                    kind = self._board.parts[pin.ref].kind
                    key = (pin.ref, joint) if kind == "contact" else (pin.ref, pin.number)
                    if kind in PIN_KINDS:
                        found.setdefault(key, self._pin_subject(pin, joint, network, nodes.get(joint)))
        return tuple(found.values())

    def _pins(self, joint: str) -> list[Pin]:
        nets = dict.fromkeys((joint, *self._members.get(joint, ())))
        pins = [pin for net in nets if net in self._board.design.nets for pin in self._board.design.nets[net].pins]
        return [pin for pin in pins if pin.ref in self._board.parts and self._board.parts[pin.ref].fitted]

    def _pin_subject(self, pin: Pin, joint: str, network: Network | None, node: Node | None) -> Subject:
        nets, parts = tuple(dict.fromkeys((joint, *self._members.get(joint, ())))), (self._board.parts[pin.ref],)
        apart = view_around(nets, network.held if network else nets[:1], parts, feeds=(pin.key,))
        view = apart
        if node is not None and network is not None:
            view = replace(view_at(node, network, nets, parts), feeds=(pin.key,))
        return Subject(
            kind="pin",
            target=pin,
            network=network,
            net=joint,
            refs=(pin.ref,),
            feeds=(pin.key,),
            nets=nets,
            views=(view,),
        )

    def _ic_pins(self) -> tuple[Subject, ...]:
        """Every connected pin of every fitted IC."""
        found = []
        for part in self._board.parts.values():
            for pin in part.part.pins if part.kind == "ic" and part.fitted else ():
                if pin.net:
                    joint = self._board.joints.get(pin.net, pin.net)
                    found.append(self._pin_subject(pin, joint, self._network_at(joint), self._node_at.get(joint)))
        return tuple(found)

    def _open_drains(self) -> tuple[Subject, ...]:
        """Every net with an open-drain pin of an IC, once."""
        found: dict[str | None, Subject] = {}
        for pin in self._ic_pins():
            if isinstance(pin.target, Pin) and self._kind(pin.target) == "open-drain":
                found.setdefault(pin.net, pin)
        return tuple(found.values())

    def _kind(self, pin: Pin) -> str:
        """What the project file calls a pin, or else its export."""
        facts = pin_facts(self._project, (pin.key, f"{pin.ref}.{pin.number}"))
        given = facts.kind if facts is not None else None
        return given or {"open-collector": "open-drain", "power-in": "supply"}.get(pin.type, pin.type)

    def _is_supplied(self, pin: Subject) -> bool:
        """Whether a pin is on a supply, or takes power from a net that is no ground, such as one behind a filter."""
        held = self._board.held.get(pin.net or "")
        if held is not None:
            return held.kind == "supply"
        return isinstance(pin.target, Pin) and self._kind(pin.target) == "supply"

    def _network_at(self, joint: str) -> Network | None:
        return self._network_of_joint.get(joint)

    @cached_property
    def _network_of_joint(self) -> Mapping[str, Network]:
        return {joint: network for network in self._board.networks for joint in network.free}

    @cached_property
    def _node_at(self) -> Mapping[str, Node]:
        return {node.joint: node for network in self._board.networks for node in network.nodes if node.across is None}

    def _whole_board(self) -> tuple[Subject, ...]:
        nets = tuple(self._board.design.nets)
        view, all_of_it = view_around(nets[:1], (), ()), Network(id="", branches=(), free=(), held=(), nodes=())
        whole = Subject(
            kind="board", target=all_of_it, network=None, net=None, refs=(), feeds=(), nets=nets, views=(view,)
        )
        return (whole,)

    def _supply_subjects(self) -> tuple[Subject, ...]:
        """Every supply, once for all nets that are joined to it at DC."""
        held = (self._board.held[net] for net in self._board.held if self._board.joints.get(net, net) == net)
        return tuple(self._supply_subject(item) for item in held if item.kind == "supply")

    def _supply_subject(self, held: Held) -> Subject:
        nets = tuple(dict.fromkeys((held.net, *self._members.get(held.net, ()))))
        view = view_around(nets, nets[:1], (), certainty="sure" if held.sure else "unsure")
        return Subject(
            kind="supply", target=held, network=None, net=held.net, refs=(), feeds=(), nets=nets, views=(view,)
        )

    def _network_subjects(self) -> tuple[Subject, ...]:
        return tuple(self._network_subject(network) for network in self._board.networks)

    def _network_subject(self, network: Network) -> Subject:
        parts = tuple(self._board.parts[branch.ref] for branch in network.branches)
        return Subject(
            kind="network",
            target=network,
            network=network,
            net=network.id,
            refs=tuple(part.ref for part in parts),
            feeds=tuple(dict.fromkeys(pin for node in network.nodes for pin in node.feeds)),
            nets=tuple(dict.fromkeys((*network.free, *(node.net for node in network.nodes)))),
            views=tuple(view_at(node, network, self._nets(node), parts) for node in network.nodes),
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
