"""Whether an expression makes sense: every name known, every function called rightly, dimensions that fit."""

from collections.abc import Iterable
from difflib import get_close_matches
from typing import Final

from rcrules.expressions._dimensions import NONE, POINT, STEP, Dimension, dimension_of, named, raised, times
from rcrules.expressions._known import FUNCTIONS, SHOWN, Known
from rcrules.expressions._tree import Binary, Broken, Call, Expression, Name, Number, Power, Text, below, text_of
from rcrules.quantities import QuantityError

_DIFFERENCE: Final = "a difference in K, such as temperature_high - 25 degC"


def units_of(of: Expression, known: Known, wanted: Dimension | None = None) -> Dimension | None:
    """The dimension; None where a mistake leaves it open. Mistakes are noted, each at the place that is wrong.

    wanted: what it must be, where that is known.
    """
    match of:
        case Number():
            return dimension_of(of.unit)
        case Text():
            known.note(
                QuantityError("a text is no number", at=of.at - 1, length=len(of.value) + 2, expected="a number")
            )
            return None
        case Name():
            return _name(of, known, wanted)
        case Call():
            return _call(of, known, wanted)
        case Broken():
            for item in below(of):
                units_of(item, known)
            return None
        case Binary(sign="+" | "-"):
            return _sum(of, known, wanted)
        case Binary():
            return _product(of, known, wanted)
        case Power():
            return _power(of, known)
    return _scaled(of.of, units_of(of.of, known, wanted), known)


def _name(of: Name, known: Known, wanted: Dimension | None) -> Dimension | None:
    if of.name in known.names:
        return dimension_of(known.names[of.name])
    if of.name in known.learned:
        return known.learned[of.name]
    if of.name in known.free:
        if wanted is not None:
            known.learned[of.name] = wanted
        elif not known.mistakes:
            problem = f"of what dimension '{of.name}' is cannot be told here"
            expected = f'a number of a known unit beside it, or given = {{ {of.name} = "ask in V" }}'
            known.note(QuantityError(problem, at=of.at, length=len(of.name), expected=expected))
        return wanted
    if of.name in known.calls:
        return dimension_of(known.calls[of.name])
    everything = [*known.names, *known.free, *known.calls, *FUNCTIONS]
    problem = f"no fact, number or measure is called '{of.name}'{_guess(of.name, everything)}"
    expected = f'a measure, a fact such as supply_high, or given = {{ {of.name[:40]} = "ask" }}'
    known.note(QuantityError(problem, at=of.at, length=len(of.name), expected=expected))
    return None


def _guess(name: str, everything: list[str]) -> str:
    near = get_close_matches(name, everything, n=1)
    return f"; did you mean '{near[0]}'?" if near else ""


def _is_free(of: Expression, known: Known) -> bool:
    return isinstance(of, Name) and of.name in known.free and of.name not in known.learned


def _sum(of: Binary, known: Known, wanted: Dimension | None) -> Dimension | None:
    if _is_free(of.left, known):
        right = units_of(of.right, known, wanted)
        left = units_of(of.left, known, right if of.sign == "+" else wanted or right)
    else:
        left = units_of(of.left, known, wanted)
        right = units_of(of.right, known, STEP if left == POINT and wanted in (None, POINT) else left)
    if left is None or right is None:
        return left or right
    if left == POINT and right == STEP:
        return POINT
    if (left, right, of.sign) in ((POINT, POINT, "-"), (STEP, POINT, "+")):
        return STEP if of.sign == "-" else POINT
    if left == right != POINT:
        return left
    known.note(_unlike(of, left, right))
    return None


def _unlike(of: Binary, left: Dimension, right: Dimension) -> QuantityError:
    if left == right:
        problem = f"'{text_of(of.left)}' and '{text_of(of.right)}' are two temperatures, which cannot be added"
        return QuantityError(
            problem, at=of.at, expected="a difference in K on one side, such as temperature_high + 10 K"
        )
    word = "added to" if of.sign == "+" else "taken from"
    first, second = (of.left, left), (of.right, right)
    (one, unit), (other, beside) = (second, first) if of.sign == "-" else (first, second)
    problem = f"'{text_of(one)}' is {named(unit)}, which cannot be {word} '{text_of(other)}', {named(beside)}"
    return QuantityError(problem, at=of.at, expected="two quantities of one kind")


def _product(of: Binary, known: Known, wanted: Dimension | None) -> Dimension | None:
    power = 1 if of.sign == "*" else -1
    asked = None
    if wanted is not None and _is_free(of.left, known):
        beside = units_of(of.right, known, None)
        asked = None if beside is None else times(wanted, beside, -power)
    left = _scaled(of.left, units_of(of.left, known, asked), known)
    if wanted is None or left is None:
        asked = None
    else:
        asked = times(wanted, left, -1) if power == 1 else times(left, wanted, -1)
    right = _scaled(of.right, units_of(of.right, known, asked), known)
    return None if left is None or right is None else times(left, right, power)


