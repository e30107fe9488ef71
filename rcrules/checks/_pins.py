"""Pins as subjects: those at free nets, those of ICs, supply, reset, open-drain and contact pins."""

from dataclasses import replace
from typing import Final

from rcrules.checks._places import Places
from rcrules.checks._subject import Subject
from rcrules.checks._views import view_around, view_at
from rcrules.design import Pin
from rcrules.networks import Network, Node, pin_kinds
from rcrules.parts import RatedPart
from rcrules.project import Project, pin_facts

KINDS: Final = ("ic", "transistor", "contact", "connector")
"""Kinds of parts whose pins are subjects."""
_OUTPUTS: Final = ("output", "open-collector", "open-emitter", "power-out", "tri-state", "no-connect")


class Pins:
    """Pins of a board, each kind worked out when it is asked for."""

    def __init__(self, places: Places, project: Project) -> None:
        """project: what it calls pins."""
        self._places, self._board, self._project = places, places.board, project
        self._kinds: dict[str, dict[str, str]] = {}

    def measured(self) -> tuple[Subject, ...]:
        """Pins of ICs, transistors, contacts and connectors at free nets; of one contact and net one pin."""
        found: dict[tuple[str, str], Subject] = {}
        for network in self._board.networks:
            nodes = {node.joint: node for node in network.nodes if node.across is None}
            for joint in network.free:
                for pin in self._fitted(joint):
                    kind = self._board.parts[pin.ref].kind
                    key = (pin.ref, joint) if kind == "contact" else (pin.ref, pin.number)
                    if kind in KINDS:
                        found.setdefault(key, self._subject(pin, joint, network, nodes.get(joint)))
        return tuple(found.values())

    def of_ics(self) -> tuple[Subject, ...]:
        """Every connected pin of every fitted IC."""
        return tuple(self._at_net(pin) for part in self._parts("ic") for pin in part.part.pins if pin.net)

    def supplies(self) -> tuple[Subject, ...]:
        """Pins on a supply, or that take power from a net that is no ground, such as one behind a filter."""
        return tuple(pin for pin in self.of_ics() if self._is_supplied(pin))

    def resets(self) -> tuple[Subject, ...]:
        """Reset inputs of ICs, told by their names."""
        return tuple(
            self._at_net(pin)
            for part in self._parts("ic")
            for pin in part.part.pins
            if pin.net and pin.type not in _OUTPUTS and self._fed(part)[pin.number] == "reset"
        )

    def contacts(self) -> tuple[Subject, ...]:
        """Of every fitted contact a pin a net, other than on supplies and grounds."""
        found: dict[tuple[str, str], Subject] = {}
        for part in self._parts("contact"):
            for pin in part.part.pins:
                held = self._board.held.get(pin.net)
                if pin.net and (held is None or held.kind == "driven"):
                    found.setdefault((part.ref, self._places.joint(pin.net)), self._at_net(pin))
        return tuple(found.values())

    def open_drains(self) -> tuple[Subject, ...]:
        """Every net with an open-drain pin of an IC, once."""
        found: dict[str | None, Subject] = {}
        for pin in self.of_ics():
            if isinstance(pin.target, Pin) and self._called(pin.target) == "open-drain":
                found.setdefault(pin.net, pin)
        return tuple(found.values())

    def _parts(self, kind: str) -> list[RatedPart]:
        return [part for part in self._board.parts.values() if part.kind == kind and part.fitted]

    def _fitted(self, joint: str) -> list[Pin]:
        nets = dict.fromkeys((joint, *self._places.members.get(joint, ())))
        pins = [pin for net in nets if net in self._board.design.nets for pin in self._board.design.nets[net].pins]
        return [pin for pin in pins if pin.ref in self._board.parts and self._board.parts[pin.ref].fitted]

    def _fed(self, part: RatedPart) -> dict[str, str]:
        """Pin number -> what the pin is."""
        if part.ref not in self._kinds:
            self._kinds[part.ref] = pin_kinds(part, self._project)
        return self._kinds[part.ref]

    def _at_net(self, pin: Pin) -> Subject:
        joint = self._places.joint(pin.net)
        return self._subject(pin, joint, self._places.network_at(joint), self._places.node_at(joint))

    def _subject(self, pin: Pin, joint: str, network: Network | None, node: Node | None) -> Subject:
        part = self._board.parts[pin.ref]
        nets = tuple(dict.fromkeys((joint, *self._places.members.get(joint, ()))))
        view = view_around(nets, network.held if network else nets[:1], (part,))
        if node is not None and network is not None:
            view = view_at(node, network, nets, (part,))
        view = replace(view, feeds=(pin.key,), kinds_fed=(self._fed(part).get(pin.number, "other"),))
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

    def _called(self, pin: Pin) -> str:
        """What the project file calls a pin, or else its export."""
        facts = pin_facts(self._project, (pin.key, f"{pin.ref}.{pin.number}"))
        given = facts.kind if facts is not None else None
        return given or {"open-collector": "open-drain", "power-in": "supply"}.get(pin.type, pin.type)

    def _is_supplied(self, pin: Subject) -> bool:
        held = self._board.held.get(pin.net or "")
        if held is not None:
            return held.kind == "supply"
        return isinstance(pin.target, Pin) and self._called(pin.target) == "supply"
