"""Networks: largest sets of free joints connected by resistors and capacitors, with the held joints around them."""

from collections.abc import Iterable, Iterator, Mapping
from typing import TypeVar

from rcrules.design import natural
from rcrules.networks._draft import Draft, RawNetwork
from rcrules.networks._model import Branch, Contact, Diode
from rcrules.networks._spot import chain

Item = TypeVar("Item", Contact, Diode)


def networks(draft: Draft) -> tuple[RawNetwork, ...]:
    """All networks of the draft, by identity; each local supply is one of its own."""
    found = [_network(draft, free) for free in _components(draft)]
    found += [_local(draft, joint) for joint in draft.local]
    return tuple(sorted(found, key=lambda network: natural(network.id)))


def _components(draft: Draft) -> Iterator[list[str]]:
    """Sets of free joints connected by branches."""
    import networkx as nx

    graph: nx.Graph[str] = nx.Graph()
    graph.add_nodes_from(joint for joint in draft.branches if draft.held_joint(joint) is None)
    graph.add_edges_from(
        (joint, far)
        for joint in list(graph)
        for item in draft.branches_at(joint)
        if (far := item.b if item.a == joint else item.a) in graph
    )
    for free in nx.connected_components(graph):
        yield sorted(free, key=natural)


def _network(draft: Draft, free: list[str]) -> RawNetwork:
    return _assembled(draft, free, [item for joint in free for item in draft.branches_at(joint)])


def _local(draft: Draft, joint: str) -> RawNetwork:
    """A local supply as its source sees it: the resistors that feed it and its capacitors to held nets."""
    chains = [chain(draft, item, joint) for item in draft.branches_at(joint)]
    feeding = [items for items, far in chains if _belongs(draft, items[0], far)]
    items = [item for several in feeding for item in several]
    between = {end for item in items for end in (item.a, item.b) if not draft.held_joint(end)}
    return _assembled(draft, [joint, *sorted(between, key=natural)], items)


def _belongs(draft: Draft, item: Branch, end: str) -> bool:
    far = draft.held_joint(end)
    return far is not None and (item.kind == "capacitor" or far.kind == "supply")


def _assembled(draft: Draft, free: list[str], branches: Iterable[Branch]) -> RawNetwork:
    inside = frozenset(free)
    ordered = tuple(sorted(dict.fromkeys(branches), key=lambda item: (natural(item.ref), item.a, item.b)))
    around = {joint for item in ordered for joint in (item.a, item.b)} - inside
    contacts, diodes = _touching(draft.contacts, free), _touching(draft.diodes, free)
    around |= {joint for item in contacts for joint in (item.a, item.b)} - inside
    around |= {joint for item in diodes for joint in (item.anode, item.cathode)} - inside
    names = sorted(inside, key=natural)
    return RawNetwork(
        id=names[0],
        branches=ordered,
        free=tuple(names),
        held=tuple(sorted((joint for joint in around if draft.held_joint(joint) is not None), key=natural)),
        contacts=contacts,
        diodes=diodes,
    )


def _touching(items: Mapping[str, tuple[Item, ...]], free: list[str]) -> tuple[Item, ...]:
    found = dict.fromkeys(item for joint in free for item in items.get(joint, ()))
    return tuple(sorted(found, key=lambda item: natural(item.ref)))
