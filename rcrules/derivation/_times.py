"""Measures of an event by hand: times at which levels are passed, voltages at an instant."""

import math

import numpy as np

from rcrules.derivation._known import value_in
from rcrules.derivation._pieces import Piece, Sum
from rcrules.derivation._reduce import TooLarge, parallel, source
from rcrules.derivation._respond import respond
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working, height
from rcrules.measures import passed
from rcrules.problems import LevelForm, constant


def delay(work: Working) -> Number | None:
    """t - t0."""
    when = instant(work, work.problem.structure.level("to"), "t")
    if when is None or work.problem.structure.reference is None or math.isinf(when.value):
        return when
    return work.sheet.work("delay", "s", "{} - {}", lambda t, r: t - r, when, valid_at(work))


def to_63(work: Working) -> Number | None:
    """The time to 1 - 1/e of the step."""
    return instant(work, LevelForm(kind="step", fraction=constant(1.0 - math.exp(-1.0))), "t")


def discharge(work: Working) -> Number | None:
    """The time down to a level."""
    structure = work.problem.structure
    if ("endless", 1.0) not in structure.options:
        return instant(work, structure.level("to"), "t")
    level = work.form(structure.level("to").offset, "level", "V")
    start = work.sheet.given("v", abs(float(work.solved.start[0])), "V", "across it; nothing discharges it")
    never = math.inf if start.value > level.value else 0.0
    return work.sheet.given("t", never, "s", f"the level is {level.text}")


def edge(work: Working) -> Number | None:
    """From the lower level to the higher one."""
    structure = work.problem.structure
    low, high = (instant(work, structure.level(name), f"t {name}") for name in ("low", "high"))
    if low is None or high is None:
        return None
    turned = not structure.rising and structure.level("low").kind != "step"
    first, last = (high, low) if turned else (low, high)
    return work.sheet.work("rise time", "s", "{} - {}", lambda b, a: b - a, last, first)


def settled(work: Working) -> Number | None:
    """From then on within the band: |v - V| = band · step."""
    solved, sheet = work.solved, work.sheet
    size = _step(work)
    band = float(work.problem.structure.option("band"))
    value = value_in(work.measure, work.problem.structure, work.cases)
    if size is None or not 0.0 < value < math.inf:
        return None
    share = sheet.number("band", band, "1")
    edge_ = sheet.work("b", "V", "{} · {}", lambda f, s: f * s, share, size, note="half width of the band")
    piece, x, begins = reached(work, value)
    side = 1.0 if float(solved.signal.at(np.array([value]))[0]) >= float(solved.final[0]) else -1.0
    sign = "+" if side > 0 else "-"
    end = sheet.given("v(end)", float(solved.final[0]), "V", "where v ends")
    level = sheet.work("L", "V", f"{{}} {sign} {{}}", lambda e, b: e + side * b, end, edge_, note="edge of the band")
    return _arrive(work, piece, x, begins, level, "t")


def voltage_later(work: Working) -> Number | None:
    """v at an instant."""
    time = float(work.problem.structure.option("time"))
    piece, x, _ = reached(work, time)
    return piece.at(work.sheet, "v", x, note=f"at {work.sheet.number('', time, 's').text}")


def left(work: Working) -> Number | None:
    """|v - V| / step at an instant."""
    size, later = _step(work), voltage_later(work)
    if size is None or later is None:
        return None
    end = work.sheet.given("v(end)", float(work.solved.final[0]), "V", "where v ends")
    found = work.sheet.work("residual", "1", "abs({} - {}) / {}", lambda v, e, s: abs(v - e) / s, later, end, size)
    late = float(work.solved.form(work.problem.structure.absorbed)[0])
    if late <= found.value:
        return found
    return work.sheet.given("residual", late, "1", "what the dielectric absorbs comes later than that")


def first(work: Working) -> Number | None:
    """v just after the event."""
    piece = respond(work, 0.0)[0]
    return piece.at(work.sheet, "v0", work.sheet.number("x", 0.0, "s")) if isinstance(piece, Sum) else piece.start


def last(work: Working) -> Number | None:
    """v in the end, from the resistors alone; where a pin leaks towards a rail, no further than that."""
    final = float(work.solved.final[0])
    mesh, volts = work.mesh(), work.volts(len(work.starts) - 1)
    links = mesh.reduce(work.at)
    if work.problem.structure.against is not None or not links:
        return None
    ohms = parallel(work.sheet, "R", [link.ohms for link in links])
    rest = source(work.sheet, "V", ohms, links, work.at, volts, mesh.draws.get(work.at, []))
    if not work.problem.structure.diodes or abs(rest.value - final) <= 1e-6 * abs(final):
        return rest
    rails = [number for number in volts.values() if abs(number.value - final) <= 1e-6]
    return work.sheet.given("v(end)", final, "V", f"leakage goes no further than {rails[0].text}") if rails else None


