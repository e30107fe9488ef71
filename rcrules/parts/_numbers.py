"""Numbers of value tokens: prefixes, letters in place of the point, digit codes, and what is ambiguous."""

from typing import Final

from rcrules.parts._preferred import digit_code, preferred
from rcrules.parts._tokens import Token

_RESISTOR: Final = {"": 0, "R": 0, "r": 0, "L": -3, "m": -3, "k": 3, "K": 3, "M": 6, "MEG": 6, "G": 9, "T": 12}
_CAPACITOR: Final = {"": 0, "m": -3, "u": -6, "µ": -6, "MFD": -6, "n": -9, "p": -12}
_HIGHEST_FARADS: Final = 1e-2
"""A bare number with exponent above this [F] is no capacitance that someone wrote on purpose."""


def token_value(token: Token, kind: str) -> float | None:
    """Ohms or farads of a token of kind value, rkm or code; None when the digits are no code."""
    parts = token.parts
    if token.kind == "code":
        if parts.get("a") is not None:
            return float(f"{parts['a']}.{parts['b']}e-12")
        picofarads = digit_code(parts["code"] or "")
        return None if picofarads is None else float(f"{picofarads:.9g}e-12")
    if token.kind == "rkm":
        return float(f"{parts['whole'] or 0}.{parts['part']}e{_power(parts['mark'] or '', kind)}")
    return float(f"{parts['n']}e{_power(parts.get('prefix') or '', kind)}")


def _power(prefix: str, kind: str) -> int:
    if kind == "resistor":
        return _RESISTOR[prefix.upper() if len(prefix) == 3 else prefix]
    return _CAPACITOR.get(prefix, _CAPACITOR.get(prefix.lower(), _CAPACITOR.get(prefix.upper(), 0)))


def number(digits: str, *, tolerance: bool) -> tuple[float | None, str]:
    """Ohms of a number without unit, or why it is not clear: digits may be a marking code."""
    value = float(digits)
    code = digit_code(digits)
    if code is None or digits.endswith("0"):
        unclear_exponent = "." not in digits and digits[-2:-1] in "eE" and "e" in digits.lower()
        return (None, f"'{digits}' may be an exponent or a letter code") if unclear_exponent else (value, "")
    if preferred(value) and (tolerance or len(digits) == 4):
        return value, ""
    if not preferred(code) and len(digits) == 4:
        return value, ""
    return None, f"'{digits}' may be {value:g} Ω or the code for {code:g} Ω"


def code_value(digits: str) -> tuple[float | None, str]:
    """Farads of a number without unit on a capacitor, or why it is not clear."""
    if "e-" in digits.lower():
        farads = float(digits)
        return (farads, "") if 0 < farads <= _HIGHEST_FARADS else (None, f"'{digits}' is no capacitance")
    code = digit_code(digits) if len(digits) == 3 and not digits.endswith("0") else None
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
