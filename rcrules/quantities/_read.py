"""Reads quantities: number, unit, tolerance, range.

quantity  = amount [tolerance] | amount ".." amount
amount    = number [unit]                     (the first amount of a range may leave its unit to the second)
tolerance = ("+/-" | "±") amount | "-" amount "+" amount | "+" amount "-" amount
"""

import re
from dataclasses import dataclass, replace
from math import isfinite
from typing import Final

from rcrules.quantities._model import QuantityError, Spread, UnknownUnitError
from rcrules.quantities._units import QUANTITY_NAMES, SAMPLES, meant, parse_unit

_LONGEST: Final = 200
_NUMBER: Final = re.compile(r"[+-]?(?:[0-9]{1,40}(?:\.(?!\.)[0-9]{0,40})?|\.(?!\.)[0-9]{1,40})(?:[eE][+-]?[0-9]{1,4})?")
_LETTERS: Final = "[A-Za-zµμΩ\u2126°\u2103%]{1,40}"
_UNIT: Final = re.compile(rf"{_LETTERS}(?:/{_LETTERS})?")
_DOTS: Final = re.compile(r"\.\.|…")
_BLANKS: Final = re.compile(r"\s*")


@dataclass(frozen=True, slots=True, kw_only=True)
class _Amount:
    value: float
    unit: str
    factor: float
    bare: bool
    """No unit written."""
    percent: bool
    at: int
    end: int


def parse_quantity(text: str, unit: str | None = None) -> Spread:
    """Read ``1.2 ms``, ``3.3 V +/- 3 %``, ``100 nF -20 % +80 %``, ``-20 degC .. 60 degC``, ``5 %`` (0.05), ``12``.

    unit: the SI unit expected, or None for any. Raises QuantityError.
    """
    if len(text) > _LONGEST:
        raise QuantityError("too long for a quantity", at=_LONGEST, expected=f"at most {_LONGEST} characters")
    plain = text.replace("−", "-")
    try:
        spread, first = _quantity(plain)
    except UnknownUnitError as error:
        if unit is None or "/" in error.spelling:
            raise
        raise QuantityError(
            error.problem, at=error.at, length=error.length, expected=meant(error.spelling, unit)
        ) from None
    _check_unit(spread, unit, first, len(plain))
    return spread


def _quantity(plain: str) -> tuple[Spread, _Amount]:
    """The whole quantity, and its first amount."""
    first = _amount(plain, 0)
    rest = _skip(plain, first.end)
    dots = _DOTS.match(plain, rest)
    if dots is not None:
        spread = _range(plain, first, dots.end())
    elif rest < len(plain):
        spread = _with_tolerance(plain, first, rest)
    else:
        spread = Spread(low=first.value, nominal=first.value, high=first.value, unit=first.unit)
    return spread, first


def _skip(text: str, at: int) -> int:
    blanks = _BLANKS.match(text, at)
    return blanks.end() if blanks else at


def _amount(text: str, at: int) -> _Amount:
    at = _skip(text, at)
    number = _NUMBER.match(text, at)
    if number is None:
        shown = f"'{text[at : at + 20]}'" if at < len(text) else "the text ends here"
        raise QuantityError(f"no number: {shown}", at=at, expected="a number, such as 3.3")
    end = number.end()
    _refuse_comma(text, at, end)
    unit_at = _skip(text, end)
    spelt = _UNIT.match(text, unit_at)
    if spelt is None:
        return _finite(_Amount(value=float(number[0]), unit="1", factor=1.0, bare=True, percent=False, at=at, end=end))
    try:
        unit, factor = parse_unit(spelt[0])
    except QuantityError as error:
        raise error.moved(unit_at) from None
    value = _scaled(number[0], factor)
    percent = spelt[0] == "%"
    return _finite(_Amount(value=value, unit=unit, factor=factor, bare=False, percent=percent, at=at, end=spelt.end()))


def _scaled(number: str, factor: float) -> float:
    """The number times the factor, correctly rounded for the decimal prefixes: 4.7 µ is 4.7e-6, not a neighbour."""
    power = f"{factor:e}"
    if power.startswith("1.000000e"):
        digits, _, exponent = number.lower().partition("e")
        return float(f"{digits}e{int(exponent or 0) + int(power[9:])}")
    return float(number) * factor


def _refuse_comma(text: str, at: int, end: int) -> None:
    if text[end : end + 1] == "," and text[end + 1 : end + 2].isdigit():
        point = text[at:end] + "." + text[end + 1 : end + 7]
        raise QuantityError("decimal comma", at=end, expected=f"a decimal point, such as '{point}'")


