"""What the project file says about nets and pins, its names taken as globs."""

from collections.abc import Mapping
from dataclasses import dataclass
from fnmatch import fnmatchcase
from typing import TypeVar

from rcrules.design import Pin
from rcrules.networks._held_verdict import Verdict
from rcrules.project import NetFacts, PinFacts, Project, SupplyFacts
from rcrules.vocabulary import HELD_KINDS

Value = TypeVar("Value")


@dataclass(frozen=True, slots=True, kw_only=True)
class Facts:
    """A project file, asked by net and pin."""

    project: Project

    def is_ground(self, net: str) -> bool:
        """Whether [ground] names the net."""
        return any(net == name or fnmatchcase(net, name) for name in self.project.grounds)

    def supply(self, net: str) -> SupplyFacts | None:
        """[supply] of the net."""
        return matching(self.project.supplies, net)

    def net(self, net: str) -> NetFacts | None:
        """[net] of the net."""
        return matching(self.project.nets, net)

    def free(self, net: str) -> bool:
        """Whether [net] says ``held = "free"``."""
        facts = self.net(net)
        return facts is not None and facts.held == "free"

    def held(self, net: str) -> Verdict | None:
        """What the project says that holds the net."""
        if self.is_ground(net):
            return Verdict(kind="ground", volts=0.0, evidence=("project [ground]",), given=True)
        supply, facts = self.supply(net), self.net(net)
        if supply is not None:
            return Verdict(
                kind="supply",
                spread=supply.voltage,
                evidence=(f"project [supply] of {net}",),
                given=supply.voltage is not None,
            )
        if facts is not None and (facts.swing is not None or facts.held in HELD_KINDS):
            kind = facts.held if facts.held in HELD_KINDS else "driven"
            return Verdict(
                kind=kind, spread=facts.swing, evidence=(f"project [net] {net}",), given=facts.swing is not None
            )
        return None

    def pin(self, pin: Pin) -> PinFacts | None:
        """[pin] of the pin, by name or number."""
        pins = self.project.pins
        if not pins:
            return None
        return matching(pins, f"{pin.ref}.{pin.name}") or matching(pins, f"{pin.ref}.{pin.number}")


def matching(table: Mapping[str, Value], name: str) -> Value | None:
    """The entry for a name: the exact one, else the first glob that fits."""
    if name in table:
        return table[name]
    return next((value for key, value in table.items() if fnmatchcase(name, key)), None)
