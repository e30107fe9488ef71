"""What each held terminal and contact does in an event."""

from collections.abc import Sequence
from dataclasses import dataclass

from rcrules.events._bench import Bench
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._contacts import Switched, switched
from rcrules.events._sources import Sources, moved, still
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Network
from rcrules.problems import Form, Waveform, constant


@dataclass(frozen=True, slots=True, kw_only=True)
class Transient:
    """Sources over time by held terminal, and the resistors of contacts before and after."""

    waves: dict[str, Waveform]
    before: tuple[Arm, ...] = ()
    after: tuple[Arm, ...] = ()
    empty: bool = False
    movers: tuple[str, ...] = ()
    """Held terminals that move."""
    pinned: tuple[tuple[str, Form], ...] = ()
    """Free terminals that a supply held until the event, and its voltage [V]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Scene:
    """What an event needs to know: the circuit, its sources, and the joint at which it is watched."""

    bench: Bench
    network: Network
    circuit: Circuit
    sources: Sources
    joint: str
    unit: bool
    """True: the measure counts in parts of the step: the moved source goes from 0 to 1 V, the others rest at 0 V."""
    length: float = 0.0
    """How long a dip lasts [s]."""


def transient(scene: Scene, event: str) -> Transient:
    """The event at the watched joint. Raises Unmeasurable."""
    contacts = switched(scene.bench, scene.network, scene.circuit, scene.sources.table, scene.joint, event)
    if event == "power-up":
        return _power_up(scene, contacts)
    if event == "power-down":
        return _power_down(scene, contacts)
    if event == "dip":
        return _dip(scene, contacts)
    if event in ("press", "release"):
        waves = {name: still(_rest(scene, name)) for name in scene.circuit.held}
        return Transient(waves=waves, before=contacts.before, after=contacts.after)
    return _step(scene, contacts, up=event == "step-up")


def _power_up(scene: Scene, contacts: Switched) -> Transient:
    waves, movers = {}, []
    for name in scene.circuit.held:
        joint = scene.circuit.joints.get(name)
        if joint is None or scene.sources.kind(joint) != "supply":
            waves[name] = still(_rest(scene, name))
            continue
        rise = scene.sources.rise(joint)
        note = "" if rise else f"{joint} rises at once"
        volts = _supply(scene, joint, note)
        waves[name] = moved((), volts, scene.sources.begins(joint), rise)
        movers.append(name)
    return Transient(waves=waves, after=contacts.after, empty=True, movers=tuple(movers))


def _power_down(scene: Scene, contacts: Switched) -> Transient:
    waves, movers = {}, []
    for name in scene.circuit.held:
        joint = scene.circuit.joints.get(name)
        if joint is None or scene.sources.kind(joint) != "supply":
            waves[name] = still(_rest(scene, name))
            continue
        if scene.sources.goes(joint) == "never":
            waves[name] = still(scene.sources.supply(joint))
            continue
        fall = scene.sources.fall(joint)
        volts = _supply(scene, joint, "" if fall else f"{joint} falls at once")
        waves[name] = moved(volts, (), (), fall)
        movers.append(name)
    pinned = tuple((name, scene.sources.supply(name)) for name in scene.circuit.free if scene.sources.opens(name))
    return Transient(waves=waves, before=contacts.before, after=contacts.after, movers=tuple(movers), pinned=pinned)


def _dip(scene: Scene, contacts: Switched) -> Transient:
    """All supplies fall at once to 0 V, stay there, and return along their ramps."""
    waves, movers = {}, []
    for name in scene.circuit.held:
        joint = scene.circuit.joints.get(name)
        if joint is None or scene.sources.kind(joint) != "supply":
            waves[name] = still(_rest(scene, name))
            continue
        if scene.sources.goes(joint) == "never":
            waves[name] = still(scene.sources.supply(joint))
            continue
        rise = scene.sources.rise(joint)
        volts = _supply(scene, joint, "" if rise else f"{joint} rises at once")
        back = constant(scene.length)
        waves[name] = Waveform(before=volts, points=(((), ()), (back, ()), (back + (rise or ()), volts)))
        movers.append(name)
    if not movers:
        raise Unmeasurable(f"no supply feeds {scene.joint}")
    return Transient(waves=waves, before=contacts.before, after=contacts.after, movers=tuple(movers))


def _step(scene: Scene, contacts: Switched, *, up: bool) -> Transient:
    source = mover(scene)
    low, high = _levels(scene, source)
    ends = (low, high) if up else (high, low)
    waves = {name: still(() if scene.unit else _rest(scene, name)) for name in scene.circuit.held if name != source}
    waves[source] = moved(*ends, (), scene.sources.edge(scene.circuit.joints[source]))
    return Transient(waves=waves, before=contacts.before, after=contacts.after, movers=(source,))


def mover(scene: Scene) -> str:
    """The nearest driven net that feeds the joint, through resistors if any does; else the nearest supply.

    Where all that feeds it is behind diodes, the nearest one there.
    """
    circuit = scene.circuit
    followed = [*circuit.arms, *circuit.followed()] if circuit.amplifier else []
    for ways in ((circuit.of("resistor"), circuit.arms, followed), (circuit.links(),)):
        for kind in ("driven", "supply"):
            names = [name for name in scene.circuit.held if _kind(scene, name) == kind]
            for arms in ways:
                found = [(steps, name) for name in names if (steps := _steps(scene, name, arms)) is not None]
                if found:
                    return min(found)[1]
    raise Unmeasurable(f"nothing that could step feeds {scene.joint}")


def _steps(scene: Scene, source: str, arms: Sequence[Arm]) -> int | None:
    circuit = Circuit(free=scene.circuit.free, held=scene.circuit.held)
    branches = [Arm(ref=arm.ref, kind="resistor", a=arm.a, b=arm.b, value=arm.value) for arm in arms]
    return circuit.driven([source], branches).get(scene.joint)


def _levels(scene: Scene, source: str) -> tuple[Form, Form]:
    if scene.unit:
        return (), constant(1.0)
    joint = scene.circuit.joints[source]
    if scene.sources.kind(joint) == "supply":
        return (), scene.sources.supply(joint)
    swing = scene.sources.swing(joint)
    return constant(swing.low) if swing.low else (), constant(swing.high) if swing.high else ()


def _kind(scene: Scene, name: str) -> str:
    joint = scene.circuit.joints.get(name)
    return "ground" if joint is None or name == ZERO else scene.sources.kind(joint)


def _supply(scene: Scene, joint: str, note: str) -> Form:
    """A supply that moves; where only parts of the step count and it alone matters, an unknown one is 1 V."""
    alone = [name for name in scene.circuit.held if name in scene.circuit.joints] == [joint]
    if scene.unit and alone and not scene.circuit.draws and scene.sources.volts(joint) is None:
        return constant(1.0)
    return scene.sources.supply(joint, note)


def _rest(scene: Scene, name: str) -> Form:
    joint = scene.circuit.joints.get(name)
    return () if joint is None else scene.sources.still(joint)
