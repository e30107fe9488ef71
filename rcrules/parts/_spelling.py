"""Brings value texts to one alphabet: mojibake, micro and ohm signs, letters of other scripts, decimal commas."""

import re
import unicodedata
from typing import Final

_MOJIBAKE: Final = (
    ("Âµ", "µ"),
    ("Âμ", "µ"),
    ("Î¼", "µ"),
    ("Вµ", "µ"),
    ("碌", "µ"),
    ("渭", "µ"),
    ("╡", "µ"),
    ("Î©", "Ω"),
    ("â„¦", "Ω"),
    ("О©", "Ω"),
    ("惟", "Ω"),
    ("Â±", "±"),
    ("В±", "±"),
    ("卤", "±"),
    ("Â°", "°"),
    ("掳", "°"),
)
"""UTF-8 read as Latin-1, CP1251 or GBK; Latin-1 read as CP437."""
_REPLACED: Final = (
    ("\u2126", "Ω"),
    ("\u038f", "Ω"),
    ("ω", "Ω"),
    ("\u03bc", "µ"),
    ("\u2044", "/"),
    ("−", "-"),
    ("–", "-"),
    ("—", "-"),
    ("×", "x"),
    ("∗", "*"),
    ("℃", "°C"),
    ("’", "'"),
    ("，", ", "),
    ("欧姆", "ohm"),
    ("千欧", "kohm"),
    ("兆欧", "Mohm"),
    ("欧", "ohm"),
    ("微法", "uF"),
    ("纳法", "nF"),
    ("皮法", "pF"),
    ("オーム", "ohm"),
)
"""Signs with two code points, typographic dashes and quotes, unit words of other scripts."""
_LOST: Final = re.compile("(?<=[0-9 ])\ufffd(?=[Ff](?![A-Za-z]))")
"""A sign that a conversion lost before F: p and n are in every alphabet, so it was micro."""
_GROUPS: Final = (
    (re.compile(r"(?<![^\W\d_])(?:МП0|МПО)(?![^\W_])"), "NP0"),
    (re.compile(r"(?<![^\W_])Н(?=(?:10|20|30|50|70|90)(?![^\W_]))"), "GH"),
    (re.compile(r"(?<![^\W_])[МM](?=(?:33|47|75|150|220|330|470|750|1500|2200)(?![^\W_]))"), "GM"),
    (re.compile(r"(?<![^\W_])П(?=(?:33|60|100|120)(?![^\W_]))"), "GP"),
)
"""Cyrillic groups of temperature behaviour (МП0, Н90, М750, П33): no values in these letters."""
_CYRILLIC: Final = (
    ("мк", "u"),
    ("МК", "u"),
    ("Мк", "u"),
    ("Ом", "ohm"),
    ("ом", "ohm"),
    ("ОМ", "ohm"),
    ("Вт", "W"),
    ("вт", "W"),
    ("ВТ", "W"),
)
_LETTERS: Final = str.maketrans("кКмМпПнНфФвВрРсСхХоОаАеЕТ", "kKmMpPnNFFVVRRCCXXOOaAeET")
"""Cyrillic letters of units, and those that look like Latin ones: к м п н Ф В; Х7R, С0G, Р."""
_HELD_APART: Final = re.compile(r"(?<=\d)'(?=\d{3}(?!\d))")
_LONG: Final = re.compile(r"(?<![\w.,])\d{1,3}(?:(?:,\d{3}){2,}|(?:\.\d{3}){2,})(?![\w.,])")
_ROUND: Final = re.compile(r"(?<![\w.,])([1-9]\d{0,2}) (?=000(?!\d))")
_GROUPED: Final = re.compile(r"(?<![\d.,])[1-9]\d{0,2},\d{3}(?!\d)")
_BLANKS: Final = re.compile(
    r"(?<![\w.,/-])[1-9]\d{0,2} \d{3}(?=\s?(?:[kKM]?(?:[Oo][Hh][Mm]|[Oo]m|Ω|R)|[pnuµmPNU][Ff]|$))"
)
_POINTS: Final = re.compile(r"(?<![\w.,])[1-9]\d{0,2}\.\d00(?=\s?(?:[Oo][Hh][Mm]|Ω|R|[uµ]|$))")
_COMMA: Final = re.compile(r"(?<![\d.,])(\d{1,9}),(?=\d)|(?:(?<=[\s(=:/-])|^),(?=\d)")
_TYPES: Final = re.compile(r"(?:О?МЛТ|С[1-6]-\d{1,3}\w?|Р1-\d{1,2}\w?)-(0,\d{2,3}|[1-9]\d?)-(?=\d)")
"""Resistor types whose next number is the rated power: ``МЛТ-0,125-10 кОм``."""
_SCRIPTS: Final = re.compile(r"(?<=[\u3040-\u9fff\uac00-\ud7af])(?=[A-Za-z0-9])")
"""Where Chinese, Japanese or Korean words touch a number."""
_SIZES: Final = (
    "01005 0201 0402 0603 0805 1005 1206 1210 1218 1608 1806 1808 1812 1825 2010 2012 2220 2225 2312 2512 2917 3216 "
    "3225 3528 6032 7343"
)
SIZES: Final = frozenset(_SIZES.split())
"""Case sizes in hundredths of an inch or tenths of a millimetre that may stand in a value text."""


def plain(text: str) -> str:
    """The text in Latin letters, ``µ``, ``Ω`` and ASCII blanks, commas still as written."""
    if not text.isascii():
        text = _latin(text)
    text = _HELD_APART.sub("", text)
    text = _LONG.sub(lambda found: re.sub(r"[.,]", "", found[0]), text)
    return _ROUND.sub(r"\1", text)


def _latin(text: str) -> str:
    for found, put in _MOJIBAKE:
        text = text.replace(found, put)
    text = "".join(map(_compatible, text))
    for found, put in _REPLACED:
        text = text.replace(found, put)
    text = _SCRIPTS.sub(" ", _LOST.sub("µ", text).replace("\ufffd", "?"))
    if any("а" <= letter.lower() <= "я" for letter in text):
        text = _TYPES.sub(r"\1W ", text)
        for group, put in _GROUPS:
            text = group.sub(put, text)
        for found, put in _CYRILLIC:
            text = text.replace(found, put)
        text = text.translate(_LETTERS)
    return text


def _compatible(letter: str) -> str:
    """Full-width letters and squared units (``１``, ``㎌``) as plain ones; raised digits are no digits."""
    raised = letter in "\u00b2\u00b3\u00b9" or "\u2070" <= letter <= "\u209f"
    return "?" if raised else unicodedata.normalize("NFKC", letter) if letter not in "，" else letter


def thousands_or_decimals(text: str) -> str:
    """Why a plain text may part thousands or decimals (``1,000``, ``4 700 pF``, ``2.200 uF``), '' where it is clear."""
    grouped = _GROUPED.search(text)
    if grouped is not None and grouped[0].partition(",")[0] not in SIZES:
        return "the comma may part thousands or decimals"
    if _BLANKS.search(text) is not None:
        return "the blank may part thousands or two numbers"
    if _POINTS.search(text) is not None:
        return "the point may part thousands or decimals"
    return ""


def with_points(text: str) -> str:
    """Decimal commas as points; a comma after a case size (``0402,10uF``) or before a blank separates."""

    def point(found: re.Match[str]) -> str:
        digits = found[1] or ""
        separates = digits in SIZES or (len(digits) > 1 and digits.startswith("0"))
        return f"{digits}, " if separates else f"{digits}."

    return _COMMA.sub(point, text)
