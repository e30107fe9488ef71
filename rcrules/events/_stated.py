"""A capacitor of which the project file says what lies across it, so that nothing around it needs to be known."""

from collections.abc import Mapping

from rcrules.events._bench import Bench
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._rating import rating_of
from rcrules.events._sources import moved
from rcrules.events._table import Table
from rcrules.measures import Measure
from rcrules.networks import BOOTSTRAP, OPEN_END
from rcrules.parts import RatedPart
from rcrules.problems import Problem, Structure, constant
from rcrules.quantities import Spread


def pose_stated(
    bench: Bench, part: RatedPart, volts: Spread, measure: Measure, options: Mapping[str, OptionValue]
) -> Problem:
    """The capacitor between one held terminal and 0 V, over the ends of what is said. Raises Unmeasurable."""
    circuit, table = Circuit(free=[]), Table()
    circuit.hold(ZERO)
    end = circuit.hold(f"{part.ref} voltage-across")
    value = table.part(part, max(abs(volts.low), abs(volts.high)))
    circuit.arms.append(Arm(ref=part.ref, kind=part.kind, a=end, b=ZERO, value=value))
    levels = [constant(level) if level else () for level in sorted({volts.low, volts.high})]
    structure = Structure(
        shape=circuit.shape(),
        ohms=circuit.values("resistor"),
        farads=circuit.values("capacitor"),
        waveforms=tuple(moved((), levels[-1] if name == end else ()) for name in circuit.held),
        empty=True,
        at=circuit.terminal(end),
        against=circuit.terminal(ZERO),
        element=0,
        rating=rating_of(bench, table, part, measure),
        states=tuple(tuple(level if name == end else () for name in circuit.held) for level in levels),
        options=(
            *plain_of(measure, options),
            ("transient", 0.0),
            ("signed", float(part.polarised and measure.name == "applied_voltage")),
            ("railed", 0.0),
        ),
    )
    return Problem(structure=structure, parameters=tuple(table.parameters), names=circuit.names())


def to_be_stated(bench: Bench, part: RatedPart, ask: str) -> str:
    """The line that gives what lies across a part, where no other would or where both its ends move together."""
    reason = bench.board.reasons.get(part.ref, "")
    if part.kind != "capacitor" or reason == OPEN_END or bench.branch(part) is None:
        return ask
    together = reason.startswith(BOOTSTRAP) and "swing" in ask
    return f'[part."{part.ref}"] voltage-across = "…"' if together or not ask else ask
