"""The unit table: spellings to SI unit and factor. Our own, small and bounded; a test holds it to pint."""

from difflib import get_close_matches
from functools import lru_cache
from typing import Final

from rcrules.quantities._foreign import worth
from rcrules.quantities._model import QuantityError, UnknownUnitError

PREFIXES: Final = {
    "f": 1e-15,
    "p": 1e-12,
    "n": 1e-9,
    "u": 1e-6,
    "µ": 1e-6,
    "μ": 1e-6,
    "m": 1e-3,
    "k": 1e3,
    "M": 1e6,
    "G": 1e9,
    "T": 1e12,
}
"""Letter -> factor; both micro signs (U+00B5, U+03BC)."""
_PREFIXED: Final = {
    "V": "V",
    "A": "A",
    "Ω": "Ω",
    "\u2126": "Ω",
    "ohm": "Ω",
    "Ohm": "Ω",
    "F": "F",
    "s": "s",
    "Hz": "Hz",
    "W": "W",
    "J": "J",
    "C": "C",
    "H": "H",
    "m": "m",
}
"""Spelling -> SI unit, may take a prefix; U+2126 is the ohm sign, another character than the Greek letter."""
_PLAIN: Final = {
    "min": ("s", 60.0),
    "h": ("s", 3600.0),
    "day": ("s", 86400.0),
    "year": ("s", 31557600.0),
    "K": ("K", 1.0),
    "mK": ("K", 1e-3),
    "degC": ("degC", 1.0),
    "°C": ("degC", 1.0),
    "\u2103": ("degC", 1.0),
    "bit": ("bit", 1.0),
    "%": ("1", 0.01),
    "ppm": ("1", 1e-6),
}
"""Spelling -> SI unit and factor, no prefix. A year has 365.25 days."""
QUANTITY_NAMES: Final = {
    "V": "voltage",
    "A": "current",
    "Ω": "resistance",
    "F": "capacitance",
    "s": "time",
    "Hz": "frequency",
    "W": "power",
    "J": "energy",
    "C": "charge",
    "K": "temperature difference",
    "degC": "temperature",
    "H": "inductance",
    "m": "length",
    "bit": "number of bits",
    "1": "plain number or ratio",
    "V/s": "slope of a voltage",
    "s/V": "slowness of an edge",
    "Ω/V": "resistance per volt",
    "A/s": "slope of a current",
    "A/V": "conductance",
    "K/W": "thermal resistance",
    "V/K": "voltage drift",
    "1/K": "temperature coefficient",
    "1/V": "voltage coefficient",
    "F/m": "capacitance per length",
}
"""SI unit -> what it measures, in words."""
SAMPLES: Final = {"s": "1 ms", "V": "3.3 V", "Ω": "10 kohm", "F": "100 nF", "degC": "25 degC", "1": "5 %"}
"""SI unit -> a quantity as people write it."""
_MISTAKEN: Final = {
    "r": "ohm",
    "ohms": "ohm",
    "kohms": "kohm",
    "e": "ohm",
    "volt": "V",
    "volts": "V",
    "amp": "A",
    "amps": "A",
    "sec": "s",
    "secs": "s",
    "second": "s",
    "seconds": "s",
    "msec": "ms",
    "usec": "us",
    "nsec": "ns",
    "minute": "min",
    "minutes": "min",
    "hour": "h",
    "hours": "h",
    "hr": "h",
    "d": "day",
    "days": "day",
    "years": "year",
    "yr": "year",
    "y": "year",
    "farad": "F",
    "celsius": "degC",
    "deg": "degC",
    "degrees": "degC",
    "meg": "Mohm",
    "megohm": "Mohm",
    "percent": "%",
    "bits": "bit",
    "k": "kohm",
    "uf": "uF",
    "nf": "nF",
    "pf": "pF",
    "v": "V",
    "mv": "mV",
}
"""Lower-case spelling -> the unit that was probably meant; only for the hint in a message."""

_DECIBELS: Final = ("dB", "db", "DB", "dBV", "dBm")


def _spellings() -> dict[str, tuple[str, float]]:
    table = {spelling: (unit, 1.0) for spelling, unit in _PREFIXED.items()} | dict(_PLAIN)
    for prefix, factor in PREFIXES.items():
        for spelling, unit in _PREFIXED.items():
            table.setdefault(prefix + spelling, (unit, factor))
    return table


SPELLINGS: Final = _spellings()
"""Every unit without a slash: spelling -> SI unit and factor."""


@lru_cache(maxsize=4096)
def parse_unit(text: str) -> tuple[str, float]:
    """``"kV/ms"`` to ``("V/s", 1e6)``; '' is the plain number. Raises QuantityError with a guess."""
    above, slash, below = text.partition("/")
    if not text:
        return "1", 1.0
    numerator, factor = _simple(above, 0)
    if not slash:
        return numerator, factor
    denominator, divisor = _simple(below, len(above) + 1)
    unit = f"{numerator}/{'K' if denominator == 'degC' else denominator}"
    if unit not in QUANTITY_NAMES:
        raise QuantityError(f"unit '{text}' is not known", length=len(text), expected="a unit such as V/us or ohm/V")
    return unit, factor / divisor


def _simple(text: str, at: int) -> tuple[str, float]:
    found = SPELLINGS.get(text)
    if found is None:
        raise UnknownUnitError(text, at=at, expected=meant(text))
    return found


def meant(text: str, wanted: str | None = None) -> str:
    """What to write instead of a unit that is not known; with the SI unit ``wanted``, only units of that quantity."""
    if text in _DECIBELS:
        return "a ratio: -3 dB is 70.8 % of a voltage, -20 dB is 10 %"
    fitting = [spelling for spelling, (unit, _) in SPELLINGS.items() if wanted is None or unit == wanted]
    known = _MISTAKEN.get(text.lower())
    same = [spelling for spelling in fitting if text and spelling.lower() == text.lower()]
    if known in fitting or same:
        return f"did you mean '{known if known in fitting else same[0]}'?"
    foreign = worth(text)
    if foreign is not None and wanted in (None, foreign[1]):
        return f"another unit: 1 {text} is {foreign[0]:.6g} {foreign[1]}"
    near = get_close_matches(text, fitting, n=1, cutoff=0.6 if len(text) > 2 else 0.5) if text else []
    if near:
        return f"did you mean '{near[0]}'?"
    return "a unit such as V, ohm, uF or ms" if wanted is None else f"such as '{SAMPLES.get(wanted, '1 ' + wanted)}'"
