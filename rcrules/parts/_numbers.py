"""Numbers of value tokens: prefixes, letters in place of the point, digit codes, and what is ambiguous."""

from decimal import Decimal
from typing import Final

from rcrules.parts._preferred import E24, digit_code, preferred
from rcrules.parts._tokens import Token

_RESISTOR: Final = {
    "": 0, "R": 0, "r": 0, "L": -3, "m": -3, "u": -6, "µ": -6, "k": 3, "K": 3, "M": 6, "G": 9, "T": 12,
    "MEG": 6, "MEGA": 6, "KIL": 3, "KILO": 3, "MILLI": -3,
}  # fmt: skip
_CAPACITOR: Final = {
    "": 0, "m": -3, "u": -6, "µ": -6, "n": -9, "p": -12,
    "mk": -6, "mc": -6, "mfd": -6, "kp": -9, "mm": -12, "uu": -12, "µµ": -12, "micro": -6, "nano": -9, "pico": -12,
}  # fmt: skip
_HIGHEST_FARADS: Final = 1e-2
"""A bare number with exponent above this [F] is no capacitance that someone wrote on purpose."""
_MEGA: Final = 22.0
"""Up to this, ``m`` on a resistor may be a careless M: 1m to 22m."""


def token_value(token: Token, kind: str) -> float | None:
    """Ohms or farads of a token of kind value, milli, rkm or code; None when the digits are no code."""
    parts = token.parts
    if token.kind == "code":
        if parts.get("a") is not None:
            return float(f"{parts['a']}.{parts['b']}e-12")
        picofarads = digit_code(parts["code"] or "", fractions=True)
        if (parts["code"] or "").endswith("8") and parts.get("letter") not in ("B", "C", "D"):
            return None  # 0.01 on small capacitors, eight zeros on electrolytic ones
        return None if picofarads is None else float(f"{picofarads:.9g}e-12")
    digits = f"{parts['whole'] or 0}.{parts['part']}" if token.kind == "rkm" else parts["n"] or "0"
    prefix = parts.get("mark") if token.kind == "rkm" else parts.get("prefix")
    return float(Decimal(digits).scaleb(_power(prefix or "", kind)))


def _power(prefix: str, kind: str) -> int:
    if kind == "resistor":
        return _RESISTOR[prefix if len(prefix) < 2 else prefix.upper()]
    return _CAPACITOR[prefix if prefix in _CAPACITOR else prefix.lower()]


def doubtful(token: Token, kind: str) -> str:
    """Why a value token with a unit may mean something else, '' when it cannot.

    ``104pF`` and ``104N`` without a blank may be the code for 100 nF; ``1m`` on a resistor may be a careless M.
    """
    digits = token.parts.get("n") or ""
    if token.kind == "milli":
        return f"'{token.text}' may be milli- or megaohms" if float(digits) <= _MEGA else ""
    if (
        kind != "capacitor"
        or token.kind != "value"
        or (token.parts.get("prefix") or "") not in ("", "p", "P", "n", "N")
    ):
        return ""
    code = digit_code(digits)
    glued = digits + (token.parts.get("prefix") or "F") in token.text
    if code is None or not glued or len(digits) != 3 or digits.endswith("0") or preferred(float(digits), (len(E24),)):
        return ""
    return f"'{token.text}' may be the code for {code / 1000:g} nF"


def number(digits: str, *, tight: bool) -> tuple[float | None, str]:
    """Ohms of a number without unit, or why it is not clear: digits may be a marking code."""
    value = float(digits)
    code = digit_code(digits)
    if code is None or digits.endswith("0"):
        unclear_exponent = "." not in digits and digits[-2:-1] in "eE" and "e" in digits.lower()
        return (None, f"'{digits}' may be an exponent or a letter code") if unclear_exponent else (value, "")
    if preferred(value) and (tight or len(digits) == 4):
        return value, ""
    if not preferred(code) and len(digits) == 4:
        return value, ""
    return None, f"'{digits}' may be {value:g} Ω or the code for {code:g} Ω"


def code_value(digits: str) -> tuple[float | None, str]:
    """Farads of a number without unit on a capacitor, or why it is not clear."""
    if "e-" in digits.lower():
        farads = float(digits)
        return (farads, "") if 0 < farads <= _HIGHEST_FARADS else (None, f"'{digits}' is no capacitance")
    code = digit_code(digits, fractions=True) if len(digits) == 3 and digits[-1] not in "089" else None
    if code is not None:
        return float(f"{code:.9g}e-12"), ""
    return None, f"'{shown(digits)}' has no unit: pF or µF"


def unclear(text: str, kind: str) -> str:
    """Why a token of two meanings is not read."""
    if kind == "resistor":
        return f"'{text}' may be an exponent or a letter code"
    return f"'{text}' may be milli- or microfarads"


def shown(text: str) -> str:
    """The text, cut to what a message holds."""
    return text if len(text) <= 60 else text[:57] + "..."
