"""Charge and energy along a bias curve by hand: one line for each straight stretch of the curve up to the voltage."""

from collections.abc import Iterator
from itertools import pairwise

from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working


def along(work: Working, volts: Number, farads: Number, symbol: str) -> Number | None:
    """Q = C times the sum of (v2 - v1) (c1 + c2)/2, or W = C times that of the integral of v c; None of several."""
    sheet, structure = work.sheet, work.problem.structure
    if structure.element is None:
        return None
    stretches = []
    for begin, here, end, there in _stretches(structure.curves[0][1], volts.value):
        numbers = [sheet.number("v1", begin, "V"), sheet.number("v2", end, "V")]
        numbers[1] = volts if end == volts.value else numbers[1]
        shares = [sheet.number("c1", here, "1"), sheet.number("c2", there, "1")]
        span = f"from {numbers[0].text} to {numbers[1].text}"
        note = f"{span}, where the curve goes from {shares[0].text} to {shares[1].text}"
        line = _charge if symbol == "Q" else _energy
        stretches.append(line(work, numbers, shares, note))
    terms = " + ".join("{}" for _ in stretches)
    formula = f"{{}} · ({terms})" if len(stretches) > 1 else f"{{}} · {terms}"
    unit = "C" if symbol == "Q" else "J"
    return sheet.work(symbol, unit, formula, lambda c, *parts: c * sum(parts), farads, *stretches)


def _charge(work: Working, volts: list[Number], shares: list[Number], note: str) -> Number:
    formula, numbers = "({} - {}) · ({} + {}) / 2", (volts[1], volts[0], *shares)
    return work.sheet.work("q", "V", formula, lambda b, a, c, d: (b - a) * (c + d) / 2, *numbers, note=note)


def _energy(work: Working, volts: list[Number], shares: list[Number], note: str) -> Number:
    formula = "({} - {}) · ({} · (2 · {} + {}) + {} · ({} + 2 · {})) / 6"
    numbers = (volts[1], volts[0], shares[0], volts[0], volts[1], shares[1], volts[0], volts[1])
    return work.sheet.work("w", "V²", formula, _weighed, *numbers, note=note)


def _weighed(end: float, begin: float, c1: float, a: float, b: float, c2: float, a2: float, b2: float) -> float:
    """∫ v c(v) dv of a straight stretch."""
    return (end - begin) * (c1 * (2 * a + b) + c2 * (a2 + 2 * b2)) / 6


def _stretches(curve: tuple[tuple[float, float], ...], volts: float) -> Iterator[tuple[float, float, float, float]]:
    """Begin [V], share there, end [V], share there, from 0 V to a voltage; the curve stays as it is beyond its ends."""
    points = [(0.0, curve[0][1]), *(point for point in curve if point[0] > 0.0), (float("inf"), curve[-1][1])]
    for (begin, here), (end, there) in pairwise(points):
        if begin >= volts and begin > 0.0:
            return
        top = min(end, volts)
        part = 0.0 if there == here else (top - begin) / (end - begin)
        yield begin, here, top, here + part * (there - here)
