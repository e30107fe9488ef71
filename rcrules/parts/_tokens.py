"""Cuts a value text into tokens: values with unit, ratings, dielectrics, sizes, and words that mean nothing here.

Every pattern is anchored where the scan stands and repeats at most a few characters, so the work is linear.
"""

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from rcrules.parts._spelling import SIZES
from rcrules.parts._voltage_codes import LETTERS

_N: Final = r"(?:\d{1,12}(?:\.\d{0,12})?|\.\d{1,12})"
_X: Final = rf"{_N}(?:[eE][+-]?\d{{1,2}})?"
"""A number, an exponent allowed: before a unit it can be nothing else."""
_END: Final = r"(?:(?![A-Za-z0-9µΩ%°]|\.\d)|(?=[xX]\d)|(?=\d{1,4}(?:\.\d{1,3})?\s?(?:%|[Vv]|k[Vv])))"
"""No letter or digit follows, or ``x35V``, or a tolerance or voltage is glued on: ``20K5%``, ``10uF50V``."""
_STOP: Final = r"(?![A-Za-z0-9.])"
_MARK: Final = r"(?![\d.]*\s?(?:%|[Vv]))"
"""The digits before are not the start of a glued tolerance or voltage."""
_OHM: Final = r"(?:[Oo][Hh][Mm](?:[Ss]|ios)?|[Oo][Mm]|Ω|R|r)"
_LETTER: Final = r"(?P<letter>[BCDEFGHJKMNP])?"
_SIZE: Final = "|".join(sorted(SIZES))
_SEPARATORS: Final = re.compile(r"(?:[^\w.%°±+{}-]|_)+|[+-]|(?<=[A-Za-z0-9%])[xX](?=\d)|\.(?!\d)")
_WORD: Final = re.compile(r"(?:[^\W_]|[.%°±]){1,80}")
_OR: Final = r"(?:/|,|\.{2,3}|to)?"
_PERCENT: Final = r"(?:%|pct\.?|percent|per\s?cent)"

