"""Questions about a capacitor that need no event: its value, and its place among capacitors in series."""

from collections.abc import Mapping

from rcrules.design import natural
from rcrules.engine import Shape
from rcrules.events._bench import Bench
from rcrules.events._bias import spanned
from rcrules.events._build import build, terminal_of
from rcrules.events._circuit import Circuit
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._part import place_of
from rcrules.events._series import alone_between
from rcrules.events._sources import Sources, moved, still
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.parts import RatedPart
from rcrules.problems import Names, Problem, Structure, constant

FLAT = Shape(0, 2, (), ((0, 1),))
"""One capacitor between two held terminals."""


def pose_value(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The value of a part as it is where it stands. Raises Unmeasurable."""
    table, sources = Table(), Sources(bench=bench, table=Table())
    branch = bench.branch(part)
    ends = (branch.a, branch.b) if branch is not None else (part.ref, part.ref)
    if part.ref in bench.network_of_part:
        build(bench, bench.network_of_part[part.ref][0], table, ends, currents=False)
        form = table.part(part)
    else:
        known = branch is not None and all(bench.held(joint) for joint in ends)
        form = table.part(part, spanned(sources, ends) if known else None)
    structure = Structure(
        shape=FLAT,
        ohms=(),
        farads=(form,),
        waveforms=(still(()), still(())),
        at=0,
        against=1,
        element=0,
        options=plain_of(measure, options),
    )
    names = Names(terminals=ends, resistors=(), capacitors=(part.ref,))
    return Problem(structure=structure, parameters=tuple(table.parameters), names=names)


def pose_string(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """A capacitor among those in series with it, and 1 V that appears across all of them. Raises Unmeasurable."""
    if (ends := alone_between(bench, part)) is not None:
        return _loose(part, ends, measure, options)
    place, table = place_of(bench, part), Table()
    if not place.network.free:
        raise Unmeasurable(f"{part.ref} is in series with nothing: it takes the whole voltage between its nets")
    if place.network.diodes or place.network.contacts:
        raise Unmeasurable(f"a diode or contact acts on {part.ref}: its share is not that of capacitors in series")
    circuit = build(bench, place.network, table, [place.branch.a, place.branch.b], currents=False)
    a, b = (terminal_of(bench, circuit, joint) for joint in (place.branch.a, place.branch.b))
    used = [name for name in circuit.held if any(name in (arm.a, arm.b) for arm in circuit.arms)]
    if len(used) != 2:
        raise Unmeasurable(f"{len(used)} nets hold the voltages around {part.ref}; a string lies between two")
    if any(end in circuit.floating() for end in (a, b)):
        return _loose(part, (used[0], used[1]), measure, options)
    _leakage_known(bench, circuit)
    structure = Structure(
        shape=circuit.shape(),
        ohms=circuit.values("resistor"),
        farads=circuit.values("capacitor"),
        waveforms=tuple(moved((), constant(1.0)) if name == used[1] else still(()) for name in circuit.held),
        leaks=circuit.leaks(),
        empty=True,
        at=circuit.terminal(a),
        against=circuit.terminal(b),
        options=plain_of(measure, options),
    )
    return Problem(structure=structure, parameters=tuple(table.parameters), names=circuit.names())


def _loose(part: RatedPart, ends: tuple[str, str], measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """A capacitor of which no resistor holds an end: between these joints it may take everything."""
    structure = Structure(
        shape=FLAT,
        ohms=(),
        farads=(constant(1.0),),
        waveforms=(still(()), still(())),
        at=0,
        against=1,
        options=(*plain_of(measure, options), ("loose", 1.0)),
    )
    return Problem(
        structure=structure,
        parameters=(),
        names=Names(terminals=ends, resistors=(), capacitors=(part.ref,)),
    )


def _leakage_known(bench: Bench, circuit: Circuit) -> None:
    """Raises Unmeasurable where nothing is said of what a capacitor of the string leaks."""
    for arm in sorted(circuit.of("capacitor"), key=lambda arm: natural(arm.ref)):
        part = bench.board.parts.get(arm.ref)
        if part is not None and part.insulation is None:
            raise Unmeasurable(f"leakage of {arm.ref} is not known", f'[part."{arm.ref}"] leakage = "…"')
