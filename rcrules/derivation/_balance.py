"""A time constant of any network, checked at every node.

In a mode of time constant tau all voltages die out together, v e^(-t/tau), so at every free node what flows out of its
capacitors, C (v - v')/tau, flows through its resistors, (v - v')/R. Source: Kirchhoff's current law.
"""

from collections.abc import Mapping, Sequence
from typing import Final

import numpy as np

from rcrules.derivation._reduce import MOST_NODES
from rcrules.derivation._sheet import Number
from rcrules.derivation._working import Working

_NOTHING: Final = 1e-4
"""Current of a node, in parts of the largest, below which only rounding is left to compare."""


def slowest(work: Working) -> Number | None:
    """The longest time constant, and the voltages of its mode put into both sides; None of large networks."""
    if work.free > MOST_NODES:
        return None
    modes, sheet = work.solved.modes, work.sheet
    vector = modes.vectors[0, :, 0]
    vector = vector / vector[int(np.argmax(np.abs(vector)))]
    count = int((modes.taus[0] > 0.0).sum())
    tau = sheet.given("tau", float(modes.taus[0, 0]), "s", f"the longest of {count} time constants; put in:")
    volts = {node: sheet.given(f"v({work.name(node)})", float(v), "V", "of its mode") for node, v in enumerate(vector)}
    pairs = [_sides(work, node, volts, tau) for node in volts]
    largest = max(abs(side.value) for pair in pairs for side in pair)
    work.checks += [pair for pair in pairs if max(abs(side.value) for side in pair) > _NOTHING * largest]
    return tau


def _sides(work: Working, node: int, volts: Mapping[int, Number], tau: Number) -> tuple[Number, Number]:
    """What flows out of the capacitors of a node, and what flows through its resistors."""
    name, stored = work.name(node), work.capacitors(node)
    taken = [(link.other(node), link.ohms) for link in work.mesh().at(node)]
    formula, numbers = _terms(work, node, volts, stored, "{} · ")
    formula = f"({formula}) / {{}}" if stored else "0"
    left = work.sheet.work(f"i C at {name}", "A", formula, _out, *numbers, *([tau] if stored else []))
    formula, numbers = _terms(work, node, volts, taken, "1 / {} · ")
    return left, work.sheet.work(f"i R at {name}", "A", formula, _through, *numbers, note="meets it")


def _terms(
    work: Working, node: int, volts: Mapping[int, Number], branches: Sequence[tuple[int, Number]], factor: str
) -> tuple[str, list[Number]]:
    """The sum over branches of a factor and the voltage across each; held terminals are at 0 V."""
    zero = work.sheet.number("0 V", 0.0, "V")
    numbers = [item for end, value in branches for item in (value, volts[node], volts.get(end, zero))]
    return " + ".join(factor + "({} - {})" for _ in branches) or "0", numbers


def _out(*numbers: float) -> float:
    pairs = range(0, len(numbers) - 1, 3)
    return sum(numbers[k] * (numbers[k + 1] - numbers[k + 2]) for k in pairs) / numbers[-1] if numbers else 0.0


def _through(*numbers: float) -> float:
    return sum((numbers[k + 1] - numbers[k + 2]) / numbers[k] for k in range(0, len(numbers), 3))
