"""Questions about a network without an event: time constants and transfers."""

from collections.abc import Mapping
from dataclasses import replace

from rcrules.events._amplified import amplify, observed, with_output
from rcrules.events._bench import Bench
from rcrules.events._build import build
from rcrules.events._circuit import ZERO, Circuit
from rcrules.events._contacts import switched
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._sources import PROJECT, Sources, still
from rcrules.events._table import Table
from rcrules.events._transients import Scene, mover
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Network, Node
from rcrules.parts import ASSUMED_TEMPERATURE
from rcrules.problems import Problem, Structure
from rcrules.quantities import Spread

KELVIN = 273.15
"""0 °C [K]"""
ROOM = 25.0
"""[°C]"""


def at_rest(bench: Bench, node: Node, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The network with its contacts as they usually are. Raises Unmeasurable."""
    if measure.poses in ("event", "dip", "sample"):
        raise Unmeasurable(f"both ends of {node.net} are held: nothing moves there")
    table = Table()
    network = with_output(_freed(bench.network(node), node), node, measure)
    alike = measure.poses == "network"  # the same problem for every node of the network
    circuit = build(bench, network, table, network.free[:1] if alike else [node.joint], currents=False)
    amplify(bench, circuit, table, network, node)
    contacts = switched(bench, network, circuit, table, node.joint, "none").after
    floating = circuit.floating(contacts)
    if floating:
        raise Unmeasurable(f"no resistive path from {floating[0]} to a source or ground")
    if not circuit.of("capacitor"):
        raise Unmeasurable(f"no capacitor at {node.net}")
    structure = Structure(
        shape=circuit.shape(contacts),
        ohms=(*circuit.values("resistor"), *(arm.value for arm in contacts)),
        farads=circuit.values("capacitor"),
        waveforms=tuple(still(()) for _ in circuit.held),
        at=0 if alike else circuit.terminal(observed(network, node)),
        amplifiers=circuit.amplifiers(),
        options=plain_of(measure, options),
    )
    if measure.poses == "noise":
        structure = replace(structure, options=(*structure.options, ("kelvin", _kelvin(bench, table))))
    if measure.poses == "transfer":
        scene = Scene(
            bench=bench,
            network=network,
            circuit=circuit,
            sources=Sources(bench=bench, table=table),
            joint=observed(network, node),
            unit=True,
        )
        source = float(circuit.terminal(mover(scene)))
        structure = replace(
            structure, options=(*structure.options, ("source", source), ("passes", _passes(circuit, node)))
        )
    return Problem(structure=structure, parameters=tuple(table.parameters), names=circuit.names(contacts))


def _kelvin(bench: Bench, table: Table) -> float:
    """Number of the column of the temperature [K]."""
    given = bench.project.temperature
    low, high = (given.low, given.high) if given else ASSUMED_TEMPERATURE
    nominal = given.nominal if given else ROOM
    spread = Spread(low=low + KELVIN, nominal=nominal + KELVIN, high=high + KELVIN, unit="K")
    if given is not None:
        table.given("temperature", spread, PROJECT, always=True)
    else:
        text = f"temperature {low:g} to {high:g} °C"
        table.assumed("temperature", spread, text, '[conditions] temperature = "…"')
    return float(next(index for index, item in enumerate(table.parameters) if item.name == "temperature"))


def _passes(circuit: Circuit, node: Node) -> str:
    """``low`` where resistors lead to a source other than 0 V, else ``high``."""
    sources = [name for name in circuit.held if name != ZERO]
    return "low" if node.joint in circuit.driven(sources, circuit.followed()) and node.role != "high-pass" else "high"


def _freed(network: Network, node: Node) -> Network:
    """Of a bridged pair the first joint is let go, as is what lies between resistors in series, and the second held."""
    if node.across is None:
        return network
    inside = {node.joint, node.across, *network.free}
    branches = tuple(item for item in network.branches if {item.a, item.b} <= inside)
    free = (node.joint, *network.free)
    return replace(network, branches=branches, free=free, held=(node.across,), contacts=(), diodes=())
