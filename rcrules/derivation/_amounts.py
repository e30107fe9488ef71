"""Capacitances, currents and energies by hand: of a supply with its capacitors, of a pin or part in an event."""

import math

import numpy as np

from rcrules.derivation._known import value_in
from rcrules.derivation._pieces import Sum
from rcrules.derivation._respond import piece_from_modes, pole, respond, seen
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working
from rcrules.problems import evaluate

BOLTZMANN = 1.380649e-23
"""[J/K], exact"""


def total(work: Working) -> Number:
    """C = the sum of all capacitors."""
    named = zip(work.names.capacitors, work.solved.farads[0], strict=True)
    farads = [work.sheet.number(name, float(value), "F") for name, value in named]
    return work.sheet.work("C", "F", " + ".join("{}" for _ in farads), lambda *all_: sum(all_), *farads)


def own(work: Working) -> Number | None:
    """The capacitance of the part in this case."""
    index = work.problem.structure.element or 0
    item = next((item for item in work.problem.parameters if item.name == work.names.capacitors[index]), None)
    return work.sheet.given("C", float(work.solved.farads[0, index]), "F", item.origin if item else "")


def inrush(work: Working) -> Number | None:
    """I = C V / t along the ramp."""
    rise, volts = (float(evaluate(form, work.cases)[0]) for form in work.problem.structure.waveforms[0].points[-1])
    if rise <= 0.0:
        return work.sheet.given("I", math.inf, "A", "it rises at once")
    farads = total(work)
    name = work.name(work.free)
    numbers = work.sheet.number(name, abs(volts), "V"), work.sheet.number(f"{name} rise", rise, "s")
    return work.sheet.work("I", "A", "{} · {} / {}", lambda c, v, t: c * v / t, farads, *numbers)


def hold_up(work: Working) -> Number | None:
    """t = C (V - v)/I, or C (V² - v²)/(2 P); None where resistors draw along."""
    structure, sheet = work.problem.structure, work.sheet
    load = work.form(structure.load, "load", "W" if structure.option("draws") == "power" else "A")
    start = sheet.number(work.name(work.free), abs(float(evaluate(structure.states[0][0], work.cases)[0])), "V")
    end = sheet.number("to", abs(float(evaluate(structure.level("to").offset, work.cases)[0])), "V")
    if start.value <= end.value:
        return sheet.given("t", 0.0, "s", f"it starts at {start.text}, not above {end.text}")
    farads = None if structure.ohms or load.value <= 0.0 else total(work)
    if farads is None:
        return None
    if load.unit == "A":
        return sheet.work("t", "s", "{} · ({} - {}) / {}", lambda c, v, u, i: c * (v - u) / i, farads, start, end, load)
    formula = "{} · ({}^2 - {}^2) / (2 · {})"
    return sheet.work("t", "s", formula, lambda c, v, u, p: c * (v**2 - u**2) / (2 * p), farads, start, end, load)


def first_current(work: Working) -> Number | None:
    """I = |v| / R at the first instant or in the end, whichever is more; of a resistor or a pin that is one."""
    if ("kind", "capacitor") in work.problem.structure.options:
        return _charging(work)
    if math.isinf(value_in(work.measure, work.problem.structure, work.cases)):
        return work.sheet.given("I", math.inf, "A", "nothing limits it")
    ends = [float(work.solved.signal.initial()[0]), float(work.solved.final[0])]
    if not all(map(math.isfinite, ends)):
        return None
    early = abs(ends[0]) >= abs(ends[1])
    piece = respond(work, 0.0 if early else math.inf)[-1]
    volts = piece.start if early else piece.rest
    return work.sheet.work("I", "A", "abs({}) / {}", lambda v, r: abs(v) / r, volts, ohms_of(work))


def _charging(work: Working) -> Number | None:
    """C dv/dt between two sources; else |V - v0| / R where the capacitor is alone at a node and no source ramps."""
    index, sheet = work.problem.structure.element or 0, work.sheet
    if min(work.problem.structure.shape.capacitors[index]) >= work.free:
        return _between_sources(work, index)
    if work.modal:
        return _by_slope(work, index)
    if pole(work.problem.structure) != work.at or len(work.starts) > 1:
        return None
    found = seen(work, work.at)
    piece = respond(work, 0.0)[-1]
    formula = "abs({} - {}) / {}"
    return sheet.work("I", "A", formula, lambda e, v, r: abs(e - v) / r, piece.rest, piece.start, found.ohms)


