"""Diodes that stay reverse-biased through an event are open; any other is not modelled."""

from rcrules.events._build import terminal_of
from rcrules.events._circuit import ZERO
from rcrules.events._transients import Scene, Transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Diode
from rcrules.problems import Waveform


def check_diodes(scene: Scene, event: Transient) -> None:
    """Raises Unmeasurable, with the diode's name, where one could conduct.

    Every free voltage lies between the lowest and the highest source as long as no capacitor leads to a source that
    moves and no current is drawn. A diode from 0 V, the lowest source, into the network and one from the network into
    the highest source, which never falls, are then reverse-biased at every instant.
    """
    for diode in scene.network.diodes:
        if not _blocks(scene, event, diode):
            raise Unmeasurable(f"diode {diode.ref} may conduct, and diodes are not modelled")


def _blocks(scene: Scene, event: Transient, diode: Diode) -> bool:
    if scene.unit or _pushed(scene, event):
        return False
    anode, cathode = (terminal_of(scene.bench, scene.circuit, joint) for joint in (diode.anode, diode.cathode))
    if anode == ZERO:
        return all(_never_negative(scene, name) for name in scene.circuit.held)
    wave = event.waves.get(cathode)
    if wave is None or anode in scene.circuit.held:
        return False
    return all(name == cathode or _below(scene, event, name, cathode) for name in scene.circuit.held) and _not_falling(
        wave
    )


def _pushed(scene: Scene, event: Transient) -> bool:
    """Whether a capacitor leads from the network to a source that moves."""
    return any(name in event.movers for arm in scene.circuit.of("capacitor") for name in (arm.a, arm.b))


def _never_negative(scene: Scene, name: str) -> bool:
    joint = scene.circuit.joints.get(name)
    spread = scene.sources.volts(joint) if joint else None
    return joint is None or (spread is not None and spread.low >= 0.0)


def _below(scene: Scene, event: Transient, name: str, top: str) -> bool:
    """Whether a source never exceeds another: 0 V, the same source, or one that is lower and does not move."""
    if name not in scene.circuit.joints:
        return _never_negative(scene, top)
    if event.waves[name] == event.waves[top]:
        return True
    low, high = scene.sources.volts(scene.circuit.joints[name]), scene.sources.volts(scene.circuit.joints[top])
    still = name not in event.movers and top not in event.movers
    return still and low is not None and high is not None and low.high <= high.low


def _not_falling(wave: Waveform) -> bool:
    return wave.before == () or all(volts == wave.before for _, volts in wave.points)
