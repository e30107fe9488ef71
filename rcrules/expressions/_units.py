"""Whether an expression makes sense: every name known, every function called rightly, dimensions that fit."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from typing import Final

from rcrules.expressions._dimensions import NONE, Dimension, dimension_of, named, times
from rcrules.expressions._tree import Binary, Call, Expression, Name, Number, Text, Unary, text_of
from rcrules.quantities import QuantityError

FUNCTIONS: Final[Mapping[str, tuple[int, int | None]]] = {
    "min": (1, None),
    "max": (1, None),
    "abs": (1, 1),
    "sqrt": (1, 1),
    "log": (1, 1),
    "interpolate": (5, None),
}
"""Plain functions: fewest and most arguments. ``log`` is the natural logarithm; ``interpolate(x, x1, y1, x2, y2, …)``
is linear between the points and constant outside them."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Known:
    """What an expression may name."""

    names: Mapping[str, str]
    """Facts and given numbers -> SI unit."""
    calls: Mapping[str, str]
    """Measures and counts that are called -> SI unit."""
    free: frozenset[str] = frozenset()
    """Given numbers whose unit is not known yet: it follows from what stands beside them."""
    learned: dict[str, Dimension] = field(default_factory=dict)
    """Of those, the dimensions found."""
    check_call: Callable[[Call], None] | None = None
    """Looks at the options of a call; raises QuantityError."""


def units_of(of: Expression, known: Known, wanted: Dimension | None = None) -> Dimension:
    """The dimension. wanted: what it must be, where that is known. Raises QuantityError at the place that is wrong."""
    if isinstance(of, Number):
        return dimension_of(of.unit)
    if isinstance(of, Text):
        raise QuantityError("a text is no number", at=of.at - 1, length=len(of.value) + 2)
    if isinstance(of, Name):
        return _name(of, known, wanted)
    if isinstance(of, Unary):
        return units_of(of.of, known, wanted)
    return _call(of, known, wanted) if isinstance(of, Call) else _binary(of, known, wanted)


def _name(of: Name, known: Known, wanted: Dimension | None) -> Dimension:
    if of.name in known.names:
        return dimension_of(known.names[of.name])
    if of.name in known.learned:
        return known.learned[of.name]
    if of.name in known.free:
        if wanted is None:
            problem = f"of what dimension '{of.name}' is cannot be told here"
            raise QuantityError(problem, at=of.at, length=len(of.name), expected="a number of a known unit beside it")
        known.learned[of.name] = wanted
        return wanted
    if of.name in known.calls:
        return dimension_of(known.calls[of.name])
    everything = [*known.names, *known.free, *known.calls, *FUNCTIONS]
    problem = f"no fact, number or measure is called '{of.name}'{_guess(of.name, everything)}"
    expected = f'a measure, a fact such as supply_high, or given = {{ {of.name[:40]} = "ask" }}'
    raise QuantityError(problem, at=of.at, length=len(of.name), expected=expected)


def _guess(name: str, everything: list[str]) -> str:
    near = get_close_matches(name, everything, n=1)
    return f"; did you mean '{near[0]}'?" if near else ""


def _binary(of: Binary, known: Known, wanted: Dimension | None) -> Dimension:
    if of.sign in ("*", "/"):
        left = units_of(of.left, known, _other(of.left, of.right, of.sign, known, wanted))
        beside = None if wanted is None else times(wanted, left, -1) if of.sign == "*" else times(left, wanted, -1)
        return times(left, units_of(of.right, known, beside), 1 if of.sign == "*" else -1)
    if isinstance(of.left, Name) and of.left.name in known.free and of.left.name not in known.learned:
        right = units_of(of.right, known, wanted)
        left = units_of(of.left, known, right)
    else:
        left = units_of(of.left, known, wanted)
        right = units_of(of.right, known, left)
    if left != right:
        word = "added to" if of.sign == "+" else "taken from"
        first, second = (of.left, left), (of.right, right)
        (one, unit), (other, beside) = (second, first) if of.sign == "-" else (first, second)
        problem = f"'{text_of(one)}' is {named(unit)}, which cannot be {word} '{text_of(other)}', {named(beside)}"
        raise QuantityError(problem, at=of.at, expected="two quantities of one kind")
    return left


def _other(left: Expression, right: Expression, sign: str, known: Known, wanted: Dimension | None) -> Dimension | None:
    """What the left of a product must be where only the right is known."""
    is_free = isinstance(left, Name) and left.name in known.free and left.name not in known.learned
    if wanted is None or not is_free:
        return None
    beside = units_of(right, known, None)
    return times(wanted, beside, -1 if sign == "*" else 1)


def _call(of: Call, known: Known, wanted: Dimension | None) -> Dimension:
    if of.name in FUNCTIONS:
        return _function(of, known, wanted)
    if of.name not in known.calls:
        problem = f"no function or measure is called '{of.name}'{_guess(of.name, [*known.calls, *FUNCTIONS])}"
        expected = f"a measure (rcrules rules --measures lists them), or {', '.join(FUNCTIONS)}"
        raise QuantityError(problem, at=of.at, length=of.length, expected=expected)
    if of.arguments:
        expected = 'options only, such as delay(to = "1.2 V")'
        raise QuantityError(f"'{of.name}' takes no plain arguments", at=of.at, length=of.length, expected=expected)
    if known.check_call is not None:
        known.check_call(of)
    return dimension_of(known.calls[of.name])


def _function(of: Call, known: Known, wanted: Dimension | None) -> Dimension:
    least, most = FUNCTIONS[of.name]
    if of.options or len(of.arguments) < least or (most is not None and len(of.arguments) > most):
        count = f"{least}" if least == most else f"{least} or more"
        raise QuantityError(f"'{of.name}' takes {count} arguments", at=of.at, length=of.length)
    if of.name == "interpolate":
        return _interpolated(of, known, wanted)
    if of.name == "sqrt":
        return _root(of, units_of(of.arguments[0], known, None if wanted is None else times(wanted, wanted)))
    if of.name == "log":
        _same(of, [units_of(of.arguments[0], known, NONE), NONE])
        return NONE
    return _same(of, [units_of(item, known, wanted) for item in of.arguments])


def _same(of: Call, found: list[Dimension]) -> Dimension:
    for other in found[1:]:
        if other != found[0]:
            problem = f"'{of.name}' of {named(found[0])} and {named(other)}"
            raise QuantityError(problem, at=of.at, length=of.length)
    return found[0]


def _root(of: Call, found: Dimension) -> Dimension:
    if any(power % 2 for power in found):
        raise QuantityError(f"'sqrt' of {named(found)} is no quantity", at=of.at, length=of.length)
    a, b, c, d, e = (power // 2 for power in found)
    return a, b, c, d, e


def _interpolated(of: Call, known: Known, wanted: Dimension | None) -> Dimension:
    if len(of.arguments) % 2 == 0:
        expected = "interpolate(x, x1, y1, x2, y2)"
        raise QuantityError("a point of 'interpolate' is half", at=of.at, length=of.length, expected=expected)
    first = units_of(of.arguments[1], known, None)
    _same(of, [units_of(of.arguments[0], known, first), *(units_of(item, known, first) for item in of.arguments[1::2])])
    return _same(of, [units_of(item, known, wanted) for item in of.arguments[2::2]])
