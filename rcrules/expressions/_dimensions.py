"""Dimensions of SI units: powers of volt, ampere, second, kelvin and metre, and whether they are points of a scale."""

from typing import Final

from rcrules.quantities import QUANTITY_NAMES, show

Dimension = tuple[int, int, int, int, int, int]
"""The last is 1 for a temperature in degC: a point of a scale, it takes differences in K and no factor."""
NONE: Final[Dimension] = (0, 0, 0, 0, 0, 0)
STEP: Final[Dimension] = (0, 0, 0, 1, 0, 0)
"""A temperature difference, in K."""
POINT: Final[Dimension] = (0, 0, 0, 1, 0, 1)
"""A temperature, in degC."""
_BASE: Final[dict[str, Dimension]] = {
    "1": NONE,
    "bit": NONE,
    "V": (1, 0, 0, 0, 0, 0),
    "A": (0, 1, 0, 0, 0, 0),
    "s": (0, 0, 1, 0, 0, 0),
    "K": STEP,
    "degC": POINT,
    "m": (0, 0, 0, 0, 1, 0),
    "Ω": (1, -1, 0, 0, 0, 0),
    "F": (-1, 1, 1, 0, 0, 0),
    "H": (1, -1, 1, 0, 0, 0),
    "Hz": (0, 0, -1, 0, 0, 0),
    "W": (1, 1, 0, 0, 0, 0),
    "J": (1, 1, 1, 0, 0, 0),
    "C": (0, 1, 1, 0, 0, 0),
}
_SYMBOLS: Final = ("V", "A", "s", "K", "m")


def dimension_of(unit: str) -> Dimension:
    """Of ``V/s`` (1, 0, -1, 0, 0, 0)."""
    above, slash, below = unit.partition("/")
    found = _BASE[above]
    return times(found, _BASE[below], -1) if slash else found


def times(one: Dimension, other: Dimension, power: int = 1) -> Dimension:
    """Of a product; with power -1 of a quotient."""
    a, b, c, d, e, point = (first + power * second for first, second in zip(one, other, strict=True))
    return a, b, c, d, e, point


def raised(of: Dimension, power: float) -> Dimension | None:
    """Of a power; None where that is no quantity, such as the root of a voltage."""
    found = [item * power for item in of]
    if any(item != round(item) for item in found):
        return None
    a, b, c, d, e, point = (round(item) for item in found)
    return a, b, c, d, e, point


def unit_of(dimension: Dimension) -> str:
    """The SI unit as the tables name it; powers spelled out where there is none."""
    known = {dimension_of(unit): unit for unit in reversed(QUANTITY_NAMES) if unit != "bit"}
    if dimension in known:
        return known[dimension]
    return "·".join(_power(symbol, power) for symbol, power in zip(_SYMBOLS, dimension[:-1], strict=True) if power)


def _power(symbol: str, power: int) -> str:
    return symbol if power == 1 else f"{symbol}^{power}"


def named(dimension: Dimension) -> str:
    """``a time``, ``an energy``, ``a quantity in V^2``."""
    unit = unit_of(dimension)
    name = QUANTITY_NAMES.get(unit, f"quantity in {unit}")
    return f"{'an' if name[0] in 'aeiou' else 'a'} {name}"


def shown(value: float, dimension: Dimension) -> str:
    """A number with its unit, whatever that is."""
    unit = unit_of(dimension)
    return show(value, unit) if unit in QUANTITY_NAMES else f"{show(value, '1')} {unit}"
