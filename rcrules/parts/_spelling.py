"""Brings value texts to one alphabet: mojibake, micro and ohm signs, Cyrillic letters, decimal commas."""

import re
from typing import Final

_REPLACED: Final = (
    ("Âµ", "µ"),
    ("Î¼", "µ"),
    ("Âμ", "µ"),
    ("Î©", "Ω"),
    ("â„¦", "Ω"),
    ("Â±", "±"),
    ("Â°", "°"),
    ("\u2126", "Ω"),
    ("\u03bc", "µ"),
    ("\ufffd", "?"),
    ("\u00a0", " "),
    ("\u2009", " "),
    ("\u202f", " "),
    ("−", "-"),
    ("–", "-"),
    ("—", "-"),
    ("×", "x"),
    ("℃", "°C"),
    ("（", "("),
    ("）", ")"),
    ("，", ", "),
)
"""UTF-8 read as Latin-1, signs with two code points, typographic blanks and dashes, full-width brackets."""
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
_GROUPED: Final = re.compile(r"(?<![\d.,])[1-9]\d{0,2},\d{3}(?!\d)")
_COMMA: Final = re.compile(r"(?<![\d.,])(\d{1,9}),(?=\d)|(?<![\d.,\w]),(?=\d)")
_SIZES: Final = (
    "01005 0201 0402 0603 0805 1005 1206 1210 1218 1608 1806 1808 1812 1825 2010 2012 2220 2225 2512 3216 3225"
)
SIZES: Final = frozenset(_SIZES.split())
"""Case sizes in hundredths of an inch or tenths of a millimetre that may stand in a value text."""


def plain(text: str) -> str:
    """The text in Latin letters, ``µ``, ``Ω`` and ASCII blanks, commas still as written."""
    for found, put in _REPLACED:
        text = text.replace(found, put)
    if any("а" <= letter.lower() <= "я" for letter in text):
        for found, put in _CYRILLIC:
            text = text.replace(found, put)
        text = text.translate(_LETTERS)
    return text


def thousands_or_decimals(text: str) -> bool:
    """Whether a comma could be either: ``1,000``, ``49,900``."""
    grouped = _GROUPED.search(text)
    return grouped is not None and grouped[0].partition(",")[0] not in SIZES


def with_points(text: str) -> str:
    """Decimal commas as points; a comma after a case size (``0402,10uF``) or before a blank separates."""

    def point(found: re.Match[str]) -> str:
        digits = found[1] or ""
        separates = digits in SIZES or (len(digits) > 1 and digits.startswith("0"))
        return f"{digits}, " if separates else f"{digits}."

    return _COMMA.sub(point, text)
