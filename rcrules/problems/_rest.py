"""A network at rest or driven by a sine: what follows from its matrices alone."""

from collections.abc import Iterable

import numpy as np

from rcrules.engine import Shape, solve, transfer
from rcrules.problems._solved import Solved
from rcrules.problems._structure import Array, Structure

LEAST = 1e-30
"""Capacitance that stands for none [F]."""


def gain_at(structure: Structure, cases: Array, omega: float) -> Array:
    """Magnitude of the transfer from the terminal in option ``source`` to the observed one [1] (case,).

    omega: angular frequency [rad/s]. Raises FloatingNode.
    """
    case = Solved(structure=structure, cases=cases)
    source = int(structure.option("source"))
    if structure.amplifiers:
        return np.abs(case.amplified.transfer(source, omega)[:, structure.at])
    found = transfer(structure.shape, case.ohms, case.farads, source, omega)
    gains: Array = np.abs(found[:, structure.at])
    return gains


def elastance(structure: Structure, cases: Array) -> Array:
    """(C⁻¹) of the observed terminal, C the capacitance matrix of the free terminals [1/F] (case,).

    The reciprocal of the capacitance that one sees there with all resistors removed; infinite where capacitors do not
    join the terminal to a held one. Solved as a network of conductances of the sizes of the capacitances.
    """
    shape = structure.shape
    group = _joined(structure.at, shape.free, shape.capacitors)
    free = [terminal for terminal in group if terminal < shape.free]
    if len(free) == len(group):
        return np.full(len(cases), np.inf)
    number = {terminal: index for index, terminal in enumerate(free)}
    kept = [index for index, pair in enumerate(shape.capacitors) if number.keys() & set(pair)]
    pairs = tuple((_end(a, number), _end(b, number)) for a, b in (shape.capacitors[index] for index in kept))
    farads = np.maximum(Solved(structure=structure, cases=cases).farads[:, kept], LEAST)
    modes = solve(Shape(len(free), 1, pairs, ()), 1.0 / farads, np.zeros((len(cases), 0)))
    amps = np.zeros((len(cases), len(free)))
    amps[:, number[structure.at]] = -1.0
    return modes.steady(np.zeros((len(cases), 1)), amps)[:, number[structure.at]]


def _end(terminal: int, number: dict[int, int]) -> int:
    """The number of a free terminal; of any held one the first after them."""
    return number.get(terminal, len(number))


def _joined(first: int, free: int, pairs: Iterable[tuple[int, int]]) -> list[int]:
    """Terminals that capacitors join to one, through free ones, in ascending order."""
    found, grown = {first}, True
    while grown:
        inside = {terminal for terminal in found if terminal < free}
        further = {terminal for pair in pairs if inside & set(pair) for terminal in pair}
        grown = not further <= found
        found |= further
    return sorted(found)
