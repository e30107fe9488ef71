"""Random cases of a problem: every parameter between its limits, and the same wherever it acts.

The limits are those of the worst case, given and assumed; nothing lies outside them.
"""

from collections.abc import Sequence
from typing import Final
from zlib import crc32

import numpy as np

from rcrules.problems import Array, Parameter, Problem, Quantity

_PORTION: Final = 20_000
"""Cases that are solved at a time: more need memory and are no faster."""
DISTRIBUTIONS: Final = ("uniform", "normal")
_DEVIATIONS: Final = 3.0
"""Standard deviations from the nominal of a normal parameter to each limit, where it is cut off."""


def samples(parameters: Sequence[Parameter], distributions: Sequence[str], count: int, seed: int) -> Array:
    """Cases (count, column) drawn with generators (PCG64) of their own; the same seed gives the same cases.

    A number is the same in case n wherever it acts: its generator is made of the seed and its name, so that problems of
    one board are drawn of the same boards.
    distributions: one per parameter. ``uniform`` between its limits, or ``normal``: around its nominal, three standard
    deviations from each limit, cut off there; with its nominal at a limit all to the other side.
    """
    drawn = np.empty((count, len(parameters)))
    for column, (item, distribution) in enumerate(zip(parameters, distributions, strict=True)):
        generator = np.random.default_rng([seed, crc32(item.name.encode("utf-8", "surrogatepass"))])
        draw = _normal if distribution == "normal" else _uniform
        if np.isinf(item.high):  # a resistance without upper limit: its conductance is drawn
            with np.errstate(divide="ignore"):
                drawn[:, column] = 1.0 / draw(generator, 0.0, 1.0 / item.nominal, 1.0 / item.low, count)
        else:
            drawn[:, column] = draw(generator, item.low, item.nominal, item.high, count)
    return drawn


def values(problem: Problem, measure: Quantity, cases: Array) -> Array:
    """A measure in each case (case,), portion by portion; cases (case, column). Raises what the measure raises."""
    portions = np.array_split(cases, max(1, -(-len(cases) // _PORTION)))
    return np.concatenate([measure.compute(problem.structure, portion) for portion in portions])


def _uniform(generator: np.random.Generator, low: float, nominal: float, high: float, count: int) -> Array:  # noqa: ARG001
    return generator.uniform(low, high, count)


def _normal(generator: np.random.Generator, low: float, nominal: float, high: float, count: int) -> Array:
    """Each side of the nominal by its own deviation; drawn again while outside the limits: 0.27 % of the draws."""
    drawn = generator.standard_normal(count)
    while (outside := np.abs(drawn) > _DEVIATIONS).any():
        drawn[outside] = generator.standard_normal(int(outside.sum()))
    below, above = nominal - low, high - nominal
    if below == 0.0 or above == 0.0:
        drawn = np.abs(drawn) if below == 0.0 else -np.abs(drawn)
    found = nominal + drawn / _DEVIATIONS * np.where(drawn < 0.0, below, above)
    return np.clip(found, low, high)
