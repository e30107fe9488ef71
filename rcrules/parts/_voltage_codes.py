"""Rated voltages of capacitors as a digit and a letter: ``1H`` 50 V, ``2A`` 100 V.

The letter is a value of the R10 series of preferred numbers (ISO 3) or one of the usual values between them, the digit
its power of ten: the coding of JIS C 5101-1 and of EIA standards for capacitors (from memory).
"""

from typing import Final

_LETTERS: Final = {
    "A": 1.0,
    "B": 1.25,
    "C": 1.6,
    "D": 2.0,
    "E": 2.5,
    "F": 3.15,
    "G": 4.0,
    "H": 5.0,
    "J": 6.3,
    "K": 8.0,
    "P": 2.2,
    "Q": 1.1,
    "V": 3.5,
    "W": 4.5,
    "Z": 1.8,
}
LETTERS: Final = "".join(sorted(_LETTERS))


def volts(code: str) -> float | None:
    """Volts of a code such as ``1H``, ``0J``, ``2A``; None when it is none."""
    if len(code) != 2 or code[0] not in "0123" or code[1] not in _LETTERS:
        return None
    return float(f"{_LETTERS[code[1]]}e{code[0]}")
