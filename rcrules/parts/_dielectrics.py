"""Capacitor dielectrics: letter codes by rule, technologies by name, temperature and ageing.

Class 2 and 3 codes: EIA-198 (low temperature, high temperature, change against 25 °C). Class 1: coefficient,
multiplier, tolerance of the coefficient. Film and tantalum: comparison tables of dielectrics (typical figures).
"""

from math import log10
from typing import Final

_LOWEST: Final = {"X": -55.0, "Y": -30.0, "Z": 10.0}
_HIGHEST: Final = {"2": 45.0, "4": 65.0, "5": 85.0, "6": 105.0, "7": 125.0, "8": 150.0, "9": 200.0}
_CHANGE: Final = {
    "A": (-0.010, 0.010),
    "B": (-0.015, 0.015),
    "C": (-0.022, 0.022),
    "D": (-0.033, 0.033),
    "E": (-0.047, 0.047),
    "F": (-0.075, 0.075),
    "P": (-0.10, 0.10),
    "R": (-0.15, 0.15),
    "S": (-0.22, 0.22),
    "L": (-0.40, 0.15),
    "T": (-0.33, 0.22),
    "U": (-0.56, 0.22),
    "V": (-0.82, 0.22),
}
_SECOND_CHANGE: Final = {
    "B": (-0.10, 0.10),
    "C": (-0.20, 0.20),
    "D": (-0.30, 0.20),
    "E": (-0.56, 0.22),
    "F": (-0.80, 0.30),
    "R": (-0.15, 0.15),
    "X": (-0.15, 0.15),
}
_SECOND_RANGE: Final = {
    "1": (-55.0, 125.0),
    "2": (-55.0, 85.0),
    "3": (-40.0, 85.0),
    "4": (-25.0, 85.0),
    "6": (10.0, 85.0),
}
"""Class 2 codes of IEC 60384-9 and -22: ``2C1`` is ±20 % from -55 °C to 125 °C (from memory)."""
_COEFFICIENT: Final = {
    "C": 0.0,
    "B": 0.3,
    "L": 0.8,
    "A": 0.9,
    "M": 1.0,
    "P": 1.5,
    "R": 2.2,
    "S": 3.3,
    "T": 4.7,
    "V": 5.6,
    "U": 7.5,
}
_MULTIPLIER: Final = {"0": -1.0, "1": -10.0, "2": -100.0, "3": -1000.0, "6": 10.0, "7": 100.0, "8": 1000.0}
"""4, 5 and 9 are printed in two meanings and are not read."""
_SPREAD: Final = {"G": 30.0, "H": 60.0, "J": 120.0, "K": 250.0, "L": 500.0, "M": 1000.0, "N": 2500.0}
"""[ppm/K]"""
_SECOND_COEFFICIENT: Final = {
    "C": 0.0, "H": -33.0, "L": -75.0, "P": -150.0, "R": -220.0, "S": -330.0, "T": -470.0, "U": -750.0,
}  # fmt: skip
"""[ppm/K] of the two-letter class 1 codes of IEC 60384-8 and -21 (from memory): ``CG`` is what EIA calls C0G."""
_SL: Final = (-1000e-6, 350e-6)
_TWO_LETTERS: Final = frozenset(("CG", "CH", "CJ", "UJ", "SL"))
"""The two-letter codes that are no common words: TH is no dielectric but a way of mounting."""
TYPICAL_TEMPERATURE: Final = {
    "PET film": 0.05,
    "PP film": 0.025,
    "PEN film": 0.05,
    "PPS film": 0.015,
    "PS film": 0.01,
    "mica": 0.01,
    "niobium": 0.10,
    "film": 0.05,
    "tantalum": 0.10,
    "polymer": 0.10,
    "aluminium": 0.20,
}
"""Technology -> change over the usual temperature range, both ways; typical, so an assumption."""
COLD: Final = -25.0
"""[°C] below which an aluminium electrolytic loses more."""
COLD_LOSS: Final = 0.40
"""What it may lose then: 20 % to 40 % at -40 °C is common practice."""
ELECTROLYTIC: Final = ("aluminium", "tantalum", "polymer", "niobium")
_REFEREE: Final = 1000.0
"""Hours after the last heating at which the marked value holds."""
_YOUNGEST: Final = 1.0
"""Hours after soldering from which a circuit is expected to work."""


def class_two(code: str) -> tuple[float, float, float, float] | None:
    """Lowest and highest temperature [°C], relative low and high change of ``X7R`` and ``2C1``; else None."""
    if len(code) == 3 and code[0] == "2" and code[1] in _SECOND_CHANGE and code[2] in _SECOND_RANGE:
        return *_SECOND_RANGE[code[2]], *_SECOND_CHANGE[code[1]]
    if len(code) != 3 or code[0] not in _LOWEST or code[1] not in _HIGHEST or code[2] not in _CHANGE:
        return None
    return _LOWEST[code[0]], _HIGHEST[code[1]], *_CHANGE[code[2]]


def class_one(code: str) -> tuple[float, float] | None:
    """Lowest and highest temperature coefficient [1/K] of ``C0G``, ``CG``, ``SL`` and their kin; None for others."""
    if code == "SL":
        return _SL
    if len(code) == 2 and code[0] in _SECOND_COEFFICIENT and code[1] in _SPREAD:
        centre, around = _SECOND_COEFFICIENT[code[0]], _SPREAD[code[1]]
        return (centre - around) * 1e-6, (centre + around) * 1e-6
    if len(code) != 3 or code[0] not in _COEFFICIENT or code[1] not in _MULTIPLIER or code[2] not in _SPREAD:
        return None
    centre = _COEFFICIENT[code[0]] * _MULTIPLIER[code[1]]
    return (centre - _SPREAD[code[2]]) * 1e-6, (centre + _SPREAD[code[2]]) * 1e-6


def ageing_rate(code: str) -> float:
    """Typical loss of a class 2 or 3 ceramic per decade of hours: 2.5 % (X7R, X5R), 5 % (Z5U), 7 % (Y5V)."""
    letter = {"F": "V", "E": "U"}.get(code[1:2], "") if code.startswith("2") else code[2:]
    return {"V": 0.07, "U": 0.05, "T": 0.05}.get(letter, 0.025)


def ageing(rate: float, hours: float) -> tuple[float, float]:
    """Relative low and high change around the value marked for 1000 h, from 1 h to ``hours`` after the last heating.

    C(t) = C(1 h) * (1 - rate * log10(t / 1 h)); 2.5 % and ten years give -5.3 % and +8.1 %.
    """
    marked = 1 - rate * log10(_REFEREE)
    oldest = 1 - rate * log10(max(hours, _REFEREE))
    return oldest / marked - 1, 1 / marked - 1


def code_of(word: str) -> str | None:
    """The letter code that a word is, in one spelling: ``NP0``, ``npo``, ``COG`` are ``C0G``; None for no code."""
    upper = word.upper()
    if upper in ("NP0", "NPO", "COG", "C0G", "CG0", "CGO"):
        return "C0G"
    if word in _TWO_LETTERS:
        return word
    if class_two(upper) is not None or (len(word) == 3 and class_one(upper) is not None and word == upper):
        return upper
    return None
