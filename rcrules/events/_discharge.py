"""What discharges a capacitor once all supplies are open."""

from collections.abc import Mapping
from dataclasses import dataclass, replace

from rcrules.engine import Shape
from rcrules.events._bench import Bench
from rcrules.events._bias import spanned
from rcrules.events._bleed import Wires, bleeders
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._levels import Leveller
from rcrules.events._options import OptionValue, levels_of, plain_of
from rcrules.events._part import place_of
from rcrules.events._sources import Sources, still
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Branch
from rcrules.parts import RatedPart
from rcrules.problems import Form, Names, Problem, Structure


@dataclass(frozen=True, slots=True, kw_only=True)
class _Case:
    """One capacitor to be discharged."""

    bench: Bench
    table: Table
    sources: Sources
    ends: tuple[str, str]
    """The end that is positive before, then the other."""
    wires: Wires
    level: Leveller


def pose_part_discharge(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """A capacitor with all that hangs on it. Raises Unmeasurable."""
    return pose_discharge(bench, place_of(bench, part).branch, measure, options)


def pose_discharge(bench: Bench, branch: Branch, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """A branch with all that hangs on it, from the steady state with all supplies on. Raises Unmeasurable."""
    table = Table()
    sources = Sources(bench=bench, table=table)
    ends = _oriented(sources, (branch.a, branch.b))
    wires = bleeders(bench, sources, branch)
    circuit = Circuit()
    circuit.hold(ZERO)
    leveller = Leveller(bench=bench, circuit=circuit, table=table)
    case = _Case(bench=bench, table=table, sources=sources, ends=ends, wires=wires, level=leveller)
    to = levels_of(measure, options)["to"]
    if to.of is not None or to.nets or to.edge:
        raise Unmeasurable("a discharge is measured down to a fixed voltage")
    structure = _falling(case, circuit) if set(ends) & wires.live else _endless(case)
    level = leveller.form("to", to, rising=False)
    return Problem(
        structure=replace(
            structure, levels=(("to", level),), options=(*structure.options, *plain_of(measure, options))
        ),
        parameters=tuple(table.parameters),
        names=_names(circuit, ends),
    )


def _names(circuit: Circuit, ends: tuple[str, str]) -> Names:
    """Names of the merged circuit; of the two ends alone where nothing discharges the capacitor."""
    if not circuit.arms:
        return Names(terminals=ends, resistors=(), capacitors=())
    merged: dict[tuple[str, ...], list[str]] = {}
    for item in circuit.of("capacitor"):
        merged.setdefault(tuple(sorted((item.a, item.b), key=circuit.terminal)), []).append(item.ref)
    return replace(circuit.names(), capacitors=tuple(" + ".join(refs) for refs in merged.values()))


def _falling(case: _Case, circuit: Circuit) -> Structure:
    """Supply nets are free; before the event each hangs on its source."""
    circuit.free = case.wires.order(case.ends)
    parts = case.bench.board.parts
    volts = spanned(case.sources, (name for name in circuit.free if case.sources.kind(name) == "supply"))
    circuit.arms = [
        Arm(ref=item.ref, kind=item.kind, a=item.a, b=item.b, value=case.table.part(parts[item.ref], volts))
        for item in case.wires.branches
    ]
    circuit.arms += [leak for item in case.wires.branches if (leak := _leak(case, item)) is not None]
    pinned = [name for name in circuit.free if case.sources.kind(name) == "supply"]
    floating = [name for name in circuit.floating() if name not in circuit.driven([*circuit.held, *pinned])]
    if floating:
        raise Unmeasurable(f"no resistive path from {floating[0]} to a source or ground")
    pairs, farads = _merged(circuit)
    whole = circuit.shape()
    return Structure(
        shape=Shape(whole.free, whole.held, whole.resistors, pairs),
        ohms=circuit.values("resistor"),
        farads=farads,
        waveforms=tuple(still(()) for _ in circuit.held),
        leaks=circuit.leaks(),
        pinned=tuple((circuit.terminal(name), case.sources.supply(name)) for name in pinned),
        at=circuit.terminal(case.ends[0]),
        against=None if case.ends[1] == ZERO else circuit.terminal(case.ends[1]),
        rising=False,
    )


def _leak(case: _Case, branch: Branch) -> Arm | None:
    """What the dielectric of a capacitor lets through; it shortens what bleeds, and is never the only way."""
    form = case.table.insulation(case.bench.board.parts[branch.ref]) if branch.kind == "capacitor" else None
    if form is None:
        return None
    return Arm(ref=f"{branch.ref} insulation", kind="resistor", a=branch.a, b=branch.b, value=form, leaks=True)


def _endless(case: _Case) -> Structure:
    """Nothing discharges it; how high it was charged decides whether that matters."""
    return Structure(
        shape=Shape(0, 2, (), ()),
        ohms=(),
        farads=(),
        waveforms=tuple(still(_charged(case, joint)) for joint in case.ends),
        at=0,
        against=1,
        rising=False,
        options=(("endless", 1.0),),
    )


def _charged(case: _Case, joint: str) -> Form:
    if joint == ZERO:
        return ()
    if case.sources.kind(joint) != "supply":
        raise Unmeasurable(f"no resistive path from {joint} to ground: its voltage after power-off is not known")
    return case.sources.supply(joint)


def _merged(circuit: Circuit) -> tuple[tuple[tuple[int, int], ...], tuple[Form, ...]]:
    """Parallel capacitors as one, with the sum of their capacitances."""
    sums: dict[tuple[int, int], Form] = {}
    for item in circuit.of("capacitor"):
        a, b = sorted((circuit.terminal(item.a), circuit.terminal(item.b)))
        sums[a, b] = sums.get((a, b), ()) + item.value
    return tuple(sums), tuple(sums.values())


def _oriented(sources: Sources, joints: tuple[str, str]) -> tuple[str, str]:
    """The ends of the capacitor, the one with the higher voltage first; a free end counts as above 0 V."""

    def volts(joint: str) -> float:
        spread = sources.volts(joint) if sources.kind(joint) == "supply" else None
        return spread.nominal if spread else (0.0 if sources.kind(joint) == "ground" else 1e-9)

    first, second = sorted(joints, key=volts, reverse=True)
    return _terminal(sources, first), _terminal(sources, second)


def _terminal(sources: Sources, joint: str) -> str:
    return ZERO if sources.kind(joint) == "ground" else joint
