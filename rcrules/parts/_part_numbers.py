"""Reads facts out of part numbers and descriptions by the patterns of the project."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any, Final

from rcrules.design import Fact, Part
from rcrules.parts._dielectrics import code_of
from rcrules.parts._fields import holds_number, read_field
from rcrules.parts._preferred import digit_code, letter_code, letter_tolerance
from rcrules.parts._texts import ValueKind, ValueText, read_value
from rcrules.parts._voltage_codes import volts
from rcrules.project import NumberField, NumberPattern

BY_PATTERN: Final = " by part-number pattern "
"""Between the origin of the text and the name of the pattern."""
_WORDS: Final = 12
"""Words of one text that are tried."""
_TEXT: Final = {"rated-voltage": "voltage", "rated-power": "power", "tcr": "coefficient", "tolerance": "tolerance"}
_NAMES: Final = {"rated-voltage": "rated_voltage", "rated-power": "rated_power", "tcr": "coefficient"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Stop:
    """Where a text stops fitting a pattern."""

    at: int
    """Characters that fit."""
    expected: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Numbers:
    """What the part numbers of one part say."""

    read: tuple[tuple[ValueText, Fact, str], ...] = ()
    """Facts, the text they come from, and the name of the pattern."""
    stops: tuple[str, ...] = ()
    """Part numbers that start as a pattern does and then differ, in words."""


def numbers(part: Part, kind: ValueKind, patterns: Sequence[NumberPattern]) -> Numbers:
    """Read the part numbers of a resistor or capacitor; of each text the first pattern that fits it or a word of it."""
    read: list[tuple[ValueText, Fact, str]] = []
    stops: list[str] = []
    for pattern in patterns:
        for fact in _texts(part, pattern) if pattern.kind == kind else ():
            if any(done is fact for _, done, _ in read):
                continue
            outcomes = [fitted(pattern, word) for word in _words(fact.text)]
            found = next((outcome for outcome in outcomes if isinstance(outcome, ValueText)), None)
            if found is not None:
                read.append((found, fact, pattern.name))
            else:
                stops += _near(pattern, fact, outcomes)
    return Numbers(read=tuple(read), stops=() if read else tuple(stops))


def _texts(part: Part, pattern: NumberPattern) -> Iterator[Fact]:
    for name, facts in part.fields.items():
        if name in pattern.columns or (not pattern.columns and holds_number(name)):
            yield from facts
    if not pattern.columns or "value" in pattern.columns:
        yield from part.values


def _words(text: str) -> list[str]:
    words = text.replace(",", " ").replace(";", " ").split()[:_WORDS]
    return list(dict.fromkeys((text.strip(), *words)))


def _near(pattern: NumberPattern, fact: Fact, outcomes: Sequence[ValueText | Stop]) -> Iterator[str]:
    """The word that comes furthest, where it passes at least the text that the pattern starts with."""
    for word, outcome in zip(_words(fact.text), outcomes, strict=True):
        if isinstance(outcome, Stop) and pattern.fields[0].what == "text" and outcome.at >= len(pattern.fields[0].text):
            place = f"at character {outcome.at + 1}: expected {outcome.expected}"
            yield f"part number '{word[:60]}' does not fit the pattern '{pattern.name}' {place}"


def fitted(pattern: NumberPattern, text: str) -> ValueText | Stop:
    """The facts of a text that fits a pattern whole; one step a field, from left to right."""
    at = 0
    pieces: list[tuple[NumberField, str, int]] = []
    for field in pattern.fields:
        end, after = _ends(field, text, at)
        if end < 0 or (field.what == "skip" and field.codes is not None and text[at:end] not in field.codes):
            return Stop(at=at, expected=_expected(field))
        pieces.append((field, text[at:end], at))
        at = after
    return _read(pattern, pieces) if at == len(text) else Stop(at=at, expected="the end")


def _read(pattern: NumberPattern, pieces: Sequence[tuple[NumberField, str, int]]) -> ValueText | Stop:
    """The facts of the pieces; the value first, since the tolerance letters of small capacitors depend on it."""
    facts: dict[str, Any] = {}
    for field, written, at in sorted(pieces, key=lambda piece: piece[0].what != "value"):
        if field.what in ("text", "skip"):
            continue
        fact = _fact(field, written, pattern.kind, facts.get("value"))
        if fact is None:
            return Stop(at=at, expected=_expected(field))
        facts[_NAMES.get(field.what, field.what)] = fact
    return ValueText(**facts)


def _ends(field: NumberField, text: str, at: int) -> tuple[int, int]:
    """Where a field ends and where the next one starts; (-1, -1) where it does not fit."""
    if field.what == "text":
        end = at + len(field.text)
        return (end, end) if text[at:end].upper() == field.text.upper() else (-1, -1)
    if field.width is not None:
        end = at + field.width
        return (end, end) if end <= len(text) else (-1, -1)
    if field.until:
        end = text.find(field.until, at)
        return (end, end + len(field.until)) if end >= 0 else (-1, -1)
    return len(text), len(text)


def _fact(field: NumberField, written: str, kind: str, value: float | None) -> Any:
    """The fact that a piece of text stands for; None when it stands for none."""
    if field.codes is not None:
        return field.codes.get(written)
    reads: ValueKind = "resistor" if kind == "resistor" else "capacitor"
    if field.what == "value":
        return _value(written, field.code, reads)
    if field.code == "text":
        return getattr(read_field(frozenset((_TEXT[field.what],)), written, reads), _NAMES.get(field.what, field.what))
    if field.what == "tolerance":
        return letter_tolerance(written, value if reads == "capacitor" else None)
    if field.what == "rated-voltage":
        return volts(written)
    return code_of(written) if field.what == "dielectric" else written or None


def _value(written: str, code: str, kind: ValueKind) -> float | None:
    """Ohms or farads."""
    if code == "three characters":
        return letter_code(written) if kind == "resistor" else None
    if code == "digits" and written.isascii() and written.isdigit():
        digits = digit_code(written, fractions=kind == "capacitor")
        zero = 0.0 if kind == "resistor" and not written.strip("0") else None
        return zero if digits is None else digits if kind == "resistor" else float(f"{digits:.9g}e-12")
    return read_value(written, kind, tolerance_given=True).value


def _expected(field: NumberField) -> str:
    if field.what == "text":
        return f"'{field.text}'"
    if field.codes is not None:
        return f"{field.what} as one of {', '.join(list(field.codes)[:12])}"
    code = {"digits": "a digit code", "three characters": "a three-character code"}.get(field.code, field.code)
    return f"{field.what}{f' as {code}' if code else ''}"