def _step(work: Working) -> Number | None:
    """The step that a band or a residual counts in."""
    solved = work.solved
    ends = [float(solved.start[0]), float(solved.signal.initial()[0])]
    final = float(solved.final[0])
    size = max(abs(final - start) for start in ends)
    return work.sheet.given("step", size, "V", "from the voltage before to where v ends") if size > 0.0 else None


def reached(work: Working, time: float) -> tuple[Piece, Number, float]:
    """The piece of an instant, how far in it that is, and when the piece starts."""
    pieces = respond(work, time)
    begins = work.piece_at(time)[1] if isinstance(pieces[-1], Sum) else work.starts[work.piece_of(time)]
    return pieces[-1], work.sheet.number("x", time - begins, "s"), begins


def instant(work: Working, level: LevelForm, symbol: str) -> Number | None:
    """The instant at which v passes a level; None where that is not defined."""
    time = float(passed(work.solved, level)[0])
    if math.isnan(time):
        return None
    if math.isinf(time):
        return _never(work, level, symbol)
    return arrival(work, level, time, symbol)


def arrival(work: Working, level: LevelForm, time: float, symbol: str) -> Number:
    """A known instant at which v is at a level, by the piece in which it lies."""
    piece, x, begins = reached(work, time)
    found = height(work, level, work.piece_of(time))
    if x.value <= 0.0:
        return work.sheet.given(symbol, time, "s", f"v is at {piece.start.text}, beyond the level")
    if found.slope != 0.0 and begins != work.starts[work.piece_of(time)]:
        raise TooLarge  # a diode has switched while the level moves
    if found.slope == 0.0:
        return _arrive(work, piece, x, begins, found.number, symbol)
    return _meet(work, piece, x, begins, found.number, found.slope, symbol)


def _never(work: Working, level: LevelForm, symbol: str) -> Number:
    pieces = respond(work, math.inf)
    found = height(work, level, len(work.starts) - 1)
    note = f"v goes to {pieces[-1].rest.text} and never passes {found.number.text}"
    return work.sheet.given(symbol, math.inf, "s", note)


def _arrive(work: Working, piece: Piece, x: Number, begins: float, level: Number, symbol: str) -> Number:
    """The instant at which v is at a level that stands still."""
    own = symbol if begins == 0.0 else "x"
    found = piece.when(work.sheet, own, level)
    if found is None:
        found = work.sheet.given(own, x.value, "s", "found between brackets; put in:")
        work.checks.append((piece.at(work.sheet, "v(x)", found, note="the level"), level))
    return _since_event(work, found, begins, symbol)


def _meet(work: Working, piece: Piece, x: Number, begins: float, level: Number, slope: float, symbol: str) -> Number:
    """The instant at which v meets a level that moves."""
    sheet = work.sheet
    found = sheet.given(symbol if begins == 0.0 else "x", x.value, "s", "found between brackets; put in:")
    value = piece.at(sheet, "v(x)", found)
    rate = sheet.number("slope of L", slope, "V/s")
    moved = sheet.work("L(x)", "V", "{} + {} · {}", lambda v, s, t: v + s * t, level, rate, found, note="meets v(x)")
    work.checks.append((value, moved))
    return _since_event(work, found, begins, symbol)


def _since_event(work: Working, found: Number, begins: float, symbol: str) -> Number:
    if begins == 0.0:
        return found
    start = work.sheet.number("start", begins, "s")
    return work.sheet.work(symbol, "s", "{} + {}", lambda b, x: b + x, start, found, note="since the event")


def valid_at(work: Working) -> Number:
    """When the supply counts as up: on its ramp from (ta, va) to (tb, vb), t0 = ta + (tb - ta) (L - va)/(vb - va)."""
    structure, sheet = work.problem.structure, work.sheet
    time = float(work.solved.reference[0])
    terminal, level = structure.reference or (0, LevelForm(kind="voltage"))
    name, index = work.name(terminal), work.piece_of(time)
    valid = work.form(level.offset, f"{name} valid", "V")
    slope = work.slopes(index).get(terminal)
    note = f"when {name} is valid"
    if slope is None or time <= work.starts[index]:
        return sheet.given("t0", time, "s", note)
    length = sheet.number(f"{name} rise", work.starts[index + 1] - work.starts[index], "s")
    low, high = work.volts(index)[terminal], work.volts(index + 1)[terminal]
    if low.value == 0.0 and work.starts[index] == 0.0:
        return sheet.work("t0", "s", "{} · {} / {}", lambda t, v, h: t * v / h, length, valid, high, note=note)
    start = sheet.number("start", work.starts[index], "s")
    formula = "{} + {} · ({} - {}) / ({} - {})"
    numbers = (start, length, valid, low, high, low)
    return sheet.work("t0", "s", formula, lambda s, t, v, a, b, c: s + t * (v - a) / (b - c), *numbers, note=note)
