"""A converter's sampling capacitor is switched onto a node that has settled."""

from collections.abc import Mapping
from dataclasses import dataclass

from rcrules.design import Pin
from rcrules.events._bench import Bench
from rcrules.events._build import build
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._contacts import switched
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._sources import PROJECT, still
from rcrules.events._table import LEAST_OHMS, Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Node
from rcrules.problems import Problem, Structure, constant
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class _Sampler:
    """What a converter's pin switches onto its node."""

    pin: Pin
    farads: Spread
    ohms: Spread


def pose_sample(bench: Bench, node: Node, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The network at rest with a capacitor of 1 V, which stands for one full scale. Raises Unmeasurable.

    Nothing but the sampling capacitor's charge moves the circuit, so that all sources count as 0 V.
    """
    network, table = bench.network(node), Table()
    if network.diodes:
        raise Unmeasurable(f"diode {network.diodes[0].ref} may conduct, and sampling is not modelled beside a diode")
    sampler = _sampler(bench, node)
    circuit = build(bench, network, table, [node.joint], currents=False)
    contacts = switched(bench, network, circuit, table, node.joint, "none").after
    at = _switch_on(circuit, table, node.joint, sampler)
    floating = circuit.floating(contacts)
    if floating:
        raise Unmeasurable(f"no resistive path from {floating[0]} to a source or ground")
    structure = Structure(
        shape=circuit.shape(contacts),
        ohms=(*circuit.values("resistor"), *(arm.value for arm in contacts)),
        farads=circuit.values("capacitor"),
        waveforms=tuple(still(()) for _ in circuit.held),
        charged=((len(circuit.of("capacitor")) - 1, constant(1.0)),),
        empty=True,
        at=circuit.terminal(at),
        rising=False,
        options=plain_of(measure, options),
    )
    return Problem(structure=structure, parameters=tuple(table.parameters), names=circuit.names(contacts))


def _sampler(bench: Bench, node: Node) -> _Sampler:
    """The fed pin with the largest sampling capacitor. Raises Unmeasurable where none, or no switch, is known."""
    pins = [pin for key in node.feeds if (pin := bench.pin(key)) is not None]
    if not pins:
        raise Unmeasurable(f"{node.net} feeds no pin that could sample it")
    known = [(farads, pin) for pin in pins if (farads := _number(bench, pin, "sample-capacitance")) is not None]
    if not known:
        lines = f'[pin."{pins[0].key}"] sample-capacitance = "…"  sample-resistance = "…"'
        raise Unmeasurable(f"sampling capacitor of {pins[0].key} is not known", lines)
    farads, pin = max(known, key=lambda item: item[0].nominal)
    ohms = _number(bench, pin, "sample-resistance")
    if ohms is None:
        raise Unmeasurable(
            f"resistance of the sampling switch of {pin.key} is not known", f'[pin."{pin.key}"] sample-resistance = "…"'
        )
    return _Sampler(pin=pin, farads=farads, ohms=ohms)


def _number(bench: Bench, pin: Pin, key: str) -> Spread | None:
    return bench.pin_fact(pin, lambda facts: facts.spreads.get(key))


def _switch_on(circuit: Circuit, table: Table, joint: str, sampler: _Sampler) -> str:
    """Add switch and capacitor, the latter last; the terminal of the capacitor, which is the node at 0 Ω."""
    key, at = sampler.pin.key, joint
    if sampler.ohms.high > 0.0:
        at = f"{key} sample"
        circuit.free.append(at)
        ohms = table.given(f"{key} sample-resistance", sampler.ohms, PROJECT, least=LEAST_OHMS)
        circuit.arms.append(Arm(ref=f"{key} sample-resistance", kind="resistor", a=joint, b=at, value=ohms))
    farads = table.given(f"{key} sample-capacitance", sampler.farads, PROJECT, least=0.0)
    circuit.arms.append(Arm(ref=f"{key} sample-capacitance", kind="capacitor", a=at, b=ZERO, value=farads))
    return at
