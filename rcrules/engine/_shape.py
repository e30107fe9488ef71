"""Topology of a network as numbers, and the bookkeeping that depends on the topology alone."""

from collections.abc import Iterable
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Indices = NDArray[np.intp]
Flags = NDArray[np.bool_]
Pairs = tuple[tuple[int, int], ...]


class FloatingNode(Exception):  # noqa: N818 - what it says about a network is its name
    """A free node has no resistive path to a held terminal."""

    def __init__(self, node: int, case: int) -> None:
        super().__init__(f"node {node} has no resistive path to a held terminal in case {case}")
        self.node = node
        """Index of a free node of the floating part."""
        self.case = case
        """First case in which it floats."""


@dataclass(frozen=True, slots=True)
class Shape:
    """Topology of a network. Terminals ``0 .. free-1`` are free, ``free .. free+held-1`` are held."""

    free: int
    """Number of nodes whose voltage is to be found."""
    held: int
    """Number of terminals whose voltage is given."""
    resistors: Pairs
    """Terminal pair of each resistor; any terminals, also two held ones."""
    capacitors: Pairs
    """Terminal pair of each capacitor; any terminals, also two held ones."""

    def __post_init__(self) -> None:
        terminals = {terminal for pair in (*self.resistors, *self.capacitors) for terminal in pair}
        if not terminals <= set(range(self.free + self.held)):
            raise ValueError("a branch names a terminal that the shape does not have")


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """All capacitors between the same two free nodes, or between one free node and any held terminals."""

    node: int
    other: int | None
    """The other free node; None = held."""
    members: tuple[tuple[int, float, int | None], ...]
    """(capacitor, sign, held terminal from 0): sign +1 when the capacitor's first terminal is ``node``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Layout:
    """The branches of a shape, sorted by what they join."""

    bridges: tuple[tuple[int, int, int], ...]
    """(resistor, free node, free node)"""
    slacks: tuple[tuple[int, int, int], ...]
    """(resistor, free node, held terminal from 0)"""
    columns: tuple[Column, ...]


@lru_cache(maxsize=4096)
def layout(shape: Shape) -> Layout:
    """Branches of the shape by kind; those between held terminals or from a node to itself do not act on free nodes."""
    bridges, slacks = [], []
    for index, (a, b) in enumerate(shape.resistors):
        low, high = sorted((a, b))
        if low < high < shape.free:
            bridges.append((index, low, high))
        elif low < shape.free <= high:
            slacks.append((index, low, high - shape.free))
    return Layout(bridges=tuple(bridges), slacks=tuple(slacks), columns=_columns(shape))


def _columns(shape: Shape) -> tuple[Column, ...]:
    """Capacitors that touch free nodes, parallel ones together."""
    members: dict[tuple[int, int | None], list[tuple[int, float, int | None]]] = {}
    for index, (a, b) in enumerate(shape.capacitors):
        low, high = sorted((a, b))
        if low == high or low >= shape.free:
            continue
        held = None if high < shape.free else high - shape.free
        members.setdefault((low, high if held is None else None), []).append((index, 1.0 if a == low else -1.0, held))
    return tuple(Column(node=node, other=other, members=tuple(found)) for (node, other), found in members.items())


def floating_groups(free: int, columns: Iterable[Column]) -> tuple[tuple[int, ...], ...]:
    """Largest sets of free nodes joined by capacitors, none of which leads to a held terminal.

    Their number is the number of time constants that are exactly zero: n - rank of the capacitor graph.
    """
    parent = list(range(free + 1))  # the last entry stands for all held terminals

    def root(node: int) -> int:
        while parent[node] != node:
            node = parent[node]
        return node

    for column in columns:
        parent[root(column.node)] = root(free if column.other is None else column.other)
    groups: dict[int, list[int]] = {}
    for node in range(free):
        groups.setdefault(root(node), []).append(node)
    groups.pop(root(free), None)
    return tuple(tuple(nodes) for nodes in groups.values())
