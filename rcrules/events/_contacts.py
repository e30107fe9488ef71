"""Contacts as resistors: which are closed before and after an event."""

from dataclasses import dataclass

from rcrules.events._bench import Bench
from rcrules.events._build import terminal_of
from rcrules.events._circuit import Arm, Circuit
from rcrules.events._facts import fact
from rcrules.events._table import LEAST_OHMS, Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Contact, Network
from rcrules.problems import Form
from rcrules.quantities import Spread

CLOSED_ASSUMED = Spread(low=LEAST_OHMS, nominal=LEAST_OHMS, high=0.1, unit="Ω")
"""Resistance of a closed contact of which nothing is said."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Switched:
    """Closed contacts before and after an event."""

    before: tuple[Arm, ...]
    after: tuple[Arm, ...]


def switched(bench: Bench, network: Network, circuit: Circuit, table: Table, joint: str, event: str) -> Switched:
    """Contacts before and after an event; only ``press`` and ``release`` move one. Raises Unmeasurable."""
    usual = {item.ref: normally(bench, item) == "closed" for item in network.contacts}
    before, after = dict(usual), dict(usual)
    if event in ("press", "release"):
        moved = nearest(bench, network, circuit, joint).ref
        (after if event == "press" else before)[moved] = not usual[moved]
    return Switched(
        before=tuple(arm(bench, circuit, table, item) for item in network.contacts if before[item.ref]),
        after=tuple(arm(bench, circuit, table, item) for item in network.contacts if after[item.ref]),
    )


def arm(bench: Bench, circuit: Circuit, table: Table, contact: Contact) -> Arm:
    """A closed contact."""
    ends = [terminal_of(bench, circuit, joint) for joint in (contact.a, contact.b)]
    return Arm(ref=contact.ref, kind="resistor", a=ends[0], b=ends[1], value=_ohms(bench, table, contact.ref))


def normally(bench: Bench, contact: Contact) -> str:
    """``open`` or ``closed``, as the project says or as the part is drawn."""
    given = fact(bench.project.parts, (contact.ref,), lambda facts: facts.contact)
    return given.removeprefix("normally ") if given else contact.normally


def _ohms(bench: Bench, table: Table, ref: str) -> Form:
    given = fact(bench.project.parts, (ref,), lambda facts: facts.contact_resistance)
    if given is not None:
        return table.given(f"{ref} contact", given, "the project file", least=LEAST_OHMS)
    text = f"{ref} has up to {CLOSED_ASSUMED.high:g} Ω when closed"
    return table.assumed(f"{ref} contact", CLOSED_ASSUMED, text, f'[part."{ref}"] contact-resistance = "…"')


def nearest(bench: Bench, network: Network, circuit: Circuit, joint: str) -> Contact:
    """The contact with the fewest parts between it and a joint."""
    if not network.contacts:
        raise Unmeasurable(f"no contact acts on {joint}")
    everything = Circuit(free=circuit.free, held=circuit.held)
    steps = {**everything.driven([joint], circuit.links()), joint: 0}
    found = []
    for item in network.contacts:
        ends = [terminal_of(bench, circuit, end) for end in (item.a, item.b)]
        near = [steps[end] for end in ends if end in steps]
        if near:
            found.append((min(near), item.ref, item))
    if not found:
        raise Unmeasurable(f"no contact acts on {joint}")
    return min(found, key=lambda item: item[:2])[2]
