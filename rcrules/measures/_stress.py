"""Voltages across a part over all its DC states, and through the transient where that may go beyond them."""

import numpy as np

from rcrules.measures._measure import Theory
from rcrules.measures._theory import Slopes, unproved
from rcrules.measures._topology import columns
from rcrules.problems import Array, Structure, solved, steady_states


def across(structure: Structure, cases: Array) -> tuple[Array, Array]:
    """Lowest and highest voltage across the observed part [V] (case,), signed from its first terminal to its second."""
    states = steady_states(structure, cases)
    volts = states[:, :, structure.at]
    if structure.against is not None:
        volts = volts - states[:, :, structure.against]
    low, high = volts.min(axis=1), volts.max(axis=1)
    if ("transient", 1.0) in structure.options:
        least, most = solved(structure, cases).signal.extremes()
        low, high = np.minimum(low, least), np.maximum(high, most)
    return low, high


def clamped(structure: Structure, cases: Array) -> Array:
    """Steady voltage of the observed terminal [V] (case, state), within the outermost sources of each state.

    What a pin leaks comes from a rail, so that it cannot push the terminal beyond.
    """
    states = steady_states(structure, cases)
    held = states[:, :, structure.shape.free :]
    found: Array = np.clip(states[:, :, structure.at], held.min(axis=2), held.max(axis=2))
    return found


def most(structure: Structure, cases: Array) -> Array:
    """Greatest magnitude of the voltage across the part [V] (case,)."""
    low, high = across(structure, cases)
    return np.maximum(high, -low)


def of_states(structure: Structure, low: Array, high: Array) -> Theory:
    """T1 where a single DC state decides; capacitances matter in a transient only."""
    if ("transient", 1.0) in structure.options:
        return unproved(structure, low, high)
    slopes = Slopes([0] * len(low))
    forms = [*structure.ohms, *(form for _, form in structure.amps), *(structure.earlier or ((), ()))[1]]
    slopes.add(columns([*forms, *(form for state in structure.states for form in state), structure.rating or ()]), None)
    states = len(structure.states) * (2 if structure.earlier else 1)
    return slopes.theory(vertices=states == 1)


def with_capacitance(structure: Structure, low: Array, high: Array) -> Theory:
    """The same for a product with the part's own capacitance, or all of a supply; the voltage does not depend on it."""
    found = of_states(structure, low, high)
    slopes = Slopes(list(found.signs))
    own = structure.farads if structure.element is None else (structure.farads[structure.element],)
    if ("transient", 1.0) not in structure.options:
        slopes.signs = [1 if index in columns(own) else sign for index, sign in enumerate(slopes.signs)]
    return slopes.theory(vertices=found.vertices)
