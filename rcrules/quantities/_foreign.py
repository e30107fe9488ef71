"""Units outside our table, for the hint in a message only: a general-purpose unit library knows thousands."""

from functools import lru_cache
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from pint import UnitRegistry

_LONGEST: Final = 20
_SI: Final = {"V": "V", "A": "A", "Ω": "ohm", "F": "F", "s": "s", "Hz": "Hz", "W": "W", "J": "J", "C": "C", "H": "H"}
"""Our SI unit -> its name there."""


@lru_cache(maxsize=1)
def _registry() -> "UnitRegistry[float]":
    import pint

    return pint.UnitRegistry(cache_folder=None)


@lru_cache(maxsize=256)
def worth(name: str) -> tuple[float, str] | None:
    """What one of a foreign unit is in SI: ``"week"`` is (604800.0, "s"); None = not known there, or of no use here.

    Only a bare word of ASCII letters ever reaches the library: expressions of strangers could keep it busy for ever.
    """
    if not (name.isascii() and name.isalpha() and len(name) <= _LONGEST):
        return None
    from pint import UndefinedUnitError

    registry = _registry()
    try:
        one = registry.Quantity(1.0, registry.parse_units(name))
    except (UndefinedUnitError, ValueError):  # a ValueError for words that it takes for numbers, such as nan
        return None
    for ours, theirs in _SI.items():
        if one.is_compatible_with(theirs):
            return float(one.to(theirs).magnitude), ours
    return None
