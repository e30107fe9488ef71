"""A question about a capacitor or resistor: the DC states of all sources around it, or an event."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from itertools import product

from rcrules.events._bench import Bench
from rcrules.events._build import build, terminal_of
from rcrules.events._circuit import ZERO, Circuit
from rcrules.events._clamps import hold_rails
from rcrules.events._contacts import arm
from rcrules.events._diodes import add_all, widened, with_clamps, with_diodes
from rcrules.events._opened import opened
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._rating import rating_of
from rcrules.events._series import alone_between, between
from rcrules.events._sources import Sources, moved
from rcrules.events._structure import check_paths, structure_of
from rcrules.events._table import Table
from rcrules.events._transients import Scene
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import OPEN_END, Branch, Network
from rcrules.parts import RatedPart
from rcrules.problems import Form, Problem, Structure, Swing, Waveform, constant

MOST_SOURCES = 8
"""Sources of which every combination is tried."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """Where a part is: its branch, and the network around it (of its own where both ends are held)."""

    branch: Branch
    network: Network


def place_of(bench: Bench, part: RatedPart) -> Place:
    """Where a part is. Raises Unmeasurable where it has not two ends on two joints."""
    if part.ref in bench.network_of_part:
        network, branch = bench.network_of_part[part.ref]
        return Place(branch=branch, network=widened(bench, network))
    found = bench.branch(part)
    if found is not None and (string := alone_between(bench, part)) is not None:
        found = between(found, string)  # it may take the whole voltage of the string
    if found is None or found.a == found.b:
        raise Unmeasurable(f"{part.ref} does not lie between two nets")
    if bench.board.reasons.get(part.ref) == OPEN_END:
        raise Unmeasurable(f"one end of {part.ref} is open")
    for joint in (found.a, found.b):
        if bench.held(joint) is None:
            raise _unheld(bench, joint)
    lone = Network(id="", branches=(found,), free=(), held=(found.a, found.b), nodes=())
    return Place(branch=found, network=lone)


def _unheld(bench: Bench, joint: str) -> Unmeasurable:
    """Why the voltage of a joint outside every network is not known, and the line that would give it."""
    kinds = {pin.ref: bench.board.parts[pin.ref].kind for pin in bench.pins(joint) if pin.ref in bench.board.parts}
    crystal = next((ref for ref, kind in kinds.items() if kind == "crystal"), None)
    if crystal is not None:
        return Unmeasurable(f"active network: crystal {crystal} oscillates with the part that drives it")
    return Unmeasurable(f"what drives {joint} is not known", f'[net."{joint}"] swing = "…"')


def pose_states(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The DC states around a part, and the transient where that may go further. Raises Unmeasurable."""
    place, table = place_of(bench, part), Table()
    circuit, sources, ends = _circuit(bench, place, table)
    add_all(bench, circuit, sources, place.network)
    closed = tuple(arm(bench, circuit, table, item) for item in place.network.contacts)
    for contacts in ((), closed) if closed else ((),):
        check_paths(circuit, contacts)
    wants = str(options.get("extreme", "most"))
    signed = part.polarised and measure.name == "applied_voltage"
    railed = hold_rails(bench, circuit, sources)
    waves, transient_matters = switched_on(circuit, sources)
    extremes = Extremes(least=wants == "least", signed=signed, every=transient_matters)
    states = states_of(circuit, sources, ends, extremes)
    curves: tuple[tuple[int, tuple[tuple[float, float], ...]], ...] = ()
    if measure.incremental and part.bias_curve and not transient_matters:
        table.without_bias(part)
        curves = ((_element(circuit, part), part.bias_curve),)
    ohms = circuit.values("resistor")
    structure = Structure(
        shape=circuit.shape(),
        ohms=ohms,
        farads=circuit.values("capacitor"),
        waveforms=waves,
        amps=circuit.amps(),
        diodes=circuit.diodes(),
        earlier=(circuit.shape(closed), (*ohms, *(item.value for item in closed))) if closed else None,
        empty=True,
        at=circuit.terminal(ends[0]),
        against=circuit.terminal(ends[1]),
        element=_element(circuit, part),
        rating=rating_of(bench, table, part, measure),
        curves=curves,
        states=states,
        swings=swings_of(circuit, sources) if transient_matters else (),
        options=(
            *plain_of(measure, options),
            ("transient", float(transient_matters)),
            ("signed", float(signed)),
            ("railed", float(railed)),
        ),
    )
    return Problem(structure=structure, parameters=tuple(table.parameters), names=circuit.names(before=closed))


