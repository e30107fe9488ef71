"""The words by which a value text says that the part is not fitted, in the languages boards come in."""

import re
from typing import Final

_WHOLE: Final = re.compile(
    r"opt|option|optional|tbd|n[fpcmbil]|n/?a|none|not used|unused|omit|omitted|leer|vacant|空|空贴|未用"
)
"""Texts that say so only when nothing else stands in the cell."""
_GAP: Final = r"[\s_-]{1,3}"
_VERBS: Final = (
    "fit|fitted|populate|populated|place|placed|mount|mounted|install|installed|stuff|stuffed|assemble|assembled"
)
_NOT_FITTED: Final = re.compile(
    r"(?:dnp|(?<![a-z0-9])(?:dn[ifsmla]|n\.\s?p\.?|n\.\s?m\.?|n\.\s?b\.?|n\.\s?c\.?|n/p|n/m"
    rf"|do{_GAP}not{_GAP}\w{{3,12}}|don'?t{_GAP}(?:{_VERBS})|not?{_GAP}(?:to{_GAP}be{_GAP})?(?:{_VERBS}|used|load|loaded)"
    rf"|no{_GAP}(?:soldar|pop|poner|montar|colocar|poblar|instalar)|no-?pop|no-?stuff|no-?load"
    rf"|nicht{_GAP}(?:best(?:ü|ue)ck(?:t|en)|montiert|montieren)|unbest(?:ü|ue)ckt"
    rf"|(?:non|ne{_GAP}pas|pas){_GAP}(?:mont(?:é|e|ée|er)|implant(?:é|er)|c(?:â|a)bl(?:é|er)|posé|équipé)"
    rf"|non{_GAP}(?:montare|montato|saldare)|n(?:ã|a)o{_GAP}(?:montar|montado|colocar)"
    rf"|niet{_GAP}(?:plaatsen|monteren|geplaatst)|(?:ej|inte){_GAP}monter(?:as|ad)|ikke{_GAP}monter(?:t|es|et)"
    rf"|nie{_GAP}(?:montować|montowac|obsadzać|lutować)|neosazovat|neosazen[oý]?|neosazuje|nem{_GAP}ültetendő"
    rf"|не{_GAP}(?:ставить|устанавливать|монтировать|уст\.?|устанавливается|монтируется|паять|запаивать)"
    r"|unpopulated))(?![a-zа-я0-9])"
    r"|(?<=[a-zµω]\s)n[cf](?![a-z0-9])|不贴|不焊|不装|未贴|未焊|不上件|未実装|実装しない|実装なし|미실장"
)


def without_marks(text: str) -> tuple[str, str]:
    """The words that say 'not fitted', '' when none do, and the text without them."""
    lower = text.lower()
    if _WHOLE.fullmatch(lower.strip(" <>()[]?!.*-")):
        return text.strip(), ""
    found = _NOT_FITTED.search(lower)
    if found is None or len(lower) != len(text):
        return "", text
    return text[found.start() : found.end()].strip(), text[: found.start()] + " " + text[found.end() :]