def _scaled(of: Expression, found: Dimension | None, known: Known) -> Dimension | None:
    """Of a temperature on its scale only differences can be multiplied, turned or raised."""
    if found != POINT:
        return found
    problem = f"'{text_of(of)}' is a temperature on its scale, which has no multiples"
    known.note(QuantityError(problem, at=_begin(of), length=max(_length(of), 1), expected=_DIFFERENCE))
    return None


def _begin(of: Expression) -> int:
    inner = below(of)
    return min([of.at, *(_begin(item) for item in inner)]) if inner and not isinstance(of, Call) else of.at


def _length(of: Expression) -> int:
    return len(of.name) if isinstance(of, Name | Call) else len(of.text) if isinstance(of, Number) else 1


def _power(of: Power, known: Known) -> Dimension | None:
    found = _scaled(of.of, units_of(of.of, known), known)
    if of.by is not None:
        return _plainly(of, of.by, found, known)
    if of.exponent is None:
        return None
    power = None if found is None else raised(found, of.exponent)
    if found is not None and power is None:
        problem = f"'{text_of(of.of)}' is {named(found)}, whose power {of.text} is no quantity"
        known.note(QuantityError(problem, at=of.at, expected="a whole number, or a plain number to be raised"))
    return power


def _plainly(of: Power, by: Expression, found: Dimension | None, known: Known) -> Dimension | None:
    """With a name as exponent both are plain numbers: what comes out must have a dimension whatever the number is."""
    exponent = units_of(by, known, NONE)
    for item, dimension in ((of.of, found), (by, exponent)):
        if dimension is not None and dimension != NONE:
            problem = f"'{text_of(item)}' is {named(dimension)} in a power whose exponent is a name"
            known.note(QuantityError(problem, at=_begin(item), length=max(_length(item), 1), expected="a plain number"))
            return None
    return NONE


def _call(of: Call, known: Known, wanted: Dimension | None) -> Dimension | None:
    if of.name in FUNCTIONS:
        return _function(of, known, wanted)
    if of.name not in known.calls:
        problem = f"no function or measure is called '{of.name}'{_guess(of.name, [*known.calls, *FUNCTIONS])}"
        expected = f"a measure (rcrules rules --measures lists them), or {', '.join(FUNCTIONS)}"
        known.note(QuantityError(problem, at=of.at, length=of.length, expected=expected))
        _each(of.arguments, known)
        return None
    if of.arguments:
        expected = 'options only, such as delay(to = "1.2 V")'
        known.note(
            QuantityError(f"'{of.name}' takes no plain arguments", at=of.at, length=of.length, expected=expected)
        )
    elif known.check_call is not None:
        try:
            known.check_call(of)
        except QuantityError as error:
            known.note(error)
    return dimension_of(known.calls[of.name])


def _function(of: Call, known: Known, wanted: Dimension | None) -> Dimension | None:
    least, most = FUNCTIONS[of.name]
    if of.options or len(of.arguments) < least or (most is not None and len(of.arguments) > most):
        count = f"{least}" if least == most else f"{least} or more"
        plural = "" if count == "1" else "s"
        problem = f"'{of.name}' takes {count} argument{plural}"
        known.note(QuantityError(problem, at=of.at, length=of.length, expected=SHOWN[of.name]))
        return None
    if of.name == "interpolate":
        return _interpolated(of, known, wanted)
    if of.name in ("min", "max"):
        return _same(of, _each(of.arguments, known, wanted), known)
    inner = {"log": NONE, "abs": wanted, "sqrt": None if wanted is None else times(wanted, wanted)}[of.name]
    found = _scaled(of.arguments[0], units_of(of.arguments[0], known, inner), known)
    if of.name == "log":
        return _same(of, [found, NONE], known)
    return _root(of, found, known) if of.name == "sqrt" else found


def _each(items: Iterable[Expression], known: Known, wanted: Dimension | None = None) -> list[Dimension | None]:
    return [units_of(item, known, wanted) for item in items]


def _same(of: Call, found: Iterable[Dimension | None], known: Known) -> Dimension | None:
    """The one dimension of all; what is open fits everything."""
    told = [item for item in found if item is not None]
    for other in told[1:]:
        if other != told[0]:
            problem = f"'{of.name}' of {named(told[0])} and {named(other)}"
            known.note(QuantityError(problem, at=of.at, length=of.length, expected="quantities of one kind"))
            return None
    return told[0] if told else None


def _root(of: Call, found: Dimension | None, known: Known) -> Dimension | None:
    root = None if found is None else raised(found, 0.5)
    if found is not None and root is None:
        problem, expected = f"'sqrt' of {named(found)} is no quantity", "a square, such as V * V"
        known.note(QuantityError(problem, at=of.at, length=of.length, expected=expected))
    return root


def _interpolated(of: Call, known: Known, wanted: Dimension | None) -> Dimension | None:
    if len(of.arguments) % 2 == 0:
        problem = "a point of 'interpolate' is half"
        known.note(QuantityError(problem, at=of.at, length=of.length, expected=SHOWN[of.name]))
        return None
    first = units_of(of.arguments[1], known)
    _same(of, _each((of.arguments[0], *of.arguments[1::2]), known, first), known)
    return _same(of, _each(of.arguments[2::2], known, wanted), known)
