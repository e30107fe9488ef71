"""What kind of diode a part is, and what is assumed of it: its forward drop, its resistance, where it breaks down.

Drops are those from microamperes to the rated current, over temperature; a standard type designation tells the kind
where no word does (JEDEC 1N numbers; Pro Electron: BZ.. voltage reference, BA.. and BY.. silicon, BAT.. Schottky).
"""

import re
from dataclasses import dataclass
from typing import Final

from rcrules.parts._model import RatedPart
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class DiodeModel:
    """A kind of diode."""

    kind: str
    """``silicon diode``, ``Schottky diode``, ``LED``, ``Zener diode``, ``suppressor diode``, ``diode of unknown
    kind``."""
    drop: Spread
    """[V]"""
    ohms: Spread
    """[Ω]"""
    breaks_down: bool = False
    """Whether it is made to conduct in reverse."""
    breakdown: float | None = None
    """Least reverse voltage at which it does, as its value text tells [V]; None = not told."""


def _volts(low: float, nominal: float, high: float) -> Spread:
    return Spread(low=low, nominal=nominal, high=high, unit="V")


_SILICON: Final = _volts(0.4, 0.65, 1.0)
_OHMS: Final = Spread(low=0.1, nominal=1.0, high=10.0, unit="Ω")
_LED_OHMS: Final = Spread(low=1.0, nominal=10.0, high=50.0, unit="Ω")
_MODELS: Final = {
    model.kind: model
    for model in (
        DiodeModel(kind="silicon diode", drop=_SILICON, ohms=_OHMS),
        DiodeModel(kind="Schottky diode", drop=_volts(0.1, 0.3, 0.6), ohms=_OHMS),
        DiodeModel(kind="LED", drop=_volts(1.2, 2.0, 3.6), ohms=_LED_OHMS),
        DiodeModel(kind="Zener diode", drop=_SILICON, ohms=_OHMS, breaks_down=True),
        DiodeModel(kind="suppressor diode", drop=_SILICON, ohms=_OHMS, breaks_down=True),
        DiodeModel(kind="diode of unknown kind", drop=_volts(0.1, 0.6, 1.0), ohms=_OHMS),
    )
}
_WORDS: Final = (
    ("suppressor diode", r"(?<![A-Z])(?:TVS|ESD|TRANSIENT|SUPPRESSOR|SM[ABC]J\d|P[46][KS][EM])"),
    ("Zener diode", r"(?<![A-Z])(?:ZENER|ZD|DZ|BZ[A-Z]\d|1N47[2-6]\d|1N52[2-8]\d)|СТАБИЛИТРОН"),
    ("LED", r"(?<![A-Z])(?:LEDS?|LUMINOUS|LIGHT[- ]EMITTING)(?![A-Z])|СВЕТОДИОД"),
    (
        "Schottky diode",
        r"SCHOTTKY|SHOTTKY|(?<![A-Z0-9])(?:BAT\d|BAS[47]0|1N58(?:1[7-9]|2[0-2])|MBR\w?\d|S[SK]\d\d)|ШОТТКИ",
    ),
    (
        "silicon diode",
        r"(?<![A-Z0-9])(?:1N914|1N400\d|1N4[14]48|1N54\d\d|LL4[14]48|B[AY][QSVWX]\d\d|S1[A-M]|M[1-7])(?!\d)"
        r"|RECTIFIER|SWITCHING DIODE|SMALL[- ]SIGNAL DIODE",
    ),
)
_KINDS: Final = tuple((kind, re.compile(pattern)) for kind, pattern in _WORDS)
_LETTERS: Final = {"LED": "LED", "ZD": "Zener diode", "TVS": "suppressor diode"}
_STATED: Final = re.compile(r"(?<![\d.])(\d{1,3})(?:V(\d{1,2})|(?:[.,](\d{1,2}))?\s?V(?![A-Z]))")
"""``5V1``, ``C5V1``, ``5.1V``, ``12 V``."""
_KNEE: Final = 0.9
"""Part of its stated voltage at which a Zener diode begins to conduct; tolerance and knee."""


def diode_model(part: RatedPart) -> DiodeModel:
    """What the part's value, symbol, description and reference say about it."""
    kind = _kind(part)
    model = _MODELS[kind]
    if not model.breaks_down or (stated := _stated(part)) is None:
        return model
    knee = _KNEE if kind == "Zener diode" else 1.0  # a suppressor is called by the voltage that it stands off
    return DiodeModel(kind=kind, drop=model.drop, ohms=model.ohms, breaks_down=True, breakdown=knee * stated)


def _kind(part: RatedPart) -> str:
    for text in (part.text, part.part.symbol.rpartition(":")[2], part.part.description):
        found = next((kind for kind, pattern in _KINDS if pattern.search(text.upper())), None)
        if found is not None:
            return found
    letters = re.match(r"[A-Z]*", part.ref.rpartition("/")[2].upper())
    return _LETTERS.get(letters[0] if letters else "", "diode of unknown kind")


def _stated(part: RatedPart) -> float | None:
    """The voltage in the value text."""
    found = _STATED.search(part.text.upper())
    if found is None:
        return None
    whole, after, decimals = found.groups()
    return float(f"{whole}.{after or decimals or 0}")
