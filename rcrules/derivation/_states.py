"""Measures of a network at rest by hand: voltages in DC states, time constants, corners."""

import math
from collections.abc import Callable

import numpy as np

from rcrules.derivation import _balance, _transfers
from rcrules.derivation._amounts import total
from rcrules.derivation._bias import along
from rcrules.derivation._known import states, value_in
from rcrules.derivation._poles import corner as two_poles
from rcrules.derivation._poles import slowest
from rcrules.derivation._reduce import parallel, source
from rcrules.derivation._respond import pole, seen
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working
from rcrules.problems import Array, evaluate

Choose = Callable[[Array], np.intp]
"""Voltages of all states -> the number of the one that counts."""


def time_constant(work: Working) -> Number | None:
    """tau = R C where all capacitors lie at one node; the slower of two where they lie at two; else put in."""
    at = pole(work.problem.structure)
    return (slowest(work) or _balance.slowest(work)) if at is None else seen(work, at).tau


def corner(work: Working) -> Number | None:
    """1 / (2 pi tau) where all capacitors lie at one node; of two poles where they lie at two; else put in."""
    at = pole(work.problem.structure)
    if at is None or work.modal:
        return _transfers.corner(work) if work.modal else two_poles(work)
    tau, pi = seen(work, at).tau, work.sheet.number("pi", math.pi, "1")
    return work.sheet.work("f", "Hz", "1 / (2 · {} · {})", lambda p, t: 1 / (2 * p * t), pi, tau)


def gain(work: Working) -> Number | None:
    """(R/R1) / (1 + (2 pi f tau)²)^0.5 where all capacitors lie at the node, only R1 at the source; else put in."""
    structure, sheet = work.problem.structure, work.sheet
    if pole(structure) != work.at or work.modal:
        return _transfers.gain(work)
    found, end = seen(work, work.at), int(structure.option("source"))
    direct = [link.ohms for link in found.links if link.other(work.at) == end]
    if len(direct) != 1 or any(far == end for far, _ in work.capacitors(work.at)):
        return _transfers.gain(work)
    pi, f = sheet.number("pi", math.pi, "1"), sheet.number("f", float(structure.option("frequency")), "Hz")
    formula = "{} / {} / (1 + (2 · {} · {} · {})^2)^0.5"
    return sheet.work("gain", "1", formula, _low_pass, found.ohms, direct[0], pi, f, found.tau)


def _low_pass(whole: float, ohms: float, pi: float, f: float, tau: float) -> float:
    return whole / ohms / math.sqrt(1.0 + (2.0 * pi * f * tau) ** 2)


def across(work: Working) -> Number | None:
    """v in the DC state that counts."""
    shown = _volts(work, _counting(work))
    if shown is None:
        return None
    value = value_in(work.measure, work.problem.structure, work.cases)
    signed = ("signed", 1.0) in work.problem.structure.options
    return shown if signed or shown.value * value >= 0.0 else _size(work, shown)


def lowest(work: Working) -> Number | None:
    """v in the state in which it is lowest."""
    return _volts(work, np.argmin)


def highest(work: Working) -> Number | None:
    """v in the state in which it is highest."""
    return _volts(work, np.argmax)


def at_pin(work: Working) -> Number | None:
    """v of a pin in the state that counts; not where it counts from a level."""
    if work.problem.structure.levels:
        return None
    return lowest(work) if work.problem.structure.option("extreme") == "least" else highest(work)


def ratio(work: Working) -> Number | None:
    """|v| / rated."""
    volts = _most(work)
    if volts is None or work.problem.structure.rating is None:
        return None
    rated = work.form(work.problem.structure.rating, "rated", "V")
    return work.sheet.work("ratio", "1", "{} / {}", lambda v, r: v / r, volts, rated)


def charge(work: Working) -> Number | None:
    """Q = C v; along a bias curve ∫ C dv."""
    volts = _most(work)
    if volts is None or work.problem.structure.curves:
        return volts and along(work, volts, _farads(work), "Q")
    return work.sheet.work("Q", "C", "{} · {}", lambda c, v: c * v, _farads(work), volts)


