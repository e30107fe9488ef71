"""Which pins the elements of a resistor or capacitor array join, and how that is known."""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Final

from rcrules.design import Part, Pin
from rcrules.project import PartFacts

Pairs = tuple[tuple[str, str], ...]

_ENDS: Final = re.compile(
    r"(?P<element>[A-Z]*\d+)[._]?(?P<end>[AB12+-])|(?P<end2>[AB])(?P<element2>\d+)", re.IGNORECASE
)
_DOTTED: Final = re.compile(r"(?P<element>.+)[._](?P<end>[AB12+-])", re.IGNORECASE)
_COMMON: Final = frozenset(("COM", "COMMON", "C", "CM", "COMM"))
_BUSSED: Final = re.compile(r"BUSSED|(?<![A-Z])BUS(?![A-Z])|COMMON|(?<![A-Z])STAR|NETWORK\d", re.IGNORECASE)
_IN_LINE: Final = re.compile(r"(?<![A-Z])SI[PL](?![A-Z])|(?<![A-Z])SI[PL]-?\d", re.IGNORECASE)
_FACING: Final = re.compile(
    r"PACK\d|ARRAY|CONVEX|CONCAVE|(?<![A-Z])DI[PL](?![A-Z])|ISOLATED|(?<![\d.])[248]\s?X\s?0[2-8]0[1-5]|(?<![A-Z])CA[TY]\d",
    re.IGNORECASE,
)
_NUMBERED: Final = re.compile(
    r"(?:PACK|NETWORK)0?(?P<a>\d)|(?<![\d.])(?P<b>[248])\s?X\s?(?:0[2-8]0[1-5]|\d)", re.IGNORECASE
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Elements:
    """The elements of an array."""

    pairs: Pairs = ()
    """Pin numbers of each."""
    notes: tuple[str, ...] = ()
    """Why they are not known, with the line that would tell them."""


def elements(part: Part, tables: Iterable[PartFacts], count: int | None) -> Elements:
    """From the project file, pin names, a common pin, or the words of symbol, footprint, value; never by habit.

    count: elements that the value text names, as ``4x10k``.
    """
    given = next((table.elements for table in tables if table.elements), ())
    if given or not part.pins:
        return Elements(pairs=given)
    pins = (*part.pins, *part.open_pins)
    words = " ".join((part.symbol, part.footprint, *(fact.text for fact in part.values), part.description))
    pairs = _by_name(pins) or _common(pins) or _by_words(pins, words, count)
    if pairs:
        return Elements(pairs=pairs)
    line = f'elements = "1-{len(pins)} 2-{max(len(pins) - 1, 3)} …"'
    told = (
        f"its {len(pins)} pins may pair in several ways, so its elements are left out; its [part] can tell them: {line}"
    )
    return Elements(notes=(told,))


def _by_name(pins: Sequence[Pin]) -> Pairs:
    """``R1.1`` and ``R1.2``, ``1A`` and ``1B``, ``A1`` and ``B1``: every pin names its element and its end."""
    groups: dict[str, list[str]] = {}
    for pin in pins:
        found = _DOTTED.fullmatch(pin.name) or _ENDS.fullmatch(pin.name)
        if found is None or pin.name == pin.number:
            return ()
        known = {name: text for name, text in found.groupdict().items() if text is not None}
        groups.setdefault(known.get("element") or known["element2"], []).append(pin.number)
    if len(groups) < 2 or any(len(set(numbers)) != 2 for numbers in groups.values()):
        return ()
    return tuple((first, second) for first, second in groups.values())


def _common(pins: Sequence[Pin]) -> Pairs:
    """A pin called common joins one end of every element."""
    shared = {pin.number for pin in pins if pin.name.upper() in _COMMON}
    if len(shared) != 1:
        return ()
    (common,) = shared
    return tuple((common, number) for number in _numbers(pins) if number != common)


def _by_words(pins: Sequence[Pin], words: str, count: int | None) -> Pairs:
    """Bussed arrays have their common at pin 1, as have those in line with an odd number of pins.

    The pins of an isolated element face each other, or are neighbours in line.
    """
    numbers = _numbers(pins)
    if not all(number.isdecimal() for number in numbers):
        return ()
    named = _NUMBERED.search(words)
    several = count or (int(named["a"] or named["b"]) if named else 0)
    odd_in_line = len(numbers) % 2 == 1 and not several and _IN_LINE.search(words)
    if (_BUSSED.search(words) or odd_in_line) and "1" in numbers:
        return tuple(("1", number) for number in numbers if number != "1")
    whole = 2 * several if several else len(numbers)
    if whole % 2 or int(numbers[-1]) > whole or not (_FACING.search(words) or _IN_LINE.search(words) or several):
        return ()
    if _IN_LINE.search(words):
        pairs = [(number, number + 1) for number in range(1, whole, 2)]
    else:
        pairs = [(number, whole + 1 - number) for number in range(1, whole // 2 + 1)]
    there = set(numbers)
    return tuple((str(a), str(b)) for a, b in pairs if {str(a), str(b)} <= there)


def _numbers(pins: Iterable[Pin]) -> list[str]:
    """Different pin numbers, in order."""
    numbers = dict.fromkeys(pin.number for pin in pins)
    return sorted(numbers, key=lambda number: (len(number), number))
