"""What a pin leaks comes from its rails: it cannot push or pull its net beyond them.

Leakage is a current as long as the net lies between the rails of the pin's part. There it is met by ideal diodes into
the upper rail and out of 0 V, which take over what would go further.
"""

from collections.abc import Iterable, Iterator

import numpy as np

from rcrules.design import Pin
from rcrules.engine import Shape, solve
from rcrules.events._bench import Bench
from rcrules.events._build import terminal_of
from rcrules.events._circuit import ZERO, Circuit, Valve
from rcrules.events._sources import Sources
from rcrules.problems import constant, evaluate

CLAMP_OHMS = 1e-3
"""What stands for no resistance [Ω]: with it a microampere moves the rail by a nanovolt."""
SLIGHT = 0.03
"""Part of the rail by which leakage may push a net beyond it before that counts for the time of a level."""


def clamp(bench: Bench, circuit: Circuit, sources: Sources, *, slight: bool) -> bool:
    """Hold what leaks within its rails; whether anything was added.

    slight: True = leave out what leakage pushes beyond by no more than SLIGHT, so that the circuit stays linear.
    """
    rails = list(_rails(bench, circuit, sources))
    if not rails or (slight and _push(circuit, sources) <= SLIGHT * min(volts for _, _, volts in rails)):
        return False
    for joint, rail, _ in dict.fromkeys(rails):
        top, zero = terminal_of(bench, circuit, rail), circuit.hold(ZERO)
        for anode, cathode in ((joint, top), (zero, joint)):
            name = f"{anode} to {cathode} inside the pin"
            circuit.valves.append(
                Valve(ref=name, anode=anode, cathode=cathode, drop=(), ohms=constant(CLAMP_OHMS), breakdown=None)
            )
    return True


def hold_rails(bench: Bench, circuit: Circuit, sources: Sources) -> bool:
    """Hold the supplies of every part whose pins leak into the circuit; whether each has one that is known.

    Only then do the outermost sources of a state bound what leakage does: a driver at 0 V is no rail of the pin.
    """
    railed = True
    for joint in dict.fromkeys(joint for joint, _ in circuit.draws):
        for pin in bench.pins(joint):
            if bench.pin_fact(pin, lambda facts: facts.leakage) is None:
                continue
            own = supplies_of(bench, sources, pin)
            railed = railed and bool(own)
            for _, rail in own:
                terminal_of(bench, circuit, rail)
    return railed


def _rails(bench: Bench, circuit: Circuit, sources: Sources) -> Iterator[tuple[str, str, float]]:
    """Joint, upper rail and its voltage [V] of every pin that leaks; none where no supply is known."""
    floating = circuit.floating()
    for joint in dict.fromkeys(joint for joint, _ in circuit.draws if joint not in floating):
        for pin in bench.pins(joint):
            if bench.pin_fact(pin, lambda facts: facts.leakage) is not None:
                own = [*supplies_of(bench, sources, pin)] or _known(sources, circuit.joints.values())
                if own:
                    volts, rail = max(own)
                    yield joint, rail, volts


def supplies_of(bench: Bench, sources: Sources, pin: Pin) -> list[tuple[float, str]]:
    """Positive supplies of a pin's part: voltage [V] and joint."""
    part = bench.board.design.parts.get(pin.ref)
    return _known(sources, (bench.joint(item.net) for item in part.pins if item.net) if part else ())


def _known(sources: Sources, joints: Iterable[str]) -> list[tuple[float, str]]:
    found = []
    for joint in joints:
        spread = sources.volts(joint) if sources.kind(joint) == "supply" else None
        if spread is not None and spread.nominal > 0.0:
            found.append((spread.nominal, joint))
    return found


def _push(circuit: Circuit, sources: Sources) -> float:
    """The most by which leakage alone moves any net that leaks [V]."""
    high = np.array([[max(abs(item.low), abs(item.high)) for item in sources.table.parameters]])
    own = circuit.shape()
    shape = Shape(own.free, own.held, own.resistors, ())
    ohms = np.array([[float(evaluate(form, high)[0]) for form in circuit.values("resistor")]])
    amps = np.zeros((1, shape.free))
    for joint, form in circuit.draws:
        amps[0, circuit.terminal(joint)] -= float(evaluate(form, high)[0])
    volts = solve(shape, ohms, np.zeros((1, 0))).steady(np.zeros((1, shape.held)), amps)
    return float(np.abs(volts).max(initial=0.0))
