"""How many parts or nodes of a kind there are at a subject, and the least resistance of a path there."""

from collections.abc import Iterable, Iterator, Mapping
from itertools import pairwise

import networkx as nx

from rcrules.checks._subject import Subject
from rcrules.events import Unmeasurable
from rcrules.networks import Board, Network
from rcrules.parts import Known, RatedPart
from rcrules.vocabulary import HELD_KINDS


def count(options: Mapping[str, str], subject: Subject, board: Board) -> int:
    """Fitted parts of a kind with a pin on the subject's nets (or in its network), or nodes of a role there."""
    nets = set(subject.nets)
    if options.get("within") == "the network" or subject.kind == "board":
        nets |= _around(subject, board)
    if "role" in options:
        return sum(1 for node in _nodes(board, nets, subject) if node == options["role"])
    return sum(1 for part in _parts(board, nets, subject) if _fits(part, options, nets, board))


def _around(subject: Subject, board: Board) -> set[str]:
    """Free nets of the subject's network; of the board all nets."""
    if subject.kind == "board":
        return set(board.design.nets)
    return set(subject.network.free) if subject.network else set()


def _nodes(board: Board, nets: set[str], subject: Subject) -> Iterator[str]:
    """Roles of the nodes on the nets, or that feed the subject's pin."""
    for network in board.networks:
        for node in network.nodes:
            if {node.net, node.joint, node.across} & nets or set(node.feeds) & set(subject.feeds):
                yield node.role


def _parts(board: Board, nets: set[str], subject: Subject) -> Iterator[RatedPart]:
    """Fitted parts with a pin on one of the nets, or on a net joined to it; a part is not counted at itself."""
    joints = {board.joints.get(net, net) for net in nets}
    own = subject.refs if subject.kind in ("capacitor", "resistor", "pin") else ()
    for part in board.parts.values():
        ends = (board.joints.get(pin.net, pin.net) for pin in part.part.pins if pin.net)
        if part.fitted and part.ref not in own and any(end in joints for end in ends):
            yield part


def _fits(part: RatedPart, options: Mapping[str, str], nets: set[str], board: Board) -> bool:
    if "kind" in options and part.kind != options["kind"]:
        return False
    if "to" not in options:
        return True
    own = {board.joints.get(net, net) for net in nets}
    others = {board.joints.get(pin.net, pin.net) for pin in part.part.pins if pin.net} - own
    held = (board.held.get(net) for net in others)
    return any(item is not None and item.kind == options["to"] for item in held)


def least_path(options: Mapping[str, str], subject: Subject, board: Board) -> tuple[str, ...] | None:
    """References of the resistors on the path of least resistance; None where nothing leads there.

    Raises Unmeasurable where the network has no such ends.
    """
    network = subject.network
    if network is None:
        raise Unmeasurable("it is in no RC network", "")
    starts, ends = (set(_ends(options[key], network, board)) for key in ("from", "to"))
    for key, found in (("from", starts), ("to", ends)):
        if not found:
            raise Unmeasurable(f"the network has no {options[key]}", "")
    if starts & ends:
        return ()
    graph = _graph(network, board)
    paths = (_path(_without(graph, network, {start, end}), start, end) for start in starts for end in ends)
    found_paths = [path for path in paths if path is not None]
    return min(found_paths, key=lambda path: path[0])[1] if found_paths else None


def _without(graph: "nx.Graph[str]", network: Network, kept: set[str]) -> "nx.Graph[str]":
    """The graph without held nets that a path would only pass: what holds them takes the current."""
    return graph.subgraph(set(graph) - (set(network.held) - kept))


def _graph(network: Network, board: Board) -> "nx.Graph[str]":
    """Joints of the network, joined by its resistors; of parallel ones the least."""
    graph: nx.Graph[str] = nx.Graph()
    for branch in network.branches:
        value = board.parts[branch.ref].value
        ohms = value.si if isinstance(value, Known) else 0.0
        if branch.kind == "resistor" and ohms < graph.get_edge_data(branch.a, branch.b, {"ohms": float("inf")})["ohms"]:
            graph.add_edge(branch.a, branch.b, ohms=ohms, ref=branch.ref)
    return graph


def _path(graph: "nx.Graph[str]", start: str, end: str) -> tuple[float, tuple[str, ...]] | None:
    if start not in graph or end not in graph or not nx.has_path(graph, start, end):
        return None
    path = nx.shortest_path(graph, start, end, weight="ohms")
    edges = [graph.edges[pair] for pair in pairwise(path)]
    return sum(edge["ohms"] for edge in edges), tuple(edge["ref"] for edge in edges)


def _ends(what: str, network: Network, board: Board) -> Iterable[str]:
    """Joints of the network at which something of the kind stands; held ones only where they are meant."""
    inside = {*network.free}
    if what == "connector":
        inside |= {net for net in network.held if net in board.held and board.held[net].kind == "driven"}
    if what == "contact":
        return (end for item in network.contacts for end in (item.a, item.b) if end in inside)
    if what == "capacitor":
        return (
            end for item in network.branches if item.kind == "capacitor" for end in (item.a, item.b) if end in inside
        )
    if what in HELD_KINDS:
        return (net for net in network.held if net in board.held and board.held[net].kind == what)
    return _pinned(what, inside, board)


def _pinned(what: str, inside: set[str], board: Board) -> Iterator[str]:
    """Joints with a pin of an IC, or of a connector."""
    kind = "connector" if what == "connector" else "ic"
    for net in board.design.nets.values():
        joint = board.joints.get(net.name, net.name)
        if joint in inside and any(board.parts[pin.ref].kind == kind for pin in net.pins if pin.ref in board.parts):
            yield joint