def _finite(amount: _Amount) -> _Amount:
    if not isfinite(amount.value):
        length = amount.end - amount.at
        raise QuantityError("number too large", at=amount.at, length=length, expected="a number below 1e300")
    return amount


def _range(text: str, first: _Amount, at: int) -> Spread:
    second = _amount(text, at)
    _end_of(text, second.end)
    low, unit = (first.value * second.factor, second.unit) if first.bare else (first.value, first.unit)
    if unit != second.unit and not (second.bare and second.value == 0):
        problem = f"'{unit}' and '{second.unit}' in one range"
        raise QuantityError(problem, at=second.at, length=second.end - second.at, expected="both ends in the same unit")
    if second.value < low:
        length = second.end - first.at
        raise QuantityError("the range runs downwards", at=first.at, length=length, expected="the low end first")
    return Spread(low=low, nominal=low + (second.value - low) / 2, high=second.value, unit=unit)


def _with_tolerance(text: str, first: _Amount, at: int) -> Spread:
    for sign in ("+/-", "±", "+-"):
        if text.startswith(sign, at):
            both = _amount(text, at + len(sign))
            _end_of(text, both.end)
            step = _difference(first, both)
            return _between(first, -step, step, both)
    if text[at] not in "+-":
        raise _unexpected(text, at)
    one, other = _signed(text, at)
    steps = [_difference(first, one), _difference(first, other)]
    if steps[0] * steps[1] > 0:
        raise QuantityError("two tolerances of the same sign", at=other.at, expected="one with - and one with +")
    return _between(first, min(steps), max(steps), other)


def _signed(text: str, at: int) -> tuple[_Amount, _Amount]:
    one = _signed_amount(text, at)
    second_at = _skip(text, one.end)
    if second_at >= len(text) or text[second_at] not in "+-":
        raise QuantityError("half a tolerance", at=one.end, expected="both sides, such as -20 % +80 %, or +/- 20 %")
    other = _signed_amount(text, second_at)
    _end_of(text, other.end)
    return one, other


def _signed_amount(text: str, at: int) -> _Amount:
    """An amount whose sign may stand apart: ``- 20 %``."""
    amount = _amount(text, at + 1)
    return replace(amount, value=-amount.value if text[at] == "-" else amount.value, at=at)


def _difference(first: _Amount, step: _Amount) -> float:
    """The step in the unit of the value: relative where it is a ratio, K for temperatures."""
    length = step.end - step.at
    if first.unit == "degC":
        if step.unit != "K":
            problem = "a temperature with a step that is not in K"
            raise QuantityError(problem, at=step.at, length=length, expected="+/- 5 K")
        return step.value
    if step.unit == "1" and not step.bare:
        if first.unit == "1" and not first.bare:
            problem = "a percentage of a percentage"
            raise QuantityError(problem, at=step.at, length=length, expected="a range, low .. high")
        return abs(first.value) * step.value
    if step.unit != first.unit:
        problem = f"a tolerance in '{step.unit}' on a value in '{first.unit}'"
        raise QuantityError(problem, at=step.at, length=length, expected=f"% or {first.unit}")
    return step.value


def _between(first: _Amount, below: float, above: float, step: _Amount) -> Spread:
    if below > above:
        raise QuantityError("a negative tolerance", at=step.at, length=step.end - step.at, expected="a positive number")
    return Spread(low=first.value + below, nominal=first.value, high=first.value + above, unit=first.unit)


def _end_of(text: str, at: int) -> None:
    at = _skip(text, at)
    if at < len(text):
        raise _unexpected(text, at)


def _unexpected(text: str, at: int) -> QuantityError:
    found = text[at : at + 20]
    expected = "the end, '..' and the high end, or a tolerance such as '+/- 5 %'"
    return QuantityError(f"'{found}' not understood", at=at, length=len(text) - at, expected=expected)


def _check_unit(spread: Spread, unit: str | None, first: _Amount, length: int) -> None:
    if unit is None or spread.unit == unit:
        return
    wanted, found = QUANTITY_NAMES.get(unit, unit), QUANTITY_NAMES[spread.unit]
    problem = f"no unit where a {wanted} goes" if first.bare else f"a {found} where a {wanted} goes"
    expected = f"such as '{SAMPLES.get(unit, '1 ' + unit)}'"
    raise QuantityError(problem, at=first.at, length=length - first.at, expected=expected)
