"""A question about a node: its network, its event and its levels in numbers."""

import math
from collections.abc import Mapping
from dataclasses import dataclass, replace

from rcrules.events._amplified import amplify, observed, with_output
from rcrules.events._bench import Bench
from rcrules.events._build import build, terminal_of
from rcrules.events._circuit import Circuit
from rcrules.events._diodes import widened, with_clamps, with_diodes
from rcrules.events._levels import Leveller
from rcrules.events._opened import opened
from rcrules.events._options import OptionValue, levels_of, plain_of
from rcrules.events._reference import hold_powering, reference_of
from rcrules.events._rest import at_rest
from rcrules.events._sample import pose_sample
from rcrules.events._sources import Sources
from rcrules.events._structure import structure_of
from rcrules.events._table import Table
from rcrules.events._transients import Scene, Transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.levels import Level
from rcrules.measures import Measure
from rcrules.networks import Network, Node
from rcrules.parts import RatedPart
from rcrules.problems import Problem, Structure, Unsettled, solved
from rcrules.quantities import Spread, show

STEPS = ("step-up", "step-down")


def pose_node(bench: Bench, node: Node, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The problem of a measure at a node. Raises Unmeasurable."""
    if node.active is not None:
        raise Unmeasurable(f"active network: {node.active}")
    if measure.poses == "sample" and node.across is None:
        return pose_sample(bench, node, measure, options)
    if measure.poses not in ("event", "dip") or node.across is not None:
        return at_rest(bench, node, measure, options)
    scene, table = _scene(bench, node, measure, options)
    circuit, levels = scene.circuit, levels_of(measure, options)
    leveller = Leveller(bench=bench, circuit=circuit, table=table, node=node)
    _hold_followed(bench, circuit, leveller, levels)
    event = _event(measure, options)
    if options.get("from") == "supply valid":
        hold_powering(scene, node)
    found = with_clamps(scene, event, with_diodes(scene, event), slight=measure.unit == "s")
    structure = replace(
        structure_of(circuit, found), at=circuit.terminal(scene.joint), options=plain_of(measure, options)
    )
    absorbing = _most_absorbing(bench, scene.network) if measure.settles else None
    if absorbing is not None and measure.settles == "by a share":
        structure = replace(structure, absorbed=table.absorption(absorbing))
    upwards = event in ("power-up", "step-up")
    structure = replace(structure, rising=_rises(scene, found, structure, table, upwards=upwards))
    forms = tuple(
        (name, leveller.form(name, level, rising=structure.rising != (name == "armed")))
        for name, level in levels.items()
    )
    reference = reference_of(scene, node, found, str(options.get("from", "event")))
    doubt, ask = _doubt(absorbing, options)
    return Problem(
        structure=replace(structure, levels=forms, reference=reference),
        parameters=tuple(table.parameters),
        names=circuit.names(found.after, found.before),
        doubt=doubt,
        doubt_ask=ask,
    )


def _scene(bench: Bench, node: Node, measure: Measure, options: Mapping[str, OptionValue]) -> tuple[Scene, Table]:
    """The circuit around a node for an event, and its columns."""
    event, table = _event(measure, options), Table()
    network = with_output(widened(bench, bench.network(node)), node, measure)
    if event == "power-down":
        network = opened(bench, network)
    parts_of_step = all(level.of == "step" for level in levels_of(measure, options).values())
    linear = not network.diodes  # a forward drop is no part of a step
    relative = linear and measure.scale_free and parts_of_step and options.get("from", "event") == "event"
    circuit = build(bench, network, table, [node.joint], currents=not (relative and event in STEPS))
    amplify(bench, circuit, table, network, node)
    scene = Scene(
        bench=bench,
        network=network,
        circuit=circuit,
        sources=Sources(bench=bench, table=table),
        joint=observed(network, node),
        unit=relative,
        length=_plain(options.get("length", 0.0)),
    )
    return scene, table


def _event(measure: Measure, options: Mapping[str, OptionValue]) -> str:
    return str(options.get("event", measure.poses))


def pose_network(bench: Bench, network: Network, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The problem of a measure at the node of a network that delays a reset. Raises Unmeasurable."""
    nodes = [node for node in network.nodes if node.role == "power-on-delay"] or list(network.nodes)
    if len(nodes) != 1:
        told = ", ".join(node.net for node in nodes) or "none"
        raise Unmeasurable(f"not one node of the network delays a reset but {told}")
    return pose_node(bench, nodes[0], measure, options)


def _most_absorbing(bench: Bench, network: Network) -> RatedPart | None:
    """The capacitor of a network that takes the largest share of its voltage late."""
    parts = [bench.board.parts[item.ref] for item in network.branches if item.kind == "capacitor"]
    return max(parts, key=lambda part: part.absorption.share if part.absorption else 0.0, default=None)


def _doubt(part: RatedPart | None, options: Mapping[str, OptionValue]) -> tuple[str, str]:
    """Why settling within a band cannot be promised, and the line that would tell."""
    said, band = part.absorption if part else None, _plain(options.get("band", math.inf))
    if part is None or said is None or said.share <= band:
        return "", ""
    return f"{part.ref}: {said.origin}; a band of {show(band, '%', digits=3)} cannot be promised", said.ask


def _plain(value: OptionValue) -> float:
    return value.nominal if isinstance(value, Spread) else float(str(value))


def _hold_followed(bench: Bench, circuit: Circuit, leveller: Leveller, levels: Mapping[str, Level]) -> None:
    """Nets that levels follow are held, whichever way the node moves."""
    for level in levels.values():
        for rising in (True, False) if level.edge else (True,):
            for joint in leveller.nets(level, rising=rising):
                terminal_of(bench, circuit, joint)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Start:
    """Observed voltage before the event, just after it and in the end, at nominal values. [V]"""

    before: float
    initial: float
    final: float


def _rises(scene: Scene, event: Transient, structure: Structure, table: Table, *, upwards: bool) -> bool:
    """Direction of the change: from just after the event to the end; for a pulse that returns, that of the return.

    upwards: the direction where nothing moves at nominal.
    """
    if scene.length > 0.0:  # it comes back to where it was: a reset that rests high has risen
        return _nominal(structure, table).before > 0.0
    joints = [scene.circuit.joints[name] for name in event.movers]
    spreads = [scene.sources.volts(joint) for joint in joints]
    plain = bool(joints) and all(spread is None or spread.low >= 0.0 for spread in spreads)
    pushing = any(name in event.movers for arm in scene.circuit.of("capacitor") for name in (arm.a, arm.b))
    if (
        plain
        and not pushing
        and not scene.circuit.draws
        and scene.joint in scene.circuit.driven(event.movers, event.after)
    ):
        wave = structure.waveforms[scene.circuit.held.index(event.movers[0])]
        moves = wave.before != wave.points[-1][1]
        return wave.before == () if moves else upwards
    start = _nominal(structure, table)
    least = 1e-9 * max(abs(start.before), abs(start.initial), abs(start.final), 1e-9)
    if abs(start.final - start.initial) > least:
        return start.final > start.initial
    at_rest = abs(start.final - start.before) <= least and not pushing
    return upwards if at_rest else start.final > start.before + least


def _nominal(structure: Structure, table: Table) -> _Start:
    _, nominal, _ = Problem(structure=structure, parameters=tuple(table.parameters)).box()
    case = solved(structure, nominal[None, :])
    try:
        return _Start(before=float(case.start[0]), initial=float(case.signal.initial()[0]), final=float(case.final[0]))
    except Unsettled as error:
        raise Unmeasurable(str(error)) from None