def pose_part_event(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """A part through an event. Raises Unmeasurable."""
    place, table = place_of(bench, part), Table()
    if options["event"] == "power-down":
        place = replace(place, network=opened(bench, place.network))
    circuit, sources, ends = _circuit(bench, place, table)
    watched = next((end for end in ends if end in circuit.free), ends[0])
    scene = Scene(bench=bench, network=place.network, circuit=circuit, sources=sources, joint=watched, unit=False)
    named = str(options["event"])
    event = with_clamps(scene, named, with_diodes(scene, named), slight=False)
    structure = replace(
        structure_of(circuit, event),
        at=circuit.terminal(ends[0]),
        against=circuit.terminal(ends[1]),
        element=_element(circuit, part),
        options=(*plain_of(measure, options), ("kind", part.kind)),
    )
    names = circuit.names(event.after, event.before)
    return Problem(structure=structure, parameters=tuple(table.parameters), names=names)


def _circuit(bench: Bench, place: Place, table: Table) -> tuple[Circuit, Sources, tuple[str, str]]:
    branch = place.branch
    for node in place.network.nodes:
        if node.active is not None and node.amplifier is None and node.joint in (branch.a, branch.b):
            raise Unmeasurable(f"active network: {node.active}")
    circuit = build(bench, place.network, table, [branch.a, branch.b])
    ends = terminal_of(bench, circuit, branch.a), terminal_of(bench, circuit, branch.b)
    return circuit, Sources(bench=bench, table=table), ends


def _element(circuit: Circuit, part: RatedPart) -> int:
    return next(index for index, item in enumerate(circuit.of(part.kind)) if item.ref == part.ref)


def ends_of(circuit: Circuit, sources: Sources, name: str) -> tuple[Form, Form]:
    """Lowest and highest voltage of a held terminal over its states. Raises Unmeasurable where they are not known."""
    joint = circuit.joints.get(name)
    if joint is None:
        return (), ()
    if sources.kind(joint) != "supply":
        rails = sources.rails(joint)
        if rails is not None:
            return rails
        swing = sources.swing(joint)
        return constant(swing.low) if swing.low else (), constant(swing.high) if swing.high else ()
    volts, spread = sources.supply(joint), sources.volts(joint)
    return (volts, ()) if spread is not None and spread.nominal < 0.0 else ((), volts)


@dataclass(frozen=True, slots=True, kw_only=True)
class Extremes:
    """Which states of the sources matter."""

    least: bool
    """True: the lowest voltage is asked for."""
    signed: bool
    every: bool
    """True: all of them, because transients start from each."""


def states_of(
    circuit: Circuit, sources: Sources, ends: tuple[str, str], extremes: Extremes
) -> tuple[tuple[Form, ...], ...]:
    """Every combination of lowest and highest; one where the other end is at 0 V and nothing is ever negative."""
    levels = [ends_of(circuit, sources, name) for name in circuit.held]
    spreads = [sources.most(joint) for joint in circuit.joints.values()]
    positive = all(spread is not None and spread.low >= 0.0 for spread in spreads) and not circuit.draws
    many = sum(low != high for low, high in levels) > MOST_SOURCES
    plain = ZERO in ends and positive and (ends[1] == ZERO or not extremes.signed)
    if plain and (many or not extremes.every):
        return (tuple(low if extremes.least else high for low, high in levels),)
    if many:
        raise Unmeasurable(f"more than {MOST_SOURCES} sources act on it")
    return tuple(dict.fromkeys(product(*levels)))


def switched_on(circuit: Circuit, sources: Sources) -> tuple[tuple[Waveform, ...], bool]:
    """All sources from 0 V to their highest, and whether a capacitor lets a voltage go beyond its DC states."""
    waves, bridging = [], False
    for name in circuit.held:
        _, high = ends_of(circuit, sources, name)
        waves.append(moved((), high, *_ramp(circuit, sources, name)))
    for item in circuit.of("capacitor"):
        held = [end for end in (item.a, item.b) if end != ZERO and end in circuit.held]
        free = [end for end in (item.a, item.b) if end in circuit.free]
        bridging = bridging or len(free) == 2 or (len(free) == 1 and bool(held))
    return tuple(waves), bridging and bool(circuit.free)


def swings_of(circuit: Circuit, sources: Sources) -> tuple[Swing, ...]:
    """The sources that may switch by themselves."""
    found = []
    for number, name in enumerate(circuit.held):
        low, high = ends_of(circuit, sources, name)
        if low != high:
            up, down = _times(circuit, sources, name)
            found.append(Swing(held=number, low=low, high=high, up=up, down=down))
    return tuple(found)


def _ramp(circuit: Circuit, sources: Sources, name: str) -> tuple[Form, Form]:
    """When a source begins to rise, and how long it takes; at once where nothing is said."""
    joint = circuit.joints.get(name)
    if joint is None or sources.kind(joint) != "supply":
        return (), ()
    return sources.begins(joint), sources.rise(joint) or ()


def _times(circuit: Circuit, sources: Sources, name: str) -> tuple[Form, Form]:
    """How long a source takes from its low to its high level, and back; at once where nothing is said."""
    joint = circuit.joints.get(name)
    if joint is None:
        return (), ()
    if sources.kind(joint) == "supply":
        spread = sources.volts(joint)
        times = sources.rise(joint) or (), sources.fall(joint) or ()
        return times[::-1] if spread is not None and spread.nominal < 0.0 else times
    return sources.edge(joint) or (), sources.edge(joint) or ()
