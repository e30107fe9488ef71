"""Nets joined at DC: through ferrites, inductors, fuses, 0 Ω links, closed jumpers and net ties."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from typing import Final

from rcrules.design import Design, Pin, natural
from rcrules.networks._held_names import hint, leaf
from rcrules.parts import RatedPart

GROUND: Final = "ground"
SUPPLY: Final = "supply"
Rail = str | float
"""``ground``, ``supply`` of unknown voltage, or a voltage [V]."""


@dataclass(slots=True, kw_only=True)
class Joining:
    """A growing partition of nets; ``rails`` keeps two nets apart that cannot be one (a ground and a supply)."""

    rails: Mapping[str, Rail]
    """Net -> what it certainly is."""
    parent: dict[str, str] = field(default_factory=dict)
    rail: dict[str, Rail] = field(default_factory=dict)

    def find(self, net: str) -> str:
        """The net that stands for the set so far."""
        root = net
        while (above := self.parent.get(root, root)) != root:
            root = above
        while self.parent.get(net, net) != root:
            self.parent[net], net = root, self.parent.get(net, net)
        return root

    def join(self, a: str, b: str) -> bool:
        """Join the sets of two nets; False where their rails differ."""
        a, b = self.find(a), self.find(b)
        rails = [
            rail
            for rail in (self.rail.get(a, self.rails.get(a)), self.rail.get(b, self.rails.get(b)))
            if rail is not None
        ]
        if len(rails) == 2 and _apart(*rails):
            return False
        self.parent[b] = a
        if rails:
            self.rail[a] = next((rail for rail in rails if isinstance(rail, float)), rails[0])
        return True


def _apart(one: Rail, other: Rail) -> bool:
    """Ground and a supply, or supplies of two voltages; a supply of unknown voltage may be any."""
    return one != other and (GROUND in (one, other) or (isinstance(one, float) and isinstance(other, float)))


def joints(
    design: Design, parts: Mapping[str, RatedPart], pairs: Iterable[tuple[Pin, Pin]], rails: Mapping[str, Rail]
) -> tuple[dict[str, str], dict[str, tuple[str, ...]]]:
    """Net -> joint and joint -> nets. A joint is called by its named net, or that with most capacitors and pins."""
    joining = Joining(rails=rails)
    for first, second in pairs:
        joining.join(first.net, second.net)
    sets: dict[str, list[str]] = {}
    for net in design.nets:
        sets.setdefault(joining.find(net), []).append(net)
    members = {_representative(design, parts, nets): tuple(nets) for nets in sets.values()}
    return {net: joint for joint, nets in members.items() for net in nets}, members


def _representative(design: Design, parts: Mapping[str, RatedPart], nets: list[str]) -> str:
    if len(nets) == 1:
        return nets[0]

    def rank(net: str) -> tuple[bool, bool, int, int, object]:
        pins = design.nets[net].pins
        capacitors = sum(pin.ref in parts and parts[pin.ref].kind == "capacitor" for pin in pins)
        named = hint(net)
        return named is None or not named.strong, leaf(net) is None, -capacitors, -len(pins), natural(net)

    return min(nets, key=rank)
