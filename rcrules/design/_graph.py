"""The design as a graph."""

from __future__ import annotations

from typing import TYPE_CHECKING

from rcrules.design._model import Design

if TYPE_CHECKING:
    import networkx as nx


def graph(design: Design) -> nx.Graph[tuple[str, str]]:
    """Bipartite graph of parts and nets.

    Nodes are ``("part", ref)`` with ``bipartite=0`` and ``("net", name)`` with ``bipartite=1``; an edge stands for all
    pins of the part on the net, kept as ``pins`` (tuple of Pin). Parts without nets and nets without pins are nodes.
    """
    import networkx as nx

    made: nx.Graph[tuple[str, str]] = nx.Graph()
    made.add_nodes_from((("part", ref) for ref in design.parts), bipartite=0)
    made.add_nodes_from((("net", name) for name in design.nets), bipartite=1)
    for part in design.parts.values():
        for pin in part.pins:
            ends = ("part", part.ref), ("net", pin.net)
            held = made.edges[ends]["pins"] if made.has_edge(*ends) else ()
            made.add_edge(*ends, pins=(*held, pin))
    return made
