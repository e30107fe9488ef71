"""The value of an expression, for many cases at once."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rcrules.expressions._tree import Binary, Call, Expression, Name, Number, Power, Unary

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True)
class Values:
    """What names and calls stand for; arrays (case,), or numbers for all cases."""

    names: Mapping[str, Array | float]
    calls: Mapping[Call, Array | float]


def value_of(of: Expression, values: Values) -> Array | float:
    """SI. Division by zero is infinite, what is not defined or too large for a number is nan; nothing raises."""
    with np.errstate(all="ignore"):
        return _value(of, values)


def _value(of: Expression, values: Values) -> Array | float:
    if isinstance(of, Number):
        return of.value
    if isinstance(of, Name):
        return values.names[of.name]
    if isinstance(of, Unary):
        return -np.asarray(_value(of.of, values))
    if isinstance(of, Power):
        base = np.asarray(_value(of.of, values), dtype=float)
        power = np.asarray(of.exponent if of.by is None else _value(of.by, values), dtype=float)
        return _told(base**power, base, power, (base == 0) & (power < 0))
    if isinstance(of, Binary):
        return _joined(of.sign, np.asarray(_value(of.left, values)), np.asarray(_value(of.right, values)))
    if isinstance(of, Call):
        return values.calls[of] if of in values.calls else _function(of, values)
    raise TypeError(f"{type(of).__name__} has no value")


def _joined(sign: str, left: Array, right: Array) -> Array:
    if sign == "/":
        return _told(np.divide(left, right), left, right, right == 0)
    found = left + right if sign == "+" else left - right if sign == "-" else left * right
    return _told(found, left, right)


def _told(found: Array, left: Array, right: Array, beyond: Array | bool = False) -> Array:
    """A result too large for a number is not defined; infinite only if an operand is, or where ``beyond``."""
    overflow = np.isinf(found) & np.isfinite(left) & np.isfinite(right) & ~np.asarray(beyond)
    return np.where(overflow, np.nan, found)


def _function(of: Call, values: Values) -> Array:
    found = [np.asarray(_value(item, values), dtype=float) for item in of.arguments]
    if of.name == "interpolate":
        return _interpolated(found)
    if of.name in ("min", "max"):
        together = np.stack(np.broadcast_arrays(*found))
        return np.asarray(together.min(axis=0) if of.name == "min" else together.max(axis=0))
    plain = {"abs": np.abs, "sqrt": np.sqrt, "log": np.log}
    return np.asarray(plain[of.name](found[0]))


def _interpolated(found: list[Array]) -> Array:
    """Linear between points in any order, constant outside."""
    x, points = found[0], sorted(zip(found[1::2], found[2::2], strict=True), key=lambda point: float(np.max(point[0])))
    xs, ys = zip(*points, strict=True)
    if all(item.ndim == 0 for item in (*xs, *ys)):
        return np.asarray(np.interp(x, [float(item) for item in xs], [float(item) for item in ys]))
    every = np.broadcast_arrays(x, *xs, *ys)
    flat = [np.atleast_1d(item) for item in every]
    count = len(xs)
    rows = zip(*flat, strict=True)
    return np.array([np.interp(row[0], row[1 : count + 1], row[count + 1 :]) for row in rows])
