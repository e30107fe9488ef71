"""Tells what kind of part a part is, and why: reference letters, symbol, value, footprint, description together."""

import re
import unicodedata
from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from itertools import pairwise, zip_longest
from typing import Final, Literal

from rcrules.design import Part
from rcrules.names import tokens
from rcrules.parts._kind_words import ARRAY_WORDS, EITHER, PREFIXES, WORDS
from rcrules.parts._texts import read_value

_LETTERS: Final = re.compile(r"[^\W\d_]+")
_VALUED: Final = ("resistor", "capacitor")
_FOR_ARRAYS: Final = re.compile(r"(?<![\d.])[248]\s?x\s?0[2-8]0[1-5]|(?:^|_)ARRAY_", re.IGNORECASE)
_IMPEDANCE: Final = re.compile(r"\d\s?(?:R|ohms?|Ω)?\s?(?:[@/]|(?<=[RMSΩ])\s)\s?100\s?MHz", re.IGNORECASE)
_VARISTOR: Final = re.compile(r"\d{1,2}D\d{3}[JKL]?", re.IGNORECASE)
"""Trade type numbers: diameter, and the voltage as a digit code."""
_LEAST_IMPEDANCE: Final = 10.0
"""[Ω] of a ferrite bead at 100 MHz."""
_MANY_PINS: Final = 5
"""A diode or an unnamed part with this many pins is an integrated circuit."""
_PLAIN: Final = frozenset(("resistor", "capacitor", "inductor"))
"""Kinds that a footprint does not tell: an LED may sit on the pads of a resistor."""
_SEVERAL_PINS: Final = frozenset(("ic", "connector", "transformer", "contact", "transistor"))
"""Kinds with many pins that a description or a library may name."""
_LEADING: Final = 5
"""Words at the start of a description that may name the part."""


@dataclass(frozen=True, slots=True, kw_only=True)
class _Written:
    """What a part has in common with all parts written alike."""

    letters: str
    """Of the reference, in capitals."""
    values: tuple[str, ...]
    symbol: str
    footprint: str
    description: str
    pins: int
    """Pins with different numbers."""


def kind_of(part: Part) -> tuple[str, str]:
    """(kind, why): one of vocabulary.PART_KINDS, and the evidence in words."""
    return _kind(
        _Written(
            letters=prefix(part.ref),
            values=tuple(fact.text for fact in part.values),
            symbol=part.symbol,
            footprint=part.footprint,
            description=part.description,
            pins=len({pin.number for pin in part.pins}),
        )
    )


@lru_cache(maxsize=16384)
def _kind(part: _Written) -> tuple[str, str]:
    usual = PREFIXES.get(part.letters)
    if usual in _VALUED and part.letters in ("R", "C"):
        return _valued(part, usual)
    return _unusual(part) if usual is None else _usual(part, usual)


def _usual(part: _Written, usual: str) -> tuple[str, str]:
    """References whose letters name a kind: it stands unless the part's own words name one that shares the letters."""
    why, pins = f"reference {part.letters}", part.pins
    if part.letters == "D" and pins > _MANY_PINS and not _names(part, "diode"):
        return "ic", f"{why} with {pins} pins"
    if usual == "thermistor" and _names(part, "fuse"):
        return "fuse", f"called a resettable fuse, {why}"
    if usual == "resistor-array" and pins == 2:
        return "resistor", f"{why} with 2 pins"
    told = _told_by_value(part, usual)
    if told:
        return told, f"value '{part.values[0][:40]}', {why}"
    others = EITHER[usual] - ({"connector"} if usual == "mechanical" and pins < 2 else set())
    for place, words in _evidence(part):
        if usual == "connector" and place.startswith("value") and not words & WORDS["crystal"]:
            continue
        if place.startswith("library"):
            continue
        kind = _kind_of_words(words, (others - {"ic"} if place == "description" else others) | {usual})
        if kind == usual and place != "footprint":
            break
        if kind not in (None, usual):
            return kind or usual, f"{place}, {why}"
    return usual, why


def _told_by_value(part: _Written, usual: str) -> str | None:
    """What the value alone tells: an impedance is a ferrite's, a diameter with a voltage code a varistor's."""
    if usual == "inductor" and any(map(_impedance, part.values)):
        return "ferrite"
    if usual in ("potentiometer", "varistor", "resistor") and any(map(_VARISTOR.fullmatch, part.values)):
        return "varistor"
    symbol = _listed(part.symbol.rpartition(":")[2])
    if usual == "connector" and symbol[:1] in (("R",), ("C",)) and ARRAY_WORDS.intersection(symbol):
        return "resistor-array" if symbol[0] == "R" else "capacitor-array"
    return None


def _impedance(text: str) -> bool:
    """``600R@100MHz``, ``220R``; but 2R2 and 4R7 are microhenries."""
    return (
        _IMPEDANCE.search(text) is not None
        or (read_value(text, "resistor", bare=False).value or 0.0) >= _LEAST_IMPEDANCE
    )


def _reads(text: str, kind: str) -> bool:
    """Whether a text with a unit is a value of a kind, or may be one."""
    read = read_value(text, _as(kind), bare=False)
    return read.value is not None or "may be" in read.why_unknown


