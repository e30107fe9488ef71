"""Networks with an ideal amplifier: its output is a free terminal, its inputs are equal."""

from dataclasses import replace

from rcrules.events._bench import Bench
from rcrules.events._build import terminal_of
from rcrules.events._circuit import Circuit
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Network, Node
from rcrules.quantities import Spread

_IDEAL = Spread(low=1.0, nominal=1.0, high=1.0, unit="1")


def with_output(network: Network, node: Node, measure: Measure) -> Network:
    """The network of a node, its amplifier's output let go. Raises Unmeasurable where the measure cannot tell."""
    amplifier = network.amplifier
    if amplifier is None or node.amplifier is None:
        return network
    if not measure.amplified:
        raise Unmeasurable(f"active network: {measure.name} is not worked out around amplifier {amplifier.ref}")
    held = tuple(joint for joint in network.held if joint != amplifier.output)
    return replace(network, free=(*network.free, amplifier.output), held=held)


def amplify(bench: Bench, circuit: Circuit, table: Table, network: Network, node: Node) -> None:
    """Tell a circuit of the amplifier in its network, and the table that it is taken as ideal."""
    found = network.amplifier
    if found is not None and node.amplifier is not None:
        plus, minus, output = (terminal_of(bench, circuit, joint) for joint in (found.plus, found.minus, found.output))
        circuit.amplifier = plus, minus, output
        table.assumed(f"{found.ref} amplifier", _IDEAL, "taken as ideal: fast, without offset, within its range", "")


def observed(network: Network, node: Node) -> str:
    """The joint that is watched: around a virtual ground, which does not move, the amplifier's output."""
    found = network.amplifier
    return found.output if found is not None and node.amplifier is not None and node.role == "feedback" else node.joint