def _by_slope(work: Working, index: int) -> Number | None:
    """C dv/dt at an end of a piece, v(x) = E + S x + sum of A e^(-x/tau); None where it is greatest within one."""
    signal, sheet = work.solved.signal, work.sheet
    value = float(work.measure.compute(work.problem.structure, work.cases)[0])
    farads = float(work.solved.farads[0, index])
    for place, (start, found, length) in enumerate(zip(signal.starts, signal.sums, signal.lengths, strict=True)):
        slope = found.derivative()
        for x in (0.0, float(length[0])) if length[0] > 0.0 else ():
            amps = farads * abs(float(slope.at(np.array([x]))[0])) if math.isfinite(x) else 0.0
            if math.isclose(amps, value, rel_tol=1e-6):
                piece = piece_from_modes(work, place)
                note = f"dv/dt {sheet.number('', float(start[0]) + x, 's').text} after the event"
                rate = _rate(work, piece, sheet.number("x", x, "s"), note)
                number = sheet.number(work.names.capacitors[index], farads, "F")
                return sheet.work("I", "A", "{} · abs({})", lambda c, s: c * abs(s), number, rate)
    return None


def _rate(work: Working, piece: Sum, x: Number, note: str) -> Number:
    """dv/dt = S - sum of A/tau e^(-x/tau)."""
    numbers = [item for amp, tau in piece.modes for item in (amp, tau, x, tau)]
    formula = ("{}" if piece.slope else "0") + "".join(" - {} / {} · exp(-{} / {})" for _ in piece.modes)
    slopes = [piece.slope] if piece.slope else []

    def compute(*values: float) -> float:
        modes = values[len(slopes) :]
        died = (modes[k] / modes[k + 1] * math.exp(-modes[k + 2] / modes[k + 1]) for k in range(0, len(modes), 4))
        return sum(values[: len(slopes)]) - sum(died)

    return work.sheet.work("s", "V/s", formula, compute, *slopes, *numbers, note=note)


def _between_sources(work: Working, index: int) -> Number | None:
    ends = work.problem.structure.shape.capacitors[index]
    value = value_in(work.measure, work.problem.structure, work.cases)
    if math.isinf(value):
        return work.sheet.given("I", value, "A", "a source jumps across it, and nothing limits the current")
    slopes = [work.slopes(piece) for piece in range(len(work.starts))]
    steepest = max((abs(one.get(ends[0], 0.0) - one.get(ends[1], 0.0)) for one in slopes), default=0.0)
    rate = work.sheet.given("slope", steepest, "V/s", "the steepest of what lies across it")
    farads = work.sheet.number(work.names.capacitors[index], float(work.solved.farads[0, index]), "F")
    return work.sheet.work("I", "A", "{} · {}", lambda c, s: c * s, farads, rate)


def noise(work: Working) -> Number | None:
    """(k T / C)^0.5, C what is seen at the node with nothing but capacitors; None where those form a larger mesh."""
    farads = _seen_farads(work)
    if not farads:
        return None
    whole = work.sheet.work("C", "F", " + ".join("{}" for _ in farads), lambda *all_: sum(all_), *farads)
    kelvin = float(work.cases[0, int(work.problem.structure.option("kelvin"))])
    numbers = work.sheet.number("k", BOLTZMANN, "1"), work.sheet.number("T", kelvin, "1"), whole
    return work.sheet.work("noise", "V", "({} · {} / {})^0.5", lambda k, t, c: math.sqrt(k * t / c), *numbers)


def _seen_farads(work: Working) -> list[Number]:
    """Capacitors to held terminals, and those in series through one other node; none where there is more to it."""
    here = work.capacitors(work.at)
    found = [farads for far, farads in here if far >= work.free]
    for node in dict.fromkeys(far for far, _ in here if far < work.free):
        beyond = [(far, farads) for far, farads in work.capacitors(node) if far != work.at]
        if any(far < work.free for far, _ in beyond):
            return []
        if beyond:
            near = _added(work, f"C to {work.name(node)}", [farads for far, farads in here if far == node])
            behind = _added(work, f"C beyond {work.name(node)}", [farads for _, farads in beyond])
            formula, numbers = "{} · {} / ({} + {})", (near, behind, near, behind)
            name = f"C by {work.name(node)}"
            found.append(work.sheet.work(name, "F", formula, _in_series, *numbers, note="in series"))
    return found


def _added(work: Working, symbol: str, farads: list[Number]) -> Number:
    return work.sheet.work(symbol, "F", " + ".join("{}" for _ in farads), lambda *all_: sum(all_), *farads)


def _in_series(one: float, two: float, *_: float) -> float:
    return one * two / (one + two)


def ohms_of(work: Working) -> Number:
    index = work.problem.structure.element or 0
    return work.sheet.number(work.names.resistors[index], float(work.solved.ohms[0, index]), "Ω")
