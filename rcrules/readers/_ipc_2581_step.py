"""Steps of an IPC-2581 file: components, and connections by logical nets and by pads."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Final

from rcrules.readers._component import Component

_TAGS: Final = ("CMP", "COMP", "NET", "PART", "REF", "REFDES")
"""Prefixes that writers put before every name, with a colon."""
_OPEN: Final = frozenset({"", "no net", "no_net", "nonet"})


@dataclass(slots=True, kw_only=True)
class Step:
    """One board, or a panel of boards."""

    name: str
    line: int
    components: dict[str, Component] = field(default_factory=dict)
    nets: dict[str, int] = field(default_factory=dict)
    """Logical nets with their lines."""
    logical: dict[tuple[str, str, str], int] = field(default_factory=dict)
    """Line of each net, part and pin of a logical net."""
    pads: dict[tuple[str, str, str], int] = field(default_factory=dict)
    """Line of each net, part and pin that a pad names."""

    @property
    def connected(self) -> bool:
        """Whether any pin is on a net."""
        return bool(self.logical or self.pads)

    def connections(self) -> dict[tuple[str, str, str], int]:
        """Those of the logical nets, else those of the pads."""
        return self.logical or self.pads

    def contradictions(self) -> list[tuple[str, str, str, str, int]]:
        """Part, pin, logical net, net of the pad and its line where both sources name a pin and differ."""
        by_pin: dict[tuple[str, str], set[str]] = {}
        for net, ref, pin in self.logical:
            by_pin.setdefault((ref, pin), set()).add(net)
        found = []
        for (net, ref, pin), line in self.pads.items():
            known = by_pin.get((ref, pin))
            if known is not None and net not in known and not is_open(net):
                found.append((ref, pin, min(known), net, line))
        return found


def is_open(net: str) -> bool:
    """Whether a net's name says that there is none."""
    return net.strip().lower() in _OPEN


def prefix(names: Iterable[str], step: str) -> str:
    """The prefix, with its colon, that stands before every name and is the step's name or a known tag; '' without."""
    given = list(names)
    if not given or ":" not in given[0]:
        return ""
    tag = given[0].partition(":")[0]
    known = tag == step or tag.upper() in _TAGS
    return f"{tag}:" if known and all(name.startswith(f"{tag}:") for name in given) else ""
