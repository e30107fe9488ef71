"""Boxes in which what is assumed is set to one end while what is given keeps its whole spread."""

import math
from collections.abc import Mapping
from dataclasses import replace
from typing import Literal

from rcrules.problems import Parameter, Problem

End = Literal["low", "nominal", "high", "full"]
"""Where the assumed slack of a parameter stands; ``full`` = anywhere."""


def at_nominal(problem: Problem) -> Problem:
    """The problem with every number at its nominal value, and nothing assumed."""
    fixed = (
        replace(
            item, low=item.nominal, high=item.nominal, given_low=item.nominal, given_high=item.nominal, assumed=(),
            asks=(),
        )
        for item in problem.parameters
    )  # fmt: skip
    return replace(problem, parameters=tuple(fixed))


def assumed(problem: Problem) -> tuple[int, ...]:
    """Columns whose bounds rest on an assumption."""
    return tuple(index for index, item in enumerate(problem.parameters) if _is_assumed(item))


def _is_assumed(item: Parameter) -> bool:
    return bool(item.assumed) or item.low != item.given_low or item.high != item.given_high


def with_ends(problem: Problem, ends: Mapping[int, End], others: End) -> Problem:
    """The problem with the assumed slack of every assumed column at its end."""
    columns = {index: ends.get(index, others) for index in assumed(problem)}
    parameters = tuple(
        at_end(item, columns[index]) if index in columns else item for index, item in enumerate(problem.parameters)
    )
    return replace(problem, parameters=parameters)


def at_end(item: Parameter, end: End) -> Parameter:
    """The parameter with its assumed slack at one end; its given spread stays as wide, relative to its value."""
    if end == "full":
        return item
    low, high = shifted(item, end)
    return replace(item, low=low, high=high, nominal=min(max(item.nominal, low), high))


def shifted(item: Parameter, end: End) -> tuple[float, float]:
    """Lowest and highest value with the assumed slack at one end: a factor on positive values, else an offset."""
    if end == "nominal":
        return item.given_low, item.given_high
    if not all(map(math.isfinite, (item.low, item.high, item.given_low, item.given_high))):
        return (item.low, item.low) if end == "low" else (item.high, item.high)
    if item.given_low > 0 and item.low > 0:
        factor = item.low / item.given_low if end == "low" else item.high / item.given_high
        return item.given_low * factor, item.given_high * factor
    offset = item.low - item.given_low if end == "low" else item.high - item.given_high
    return item.given_low + offset, item.given_high + offset
