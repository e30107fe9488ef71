"""Diodes of a network: those that stay reverse-biased through an event are open, any other is solved."""

from dataclasses import replace

from rcrules.events._bench import Bench
from rcrules.events._build import terminal_of
from rcrules.events._circuit import ZERO, Circuit
from rcrules.events._clamps import clamp
from rcrules.events._sources import Sources
from rcrules.events._transients import Scene, Transient, transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.events._valves import add, may_break
from rcrules.networks import Diode, Network
from rcrules.problems import Waveform


def widened(bench: Bench, network: Network) -> Network:
    """A network with all those that its diodes join to it."""
    owners = {joint: item for item in bench.board.networks for joint in item.free} if network.diodes else {}
    found, waiting = {network.free: network}, [network]
    while waiting:
        for diode in waiting.pop().diodes:
            for joint in (diode.anode, diode.cathode):
                other = owners.get(joint)
                if other is not None and other.free not in found and not set(other.free) & set(network.free):
                    found[other.free] = other
                    waiting.append(other)
    return network if len(found) == 1 else _merged(network, list(found.values()))


def _merged(network: Network, found: list[Network]) -> Network:
    free = tuple(dict.fromkeys(joint for item in found for joint in item.free))
    return replace(
        network,
        branches=tuple(dict.fromkeys(branch for item in found for branch in item.branches)),
        free=free,
        held=tuple(dict.fromkeys(joint for item in found for joint in item.held if joint not in free)),
        nodes=tuple(node for item in found for node in item.nodes),
        contacts=tuple(dict.fromkeys(contact for item in found for contact in item.contacts)),
        diodes=tuple(dict.fromkeys(diode for item in found for diode in item.diodes)),
    )


def with_diodes(scene: Scene, event: str) -> Transient:
    """The event, with the diodes that could conduct in it added to the circuit. Raises Unmeasurable."""
    waiting = list(scene.network.diodes)
    found = _alone(scene, event) if waiting else transient(scene, event)
    while found is None or (more := [diode for diode in waiting if not _blocks(scene, found, diode)]):
        added = waiting if found is None else more
        waiting = [diode for diode in waiting if diode not in added]
        add(scene.bench, scene.circuit, scene.sources, added)
        found = transient(scene, event)
    return found


def with_clamps(scene: Scene, event: str, found: Transient, *, slight: bool) -> Transient:
    """The event, with what pins leak held within their rails; without, where more than leakage could go beyond them."""
    if _beyond_rails(scene, event):
        return found
    added = clamp(scene.bench, scene.circuit, scene.sources, slight=slight)
    return transient(scene, event) if added else found


def _beyond_rails(scene: Scene, event: str) -> bool:
    """Whether a net could be beyond the rails of its pins by other means: a falling rail, one of several, a capacitor.

    There the diodes that stand for the end of leakage would carry what a pin need not carry.
    """
    circuit = scene.circuit
    supplies = [joint for joint in circuit.joints.values() if scene.sources.kind(joint) == "supply"]
    bridged = any(ZERO not in (arm.a, arm.b) for arm in circuit.of("capacitor"))
    return event == "power-down" or bridged or (event == "power-up" and len(supplies) > 1)


def _alone(scene: Scene, event: str) -> Transient | None:
    """The event without diodes; None where it needs them, or cannot be told."""
    try:
        return transient(scene, event)
    except Unmeasurable:
        return None


def add_all(bench: Bench, circuit: Circuit, sources: Sources, network: Network) -> None:
    """All diodes but those from 0 V in a network that is never below. Raises Unmeasurable."""
    idle = [diode for diode in network.diodes if _idle(bench, circuit, sources, diode)]
    while True:
        add(bench, circuit, sources, [diode for diode in network.diodes if diode not in idle])
        woken = [diode for diode in idle if not _idle(bench, circuit, sources, diode)]
        if not woken:
            return
        idle = [diode for diode in idle if diode not in woken]


def _idle(bench: Bench, circuit: Circuit, sources: Sources, diode: Diode) -> bool:
    bridged = any(ZERO not in (arm.a, arm.b) for arm in circuit.of("capacitor"))
    from_zero = terminal_of(bench, circuit, diode.anode) == ZERO
    plain = from_zero and not bridged and not circuit.draws and not _may_break(bench, circuit, sources, diode)
    return plain and all(_never_negative(circuit, sources, name) for name in circuit.held)


def _may_break(bench: Bench, circuit: Circuit, sources: Sources, diode: Diode) -> bool:
    held = [joint for joint in (diode.anode, diode.cathode) if joint not in circuit.free]
    return may_break(bench, circuit, sources, diode.ref, held)


def _blocks(scene: Scene, event: Transient, diode: Diode) -> bool:
    """Whether a diode is reverse-biased at every instant.

    Every free voltage lies between the lowest and the highest source as long as no capacitor leads to a source that
    moves and no current is drawn. A diode from 0 V, the lowest source, into the network and one from the network into
    the highest source, which never falls, are then reverse-biased.
    """
    if scene.unit or scene.circuit.draws or _pushed(scene, event):
        return False
    if _may_break(scene.bench, scene.circuit, scene.sources, diode):
        return False
    if scene.sources.kind(diode.anode) == "ground":
        return all(_never_negative(scene.circuit, scene.sources, name) for name in scene.circuit.held)
    return diode.anode in scene.circuit.free and _into_highest(scene, event, diode)


def _into_highest(scene: Scene, event: Transient, diode: Diode) -> bool:
    top = ZERO if scene.sources.kind(diode.cathode) == "ground" else diode.cathode
    wave = event.waves.get(top)
    if wave is None:
        return False
    return all(name == top or _below(scene, event, name, top) for name in scene.circuit.held) and _not_falling(wave)


def _pushed(scene: Scene, event: Transient) -> bool:
    """Whether a capacitor leads from the network to a source that moves."""
    return any(name in event.movers for arm in scene.circuit.of("capacitor") for name in (arm.a, arm.b))


def _never_negative(circuit: Circuit, sources: Sources, name: str) -> bool:
    joint = circuit.joints.get(name)
    spread = sources.volts(joint) if joint else None
    return joint is None or (spread is not None and spread.low >= 0.0)


def _below(scene: Scene, event: Transient, name: str, top: str) -> bool:
    """Whether a source never exceeds another: 0 V, the same source, or one that is lower and does not move."""
    if name not in scene.circuit.joints:
        return _never_negative(scene.circuit, scene.sources, top)
    if top not in scene.circuit.joints:
        return False
    if event.waves[name] == event.waves[top]:
        return True
    low, high = scene.sources.volts(scene.circuit.joints[name]), scene.sources.volts(scene.circuit.joints[top])
    still = name not in event.movers and top not in event.movers
    return still and low is not None and high is not None and low.high <= high.low


def _not_falling(wave: Waveform) -> bool:
    return wave.before == () or all(volts == wave.before for _, volts in wave.points)
