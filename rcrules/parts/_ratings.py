"""Ratings among the tokens of a text: tolerance, voltage, power, temperature coefficient, dielectric, size."""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Final

from rcrules.parts._dielectrics import code_of
from rcrules.parts._tokens import Token

_TECHNOLOGIES: Final = (
    ("tantalum", r"tant|tantal\w{0,4}|tántalo|тантал\w{0,4}"),
    ("polymer", r"polymer|poly-al|polímero"),
    ("aluminium", r"alum|alumini?um|elec|electrolytic\w{0,2}|electrolitico|electrolítico|elko|elyt|elektrolyt\w{0,10}"),
    ("PPS film", r"pps"),
    ("PEN film", r"pen"),
    ("PET film", r"pet|mkt|polyester|poliester|mylar"),
    ("PP film", r"pp|mkp|fkp|polypropylene|polipropileno"),
    ("film", r"film|mks|folie\w{0,12}"),
    ("mica", r"mica"),
    ("ceramic", r"cer|ceramic|mlcc|cerámico|ceramico|keramik\w{0,12}|керам\w{0,10}"),
)
_RESISTOR_TECHNOLOGIES: Final = (
    ("thin film", r"thin"),
    ("thick film", r"thick"),
    ("metal film", r"metal|mf"),
    ("carbon film", r"carbon|cf"),
    ("wire-wound", r"wire-?wound|ww|wirewound|drahtwiderstand"),
)
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


def ratings(found: Sequence[Token], kind: str) -> Ratings:
    """What the tokens of one text say beside the value."""
    words = [token.text for token in found if token.kind == "word"]
    capacitor = kind == "capacitor"
    absolute = _one(float(token.parts["n"] or 0) for token in found if token.kind == "picofarads")
    sizes = {token.parts["size"] for token in found if token.kind == "size"}
    return Ratings(
        tolerance=_tolerance(found),
        picofarads=absolute * 1e-12 if absolute is not None and capacitor else None,
        voltage=_one(_volts(token) for token in found if token.kind == "voltage"),
        power=_one(_watts(token) for token in found if token.kind == "power"),
        coefficient=_one(float(t.parts["n"] or 0) * 1e-6 for t in found if t.kind == "coefficient"),
        dielectric=_dielectric(words, tantalum=any(t.kind == "tantalum" for t in found)) if capacitor else None,
        technology=None if capacitor else _named(words, _RESISTOR_TECHNOLOGIES),
        size=(sizes.pop() or "") if len(sizes) == 1 else "",
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
    share = float(token.parts["n"] or 0) / 100
    return (-share, share) if 0 < share < 1 else None


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


def _named(words: Sequence[str], table: Sequence[tuple[str, str]]) -> str | None:
    for name, pattern in table:
        if any(re.fullmatch(pattern, word.lower()) for word in words):
            return name
    return None