def _valued(part: _Written, usual: str) -> tuple[str, str]:
    """R and C: the letters stand unless symbol or value name another kind."""
    why = f"reference {part.letters}"
    reads = any(read_value(text, _as(usual)).value is not None for text in part.values)
    array = _array(part, usual, reads=reads)
    if array:
        return f"{usual}-array", f"{array}, {why}"
    telling = EITHER[usual] - ({"jumper", "net-tie", "fuse", "ferrite", "inductor"} if reads else set())
    for place, words in _evidence(part):
        if place == "footprint" or (place == "description" and words & WORDS[usual]):
            continue
        kind = _kind_of_words(words, EITHER[usual] if place.startswith("symbol") else telling)
        if kind is not None:
            return kind, f"{place}, {why}"
    if _told_by_value(part, usual):
        return "varistor", f"value '{part.values[0][:40]}', {why}"
    if usual == "resistor" and any(_IMPEDANCE.search(text) for text in part.values):
        return "ferrite", f"value with impedance at 100 MHz, {why}"
    return usual, why


def _array(part: _Written, usual: str, *, reads: bool) -> str:
    """Why several elements are in one body, '' when they are not."""
    texts = (part.symbol.rpartition(":")[2], part.footprint, *part.values)
    if any(_words(text) & ARRAY_WORDS for text in texts[:1] + texts[2:]) or any(map(_FOR_ARRAYS.search, texts)):
        return "named an array"
    if part.pins != 2 and any(read_value(text, _as(usual)).count for text in part.values):
        return "value of several elements"
    if part.pins > 4 or (part.pins == 4 and usual == "resistor" and reads and not _shunt(part)):
        return f"{part.pins} pins"
    return ""


def _shunt(part: _Written) -> bool:
    """A four-terminal current shunt: below 1 Ω."""
    values = [read_value(text, "resistor").value for text in part.values]
    return any(value is not None and value < 1 for value in values)


def _unusual(part: _Written) -> tuple[str, str]:
    """References whose letters say nothing: the words decide, then the value, then the number of pins."""
    many = part.pins > _MANY_PINS
    if any(map(_IMPEDANCE.search, part.values)):
        return "ferrite", "value with impedance at 100 MHz"
    for place, words in _evidence(part):
        general = place == "description" or place.startswith("library")
        untold = _PLAIN if place == "footprint" else frozenset()
        kind = _kind_of_words(words, _SEVERAL_PINS if general and many else frozenset(WORDS) - untold)
        if kind in _PLAIN:
            lead = frozenset(_listed(part.description)[:_LEADING])
            kind = _kind_of_words(lead, EITHER[kind]) or kind
        if kind is not None:
            return kind, place
    for kind in _VALUED:
        if kind[0].upper() in part.letters and any(_reads(text, kind) for text in part.values):
            variable = part.letters == "VR" and part.pins == 3
            told = "potentiometer" if variable else f"{kind}-array" if many else kind
            return told, f"value, reference {part.letters}"
    if many:
        return "ic", f"{part.pins} pins"
    return "other", "nothing tells its kind"


def _as(kind: str) -> Literal["resistor", "capacitor"]:
    return "resistor" if kind == "resistor" else "capacitor"


def _names(part: _Written, kind: str) -> bool:
    return any(words & WORDS[kind] for _, words in _evidence(part))


def _evidence(part: _Written) -> Iterator[tuple[str, frozenset[str]]]:
    """Words of each text about the part, the most telling first."""
    library, _, symbol = part.symbol.rpartition(":")
    yield f"symbol {symbol}", _words(symbol)
    for text in part.values:
        yield f"value '{text[:40]}'", _words(text)
    yield "footprint", _words(part.footprint.rpartition(":")[2])
    yield "description", frozenset(_listed(part.description)[:_LEADING])
    for name in (library, part.footprint.rpartition(":")[0]):
        yield f"library {name}", _words(name) - {"R", "C", "L"}


def _kind_of_words(words: frozenset[str], allowed: frozenset[str]) -> str | None:
    return next((kind for kind, named in WORDS.items() if kind in allowed and words & named), None)


def _words(text: str) -> frozenset[str]:
    return frozenset(_listed(text))


@lru_cache(maxsize=65536)
def _listed(text: str) -> tuple[str, ...]:
    """Words in capitals without accents, in order, and neighbours joined: SolderJumper and Net-Tie are one word.

    A single letter counts at the start only: ``R_Small`` is a resistor, ``LCD_C39363`` no capacitor.
    """
    bare = "".join(letter for letter in unicodedata.normalize("NFD", text[:200]) if letter not in "\u0300\u0301\u0308")
    words = tokens(unicodedata.normalize("NFC", bare).replace("{slash}", " ").replace("/", " "))
    joined = (first + second for first, second in pairwise(words))
    pairs = enumerate(zip_longest(words, joined, fillvalue=""))
    return tuple(item for index, pair in pairs for item in pair if index == 0 or len(item) > 1)


@lru_cache(maxsize=65536)
def prefix(ref: str) -> str:
    """``C`` of ``C12``, ``RN`` of ``/sheet/RN3``, in capitals."""
    found = _LETTERS.match(ref.rpartition("/")[2])
    return found[0].upper() if found else ""
