"""Random cases of a problem: every parameter by itself, between its limits.

The limits are those of the worst case, given and assumed; nothing lies outside them.
"""

from collections.abc import Sequence
from typing import Final

import numpy as np

from rcrules.problems import Array, Parameter, Problem, Quantity

_PORTION: Final = 20_000
"""Cases that are solved at a time: more need memory and are no faster."""
DISTRIBUTIONS: Final = ("uniform", "normal")
_DEVIATIONS: Final = 6.0
"""Standard deviations between the limits of a normal parameter, which is cut off at them."""


def samples(parameters: Sequence[Parameter], distributions: Sequence[str], count: int, seed: Sequence[int]) -> Array:
    """Cases (count, column) drawn with a generator (PCG64) of its own; the same seed gives the same cases.

    distributions: one per parameter. ``uniform`` between its limits, or ``normal``: around their middle, with a
    sixth of their distance as standard deviation, cut off at the limits.
    """
    generator = np.random.default_rng(list(seed))
    drawn = np.empty((count, len(parameters)))
    for column, (item, distribution) in enumerate(zip(parameters, distributions, strict=True)):
        if np.isinf(item.high):  # a resistance without upper limit: its conductance is drawn
            with np.errstate(divide="ignore"):
                drawn[:, column] = 1.0 / _drawn(generator, distribution, 0.0, 1.0 / item.low, count)
        else:
            drawn[:, column] = _drawn(generator, distribution, item.low, item.high, count)
    return drawn


def values(problem: Problem, measure: Quantity, cases: Array) -> Array:
    """A measure in each case (case,), portion by portion; cases (case, column). Raises what the measure raises."""
    portions = np.array_split(cases, max(1, -(-len(cases) // _PORTION)))
    return np.concatenate([measure.compute(problem.structure, portion) for portion in portions])


def _drawn(generator: np.random.Generator, distribution: str, low: float, high: float, count: int) -> Array:
    if distribution == "normal":
        return _normal(generator, low, high, count)
    return generator.uniform(low, high, count)


def _normal(generator: np.random.Generator, low: float, high: float, count: int) -> Array:
    """Drawn again while outside the limits: 0.27 % of the draws."""
    middle, deviation = (low + high) / 2, (high - low) / _DEVIATIONS
    drawn = generator.normal(middle, deviation, count)
    while (outside := (drawn < low) | (drawn > high)).any():
        drawn[outside] = generator.normal(middle, deviation, int(outside.sum()))
    return drawn
