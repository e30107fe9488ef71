"""Networks, nodes and their roles as the document holds them."""

from dataclasses import fields

from rcrules.findings import Json, Quantity
from rcrules.inventory._quantities import Quantities
from rcrules.networks import Board, Network, Node


def networks(board: Board, quantities: Quantities) -> list[Json]:
    """One object per network, by id, nodes by net."""
    return [_network(network, quantities) for network in sorted(board.networks, key=lambda network: network.id)]


def _network(network: Network, quantities: Quantities) -> Json:
    branches = sorted(network.branches, key=lambda branch: (branch.ref, branch.a, branch.b))
    return {
        "id": network.id,
        "branches": [{"part": branch.ref, "nets": [branch.a, branch.b]} for branch in branches],
        "nodes": [_node(node, quantities, network.id) for node in sorted(network.nodes, key=lambda node: node.net)],
    }


def _node(node: Node, quantities: Quantities, network: str) -> Json:
    found = quantities.get((network, node.net), {})
    return {
        "net": node.net,
        "role": node.role,
        "certainty": node.certainty,
        "evidence": list(node.evidence),
        "parts": list(node.parts),
        "fed_from": list(node.fed_from),
        "feeds": list(node.feeds),
        "quantities": {name: _bounds(item) for name, item in sorted(found.items()) if isinstance(item, Quantity)},
        "unmeasured": {name: item for name, item in sorted(found.items()) if isinstance(item, str)},
    }


def _bounds(quantity: Quantity) -> Json:
    return {item.name: getattr(quantity, item.name) for item in fields(quantity)}
