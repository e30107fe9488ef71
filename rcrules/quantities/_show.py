"""Shows SI numbers the way engineers write them."""

from decimal import Decimal
from math import isinf, isnan
from typing import Final

from rcrules.quantities._units import SPELLINGS

_LETTERS: Final = {-15: "f", -12: "p", -9: "n", -6: "µ", -3: "m", 0: "", 3: "k", 6: "M", 9: "G", 12: "T"}
_LEAST: Final = min(_LETTERS)
_PREFIXED: Final = frozenset(("V", "A", "Ω", "F", "s", "Hz", "W", "J", "C", "H", "m", "Ω/V", "s/V", "A/V", "V/K"))
_TIMES: Final = ((2, "year"), (2, "day"), (2, "h"), (1, "min"))
"""Long times: from how many of it a unit is used."""


def show(value: float, unit: str, digits: int = 3) -> str:
    """``show(1.2e-3, "s") == "1.2 ms"``; infinity is 'never' for times and 'unlimited' otherwise.

    unit: an SI unit as in Spread, or ``%`` to show a ratio as a percentage.
    """
    if isnan(value):
        return "undefined"
    if isinf(value):
        return ("-" if value < 0 else "") + ("never" if unit == "s" else "unlimited")
    if unit == "1":
        return _number(value, digits)
    if value == 0:
        return f"0 {_named(unit)}"
    if unit in _PREFIXED:
        return _long_time(value, digits) if unit == "s" and abs(value) >= 1000 else _prefixed(value, unit, digits)
    factor, named = _scale(value, unit)
    return f"{_number(value / factor, digits)} {named}"


def _named(unit: str) -> str:
    return {"degC": "°C", "1/K": "ppm/K"}.get(unit, unit)


def _scale(value: float, unit: str) -> tuple[float, str]:
    """Divisor and name for the units that take no prefix in front."""
    if unit == "V/s":
        return next(((f, n) for f, n in ((1e6, "V/µs"), (1e3, "V/ms")) if abs(value) >= 0.1 * f), (1.0, unit))
    return {"%": 0.01, "1/K": 1e-6}.get(unit, 1.0), _named(unit)


def _long_time(value: float, digits: int) -> str:
    for least, name in _TIMES:
        factor = SPELLINGS[name][1]
        if abs(value) >= least * factor:
            return f"{_number(value / factor, digits)} {name}"
    return _prefixed(value, "s", digits)


def _prefixed(value: float, unit: str, digits: int) -> str:
    rounded = _rounded(value, digits)
    power = rounded.adjusted() // 3 * 3
    if unit == "F" and power == -3 and rounded.adjusted() == -3:
        power = -6
    if power == _LEAST - 3:
        power = _LEAST
    if power not in _LETTERS:
        return f"{_number(value, digits)} {unit}"
    return f"{_plain(rounded.scaleb(-power))} {_LETTERS[power]}{unit}"


def _rounded(value: float, digits: int) -> Decimal:
    return Decimal(f"{value:.{max(digits, 1) - 1}e}")


def _plain(number: Decimal) -> str:
    text = f"{number:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def _number(value: float, digits: int) -> str:
    if value == 0:
        return "0"
    rounded = _rounded(value, digits)
    if -5 <= rounded.adjusted() <= 7:
        return _plain(rounded)
    mantissa, _, exponent = f"{value:.{max(digits, 1) - 1}e}".partition("e")
    return f"{_plain(Decimal(mantissa))}e{int(exponent)}"
