"""A circuit and its event as a structure, with nothing observed yet."""

from collections.abc import Sequence

from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._transients import Transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.problems import Structure, constant

LEAK = 1e12
"""What ties a joint without capacitor that only diodes and open contacts touch to 0 V [Ω]; no answer depends on it."""


def structure_of(circuit: Circuit, event: Transient) -> Structure:
    """Circuit and event in numbers. Raises Unmeasurable where a free terminal floats before or after the event."""
    _check_opened(circuit, event)
    check_paths(circuit, event.after)
    earlier = None
    if event.before != event.after and not event.empty:
        check_paths(circuit, event.before)
        ohms = (*circuit.values("resistor"), *(arm.value for arm in event.before))
        earlier = (circuit.shape(event.before), ohms)
    return Structure(
        shape=circuit.shape(event.after),
        ohms=(*circuit.values("resistor"), *(arm.value for arm in event.after)),
        farads=circuit.values("capacitor"),
        waveforms=tuple(event.waves[name] for name in circuit.held),
        amps=circuit.amps(),
        diodes=circuit.diodes(),
        pinned=tuple((circuit.terminal(name), volts) for name, volts in event.pinned),
        amplifiers=circuit.amplifiers(),
        earlier=earlier,
        empty=event.empty,
    )


def _check_opened(circuit: Circuit, event: Transient) -> None:
    """Raises Unmeasurable where nothing is known to discharge a supply that is left open."""
    floating = circuit.floating(event.after)
    for name, _ in event.pinned:
        if name in floating:
            raise Unmeasurable(f"nothing that is known discharges {name} once it is open: it never falls")


def check_paths(circuit: Circuit, contacts: Sequence[Arm]) -> None:
    """Tie what hangs on diodes alone. Raises Unmeasurable where a free terminal with a capacitor, or any other, floats.

    contacts: closed ones.
    """
    floating = circuit.floating(contacts)
    stores = {end for arm in circuit.of("capacitor") for end in (arm.a, arm.b)}
    at_diodes = {end for item in circuit.valves for end in (item.anode, item.cathode)}
    for name in floating:
        if name not in at_diodes or name in stores:
            while_open = " while diodes block" if circuit.valves else ""
            raise Unmeasurable(f"no resistive path from {name} to a source or ground{while_open}")
    for name in floating:
        circuit.arms.append(
            Arm(ref=f"leak at {name}", kind="resistor", a=name, b=circuit.hold(ZERO), value=constant(LEAK))
        )
