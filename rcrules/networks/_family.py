"""What an IC is, from the words of its value, symbol and description and from its pin names."""

import re
from functools import lru_cache
from typing import Final

from rcrules.names import tokens

FAMILIES: Final = ("timer", "optocoupler", "amplifier", "regulator", "adc", "logic", "controller", "")
_TYPES: Final = (
    ("timer", r"\b[A-Z]{0,4}C?(555|556|7555|7556)[A-Z]{0,3}\b", r"\btimer\b", "monostable"),
    ("optocoupler", r"opto.?(coupler|isolator)", r"photo.?coupler", r"\b(4N|6N1)\d\d"),
    ("amplifier", r"\bop.?amps?\b", "operational", "amplifier", "comparator"),
    ("amplifier", r"\b[A-Z]{1,4}(358|324|339|393|311|741|07[124]|08[124]|290[1234])[A-Z]{0,3}\b"),
    ("regulator", "regulator", r"\bldo\b", r"\bbuck", r"\bboost\b", r"dc.?dc", r"step.?(down|up)", "charge pump"),
    ("regulator", r"\b[A-Z]{0,3}7[89][LM]?\d\d[A-Z]{0,3}\b", r"\b[A-Z]{1,3}(317|337|1117|431)\b"),
    ("adc", "analog.to.digital", r"\badc\b", "a/d converter"),
    ("logic", r"\b\d?[A-Z]{0,4}74[A-Z]{0,4}\d{2,5}", r"\b[A-Z]{0,3}40\d\d[A-Z]{0,3}\b"),
    ("logic", "schmitt", "inverter", "flip.?flop", "shift register"),
    ("controller", "micro.?controller", r"\bmcu\b", r"\bfpga\b", r"\bcpld\b", "processor"),
)
"""Generic words and type numbers of the trade, in the order in which they are tried."""
_MATCHES: Final = tuple((name, re.compile("|".join(patterns), re.IGNORECASE)) for name, *patterns in _TYPES)
_SIGNED: Final = re.compile(r"([A-D1-4]?IN[A-D1-4]?)?", re.IGNORECASE)
_SWITCH: Final = frozenset({"SW", "LX", "LL", "PH", "PHASE", "VSW"})
_OUT: Final = frozenset({"OUT", "VOUT", "VO", "OUTPUT", "VREG", "OUTF"})
_IN: Final = frozenset({"IN", "VIN", "VI", "PVIN", "INPUT", "VCC", "VDD"})
_FEEDBACK: Final = frozenset({"FB", "VFB", "ADJ", "COMP", "ITH", "EAO"})
_MANY: Final = 40
"""An IC with more pins is a controller: its pin names say what a pin can be, not what the IC is."""


@lru_cache(maxsize=4096)
def family(words: str, names: tuple[str, ...]) -> str:
    """One of FAMILIES; '' = not known.

    words: value, symbol and description; names: the names of all pins, '' or ``~`` where a pin has none.
    """
    plain = words.replace("_", " ")
    for name, pattern in _MATCHES:
        if pattern.search(plain):
            return name
    if len(names) > _MANY:
        return "controller"
    return _by_pins(names)


def inverting(name: str) -> bool | None:
    """Whether a pin name is that of an inverting input; None = it is no amplifier input's name."""
    bare = re.sub(r"[~{}_\s]", "", name)
    sign = {"-": True, "−": True, "–": True, "+": False}
    for mark, answer in sign.items():
        rest = bare[:-1] if bare.endswith(mark) else bare[1:] if bare.startswith(mark) else None
        if rest is not None and _SIGNED.fullmatch(rest):
            return answer
    word = re.sub(r"\d", "", bare.upper())
    return True if word in ("INV", "INN", "INM") else False if word in ("NINV", "INP") else None


def _by_pins(names: tuple[str, ...]) -> str:
    signs = {inverting(name) for name in names}
    words = [frozenset(tokens(name)) for name in names]
    some = frozenset().union(*words)
    if {True, False} <= signs or ({"V+", "V-"} <= set(names) and len(names) <= 14):
        return "amplifier"
    if some & {"THR", "THRES", "THRESHOLD"} and some & {"TR", "TRIG", "TRIGGER"}:
        return "timer"
    if (some & _SWITCH and some & (_IN | _FEEDBACK)) or (some & _OUT and some & _IN and len(names) <= 10):
        return "regulator"
    if some & {"AIN", "CH", "AN"} and some & {"SCLK", "SCK", "CLK", "SCL"}:
        return "adc"
    return ""