_COMMON: Final = (
    ("uneven", rf"(?P<a>\+\s?{_N}|0)\s?%?\s?{_OR}\s?(?P<b>-\s?{_N})\s?%"),
    ("uneven", rf"(?P<a>-\s?{_N}|0)\s?%?\s?{_OR}\s?(?P<b>\+\s?{_N})\s?%"),
    ("tolerance", rf"(?:±|\+/-|\+-|-/\+)?\s?(?P<n>{_N})\s?{_PERCENT}"),
    ("picofarads", rf"(?:±|\+/-|\+-)\s?(?P<n>{_N})\s?[pP][Ff]?{_END}"),
    ("coefficient", rf"(?:±|\+/-|\+-)?\s?(?P<n>{_N})\s?(?:ppm|PPM)(?:\s?/\s?(?:°\s?C|K|C|degC|deg))?{_END}"),
    ("power", rf"(?P<a>\d{{1,3}})/(?P<b>\d{{1,4}})\s?(?:[Ww](?:att)?s?){_END}"),
    ("power", rf"(?P<a>1)/(?P<b>2|4|8|10|16|20|32){_END}"),
    ("power", rf"(?P<n>{_N})\s?(?P<prefix>[mkµu])?(?:[Ww](?:att)?s?){_END}"),
    ("other", rf"{_N}\s?(?:°\s?C|deg\s?C|[kMG]?Hz|mm|h|hrs|[mu]?A)(?![A-Za-z0-9])"),
    ("other", r"(?:RM|LS|P|D|Ø|H|L|W)\s?=?\s?\d{1,2}(?:\.\d{1,2})?\s?mm(?![A-Za-z0-9])"),
    ("other", rf"{_N}[xX]{_N}(?:[xX]{_N})?(?:mm)?{_STOP}"),
    ("count", r"(?P<count>[2-9]|1[0-6])\s?[xX*]\s?(?=R?\.?\d)"),
    (
        "voltage",
        rf"[<>]?=?\s?(?P<n>{_N})\s?(?P<prefix>[km])?W?(?:[Vv](?:DC|AC|dc|ac|R|olts?)?|KV(?:DC|AC)?|VOLTS?){_END}",
    ),
    ("voltage", rf"(?P<a>\d{{1,4}})[Vv](?P<b>\d{{1,2}}){_END}"),
    ("size", rf"(?:RES|CAP|IND|SMD|SMT|R|C|L|CHIP)?[_-]?(?P<size>{_SIZE})(?:X\d|[A-EVX])?(?:DNP|TBD)?{_STOP}"),
)
_TO: Final = r"\s?(?:-|\.{2,3}|…|~)\s?"
_RESISTOR: Final = (
    ("count", r"[xX*]\s?(?P<count>[2-9]|1[0-6])(?![A-Za-z0-9.]|\s?[Vv%])"),
    ("range", rf"{_N}[kKMRΩ]?{_TO}{_N}\s?(?:[kKM]{_OHM}?|{_OHM}){_END}"),
    ("unclear", rf"\d{{1,6}}E\d{_END}"),
    ("coefficient", rf"(?:TCR?|TK)\s?=?\s?(?P<n>\d{{1,4}}){_STOP}"),
    ("rkm", rf"(?P<whole>\d{{0,9}})(?P<mark>[RrL])(?P<part>\d{{1,6}}){_MARK}{_LETTER}{_END}"),
    ("rkm", rf"(?P<whole>\d{{1,9}})(?P<mark>[kKMG])(?P<part>\d{{1,6}}){_MARK}{_OHM}?{_LETTER}{_END}"),
    ("rkm", rf"(?P<whole>)(?P<mark>[KM])(?P<part>\d{{2,3}}){_MARK}{_LETTER}{_END}"),
    ("value", rf"(?P<n>{_X})\s?(?P<prefix>[Mm][Ee][Gg]|[µumkKMGT])?\s?{_OHM}{_LETTER}{_END}"),
    ("value", rf"(?P<n>{_X})\s?(?P<prefix>[Mm][Ee][Gg][Aa]|[Kk][Ii][Ll][Oo]?|milli|MILLI|Milli)[\s-]?{_OHM}{_END}"),
    ("value", rf"(?P<n>{_N})-{_OHM}{_END}"),
    ("value", rf"(?P<n>{_N})(?P<prefix>[kKM])[oO]{_STOP}"),
    ("unclear", rf"\d{{1,3}}m\d{{1,3}}{_END}"),
    ("milli", rf"(?P<n>{_N})\s?(?P<prefix>m){_LETTER}{_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>[Mm][Ee][Gg]|[kKMG]){_LETTER}{_END}"),
    ("value", rf"(?P<n>{_N})[Ee](?![+-]?\d){_END}"),
    ("letter", rf"(?P<letter>[FGJ]){_STOP}"),
)
_CODED: Final = r"(?P<code>\d{3})"
_CAPACITOR: Final = (
    ("range", rf"{_N}(?:[pnuµ]F?)?{_TO}{_N}\s?[pnuµ][Ff]?{_END}"),
    ("tantalum", r"T(?=\d{1,4}(?:\.\d{1,2})?\s?[uµU])"),
    ("count", r"(?:[xX*]\s?(?P<count>[3-9]|1[0-6])|[x*]\s?2)(?![A-Za-z0-9.]|\s?[Vv%])"),
    ("group", rf"G[HMP]\d{{2,4}}{_STOP}"),
    ("code", rf"(?P<volts>[0-3][{LETTERS}]){_CODED}(?P<letter>[BCDFGJKMZ]){_END}"),
    ("rkm", rf"(?P<whole>\d{{0,9}})(?P<mark>[pnuµPNU])(?P<part>\d{{1,6}}){_MARK}[Ff]?(?P<letter>[BCDGJKMZ])?{_END}"),
    ("value", rf"(?P<n>{_X})\s?(?P<prefix>[pP])[Ff]?(?P<letter>[BCGJKMZ])?{_END}"),
    ("value", rf"(?P<n>{_X})\s?(?P<prefix>[pnuµPNU]|mk|mc|MK)\s?(?:[Ff][Dd]?|farads?)(?P<letter>[JKMGZ])?{_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>[pnuµPNU]|mk)(?P<letter>[JKMGZ])?{_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>[Mm][Ff][Dd]){_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>MM|mm|uu|µµ)[Ff][Dd]?{_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>[kK][pP])[Ff]?{_END}"),
    ("value", rf"(?P<n>{_N})\s?(?P<prefix>[Mm]icro|[Nn]ano|[Pp]ico)[\s-]?[Ff](?:arads?)?{_END}"),
    ("value", rf"(?P<n>{_X})\s?(?:F|farads?){_END}"),
    ("code", rf"{_CODED}(?P<letter>[BDFGHJKMZ]){_END}"),
    ("code", rf"(?P<code>\d\d[89])(?P<letter>C){_END}"),
    ("code", rf"(?P<a>\d)R(?P<b>\d)(?P<letter>[BCDFGJK])?{_END}"),
    ("unclear", rf"{_N}\s?[mMf][Ff]?{_END}"),
    ("unclear", rf"\d{{0,3}}[mM]\d{{1,3}}[Ff]?{_END}"),
    ("volts", rf"(?P<volts>0[EGJK]|1[CDEH]|1J|2[BCDEGHJQW]|3C){_STOP}"),
    ("letter", rf"(?P<letter>[GJKMZ]){_STOP}"),
)
_BARE: Final = (("bare", rf"(?P<n>{_N}(?:[eE][+-]?\d{{1,3}})?){_END}"),)


@dataclass(frozen=True, slots=True, kw_only=True)
class Token:
    """A piece of a value text."""

    kind: str
    """``value rkm code milli bare range unclear count letter group volts``, a rating, or ``word``."""
    text: str
    parts: dict[str, str | None]
    """Named groups of the pattern."""
    signed: bool
    """A minus sign glued to the front, as in ``-39e-9``."""


def _compiled(table: tuple[tuple[str, str], ...]) -> tuple[tuple[str, re.Pattern[str]], ...]:
    return tuple((kind, re.compile(pattern)) for kind, pattern in table)


_TABLES: Final = {
    "resistor": _compiled((*_COMMON, *_RESISTOR, *_BARE)),
    "capacitor": _compiled((*_COMMON, *_CAPACITOR, *_BARE)),
}


def tokens(text: str, kind: str) -> Iterator[Token]:
    """The tokens of a text in plain spelling; kind: ``resistor`` or ``capacitor``."""
    at = 0
    while at < len(text):
        found, name = _match(text, at, _TABLES[kind])
        if found is None:
            blank = _SEPARATORS.match(text, at)
            if blank is not None:
                at = blank.end()
                continue
            found, name = _WORD.match(text, at), "word"
        if found is None or found.end() == at:
            at += 1
            continue
        signed = at > 0 and text[at - 1] == "-" and (at == 1 or text[at - 2] in " (,;")
        yield Token(kind=name, text=found[0], parts=found.groupdict(), signed=signed)
        at = found.end()


def _match(text: str, at: int, table: tuple[tuple[str, re.Pattern[str]], ...]) -> tuple[re.Match[str] | None, str]:
    for name, pattern in table:
        found = pattern.match(text, at)
        if found is not None:
            return found, name
    return None, ""
