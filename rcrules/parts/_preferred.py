"""Preferred number series (IEC 60063) and marking codes (IEC 60062)."""

from functools import lru_cache
from math import floor, log10
from typing import Final

E24: Final = (10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91)
"""E3, E6 and E12 are every eighth, fourth and second of these."""
SYMMETRIC_LETTERS: Final = {
    "B": 0.001,
    "C": 0.0025,
    "D": 0.005,
    "F": 0.01,
    "G": 0.02,
    "J": 0.05,
    "K": 0.10,
    "M": 0.20,
}
"""Tolerance letters on which the standard and the trade agree; H, E, N, P are used in two meanings and are not read."""
_UNEVEN_LETTERS: Final = {"Q": (-0.10, 0.30), "T": (-0.10, 0.50), "S": (-0.20, 0.50), "Z": (-0.20, 0.80)}
_PICOFARAD_LETTERS: Final = {"B": 0.1e-12, "C": 0.25e-12, "D": 0.5e-12}
_SMALL: Final = 10e-12
"""Below this capacitance [F] the letters B, C, D are absolute."""
_FACTORS: Final = {
    "Z": -3, "Y": -2, "R": -2, "X": -1, "S": -1, "A": 0, "B": 1, "H": 1, "C": 2, "D": 3, "E": 4, "F": 5,
}  # fmt: skip
"""Letter of a three-character resistor marking -> power of ten."""
_HIGHEST_CODE: Final = 6
"""Most zeros that a code has on a resistor, 10 MΩ; on a capacitor one more, 100 µF."""


@lru_cache(maxsize=16)
def series(count: int) -> tuple[int, ...]:
    """The values of E3 to E24 (two digits) or E48, E96, E192 (three digits)."""
    if count <= len(E24):
        return E24[:: len(E24) // count]
    rounded = [round(100 * 10 ** (index / count)) for index in range(count)]
    return tuple(920 if value == 919 else value for value in rounded)


def preferred(value: float, counts: tuple[int, ...] = (24, 192)) -> bool:
    """Whether a value is in one of the series, at any power of ten. E192 holds E96 and E48."""
    if value <= 0:
        return False
    for count in counts:
        digits = 1 if count <= len(E24) else 2
        mantissa = value / 10 ** (floor(log10(value) + 1e-12) - digits)
        if abs(mantissa - round(mantissa)) < 1e-6 * mantissa and round(mantissa) in series(count):
            return True
    return False


def digit_code(text: str, *, fractions: bool = False) -> float | None:
    """What digits mean as a marking code: ``104`` 100000, ``4992`` 49900 (Ω or pF); None when they are no code.

    fractions: as on capacitors, where a third digit 8 or 9 is a factor 0.01 or 0.1: ``479`` 4.7.
    """
    if not text.isascii() or not text.isdigit() or len(text) not in (3, 4) or text[0] == "0":
        return None
    zeros = int(text[-1])
    if not preferred(float(text[:-1]), (24,) if len(text) == 3 else (24, 192)):
        return None
    if fractions and zeros in (8, 9):
        return float(text[:-1]) / (100.0 if zeros == 8 else 10.0)
    if zeros > _HIGHEST_CODE + fractions:
        return None
    return float(text[:-1]) * 10.0**zeros


def letter_code(text: str) -> float | None:
    """Ohms of a three-character marking (IEC 60062, Annex A): ``68X`` is the 68th value of E96, 499, times 0.1."""
    if len(text) != 3 or not text[:2].isdigit() or text[2] not in _FACTORS or not 1 <= int(text[:2]) <= 96:
        return None
    return float(f"{series(96)[int(text[:2]) - 1]}e{_FACTORS[text[2]]}")


def letter_tolerance(letter: str, farads: float | None = None) -> tuple[float, float] | None:
    """Relative low and high of a tolerance letter; below 10 pF B, C and D are fractions of a picofarad."""
    if farads is not None and 0 < farads < _SMALL and letter in _PICOFARAD_LETTERS:
        share = _PICOFARAD_LETTERS[letter] / farads
        return -share, share
    if letter in _UNEVEN_LETTERS:
        return _UNEVEN_LETTERS[letter] if farads is not None else None
    share = SYMMETRIC_LETTERS.get(letter, 0.0)
    return (-share, share) if share else None
