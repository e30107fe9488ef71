"""Where each resistor and capacitor went: a table, and why those stand apart that are in no network."""

from collections import Counter
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span
from rcrules.reports._words import names_text

CLASSES: Final = {
    "judged": "judged",
    "undecided": "undecided",
    "unruled": "met no rule",
    "decoupling": "decoupling",
    "elsewhere": "elsewhere",
    "not_fitted": "not fitted",
    "unreadable": "value not understood",
}
"""Coverage classes in words."""
_IN_NETWORKS: Final = "in networks"
_KINDS: Final = ("capacitor", "resistor")
_SHOWN: Final = 6


def counts_as(row: Json) -> str:
    """Capacitor or resistor; a part of another kind by its reference."""
    kind = str(row["kind"])
    if kind.startswith(_KINDS):
        return kind.removesuffix("-array")
    return "capacitor" if str(row["ref"]).startswith("C") else "resistor"


def whereabouts(document: Document, *, verbose: bool) -> list[Line]:
    """A row a kind with its counts, then a line a reason with the references."""
    kinds = [kind for kind in _KINDS if any(counts_as(row) == kind for row in document.parts)]
    if not kinds:
        return []
    words = dict(CLASSES) | {"unruled": _IN_NETWORKS}
    classes = [name for name in words if any(row["coverage"] == name for row in document.parts)]
    table: list[list[Span]] = [["", "all", *(words[name] for name in classes)]]
    for kind in kinds:
        found = Counter(row["coverage"] for row in document.parts if counts_as(row) == kind)
        table.append([(f"{kind}s", "name"), str(found.total()), *(str(found[name]) for name in classes)])
    return aligned(table) + _reasons(document, words, verbose=verbose)


def _reasons(document: Document, words: dict[str, str], *, verbose: bool) -> list[Line]:
    """``elsewhere   9   at a diode: R1, R2, R3 and 6 more``, the most frequent first."""
    groups: dict[tuple[str, str], list[str]] = {}
    for row in document.parts:
        if row["coverage"] in ("elsewhere", "not_fitted", "unreadable"):
            told = f'"{row["text"]}"' if row["coverage"] == "unreadable" and row["text"] else row["reason"] or ""
            groups.setdefault((row["coverage"], told), []).append(row["ref"])
    ordered = sorted(groups.items(), key=lambda item: (list(words).index(item[0][0]), -len(item[1])))
    rows: list[list[Span]] = [
        [words[name], str(len(refs)), ": ".join(filter(None, (told, _names(refs, verbose=verbose))))]
        for (name, told), refs in ordered
    ]
    return [(), *aligned(rows)] if rows else []


def _names(refs: list[str], *, verbose: bool) -> str:
    return names_text(refs, limit=len(refs) if verbose else _SHOWN)
