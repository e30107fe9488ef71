"""Ratings among the tokens of a text: tolerance, voltage, power, temperature coefficient, dielectric, size."""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Final

from rcrules.parts._dielectrics import code_of
from rcrules.parts._spelling import plain
from rcrules.parts._tokens import Token
from rcrules.parts._voltage_codes import volts

_TECHNOLOGIES: Final = (
    ("tantalum", r"tant|tantal\w{0,4}|tántalo|" + plain("тантал") + r"\w{0,4}"),
    ("polymer", r"polymer|polymere?r?|hybrid|polímero"),
    (
        "aluminium",
        r"alum|alumini?um|elec|electrolytic\w{0,2}|electrolitico|electrolítico|elko|elco|elcap|elyt|elektrolyt\w{0,16}|alu?|"
        + plain("электролит")
        + r"\w{0,8}",
    ),
    ("PPS film", r"pps|mki"),
    ("PEN film", r"pen|mkn"),
    ("PET film", r"pet|mkt\d{0,2}|kt|polyester|poliester|mylar"),
    ("PP film", r"pp|mkp\d{0,2}|fkp\d?|kp|polypropylene|polipropileno"),
    ("PS film", r"ks|polystyrene|polystyrol|styroflex"),
    ("niobium", r"niobium|nio|niob"),
    ("film", r"film|mks\d{0,2}|folie\w{0,12}"),
    ("mica", r"mica"),
    ("ceramic", r"cer|ceramic|mlcc|cerámico|ceramico|keramik\w{0,16}|kerko|" + plain("керам") + r"\w{0,10}"),
)
_RESISTOR_TECHNOLOGIES: Final = (
    ("thin film", r"thin|thn"),
    ("thick film", r"thick|thk"),
    ("metal film", r"metal|mf|metallschicht\w{0,12}|metalfilm|" + plain("металлопл") + r"\w{0,10}"),
    ("metal oxide", r"mo|mox|metalloxid\w{0,8}"),
    ("carbon film", r"carbon|cf|kohleschicht\w{0,12}"),
    ("wire-wound", r"wire|wound|ww|wirewound|drahtwiderstand"),
)
_HIGHEST_WATTS: Final = 1000.0
"""Above it, ``10kW`` is more likely 10 kΩ in a font of symbols."""
_HIGHEST_FRACTION: Final = 10.0
"""Tolerances [%] above it are whole: ``100,1%`` is no 100.1 %."""
_SCALE: Final = {None: 1.0, "": 1.0, "m": 1e-3, "µ": 1e-6, "u": 1e-6, "k": 1e3}


@dataclass(frozen=True, slots=True, kw_only=True)
class Ratings:
    """Facts beside the value; None = not said, or said twice and differently."""

    tolerance: tuple[float, float] | None = None
    picofarads: float | None = None
    """Absolute tolerance [F]."""
    voltage: float | None = None
    power: float | None = None
    coefficient: float | None = None
    dielectric: str | None = None
    technology: str | None = None
    size: str = ""
    count: int | None = None
    """Elements in one body."""
    letter: str | None = None
    """A tolerance letter that stands alone behind the value: ``4.7k J``."""


def ratings(found: Sequence[Token], kind: str) -> Ratings:
    """What the tokens of one text say beside the value."""
    words = [token.text for token in found if token.kind == "word"]
    capacitor = kind == "capacitor"
    absolute = _one(float(token.parts["n"] or 0) for token in found if token.kind == "picofarads")
    sizes = {token.parts["size"] for token in found if token.kind == "size"}
    return Ratings(
        tolerance=_tolerance(found),
        picofarads=absolute * 1e-12 if absolute is not None and capacitor else None,
        voltage=_voltage(found),
        power=_one(watts for token in found if token.kind == "power" and (watts := _watts(token)) <= _HIGHEST_WATTS),
        coefficient=_one(float(t.parts["n"] or 0) * 1e-6 for t in found if t.kind == "coefficient"),
        dielectric=_dielectric(words, tantalum=any(t.kind == "tantalum" for t in found)) if capacitor else None,
        technology=None if capacitor else _named(words, _RESISTOR_TECHNOLOGIES),
        size=(sizes.pop() or "") if len(sizes) == 1 else "",
        count=_count(found),
        letter=_letter(found),
    )


def _one(values: Iterable[float]) -> float | None:
    several = set(values)
    return several.pop() if len(several) == 1 else None


def _tolerance(found: Sequence[Token]) -> tuple[float, float] | None:
    several = {share for token in found if (share := _share(token)) is not None}
    return several.pop() if len(several) == 1 else None


def _share(token: Token) -> tuple[float, float] | None:
    if token.kind == "uneven":
        ends = sorted(float((token.parts[key] or "0").replace(" ", "")) for key in "ab")
        return (ends[0] / 100, ends[1] / 100) if -100 < ends[0] <= 0 <= ends[1] else None
    if token.kind != "tolerance":
        return None
    percent = float(token.parts["n"] or 0)
    if percent > _HIGHEST_FRACTION and percent % 1:
        return None
    share = percent / 100
    return (-share, share) if 0 < share < 1 else None


def _count(found: Sequence[Token]) -> int | None:
    several = {int(token.parts["count"] or 2) for token in found if token.kind == "count"}
    return several.pop() if len(several) == 1 else None


def _letter(found: Sequence[Token]) -> str | None:
    """The letter that follows a value without one: of ``10k J 0603`` the J, of ``100uF D`` nothing."""
    for before, token in pairwise(found):
        if token.kind == "letter" and before.kind in ("value", "rkm") and not before.parts.get("letter"):
            return token.parts["letter"]
    return None


def _voltage(found: Sequence[Token]) -> float | None:
    """The one voltage in volts, else the one voltage code: ``1H``, or in front of digits ``2A104J``.

    ``1V`` and ``2V`` may be either.
    """
    written = {_volts(token) for token in found if token.kind == "voltage" and token.text.strip() not in ("1V", "2V")}
    codes = {volts(token.parts.get("volts") or "") for token in found if token.kind in ("volts", "code")} - {None}
    several = written or codes
    return several.pop() if len(several) == 1 else None


def _volts(token: Token) -> float:
    if token.parts.get("n") is None:
        return float(f"{token.parts['a']}.{token.parts['b']}")
    prefix = "k" if "KV" in token.text else token.parts.get("prefix")
    return float(token.parts["n"] or 0) * _SCALE[prefix]


def _watts(token: Token) -> float:
    if token.parts.get("n") is None:
        return float(token.parts["a"] or 0) / max(float(token.parts["b"] or 1), 1.0)
    return float(token.parts["n"] or 0) * _SCALE[token.parts.get("prefix")]


def _dielectric(words: Sequence[str], *, tantalum: bool) -> str | None:
    codes = {code for word in words if (code := code_of(word)) is not None}
    if len(codes) == 1:
        return codes.pop()
    if codes:
        return None
    return "tantalum" if tantalum else _named(words, _TECHNOLOGIES)


def is_rating(word: str) -> bool:
    """Whether a word names a dielectric or a technology."""
    lower = word.lower()
    return code_of(word) is not None or any(
        re.fullmatch(pattern, lower) for _, pattern in (*_TECHNOLOGIES, *_RESISTOR_TECHNOLOGIES)
    )


def _named(words: Sequence[str], table: Sequence[tuple[str, str]]) -> str | None:
    for name, pattern in table:
        if any(re.fullmatch(pattern, word.lower()) for word in words):
            return name
    return None
