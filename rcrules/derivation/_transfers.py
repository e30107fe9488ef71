"""Corners and gains of any network from its modes: what a step of 1 V does tells what each frequency does.

v(t) = E + sum of A e^(-t/tau) after a step of 1 V at the source, so H(jw) = E + sum of A j x/(1 + j x), x = w tau: its
real part is E + sum of A x²/(1 + x²), its imaginary part the sum of A x/(1 + x²). Source: Laplace transform of the step
response.
"""

import math

import numpy as np

from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working
from rcrules.engine import Drive

_LEAST = 1e-9
"""Amplitude below which a mode is not seen [V]."""

Modes = tuple[Number, list[tuple[Number, Number]]]


def corner(work: Working) -> Number | None:
    """The frequency at which the size of H is that of the pass band / 2^0.5, put into H."""
    value = float(work.measure.compute(work.problem.structure, work.cases)[0])
    if not 0.0 < value < math.inf:
        return None
    sheet, (rest, modes) = work.sheet, _modes(work)
    f = sheet.given("f", value, "Hz", "found between brackets; put in:")
    size = _size(work, rest, modes, f)
    low = work.problem.structure.option("passes") == "low"
    amps = () if low else tuple(amp for amp, _ in modes)
    note = "|H| at 0 Hz" if low else "|H| far above"
    band = sheet.work("H0", "1", "abs(" + " + ".join("{}" for _ in (rest, *amps)) + ")", _whole, rest, *amps, note=note)
    edge = sheet.work("H0/2^0.5", "1", "{} / 2^0.5", lambda h: h / math.sqrt(2.0), band, note="meets |H|")
    work.checks.append((size, edge))
    return f


def gain(work: Working) -> Number | None:
    """The size of H at a frequency."""
    rest, modes = _modes(work)
    return _size(work, rest, modes, work.sheet.number("f", float(work.problem.structure.option("frequency")), "Hz"))


def _modes(work: Working) -> Modes:
    """E, and the amplitude and time constant of each mode that is seen."""
    shape, case = work.problem.structure.shape, work.solved
    levels = np.zeros((1, 1, shape.held))
    levels[0, 0, int(work.problem.structure.option("source")) - shape.free] = 1.0
    drive = Drive(starts=np.zeros((1, 1)), levels=levels, slopes=0.0 * levels, amps=np.zeros((1, shape.free)))
    response = case.modes.respond(drive, np.zeros((1, len(shape.capacitors))))
    found = response.observe(case.weights(), np.zeros(1)).sums[0].merged()
    sheet, note = work.sheet, "after a step of 1 V at the source, from the modes of the whole network"
    rest = sheet.given("E", float(found.start[0] - found.amps[:, 0].sum()), "1", note)
    modes = []
    for index, (amp, rate) in enumerate(zip(found.amps[:, 0], found.rates[:, 0], strict=True), 1):
        if abs(float(amp)) > _LEAST:
            tau = sheet.given(f"tau{index}", 1.0 / float(rate), "s", "")
            modes.append((sheet.given(f"A{index}", float(amp), "1", ""), tau))
    return rest, modes


def _size(work: Working, rest: Number, modes: list[tuple[Number, Number]], f: Number) -> Number:
    """|H| at a frequency."""
    sheet = work.sheet
    pi = sheet.number("pi", math.pi, "1")
    angles = [sheet.work("wt", "1", "2 · {} · {} · {}", lambda p, g, t: 2 * p * g * t, pi, f, tau) for _, tau in modes]
    parts = [item for (amp, _), angle in zip(modes, angles, strict=True) for item in (amp, angle, angle)]
    real = "{}" + " + {} · {}^2 / (1 + {}^2)" * len(modes)
    imaginary = " + ".join("{} · {} / (1 + {}^2)" for _ in modes) or "0"
    numbers = (
        sheet.work("Re H", "1", real, lambda e, *rest: e + _sum(rest, 2), rest, *parts),
        sheet.work("Im H", "1", imaginary, lambda *rest: _sum(rest, 1), *parts),
    )
    return sheet.work("|H|", "1", "({}^2 + {}^2)^0.5", math.hypot, *numbers)


def _sum(parts: tuple[float, ...], power: int) -> float:
    """Sum of A x^power/(1 + x²) over triples A, x, x."""
    return sum(parts[k] * parts[k + 1] ** power / (1.0 + parts[k + 1] ** 2) for k in range(0, len(parts), 3))


def _whole(*parts: float) -> float:
    return abs(sum(parts))
