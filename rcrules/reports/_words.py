"""Numbers and names of the document in words that the text reports share."""

import math
from collections.abc import Iterable, Mapping
from typing import Final

from rcrules.findings import Document, Finding, Json
from rcrules.quantities import show

_PREPOSITIONS: Final = {"event": "at", "from": "from", "to": "to"}
_EXTREMES: Final = {("s", "at_least"): "shortest", ("s", "at_most"): "longest"}


def count(number: int, word: str, plural: str = "") -> str:
    """``1 error``, ``2 errors``."""
    return f"{number} {word if number == 1 else plural or word + 's'}"


AT_ONCE: Final = 1e-12
"""Times shorter than this are at once; the document keeps their numbers. [s]"""


def number(value: float | None, unit: str, *, percent: bool = False) -> str:
    """A number with its unit; a ratio in per cent where the rule speaks so."""
    if value is None or value != value:
        return "not defined"
    if unit == "s" and 0.0 < value < AT_ONCE:
        return f"under {show(AT_ONCE, unit)}"
    return show(100 * value, "1") + " %" if percent else show(value, unit)


def bounds(low: float, nominal: float, high: float, unit: str, *, percent: bool = False) -> str:
    """``21.9 ms .. 35.7 ms .. 49.7 ms``, or one number where all three read the same."""
    texts = [number(value, unit, percent=percent) for value in (low, nominal, high)]
    return texts[0] if len(set(texts)) == 1 else " .. ".join(texts)


def part_texts(document: Document) -> Mapping[str, str]:
    """Reference -> ``R12 10 kΩ``; for a value not known the text of the schematic."""
    return {row["ref"]: _part_text(row) for row in document.parts}


def _part_text(row: Json) -> str:
    if row["value"] is None or row["unit"] is None:
        return f'{row["ref"]} "{row["text"]}"' if row["text"] else str(row["ref"])
    return f"{row['ref']} {show(row['value'], row['unit'])}"


def parts_text(refs: Iterable[str], texts: Mapping[str, str]) -> str:
    """``R12 10 kΩ, C7 10 µF``."""
    return ", ".join(texts.get(ref, ref) for ref in refs)


def asked(finding: Finding) -> str:
    """What was measured: ``delay at power-up from supply valid to "may switch" (30 % of +3V3)``."""
    told = finding.measure.replace("_", " ")
    for name, value in finding.options.items():
        text = f'"{value}"' if name == "to" and str(value)[:1].isalpha() else str(value)
        told += f" {_PREPOSITIONS[name]} {text}" if name in _PREPOSITIONS else f", {name.replace('_', ' ')} {text}"
    level = finding.detail.get("level_text")
    return told + (f" ({level})" if level else "")


def measured_text(finding: Finding) -> str:
    """``21.9 ms .. 35.7 ms .. 49.7 ms``; '' where nothing was measured."""
    found = finding.measured
    return bounds(found.low, found.nominal, found.high, found.unit, percent=in_percent(finding)) if found else ""


def in_percent(finding: Finding) -> bool:
    """True where the limit of a plain ratio is written in per cent."""
    return finding.limit is not None and "%" in str(finding.limit.get("text", ""))


def limit_text(finding: Finding) -> str:
    """``must be at least 30 ms``."""
    limit = finding.limit or {}
    if "at_least" in limit and limit["at_least"] == limit.get("at_most"):
        return f"must be {limit.get('text') or number(limit['at_least'], limit['unit'], percent=in_percent(finding))}"
    words = {"at_least": "at least", "at_most": "at most"}
    found = [
        f"{words[key]} {number(limit[key], limit['unit'], percent=in_percent(finding))}"
        for key in words
        if key in limit
    ]
    return "must be " + " and ".join(found) if found else ""


def broken_side(finding: Finding) -> str:
    """``at_least`` or ``at_most``: the limit that the worst case breaks or comes nearest to."""
    sides = [key for key in ("at_least", "at_most") if key in (finding.limit or {})]
    return str(finding.detail.get("side") or (sides[0] if sides else "at_least"))


def extreme(finding: Finding) -> str:
    """``shortest``, ``longest``, ``lowest`` or ``highest``: the worst end of the measured bounds."""
    side = broken_side(finding)
    unit = finding.measured.unit if finding.measured else ""
    return _EXTREMES.get((unit, side), "lowest" if side == "at_least" else "highest")


def margin_text(finding: Finding) -> str:
    """``short by 8.1 ms``, ``over by 2 V``, ``3 ms to spare``; '' without a finite margin."""
    margin, limit = finding.margin, finding.limit
    if margin is None or limit is None:
        return ""
    if finding.detail.get("never"):
        return "never reached in the worst case"
    if math.isinf(margin):
        return "no bound" if margin < 0 else ""
    if margin == 0:
        return "exactly at the limit"
    percent = in_percent(finding)
    amount = f"{show(100 * abs(margin), '1')} percentage points" if percent else show(abs(margin), limit["unit"])
    if margin > 0:
        return f"{amount} to spare"
    return f"{'short' if broken_side(finding) == 'at_least' else 'over'} by {amount}"


def badness(finding: Finding) -> float:
    """How far beyond its limit, 0 to 1: the distance over the sum of both sizes, so that each unit counts alike."""
    side, margin = broken_side(finding), finding.margin
    limit = (finding.limit or {}).get(side)
    if margin is None or limit is None or margin >= 0:
        return 0.0
    if math.isinf(margin) or math.isinf(limit):
        return 1.0
    measured = limit + margin if side == "at_least" else limit - margin
    return float(-margin / (abs(limit) + abs(measured)))


def subjects_text(findings: list[Finding], texts: Mapping[str, str], *, limit: int) -> str:
    """Nets or parts, the first few by name."""
    return names_text([item.net or parts_text(item.parts, texts) for item in findings], limit=limit)


def names_text(names: list[str], *, limit: int) -> str:
    """``C1, C2, C3 and 4 more``."""
    rest = len(names) - limit
    return ", ".join(names[:limit]) + (f" and {rest} more" if rest > 0 else "")