def energy(work: Working) -> Number | None:
    """W = C v² / 2, of a supply with all its capacitors; along a bias curve ∫ v C dv."""
    volts = _most(work)
    if volts is None or work.problem.structure.curves:
        return volts and along(work, volts, _farads(work), "W")
    return work.sheet.work("W", "J", "{} · {}^2 / 2", lambda c, v: c * v * v / 2, _farads(work), volts)


def power_ratio(work: Working) -> Number | None:
    """P / rated."""
    watts, rating = power(work), work.problem.structure.rating
    if watts is None or rating is None:
        return None
    rated = work.form(rating, "rated", "W")
    return work.sheet.work("ratio", "1", "{} / {}", lambda p, r: p / r, watts, rated)


def power(work: Working) -> Number | None:
    """P = v² / R."""
    volts = _most(work)
    ohms = work.sheet.number(_element(work, work.names.resistors), float(work.solved.ohms[0, _index(work)]), "Ω")
    return volts and work.sheet.work("P", "W", "{}^2 / {}", lambda v, r: v * v / r, volts, ohms)


def _index(work: Working) -> int:
    return work.problem.structure.element or 0


def _element(work: Working, names: tuple[str, ...]) -> str:
    return names[_index(work)]


def _farads(work: Working) -> Number:
    if work.problem.structure.element is None:
        return total(work)
    farads = float(work.solved.farads[0, _index(work)])
    return work.sheet.number(_element(work, work.names.capacitors), farads, "F")


def _size(work: Working, volts: Number) -> Number:
    return work.sheet.work("|v|", "V", "-{}", lambda v: -v, volts)


def _most(work: Working) -> Number | None:
    volts = _volts(work, lambda values: np.argmax(np.abs(values)))
    return _size(work, volts) if volts is not None and volts.value < 0.0 else volts


def _volts(work: Working, choose: Choose) -> Number | None:
    """v across the part in the DC state that counts."""
    structure = work.problem.structure
    found = states(structure, work.cases)
    ends = (structure.at, structure.against)
    volts = found[:, structure.at] - (0.0 if structure.against is None else found[:, structure.against])
    index = int(choose(volts))
    sources = len(structure.states)
    held = work.held([float(evaluate(form, work.cases)[0]) for form in structure.states[index % sources]])
    a, b = (_end(work, end, held, earlier=index >= sources) for end in ends)
    note = f"where {_told(held)}" if held else ""
    return work.sheet.work("v", "V", "{} - {}", lambda x, y: x - y, a, b, note=note)


def _counting(work: Working) -> Choose:
    """The state in which the voltage of the measure counts."""
    options = dict(work.problem.structure.options)
    signed, least = options.get("signed") == 1.0, options.get("extreme") == "least"
    choose = np.argmin if least else np.argmax
    return choose if signed else lambda volts: choose(np.abs(volts))


def _end(work: Working, terminal: int | None, held: dict[int, Number], *, earlier: bool) -> Number:
    if terminal is None:
        return work.sheet.number("0 V", 0.0, "V")
    if terminal in held:
        return held[terminal]
    mesh = work.mesh(earlier=earlier)
    links = mesh.reduce(terminal)
    ohms = parallel(work.sheet, f"R at {work.name(terminal)}", [link.ohms for link in links])
    name = f"v({work.name(terminal)})"
    found = source(work.sheet, name, ohms, links, terminal, held, mesh.draws.get(terminal, []))
    return _within(work, name, found, held) if work.problem.structure.amps else found


def _within(work: Working, name: str, found: Number, held: dict[int, Number]) -> Number:
    """What pins leak goes no further than the outermost sources."""
    if not held:
        return found
    ordered = sorted(held.values(), key=lambda number: number.value)
    for rail, beyond in ((ordered[0], found.value < ordered[0].value), (ordered[-1], found.value > ordered[-1].value)):
        if beyond:
            return work.sheet.given(name, rail.value, "V", f"leakage goes no further than {rail.text}")
    return found


def _told(held: dict[int, Number]) -> str:
    return ", ".join(f"{number.symbol} is at {number.text}" for number in held.values() if number.symbol != "0 V")
