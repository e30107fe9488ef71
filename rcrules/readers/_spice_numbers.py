"""Numbers of a SPICE deck: a suffix scales them, and means something else than on a schematic (``M`` is milli)."""

import re
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

_NUMBER: Final = re.compile(
    r"([+-]?(?:\d{1,400}\.?\d{0,400}|\.\d{1,400})(?:e[+-]?\d{1,4})?)([^\W\d_]*)(.*)", re.IGNORECASE
)
_SUFFIXES: Final = tuple(
    (name, Decimal(factor))
    for name, factor in (
        *(("meg", "1e6"), ("mil", "25.4e-6"), ("t", "1e12"), ("g", "1e9"), ("k", "1e3"), ("m", "1e-3")),
        *(("u", "1e-6"), ("µ", "1e-6"), ("μ", "1e-6"), ("n", "1e-9"), ("p", "1e-12"), ("f", "1e-15")),
    )
)
"""In the order in which they are looked for: ``MEG`` and ``MIL`` before ``M``."""
_DOUBTED: Final = {
    "Ω": (re.compile(r"[\d.]+M(?![Ee][Gg]|[Ii][Ll])", re.ASCII), "milliohms", "MEG for megohms"),
    "F": (re.compile(r"[\d.]+F", re.ASCII), "femtofarads", "the number without F for farads"),
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Number:
    """What a word of a deck says."""

    value: float
    trap: str = ""
    """Why simulators do not agree on it, '' where they do."""


def number(word: str) -> Number | None:
    """``1.5MegOhm`` is 1.5e6, ``10M`` is 0.01, ``10F`` is 1e-14; None where the word is no number."""
    found = _NUMBER.fullmatch(word)
    if found is None:
        return None
    digits, letters, rest = found[1], found[2].lower(), found[3]
    scale = next((factor for name, factor in _SUFFIXES if letters.startswith(name)), Decimal(1))
    trap = ""
    if rest[:1].isdigit():
        trap = f"digits after a suffix, as in {word!r}, are decimals for some simulators and ignored by others"
    elif rest:
        return None
    elif letters == "a":
        trap = f"{word!r} is 1e-18 for some simulators and 1 for others"
    value = float(Decimal(digits) * scale)
    return Number(value=value, trap=trap) if abs(value) < float("inf") else None


def doubt(word: str, unit: str) -> str:
    """Why a resistance [Ω] or capacitance [F] probably is not what was meant, '' where nothing tells so."""
    if unit not in _DOUBTED:
        return ""
    pattern, meaning, instead = _DOUBTED[unit]
    return f"{word!r} is in {meaning} here; write {instead}" if pattern.match(word) else ""
