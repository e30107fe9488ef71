"""From a network of the board to a circuit with its columns, loads of pins and wiring included."""

from collections import deque
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cache

from rcrules.design import natural
from rcrules.events._bench import Bench
from rcrules.events._bias import most_across
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._sources import Sources
from rcrules.events._table import LEAST_OHMS, Table
from rcrules.networks import Branch, Network
from rcrules.problems import Form
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class Wire:
    """A branch before its column is made."""

    ref: str
    kind: str
    a: str
    b: str
    value: Callable[[], Form]
    leaks: bool = False


def build(bench: Bench, network: Network, table: Table, first: Sequence[str], *, currents: bool = True) -> Circuit:
    """The circuit of a network, built once for all questions about it that number its joints alike.

    table: empty, filled here. first: joints to be numbered first. currents: whether leakage of pins is drawn; it
    is not where a supply is free, which it might seem to discharge. Raises Unmeasurable.
    """
    joints = tuple(joint for joint in first if (held := bench.held(joint)) is None or held.kind != "ground")
    open_supply = any((held := bench.held(joint)) is not None and held.kind == "supply" for joint in network.free)
    drawn = currents and bool(bench.project.pins) and not open_supply
    key = tuple(item.ref for item in network.branches), network.free, joints, drawn
    if key not in bench.built:
        own = Table()
        bench.built[key] = _built(bench, network, own, joints, currents=drawn), own
    circuit, filled = bench.built[key]
    table.take(filled)
    return circuit.copy()


def _built(bench: Bench, network: Network, table: Table, first: Sequence[str], *, currents: bool) -> Circuit:
    circuit = Circuit(free=list(network.free))
    circuit.hold(ZERO)
    most = cache(lambda: _most(bench, circuit, table, network))
    wires = [wire for item in network.branches for wire in _of_part(bench, circuit, table, item, most)]
    for joint in network.held:
        wires += _source_resistance(bench, circuit, table, joint)
    for joint in network.free:
        wires += _loads(bench, circuit, table, joint)
    circuit.free = _ordered(circuit.free, wires, first)
    for wire in sorted(wires, key=lambda wire: _rank(circuit, wire)):
        made = Arm(ref=wire.ref, kind=wire.kind, a=wire.a, b=wire.b, value=wire.value(), leaks=wire.leaks)
        circuit.arms.append(made)
    if currents:
        circuit.draws = [item for joint in circuit.free for item in _leakages(bench, table, joint)]
    return circuit


def terminal_of(bench: Bench, circuit: Circuit, joint: str) -> str:
    """Name of the terminal that a joint is; held ones are made when they are first met."""
    if joint in circuit.free:
        return joint
    held = bench.held(joint)
    if held is not None and held.kind == "ground":
        return circuit.hold(ZERO)
    return circuit.hold(joint, joint)


def _most(bench: Bench, circuit: Circuit, table: Table, network: Network) -> float | None:
    """The most that a capacitor of the network sees [V], nets that pins pull to and known ones at diodes included."""
    sources = Sources(bench=bench, table=table)
    ends = {joint for diode in network.diodes for joint in (diode.anode, diode.cathode)} - set(network.free)
    ends |= {joint for joint in network.free if sources.kind(joint) == "supply"}
    known = [joint for joint in ends if sources.kind(joint) == "ground" or sources.most(joint) is not None]
    return most_across(sources, network.branches, network.free, [*circuit.joints.values(), *known])


def _of_part(
    bench: Bench, circuit: Circuit, table: Table, branch: Branch, most: Callable[[], float | None]
) -> list[Wire]:
    """A part, and what its dielectric leaks where something is said of that."""
    part = bench.board.parts[branch.ref]
    a, b = terminal_of(bench, circuit, branch.a), terminal_of(bench, circuit, branch.b)
    found = [Wire(ref=branch.ref, kind=branch.kind, a=a, b=b, value=lambda: table.part(part, most()))]
    leak = table.insulation(part) if branch.kind == "capacitor" else None
    if leak is not None:
        found.append(Wire(ref=f"{branch.ref} insulation", kind="resistor", a=a, b=b, value=lambda: leak, leaks=True))
    return found


def _source_resistance(bench: Bench, circuit: Circuit, table: Table, joint: str) -> list[Wire]:
    """A driver's own resistance makes its net a free one behind an ideal source."""
    ohms = bench.net_fact(joint, lambda facts: facts.source_resistance)
    if ohms is None or ohms.high <= 0.0 or joint not in circuit.held:
        return []
    circuit.held.remove(joint)
    circuit.joints.pop(joint)
    circuit.free.append(joint)
    source = circuit.hold(f"{joint} source", joint)
    name = f"{joint} source-resistance"
    return [Wire(ref=name, kind="resistor", a=source, b=joint, value=_given(table, name, ohms, LEAST_OHMS))]


def _loads(bench: Bench, circuit: Circuit, table: Table, joint: str) -> list[Wire]:
    found = []
    wiring = bench.net_fact(joint, lambda facts: facts.wiring_capacitance)
    if wiring is not None:
        name = f"{joint} wiring-capacitance"
        found.append(Wire(ref=name, kind="capacitor", a=joint, b=ZERO, value=_given(table, name, wiring, 0.0)))
    for pin in bench.pins(joint) if bench.project.pins else ():
        farads = bench.pin_fact(pin, lambda facts: facts.capacitance)
        if farads is not None:
            name = f"{pin.key} capacitance"
            found.append(Wire(ref=name, kind="capacitor", a=joint, b=ZERO, value=_given(table, name, farads, 0.0)))
        for word, pull in (
            ("pull-up", bench.pin_fact(pin, lambda facts: facts.pull_up)),
            ("pull-down", bench.pin_fact(pin, lambda facts: facts.pull_down)),
        ):
            if pull is not None:
                name, to = f"{pin.key} {word}", terminal_of(bench, circuit, bench.joint(pull[1]))
                value = _given(table, name, pull[0], LEAST_OHMS)
                found.append(Wire(ref=name, kind="resistor", a=to, b=joint, value=value))
    return found


def _leakages(bench: Bench, table: Table, joint: str) -> list[tuple[str, Form]]:
    found = []
    for pin in bench.pins(joint):
        amps = bench.pin_fact(pin, lambda facts: facts.leakage)
        if amps is not None and (amps.low != 0.0 or amps.high != 0.0):
            found.append((joint, table.given(f"{pin.key} leakage", amps, "the project file")))
    return found


def _given(table: Table, name: str, spread: Spread, least: float) -> Callable[[], Form]:
    return lambda: table.given(name, spread, "the project file", least=least)


def _ordered(free: Sequence[str], wires: Sequence[Wire], first: Sequence[str]) -> list[str]:
    """Free terminals from the observed ones outwards, so that equal circuits become equal structures."""
    near: dict[str, list[str]] = {}
    for wire in wires:
        near.setdefault(wire.a, []).append(wire.b)
        near.setdefault(wire.b, []).append(wire.a)
    inside = set(free)
    found = dict.fromkeys(name for name in first if name in inside)
    queue = deque(found)
    while queue:
        for there in near.get(queue.popleft(), ()):
            if there in inside and there not in found:
                found[there] = None
                queue.append(there)
    return [*found, *(name for name in free if name not in found)]


def _rank(circuit: Circuit, wire: Wire) -> tuple[str, int, int, tuple[tuple[int, int, str], ...]]:
    ends = sorted((circuit.terminal(wire.a), circuit.terminal(wire.b)))
    return ((wire.kind == "capacitor" and "c") or "r", ends[0], ends[1], natural(wire.ref))
