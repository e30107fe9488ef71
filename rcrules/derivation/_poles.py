"""Networks of two capacitors by hand: both time constants from resistances that can be seen.

1 + a s + b s² = 0 with a = R1 C1 + R2 C2, each R seen with the other capacitor open, and b = R1 C1 R2' C2, R2' seen
with C1 shorted; tau = (a ± (a² - 4 b)^0.5)/2. Source: method of open- and short-circuit time constants (from memory of
textbooks on circuits), exact for two capacitors.
"""

from math import pi, sqrt

from rcrules.derivation._reduce import parallel
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working


def two(work: Working) -> tuple[Number, Number] | None:
    """a [s] and b [s²] of a network with capacitors at two free nodes, each to held terminals. Raises TooLarge."""
    free = work.free
    pairs = [pair for pair in work.problem.structure.shape.capacitors if min(pair) < free]
    ends = sorted({end for pair in pairs for end in pair if end < free})
    if len(ends) != 2 or any(max(pair) < free for pair in pairs):
        return None
    one, other = ends
    first, second = _farads(work, one), _farads(work, other)
    ohms = [_seen(work, one, f"R at {work.name(one)}"), _seen(work, other, f"R at {work.name(other)}")]
    shorted = _seen(work, other, f"R at {work.name(other)}, {work.name(one)} shorted", frozenset((one,)))
    if shorted is None or ohms[0] is None or ohms[1] is None:
        return None
    numbers = ohms[0], first, ohms[1], second
    total = work.sheet.work("a", "s", "{} · {} + {} · {}", lambda r, c, q, d: r * c + q * d, *numbers)
    formula, factors = "{} · {} · {} · {}", (ohms[0], first, shorted, second)
    return total, work.sheet.work("b", "s²", formula, lambda r, c, q, d: r * c * q * d, *factors)


def slowest(work: Working) -> Number | None:
    """The larger time constant of two."""
    found = two(work)
    if found is None:
        return None
    numbers = found[0], found[0], found[1]
    formula = "({} + ({}^2 - 4 · {})^0.5) / 2"
    return work.sheet.work("tau", "s", formula, lambda a, same, b: (a + sqrt(max(same**2 - 4 * b, 0.0))) / 2, *numbers)


def corner(work: Working) -> Number | None:
    """-3 dB of 1/(1 + a s + b s²): (1 - b w²)² + a² w² = 2; right where only the poles shape the pass band."""
    found = two(work)
    if found is None:
        return None
    a, b = found
    sheet = work.sheet
    h = sheet.work("h", "s²", "{}^2 / 2 - {}", lambda x, y: x * x / 2 - y, a, b)
    number = sheet.number("pi", pi, "1")
    formula = "1 / (2 · {} · ({} + ({}^2 + {}^2)^0.5)^0.5)"
    return sheet.work("f", "Hz", formula, _corner, number, h, h, b)


def _corner(half_turn: float, h: float, same: float, b: float) -> float:
    return 1 / (2 * half_turn * sqrt(h + sqrt(same**2 + b**2)))


def _farads(work: Working, terminal: int) -> Number:
    found = [number for _, number in work.capacitors(terminal)]
    name = f"C at {work.name(terminal)}"
    return work.sheet.work(name, "F", " + ".join("{}" for _ in found), lambda *all_: sum(all_), *found)


def _seen(work: Working, terminal: int, symbol: str, shorted: frozenset[int] = frozenset()) -> Number | None:
    """The resistance between a node and held terminals, capacitors open."""
    links = work.mesh().reduce(terminal, shorted)
    return parallel(work.sheet, symbol, [link.ohms for link in links]) if links else None
