"""Diodes as parts of a circuit: what they are joined to, their columns, and where they break down."""

from collections.abc import Callable, Iterable
from dataclasses import replace

from rcrules.events._bench import Bench
from rcrules.events._bias import spanned
from rcrules.events._build import terminal_of
from rcrules.events._circuit import ZERO, Circuit, Valve
from rcrules.events._facts import fact
from rcrules.events._sources import PROJECT, Sources
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Diode
from rcrules.parts import diode_model
from rcrules.problems import Form
from rcrules.project import PartFacts
from rcrules.quantities import Spread

LEAST_ON = 0.01
"""Least resistance of a conducting diode [Ω]; with less its current would not be told from rounding."""
LEAST_BREAKDOWN = 1.8
"""Reverse voltage below which no diode breaks down [V]."""


def add(bench: Bench, circuit: Circuit, sources: Sources, diodes: Iterable[Diode]) -> None:
    """Put diodes into the circuit. Raises Unmeasurable where what one leads to, or its breakdown, is not known."""
    for diode in diodes:
        ends = [_end(bench, circuit, sources, diode, joint) for joint in (diode.anode, diode.cathode)]
        drop, ohms = _forward(bench, sources, diode.ref)
        valve = Valve(ref=diode.ref, anode=ends[0], cathode=ends[1], drop=drop, ohms=ohms, breakdown=None)
        circuit.valves.append(valve)
    circuit.valves = [replace(valve, breakdown=_limit(bench, circuit, sources, valve.ref)) for valve in circuit.valves]


def _end(bench: Bench, circuit: Circuit, sources: Sources, diode: Diode, joint: str) -> str:
    known = joint in circuit.free or joint in circuit.joints.values()
    if not known and sources.kind(joint) == "driven" and sources.volts(joint) is None:
        reason = f"diode {diode.ref} leads to {joint}, and what drives {joint} is not known"
        raise Unmeasurable(reason, f'[net."{joint}"] swing = "…"')
    return terminal_of(bench, circuit, joint)


def _forward(bench: Bench, sources: Sources, ref: str) -> tuple[Form, Form]:
    """Columns of the drop and the resistance of a diode."""
    model = diode_model(bench.board.parts[ref])
    drop, ohms = _said(bench, ref, lambda facts: facts.forward), _said(bench, ref, lambda facts: facts.on_resistance)
    told = f"{ref} is a {model.kind}"
    return (
        _column(sources, ref, "forward", drop, model.drop, told, 0.0),
        _column(sources, ref, "on-resistance", ohms, model.ohms, told, LEAST_ON),
    )


def _column(
    sources: Sources, ref: str, word: str, given: Spread | None, usual: Spread, told: str, least: float
) -> Form:
    name = f"{ref} {word}"
    if given is not None:
        return sources.table.given(name, given, PROJECT, least=least)
    does = "drops" if usual.unit == "V" else "has"
    text = f"{told} and {does} {usual.low:g} {usual.unit} to {usual.high:g} {usual.unit} when it conducts"
    return sources.table.assumed(name, usual, text, f'[part."{ref}"] {word} = "…"')


def _said(bench: Bench, ref: str, value: Callable[[PartFacts], Spread | None]) -> Spread | None:
    """What the project says of a diode, or of all."""
    project = bench.project
    return fact(project.parts, (ref,), value) or fact(project.defaults, ("diode",), value)


def may_break(bench: Bench, circuit: Circuit, sources: Sources, ref: str, further: Iterable[str] = ()) -> bool:
    """Whether the sources could take a diode into its breakdown.

    further: held joints that are not in the circuit yet.
    """
    least = _least(bench, ref)
    if least is None and not diode_model(bench.board.parts[ref]).breaks_down:
        return False
    most = None if circuit.draws else spanned(sources, [*circuit.joints.values(), *further])
    bridged = any(ZERO not in (arm.a, arm.b) for arm in circuit.of("capacitor"))
    return most is None or most * (2 if bridged else 1) >= (LEAST_BREAKDOWN if least is None else least)


def _least(bench: Bench, ref: str) -> float | None:
    """Least reverse voltage at which a diode breaks down [V]; None = not known, or never."""
    given = _said(bench, ref, lambda facts: facts.breakdown)
    return diode_model(bench.board.parts[ref]).breakdown if given is None else given.low


def _limit(bench: Bench, circuit: Circuit, sources: Sources, ref: str) -> float | None:
    """Reverse voltage to be watched; None = it is not reached. Raises Unmeasurable where it is not known."""
    if not may_break(bench, circuit, sources, ref):
        return None
    least = _least(bench, ref)
    if least is None:
        kind = diode_model(bench.board.parts[ref]).kind
        reason = f"{ref} is a {kind} that may break down in reverse, and at what voltage is not known"
        raise Unmeasurable(reason, f'[part."{ref}"] breakdown = "…"')
    return least
