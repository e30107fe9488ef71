"""Energy that an event leaves in a resistor by hand: the square of what dies out, integrated in closed form.

With f(x) = e + S x + sum of A e^(-x/tau) in a piece of length T, u = 1 - e^(-T/tau) of each mode:
∫ f² dx = e² T + e S T² + S² T³/3 + sum 2 A tau (e u + S (tau u - T (1 - u))) + sum over pairs A A' h (1 - e^(-T/h)),
1/h = 1/tau + 1/tau'. Without an end e = S = 0 and u = 1. Source: integration by parts.
"""

import math
from collections.abc import Callable, Sequence
from itertools import accumulate, pairwise, product
from typing import Final, NamedTuple

from rcrules.derivation._amounts import ohms_of
from rcrules.derivation._pieces import One, Sum
from rcrules.derivation._respond import piece_from_modes, respond
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working

_ROUNDING: Final = 1e-12
"""[V] below which an end is 0."""


def spent(work: Working) -> Number | None:
    """W = A² tau / (2 R), where the voltage dies out as one exponential from its first instant on; else by modes."""
    found = _dying(work)
    if found is None:
        return _by_modes(work) if work.modal else None
    amplitude, tau = found
    formula = "{}^2 · {} / (2 · {})"
    return work.sheet.work("W", "J", formula, lambda a, t, r: a * a * t / (2 * r), amplitude, tau, ohms_of(work))


def _dying(work: Working) -> tuple[Number, Number] | None:
    """Amplitude and time constant of the only mode; None where there are more, or sources move later."""
    if len(work.starts) > 1 or work.modal:
        return None
    piece = respond(work, 0.0)[-1]
    if isinstance(piece, One) and piece.slope is None:
        return work.sheet.work("A", "V", "{} - {}", lambda v, e: v - e, piece.start, piece.rest), piece.tau
    if isinstance(piece, Sum) and piece.slope is None and len(piece.modes) == 1:
        return piece.modes[0]
    return None


def _by_modes(work: Working) -> Number | None:
    """The sum over the pieces of the signal."""
    signal, ohms, end = work.solved.signal, ohms_of(work), float(work.solved.final[0])
    if not math.isfinite(end):
        return None
    final = work.sheet.given("v(end)", end if abs(end) > _ROUNDING else 0.0, "V", "where v ends")
    order = sorted(range(len(signal.lengths)), key=lambda index: float(signal.starts[index, 0]))
    found = [
        _piece(work, piece_from_modes(work, index), float(signal.lengths[index][0]), final, ohms)
        for index in order
        if signal.lengths[index][0] > 0.0
    ]
    if len(found) == 1:
        return found[0]
    return work.sheet.work("W", "J", " + ".join("{}" for _ in found), lambda *all_: sum(all_), *found)


def _piece(work: Working, piece: Sum, length: float, final: Number, ohms: Number) -> Number:
    """∫ (v - v(end))² dx / R over one piece."""
    if math.isinf(length):
        return _tail(work, piece, ohms)
    sheet = work.sheet
    x = sheet.number("T", length, "s")
    rest = sheet.work("e", "V", "{} - {}", lambda e, v: e - v, piece.rest, final)
    terms = [_Term("{}^2 · {}", (rest, x), lambda e, t: e**2 * t)]
    if piece.slope:
        s = piece.slope
        terms.append(_Term("{} · {} · {}^2", (rest, s, x), lambda e, s, t: e * s * t**2))
        terms.append(_Term("{}^2 · {}^3 / 3", (s, x), lambda s, t: s**2 * t**3 / 3))
    for amp, tau in piece.modes:
        u = sheet.work("u", "1", "1 - exp(-{} / {})", lambda t, c: -math.expm1(-t / c), x, tau)
        terms.append(_Term("2 · {} · {} · {} · {}", (amp, tau, rest, u), lambda a, c, e, u: 2 * a * c * e * u))
        if piece.slope:
            numbers = (amp, tau, piece.slope, tau, u, x, u)
            terms.append(_Term("2 · {} · {} · {} · ({} · {} - {} · (1 - {}))", numbers, _ramped))
    for one, two in product(piece.modes, repeat=2):
        formula = "{} · {} / (1 / {} + 1 / {}) · (1 - exp(-{} / {} - {} / {}))"
        terms.append(_Term(formula, (one[0], two[0], one[1], two[1], x, one[1], x, two[1]), _pair))
    return _added(work, terms, ohms, f"over {x.text} from {piece.begins.text}")


def _tail(work: Working, piece: Sum, ohms: Number) -> Number:
    """The last piece, which has no end."""
    formula = "{} · {} / (1 / {} + 1 / {})"
    terms = [
        _Term(formula, (a[0], b[0], a[1], b[1]), lambda a, b, s, t: a * b / (1 / s + 1 / t))
        for a, b in product(piece.modes, repeat=2)
    ]
    return _added(work, terms, ohms, "from there on")


class _Term(NamedTuple):
    """One summand of the integral [V² s]."""

    formula: str
    numbers: tuple[Number, ...]
    compute: Callable[..., float]


def _added(work: Working, terms: Sequence[_Term], ohms: Number, note: str) -> Number:
    """The sum of the terms over R."""
    ends = list(accumulate((len(term.numbers) for term in terms), initial=0))

    def compute(*values: float) -> float:
        parts = (term.compute(*values[a:b]) for term, (a, b) in zip(terms, pairwise(ends), strict=True))
        return sum(parts) / values[-1]

    formula = " + ".join(term.formula for term in terms) or "0"
    numbers = [number for term in terms for number in term.numbers]
    return work.sheet.work("W", "J", f"({formula}) / {{}}", compute, *numbers, ohms, note=note)


def _ramped(a: float, c: float, s: float, c_again: float, u: float, t: float, u_again: float) -> float:
    return 2 * a * c * s * (c_again * u - t * (1 - u_again))


def _pair(a: float, b: float, s: float, t: float, x: float, *_: float) -> float:
    return a * b / (1 / s + 1 / t) * -math.expm1(-x / s - x / t)
