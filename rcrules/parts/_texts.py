"""Reads the value texts of resistors and capacitors: value, tolerance, ratings, dielectric, size, fitted or not."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Final, Literal

from rcrules.parts._numbers import code_value, number, shown, token_value, unclear
from rcrules.parts._preferred import letter_tolerance
from rcrules.parts._ratings import Ratings, ratings
from rcrules.parts._spelling import SIZES, plain, thousands_or_decimals, with_points
from rcrules.parts._tokens import Token, tokens

ValueKind = Literal["resistor", "capacitor"]

_LONGEST: Final = 300
_WHOLE: Final = frozenset(("opt", "option", "optional", "tbd", "nf", "np", "nc", "nm", "ni", "n/a", "none", "not used"))
_NOT_FITTED: Final = re.compile(
    r"(?:dnp|(?<![a-z0-9])(?:dni|dnf|dns|dnm|n\.\s?p\.?|n\.\s?m\.?|n/p|do[\s_-]{1,3}not[\s_-]{1,3}\w{3,12}"
    r"|not[\s_-]{1,3}(?:fitted|populated|placed|mounted|installed|stuffed|assembled|used)"
    r"|no[\s_-]{1,3}(?:soldar|stuff|pop|poner|montar|mount|fit|load|place|colocar|poblar)|nopop"
    r"|nicht\s{1,3}best(?:ü|ue)ckt|non\s{1,3}mont[eé]e?|unpopulated"
    r"|не\s{1,3}(?:ставить|устанавливать|монтировать)))(?![a-z0-9])"
)
_SYMBOLS: Final = re.compile(
    r"(?:r|c|cp\d?|res|cap|resistor|capacitor|resistencia|condensador|capa?pol)"
    r"(?:[ _](?:us|small|polari[sz]ed|pol)){0,3}"
)
_HARMLESS: Final = re.compile(r"(?:RES|CAP|RSA?|RN|RA|R|C|SM[DT]|CHIP|CER|MLCC|THIN|THICK|FILM|TANT|ALUM)\d{0,4}[A-Z]?")


@dataclass(frozen=True, slots=True, kw_only=True)
class ValueText:
    """What one text says about a resistor or capacitor; None = nothing."""

    value: float | None = None
    """[Ω] or [F]"""
    why_unknown: str = ""
    """Why there is no value."""
    tolerance: tuple[float, float] | None = None
    """Relative low (negative) and high."""
    rated_voltage: float | None = None
    """[V]"""
    rated_power: float | None = None
    """[W]"""
    coefficient: float | None = None
    """[1/K], both ways."""
    dielectric: str | None = None
    technology: str | None = None
    """``thin film``, ``thick film``, ``wire-wound`` …"""
    size: str = ""
    fitted: bool = True
    fitted_why: str = ""


@lru_cache(maxsize=65536)
def read_value(text: str, kind: ValueKind, *, tolerance_given: bool = False, bare: bool = True) -> ValueText:
    """Read a value text.

    tolerance_given: another source gives the tolerance, so that three digits on a resistor are a value, not a code.
    bare: numbers without unit may be the value; false for descriptions and rating fields.
    """
    if len(text) > _LONGEST:
        return ValueText(why_unknown=f"longer than {_LONGEST} characters")
    marked, rest = _fitted_part(text)
    words = with_points(plain(rest))
    found = tuple(tokens(words, kind))
    read = ratings(found, kind)
    value, why, letter = _value(text, found, kind, bare=bare, tolerance=tolerance_given or read.tolerance is not None)
    if value is None and marked and not words.strip():
        why = f"marked '{marked}', no value"
    elif "{" in rest:
        value, why = None, f"'{shown(rest.strip())}' is an expression"
    elif thousands_or_decimals(plain(rest)):
        value, why = None, "the comma may part thousands or decimals"
    return _result(value, why, letter, read, kind, marked)


def _fitted_part(text: str) -> tuple[str, str]:
    """The words that say 'not fitted', '' when none do, and the text without them."""
    lower = text.lower()
    if lower.strip(" <>()[]?!.*-") in _WHOLE:
        return text.strip(), ""
    found = _NOT_FITTED.search(lower)
    if found is None or len(lower) != len(text):
        return "", text
    return text[found.start() : found.end()].strip(), text[: found.start()] + " " + text[found.end() :]


def _result(
    value: float | None, why: str, letter: str | None, read: Ratings, kind: ValueKind, marked: str
) -> ValueText:
    tolerance = read.tolerance
    if tolerance is None and letter and value:
        tolerance = letter_tolerance(letter, value if kind == "capacitor" else None)
    if tolerance is None and read.picofarads is not None and value:
        tolerance = (-read.picofarads / value, read.picofarads / value)
    return ValueText(
        value=value,
        why_unknown="" if value is not None else why,
        tolerance=tolerance,
        rated_voltage=read.voltage,
        rated_power=read.power,
        coefficient=read.coefficient,
        dielectric=read.dielectric,
        technology=read.technology,
        size=read.size,
        fitted=not marked,
        fitted_why=f"value text '{marked}'" if marked else "",
    )


def _value(
    text: str, found: Sequence[Token], kind: ValueKind, *, bare: bool, tolerance: bool
) -> tuple[float | None, str, str | None]:
    """Value, why there is none, and the tolerance letter glued to it."""
    if any(token.kind == "range" for token in found):
        return None, f"'{shown(text.strip())}' is a range", None
    written = [token for token in found if token.kind in ("value", "rkm")]
    several = [(t, token_value(t, kind)) for t in written or [token for token in found if token.kind == "code"]]
    values = {f"{value:.9g}": (value, token) for token, value in several if value is not None}
    if len(values) > 1:
        return None, "two values: " + " and ".join(token.text.strip() for _, token in values.values()), None
    if values:
        value, token = next(iter(values.values()))
        if token.signed or (kind == "capacitor" and value <= 0):
            return None, f"'{text.strip()}' is not a positive value", None
        return value, "", token.parts.get("letter")
    if any(token.kind == "unclear" for token in found):
        return None, unclear(next(token.text for token in found if token.kind == "unclear"), kind), None
    return *_bare_value(text, found, kind, allowed=bare, tolerance=tolerance), None


def _bare_value(
    text: str, found: Sequence[Token], kind: ValueKind, *, allowed: bool, tolerance: bool
) -> tuple[float | None, str]:
    numbers = [token for token in found if token.kind == "bare"]
    strange = [token.text for token in found if token.kind == "word" and not _HARMLESS.fullmatch(token.text.upper())]
    if not allowed or not numbers:
        return None, _why_none(text, found, kind)
    if strange or len(numbers) > 1:
        return None, f"'{text.strip()}' is not understood"
    if numbers[0].signed:
        return None, f"'{text.strip()}' is not a positive value"
    digits = numbers[0].text.strip()
    if kind == "capacitor":
        return code_value(digits)
    return number(digits, tolerance=tolerance)


def _why_none(text: str, found: Sequence[Token], kind: ValueKind) -> str:
    stripped = text.strip()
    if not stripped:
        return "no value text"
    if _SYMBOLS.fullmatch(stripped.lower()):
        return f"'{stripped}' is the name of a symbol"
    if any(token.kind == "size" for token in found) or stripped in SIZES:
        return f"'{shown(stripped)}' names a package, no value"
    other: ValueKind = "capacitor" if kind == "resistor" else "resistor"
    if any(token.kind in ("value", "rkm") for token in tokens(stripped, other)):
        return f"'{shown(stripped)}' reads as the value of a {other}"
    return f"'{shown(stripped)}' is not understood"
