"""Numbers of the few cases that a derivation looks at, each worked out once: a board repeats its circuits."""

from collections.abc import Callable
from functools import lru_cache
from typing import Final

import numpy as np

from rcrules.problems import Array, Quantity, Structure, steady_states

_MOST: Final = 4096
"""Calls whose results are kept."""
_LOCAL: Final = "<locals>"
"""In the names of functions that are made while the program runs."""


def values_in(measure: Quantity, structure: Structure, cases: Array) -> Array:
    """The measure in each case (case,), not to be written to. Raises what the measure raises."""
    if _LOCAL in getattr(measure.compute, "__qualname__", _LOCAL):  # made for one rule: it would be kept with the board
        return measure.compute(structure, cases)
    return _known(measure.compute, structure, cases.tobytes(), cases.shape)


def value_in(measure: Quantity, structure: Structure, case: Array) -> float:
    """The measure in one case (column,) or (1, column)."""
    return float(values_in(measure, structure, case.reshape(1, case.size))[0])


def states(structure: Structure, case: Array) -> Array:
    """DC voltages of all terminals in each state [V] (state, terminal), not to be written to. Raises FloatingNode."""
    found: Array = _known(steady_states, structure, case.tobytes(), (1, case.size))[0]
    return found


@lru_cache(maxsize=_MOST)
def _known(
    work_out: Callable[[Structure, Array], Array], structure: Structure, data: bytes, size: tuple[int, ...]
) -> Array:
    """data: cases (case, column) as bytes; size: how many of each."""
    found = work_out(structure, np.frombuffer(data).reshape(size).copy())
    found.flags.writeable = False
    return found
