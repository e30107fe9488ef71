"""Finds the one value among the tokens of a text, or why there is none."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final, Literal

from rcrules.parts._numbers import code_value, doubtful, number, shown, token_value, unclear
from rcrules.parts._preferred import E24, letter_code, preferred
from rcrules.parts._ratings import is_rating
from rcrules.parts._spelling import SIZES
from rcrules.parts._tokens import Token, tokens

ValueKind = Literal["resistor", "capacitor"]

_SYMBOLS: Final = re.compile(
    r"(?:r|c|cp\d?|res|cap|resistor|capacitor|resistencia|condensador|capa?pol)"
    r"(?:[ _](?:us|small|polari[sz]ed|pol)){0,3}"
)
_HARMLESS: Final = re.compile(
    r"(?:RES|CAP|RSA?|RN|RA|R|C|SM[DT]|CHIP|CER|MLCC|FILM|OXIDE|LIN|LOG)\d{0,4}[A-Z]?|[^\x00-\x7f]+"
)
_ABSOLUTE: Final = (0.05e-12, 0.1e-12, 0.25e-12, 0.5e-12)
"""Tolerances of small capacitors [F] as they stand behind the value without a sign: ``8.2pF 0.25pF``."""
_SMALL: Final = 50e-12
_SPACED: Final = re.compile(r"\d{1,3}\s[kKMRpnuµ]\s\d{1,2}|\d\s?[kKMRΩpnuµ]\s\d")
_WRITTEN: Final = ("value", "rkm", "milli")


@dataclass(frozen=True, slots=True, kw_only=True)
class Value:
    """The value of a text."""

    si: float | None = None
    """[Ω] or [F]"""
    why: str = ""
    """Why there is none."""
    letter: str | None = None
    """The tolerance letter glued to it."""
    picofarads: float | None = None
    """An absolute tolerance [F] without a sign behind it."""


def value_of(text: str, found: Sequence[Token], kind: ValueKind, *, bare: bool, tight: bool) -> Value:
    """The value of a text from its tokens."""
    if any(token.kind == "range" for token in found):
        return Value(why=f"'{shown(text.strip())}' is a range")
    if _SPACED.fullmatch(text.strip()):
        return Value(why=f"'{shown(text.strip())}' may be one number or two")
    several, picofarads = _candidates(found, kind)
    if not bare:
        several = [(token, value) for token, value in several if not _leads(token, besides="RrL")]
    values = {f"{value:.9g}": (value, token) for token, value in reversed(several)}
    if len(values) > 1:
        told = " and ".join(token.text.strip() for _, token in reversed(values.values()))
        return Value(why=f"two values: {told}")
    if values:
        value, token = next(iter(values.values()))
        return _judged(text, token, value, found, kind, picofarads)
    unread = next((token.text for token in found if token.kind == "unclear"), None)
    if unread is not None:
        return Value(why=unclear(unread, kind))
    return _bare_value(text, found, kind, allowed=bare, tight=tight)


def _judged(
    text: str, token: Token, value: float, found: Sequence[Token], kind: ValueKind, picofarads: float | None
) -> Value:
    """A value that stands alone, unless it may mean something else."""
    if token.signed or (kind == "capacitor" and value <= 0):
        return Value(why=f"'{text.strip()}' is not a positive value")
    rated = kind == "resistor" and any(other.kind == "power" for other in found)
    doubt = "" if rated else doubtful(token, kind)
    if kind == "resistor" and _leads(token, besides="RrL"):
        doubt = "" if preferred(value, (len(E24),)) else f"'{token.text}' is not understood"
    return Value(why=doubt) if doubt else Value(si=value, letter=token.parts.get("letter"), picofarads=picofarads)


def _candidates(found: Sequence[Token], kind: ValueKind) -> tuple[list[tuple[Token, float]], float | None]:
    """What may be the value; beside a full value, ``P5`` is a pitch and ``0.25pF`` a tolerance."""
    read = [(token, token_value(token, kind)) for token in found if token.kind in (*_WRITTEN, "code")]
    several = [(token, value) for token, value in read if value is not None]
    full = [item for item in several if not _leads(item[0], besides="RrLnuµ")]
    if full:
        several = full
    if kind == "capacitor" and len(several) == 2:
        (first, value), (_, second) = several
        if first.kind != "code" and value < _SMALL and second in _ABSOLUTE and second < value:
            return several[:1], second
    return several, None


def _leads(token: Token, besides: str) -> bool:
    """A letter code that starts with its letter, as K47 and P5, and that not one of those ``besides``."""
    return token.kind == "rkm" and not token.parts["whole"] and token.text[0] not in besides


def _bare_value(text: str, found: Sequence[Token], kind: ValueKind, *, allowed: bool, tight: bool) -> Value:
    numbers = [token for token in found if token.kind == "bare"]
    strange = [token.text for token in found if token.kind == "word" and not _harmless(token.text)]
    if not allowed or not numbers:
        return Value(why=_why_none(text, found, kind))
    if strange or len(numbers) > 1:
        return Value(why=f"'{text.strip()}' is not understood")
    if numbers[0].signed:
        return Value(why=f"'{text.strip()}' is not a positive value")
    digits = numbers[0].text.strip()
    si, why = code_value(digits) if kind == "capacitor" else number(digits, tight=tight)
    return Value(si=si, why=why)


def _harmless(word: str) -> bool:
    return _HARMLESS.fullmatch(word.upper()) is not None or is_rating(word)


def _why_none(text: str, found: Sequence[Token], kind: ValueKind) -> str:
    stripped = text.strip()
    if not stripped:
        return "no value text"
    if _SYMBOLS.fullmatch(stripped.lower()):
        return f"'{stripped}' is the name of a symbol"
    if any(token.kind == "size" for token in found) or stripped in SIZES:
        return f"'{shown(stripped)}' names a package, no value"
    code = letter_code(stripped) if kind == "resistor" else None
    if code is not None:
        return f"'{stripped}' may be the marking code for {code:g} Ω"
    other: ValueKind = "capacitor" if kind == "resistor" else "resistor"
    if any(token.kind in _WRITTEN for token in tokens(stripped, other)):
        return f"'{shown(stripped)}' reads as the value of a {other}"
    return f"'{shown(stripped)}' is not understood"
