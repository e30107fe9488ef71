"""Whether a part is fitted, from the words and columns that exports use for it."""

import re
from collections.abc import Iterable
from functools import lru_cache
from typing import Final

_WHOLE: Final = frozenset({"opt", "option", "optional", "tbd", "nf", "np", "nc", "none", "not used", "unused"})
"""Values that say 'not fitted' only when nothing else stands in the cell."""
_ANYWHERE: Final = re.compile(
    r"(?<![a-z0-9])(?:dnp|dni|dnf|dns|n\.\s?p\.?|n/p|do\s+not\s+(?:populate|place|fit|install|mount|stuff|solder|assemble)"
    r"|not\s+(?:fitted|populated|placed|mounted|installed|stuffed|assembled)|no\s+(?:soldar|stuff|pop|poner|montar)"
    r"|nicht\s+best(?:ü|ue)ckt|unpopulated)(?![a-z0-9])",
    re.IGNORECASE,
)
_OMIT_NAMES: Final = frozenset(
    {"dnp", "dni", "dnf", "dns", "do not populate", "do not place", "do not fit", "do not install", "do not mount"}
    | {"not fitted", "not populated", "not mounted", "no populate", "nopop", "no pop", "unpopulated", "no stuff"}
)
_FIT_NAMES: Final = frozenset(
    {"populate", "populated", "mounted", "mount", "fitted", "fit", "fitting", "assemble", "assembled", "installed"}
    | {"place", "placed", "stuff", "config", "assembly", "mounting", "montado"}
)
_NOTE_NAMES: Final = frozenset({"note", "notes", "remark", "remarks", "variant", "option", "status", "bom note"})
_NUMBER_NAMES: Final = frozenset(
    {"mpn", "mypn", "part number", "manufacturer part number", "manufacturer part", "manf", "pn", "part no", "part"}
)
_NO: Final = frozenset({"0", "no", "n", "false", "f", "none", "not", "-", "off", "nein", "non"})
_YES: Final = frozenset({"1", "yes", "y", "true", "t", "x", "on", "ja", "si", "sí", "oui", "✓", "✔", "*"})


@lru_cache(maxsize=4096)
def said_not_fitted(text: str) -> bool:
    """True where a value text itself says that the part is not fitted: ``DNP``, ``10k DNP``, ``100 - No Soldar``."""
    plain = text.strip().lower().strip("<>()[]?!")
    return plain in _WHOLE or _ANYWHERE.search(text) is not None


def fitting(value: str, fields: Iterable[tuple[str, str]]) -> tuple[bool | None, str]:
    """(fitted, why) from the value text and the named fields of a part; None = the export does not say.

    ``Populate = No``, ``DNP = X``, ``Note = DNP``, ``MPN = DNP`` and a value such as ``0R-DNP`` say no. Only a column
    of the first kind can say yes, and any no wins over it.
    """
    if said_not_fitted(value):
        return False, f"value {value.strip()!r}"
    answer: bool | None = None
    why = ""
    for name, text in fields:
        said = _field_says(name, text)
        if said is False:
            return False, f"{name.strip()} = {text.strip()!r}"
        if said is True and answer is None:
            answer, why = True, f"{name.strip()} = {text.strip()!r}"
    return answer, why


def fitted_in(text: str) -> bool | None:
    """What a cell in a column of its own for a variant says: fitted, not fitted, or (None) something else."""
    word = text.strip().lower()
    if word in _NO or said_not_fitted(text):
        return False
    return True if word in _YES or word in _FIT_NAMES else None


def tells_fitting(column: str) -> bool:
    """Whether a column is known to say what is fitted, or how many, for the board as a whole."""
    plain = _plain_name(column)
    return plain in _OMIT_NAMES | _FIT_NAMES | _NOTE_NAMES | {"qty", "quantity", "count", "amount", "item", "no", "nr"}


@lru_cache(maxsize=4096)
def _field_says(written: str, told: str) -> bool | None:
    name, text = _plain_name(written), told.strip()
    word = text.lower()
    if not word:
        return None
    if name in _OMIT_NAMES:
        return word in _NO
    if name in _FIT_NAMES:
        if word in _NO or said_not_fitted(text):
            return False
        return True if word in _YES or word in _FIT_NAMES else None
    if name in _NOTE_NAMES and _ANYWHERE.search(text):
        return False
    if name in _NUMBER_NAMES and _ANYWHERE.fullmatch(text):
        return False
    return None


@lru_cache(maxsize=1024)
def _plain_name(name: str) -> str:
    return " ".join(re.sub(r"[^\w]+|_", " ", name.lower()).split())
