"""A value that is more than one measure, as a function of its columns, and what is proved of its slopes."""

from dataclasses import dataclass
from typing import Final

import numpy as np

from rcrules.expressions import FUNCTIONS, Binary, Call, Expression, Power, Unary, Values, calls, names, value_of
from rcrules.measures import Measure, Theory
from rcrules.problems import Array, Names, Structure


@dataclass(frozen=True, slots=True, kw_only=True)
class Posed:
    """One measure of the value."""

    call: Call
    structure: Structure
    measure: Measure
    columns: tuple[int, ...]
    """Its columns among those of the value."""
    names: Names | None = None
    """Of what it is measured in, for people."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Composite:
    """The value as a function of its columns."""

    expression: Expression
    posed: tuple[Posed, ...]
    constants: tuple[tuple[str, float], ...]
    columns: tuple[tuple[str, int], ...]
    """Names that are columns."""
    counts: tuple[tuple[Call, float, tuple[int, ...]], ...]
    """Calls that are a number, or a sum of columns."""
    units: tuple[tuple[str, str], ...] = ()
    """Unit of every name, for people."""

    def compute(self, structure: Structure, cases: Array) -> Array:  # noqa: ARG002 - it has those of its measures
        """Values (case,); cases (case, column)."""
        found = {item.call: item.measure.compute(item.structure, cases[:, list(item.columns)]) for item in self.posed}
        found |= {call: start + cases[:, list(own)].sum(axis=1) for call, start, own in self.counts}
        values = Values(
            names={**dict(self.constants), **{name: cases[:, index] for name, index in self.columns}}, calls=found
        )
        return np.broadcast_to(np.asarray(value_of(self.expression, values), dtype=float), (len(cases),)).copy()

    def theory(self, structure: Structure, low: Array, high: Array) -> Theory:  # noqa: ARG002
        """Signs where every measure that is added or taken off says so and none says the other; else not known."""
        signs = _signs(self.expression, self, low, high)
        return Theory(signs=tuple(signs) if signs is not None else (None,) * len(low))


def _signs(of: Expression, composite: Composite, low: Array, high: Array) -> list[int | None] | None:
    """Sign of the slope by column; None where the shape of the expression says nothing."""
    nothing: list[int | None] = [0] * len(low)
    if isinstance(of, Binary) and of.sign in "+-":
        sides = [_signs(side, composite, low, high) for side in (of.left, of.right)]
        if sides[0] is None or sides[1] is None:
            return None
        other = sides[1] if of.sign == "+" else [None if sign is None else -sign for sign in sides[1]]
        return [_agreed(one, two) for one, two in zip(sides[0], other, strict=True)]
    if isinstance(of, Binary):
        return _scaled(of, composite, low, high)
    if isinstance(of, Unary):
        return _turned(_signs(of.of, composite, low, high))
    if isinstance(of, Power) and of.exponent is not None and of.exponent > 0 and of.exponent % 2 == 1:
        return _signs(of.of, composite, low, high)
    if isinstance(of, Call) and of.name in _RISING:
        return _risen(of, composite, low, high)
    if isinstance(of, Call):
        return _of_call(of, composite, low, high)
    own = [item.name for item in names(of)]
    columns = dict(composite.columns)
    if not calls(of) and not any(name in columns for name in own):
        return nothing
    if len(own) == 1 and of == names(of)[0]:
        nothing[columns[own[0]]] = 1
        return nothing
    return None


_RISING: Final = ("min", "max", "sqrt", "log")
"""Functions that rise, or stay, with each of their arguments."""


def _risen(of: Call, composite: Composite, low: Array, high: Array) -> list[int | None] | None:
    """The signs that all arguments share."""
    found: list[int | None] = [0] * len(low)
    for item in of.arguments:
        own = _signs(item, composite, low, high)
        if own is None:
            return None
        found = [_agreed(one, two) for one, two in zip(found, own, strict=True)]
    return found


def _scaled(of: Binary, composite: Composite, low: Array, high: Array) -> list[int | None] | None:
    """Times, or over, a number that is the same in every case."""
    factor, other = _constant(of.right, composite), of.left
    if factor is None and of.sign == "*":
        factor, other = _constant(of.left, composite), of.right
    if factor is None or factor == 0 or not np.isfinite(factor):
        return None
    found = _signs(other, composite, low, high)
    return found if factor > 0 else _turned(found)


def _constant(of: Expression, composite: Composite) -> float | None:
    """The number that an expression is in every case; None where it moves."""
    fixed = dict(composite.constants)
    plain = all(item.name in FUNCTIONS for item in calls(of)) and all(item.name in fixed for item in names(of))
    return float(np.asarray(value_of(of, Values(names=fixed, calls={})))) if plain else None


def _turned(signs: list[int | None] | None) -> list[int | None] | None:
    return None if signs is None else [None if sign is None else -sign for sign in signs]


def _of_call(of: Call, composite: Composite, low: Array, high: Array) -> list[int | None] | None:
    found: list[int | None] = [0] * len(low)
    for item in composite.posed:
        if item.call == of and item.structure.diodes:
            return None
        if item.call == of:
            own = item.measure.theory(item.structure, low[list(item.columns)], high[list(item.columns)])
            for column, sign in zip(item.columns, own.signs, strict=True):
                found[column] = sign
            return found
    for call, _, columns in composite.counts:
        if call == of:
            for column in columns:
                found[column] = 1
            return found
    return None


def _agreed(one: int | None, two: int | None) -> int | None:
    if one is None or two is None:
        return None
    return one or two if 0 in (one, two) or one == two else None
