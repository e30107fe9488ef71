"""A circuit and its event as a structure, with nothing observed yet."""

from collections.abc import Sequence

from rcrules.events._circuit import Arm, Circuit
from rcrules.events._transients import Transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.problems import Structure


def structure_of(circuit: Circuit, event: Transient) -> Structure:
    """Circuit and event in numbers. Raises Unmeasurable where a free terminal floats before or after the event."""
    _check_paths(circuit, event.after)
    earlier = None
    if event.before != event.after and not event.empty:
        _check_paths(circuit, event.before)
        ohms = (*circuit.values("resistor"), *(arm.value for arm in event.before))
        earlier = (circuit.shape(event.before), ohms)
    return Structure(
        shape=circuit.shape(event.after),
        ohms=(*circuit.values("resistor"), *(arm.value for arm in event.after)),
        farads=circuit.values("capacitor"),
        waveforms=tuple(event.waves[name] for name in circuit.held),
        amps=circuit.amps(),
        earlier=earlier,
        empty=event.empty,
    )


def _check_paths(circuit: Circuit, contacts: Sequence[Arm]) -> None:
    floating = circuit.floating(contacts)
    if floating:
        raise Unmeasurable(f"no resistive path from {floating[0]} to a source or ground")
