"""What a rule may be held against: nodes, parts, pins, supplies and networks, each with the facts of selections."""

from collections import defaultdict
from collections.abc import Mapping
from functools import cached_property

from rcrules.checks._agreement import differing
from rcrules.checks._pins import Pins
from rcrules.checks._places import Places
from rcrules.checks._subject import Subject
from rcrules.checks._views import view_apart, view_around, view_at
from rcrules.networks import Board, Held, Network, Node
from rcrules.parts import Known, RatedPart
from rcrules.project import Project


class Subjects:
    """All subjects of a board, each kind worked out once, when it is asked for."""

    def __init__(self, board: Board, project: Project | None = None) -> None:
        """project: what it calls pins."""
        self._board, self._places = board, Places(board)
        self._pins = Pins(self._places, project or Project())
        self._found: dict[str, tuple[Subject, ...]] = {}

    def of(self, kind: str) -> tuple[Subject, ...]:
        """Subjects of a kind of measure, in the board's order; none for a kind that is not judged."""
        if kind == "node":
            return self._node_subjects
        if kind not in self._found:
            further = {
                "pin": self._pins.measured,
                "any pin": self._pins.of_ics,
                "supply pin": self._pins.supplies,
                "reset pin": self._pins.resets,
                "contact pin": self._pins.contacts,
                "open-drain net": self._pins.open_drains,
                "supply": self._supply_subjects,
                "network": self._network_subjects,
                "listed part": self._listed_parts,
                "board": self._whole_board,
            }
            self._found[kind] = further[kind]() if kind in further else self._part_subjects(kind)
        return self._found[kind]

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

    def _listed_parts(self) -> tuple[Subject, ...]:
        """Parts about which the inputs do not agree; the board where they agree on all; none of one input alone."""
        if len(self._board.design.exports) < 2:
            return ()
        return tuple(self._part_subject(part) for part in differing(self._board)) or self._whole_board()

    def _node_subject(self, node: Node, network: Network) -> Subject:
        parts = tuple(self._board.parts[ref] for ref in node.parts)
        nets = self._places.nets_of(node)
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
        nets = tuple(dict.fromkeys((held.net, *self._places.members.get(held.net, ()))))
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
            views=tuple(view_at(node, network, self._places.nets_of(node), parts) for node in network.nodes),
        )

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
