"""The pieces of the observed voltage up to an instant, by hand where all capacitors lie at it, else from the engine."""

from collections.abc import Mapping
from dataclasses import dataclass
from math import isfinite

from rcrules.derivation._pieces import One, Piece, Sum
from rcrules.derivation._reduce import Link, TooLarge, parallel, source
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working
from rcrules.engine import Response, Signal
from rcrules.problems import Structure

_ROUNDING = 1e-12
"""Part of the largest number in a sum below which only rounding is left."""
LEAST_MODE = 1e-9
"""Amplitude below which a mode is not seen, in parts of the largest number in the sum."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Seen:
    """What the observed node sees: R and open-circuit voltage of its sources, C and tau."""

    links: list[Link]
    draws: list[Number]
    ohms: Number
    farads: Number
    tau: Number


def pole(structure: Structure) -> int | None:
    """The free terminal at which all capacitors lie that act on a free one; None where there is not just one."""
    free = structure.shape.free
    pairs = [pair for pair in structure.shape.capacitors if min(pair) < free]
    ends = {terminal for pair in pairs for terminal in pair if terminal < free}
    return ends.pop() if len(ends) == 1 else None


def seen(work: Working, at: int) -> Seen:
    """R, C and tau at the terminal at which all capacitors lie. Raises TooLarge."""
    mesh = work.mesh()
    links = mesh.reduce(at)
    ohms = parallel(work.sheet, "R", [link.ohms for link in links])
    farads = [number for _, number in work.capacitors(at)]
    total = work.sheet.work("C", "F", " + ".join("{}" for _ in farads), lambda *all_: sum(all_), *farads)
    tau = work.sheet.work("tau", "s", "{} · {}", lambda r, c: r * c, ohms, total)
    return Seen(links=links, draws=mesh.draws.get(at, []), ohms=ohms, farads=total, tau=tau)


def respond(work: Working, until: float) -> list[Piece]:
    """The pieces up to the one in which an instant lies; the last one for an instant that never comes."""
    structure = work.problem.structure
    if not work.modal and pole(structure) == work.at and structure.against is None and not structure.charged:
        mark = len(work.sheet.steps)
        try:
            return _by_hand(work, work.piece_of(until))
        except TooLarge:
            del work.sheet.steps[mark:]
    return _by_engine(work, until)


def _by_hand(work: Working, last: int) -> list[Piece]:
    found = seen(work, work.at)
    start = _started(work, found)
    pieces: list[Piece] = []
    for index in range(last + 1):
        following = work.starts[index + 1] if index + 1 < len(work.starts) else None
        if following is not None and following <= work.starts[index]:
            continue
        piece = _piece(work, found, index, start)
        pieces.append(piece)
        if index < last and following is not None:
            length = work.sheet.number("x", following - work.starts[index], "s")
            start = piece.at(work.sheet, "v1", length, note=f"at {work.sheet.number('', following, 's').text}")
            start = _jumped(work, found, start, work.held(_ends(work, index)), work.volts(index + 1))
    return pieces


def _ends(work: Working, index: int) -> list[float]:
    """Held voltages at the end of a piece [V]."""
    starts, levels, slopes = work.solved.sources
    length = float(starts[0, index + 1] - starts[0, index])
    return [float(level + slope * length) for level, slope in zip(levels[0, index], slopes[0, index], strict=True)]


def _started(work: Working, found: Seen) -> Number:
    """v just after the event."""
    structure, sheet = work.problem.structure, work.sheet
    if structure.empty:
        start = sheet.given("v0", 0.0, "V", "the capacitors are empty")
        nothing = {terminal: sheet.number(work.name(terminal), 0.0, "V") for terminal in work.before()}
        return _jumped(work, found, start, nothing, work.volts(0))
    return _jumped(work, found, _rested(work, found), work.before(), work.volts(0))


def _rested(work: Working, found: Seen) -> Number:
    """v just before the event, at rest."""
    structure, sheet = work.problem.structure, work.sheet
    pinned = dict(structure.pinned)
    if pinned:
        note = "held there by its supply until the event" if work.at in pinned else "from the node equations at rest"
        return sheet.given("v0", float(work.solved.volts_before[0, work.at]), "V", note)
    if structure.earlier is None:
        return source(sheet, "v0", found.ohms, found.links, work.at, work.before(), found.draws)
    mesh = work.mesh(earlier=True)
    links = mesh.reduce(work.at)
    ohms = parallel(sheet, "R before", [link.ohms for link in links])
    return source(sheet, "v0", ohms, links, work.at, work.before(), mesh.draws.get(work.at, []))


def _jumped(work: Working, found: Seen, start: Number, old: Mapping[int, Number], new: Mapping[int, Number]) -> Number:
    """v after held terminals have jumped: C (v' - v) = sum of C_k (V_k' - V_k)."""
    numbers: list[Number] = [start]
    for terminal, farads in work.capacitors(work.at):
        if abs(new[terminal].value - old[terminal].value) > 1e-9 * max(abs(new[terminal].value), 1e-9):
            numbers += [farads, new[terminal], old[terminal]]
    if len(numbers) == 1:
        return start
    formula = "{} + (" + " + ".join("{} · ({} - {})" for _ in range(len(numbers) // 3)) + ") / {}"

    def compute(v: float, *rest: float) -> float:
        pushed = sum(rest[k] * (rest[k + 1] - rest[k + 2]) for k in range(0, len(rest) - 1, 3))
        return v + pushed / rest[-1]

    return work.sheet.work("v0", "V", formula, compute, *numbers, found.farads, note="pushed through the capacitors")


def _piece(work: Working, found: Seen, index: int, start: Number) -> One:
    sheet = work.sheet
    rest = source(sheet, "V", found.ohms, found.links, work.at, work.volts(index), found.draws)
    ramps = {
        terminal: sheet.given(f"slope of {work.name(terminal)}", slope, "V/s", "while it ramps")
        for terminal, slope in work.slopes(index).items()
    }
    pushes = [(farads, ramps[end]) for end, farads in work.capacitors(work.at) if end in ramps]
    if pushes:
        numbers = [item for pair in pushes for item in pair]
        formula = "{} + {} · (" + " + ".join("{} · {}" for _ in pushes) + ")"
        rest = sheet.work("V", "V", formula, _pushed, rest, found.ohms, *numbers, note="pushed through the capacitors")
    begins = sheet.number("t", work.starts[index], "s")
    return One(begins=begins, start=start, rest=rest, slope=_slope(work, found, ramps), tau=found.tau)


def _pushed(rest: float, ohms: float, *pairs: float) -> float:
    return rest + ohms * sum(pairs[k] * pairs[k + 1] for k in range(0, len(pairs), 2))


def _slope(work: Working, found: Seen, ramps: Mapping[int, Number]) -> Number | None:
    """Slope of the open-circuit voltage."""
    moving = [link for link in found.links if link.other(work.at) in ramps]
    if not moving:
        return None
    if len(found.links) == 1:
        return work.sheet.work("S", "V/s", "{}", lambda s: s, ramps[moving[0].other(work.at)])
    numbers = [item for link in moving for item in (ramps[link.other(work.at)], link.ohms)]
    formula = "{} · (" + " + ".join("{} / {}" for _ in moving) + ")"

    def compute(r: float, *rest: float) -> float:
        return r * sum(rest[k] / rest[k + 1] for k in range(0, len(rest), 2))

    return work.sheet.work("S", "V/s", formula, compute, found.ohms, *numbers)


def _by_engine(work: Working, until: float) -> list[Piece]:
    """The piece in which the instant lies, its numbers from the modes of the whole network."""
    place, _ = work.piece_at(until)
    return [piece_from_modes(work, place)]


def piece_from_modes(work: Working, place: int) -> Sum:
    """A piece of the signal, its numbers from the modes of the whole network."""
    sheet, signal = work.sheet, work.solved.signal
    found, begin = signal.sums[place].merged(), float(signal.starts[place, 0])
    amps, rates = found.amps[:, 0], found.rates[:, 0]
    rest = float(found.start[0] - amps.sum())
    size = max(abs(rest), *(abs(float(amp)) for amp in amps), 0.0) if len(amps) else abs(rest)
    note = "from the modes of the whole network" + _conducting(work, begin)
    rest = rest if abs(rest) > _ROUNDING * max(size, abs(float(found.start[0]))) else 0.0
    slope = float(found.slope[0])
    slope = slope if abs(slope) * _span(signal, place) > _ROUNDING * size else 0.0
    end = sheet.given("E", rest, "V", note)
    ramp = sheet.given("S", slope, "V/s", note) if slope else None
    modes = []
    for index, (amp, rate) in enumerate(zip(amps, rates, strict=True), 1):
        if abs(float(amp)) > LEAST_MODE * size:
            tau = sheet.given(f"tau{index}", 1.0 / float(rate), "s", "")
            modes.append((sheet.given(f"A{index}", float(amp), "V", note), tau))
    begins, start = sheet.number("t", begin, "s"), sheet.number("v0", float(found.start[0]), "V")
    return Sum(begins=begins, start=start, rest=end, slope=ramp, modes=tuple(modes))


def _span(signal: Signal, place: int) -> float:
    """How long a piece lasts [s]; 1 where it has no end."""
    length = float(signal.lengths[place][0])
    return length if isfinite(length) else 1.0


def _conducting(work: Working, begin: float) -> str:
    """Which diodes conduct from an instant on, in words."""
    response = work.solved.response
    if isinstance(response, Response):
        return ""
    item = max((item for item in response.intervals if item.begin[0] <= begin), key=lambda item: float(item.begin[0]))
    names = [name for name, on in zip(work.names.diodes, item.on[0], strict=True) if on]
    return f" while {' and '.join(names)} conduct{'s' * (len(names) == 1)}" if names else ""
