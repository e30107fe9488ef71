"""Currents into a terminal and through a part."""

import numpy as np

from rcrules.engine import Signal
from rcrules.problems import Solved, Structure


def capacitors_at(structure: Structure, terminal: int) -> list[int]:
    """Capacitors with an end at a terminal."""
    return [index for index, pair in enumerate(structure.shape.capacitors) if terminal in pair]


def into(case: Solved, terminal: int, without: int | None = None) -> Signal:
    """The current that flows into a terminal through resistors, but for one of them, and through diodes."""
    weights = np.zeros_like(case.weights())
    for index, pair in enumerate(case.structure.shape.resistors):
        if terminal in pair and index != without:
            other = sum(pair) - terminal
            weights[:, other] += 1.0 / case.ohms[:, index]
            weights[:, terminal] -= 1.0 / case.ohms[:, index]
    diodes = [float(item.cathode == terminal) - float(item.anode == terminal) for item in case.structure.diodes]
    return case.watch(weights, case.amps[:, terminal], diodes)
